//! Signing off on the real program: what is signed can be checked by others, and nothing can be changed unnoticed.

mod cell;
#[cfg(unix)]
#[expect(dead_code, reason = "other tests use other parts")]
#[path = "../pty/mod.rs"]
mod pty;
mod standing;
mod tampering;
mod voids;

use std::process::{Command, Stdio};

use cell::{Cell, assert_code, told};

#[test]
fn nothing_is_signed_before_everything_was_answered() {
    let cell = Cell::new();
    assert_code(&cell.run(&["sign", "lid-placing.toml", "--name", "Anna"]), 1, "was not confirmed");
    assert!(!cell.path("lid-placing.signoff.toml").exists());
    // The demonstration has a doubt, and findings that need a reason.
    let output = cell.run(&["sign", "housing-transfer.toml", "--name", "Anna"]);
    assert_code(&output, 1, "neither cleared nor accepted");
    assert!(told(&output).contains("a doubt was not looked into"));
    cell.write("answers.toml", &cell.answers("housing-transfer.toml"));
    let signed =
        cell.run(&["sign", "housing-transfer.toml", "--name", "Anna", "--reasons", "answers.toml", "--date", "2026-11-30"]);
    assert_code(&signed, 0, "seal");
    let record = cell.text("housing-transfer.signoff.toml");
    assert!(record.contains("seen on the cell") && record.contains("asks 154 %"), "{record}");
    // Words that are no reason are not taken.
    cell.write("answers.toml", &cell.answers("housing-transfer.toml").replace("seen on the cell", " - "));
    let refused = cell.run(&["sign", "housing-transfer.toml", "--name", "Bert", "--reasons", "answers.toml"]);
    assert_code(&refused, 2, "a reason needs words");
}

#[test]
fn a_record_is_the_same_wherever_it_is_made_and_stands() {
    let (one, other) = (Cell::new(), Cell::new());
    for cell in [&one, &other] {
        assert_code(&cell.sign(&["--name", "Anna"]), 0, "no signature: a name only");
        let verified = cell.verify(&[]);
        assert_code(&verified, 0, "the record stands: the same files, the same results");
        assert!(told(&verified).contains("the cell's copy was not compared"));
        assert!(!told(&verified).contains("MAY RUN"));
    }
    let record = "lid-placing.signoff.toml";
    assert_eq!(one.text(record), other.text(record));
    // A comment moves nothing but the bytes.
    one.write("lid-placing.toml", &format!("# read again\n{}", one.text("lid-placing.toml")));
    assert_code(&one.verify(&[]), 0, "layout or comments only");
}

#[test]
fn any_changed_byte_of_the_record_is_noticed() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    let record = cell.text("lid-placing.signoff.toml").into_bytes();
    for at in (0..record.len()).step_by(211) {
        let mut tampered = record.clone();
        tampered[at] = if tampered[at] == b'7' { b'8' } else { b'7' };
        std::fs::write(cell.path("lid-placing.signoff.toml"), &tampered).expect("written");
        let output = cell.verify(&[]);
        assert!(!output.status.success(), "byte {at}: {}", told(&output));
    }
}

#[test]
fn what_changed_is_told_segment_by_segment() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    let before = cell.text("lid-placing.toml");
    let changed = before.replacen("dwell", "dwell  ", 1);
    assert_ne!(changed, before);
    cell.write("lid-placing.toml", &changed);
    assert_code(&cell.verify(&[]), 0, "layout or comments only");
    let at = before.rfind("[[waypoint]]").expect("waypoints");
    let last = before[at..].replacen("arrive = \"joint\"", "arrive = \"joint\"\nshare = 31", 1);
    let changed_last = format!("{}{last}", &before[..at]);
    cell.write("lid-placing.toml", &changed_last);
    let output = cell.verify(&[]);
    assert_code(&output, 1, "content changed");
    assert!(told(&output).contains("segments stand as they were signed"), "{}", told(&output));
    // The arm counts as much.
    cell.write("lid-placing.toml", &before);
    let arm = cell.text("arms/four-axis-rrpr.toml");
    cell.write("arms/four-axis-rrpr.toml", &arm.replacen("rate", "# \nrate", 1));
    assert_code(&cell.verify(&[]), 0, "layout or comments only");
    let at = arm.find("mass = ").expect("a mass") + 7;
    cell.write("arms/four-axis-rrpr.toml", &format!("{}1{}", &arm[..at], &arm[at..]));
    assert_code(&cell.verify(&[]), 1, "content changed");
    cell.write("arms/four-axis-rrpr.toml", &arm);
    assert_code(&cell.verify(&[]), 0, "stands");
    // Signed anew after a change, the earlier record is kept under its seal, and what is unchanged keeps its date.
    cell.write("lid-placing.toml", &changed_last);
    let again = cell.sign(&["--name", "Anna"]);
    assert_code(&again, 0, "the earlier record is now");
    assert_code(&cell.verify(&[]), 0, "stands");
}

#[test]
fn renamed_and_linked_files_are_refused() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    std::fs::copy(cell.path("lid-placing.signoff.toml"), cell.path("other.signoff.toml")).expect("copied");
    assert_code(&cell.run(&["verify", "other.signoff.toml"]), 2, "renamed");
    #[cfg(unix)]
    {
        std::fs::rename(cell.path("lid-placing.toml"), cell.path("elsewhere.toml")).expect("moved");
        std::os::unix::fs::symlink(cell.path("elsewhere.toml"), cell.path("lid-placing.toml")).expect("linked");
        assert_code(&cell.verify(&[]), 2, "symbolic link");
        let cell = Cell::new();
        assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
        for (name, code) in [("arms/four-axis-rrpr.toml", 2), ("lid-placing.signoff.toml", 2)] {
            std::fs::rename(cell.path(name), cell.path("elsewhere.toml")).expect("moved");
            std::os::unix::fs::symlink(cell.path("elsewhere.toml"), cell.path(name)).expect("linked");
            assert_code(&cell.verify(&[]), code, "symbolic link");
            std::fs::rename(cell.path("elsewhere.toml"), cell.path(name)).expect("moved back");
        }
    }
}

#[test]
fn the_cells_points_are_compared() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    // The points as the program itself traces them.
    let trace = String::from_utf8(cell.run(&["trace", "lid-placing.toml", "--every", "10s"]).stdout).expect("UTF-8");
    let mut rows = trace.lines().map(|line| line.split(',').collect::<Vec<_>>());
    let head = rows.next().expect("a header");
    let column = |name: &str| head.iter().position(|other| *other == name).unwrap_or_else(|| panic!("{name}"));
    let first = rows.next().expect("a row");
    let name = cell.text("lid-placing.toml");
    let name = name.split("[[waypoint]]").nth(1).expect("one").split('"').nth(1).expect("a name").to_owned();
    let joints = ["J1_deg", "J2_deg", "J3_mm", "J4_deg"].map(|joint| first[column(joint)].parse::<f64>().expect("a number"));
    let table = |off: f64| {
        format!("waypoint,J1,J2,J3,J4\n\"{name}\",{:.4},{:.4},{:.4},{:.4}\n", joints[0] + off, joints[1], joints[2], joints[3])
    };
    cell.write("same.csv", &table(0.004));
    let output = cell.verify(&["--points", "same.csv"]);
    // One point of many: the others are missing, and that is told.
    assert_eq!(output.status.code(), Some(1), "{}", told(&output));
    assert!(!told(&output).contains(&format!("\"{name}\":")), "{}", told(&output));
    cell.write("other.csv", &table(0.02));
    let output = cell.verify(&["--points", "other.csv"]);
    assert_code(&output, 1, "the cell's copy differs");
    assert!(told(&output).contains(&name), "{}", told(&output));
    assert_code(&cell.verify(&["--load", "lid=9.5"]), 1, "weighs 9.500 kg in the cell");
    assert_code(&cell.verify(&["--points", "missing.csv"]), 2, "missing.csv");
}

#[test]
fn recipes_are_compared_by_what_changed() {
    let cell = Cell::new();
    let text = cell.text("housing-transfer.toml");
    cell.write(
        "slower.toml",
        &text.replacen(
            "speed  = 400\n\n[[waypoint]]\nname   = \"before shelf\"",
            "speed  = 200\n\n[[waypoint]]\nname   = \"before shelf\"",
            1,
        ),
    );
    assert_code(&cell.run(&["compare", "housing-transfer.toml", "housing-transfer.toml"]), 0, "nothing differs");
    let output = cell.run(&["compare", "housing-transfer.toml", "slower.toml"]);
    if cell.text("slower.toml") != text {
        assert_code(&output, 1, "400 mm/s -> 200 mm/s");
        assert!(told(&output).contains("12 segments are as they were"), "{}", told(&output));
    } else {
        panic!("the recipe has another layout now");
    }
}

#[test]
fn the_page_for_the_wall_fits() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna", "--note", "night shift"]), 0, "seal");
    let page = told(&cell.run(&["page", "lid-placing.signoff.toml"]));
    assert!(page.lines().count() <= 66 && page.lines().all(|line| line.chars().count() <= 80), "{page}");
    for said in ["seal ", "prepared by", "checked by", "in ink", "NOT checked", "J4", "no leave to run"] {
        assert!(page.contains(said), "{said}\n{page}");
    }
}

/// Whether `ssh-keygen` is there. CI says that it must be.
fn keygen() -> bool {
    let there = Command::new("ssh-keygen").arg("-V").stdin(Stdio::null()).output().is_ok();
    assert!(there || std::env::var_os("ELBOWROOM_NEEDS_SSH_KEYGEN").is_none(), "ssh-keygen is missing");
    there
}

fn make_key(cell: &Cell, kind: &[&str], name: &str) {
    let made = Command::new("ssh-keygen")
        .args(["-q", "-N", "", "-C", "anna@plant.example", "-f"])
        .arg(cell.path(name))
        .args(kind)
        .output();
    assert!(made.expect("runs").status.success());
}

fn signers(cell: &Cell, key: &str) -> String {
    let public = cell.text(&format!("{key}.pub"));
    let words: Vec<&str> = public.split_whitespace().collect();
    format!("anna@plant.example namespaces=\"elbowroom-signoff\" {} {}\n", words[0], words[1])
}

#[test]
fn signatures_are_those_of_ssh_keygen() {
    if !keygen() {
        return;
    }
    for kind in [&["-t", "ed25519"][..], &["-t", "ecdsa", "-b", "256"], &["-t", "rsa", "-b", "3072"]] {
        let cell = Cell::new();
        make_key(&cell, kind, "key");
        assert_code(&cell.sign(&["--name", "Anna", "--key", "key"]), 0, "signature:");
        cell.write("signers", &signers(&cell, "key"));
        assert_code(&cell.verify(&["--signers", "signers"]), 0, "signature good, by the key of anna@plant.example");
        // One person under the record: what was signed is its very bytes. OpenSSH's own tool must take it (PROTOCOL.sshsig).
        let record = std::fs::File::open(cell.path("lid-placing.signoff.toml")).expect("there");
        let taken = Command::new("ssh-keygen")
            .args(["-Y", "verify", "-f", "signers", "-I", "anna@plant.example", "-n", "elbowroom-signoff", "-s"])
            .arg("lid-placing.signoff.toml.1.sig")
            .current_dir(cell.0.path())
            .stdin(record)
            .output()
            .expect("runs");
        assert!(taken.status.success(), "{kind:?}: {}", told(&taken));
    }
}

#[test]
fn no_trick_with_signatures_goes_through() {
    if !keygen() {
        return;
    }
    let cell = Cell::new();
    make_key(&cell, &["-t", "ed25519"], "key");
    make_key(&cell, &["-t", "ed25519"], "other");
    cell.write("signers", &signers(&cell, "key"));
    cell.write("strangers", &signers(&cell, "other"));
    assert_code(&cell.sign(&["--name", "Anna", "--key", "key"]), 0, "signature:");
    let (record, place) = (cell.text("lid-placing.signoff.toml"), "lid-placing.signoff.toml.1.sig");
    let signature = cell.text(place);
    // The same name and comment, another key.
    assert_code(&cell.verify(&["--signers", "strangers"]), 1, "signer unknown");
    // Stripped.
    std::fs::remove_file(cell.path(place)).expect("removed");
    assert_code(&cell.verify(&["--signers", "signers"]), 1, "signature missing");
    // By another key, and for another purpose.
    for (key, namespace, says) in
        [("other", "elbowroom-signoff", "signature bad: made by"), ("key", "file", "was made for \"file\"")]
    {
        cell.write("part", &record);
        let made =
            Command::new("ssh-keygen").args(["-Y", "sign", "-n", namespace, "-f", key, "part"]).current_dir(cell.0.path()).output();
        assert!(made.expect("runs").status.success());
        std::fs::rename(cell.path("part.sig"), cell.path(place)).expect("moved");
        assert_code(&cell.verify(&["--signers", "signers"]), 1, says);
    }
    // A record without the key's name, so that no signature is missed.
    cell.write(place, &signature);
    let line = record.lines().find(|line| line.contains("SHA256:")).expect("the key").to_owned();
    cell.write("lid-placing.signoff.toml", &record.replace(&format!("{line}\n"), ""));
    assert!(!cell.verify(&["--signers", "signers"]).status.success());
    // A name that anybody can have put below the signature.
    cell.write("lid-placing.signoff.toml", &record);
    assert_code(&cell.run(&["sign", "lid-placing.toml", "--name", "The head of the plant", "--role", "checked"]), 0, "a name only");
    assert_code(&cell.verify(&["--signers", "signers"]), 1, "no signature covers the last name");
    // A second name leaves the first signature good.
    cell.write("lid-placing.signoff.toml", &record);
    let second =
        cell.run(&["sign", "lid-placing.toml", "--name", "Bert", "--role", "checked", "--date", "2026-12-01", "--key", "other"]);
    assert_code(&second, 0, "checked by Bert");
    let both = format!("{}{}", signers(&cell, "key"), signers(&cell, "other").replace("anna", "bert"));
    cell.write("signers", &both);
    let verified = cell.verify(&["--signers", "signers"]);
    assert_code(&verified, 0, "by the key of anna@plant.example");
    assert!(told(&verified).contains("by the key of bert@plant.example"), "{}", told(&verified));
}

/// A locked key asks for its passphrase on the terminal and does not show it; a wrong one leaves nothing behind.
#[cfg(unix)]
#[test]
fn the_passphrase_of_a_locked_key_is_asked_for_and_not_shown() {
    if !keygen() {
        return;
    }
    let cell = Cell::new();
    let made = Command::new("ssh-keygen").args(["-q", "-t", "ed25519", "-N", "hidden words", "-f"]).arg(cell.path("key")).output();
    assert!(made.expect("runs").status.success());
    cell.write("answers.toml", &cell.answers("lid-placing.toml"));
    let sign = |typed: &str, says: &str| {
        let mut command = portable_pty::CommandBuilder::new(env!("CARGO_BIN_EXE_elbowroom"));
        command.args(["sign", "lid-placing.toml", "--reasons", "answers.toml", "--name", "Anna", "--key", "key"]);
        command.cwd(cell.0.path());
        let mut running = pty::Running::sized(command, [100, 24]);
        running.until("Passphrase of key:");
        running.press(&format!("{typed}\r"));
        running.until(says);
        assert!(!running.text().contains(typed), "{}", running.text());
        running.end();
    };
    sign("other words", "does not unlock the key");
    assert!(!cell.path("lid-placing.signoff.toml").exists());
    sign("hidden words", "signature:");
    cell.write("signers", &signers(&cell, "key"));
    assert_code(&cell.verify(&["--signers", "signers"]), 0, "signature good");
}

/// On the screen the record is signed by the key in one go: one name under it, with its signature. The passphrase is not shown.
#[cfg(unix)]
#[test]
fn a_locked_key_signs_from_the_screen() {
    if !keygen() {
        return;
    }
    let cell = Cell::new();
    let made = Command::new("ssh-keygen").args(["-q", "-t", "ed25519", "-N", "hidden words", "-f"]).arg(cell.path("key")).output();
    assert!(made.expect("runs").status.success());
    let mut command = portable_pty::CommandBuilder::new(env!("CARGO_BIN_EXE_elbowroom"));
    command.arg("lid-placing.toml");
    command.cwd(cell.0.path());
    command.env("XDG_STATE_HOME", cell.path("state"));
    command.env("XDG_CONFIG_HOME", cell.path("config"));
    let mut running = pty::Running::sized(command, [100, 40]);
    running.until("READY TO SIGN");
    running.press("d");
    running.until("to answer");
    let open = running.text().matches("[ ]").count();
    for _ in 0..open {
        running.press("\r\x1b[B");
    }
    running.until("first run: clear up to 100 %");
    running.press("\x1b[B\r");
    running.until("Your name:");
    running.press("Anna\r");
    running.until("name: Anna");
    running.press("\x1b[B\r");
    running.until("Key file");
    running.press("no-such-key\r");
    running.until("no-such-key");
    running.until("key: none");
    running.press("\r");
    running.until("Key file");
    running.press("key\r");
    running.until("Passphrase of the key");
    running.press("other words\r");
    running.until("does not unlock");
    running.press("\r");
    running.until("Key file");
    running.press("key\r");
    running.until("Passphrase of the key");
    running.press("hidden words");
    assert!(!running.text().contains("hidden words"), "{}", running.text());
    running.press("\r");
    running.until("key: SHA256:");
    running.press("\x1b[F\r");
    running.until("write the record");
    running.press("\x1b[B\r");
    running.until("seal");
    running.press("q");
    assert!(running.end().success());
    cell.write("signers", &signers(&cell, "key"));
    assert_code(&cell.verify(&["--signers", "signers"]), 0, "signature good");
    assert_eq!(cell.text("lid-placing.signoff.toml").matches("[[person]]").count(), 1);
}

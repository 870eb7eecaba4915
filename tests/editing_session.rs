//! Whole sessions of editing on the real program: what a person made is never lost.
#![cfg(unix)]

#[expect(dead_code, reason = "other tests use other parts")]
mod pty;

use std::path::{Path, PathBuf};

use portable_pty::CommandBuilder;
use pty::Running;

/// A folder with a copy of the demonstration's files.
fn cell() -> tempfile::TempDir {
    let folder = tempfile::tempdir().expect("a folder");
    let from = Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes");
    std::fs::create_dir(folder.path().join("arms")).expect("a folder");
    for name in ["housing-transfer.toml", "arms/six-axis-12kg.toml"] {
        std::fs::copy(from.join(name), folder.path().join(name)).expect("copied");
    }
    folder
}

fn recipe(folder: &tempfile::TempDir) -> PathBuf {
    folder.path().join("housing-transfer.toml")
}

fn text(folder: &tempfile::TempDir) -> String {
    std::fs::read_to_string(recipe(folder)).expect("there")
}

fn open(folder: &tempfile::TempDir, size: [u16; 2]) -> Running {
    let mut command = CommandBuilder::new(env!("CARGO_BIN_EXE_elbowroom"));
    command.arg(recipe(folder));
    command.env("XDG_STATE_HOME", folder.path().join("state"));
    command.env("XDG_CONFIG_HOME", folder.path().join("config"));
    let running = Running::sized(command, size);
    running.until("NOT READY");
    running
}

/// Takes 210 mm/s for the line that the screen opens on.
fn slow_down(running: &mut Running) {
    running.press("e\x1b[B\r\x7f\x7f\x7f");
    running.until("take it");
    running.press("210");
    running.until("then:");
    running.press("\r");
    running.until("u undoes it");
    // Backspace leaves as Escape does, and is never taken for the beginning of another key.
    running.press("\x7f");
    running.until("At the cursor");
    running.until("1 tight, 12 clear");
}

#[test]
fn edits_are_made_undone_saved_and_found_again() {
    for size in [[80, 24], [120, 40]] {
        let folder = cell();
        let before = text(&folder);
        let mut running = open(&folder, size);
        slow_down(&mut running);
        running.until("not saved");
        running.press("u");
        running.until("1 over, 1 tight, 11 clear");
        running.press("r");
        running.until("1 tight, 12 clear");
        running.press("j");
        running.until("JOG of the model");
        running.press("\x1b[C\r");
        running.until("insert a waypoint after it");
        running.press("\r");
        running.until("Name of the new waypoint");
        running.press("\r");
        running.until("inserted");
        running.press("j");
        running.until("13 clear");
        running.press("s");
        running.until("saved to");
        assert_eq!(std::fs::read_to_string(folder.path().join("housing-transfer.toml~")).expect("a backup"), before);
        let after = text(&folder);
        assert!(after.contains("speed  = 210") && after.contains("\"after window out\""), "{after}");
        let comments = |text: &str| text.lines().filter(|line| line.contains('#')).map(str::to_owned).collect::<Vec<_>>();
        assert_eq!(comments(&after), comments(&before));
        running.press("q");
        assert!(running.end().success());
        let mut again = open(&folder, size);
        again.until("13 clear");
        again.press("q");
        assert!(again.end().success());
        assert_eq!(text(&folder), after);
        let left: Vec<_> =
            std::fs::read_dir(folder.path()).expect("listed").map(|entry| entry.expect("entry").file_name()).collect();
        assert!(!left.iter().any(|name| name.to_string_lossy().starts_with('.')), "{left:?}");
    }
}

#[test]
fn a_remedy_is_made_from_the_list() {
    let folder = cell();
    let mut running = open(&folder, [80, 24]);
    running.press("o");
    running.until("slower: 400 mm/s to 233 mm/s");
    running.until("Tried without success");
    running.press("\r");
    running.until("1 tight, 12 clear");
    running.press("q");
    running.until("not saved");
    running.until("discard the edits and quit");
    running.press("\x1b[B\x1b[B\r");
    assert!(running.end().success());
}

#[test]
fn what_was_not_saved_is_offered_after_a_kill() {
    let folder = cell();
    let before = text(&folder);
    let mut running = open(&folder, [80, 24]);
    slow_down(&mut running);
    running.signal("KILL");
    while !running.has_ended() {
        std::thread::sleep(std::time::Duration::from_millis(10));
    }
    assert_eq!(text(&folder), before);
    let mut again = open(&folder, [80, 24]);
    again.until("never saved");
    again.press("\r");
    again.until("taken up again");
    again.until("1 tight, 12 clear");
    again.press("q");
    again.until("save and quit");
    again.press("\r");
    assert!(again.end().success());
    assert!(text(&folder).contains("speed  = 210"));
    let mut third = open(&folder, [80, 24]);
    third.until("1 tight, 12 clear");
    third.press("q");
    assert!(third.end().success());
}

/// A kill between the file and the notes against a crash: the notes tell of edits that stand in the file.
#[test]
fn what_was_saved_just_before_a_kill_is_not_offered_again() {
    let folder = cell();
    let mut running = open(&folder, [80, 24]);
    slow_down(&mut running);
    let notes = folder.path().join(".housing-transfer.toml.journal");
    let noted = std::fs::read(&notes).expect("notes");
    running.press("s");
    running.until("saved to");
    assert!(!notes.exists());
    running.signal("KILL");
    while !running.has_ended() {
        std::thread::sleep(std::time::Duration::from_millis(10));
    }
    std::fs::write(&notes, &noted).expect("written");
    let saved = text(&folder);
    let mut again = open(&folder, [80, 24]);
    again.until("1 tight, 12 clear");
    assert!(!again.text().contains("never saved"), "{}", again.text());
    again.press("q");
    assert!(again.end().success());
    assert!(!notes.exists());
    // Where the file holds anything else they are offered.
    std::fs::write(&notes, &noted).expect("written");
    std::fs::write(recipe(&folder), saved.replace("# ", "#  ")).expect("written");
    let mut third = open(&folder, [80, 24]);
    third.until("never saved");
    third.press("\x1b[B\r");
    third.press("q");
    assert!(third.end().success());
    assert_eq!(std::fs::read(&notes).expect("kept"), noted);
}

#[test]
fn a_hang_up_keeps_the_edits_for_the_next_start() {
    let folder = cell();
    let mut running = open(&folder, [80, 24]);
    slow_down(&mut running);
    running.signal("HUP");
    assert!(!running.end().success());
    let mut again = open(&folder, [80, 24]);
    again.until("never saved");
    // Leave them for later, and they are still there.
    again.press("\x1b[B\r");
    again.press("q");
    assert!(again.end().success());
    let mut third = open(&folder, [80, 24]);
    third.until("never saved");
    third.press("\x1b[B\x1b[B\r");
    third.press("q");
    assert!(third.end().success());
    let mut fourth = open(&folder, [80, 24]);
    fourth.press("w");
    fourth.until("10.63 s");
    assert!(!fourth.text().contains("never saved"));
    fourth.press("q");
    assert!(fourth.end().success());
}

#[test]
fn a_second_person_is_told_who_has_it_open() {
    let folder = cell();
    let mut first = open(&folder, [80, 24]);
    let mut second = open(&folder, [80, 24]);
    second.until("has this recipe open");
    second.press("\r");
    second.press("e");
    second.until("look only");
    second.press("q");
    assert!(second.end().success());
    first.press("q");
    assert!(first.end().success());
    let mut third = open(&folder, [80, 24]);
    assert!(!third.text().contains("has this recipe open"));
    third.press("q");
    assert!(third.end().success());
}

#[test]
fn a_file_that_was_changed_meanwhile_is_not_overwritten_unasked() {
    let folder = cell();
    let mut running = open(&folder, [80, 24]);
    slow_down(&mut running);
    let theirs = text(&folder).replace("speed  = 100", "speed  = 90");
    std::fs::write(recipe(&folder), &theirs).expect("written");
    running.press("s");
    running.until("Changed on the disk meanwhile");
    running.press("\r");
    assert_eq!(text(&folder), theirs);
    running.press("s");
    running.until("Changed on the disk meanwhile");
    running.press("\x1b[B\r");
    running.until("100 mm/s -> 90 mm/s");
    running.press("\x7f");
    running.until("At the cursor");
    running.press("s");
    running.until("save mine over it");
    running.press("\x1b[B\x1b[B\x1b[B\r");
    running.until("saved to");
    assert!(text(&folder).contains("speed  = 210"));
    assert_eq!(std::fs::read_to_string(folder.path().join("housing-transfer.toml~")).expect("a backup"), theirs);
    running.press("q");
    assert!(running.end().success());
}

/// Presses Down often enough to come to a row of the menu, and takes it.
fn choose(running: &mut Running, downs: usize) {
    running.press(&("\x1b[B".repeat(downs) + "\r"));
}

#[test]
fn comments_of_a_deleted_waypoint_are_told_and_come_back_by_undo_after_a_save() {
    for size in [[80, 24], [120, 40]] {
        let folder = cell();
        let before = text(&folder)
            .replace("[[waypoint]]\nname   = \"window out\"", "# Mind the frame.\n[[waypoint]]\nname   = \"window out\"");
        std::fs::write(recipe(&folder), &before).expect("written");
        let mut running = open(&folder, size);
        // The last in the menu of stretches deletes.
        running.press("x\x1b[A\r");
        running.until("deleted");
        running.press("s");
        running.until("went with what");
        assert!(!text(&folder).contains("Mind the frame"));
        running.press("u");
        running.until("undone");
        running.press("s");
        running.until("saved to");
        assert_eq!(text(&folder), before);
        running.press("q");
        assert!(running.end().success());
    }
}

#[test]
fn a_target_that_cannot_be_written_is_told_and_the_edits_are_kept() {
    use std::os::unix::fs::PermissionsExt;
    for size in [[80, 24], [120, 40]] {
        let folder = cell();
        let before = text(&folder);
        let mut running = open(&folder, size);
        slow_down(&mut running);
        let allow = |mode| std::fs::set_permissions(recipe(&folder), std::fs::Permissions::from_mode(mode)).expect("set");
        allow(0o444);
        running.press("s");
        running.until("not saved, the edits are kept");
        running.wait_for("the reason, whole", |running| running.text().replace('\n', " ").contains("marked as read-only"));
        assert_eq!(text(&folder), before);
        allow(0o644);
        // The folder is gone, and comes back.
        let (here, away) = (folder.path().join("housing-transfer.toml"), tempfile::tempdir().expect("a folder"));
        let elsewhere = away.path().join("moved");
        std::fs::rename(folder.path(), &elsewhere).expect("moved");
        running.press("s");
        running.wait_for("the folder, whole", |running| running.text().replace('\n', " ").contains("is not there any more"));
        assert!(!here.exists());
        std::fs::rename(&elsewhere, folder.path()).expect("back");
        running.press("s");
        running.until("saved to");
        assert!(text(&folder).contains("speed  = 210"));
        running.press("q");
        assert!(running.end().success());
    }
}

/// A full disk by a limit on the size of files, set before the program starts.
#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_is_told_and_the_edits_are_kept() {
    for size in [[80, 24], [120, 40]] {
        let folder = cell();
        let before = text(&folder);
        let mut command = CommandBuilder::new("bash");
        command.args(["-c", "trap '' XFSZ; ulimit -f 1; exec \"$0\" \"$1\"", env!("CARGO_BIN_EXE_elbowroom")]);
        command.arg(recipe(&folder));
        command.env("XDG_STATE_HOME", folder.path().join("state"));
        command.env("XDG_CONFIG_HOME", folder.path().join("config"));
        let mut running = Running::sized(command, size);
        running.until("NOT READY");
        running.press("e\x1b[B\r\x7f\x7f\x7f");
        running.until("take it");
        running.press("210\r");
        running.until("edits can't be noted down");
        running.press("\x7fs");
        running.wait_for("the reason, whole", |running| running.text().replace('\n', " ").contains("no room left on the disk"));
        assert!(running.text().contains("not saved, the edits are kept"), "{}", running.text());
        assert_eq!(text(&folder), before);
        assert!(!folder.path().join("housing-transfer.toml~").exists());
        running.press("q");
        running.until("discard the edits and quit");
        choose(&mut running, 2);
        assert!(running.end().success());
    }
}

/// Signs off on the screen, datum by datum; others can check the record on the command line.
#[test]
fn a_program_is_signed_off_on_the_screen() {
    let folder = cell();
    let from = Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes");
    for name in ["lid-placing.toml", "arms/four-axis-rrpr.toml"] {
        std::fs::copy(from.join(name), folder.path().join(name)).expect("copied");
    }
    let mut command = CommandBuilder::new(env!("CARGO_BIN_EXE_elbowroom"));
    command.arg(folder.path().join("lid-placing.toml"));
    command.env("XDG_STATE_HOME", folder.path().join("state"));
    command.env("XDG_CONFIG_HOME", folder.path().join("config"));
    let mut running = Running::sized(command, [100, 40]);
    running.until("READY TO SIGN");
    running.press("d");
    running.until("to answer");
    // Nothing is signed while something is open.
    running.press("\x1b[F\r");
    running.until("not signed:");
    running.press("\x1b[H");
    let open = running.text().matches("[ ]").count();
    assert!(open > 5, "{}", running.text());
    for _ in 0..open {
        running.press("\r\x1b[B");
    }
    // Behind the data stands the plan of the first run, then the name.
    running.until("first run: clear up to 100 %");
    running.press("\x1b[B\r");
    running.until("Your name:");
    running.press("Anna\r");
    running.until("name: Anna");
    running.until("nothing stands in the way");
    running.press("\x1b[F\r");
    running.until("write the record");
    running.press("\x1b[B\r");
    running.until("seal");
    // What was changed since is told on the screen too.
    running.press("e");
    running.until("Edit waypoint");
    running.press("\x1b[B\r\x7f\x7f\x7f");
    running.until("take it");
    running.press("33\r");
    running.until("u undoes it");
    running.press("\x7f");
    running.until("At the cursor");
    running.press("u");
    running.until("undone");
    running.press("\r");
    running.until("changed since the record");
    running.press("\x7f");
    running.press("q");
    assert!(running.end().success());
    let verified = std::process::Command::new(env!("CARGO_BIN_EXE_elbowroom"))
        .arg("verify")
        .arg(folder.path().join("lid-placing.signoff.toml"))
        .output()
        .expect("runs");
    assert_eq!(verified.status.code(), Some(0), "{verified:?}");
    let record = std::fs::read_to_string(folder.path().join("lid-placing.signoff.toml")).expect("a record");
    assert!(record.contains("Anna"));
}

/// A finding is accepted with a reason in words, and a doubt looked into, before the demonstration can be signed.
#[test]
fn findings_are_accepted_with_reasons_on_the_screen() {
    let folder = cell();
    let mut running = open(&folder, [100, 40]);
    running.press("d");
    running.until("doubt:");
    running.press("\r");
    running.until("Your name:");
    running.press("Bert\r");
    running.until("name: Bert");
    running.press("\r");
    running.until("What you found:");
    running.press("noted with another tool\r");
    running.until("[x] doubt");
    running.press("\x1b[B\r");
    running.until("accept it with a reason");
    running.press("\r");
    running.until("Accepted because:");
    // Words that are none are not taken.
    running.press("-\r");
    running.until("a reason needs words");
    running.press("\r");
    running.until("accept it with a reason");
    running.press("\r");
    running.until("Accepted because:");
    running.press("runs at 50 percent only\r");
    running.until("Accepted by Bert");
    // An edit gives the answers up: they belong to what was shown.
    running.press("\x7f");
    running.until("At the cursor");
    slow_down(&mut running);
    running.press("d");
    running.until("save first");
    running.press("q");
    running.until("discard the edits and quit");
    running.press("\x1b[B\x1b[B\r");
    assert!(running.end().success());
}

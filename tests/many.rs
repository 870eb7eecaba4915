//! Whole folders at once: what is found below them, what is told of each, and what is left out because nothing changed.

#[expect(dead_code, reason = "other tests use other parts")]
mod pty;

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output};

use elbowroom::files::{earlier_record, recipes_below, record_text};
use serde_json::Value;

fn check(arguments: &[&str], folder: &Path) -> Output {
    Command::new(env!("CARGO_BIN_EXE_elbowroom"))
        .arg("check")
        .args(arguments)
        .current_dir(folder)
        .output()
        .expect("the program starts")
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).expect("it prints UTF-8")
}

fn put(folder: &Path, name: &str, text: &str) -> PathBuf {
    let path = folder.join(name);
    fs::create_dir_all(path.parent().expect("a folder")).expect("made");
    fs::write(&path, text).expect("written");
    path
}

fn arm(folder: &Path) {
    let text = fs::read_to_string(concat!(env!("CARGO_MANIFEST_DIR"), "/recipes/arms/four-axis-rrpr.toml")).expect("read");
    put(folder, "arms/four.toml", &text);
}

/// A recipe that turns one joint to an angle: 30° is clear, 129° is too near to the end of its range, at 300° far beyond it.
fn recipe(name: &str, end: f64, arm: &str) -> String {
    format!(
        "elbowroom-recipe = 1\nname = \"{name}\"\narm = \"{arm}\"\n\n[[waypoint]]\nname = \"one\"\njoints = [0, 70, 40, 0]\n\n\
         [[waypoint]]\nname = \"two\"\njoints = [{end}, 70, 40, 0]\narrive = \"joint\"\nshare = 50\n\n\
         [[tool]]\nname = \"grip\"\ntcp = {{ xyz = [0, 0, 100] }}\nmass = 0.5\ncom = [0, 0, 50]\n"
    )
}

fn is_root() -> bool {
    cfg!(unix) && fs::metadata("/proc/self").is_ok_and(|own| std::os::unix::fs::MetadataExt::uid(&own) == 0)
}

/// A plant of 300 invented recipes in folders of folders; every seventh is not clear, every thirteenth is broken in one of three
/// ways or far out of range.
fn plant(folder: &Path) -> [usize; 3] {
    arm(folder);
    let mut counts = [0; 3];
    for index in 0..300 {
        let name = format!("hall {}/cell-{:02}/part-{index:03}.toml", index % 3, index % 17);
        let (end, code) = if index % 7 == 0 { (129.0, 1) } else { (30.0, 0) };
        let whole = recipe(&format!("Part {index}"), end, "../../arms/four.toml");
        let (told, code) = match index % 52 {
            13 => (whole.replace("joints = [0, 70, 40, 0]", "joints = [0, 70"), 2),
            26 => (whole.replace("four.toml", "none.toml"), 2),
            39 => (whole.replace("share", "shaer"), 2),
            0 if index > 0 => (recipe("Far", 300.0, "../../arms/four.toml"), 1),
            _ => (whole, code),
        };
        put(folder, &name, &told);
        counts[code] += 1;
    }
    // What is no recipe: other files of ours, of others, hidden ones, backups.
    put(folder, "hall 0/Cargo.toml", "[package]\nname = \"x\"\n");
    put(folder, "hall 0/cell-00/part-000.signoff.toml", "elbowroom-signoff = 1\n");
    put(folder, "hall 0/cell-00/part-000.toml~", &recipe("Old", 30.0, "../../arms/four.toml"));
    put(folder, ".hidden/part.toml", &recipe("Hidden", 30.0, "../arms/four.toml"));
    counts
}

#[test]
fn a_folder_is_judged_a_line_each_and_the_worst_counts() {
    let folder = tempfile::tempdir().expect("a folder");
    let [clear, not_clear, not_judged] = plant(folder.path());
    assert!(clear > 200 && not_clear > 20 && not_judged > 15);
    let output = check(&["."], folder.path());
    let told = text(&output.stdout);
    let lines: Vec<&str> = told.lines().collect();
    assert_eq!(lines.len(), 300);
    let count = |what: &str| lines.iter().filter(|line| line.contains(what)).count();
    assert_eq!([count(": READY TO SIGN: "), count(": NOT READY: "), count(": NOT JUDGED: ")], [clear, not_clear, not_judged]);
    assert_eq!(text(&output.stderr), format!("{clear} clear, {not_clear} not clear, {not_judged} not judged\n"));
    assert_eq!(output.status.code(), Some(2));
    let paths: Vec<&str> = lines.iter().map(|line| line.split(": ").next().expect("a path")).collect();
    let mut sorted = paths.clone();
    sorted.sort_unstable();
    assert_eq!(paths, sorted);
    assert_eq!(told, text(&check(&["."], folder.path()).stdout), "the same in the same order");
    assert_eq!(text(&check(&["--list", "."], folder.path()).stdout).lines().collect::<Vec<_>>(), paths);
    // JSON: one object a line, the same verdicts.
    let json: Vec<Value> = text(&check(&["--json", "."], folder.path()).stdout)
        .lines()
        .map(|line| serde_json::from_str(line).expect("an object a line"))
        .collect();
    assert_eq!(json.iter().map(|one| one["recipe_file"].as_str().expect("a path")).collect::<Vec<_>>(), paths);
    let bad: Vec<&Value> = json.iter().filter(|one| one["format"] == "elbowroom-not-judged/1").collect();
    assert_eq!(bad.len(), not_judged);
    assert!(bad.iter().all(|one| one["complaints"][0]["says"].as_str().is_some_and(|says| !says.is_empty())));
    assert_eq!(json.iter().filter(|one| one["verdict"] == "clear").count(), clear);
}

#[test]
fn codes_are_those_of_the_worst_and_an_empty_folder_is_no_good_one() {
    let folder = tempfile::tempdir().expect("a folder");
    arm(folder.path());
    let code = |folder: &Path| check(&["."], folder).status.code();
    let output = check(&["."], folder.path());
    assert_eq!((output.status.code(), text(&output.stdout)), (Some(2), String::new()));
    assert!(text(&output.stderr).contains("no recipe was found"));
    put(folder.path(), "good.toml", &recipe("Good", 30.0, "arms/four.toml"));
    assert_eq!(code(folder.path()), Some(0));
    put(folder.path(), "tight.toml", &recipe("Tight", 129.0, "arms/four.toml"));
    assert_eq!(code(folder.path()), Some(1));
    put(folder.path(), "slip.toml", "elbowroom-recipie = 1\n[[waypoint]]\n");
    assert_eq!(code(folder.path()), Some(2));
}

#[cfg(unix)]
#[test]
fn links_lead_in_no_circle_and_every_recipe_is_taken_once_where_it_is() {
    use std::os::unix::fs::symlink;
    let folder = tempfile::tempdir().expect("a folder");
    let outside = tempfile::tempdir().expect("another");
    arm(outside.path());
    arm(folder.path());
    put(folder.path(), "z/real.toml", &recipe("Real", 30.0, "../arms/four.toml"));
    put(outside.path(), "away/far.toml", &recipe("Far", 30.0, "../arms/four.toml"));
    symlink("..", folder.path().join("z/up")).expect("linked");
    symlink(".", folder.path().join("a-self")).expect("linked");
    symlink("z/real.toml", folder.path().join("a-link.toml")).expect("linked");
    symlink(outside.path().join("away"), folder.path().join("b-away")).expect("linked");
    symlink(outside.path().join("away"), folder.path().join("c-away")).expect("linked");
    let found = recipes_below(folder.path());
    let names: BTreeSet<PathBuf> =
        found.recipes.iter().map(|path| path.strip_prefix(folder.path()).expect("below").to_owned()).collect();
    assert_eq!(names, [PathBuf::from("b-away/far.toml"), PathBuf::from("z/real.toml")].into());
    assert_eq!(found.recipes.len(), 2);
    assert!(found.unread.is_empty(), "{:?}", found.unread);
    assert_eq!(check(&["."], folder.path()).status.code(), Some(0));
    // A link to nothing may have been a recipe.
    symlink("gone.toml", folder.path().join("dangling.toml")).expect("linked");
    let output = check(&["."], folder.path());
    assert_eq!(output.status.code(), Some(2));
    assert!(text(&output.stdout).contains("dangling.toml: NOT JUDGED"), "{output:?}");
}

/// Root may read everything, so that it becomes nobody for this.
#[cfg(target_os = "linux")]
#[test]
fn what_may_not_be_read_is_told_and_makes_nothing_pass() {
    use std::os::unix::fs::PermissionsExt;
    let folder = tempfile::Builder::new().permissions(fs::Permissions::from_mode(0o755)).tempdir().expect("a folder");
    arm(folder.path());
    put(folder.path(), "good.toml", &recipe("Good", 30.0, "arms/four.toml"));
    let secret = put(folder.path(), "secret.toml", &recipe("Secret", 30.0, "arms/four.toml"));
    put(folder.path(), "closed/in.toml", &recipe("In", 30.0, "../arms/four.toml"));
    let program = folder.path().join("elbowroom");
    fs::copy(env!("CARGO_BIN_EXE_elbowroom"), &program).expect("copied");
    let forbid = |path: &Path, mode| fs::set_permissions(path, fs::Permissions::from_mode(mode)).expect("set");
    forbid(&secret, 0o000);
    forbid(&folder.path().join("closed"), 0o000);
    let output = {
        use std::os::unix::process::CommandExt;
        let mut command = Command::new(&program);
        command.args(["check", "."]).current_dir(folder.path());
        if is_root() {
            command.uid(65_534).gid(65_534);
        }
        command.output().expect("it starts")
    };
    forbid(&folder.path().join("closed"), 0o755);
    let told = text(&output.stdout);
    assert_eq!(output.status.code(), Some(2), "{output:?}");
    assert!(told.contains("./good.toml: Good: READY TO SIGN"), "{told}");
    assert!(told.contains("./secret.toml: NOT JUDGED: the file can't be read: "), "{told}");
    assert!(told.contains("./closed: NOT JUDGED: the folder can't be listed: "), "{told}");
    assert!(text(&output.stderr).ends_with("1 clear, 0 not clear, 2 not judged\n"), "{output:?}");
}

/// A file that stays open keeps the bar on the screen until it is written to.
#[cfg(unix)]
#[test]
fn a_bar_tells_how_far_it_is_on_a_terminal_and_leaves_nothing_behind() {
    let folder = tempfile::tempdir().expect("a folder");
    arm(folder.path());
    put(folder.path(), "good.toml", &recipe("Good", 30.0, "arms/four.toml"));
    assert!(Command::new("mkfifo").arg(folder.path().join("slow.toml")).status().expect("mkfifo").success());
    let mut command = portable_pty::CommandBuilder::new(env!("CARGO_BIN_EXE_elbowroom"));
    command.args(["check", "--quiet", "good.toml", "slow.toml", "good.toml"]);
    command.cwd(folder.path());
    let running = pty::Running::start(command);
    running.until("Good: READY TO SIGN");
    running.until(" of 3");
    assert!(running.text().contains("[##"), "{}", running.text());
    fs::write(folder.path().join("slow.toml"), recipe("Slow", 30.0, "arms/four.toml")).expect("written");
    running.until("Slow: READY TO SIGN");
    let screen = std::sync::Arc::clone(&running.screen);
    assert!(running.end().success());
    let left = screen.lock().expect("lock").screen().contents();
    assert_eq!(left.lines().filter(|line| line.starts_with("Good: READY") || line.starts_with("Slow: READY")).count(), 3, "{left}");
    assert!(!left.contains(" of 3"), "{left}");
}

fn sign(folder: &Path, recipe: &str) {
    let program = || Command::new(env!("CARGO_BIN_EXE_elbowroom"));
    let template = program().args(["sign", recipe, "--template"]).current_dir(folder).output().expect("starts");
    let answers =
        text(&template.stdout).replace("# [[confirm]]", "[[confirm]]").replace("# of =", "of =").replace("# value =", "value =");
    put(folder, "answers", &answers);
    let signed = program()
        .args(["sign", recipe, "--name", "A. Weber", "--date", "2026-11-30", "--reasons", "answers"])
        .current_dir(folder)
        .output()
        .expect("starts");
    assert_eq!(signed.status.code(), Some(0), "{signed:?}\n{answers}");
}

#[test]
fn only_what_changed_since_its_record_is_judged_again() {
    let folder = tempfile::tempdir().expect("a folder");
    let folder = folder.path();
    arm(folder);
    let from = Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes");
    let lid =
        fs::read_to_string(from.join("lid-placing.toml")).expect("read").replace("arms/four-axis-rrpr.toml", "arms/four.toml");
    put(folder, "lid.toml", &lid);
    put(folder, "second.toml", &lid);
    let changed = || {
        let output = check(&["--changed", "."], folder);
        let why = |line: &str| line.rsplit_once('(').map(|(_, why)| why.trim_end_matches(')').to_owned());
        let told: Vec<String> = text(&output.stdout).lines().map(|line| why(line).expect("a reason")).collect();
        (told, text(&output.stderr), output.status.code())
    };
    assert_eq!(changed().0, ["no record", "no record"]);
    sign(folder, "lid.toml");
    sign(folder, "second.toml");
    let (told, counts, code) = changed();
    assert_eq!((told.len(), code), (0, Some(0)), "{told:?}");
    assert_eq!(counts, "0 clear, 0 not clear, 0 not judged, 2 left out: their records are of the same files\n");
    put(folder, "lid.toml", &lid.replace("speed  = 200", "speed  = 190"));
    assert_eq!(changed().0, ["changed since its record"]);
    put(folder, "lid.toml", &lid);
    assert_eq!(changed().0.len(), 0);
    // One arm file for the whole plant.
    let arm = fs::read_to_string(folder.join("arms/four.toml")).expect("read");
    put(folder, "arms/four.toml", &(arm.clone() + "\n# weighed again\n"));
    assert_eq!(changed().0, ["its arm file changed since its record", "its arm file changed since its record"]);
    assert_eq!(text(&check(&["--changed", "--list", "."], folder).stdout), "./lid.toml\n./second.toml\n");
    put(folder, "arms/four.toml", &arm);
    let place = folder.join("second.signoff.toml");
    let mut record = earlier_record(&place).expect("it reads").expect("there");
    put(folder, "second.signoff.toml", "elbowroom-signoff = 1\n");
    assert_eq!(changed().0, ["its record can't be read"]);
    "0.0.9".clone_into(&mut record.program);
    fs::write(&place, record_text(&record)).expect("written");
    assert_eq!(changed().0, [format!("its record is of version 0.0.9, this is {}", env!("CARGO_PKG_VERSION"))]);
}

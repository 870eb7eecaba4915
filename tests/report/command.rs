//! `report` as a person runs it.

use std::process::{Command, Output};

use super::recipe;

/// A folder of one's own with a recipe and its arm.
struct Folder(tempfile::TempDir);

impl Folder {
    fn new(name: &str) -> Self {
        let folder = Self(tempfile::tempdir().expect("a folder"));
        std::fs::create_dir(folder.0.path().join("arms")).expect("made");
        for arm in std::fs::read_dir(recipe("arms")).expect("arms").flatten() {
            std::fs::copy(arm.path(), folder.0.path().join("arms").join(arm.file_name())).expect("copied");
        }
        std::fs::copy(recipe(name), folder.0.path().join(name)).expect("copied");
        folder
    }

    fn run(&self, arguments: &[&str]) -> Output {
        Command::new(env!("CARGO_BIN_EXE_elbowroom")).args(arguments).current_dir(self.0.path()).output().expect("it starts")
    }

    fn text(&self, name: &str) -> String {
        std::fs::read_to_string(self.0.path().join(name)).unwrap_or_else(|error| panic!("{name}: {error}"))
    }

    fn write(&self, name: &str, text: &str) {
        std::fs::write(self.0.path().join(name), text).expect("written");
    }
}

fn told(output: &Output) -> String {
    String::from_utf8_lossy(&output.stdout).into_owned() + &String::from_utf8_lossy(&output.stderr)
}

fn assert_code(output: &Output, code: i32, says: &str) {
    assert_eq!(output.status.code(), Some(code), "{}", told(output));
    assert!(told(output).contains(says), "{says}: {}", told(output));
}

#[test]
fn both_formats_are_written_whatever_the_verdict() {
    let folder = Folder::new("housing-transfer.toml");
    let ask =
        ["report", "housing-transfer.toml", "--no-remedies", "--html", "a.html", "--markdown", "a.md", "--date", "2026-11-30"];
    assert_code(&folder.run(&ask), 0, "written: a.html\nwritten: a.md\n");
    assert!(folder.text("a.html").contains("NOT READY") && folder.text("a.md").contains("dated 2026-11-30"));
    assert!(folder.text("a.md").contains("was not tried for this report"));
    // Again, nothing is different.
    assert_code(&folder.run(&ask), 0, "unchanged: a.html is this report already");
    assert!(!folder.0.path().join("a.html~").exists());
    // Where it stands, and from where it was called, does not show.
    let whole = folder.0.path().join("housing-transfer.toml");
    let other = Folder::new("tray-feed.toml");
    let ask = ["report", whole.to_str().expect("UTF-8"), "--no-remedies", "--html", "-", "--date", "2026-11-30"];
    assert_eq!(String::from_utf8_lossy(&other.run(&ask).stdout), folder.text("a.html"));
}

#[test]
fn what_is_no_report_is_left_alone() {
    let folder = Folder::new("tray-feed.toml");
    let before = folder.text("tray-feed.toml");
    folder.write("notes.md", "mine\n");
    folder.write("empty.md", "");
    for target in ["tray-feed.toml", "notes.md", "empty.md", "arms"] {
        let output = folder.run(&["report", "tray-feed.toml", "--html", "new.html", "--markdown", target]);
        assert_code(&output, 2, "is there and is no report of this program");
        assert!(!folder.0.path().join("new.html").exists(), "nothing is written if one can't be");
    }
    assert_eq!((folder.text("tray-feed.toml"), folder.text("notes.md")), (before, "mine\n".to_owned()));
    let nowhere = folder.run(&["report", "tray-feed.toml", "--html", "no/such/folder/x.html"]);
    assert_code(&nowhere, 2, "folder");
    #[cfg(unix)]
    assert_code(&folder.run(&["report", "tray-feed.toml", "--html", "/dev/null"]), 2, "is no report");
}

#[test]
fn a_report_that_is_there_is_kept_beside_the_new_one() {
    let folder = Folder::new("tray-feed.toml");
    let ask = ["report", "tray-feed.toml", "--html", "r.html"];
    assert_code(&folder.run(&ask), 0, "written: r.html");
    let first = folder.text("r.html").replace("</main>", "<p>a note of mine</p></main>");
    folder.write("r.html", &first);
    assert_code(&folder.run(&ask), 0, "the report before is now r.html~");
    assert_eq!(folder.text("r.html~"), first);
    assert!(!folder.text("r.html").contains("a note of mine"));
}

#[test]
fn mistakes_in_the_arguments_are_told() {
    let folder = Folder::new("tray-feed.toml");
    for (arguments, says) in [
        (&["report", "tray-feed.toml"][..], "--html"),
        (&["report", "--html", "x.html"], "RECIPE"),
        (&["report", "tray-feed.toml", "--html", "-", "--markdown", "-"], "the same place"),
        (&["report", "tray-feed.toml", "--html", "x", "--date", "yesterday"], "it must be a day"),
        (&["report", "none.toml", "--html", "x"], "no such file"),
    ] {
        let output = folder.run(arguments);
        assert_eq!(output.status.code(), Some(2), "{arguments:?}: {}", told(&output));
        assert!(told(&output).contains(says), "{}", told(&output));
    }
}

#[test]
fn the_state_of_the_sign_off_is_told() {
    let folder = Folder::new("lid-placing.toml");
    let report = |folder: &Folder| told(&folder.run(&["report", "lid-placing.toml", "--no-remedies", "--markdown", "-"]));
    assert!(report(&folder).contains("Nobody has signed this recipe off. There is no record lid-placing.signoff.toml beside it."));
    let template = folder.run(&["sign", "lid-placing.toml", "--template"]);
    let uncommented = |line: &str| {
        line.strip_prefix("# ").filter(|rest| rest.starts_with('[') || rest.contains(" = ")).unwrap_or(line).to_owned()
    };
    let answers: String = String::from_utf8_lossy(&template.stdout).lines().map(|line| uncommented(line) + "\n").collect();
    folder.write("answers.toml", &answers);
    let name = "Anna <b>|`x`";
    let sign = ["sign", "lid-placing.toml", "--name", name, "--reasons", "answers.toml", "--date", "2026-11-30"];
    assert_code(&folder.run(&sign), 0, "seal");
    let stands = report(&folder);
    assert!(stands.contains("The record beside the recipe stands. Its seal is"), "{stands}");
    assert!(stands.contains("| prepared by | Anna &lt;b&gt;\\|\\`x\\` | 2026-11-30 |"), "{stands}");
    // A datum changes.
    folder.write("lid-placing.toml", &folder.text("lid-placing.toml").replacen("fly-by = 20", "fly-by = 21", 1));
    let fallen = report(&folder);
    assert!(fallen.contains("does NOT stand") && fallen.contains("fly-by: 20 -&gt; 21"), "{fallen}");
    // So does a record that can't be read.
    folder.write("lid-placing.signoff.toml", "elbowroom");
    assert!(report(&folder).contains("It can't be read"));
}

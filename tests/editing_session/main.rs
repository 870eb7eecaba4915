//! Whole sessions of editing on the real program: what a person made is never lost.
#![cfg(unix)]

#[expect(dead_code, reason = "other tests use other parts")]
#[path = "../pty/mod.rs"]
mod pty;
mod refused;
mod signed;

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

/// The waypoint that the program starts from has no segment of its own, and is selected, edited and deleted like any other.
#[test]
fn the_first_waypoint_is_edited_and_deleted_too() {
    let folder = cell();
    let mut running = open(&folder, [100, 40]);
    let names = |text: &str| text.lines().filter(|line| line.starts_with("name")).map(str::to_owned).collect::<Vec<_>>();
    let before = text(&folder);
    running.press("g");
    running.until("Go to waypoint");
    running.press("1\r");
    running.press("e");
    running.until("Edit waypoint 1");
    running.press("\x7f");
    running.until("At the cursor");
    // From the second row up to the first, and down again.
    running.press("g2\r\x1b[A");
    running.press("x");
    running.until("Waypoint 1");
    running.press("\x7f");
    running.until("At the cursor");
    running.press("\x1b[B");
    running.press("e");
    running.until("Edit waypoint 2");
    running.press("\x7f");
    running.until("At the cursor");
    running.press("g1\rx");
    running.until("delete");
    while !running.text().lines().any(|line| line.contains("▸ delete")) {
        running.press("\x1b[B");
        std::thread::sleep(std::time::Duration::from_millis(60));
    }
    running.press("\r");
    running.until("u undoes it");
    running.press("s");
    running.until("saved to");
    let after = text(&folder);
    assert!(names(&before).len() > names(&after).len());
    assert!(names(&after).iter().all(|name| names(&before).contains(name)));
    running.press("u");
    running.until("undone");
    running.press("s");
    running.until("saved to");
    assert_eq!(text(&folder), before, "undone byte for byte");
    running.press("q");
    assert!(running.end().success());
}

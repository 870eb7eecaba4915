//! What can't be written, or not unasked: it is told, and the edits are kept.

use portable_pty::CommandBuilder;

use super::pty::Running;
use super::{cell, open, recipe, slow_down, text};

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

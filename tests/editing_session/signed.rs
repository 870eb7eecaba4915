//! Signing off on the screen.

use std::path::Path;

use portable_pty::CommandBuilder;

use super::pty::Running;
use super::{cell, open, slow_down};

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
    running.until("to answer");
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

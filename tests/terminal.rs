//! The real program in a terminal of its own: it gives the terminal back as it was, whatever ends it.
#![cfg(unix)]

#[expect(dead_code, reason = "other tests use other parts")]
mod pty;

use std::time::Duration;

use portable_pty::{CommandBuilder, PtySize};
use pty::{Running, cells};

#[test]
fn it_opens_moves_and_quits() {
    let mut running = Running::program();
    assert!(running.screen.lock().expect("lock").screen().alternate_screen());
    running.until("10.63 s");
    running.press("\x1b[B\x1b[B");
    running.until("13.76 s");
    running.press("?");
    running.until("worst finding");
    running.press("\x7f");
    running.press("g12.4s\r");
    running.until("12.40 s");
    running.press("q");
    assert!(running.end().success());
}

#[test]
fn arrows_and_enter_are_enough_to_quit() {
    let mut running = Running::program();
    running.press("\r");
    running.until("filter the list");
    running.press("\x1b[A\r");
    assert!(running.end().success());
}

#[test]
fn the_terminal_is_given_back_on_every_signal_that_ends() {
    for name in ["TERM", "HUP", "INT"] {
        let running = Running::program();
        running.signal(name);
        assert!(!running.end().success(), "{name}");
    }
}

#[test]
fn it_stops_and_goes_on() {
    let mut running = Running::program();
    running.press("\x1a");
    running.wait_for("the first screen", |running| !running.screen.lock().expect("lock").screen().alternate_screen());
    assert_eq!(format!("{:?}", running.master.get_termios()), running.before);
    running.signal("CONT");
    running.wait_for("the other screen", |running| running.screen.lock().expect("lock").screen().alternate_screen());
    running.until("NOT READY");
    running.press("w");
    running.until("10.63 s");
    running.press("q");
    assert!(running.end().success());
}

#[test]
fn the_model_is_jogged_a_waypoint_recorded_and_that_undone() {
    let mut running = Running::program();
    running.press("j");
    running.until("JOG of the model, no arm connected: joint by joint");
    running.press("\x1b[C\x1b[C\t");
    running.until("base axes");
    running.press("\x1b[B\x1b[C");
    running.until("TCP in base axes");
    // The first entry of the menu, and the name as suggested.
    running.press("\r");
    running.until("insert a waypoint after it");
    running.press("\r");
    running.until("Name of the new waypoint: after ");
    running.press("\r");
    running.until("inserted; u undoes it");
    running.press("u");
    running.until("undone: waypoint");
    running.press("j");
    running.until("NOT READY");
    running.press("q");
    assert!(running.end().success());
}

#[test]
fn nothing_is_written_while_nothing_happens() {
    let mut running = Running::program();
    std::thread::sleep(Duration::from_millis(800));
    let before = *running.bytes.lock().expect("lock");
    std::thread::sleep(Duration::from_millis(800));
    assert_eq!(*running.bytes.lock().expect("lock"), before);
    running.press("q");
    running.end();
}

#[test]
fn another_size_is_drawn_whole() {
    let mut running = Running::program();
    running.screen.lock().expect("lock").screen_mut().set_size(cells(40), cells(120));
    running.master.resize(PtySize { rows: 40, cols: 120, ..PtySize::default() }).expect("resized");
    running.until("from above");
    running.press("q");
    running.end();
}

#[test]
fn a_panic_gives_the_terminal_back_and_can_be_read() {
    let mut command = CommandBuilder::new(std::env::current_exe().expect("this test"));
    command.args(["--ignored", "--exact", "panics_on_purpose", "--nocapture"]);
    let running = Running::start(command);
    running.until("on purpose");
    assert!(!running.end().success());
}

#[test]
#[ignore = "run by another test, in a terminal of its own"]
fn panics_on_purpose() {
    let _screen = elbowroom::tui::Screen::take(false).expect("a terminal");
    panic!("on purpose");
}

#[test]
fn without_a_terminal_it_says_what_to_do() {
    let output = std::process::Command::new(env!("CARGO_BIN_EXE_elbowroom")).output().expect("runs");
    assert!(!output.status.success());
    assert!(output.stdout.is_empty());
    assert!(String::from_utf8_lossy(&output.stderr).contains("elbowroom check"));
}

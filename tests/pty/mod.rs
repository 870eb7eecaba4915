//! The real program in a terminal of its own.

use std::io::{Read, Write};
use std::num::NonZero;
use std::sync::{Arc, Mutex};
use std::time::{Duration, Instant};

use portable_pty::{Child, CommandBuilder, MasterPty, PtySize, native_pty_system};

/// Long enough for a debug build on a busy machine.
pub const PATIENCE: Duration = Duration::from_secs(60);

pub fn cells(count: u16) -> NonZero<u16> {
    NonZero::new(count).expect("not 0")
}

/// The program in a terminal of its own.
pub struct Running {
    pub child: Box<dyn Child + Send + Sync>,
    pub master: Box<dyn MasterPty + Send>,
    writer: Box<dyn Write + Send>,
    pub screen: Arc<Mutex<vt100::Parser>>,
    pub bytes: Arc<Mutex<usize>>,
    pub before: String,
}

impl Running {
    pub fn start(command: CommandBuilder) -> Self {
        Self::sized(command, [80, 24])
    }

    /// Columns and rows as given.
    pub fn sized(command: CommandBuilder, [cols, rows]: [u16; 2]) -> Self {
        let pair = native_pty_system().openpty(PtySize { rows, cols, ..PtySize::default() }).expect("a terminal");
        let before = format!("{:?}", pair.master.get_termios());
        let mut command = command;
        command.env("TERM", "xterm-256color");
        command.env("LC_ALL", "C.UTF-8");
        command.env_remove("NO_COLOR");
        let child = pair.slave.spawn_command(command).expect("starts");
        let writer = pair.master.take_writer().expect("writer");
        let mut reader = pair.master.try_clone_reader().expect("reader");
        let screen = Arc::new(Mutex::new(vt100::Parser::new(cells(rows), cells(cols), 0)));
        let bytes = Arc::new(Mutex::new(0));
        let (seen, counted) = (Arc::clone(&screen), Arc::clone(&bytes));
        std::thread::spawn(move || {
            let mut buffer = [0; 4096];
            while let Ok(count @ 1..) = reader.read(&mut buffer) {
                seen.lock().expect("lock").process(&buffer[..count]);
                *counted.lock().expect("lock") += count;
            }
        });
        // The slave is kept open by the master's side of the test only as long as the child runs.
        drop(pair.slave);
        Self { child, master: pair.master, writer, screen, bytes, before }
    }

    pub fn program() -> Self {
        let running = Self::start(CommandBuilder::new(env!("CARGO_BIN_EXE_elbowroom")));
        running.until("NOT READY");
        running
    }

    pub fn text(&self) -> String {
        self.screen.lock().expect("lock").screen().contents()
    }

    pub fn wait_for(&self, what: &str, mut holds: impl FnMut(&Self) -> bool) {
        let start = Instant::now();
        while !holds(self) {
            assert!(start.elapsed() < PATIENCE, "never: {what}\n{}", self.text());
            std::thread::sleep(Duration::from_millis(10));
        }
    }

    pub fn until(&self, text: &str) {
        self.wait_for(text, |running| running.text().contains(text));
    }

    pub fn press(&mut self, keys: &str) {
        self.writer.write_all(keys.as_bytes()).expect("written");
        self.writer.flush().expect("flushed");
    }

    pub fn signal(&self, name: &str) {
        let id = self.child.process_id().expect("runs").to_string();
        assert!(std::process::Command::new("kill").args(["-s", name, &id]).status().expect("kill").success());
    }

    /// Whether the program has ended.
    pub fn has_ended(&mut self) -> bool {
        self.child.try_wait().expect("waits").is_some()
    }

    /// Waits for the end, and checks that the terminal is as it was.
    pub fn end(mut self) -> portable_pty::ExitStatus {
        let start = Instant::now();
        let status = loop {
            if let Some(status) = self.child.try_wait().expect("waits") {
                break status;
            }
            assert!(start.elapsed() < PATIENCE, "does not end\n{}", self.text());
            std::thread::sleep(Duration::from_millis(10));
        };
        self.wait_for("the first screen with a cursor", |running| {
            let parser = running.screen.lock().expect("lock");
            !parser.screen().alternate_screen() && !parser.screen().hide_cursor()
        });
        assert_eq!(format!("{:?}", self.master.get_termios()), self.before);
        status
    }
}

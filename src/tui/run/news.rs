use std::io;
use std::thread;

use crossbeam_channel::{Receiver, Sender, bounded};
use ratatui::crossterm::event::{self, Event};

/// News is what arrives from outside while the screen waits.
#[derive(Debug)]
pub enum News {
    /// A key, a click, another size.
    Terminal(Event),
    /// A signal that asks to end; its number.
    End(i32),
    /// A signal that asks to give the terminal back for a while.
    Suspend,
    /// The terminal is gone.
    Gone,
}

/// Keys that may wait; a reader that is faster waits itself.
const WAITING: usize = 256;

/// Starts the threads that listen to terminal and signals.
///
/// # Errors
/// Where the system gives no thread or no signals.
pub fn listen() -> io::Result<Receiver<News>> {
    let (tell, news) = bounded(WAITING);
    signals(tell.clone())?;
    hang_up(tell.clone())?;
    thread::Builder::new().name("terminal".to_owned()).spawn(move || {
        loop {
            let Ok(event) = event::read() else {
                let _ = tell.send(News::Gone);
                return;
            };
            if tell.send(News::Terminal(event)).is_err() {
                return;
            }
        }
    })?;
    Ok(news)
}

#[cfg(unix)]
fn signals(tell: Sender<News>) -> io::Result<()> {
    use signal_hook::consts::{SIGHUP, SIGINT, SIGQUIT, SIGTERM, SIGTSTP};
    let mut signals = signal_hook::iterator::Signals::new([SIGTERM, SIGHUP, SIGINT, SIGQUIT, SIGTSTP])?;
    thread::Builder::new().name("signals".to_owned()).spawn(move || {
        for signal in signals.forever() {
            let news = if signal == SIGTSTP { News::Suspend } else { News::End(signal) };
            if tell.send(news).is_err() {
                return;
            }
        }
    })?;
    Ok(())
}

/// Watches for the terminal to hang up: after that, reading from it would only spin.
#[cfg(unix)]
fn hang_up(tell: Sender<News>) -> io::Result<()> {
    use rustix::event::{PollFd, PollFlags, poll};
    thread::Builder::new().name("hang-up".to_owned()).spawn(move || {
        let input = io::stdin();
        loop {
            // Nothing is asked for: hanging up is told all the same.
            let mut watched = [PollFd::new(&input, PollFlags::empty())];
            match poll(&mut watched, None) {
                Ok(_) => break,
                Err(rustix::io::Errno::INTR) => {}
                // A system that can't poll a terminal still sends the signal.
                Err(_) => return,
            }
        }
        let _ = tell.send(News::Gone);
    })?;
    Ok(())
}

#[cfg(not(unix))]
fn signals(_: Sender<News>) -> io::Result<()> {
    Ok(())
}

#[cfg(not(unix))]
fn hang_up(_: Sender<News>) -> io::Result<()> {
    Ok(())
}

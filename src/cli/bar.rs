use std::io::{self, IsTerminal, Write};
use std::time::{Duration, Instant};

/// Columns of the bar itself.
const WIDTH: usize = 30;
/// It is drawn again at most this often.
const OFTEN: Duration = Duration::from_millis(100);

/// A bar on standard error that tells how far many recipes are; nothing where that is no terminal.
pub(super) struct Bar {
    of: usize,
    done: usize,
    /// When it was drawn last; `None` where it is never drawn.
    drawn: Option<Instant>,
}

impl Bar {
    /// A bar over so many recipes.
    pub fn over(of: usize) -> Self {
        let mut bar = Self { of, done: 0, drawn: (of > 1 && io::stderr().is_terminal()).then(Instant::now) };
        bar.draw();
        bar
    }

    /// So many are done.
    pub fn done(&mut self, done: usize) {
        self.done = done;
        if self.drawn.is_some_and(|drawn| drawn.elapsed() >= OFTEN) {
            self.draw();
        }
    }

    /// Takes the bar off the screen, so that a line can be printed.
    pub fn wipe(&self) {
        if self.drawn.is_some() {
            let _ = write!(io::stderr().lock(), "\r\x1b[K");
        }
    }

    /// Draws it.
    pub fn draw(&mut self) {
        if self.drawn.is_some() {
            // Where standard error is closed there is nobody left to tell.
            let _ = write!(io::stderr().lock(), "\r{}\x1b[K", told(self.done, self.of));
            let _ = io::stderr().flush();
            self.drawn = Some(Instant::now());
        }
    }
}

fn told(done: usize, of: usize) -> String {
    let full = (WIDTH * done).checked_div(of).unwrap_or(WIDTH);
    format!("[{}{}] {done} of {of}", "#".repeat(full), ".".repeat(WIDTH - full))
}

#[cfg(test)]
mod tests {
    use super::told;

    #[test]
    fn the_bar_fills_from_left_to_right() {
        assert_eq!(told(0, 3), "[..............................] 0 of 3");
        assert_eq!(told(1, 3), "[##########....................] 1 of 3");
        assert_eq!(told(3, 3), "[##############################] 3 of 3");
    }
}

use std::io::{self, BufWriter, IsTerminal, Stdout, Write};
use std::sync::Once;

use ratatui::Terminal;
use ratatui::backend::CrosstermBackend;
use ratatui::crossterm::clipboard::CopyToClipboard;
use ratatui::crossterm::event::{DisableMouseCapture, EnableMouseCapture};
use ratatui::crossterm::style::force_color_output;
use ratatui::crossterm::terminal::{
    BeginSynchronizedUpdate, DisableLineWrap, EnableLineWrap, EndSynchronizedUpdate, EnterAlternateScreen, LeaveAlternateScreen,
    disable_raw_mode, enable_raw_mode,
};
use ratatui::crossterm::{cursor, execute, queue};
use ratatui::layout::Rect;

use crate::tui::{App, draw};

/// One frame fits in here, so that it leaves in one piece.
const BUFFER: usize = 64 * 1024;

/// A screen is the terminal while this program has it. Whatever ends it gives the terminal back as it was.
#[derive(Debug)]
pub struct Screen {
    terminal: Terminal<CrosstermBackend<BufWriter<Stdout>>>,
    mouse: bool,
}

impl Screen {
    /// Takes the terminal. From here on a panic gives it back before its message is written.
    ///
    /// # Errors
    /// Where input or output is no terminal, or the terminal refuses.
    pub fn take(mouse: bool) -> io::Result<Self> {
        if !(io::stdin().is_terminal() && io::stdout().is_terminal()) {
            let says = "the review screen needs a terminal; `elbowroom check` prints the same without one";
            return Err(io::Error::new(io::ErrorKind::Unsupported, says));
        }
        restore_on_panic();
        // The theme knows whether colours are wanted; otherwise bold and reverse would be lost with them.
        force_color_output(true);
        let backend = CrosstermBackend::new(BufWriter::with_capacity(BUFFER, io::stdout()));
        let terminal = Terminal::new(backend)?;
        let mut screen = Self { terminal, mouse };
        screen.enter()?;
        Ok(screen)
    }

    /// Hands a text to the clipboard of the terminal that the person sits at, by OSC 52.
    ///
    /// # Errors
    /// Where the terminal is gone.
    pub fn copy(&mut self, text: &str) -> io::Result<()> {
        execute!(io::stdout(), CopyToClipboard::to_clipboard_from(text))
    }

    /// Enters the other screen of the terminal: at start, and after having been away.
    ///
    /// # Errors
    /// Where the terminal refuses.
    pub fn enter(&mut self) -> io::Result<()> {
        enable_raw_mode()?;
        let mut out = io::stdout();
        execute!(out, EnterAlternateScreen, DisableLineWrap, cursor::Hide)?;
        if self.mouse {
            execute!(out, EnableMouseCapture)?;
        }
        // To be drawn anew as a whole. Clearing would ask the terminal where its cursor is and lose to the thread that reads.
        let size = self.terminal.size()?;
        self.terminal.resize(Rect::new(0, 0, size.width, size.height))
    }

    /// Columns and rows.
    ///
    /// # Errors
    /// Where the terminal does not say.
    pub fn size(&self) -> io::Result<(u16, u16)> {
        let size = self.terminal.size()?;
        Ok((size.width, size.height))
    }

    /// Shows the app; what has not changed is not written.
    ///
    /// # Errors
    /// Where the terminal is gone.
    pub fn show(&mut self, app: &App) -> io::Result<()> {
        queue!(self.terminal.backend_mut(), BeginSynchronizedUpdate)?;
        self.terminal.draw(|frame| {
            let area = frame.area();
            draw(frame.buffer_mut(), area, app);
        })?;
        queue!(self.terminal.backend_mut(), EndSynchronizedUpdate)?;
        io::Write::flush(self.terminal.backend_mut())
    }
}

fn restore_on_panic() {
    static ONCE: Once = Once::new();
    ONCE.call_once(|| {
        let before = std::panic::take_hook();
        std::panic::set_hook(Box::new(move |panic| {
            restore();
            before(panic);
        }));
    });
}

impl Drop for Screen {
    fn drop(&mut self) {
        restore();
    }
}

/// Gives the terminal back as it was: line mode, the first screen, a cursor. Does no harm where it is so already.
pub fn restore() {
    // Nothing can be done about a terminal that takes none of it, such as one that hung up.
    let mut out = io::stdout();
    let _ = execute!(out, EndSynchronizedUpdate, DisableMouseCapture, EnableLineWrap, LeaveAlternateScreen, cursor::Show);
    let _ = out.flush();
    let _ = disable_raw_mode();
}

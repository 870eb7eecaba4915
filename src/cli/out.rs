use std::io::{self, Write};

/// Whether whoever reads standard output still listens.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Reader {
    /// It does.
    Listens,
    /// It has closed the pipe, which is its good right.
    Gone,
}

/// Prints to standard output.
///
/// # Errors
/// Whatever standard output complains about, but for a closed pipe.
pub(super) fn print(text: &str) -> anyhow::Result<Reader> {
    let mut out = io::stdout().lock();
    still_there(out.write_all(text.as_bytes()).and_then(|()| out.flush()))
}

/// Sorts out a closed pipe from real complaints.
pub(super) fn still_there(written: io::Result<()>) -> anyhow::Result<Reader> {
    match written {
        Ok(()) => Ok(Reader::Listens),
        Err(error) if error.kind() == io::ErrorKind::BrokenPipe => Ok(Reader::Gone),
        Err(error) => Err(anyhow::Error::new(error).context("standard output can't be written")),
    }
}

/// Prints a complaint to standard error. Where that is closed too there is nobody left to tell.
pub(super) fn complain(text: &str) {
    let _ = writeln!(io::stderr().lock(), "{text}");
}

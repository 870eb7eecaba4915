use std::io::ErrorKind;
use std::path::{Path, PathBuf};

use crate::files::{Content, NotSaved, read_text, write};

use super::REPORT_FORMAT;

/// Signs from the start of a file within which a report says that it is one.
const HEAD: usize = 64;

/// What was written.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Written {
    /// A new file.
    New,
    /// A report that was there; the one before stands there now.
    Replaced(PathBuf),
    /// Nothing: the same report was there.
    Same,
}

/// Why a report was not written. Nothing on the disk has changed then.
#[derive(Debug, thiserror::Error)]
pub enum NotKept {
    /// Something else is there.
    #[error("{} is there and is no report of this program; choose another name, or move it away", path.display())]
    NoReport {
        /// The file.
        path: PathBuf,
    },
    /// The system forbids it.
    #[error(transparent)]
    NotSaved(#[from] NotSaved),
}

/// Whether a report may be written to a file: nothing is there, or a report of ours.
///
/// # Errors
/// That something else is there.
pub fn may_keep(path: &Path) -> Result<(), NotKept> {
    there(path).map(|_| ())
}

/// Writes a report. One that was there, even of another recipe, is kept as `NAME~`; anything else is left alone.
///
/// # Errors
/// [`NotKept`].
pub fn save_report(path: &Path, text: &str) -> Result<Written, NotKept> {
    match there(path)? {
        Some(before) if before == text => Ok(Written::Same),
        Some(before) => {
            let saved = write(path, text, Some(&Content::of(before.as_bytes())))?;
            Ok(saved.backup.map_or(Written::New, Written::Replaced))
        }
        None => write(path, text, None).map(|_| Written::New).map_err(NotKept::NotSaved),
    }
}

/// The report that is there, if one is.
fn there(path: &Path) -> Result<Option<String>, NotKept> {
    let other = || NotKept::NoReport { path: path.to_owned() };
    match std::fs::metadata(path) {
        Err(error) if error.kind() == ErrorKind::NotFound => return Ok(None),
        Ok(found) if found.is_file() => {}
        // A folder, a device, a pipe, or a place that tells nothing.
        _ => return Err(other()),
    }
    let text = read_text(path).map_err(|_| other())?.text;
    let head: String = text.chars().take(HEAD).collect();
    if head.contains(&format!("<!-- {REPORT_FORMAT} -->")) { Ok(Some(text)) } else { Err(other()) }
}

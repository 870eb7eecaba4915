use std::fs::File;
use std::io::{ErrorKind, Read};
use std::path::Path;

use super::position::Lines;
use super::{Complaint, Rejected, Source};

/// Largest file that is read, bytes. A hundred thousand waypoints take a third of it; with more, something is wrong, and reading must
/// not fill the memory.
const LARGEST: u64 = 64 * 1024 * 1024;

/// Reads a file as text, or tells why it can't be: missing, a folder, too large, not UTF-8.
pub(super) fn read(path: &Path) -> Result<Source, Rejected> {
    let shown = path.display().to_string();
    let refused = |says: String| Rejected::one(Complaint::whole(&shown, says));
    if path.is_dir() {
        return Err(refused("this is a folder; give a file".to_owned()));
    }
    let mut bytes = Vec::new();
    File::open(path)
        .and_then(|file| file.take(LARGEST + 1).read_to_end(&mut bytes))
        .map_err(|error| refused(why_unread(&error)))?;
    if bytes.len() as u64 > LARGEST {
        return Err(refused(format!("the file is larger than {} MiB; no recipe or arm file is", LARGEST >> 20)));
    }
    match String::from_utf8(bytes) {
        Ok(text) => Ok(Source { path: shown, text }),
        Err(error) => Err(Rejected::one(not_utf8(&shown, error.as_bytes(), error.utf8_error().valid_up_to()))),
    }
}

fn why_unread(error: &std::io::Error) -> String {
    match error.kind() {
        ErrorKind::NotFound => "there is no such file".to_owned(),
        ErrorKind::PermissionDenied => "the file may not be read; its permissions forbid it".to_owned(),
        _ => format!("the file can't be read: {error}"),
    }
}

fn not_utf8(shown: &str, bytes: &[u8], valid_to: usize) -> Complaint {
    if bytes.starts_with(&[0xff, 0xfe]) || bytes.starts_with(&[0xfe, 0xff]) {
        return Complaint::whole(shown, "the file is UTF-16 text; save it as UTF-8");
    }
    let valid = String::from_utf8_lossy(&bytes[..valid_to]);
    let (line, column) = Lines::of(&valid).position(valid_to);
    Complaint {
        source: shown.to_owned(),
        line,
        column,
        says: format!("byte {:#04x} is not UTF-8 text; save the file as UTF-8", bytes[valid_to]),
    }
}

use std::fs::{self, File};
use std::io::{self, BufWriter, Write};
use std::path::{Path, PathBuf};

/// Writes a file by way of a neighbour that takes its name only when it is whole, so that a failure leaves what was there.
///
/// # Errors
/// Whatever the file system or `write` complains about.
pub fn save<E: From<io::Error>>(path: &Path, write: impl FnOnce(&mut dyn Write) -> Result<(), E>) -> Result<(), E> {
    let part = beside(path);
    let written = File::create(&part).map_err(E::from).and_then(|file| {
        let mut out = BufWriter::new(file);
        write(&mut out)?;
        out.into_inner().map_err(io::IntoInnerError::into_error)?.sync_all()?;
        Ok(fs::rename(&part, path)?)
    });
    if written.is_err() {
        let _ = fs::remove_file(&part);
    }
    written
}

fn beside(path: &Path) -> PathBuf {
    let mut name = path.file_name().unwrap_or_default().to_owned();
    name.push(format!(".{}.part", std::process::id()));
    path.with_file_name(name)
}

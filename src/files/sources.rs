use std::path::{Path, PathBuf};

use crate::review::{SealedFile, Sources};
use crate::seal::Digest;

use super::{Complaint, Opened, Rejected, Source, content, open, raw};

/// What was read, as a record needs it: hashes of both files, and their content.
pub fn sources(opened: &Opened) -> Sources {
    let file = |path: &str, source: &Source| SealedFile { path: path.to_owned(), digest: Digest::of(source.text.as_bytes()) };
    let name =
        Path::new(&opened.recipe_source.path).file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
    let mut items = content(&opened.recipe_source, "");
    items.extend(content(&opened.arm_source, "arm: "));
    Sources { recipe: file(&name, &opened.recipe_source), arm: file(&opened.recipe.arm, &opened.arm_source), content: items }
}

/// Where the record of a recipe stands: beside it, `NAME.toml` becoming `NAME.signoff.toml`.
pub fn record_path(recipe: &Path) -> PathBuf {
    let stem = recipe.file_stem().unwrap_or_default().to_string_lossy();
    recipe.with_file_name(format!("{stem}.signoff.toml"))
}

/// Where the signature of person `index` (counted from 0) under a record stands: `NAME.signoff.toml.1.sig` for the first.
pub fn signature_path(record: &Path, index: usize) -> PathBuf {
    let name = record.file_name().unwrap_or_default().to_string_lossy();
    record.with_file_name(format!("{name}.{}.sig", index + 1))
}

/// Reads any text file as it stands, or tells why it can't be.
///
/// # Errors
/// That it is missing, a folder, too large or not UTF-8.
pub fn read_text(path: &Path) -> Result<Source, Rejected> {
    raw::read(path)
}

/// Whether something stands at a path, a dangling link included.
pub fn is_there(path: &Path) -> bool {
    std::fs::symlink_metadata(path).is_ok()
}

/// Refuses a symbolic link: what it leads to may be another file tomorrow, without a change of anything that was signed.
///
/// # Errors
/// That it is one.
pub fn no_link(path: &Path) -> Result<(), Rejected> {
    let is_link = std::fs::symlink_metadata(path).is_ok_and(|data| data.file_type().is_symlink());
    let says = "this is a symbolic link, which may lead to another file tomorrow; what is signed must be the file itself";
    if is_link { Err(Rejected::one(Complaint::whole(&path.display().to_string(), says))) } else { Ok(()) }
}

/// Opens a recipe that is to be signed or held against a record: neither it nor its arm file may be a symbolic link.
///
/// # Errors
/// That one of them is a link, or all that is wrong with either.
pub fn open_itself(recipe: &Path) -> Result<Opened, Rejected> {
    no_link(recipe)?;
    let opened = open(recipe)?;
    no_link(Path::new(&opened.arm_source.path))?;
    Ok(opened)
}

/// Sets a record and its signatures aside under names with its seal code, so that nothing is lost when a new one is written.
/// Yields the record's new path.
///
/// # Errors
/// Whatever the file system complains about; nothing is ever written over.
pub fn set_aside(record: &Path, digest: &Digest) -> std::io::Result<PathBuf> {
    let name = record.file_name().unwrap_or_default().to_string_lossy();
    let name = name.strip_suffix(".toml").unwrap_or(&name);
    let kept = record.with_file_name(format!("{name}.{}.toml", digest.code()));
    if is_there(&kept) {
        return Err(std::io::Error::new(std::io::ErrorKind::AlreadyExists, format!("{} is already there", kept.display())));
    }
    std::fs::rename(record, &kept)?;
    for index in 0.. {
        let signature = signature_path(record, index);
        if !is_there(&signature) && index >= MOST_PEOPLE {
            break;
        }
        if is_there(&signature) {
            std::fs::rename(&signature, signature_path(&kept, index))?;
        }
    }
    Ok(kept)
}

/// People who may stand under one record.
pub const MOST_PEOPLE: usize = 12;

use std::fs::{self, File, OpenOptions};
use std::io::{self, ErrorKind, Write};
use std::path::{Path, PathBuf};

use super::content::Content;

/// What is put behind the name of a file for the backup of its previous version.
const BACKUP: &str = "~";

/// Why a file was not written. Nothing on the disk has changed then.
#[derive(Debug, thiserror::Error)]
pub enum NotSaved {
    /// Somebody else wrote the file since it was opened; `text` is what stands there now.
    #[error("{} was changed on the disk since it was opened", path.display())]
    Changed {
        /// The file.
        path: PathBuf,
        /// Its text now; `None` if it is gone.
        text: Option<String>,
    },
    /// The file is there already where a new one was wanted.
    #[error("{} is there already; choose another name", path.display())]
    Exists {
        /// The file.
        path: PathBuf,
    },
    /// The file may not be written.
    #[error("{} may not be written: {why}", path.display())]
    ReadOnly {
        /// The file.
        path: PathBuf,
        /// What forbids it.
        why: &'static str,
    },
    /// Its folder is not there any more.
    #[error("the folder {} is not there any more", folder.display())]
    NoFolder {
        /// The folder.
        folder: PathBuf,
    },
    /// There is no room left.
    #[error("there is no room left on the disk for {}", path.display())]
    Full {
        /// The file.
        path: PathBuf,
    },
    /// Anything else that the system complains about.
    #[error("{} can't be written: {error}", path.display())]
    Other {
        /// The file.
        path: PathBuf,
        /// The complaint.
        error: io::Error,
    },
}

/// What a save left on the disk.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Saved {
    /// The file that was written: where a link leads, if `path` was one.
    pub path: PathBuf,
    /// The previous version, byte by byte; `None` if there was none.
    pub backup: Option<PathBuf>,
}

/// Writes `text` to a file whole or not at all: a neighbour is written, brought to the disk, and takes the file's name. The
/// previous version is kept as `NAME~` beside it. Permissions, and the owner where the system lets us, stay. A link stays a link;
/// what it leads to is written. `opened` is what stood there when it was opened, if it was.
///
/// # Errors
/// [`NotSaved`]; what was on the disk is as it was.
pub fn write(path: &Path, text: &str, opened: Option<&Content>) -> Result<Saved, NotSaved> {
    let target = led_to(path).map_err(|error| told(path, error))?;
    match (opened, fs::read(&target)) {
        (Some(opened), Ok(bytes)) if *opened != Content::of(&bytes) => {
            return Err(NotSaved::Changed { path: target, text: Some(String::from_utf8_lossy(&bytes).into_owned()) });
        }
        (None, Ok(_)) => return Err(NotSaved::Exists { path: target }),
        (_, Err(error)) if error.kind() == ErrorKind::NotFound => {
            let folder = folder_of(&target);
            if !folder.is_dir() {
                return Err(NotSaved::NoFolder { folder: folder.to_owned() });
            }
            // A file that is gone is no reason not to save; its text comes back.
        }
        (_, Ok(_)) => {}
        (_, Err(error)) => return Err(told(&target, error)),
    }
    write_over(&target, text)
}

/// Writes `text` whatever stands there, which is kept as a backup: for one who was told that it changed and wants their own.
///
/// # Errors
/// [`NotSaved`]; what was on the disk is as it was.
pub fn write_anyway(path: &Path, text: &str) -> Result<Saved, NotSaved> {
    let target = led_to(path).map_err(|error| told(path, error))?;
    write_over(&target, text)
}

/// Makes the folder that a file is to stand in, if it is not there.
///
/// # Errors
/// [`NotSaved`].
pub fn make_folder(file: &Path) -> Result<(), NotSaved> {
    let folder = folder_of(file);
    fs::create_dir_all(folder).map_err(|error| told(file, error))
}

fn write_over(target: &Path, text: &str) -> Result<Saved, NotSaved> {
    let fault = |error| told(target, error);
    let before = match fs::metadata(target) {
        Ok(before) => Some(before),
        Err(error) if error.kind() == ErrorKind::NotFound => None,
        Err(error) => return Err(fault(error)),
    };
    if before.as_ref().is_some_and(|before| before.permissions().readonly()) {
        return Err(NotSaved::ReadOnly { path: target.to_owned(), why: "it is marked as read-only" });
    }
    if before.is_some() {
        // A folder may let us replace a file that we may not write.
        OpenOptions::new().write(true).open(target).map_err(fault)?;
    }
    let part = beside(target, &format!(".{}.part", std::process::id()));
    let written = write_part(&part, text, before.as_ref()).and_then(|()| {
        let backup = match &before {
            Some(_) => Some(back_up(target)?),
            None => None,
        };
        fs::rename(&part, target)?;
        Ok(backup)
    });
    match written {
        Ok(backup) => {
            // The file is whole either way; a folder that can't be synced is no reason to call it unsaved.
            let _ = File::open(folder_of(target)).and_then(|folder| folder.sync_all());
            Ok(Saved { path: target.to_owned(), backup })
        }
        Err(error) => {
            let _ = fs::remove_file(&part);
            Err(fault(error))
        }
    }
}

fn write_part(part: &Path, text: &str, before: Option<&fs::Metadata>) -> io::Result<()> {
    // What a run that was killed left under this name is no one's.
    let _ = fs::remove_file(part);
    let mut file = OpenOptions::new().write(true).create_new(true).open(part)?;
    file.write_all(text.as_bytes())?;
    if let Some(before) = before {
        keep_owner(&file, before);
        file.set_permissions(before.permissions())?;
    }
    file.sync_all()
}

/// The owner and group stay where the system lets us give a file away; elsewhere the file becomes the writer's, as with any editor.
#[cfg(unix)]
fn keep_owner(file: &File, before: &fs::Metadata) {
    use std::os::unix::fs::MetadataExt;
    let is_same = file.metadata().is_ok_and(|now| (now.uid(), now.gid()) == (before.uid(), before.gid()));
    if !is_same {
        let both = std::os::unix::fs::fchown(file, Some(before.uid()), Some(before.gid()));
        if both.is_err() {
            let _ = std::os::unix::fs::fchown(file, None, Some(before.gid()));
        }
    }
}

#[cfg(not(unix))]
fn keep_owner(_file: &File, _before: &fs::Metadata) {}

/// Keeps the file as its own backup, replacing an older one. A second name for the same bytes where the disk can do that, else a
/// copy: at no moment is there neither.
fn back_up(target: &Path) -> io::Result<PathBuf> {
    let backup = beside(target, BACKUP);
    let step = beside(target, &format!(".{}.back", std::process::id()));
    let _ = fs::remove_file(&step);
    if fs::hard_link(target, &step).is_err() {
        fs::copy(target, &step)?;
    }
    fs::rename(&step, &backup).inspect_err(|_| {
        let _ = fs::remove_file(&step);
    })?;
    // Two names of one file: renaming one onto the other does nothing, and the step is left.
    let _ = fs::remove_file(&step);
    Ok(backup)
}

/// Where a chain of links leads; the path itself if it is none, or is not there.
fn led_to(path: &Path) -> io::Result<PathBuf> {
    match fs::symlink_metadata(path) {
        Ok(found) if found.file_type().is_symlink() => match fs::canonicalize(path) {
            Ok(target) => Ok(target),
            // A link that leads to nothing yet: what it names is written.
            Err(error) if error.kind() == ErrorKind::NotFound => Ok(folder_of(path).join(fs::read_link(path)?)),
            Err(error) => Err(error),
        },
        _ => Ok(path.to_owned()),
    }
}

/// The folder that a file stands in; `.` for a bare name.
fn folder_of(path: &Path) -> &Path {
    match path.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    }
}

/// A neighbour whose name has something behind it.
pub(in crate::files) fn beside(path: &Path, behind: &str) -> PathBuf {
    let mut name = path.file_name().unwrap_or_default().to_owned();
    name.push(behind);
    path.with_file_name(name)
}

/// A complaint of the system in words.
fn told(path: &Path, error: io::Error) -> NotSaved {
    let path = path.to_owned();
    match error.kind() {
        ErrorKind::StorageFull | ErrorKind::QuotaExceeded | ErrorKind::FileTooLarge => NotSaved::Full { path },
        ErrorKind::PermissionDenied => NotSaved::ReadOnly { path, why: "permissions of it or of its folder forbid it" },
        ErrorKind::ReadOnlyFilesystem => NotSaved::ReadOnly { path, why: "the disk is mounted read-only" },
        ErrorKind::NotFound => NotSaved::NoFolder { folder: folder_of(&path).to_owned() },
        _ => NotSaved::Other { path, error },
    }
}

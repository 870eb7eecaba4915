use std::fs::{self, OpenOptions};
use std::io::{self, ErrorKind, Write};
use std::path::{Path, PathBuf};
use std::time::SystemTime;

use super::aside::{Aside, is_of_place, ready};
use super::holder::{Holder, Runs};
use super::save::beside;

/// What stands behind the name of a recipe's lock: `.NAME.lock`.
const BEHIND: &str = ".lock";

/// A lock tells others that a recipe is open. It hinders no program that does not ask. It goes when it is dropped.
#[derive(Debug)]
pub struct Lock {
    place: PathBuf,
    holder: Holder,
}

/// Why a lock was not taken.
#[derive(Debug, thiserror::Error)]
pub enum NotLocked {
    /// Somebody has the recipe open.
    #[error("{holder} has this recipe open")]
    Held {
        /// Who.
        holder: Holder,
        /// Whether we know that they still run: not if it is on another machine.
        sure: bool,
    },
    /// There is a lock that can't be read.
    #[error("somebody has this recipe open ({} can't be read)", place.display())]
    Unreadable {
        /// The lock.
        place: PathBuf,
    },
    /// No lock could be made anywhere; the recipe can be edited without.
    #[error("others can't be told that this recipe is open: {error}")]
    NoPlace {
        /// The system's complaint.
        error: io::Error,
    },
}

impl Lock {
    /// Takes the lock of a recipe. A lock of a process on this machine that no longer runs is swept away.
    ///
    /// # Errors
    /// [`NotLocked`].
    pub fn take(recipe: &Path, aside: &Aside, now: SystemTime) -> Result<Self, NotLocked> {
        Self::make(recipe, aside, now, false)
    }

    /// Takes the lock whoever holds it: for one who was told who does, and decided.
    ///
    /// # Errors
    /// [`NotLocked`].
    pub fn take_over(recipe: &Path, aside: &Aside, now: SystemTime) -> Result<Self, NotLocked> {
        Self::make(recipe, aside, now, true)
    }

    fn make(recipe: &Path, aside: &Aside, now: SystemTime, by_force: bool) -> Result<Self, NotLocked> {
        let holder = Holder::this_process(now);
        let mut refused = None;
        for (index, place) in aside.places(recipe, BEHIND).into_iter().enumerate() {
            match at(&place, index, &holder, by_force) {
                Ok(()) => return Ok(Self { place, holder }),
                Err(NotLocked::NoPlace { error }) if is_of_place(&error) => refused = Some(error),
                Err(other) => return Err(other),
            }
        }
        Err(NotLocked::NoPlace { error: refused.unwrap_or_else(|| ErrorKind::NotFound.into()) })
    }

    /// Where the lock stands.
    pub fn place(&self) -> &Path {
        &self.place
    }
}

impl Drop for Lock {
    fn drop(&mut self) {
        // Someone may have taken it over.
        if read(&self.place).as_ref() == Some(&self.holder) {
            let _ = fs::remove_file(&self.place);
        }
    }
}

fn at(place: &Path, index: usize, holder: &Holder, by_force: bool) -> Result<(), NotLocked> {
    ready(place, index).map_err(|error| NotLocked::NoPlace { error })?;
    // Twice: a stale lock is swept away in between.
    for _ in 0..2 {
        match OpenOptions::new().write(true).create_new(true).open(place) {
            Ok(mut file) => {
                let line = serde_json::to_string(holder).unwrap_or_default() + "\n";
                return file.write_all(line.as_bytes()).and_then(|()| file.sync_all()).map_err(|error| {
                    let _ = fs::remove_file(place);
                    NotLocked::NoPlace { error }
                });
            }
            Err(error) if error.kind() == ErrorKind::AlreadyExists => {}
            Err(error) => return Err(NotLocked::NoPlace { error }),
        }
        let found = read(place);
        match &found {
            _ if by_force => {}
            Some(other) if other.runs() == Runs::No => {}
            Some(other) => return Err(NotLocked::Held { holder: other.clone(), sure: other.runs() == Runs::Yes }),
            None if place.exists() => return Err(NotLocked::Unreadable { place: place.to_owned() }),
            None => continue,
        }
        sweep(place, found.as_ref()).map_err(|error| NotLocked::NoPlace { error })?;
    }
    match read(place) {
        Some(other) => Err(NotLocked::Held { sure: other.runs() == Runs::Yes, holder: other }),
        None => Err(NotLocked::Unreadable { place: place.to_owned() }),
    }
}

/// Takes away the lock that was read. If another one has come into its place in the meantime, that one is put back.
fn sweep(place: &Path, seen: Option<&Holder>) -> io::Result<()> {
    let away = beside(place, &format!(".{}.stale", std::process::id()));
    fs::rename(place, &away)?;
    if read(&away).as_ref() != seen {
        // Fails if a third one came; then there is a lock all the same.
        let _ = fs::hard_link(&away, place);
    }
    fs::remove_file(&away)
}

fn read(place: &Path) -> Option<Holder> {
    serde_json::from_str(&fs::read_to_string(place).ok()?).ok()
}

//! The journal: every edit on the disk before the next one, so that a killed program loses at most the last.
//!
//! One line of JSON each. The first says whose it is and holds the text that the edits start from, so that they can be made again
//! whatever happened to the recipe's file since.

mod cell_json;
mod edit_json;
mod left_behind;
mod waypoint_json;

use std::fs::{self, File, OpenOptions};
use std::io::{self, Write};
use std::path::{Path, PathBuf};
use std::time::{SystemTime, UNIX_EPOCH};

use serde::{Deserialize, Serialize};

use crate::program::Edit;

use super::aside::{Aside, is_of_place, ready};
use super::holder::Holder;
use super::save::beside;
use edit_json::EditJson;

pub use left_behind::{Recovered, left_behind};

/// What stands behind the name of a recipe's journal: `.NAME.journal`.
const BEHIND: &str = ".journal";

/// The version of this format.
const VERSION: u32 = 1;

/// The first line.
#[derive(Serialize, Deserialize)]
struct HeadJson {
    #[serde(rename = "elbowroom-journal")]
    version: u32,
    holder: Holder,
    /// The text that the edits start from.
    text: String,
}

/// A line of an edit.
#[derive(Serialize, Deserialize)]
struct LineJson {
    /// Counted from 1.
    number: usize,
    /// When, s since 1970.
    at: u64,
    edit: EditJson,
}

/// A journal of one recipe that is being edited. It has no file until there is an edit; it goes on a save and on a clean end.
#[derive(Debug)]
pub struct Journal {
    places: Vec<PathBuf>,
    text: String,
    file: Option<(File, PathBuf)>,
    written: usize,
}

impl Journal {
    /// The journal of a recipe whose file holds `text`. One that an earlier run left behind stays until it is gone on with or
    /// forgotten: see [`left_behind`].
    pub fn of(recipe: &Path, aside: &Aside, text: &str) -> Self {
        Self { places: aside.places(recipe, BEHIND), text: text.to_owned(), file: None, written: 0 }
    }

    /// Writes an edit down and waits until it is on the disk.
    ///
    /// # Errors
    /// What the system complains about; the edit is then not in the journal.
    pub fn append(&mut self, edit: &Edit, now: SystemTime) -> io::Result<()> {
        if self.file.is_none() {
            self.file = Some(self.begin(&head(&self.text, now)?)?);
        }
        let Some((file, _)) = &mut self.file else { return Ok(()) };
        // In one write, so that a kill leaves a whole line or a torn last one.
        file.write_all(line(self.written + 1, edit, now)?.as_bytes())?;
        file.sync_data()?;
        self.written += 1;
        Ok(())
    }

    /// Goes on where another run was killed: its edits stand in a journal of this process, whole, before its own goes.
    ///
    /// # Errors
    /// What the system complains about; what was left behind is then still there.
    pub fn go_on(&mut self, recovered: Recovered, now: SystemTime) -> io::Result<()> {
        let mut text = head(&recovered.text, now)?;
        for (index, edit) in recovered.edits.iter().enumerate() {
            text += &line(index + 1, edit, now)?;
        }
        self.file = Some(self.begin(&text)?);
        self.text.clone_from(&recovered.text);
        self.written = recovered.edits.len();
        recovered.forget()
    }

    /// The recipe was saved with this text: what was written down so far is done with.
    ///
    /// # Errors
    /// What the system complains about when the file is removed.
    pub fn saved(&mut self, text: &str) -> io::Result<()> {
        text.clone_into(&mut self.text);
        self.remove()
    }

    /// A clean end, or edits given up on purpose: nothing is left behind.
    ///
    /// # Errors
    /// What the system complains about when the file is removed.
    pub fn end(mut self) -> io::Result<()> {
        self.remove()
    }

    fn remove(&mut self) -> io::Result<()> {
        self.written = 0;
        match self.file.take() {
            Some((file, place)) => {
                drop(file);
                fs::remove_file(place)
            }
            None => Ok(()),
        }
    }

    /// Makes the file with its first lines, in the first place that can be written. No other journal is replaced, for it may hold
    /// edits that nobody saved.
    fn begin(&self, text: &str) -> io::Result<(File, PathBuf)> {
        let mut refused = io::Error::from(io::ErrorKind::NotFound);
        for (index, place) in self.places.iter().enumerate() {
            let free = free(place);
            match ready(place, index).and_then(|()| make(&free, text)) {
                Ok(file) => return Ok((file, free)),
                Err(error) if is_of_place(&error) => refused = error,
                Err(error) => return Err(error),
            }
        }
        Err(refused)
    }
}

fn head(text: &str, now: SystemTime) -> io::Result<String> {
    let head = HeadJson { version: VERSION, holder: Holder::this_process(now), text: text.to_owned() };
    Ok(serde_json::to_string(&head)? + "\n")
}

fn line(number: usize, edit: &Edit, now: SystemTime) -> io::Result<String> {
    let at = now.duration_since(UNIX_EPOCH).unwrap_or_default().as_secs();
    Ok(serde_json::to_string(&LineJson { number, at, edit: edit.into() })? + "\n")
}

/// The place itself, or one with a number behind it if a journal stands there.
fn free(place: &Path) -> PathBuf {
    let numbered = (1..).map(|number: u32| beside(place, &format!(".{number}")));
    std::iter::once(place.to_owned()).chain(numbered).find(|place| !place.exists()).unwrap_or_else(|| place.to_owned())
}

/// The file takes its name only when its first lines are on the disk, so that one found is never without.
fn make(place: &Path, text: &str) -> io::Result<File> {
    let part = beside(place, &format!(".{}.part", std::process::id()));
    let made = (|| {
        let mut file = OpenOptions::new().create(true).truncate(true).write(true).open(&part)?;
        file.write_all(text.as_bytes())?;
        file.sync_all()?;
        fs::rename(&part, place)?;
        if let Some(folder) = place.parent() {
            let _ = File::open(folder).and_then(|folder| folder.sync_all());
        }
        Ok(file)
    })();
    if made.is_err() {
        let _ = fs::remove_file(&part);
    }
    made
}

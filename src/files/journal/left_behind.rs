use std::fs;
use std::path::{Path, PathBuf};
use std::time::{Duration, SystemTime, UNIX_EPOCH};

use crate::arm::Arm;
use crate::files::aside::Aside;
use crate::files::holder::{Holder, Runs};
use crate::files::save::Content;
use crate::files::{Rejected, read_recipe};
use crate::program::{Edit, Recipe};

use super::{BEHIND, HeadJson, LineJson, VERSION};

/// What a run that did not end cleanly left behind: edits that were never saved.
#[derive(Debug, Clone)]
pub struct Recovered {
    /// The edits in their order.
    pub edits: Vec<Edit>,
    /// Who made them.
    pub holder: Holder,
    /// When the last one was made.
    pub when: SystemTime,
    /// The text that they start from.
    pub text: String,
    /// How many lines at the end can't be read; more than one means that more than the last edit is lost.
    pub lost: usize,
    place: PathBuf,
}

/// What an earlier run left behind for a recipe, the newest if there are several; `None` if nothing, or if all those runs are
/// still going.
pub fn left_behind(recipe: &Path, aside: &Aside) -> Option<Recovered> {
    aside
        .places(recipe, BEHIND)
        .iter()
        .flat_map(|place| numbered(place))
        .filter_map(|place| read(&place))
        .max_by_key(|found| found.when)
}

/// The files that stand in a place: under its name, or with a number behind that.
fn numbered(place: &Path) -> Vec<PathBuf> {
    let (Some(folder), Some(name)) = (place.parent(), place.file_name()) else { return Vec::new() };
    let is_ours = |other: &std::ffi::OsStr| {
        let rest = other.as_encoded_bytes().strip_prefix(name.as_encoded_bytes());
        rest.is_some_and(|rest| rest.is_empty() || (rest[0] == b'.' && rest[1..].iter().all(u8::is_ascii_digit)))
    };
    let entries = fs::read_dir(folder).into_iter().flatten().flatten();
    entries.filter(|entry| is_ours(&entry.file_name())).map(|entry| entry.path()).collect()
}

fn read(place: &Path) -> Option<Recovered> {
    let bytes = fs::read(place).ok()?;
    let mut lines = bytes.split(|byte| *byte == b'\n').filter(|line| !line.is_empty());
    let head: HeadJson = serde_json::from_slice(lines.next()?).ok()?;
    if head.version != VERSION || head.holder.runs() == Runs::Yes {
        return None;
    }
    let mut edits = Vec::new();
    let mut at = head.holder.since;
    let mut lost = 0;
    for line in lines {
        let read = serde_json::from_slice::<LineJson>(line).ok().filter(|line| lost == 0 && line.number == edits.len() + 1);
        match read.and_then(|line| Some((line.at, Edit::try_from(line.edit).ok()?))) {
            Some((when, edit)) => {
                at = when;
                edits.push(edit);
            }
            None => lost += 1,
        }
    }
    let when = UNIX_EPOCH + Duration::from_secs(at);
    let found = Recovered { edits, holder: head.holder, when, text: head.text, lost, place: place.to_owned() };
    (!found.edits.is_empty() || found.lost > 0).then_some(found)
}

impl Recovered {
    /// Whether the recipe's file still holds the text that the edits start from. If not, somebody changed it since, and the edits
    /// belong to another recipe than the one on the disk.
    pub fn fits(&self, text_on_disk: &str) -> bool {
        Content::of(self.text.as_bytes()) == Content::of(text_on_disk.as_bytes())
    }

    /// The recipe that the edits start from, and as it was after the last of them.
    ///
    /// # Errors
    /// What is wrong with the text that they start from, if the arm was changed so that it no longer goes with it.
    pub fn recipes(&self, source: &str, arm: &Arm) -> Result<(Recipe, Recipe), Rejected> {
        let before = read_recipe(&self.text, source, arm)?;
        let mut after = before.clone();
        for edit in &self.edits {
            // An edit that names a waypoint that is not there ends it: those after it speak of another recipe.
            if edit.apply(&mut after).is_err() {
                break;
            }
        }
        Ok((before, after))
    }

    /// Gives it up for good: for one who was asked and does not want it.
    ///
    /// # Errors
    /// What the system complains about.
    pub fn forget(self) -> std::io::Result<()> {
        fs::remove_file(self.place)
    }
}

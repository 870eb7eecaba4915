use std::io;
use std::path::{Path, PathBuf};

use crate::review::Record;
use crate::seal::Digest;

use super::sources::{MOST_PEOPLE, is_there, no_link, read_text, set_aside, signature_path};
use super::{NoKey, NotSaved, Rejected, read_record, record_text, write, write_anyway};

/// What was written of a record.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Kept {
    /// The seal of the record.
    pub seal: Digest,
    /// Where an earlier record of other content was set aside.
    pub aside: Option<PathBuf>,
    /// Where the signature stands.
    pub signature: Option<PathBuf>,
}

/// Why a record was not written.
#[derive(Debug, thiserror::Error)]
pub enum NotKept {
    /// There are as many names under it as can be.
    #[error("there are {MOST_PEOPLE} names under this record already, and no more can be")]
    TooMany,
    /// The record that is there can't be read.
    #[error("the record that is there can't be read; move it away first: {0}")]
    Earlier(#[from] Rejected),
    /// The earlier record can't be set aside.
    #[error("the earlier record can't be set aside: {0}")]
    Aside(#[from] io::Error),
    /// The key did not sign.
    #[error(transparent)]
    NotSigned(#[from] NoKey),
    /// The system or the file forbids it.
    #[error(transparent)]
    NotSaved(#[from] NotSaved),
}

/// The record that stands at a place, if one does.
///
/// # Errors
/// That it is a link, or everything that is wrong with it.
pub fn earlier_record(place: &Path) -> Result<Option<Record>, Rejected> {
    if !is_there(place) {
        return Ok(None);
    }
    no_link(place)?;
    read_record(&read_text(place)?).map(Some)
}

/// Writes a record whose last person has just put their name under it, and their signature. A new one sets an earlier record of other
/// content aside under its seal code, so that nothing is lost.
///
/// # Errors
/// [`NotKept`].
pub fn keep_record(place: &Path, record: &Record, is_new: bool, signature: Option<&str>) -> Result<Kept, NotKept> {
    let index = record.people.len().saturating_sub(1);
    if index >= MOST_PEOPLE {
        return Err(NotKept::TooMany);
    }
    let text = record_text(record);
    let mut kept = Kept { seal: Digest::of(text.as_bytes()), aside: None, signature: None };
    if is_new {
        if let Some(before) = earlier_record(place)? {
            kept.aside = Some(set_aside(place, &Digest::of(record_text(&before).as_bytes()))?);
        }
        write(place, &text, None)?;
    } else {
        write_anyway(place, &text)?;
    }
    if let Some(armoured) = signature {
        let beside = signature_path(place, index);
        write(&beside, armoured, None)?;
        kept.signature = Some(beside);
    }
    Ok(kept)
}

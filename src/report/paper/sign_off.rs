use crate::review::Record;
use crate::seal::Digest;

use super::Report;
use super::block::{Block, table};

/// Whether somebody signed the recipe off, and whether that still stands.
#[derive(Debug, Clone)]
pub enum Standing {
    /// No record stands beside it; why, in a sentence.
    Nothing(String),
    /// One does.
    Recorded {
        /// Whether it stands: nothing changed, and no signature is bad or missing.
        stands: bool,
        /// What was found about it, a line each.
        told: Vec<String>,
        /// The record with the hash of its text, where it could be read.
        record: Option<(Box<Record>, Digest)>,
    },
}

impl Standing {
    /// How it stands, in a few words.
    pub(super) fn in_brief(&self) -> String {
        match self {
            Self::Nothing(_) => "none: no record".to_owned(),
            Self::Recorded { stands: true, record, .. } => match record.as_ref().and_then(|(record, _)| record.people.last()) {
                Some(person) => format!("the record stands, {} {} on {}", person.role.words(), person.name, person.date),
                None => "the record stands".to_owned(),
            },
            Self::Recorded { stands: false, .. } => "there is a record, and it does not stand".to_owned(),
        }
    }
}

/// The state of the sign-off.
pub(super) fn blocks(report: &Report) -> Vec<Block> {
    let mut blocks = vec![Block::Section("sign-off", "Sign-off")];
    let (stands, told, record) = match &report.standing {
        Standing::Nothing(why) => {
            blocks.push(Block::Says(format!("Nobody has signed this recipe off. {why}")));
            return blocks;
        }
        Standing::Recorded { stands, told, record } => (stands, told, record),
    };
    let seal = record.as_ref().map_or(String::new(), |(_, digest)| format!(" Its seal is {}.", digest.code()));
    let sentence = if *stands { "The record beside the recipe stands." } else { "The record beside the recipe does NOT stand." };
    blocks.push(Block::Says(format!("{sentence}{seal} It says what was judged and is no leave to run an arm.")));
    blocks.push(Block::List(told.iter().map(|line| line.trim().to_owned()).collect()));
    let Some((record, _)) = record else { return blocks };
    let people = record
        .people
        .iter()
        .map(|person| [person.role.words().to_owned(), person.name.clone(), person.date.to_string(), person.note.clone()]);
    blocks.push(Block::Table(table("Who stands for it", ["as", "name", "on", "note"], [false; 4], None, people)));
    if !record.accepted.is_empty() {
        let rows = record.accepted.iter().map(|known| {
            [known.matter.to.clone(), known.says.clone(), known.reason.clone(), format!("{}, {}", known.by, known.on)]
        });
        let heads = ["segment to", "finding", "accepted because", "by"];
        blocks.push(Block::Table(table("Findings that were accepted", heads, [false; 4], None, rows)));
    }
    if !record.settled.is_empty() {
        let rows =
            record.settled.iter().map(|known| [known.says.clone(), known.reason.clone(), format!("{}, {}", known.by, known.on)]);
        let heads = ["doubt", "what was found", "by"];
        blocks.push(Block::Table(table("Doubts that were looked into", heads, [false; 3], None, rows)));
    }
    blocks
}

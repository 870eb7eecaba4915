//! The sign-off record: what was judged, by which limits, what came of it, which findings were accepted by whom and why, and who
//! stands for it. Plain data; `files` writes and reads it.

mod made;
mod person;
mod tightest;

pub(super) use made::doubt_keys;
pub use made::{Earlier, Sources};
pub use person::{Date, Person, Role};

use crate::checks::{Check, Verdict};
use crate::seal::{Digest, Item};

/// A file that was read for a record.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SealedFile {
    /// Its path: a recipe's is its name alone, since the record stands beside it; an arm file's is as the recipe writes it.
    pub path: String,
    /// The hash of its bytes.
    pub digest: Digest,
}

/// What one check found on one segment, in words and figures as they are told: rooms are rounded down to a tenth of a percent.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SealedCheck {
    /// Which check.
    pub check: Check,
    /// The joint with the least room, where the check has one a joint; else empty.
    pub joint: String,
    /// The verdict.
    pub verdict: Verdict,
    /// The least room that was seen; empty where a check has none.
    pub room: String,
    /// How far that is proved: the proved room, or `flagged`, `summed up`, `open`.
    pub proved: String,
}

/// What a record says of one segment.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SealedSegment {
    /// The waypoint that it arrives at, or passes.
    pub to: String,
    /// Whether it is the blend past that waypoint.
    pub blend: bool,
    /// Its verdict.
    pub verdict: Verdict,
    /// Since when it was signed as it is; an unchanged segment keeps the date of the earlier record.
    pub since: Date,
    /// The hash of all that its verdict depends on.
    pub digest: Digest,
    /// The override up to which it is clear, such as `100 %`, or `never`.
    pub clear_to: String,
    /// Every check that was judged.
    pub checks: Vec<SealedCheck>,
}

impl SealedSegment {
    /// How people tell it from others: `"on shelf"`, or `"past gate", fly-by`.
    pub fn label(&self) -> String {
        if self.blend { format!("\"{}\", fly-by", self.to) } else { format!("\"{}\"", self.to) }
    }
}

/// What is judged over the whole cycle: torque, and cables wound by the wrist.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SealedCycle {
    /// The hash of all that it depends on.
    pub digest: Digest,
    /// What was found, check by check; none where nothing was judged.
    pub checks: Vec<SealedCheck>,
}

/// Where a joint has the least room over its reserve on the whole program.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Tightest {
    /// The joint.
    pub joint: String,
    /// The segment, as [`SealedSegment::label`] writes it.
    pub segment: String,
    /// Which check.
    pub check: Check,
    /// The room there.
    pub room: String,
}

/// Which finding is meant: all flagged stretches of one segment by one check of one joint are one matter.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord)]
pub struct Matter {
    /// The waypoint that its segment arrives at.
    pub to: String,
    /// Whether it is on the blend past that waypoint.
    pub blend: bool,
    /// Which check.
    pub check: Check,
    /// The joint; empty where the check has none.
    pub joint: String,
}

/// A finding that somebody accepted.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Accepted {
    /// Which one.
    pub matter: Matter,
    /// What it says: the title of its explanation.
    pub says: String,
    /// Why it is accepted.
    pub reason: String,
    /// Who accepted it.
    pub by: String,
    /// When.
    pub on: Date,
}

/// A doubt that somebody looked into.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Settled {
    /// A short name, such as `long-way: on shelf`.
    pub key: String,
    /// What it says.
    pub says: String,
    /// What the person found.
    pub reason: String,
    /// Who.
    pub by: String,
    /// When.
    pub on: Date,
}

/// A datum that the judgement rests on.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Datum {
    /// What it is, such as `tool "gripper"`.
    pub of: String,
    /// Its figures, as the file has them.
    pub value: String,
    /// Where they stand: file and line.
    pub at: String,
    /// Whether a person confirmed it by itself.
    pub confirmed: bool,
}

/// The plan of the first run, in brief.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SealedRun {
    /// The highest override at which all is clear, or `never`.
    pub highest: String,
    /// Each stage with its verdict.
    pub stages: Vec<(String, Verdict)>,
}

/// A sign-off record.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Record {
    /// The version of the program that made it.
    pub program: String,
    /// The recipe's name.
    pub name: String,
    /// The verdict of the whole.
    pub verdict: Verdict,
    /// The recipe.
    pub recipe: SealedFile,
    /// Its arm.
    pub arm: SealedFile,
    /// What both say, freed of layout. The acceptance criteria are among it.
    pub content: Vec<Item>,
    /// Every segment.
    pub segments: Vec<SealedSegment>,
    /// The cycle.
    pub cycle: SealedCycle,
    /// Where every joint has least room.
    pub tightest: Vec<Tightest>,
    /// The findings that were accepted.
    pub accepted: Vec<Accepted>,
    /// The doubts that were looked into.
    pub settled: Vec<Settled>,
    /// What the judgement rests on.
    pub data: Vec<Datum>,
    /// The first run.
    pub first_run: SealedRun,
    /// What was not checked.
    pub not_checked: Vec<String>,
    /// What a person minds.
    pub cautions: Vec<String>,
    /// Those who stand for it, in the order in which they did.
    pub people: Vec<Person>,
}

impl Record {
    /// Whether two records say the same but for who stands for them.
    pub fn says_as(&self, other: &Self) -> bool {
        let bare = |record: &Self| Self { people: Vec::new(), ..record.clone() };
        bare(self) == bare(other)
    }
}

//! Whether a record still stands: what changed since, and whether the same content still yields the same results.

mod cell;
mod override_set;
mod segments;

pub use cell::{CellPoint, CellTable, CellTool, MASS_SLACK, Reported, Slack, compare_points, compare_typed};
pub use override_set::compare_override;
pub use segments::{SegmentChange, segment_changes};

use crate::checks::Check;
use crate::seal::{Change, changes, content_digest};

use super::sealed::{Earlier, Record, SealedCheck, SealedSegment, Sources};
use super::sign_off::{Around, SignOff};
use super::{FirstRun, Judged, check_words};

/// What became of a record.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Outcome {
    /// Content and results are what they were.
    Stands,
    /// The content is another one.
    ContentChanged,
    /// The content is the same, but this version of the program finds something else than the one that made the record.
    OtherVersion,
    /// The content is the same and so is the version, but the record says something else than the program finds.
    ResultsDiffer,
}

/// A record held against what stands in the files today.
#[derive(Debug, Clone, PartialEq)]
pub struct Compared {
    /// What became of it.
    pub outcome: Outcome,
    /// Files whose bytes changed.
    pub other_bytes: Vec<String>,
    /// What changed in the content.
    pub changes: Vec<Change>,
    /// Every segment of today that changed, and those that are gone.
    pub segments: Vec<SegmentChange>,
    /// Segments that stand as they were signed, by their label.
    pub standing: Vec<String>,
    /// What the record says and what was found instead, a line each.
    pub differences: Vec<String>,
}

/// Holds a record against a recipe judged anew.
pub fn compare_record(record: &Record, judged: &Judged, sources: &Sources, run: &FirstRun) -> Compared {
    let date = record.people.first().map_or(super::Date::after_1970(0), |person| person.date);
    let now = Record::of(judged, sources, run, &Earlier::of(record), date);
    let other_bytes = [(&record.recipe, &now.recipe), (&record.arm, &now.arm)]
        .into_iter()
        .filter(|(before, after)| before.digest != after.digest)
        .map(|(_, after)| after.path.clone())
        .collect();
    let changes = changes(&record.content, &now.content);
    let same_content = content_digest(&record.content) == content_digest(&now.content);
    let differences = if same_content { differences(record, &now, judged, sources) } else { Vec::new() };
    let outcome = match (same_content, differences.is_empty()) {
        (false, _) => Outcome::ContentChanged,
        (true, true) => Outcome::Stands,
        (true, false) if record.program != now.program => Outcome::OtherVersion,
        (true, false) => Outcome::ResultsDiffer,
    };
    let (segments, standing) = if same_content {
        (Vec::new(), now.segments.iter().map(SealedSegment::label).collect())
    } else {
        segment_changes(&record.segments, &now.segments)
    };
    Compared { outcome, other_bytes, changes, segments, standing, differences }
}

/// What a record says and what is found instead in the same content. Lines of files are left out, since a comment moves them.
fn differences(record: &Record, now: &Record, judged: &Judged, sources: &Sources) -> Vec<String> {
    let mut told = Vec::new();
    let mut differ = |what: &str, before: &str, after: &str| {
        if before != after {
            told.push(format!("{what}: the record says {}, found is {}", shown(before), shown(after)));
        }
    };
    differ("recipe's name", &record.name, &now.name);
    differ("recipe's file", &record.recipe.path, &now.recipe.path);
    differ("arm file", &record.arm.path, &now.arm.path);
    differ("verdict", record.verdict.word(), now.verdict.word());
    differ("clear up to", &record.first_run.highest, &now.first_run.highest);
    differ("stages", &format!("{:?}", record.first_run.stages), &format!("{:?}", now.first_run.stages));
    differ("tightest", &format!("{:?}", record.tightest), &format!("{:?}", now.tightest));
    differ("not checked", &record.not_checked.join(" "), &now.not_checked.join(" "));
    differ("cautions", &record.cautions.join(" "), &now.cautions.join(" "));
    differ("number of segments", &record.segments.len().to_string(), &now.segments.len().to_string());
    for (before, after) in record.segments.iter().zip(&now.segments) {
        let what = format!("segment to {}", after.label());
        differ(&what, &before.label(), &after.label());
        differ(&what, before.verdict.word(), after.verdict.word());
        differ(&format!("{what}, clear up to"), &before.clear_to, &after.clear_to);
        let check = |check: Check, of: &SealedSegment| {
            of.checks.iter().find(|found| found.check == check).map_or(String::new(), check_text)
        };
        for each in Check::ALL {
            differ(&format!("{what}, {}", check_words(each)), &check(each, before), &check(each, after));
        }
    }
    for each in Check::ALL.into_iter().filter(|check| check.is_of_cycle()) {
        let of_cycle =
            |record: &Record| record.cycle.checks.iter().find(|found| found.check == each).map_or(String::new(), check_text);
        differ(check_words(each), &of_cycle(record), &of_cycle(now));
    }
    let mut sign_off = SignOff::of(judged, sources);
    let data =
        |data: &[super::Datum]| data.iter().map(|datum| format!("{} {}", datum.of, datum.value)).collect::<Vec<_>>().join("; ");
    differ("data", &data(&record.data), &data(sign_off.data()));
    sign_off.take_over(record);
    let decided = sign_off.decided(now.clone());
    let matters =
        |record: &Record| record.accepted.iter().map(|known| format!("{:?}", known.matter)).collect::<Vec<_>>().join("; ");
    differ("accepted findings", &matters(record), &matters(&decided));
    let doubts = |record: &Record| record.settled.iter().map(|known| known.key.clone()).collect::<Vec<_>>().join("; ");
    differ("doubts looked into", &doubts(record), &doubts(&decided));
    if let Err(hindrances) = sign_off.can_sign(Around::default()) {
        told.extend(hindrances.iter().map(|hindrance| format!("the record could not have been signed: {hindrance}")));
    }
    told
}

fn shown(text: &str) -> String {
    if text.is_empty() { "nothing".to_owned() } else { text.to_owned() }
}

/// A sealed check in words.
pub(super) fn check_text(check: &SealedCheck) -> String {
    let joint = if check.joint.is_empty() { String::new() } else { format!(" at {}", check.joint) };
    let room = if check.room.is_empty() { String::new() } else { format!(", room {}", check.room) };
    format!("{}{joint}{room} ({})", check.verdict.word(), check.proved)
}

use std::collections::BTreeSet;

use crate::checks::Verdict;
use crate::review::check_words;
use crate::review::sealed::{SealedCheck, SealedSegment};

/// What became of a segment that is not as it was.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct SegmentChange {
    /// How people tell it from others.
    pub label: String,
    /// Its verdict before, with the room of the check that is nearest to its reserve after; `None` for a new one.
    pub before: Option<(Verdict, String)>,
    /// The same after; `None` where it is gone.
    pub after: Option<(Verdict, String)>,
}

impl SegmentChange {
    /// In one line: `to "on shelf": tight before (room 12.0 %, holding J2), clear now (room 24.1 %, holding J2)`.
    pub fn words(&self) -> String {
        let told = |(verdict, room): &(Verdict, String), when: &str| {
            let room = if room.is_empty() { String::new() } else { format!(" ({room})") };
            format!("{} {when}{room}", verdict.word())
        };
        match (&self.before, &self.after) {
            (Some(before), Some(after)) => format!("to {}: {}, {}", self.label, told(before, "before"), told(after, "now")),
            (None, Some(after)) => format!("to {}: new, {}", self.label, told(after, "now")),
            (Some(before), None) => format!("to {}: gone, {}", self.label, told(before, "before")),
            (None, None) => self.label.clone(),
        }
    }
}

/// The segments that are not as they were, in the order of today and those that are gone after them; then the labels of those that
/// stand. A segment stands where everything its verdict depends on is the same, whatever its number.
pub fn segment_changes(before: &[SealedSegment], after: &[SealedSegment]) -> (Vec<SegmentChange>, Vec<String>) {
    let known: BTreeSet<_> = before.iter().map(|segment| (segment.digest, segment.verdict)).collect();
    let labels: BTreeSet<String> = after.iter().map(SealedSegment::label).collect();
    let mut changed = Vec::new();
    let mut standing = Vec::new();
    for segment in after {
        if known.contains(&(segment.digest, segment.verdict)) {
            standing.push(segment.label());
            continue;
        }
        let old = before.iter().find(|old| old.label() == segment.label());
        // Told of both is the check in which the room differs most, so that the change shows.
        let [then, now] = telling(old, Some(segment));
        changed.push(SegmentChange {
            label: segment.label(),
            before: old.map(|old| (old.verdict, then)),
            after: Some((segment.verdict, now)),
        });
    }
    for old in before.iter().filter(|old| !labels.contains(&old.label())) {
        let [then, _] = telling(Some(old), None);
        changed.push(SegmentChange { label: old.label(), before: Some((old.verdict, then)), after: None });
    }
    (changed, standing)
}

/// Percent of a room as it is written; none for what has no figure.
fn percent(check: &SealedCheck) -> Option<f64> {
    check.room.strip_suffix(" %")?.parse().ok()
}

/// The check to tell of a change: the worst verdict of either side, then the largest change of room.
fn telling(before: Option<&SealedSegment>, after: Option<&SealedSegment>) -> [String; 2] {
    let of = |segment: Option<&SealedSegment>, key| -> Option<SealedCheck> {
        segment?.checks.iter().find(|check: &&SealedCheck| check.check == key).cloned()
    };
    let rank = |key| {
        let (old, new) = (of(before, key), of(after, key));
        let verdict = old.iter().chain(&new).map(|check| check.verdict).max();
        let rooms = old.as_ref().and_then(percent).zip(new.as_ref().and_then(percent));
        (verdict, rooms.map_or(0.0, |(old, new)| (old - new).abs()))
    };
    let told = crate::checks::Check::ALL.into_iter().max_by(|a, b| {
        let ((verdict_a, by_a), (verdict_b, by_b)) = (rank(*a), rank(*b));
        // Of equals the one that stands first.
        verdict_a.cmp(&verdict_b).then(by_a.total_cmp(&by_b)).then(b.cmp(a))
    });
    [before, after].map(|segment| {
        told.and_then(|key| of(segment, key)).filter(|check| !check.room.is_empty()).map_or(String::new(), |check| {
            let joint = if check.joint.is_empty() { String::new() } else { format!(" {}", check.joint) };
            format!("room {}, {}{joint}", check.room, check_words(check.check))
        })
    })
}

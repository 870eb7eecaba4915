use crate::checks::{Check, Verdict};
use crate::review::{
    Date, Earlier, Judged, Record, SEGMENT_HEADS, SealedCheck, SealedSegment, check_brief, check_words, proof_summary, segment_row,
};

use super::Report;
use super::block::{Block, Cell, Column, Table, table};
use super::drawings;

/// Segments without a finding whose nearest check is drawn, those with least room over their reserve.
const MOST_DRAWN: usize = 24;

/// Every segment: what it was asked, its verdict, and the proved room of every check.
pub(super) fn blocks(report: &Report) -> Vec<Block> {
    let judged = report.judged;
    // What a record says of the segments is what is told here; its day is of no matter.
    let record = Record::of(judged, report.sources, report.run, &Earlier::default(), Date::after_1970(0));
    let rows = (0..judged.plan.segments.len()).map(|index| {
        let [_, rest @ ..] = segment_row(judged, index);
        let [to, how, asked, verdict, nearest] = rest;
        [judged.plan.segments[index].label(), to, how, asked, verdict, nearest]
    });
    let figures = [true, false, false, true, false, false];
    let mut blocks = vec![
        Block::Section("segments", "Segments"),
        Block::Table(table("Every segment, and what is nearest to its reserve", SEGMENT_HEADS, figures, Some(4), rows)),
        Block::Table(rooms(judged, &record)),
        Block::Says(format!(
            "A figure is the room that is proved for every instant of the segment, rounded down. Where a check is flagged it is the \
             least room that was seen, with its verdict. Singularity is proved as a yes or no. A dash: not judged there. Proof: {}",
            proof_summary(judged)
        )),
        Block::Table(tightest(&record)),
    ];
    blocks.extend(cycle(&record));
    let mut spare: Vec<(usize, f64)> = (0..judged.plan.segments.len())
        .filter(|index| judged.survey.segments[*index].findings.is_empty())
        .filter_map(|index| {
            let (_, peak) = judged.survey.segments[index].nearest()?;
            Some((index, peak.room.as_fraction() - peak.reserve.as_fraction()))
        })
        .collect();
    spare.sort_by(|a, b| a.1.total_cmp(&b.1).then(a.0.cmp(&b.0)));
    let left_out = spare.len().saturating_sub(MOST_DRAWN);
    spare.truncate(MOST_DRAWN);
    spare.sort_by_key(|(index, _)| *index);
    let drawn: Vec<_> = spare.into_iter().filter_map(|(index, _)| drawings::of_segment(judged, index)).collect();
    if !drawn.is_empty() {
        let others = if left_out > 0 { format!("; {left_out} more, with more room, are not drawn") } else { String::new() };
        let heading = format!("Segments without a finding, where each is nearest to its reserve{others}");
        blocks.push(Block::Drawings(Some(heading), drawn));
    }
    blocks
}

/// The proved room of every check that is judged on some segment.
fn rooms(judged: &Judged, record: &Record) -> Table {
    let checks: Vec<Check> = Check::ALL
        .into_iter()
        .filter(|check| record.segments.iter().any(|segment| segment.checks.iter().any(|found| found.check == *check)))
        .collect();
    let columns = std::iter::once(("#", true)).chain(checks.iter().map(|check| (check_brief(*check), true)));
    let columns = columns.map(|(words, figures)| Column { words, figures }).collect();
    let row = |(index, segment): (usize, &SealedSegment)| {
        let found = |check: &Check| segment.checks.iter().find(|found| found.check == *check);
        let cells = checks.iter().map(|check| found(check).map_or(Cell::Text("–".to_owned()), room));
        std::iter::once(Cell::Text(judged.plan.segments[index].label())).chain(cells).collect()
    };
    let rows = record.segments.iter().enumerate().map(row).collect();
    Table { caption: "Proved room of every check, segment by segment".to_owned(), columns, rows }
}

fn room(found: &SealedCheck) -> Cell {
    match found.verdict {
        // A yes or no: what is kept as its room is only what its limit asks.
        Verdict::Clear if found.check == Check::Singular => Cell::Text("proved".to_owned()),
        Verdict::Clear => Cell::Text(found.proved.clone()),
        Verdict::Unproven => Cell::verdict(Verdict::Unproven),
        verdict => Cell::Verdict(verdict, format!("{} {}", verdict.word(), found.room).trim_end().to_owned()),
    }
}

fn tightest(record: &Record) -> Table {
    let rows = record.tightest.iter();
    let rows =
        rows.map(|tight| [tight.joint.clone(), tight.room.clone(), check_words(tight.check).to_owned(), tight.segment.clone()]);
    table("Every joint where it is tightest", ["joint", "room", "check", "segment to"], [false, true, false, false], None, rows)
}

/// What is judged over the cycle as a whole.
fn cycle(record: &Record) -> impl Iterator<Item = Block> {
    record.cycle.checks.iter().map(|found| {
        let joint = if found.joint.is_empty() { String::new() } else { format!(", nearest is {}", found.joint) };
        let room = if found.room.is_empty() { String::new() } else { format!(" with room {}", found.room) };
        let mut name = check_words(found.check).to_owned();
        name[..1].make_ascii_uppercase();
        Block::Says(format!("{name}: {}{joint}{room} ({}).", found.verdict.word(), found.proved))
    })
}

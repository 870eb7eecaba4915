use crate::review::{
    FIRST_RUN_CAUTIONS, fastest_text, first_run_text, reduced_speed_text, run_rows, stage_rows, stop_rows, stopping_text,
};

use super::Report;
use super::block::{Block, Table, table};

/// The plan of the first run, as `plan` tells it.
pub(super) fn blocks(report: &Report) -> Vec<Block> {
    let (judged, run, reduced) = (report.judged, report.run, report.reduced);
    let mut blocks = vec![
        Block::Section("first-run", "First run"),
        Block::Says(first_run_text(judged, run).join(" ")),
        Block::Table(below("Stages", stage_rows(judged, run), ["override", "verdict", "not clear"], [true, false, false], Some(1))),
    ];
    let heads = ["#", "to", "clear to", "held back by", "TCP", "flange", "reduced at"];
    let figures = [true, false, true, false, true, true, true];
    blocks.push(Block::Table(below("How fast each segment is clear", run_rows(judged, run, reduced), heads, figures, None)));
    let fastest = fastest_text(judged, reduced);
    blocks.extend((!fastest.is_empty()).then_some(Block::Says(fastest)));
    blocks.push(Block::Says(format!("Reduced speed: {}", reduced_speed_text(judged, reduced).join(" "))));
    let stops = stop_rows(judged);
    if stops.len() > 1 {
        let heads = ["#", "to", "TCP runs on", "at", "farthest joint", "rests after"];
        let figures = [true, false, true, true, false, true];
        blocks.push(Block::Table(below("What a stop asks for at full override", stops, heads, figures, None)));
    }
    blocks.push(Block::Says(format!("Stopping: {}", stopping_text(judged))));
    blocks.push(Block::Part("before".to_owned(), "Before and during the first run".to_owned()));
    blocks.push(Block::Steps(FIRST_RUN_CAUTIONS.map(str::to_owned).to_vec()));
    blocks
}

/// A table of rows that stand below their headings.
fn below<const N: usize>(
    caption: &str,
    rows: Vec<[String; N]>,
    heads: [&'static str; N],
    figures: [bool; N],
    verdict: Option<usize>,
) -> Table {
    debug_assert_eq!(rows.first().map(|row| row.each_ref().map(String::as_str)), Some(heads));
    table(caption, heads, figures, verdict, rows.into_iter().skip(1))
}

use crate::checks::{Check, Finding, Kind};
use crate::review::{Judged, Paragraph, check_words, explain};
use crate::units::{Measure, Seconds};

use super::Report;
use super::block::{Block, Cell, Column, Labelled, Table};
use super::drawings;

/// Findings that are drawn, the worst ones: more would bury the words.
const MOST_DRAWN: usize = 16;

/// All findings: in a table, then each with why and what would settle it.
pub(super) fn blocks(report: &Report) -> Vec<Block> {
    let judged = report.judged;
    let findings = &judged.survey.findings;
    let mut blocks = vec![Block::Section("findings", "Findings")];
    if findings.is_empty() {
        blocks.push(Block::Says("None: every check that was judged leaves its reserve on every segment.".to_owned()));
        return blocks;
    }
    blocks.push(Block::Table(listed(judged)));
    if report.remedies.is_none() {
        blocks.push(Block::Says("What would settle them was not tried for this report.".to_owned()));
    }
    if findings.len() > MOST_DRAWN {
        blocks.push(Block::Says(format!("The {MOST_DRAWN} worst of them are drawn.")));
    }
    for (index, finding) in findings.iter().enumerate() {
        let told = explain(judged, finding);
        blocks.push(Block::Part(format!("finding-{}", index + 1), format!("{}. {}", index + 1, told.title)));
        if index < MOST_DRAWN {
            let drawn = drawings::of_finding(judged, finding);
            blocks.extend((!drawn.is_empty()).then_some(Block::Drawings(None, drawn)));
        }
        let remedies = report.remedies.iter().filter_map(|all| all.get(index)).flatten().cloned();
        blocks.push(Block::Labelled(told.paragraphs.into_iter().chain(remedies).map(labelled).collect()));
    }
    blocks
}

fn labelled(paragraph: Paragraph) -> Labelled {
    Labelled { label: paragraph.label.words(), text: paragraph.text, bars: paragraph.bars }
}

fn listed(judged: &Judged) -> Table {
    let columns = [
        ("#", true),
        ("verdict", false),
        ("segment", false),
        ("check", false),
        ("joint", false),
        ("value", true),
        ("limit", true),
        ("room", true),
        ("reserve", true),
        ("worst at", true),
    ];
    let columns = columns.into_iter().map(|(words, figures)| Column { words, figures }).collect();
    let rows = judged.survey.findings.iter().enumerate().map(|(index, finding)| row(judged, index, finding));
    Table { caption: "All findings, the worst first".to_owned(), columns, rows: rows.collect() }
}

fn row(judged: &Judged, index: usize, finding: &Finding) -> Vec<Cell> {
    let segment = &judged.plan.segments[finding.segment];
    let joint = finding.joint.map(|j| &judged.arm.joints()[j]);
    let [is, limit, room, reserve] = match &finding.kind {
        Kind::Excess(excess) => {
            let signed = |measure: Measure| if joint.is_some() { measure.signed() } else { measure.to_string() };
            let limit = if finding.check == Check::Range { excess.limit.signed() } else { excess.limit.to_string() };
            [signed(excess.demand), limit, excess.room.to_string(), excess.reserve.to_string()]
        }
        Kind::NoPath(_) | Kind::Unproved(_) => std::array::from_fn(|_| String::new()),
    };
    let time = finding.worst().time;
    let at = match (finding.check, finding.stop) {
        (Check::Rms, _) => String::new(),
        _ if !time.is_finite() => String::new(),
        (_, true) => format!("{} after its start, stopping", Seconds::s(time)),
        (_, false) => Seconds::s(judged.plan.starts[finding.segment] + time).to_string(),
    };
    let number = (index + 1).to_string();
    let to = format!("{} to \"{}\"", segment.label(), judged.recipe.waypoints[segment.to].name);
    let of = [to, check_words(finding.check).to_owned(), joint.map_or(String::new(), |joint| joint.name.clone())];
    let figures = [is, limit, room, reserve, at];
    [Cell::Link(format!("finding-{number}"), number.clone()), Cell::verdict(finding.verdict)]
        .into_iter()
        .chain(of.into_iter().chain(figures).map(Cell::Text))
        .collect()
}

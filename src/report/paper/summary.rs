use crate::checks::{Verdict, is_closed};
use crate::review::drawn::Bands;
use crate::review::{Judged, explain, headline, not_checked};

use super::Report;
use super::block::{Block, Cell, Column, Ribbon, Table, table};

/// Cells of the drawn ribbon.
const FINE: usize = 320;
/// Columns of the typed ribbon: with its labels it fits where tickets show text unwrapped.
const COARSE: usize = 64;

/// The verdict of the whole and of every segment, and how the rest stands, at a glance.
pub(super) fn blocks(report: &Report) -> Vec<Block> {
    let judged = report.judged;
    let mut blocks = vec![Block::Section("summary", "Summary"), Block::Lead(judged.survey.verdict(), headline(judged))];
    blocks.push(Block::Says(in_a_sentence(judged)));
    blocks.push(Block::Table(verdicts(judged)));
    blocks.push(Block::Ribbon(ribbon(judged)));
    blocks.push(Block::Table(how_it_stands(report)));
    blocks
}

/// Whether it is clear as far as judged, and what is unproven.
fn in_a_sentence(judged: &Judged) -> String {
    let (survey, all) = (&judged.survey, judged.survey.segments.len());
    let clear = survey.count(Verdict::Clear);
    if survey.verdict() == Verdict::Clear {
        return format!(
            "Clear as far as judged: all {all} segments leave their reserve, and that is proved for every instant. What was not \
             checked is listed below; it is no leave to run an arm."
        );
    }
    let unproven = survey.count(Verdict::Unproven);
    let known = match unproven {
        0 => "No segment is unproven.".to_owned(),
        1 => "1 segment is unproven: nothing bad was seen, but it is not known to be clear.".to_owned(),
        _ => format!("{unproven} segments are unproven: nothing bad was seen, but they are not known to be clear."),
    };
    format!("Not clear: {} of {all} segments are not clear. {known} It is no leave to run an arm.", all - clear)
}

/// Which segments have which verdict.
fn verdicts(judged: &Judged) -> Table {
    let columns = [("verdict", false), ("segments", true), ("which", false)];
    let mut rows: Vec<Vec<Cell>> = Verdict::ALL
        .into_iter()
        .filter(|verdict| judged.survey.count(*verdict) > 0)
        .map(|verdict| {
            let count = judged.survey.count(verdict).to_string();
            vec![Cell::verdict(verdict), Cell::Text(count), Cell::Text(which(judged, verdict))]
        })
        .collect();
    let rms = &judged.survey.cycle.rms;
    if rms.judged {
        let cells = [String::new(), "the cycle as a whole: its torque".to_owned()].map(Cell::Text);
        rows.push(std::iter::once(Cell::verdict(rms.verdict)).chain(cells).collect());
    }
    let columns = columns.into_iter().map(|(words, figures)| Column { words, figures }).collect();
    Table { caption: "Every segment's verdict".to_owned(), columns, rows }
}

/// The numbers of the segments with a verdict, runs of them as `2 to 9`.
fn which(judged: &Judged, wanted: Verdict) -> String {
    let segments = judged.plan.segments.iter().zip(&judged.survey.segments);
    let has: Vec<(String, bool)> = segments.map(|(segment, survey)| (segment.label(), survey.verdict == wanted)).collect();
    let runs = has.chunk_by(|a, b| a.1 == b.1).filter(|run| run[0].1);
    let told = runs.map(|run| match run {
        [one] => one.0.clone(),
        [one, other] => format!("{}; {}", one.0, other.0),
        [first, .., last] => format!("{} to {}", first.0, last.0),
        [] => String::new(),
    });
    told.collect::<Vec<_>>().join("; ")
}

fn ribbon(judged: &Judged) -> Ribbon {
    let segments = judged.plan.segments.iter().zip(&judged.plan.starts).zip(&judged.survey.segments);
    Ribbon {
        fine: Bands::of(judged, FINE),
        coarse: Bands::of(judged, COARSE),
        segments: segments
            .map(|((segment, start), survey)| {
                (segment.number().to_string(), survey.verdict, [*start, start + segment.duration() + segment.dwell])
            })
            .collect(),
        lasts: judged.plan.duration(),
    }
}

/// The other sections in a line each.
fn how_it_stands(report: &Report) -> Table {
    let judged = report.judged;
    let survey = &judged.survey;
    let worst = survey.findings.first().map(|finding| {
        let segment = &judged.plan.segments[finding.segment];
        format!(
            "; the worst: {} (segment {}, \"{}\")",
            explain(judged, finding).title,
            segment.label(),
            judged.recipe.waypoints[segment.to].name
        )
    });
    let highest = report.run.highest.map_or("at no override that was tried is all clear".to_owned(), |share| {
        format!("all clear up to an override of {share}, each segment proved there")
    });
    let closed = if is_closed(&judged.recipe, &judged.plan) { "closed" } else { "not closed" };
    let rows = [
        ("findings", format!("{}{}", survey.findings.len(), worst.unwrap_or_default())),
        ("doubts", format!("{} about the data", survey.doubts.len())),
        ("first run", highest),
        ("not checked", format!("{} matters, listed below", not_checked(judged).len())),
        ("sign-off", report.standing.in_brief()),
        ("cycle", format!("{}, {closed}", crate::units::Seconds::s(judged.plan.duration()))),
    ];
    table("How it stands", ["what", "how"], [false; 2], None, rows.map(|(what, how)| [what.to_owned(), how]))
}

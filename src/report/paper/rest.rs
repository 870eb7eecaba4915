use crate::review::{CAUTION, doubt_text};
use crate::seal::content_digest;

use super::block::{Block, Cell, Column, Table};
use super::{REPORT_FORMAT, Report};

/// What is probably a mistake in the data.
pub(super) fn doubts(report: &Report) -> Vec<Block> {
    let judged = report.judged;
    let told: Vec<String> = judged.survey.doubts.iter().map(|doubt| doubt_text(judged, doubt)).collect();
    let blocks = if told.is_empty() {
        Block::Says("None: nothing in the data looks like a mistake. That does not make it right.".to_owned())
    } else {
        Block::List(told)
    };
    vec![Block::Section("doubts", "Doubts"), blocks]
}

/// What was not judged.
pub(super) fn not_checked(report: &Report) -> Vec<Block> {
    vec![
        Block::Section("not-checked", "Not checked"),
        Block::Says("None of this was judged, whatever the verdicts say:".to_owned()),
        Block::List(crate::review::not_checked(report.judged)),
    ]
}

/// What stands under every result.
pub(super) fn cautions() -> Vec<Block> {
    let told = [
        CAUTION,
        "A wrong mass, length or limit makes the verdict wrong. Local codes and the arm maker's documents come first.",
        "It moves nothing, and no arm was connected. No verdict in it is a leave to run an arm.",
    ];
    vec![Block::Section("cautions", "Cautions"), Block::List(told.map(str::to_owned).to_vec())]
}

/// Which program read which bytes.
pub(super) fn files(report: &Report) -> Vec<Block> {
    let sources = report.sources;
    let rows = [
        ("recipe", &sources.recipe.path, sources.recipe.digest.to_string()),
        ("arm", &sources.arm.path, sources.arm.digest.to_string()),
        ("both, freed of layout", &String::new(), content_digest(&sources.content).to_string()),
    ];
    let rows = rows.map(|(what, path, digest)| vec![Cell::Text(what.to_owned()), Cell::Text(path.clone()), Cell::Code(digest)]);
    let columns = ["what", "file", "SHA-256"].map(|words| Column { words, figures: false });
    let dated = report.date.map_or(String::new(), |date| format!(", dated {date}"));
    vec![
        Block::Section("files", "Version and files read"),
        Block::Says(format!("Elbowroom {}, format {REPORT_FORMAT}{dated}.", env!("CARGO_PKG_VERSION"))),
        Block::Table(Table { caption: "Files read".to_owned(), columns: columns.into(), rows: rows.into() }),
    ]
}

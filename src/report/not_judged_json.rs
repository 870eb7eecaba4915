use serde::Serialize;

use crate::files::Complaint;

/// The name and version of the format that [`not_judged_json`] writes.
pub const NOT_JUDGED_FORMAT: &str = "elbowroom-not-judged/1";

#[derive(Serialize)]
struct NotJudged<'a> {
    format: &'static str,
    version: &'static str,
    recipe_file: &'a str,
    complaints: Vec<ComplaintJson<'a>>,
}

/// One complaint; line and column are counted from 1 and left out where no place is meant.
#[derive(Serialize)]
struct ComplaintJson<'a> {
    file: &'a str,
    #[serde(skip_serializing_if = "Option::is_none")]
    line: Option<usize>,
    #[serde(skip_serializing_if = "Option::is_none")]
    column: Option<usize>,
    says: &'a str,
}

/// Why a recipe could not be judged, as JSON on one line.
pub fn not_judged_json(recipe_file: &str, complaints: &[Complaint]) -> String {
    let place = |number: usize| (number > 0).then_some(number);
    let told = complaints
        .iter()
        .map(|c| ComplaintJson { file: &c.source, line: place(c.line), column: place(c.column), says: &c.says })
        .collect();
    let told = NotJudged { format: NOT_JUDGED_FORMAT, version: env!("CARGO_PKG_VERSION"), recipe_file, complaints: told };
    serde_json::to_string(&told).expect("plain strings and numbers always serialise")
}

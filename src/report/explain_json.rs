use serde::Serialize;

use crate::checks::Finding;
use crate::review::{Judged, Remedy, Tried};

use super::finding_json::{DoubtJson, FindingJson};
use super::remedy_json::{RemedyJson, TriedJson};

/// The name and version of the format that [`explain_json`] writes.
pub const EXPLAIN_FORMAT: &str = "elbowroom-explain/1";

/// A finding with what would settle it.
#[derive(Debug)]
pub struct Explained {
    /// The finding.
    pub finding: Finding,
    /// Its remedies, the least change first, and what was tried without success; `None` where none were sought.
    pub remedies: Option<(Vec<Remedy>, Vec<Tried>)>,
}

#[derive(Debug, Serialize)]
struct Report {
    format: &'static str,
    version: &'static str,
    recipe: String,
    recipe_file: String,
    arm: String,
    arm_file: String,
    verdict: &'static str,
    findings: Vec<ExplainedJson>,
    doubts: Vec<DoubtJson>,
}

#[derive(Debug, Serialize)]
struct ExplainedJson {
    #[serde(flatten)]
    finding: FindingJson,
    remedies: Option<Vec<RemedyJson>>,
    tried: Option<Vec<TriedJson>>,
}

/// Findings of a judged recipe with what would settle them, as one JSON object on one line, without a line end. `recipe_file` and
/// `arm_file` say where both came from. Rooms are in percent, costs in seconds, all else in the unit named beside it.
pub fn explain_json(judged: &Judged, recipe_file: &str, arm_file: &str, explained: &[Explained]) -> String {
    let findings = explained.iter().map(|one| {
        let of = &one.finding;
        let (remedies, tried) = match &one.remedies {
            Some((remedies, tried)) => (
                Some(remedies.iter().map(|remedy| RemedyJson::of(judged, of, remedy)).collect()),
                Some(tried.iter().map(|tried| TriedJson::of(judged, tried)).collect()),
            ),
            None => (None, None),
        };
        ExplainedJson { finding: FindingJson::of(judged, of), remedies, tried }
    });
    let report = Report {
        format: EXPLAIN_FORMAT,
        version: env!("CARGO_PKG_VERSION"),
        recipe: judged.recipe.name.clone(),
        recipe_file: recipe_file.to_owned(),
        arm: judged.arm.name().to_owned(),
        arm_file: arm_file.to_owned(),
        verdict: judged.survey.verdict().word(),
        findings: findings.collect(),
        doubts: judged.survey.doubts.iter().map(|doubt| DoubtJson::of(judged, doubt)).collect(),
    };
    serde_json::to_string(&report).expect("names are text, and figures are finite or null")
}

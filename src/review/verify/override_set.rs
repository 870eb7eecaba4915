use crate::checks::{Finding, Verdict, judge_at};
use crate::review::{Judged, Matter, Record, check_words};
use crate::units::Share;

/// Compares the override that a cell is set to with what was signed: on every segment all must be clear there, or accepted in the
/// record with the same check and joint. Each line tells one thing that is neither.
pub fn compare_override(judged: &Judged, record: &Record, run_at: Share) -> Vec<String> {
    let mut told = Vec::new();
    let is_accepted = |finding: &Finding| {
        let matter = Matter::of(judged, finding);
        record.accepted.iter().any(|known| known.matter == matter)
    };
    for (index, segment) in judged.plan.segments.iter().enumerate() {
        let versions = [Some(segment), judged.plan.stops[index].as_ref()];
        let label = segment.label();
        let mut open: Vec<String> = Vec::new();
        for version in versions.into_iter().flatten() {
            let survey = judge_at(&judged.arm, index, version, &judged.recipe.acceptance, judged.plan.gravity, run_at);
            if survey.verdict == Verdict::Clear {
                continue;
            }
            let left = survey.findings.iter().filter(|finding| !is_accepted(finding));
            let named = left.map(|finding| format!("{} {}", finding.verdict.word(), subject(judged, finding)));
            open.extend(named);
            if survey.findings.is_empty() {
                open.push(survey.verdict.word().to_owned());
            }
        }
        open.sort();
        open.dedup();
        told.extend(
            open.into_iter().map(|what| format!("segment {label} at an override of {run_at}: {what}, and nobody accepted it")),
        );
    }
    told
}

fn subject(judged: &Judged, finding: &Finding) -> String {
    let joint = finding.joint.map_or(String::new(), |joint| format!(" of {}", judged.arm.joints()[joint].name));
    format!("{}{joint}", check_words(finding.check))
}

use crate::checks::{Finding, Watch, tightened};
use crate::report::{Explained, explain_json};
use crate::review::{Explanation, Judged, bounds_text, explain, found_by, headline, no_finding, remedies_text};

use super::args::ExplainArgs;
use super::chosen::chosen;
use super::code::Code;
use super::findings_text::explanation_text;
use super::not_checked_text::{doubts_text, hanging};
use super::out;

/// Tells all findings of a recipe at length, or all about one segment.
pub(super) fn run(args: &ExplainArgs) -> anyhow::Result<Code> {
    let chosen = chosen(args.recipe.as_deref())?;
    let judged = &chosen.judged;
    let width = usize::from(args.width);
    let wanted = match args.segment {
        None => None,
        Some(number) => {
            let segments = &judged.plan.segments;
            let last = segments.last().map_or(0, |segment| segment.number());
            // A fly-by point has two: the segment that arrives there, and the blend past it.
            let meant: Vec<usize> = (0..segments.len()).filter(|&index| segments[index].number() == number).collect();
            anyhow::ensure!(!meant.is_empty(), "there is no segment {number}; they are numbered from 2 to {last}");
            Some(meant)
        }
    };
    let is_meant = |finding: &&Finding| wanted.as_ref().is_none_or(|meant| meant.contains(&finding.segment));
    if args.json {
        let explained: Vec<Explained> = judged
            .survey
            .findings
            .iter()
            .filter(is_meant)
            .map(|finding| Explained {
                finding: *finding,
                remedies: (!args.no_remedies).then(|| found_by(judged, finding, &Watch::default())),
            })
            .collect();
        out::print(&(explain_json(judged, &chosen.recipe_file, &chosen.arm_file, &explained) + "\n"))?;
        return Ok(Code::Clear);
    }
    let mut parts = vec![headline(judged) + "\n"];
    let told = |finding: &Finding| if args.no_remedies { explain(judged, finding) } else { with_remedies(judged, finding) };
    parts.extend(judged.survey.findings.iter().filter(is_meant).map(|finding| explanation_text(&told(finding), width)));
    match wanted {
        Some(meant) => {
            let quiet = meant.iter().copied().filter(|&index| judged.survey.segments[index].findings.is_empty());
            parts.extend(quiet.map(|index| explanation_text(&no_finding(judged, index), width)));
            if args.tighten {
                parts.extend(meant.into_iter().map(|index| closer(judged, index, width)));
            }
        }
        None if judged.survey.doubts.is_empty() => {}
        None => parts.push(doubts_text(judged, width)),
    }
    out::print(&parts.join("\n"))?;
    Ok(Code::Clear)
}

/// What was seen and what is proved of a segment, its bounds proved closer.
fn closer(judged: &Judged, index: usize, width: usize) -> String {
    let survey = tightened(&judged.arm, &judged.recipe, &judged.plan, index);
    let title = format!("proved closer: segment {}, {} postures\n", judged.plan.segments[index].label(), survey.tally.postures);
    let lines = bounds_text(judged, &survey);
    title + &lines.iter().map(|line| hanging("  ", line, width)).collect::<String>()
}

/// A finding told together with what would settle it.
fn with_remedies(judged: &Judged, finding: &Finding) -> Explanation {
    let mut told = explain(judged, finding);
    let (remedies, tried) = found_by(judged, finding, &Watch::default());
    told.paragraphs.extend(remedies_text(judged, finding, &remedies, &tried));
    told
}

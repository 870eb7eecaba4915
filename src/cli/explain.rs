use crate::checks::Finding;
use crate::review::{explain, headline, no_finding};

use super::args::ExplainArgs;
use super::chosen::chosen;
use super::code::Code;
use super::findings_text::explanation_text;
use super::not_checked_text::doubts_text;
use super::out;

/// Tells all findings of a recipe at length, or all about one segment.
pub(super) fn run(args: &ExplainArgs) -> anyhow::Result<Code> {
    let judged = chosen(args.recipe.as_deref())?.judged;
    let width = usize::from(args.width);
    let wanted = match args.segment {
        None => None,
        Some(number) => {
            let index = judged.plan.segments.iter().position(|segment| segment.number() == number);
            let last = judged.plan.segments.last().map_or(0, |segment| segment.number());
            Some(index.ok_or_else(|| anyhow::anyhow!("there is no segment {number}; they are numbered from 2 to {last}"))?)
        }
    };
    let is_meant = |finding: &&Finding| wanted.is_none_or(|index| finding.segment == index);
    let mut parts = vec![headline(&judged) + "\n"];
    parts.extend(judged.survey.findings.iter().filter(is_meant).map(|finding| explanation_text(&explain(&judged, finding), width)));
    match wanted {
        Some(index) if parts.len() == 1 => parts.push(explanation_text(&no_finding(&judged, index), width)),
        Some(_) => {}
        None if judged.survey.doubts.is_empty() => {}
        None => parts.push(doubts_text(&judged, width)),
    }
    out::print(&parts.join("\n"))?;
    Ok(Code::Clear)
}

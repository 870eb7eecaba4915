use std::path::Path;
use std::sync::Arc;

use anyhow::ensure;

use crate::checks::{Finding, Watch};
use crate::files::sources;
use crate::report::{Report, Standing, Written, may_keep, report_html, report_markdown, save_report};
use crate::review::{Judged, Paragraph, first_run, found_by, reduced_speed, remedies_text};

use super::args::ReportArgs;
use super::chosen::opened;
use super::code::Code;
use super::out;
use super::standing::standing;

/// Where standard output is meant.
const STANDARD_OUTPUT: &str = "-";

/// Writes a report of a recipe, in one format or both.
pub(super) fn run(args: &ReportArgs) -> anyhow::Result<Code> {
    let targets = [args.html.as_deref(), args.markdown.as_deref()];
    ensure!(
        targets[0].is_none() || targets[0] != targets[1],
        "--html and --markdown name the same place; each needs one of its own"
    );
    // Asked first, since finding remedies takes a while.
    targets.into_iter().flatten().filter(|path| is_file(path)).try_for_each(may_keep)?;
    let opened = opened(args.recipe.as_deref())?;
    let sources = sources(&opened);
    let (arm, recipe) = (Arc::new(opened.arm.clone()), Arc::new(opened.recipe.clone()));
    let watch = Watch::default();
    let judged = Judged::of(&arm, &recipe, None, &watch).expect("nobody stops this watch");
    let run = first_run(&judged, &watch).expect("nobody stops this watch");
    let reduced = reduced_speed(&judged, &watch).expect("nobody stops this watch");
    let standing = match &args.recipe {
        Some(path) => standing(path, &opened, &judged, &sources, &run, args.signers.as_deref())?,
        None => Standing::Nothing("The demonstration is built in, so no record stands beside it.".to_owned()),
    };
    let remedies = (!args.no_remedies).then(|| judged.survey.findings.iter().map(|finding| settled_by(&judged, finding)).collect());
    let report = Report { judged: &judged, sources: &sources, run: &run, reduced: &reduced, remedies, standing, date: args.date };
    let mut told = Vec::new();
    if let Some(path) = &args.html {
        told.extend(deliver(path, &report_html(&report))?);
    }
    if let Some(path) = &args.markdown {
        told.extend(deliver(path, &report_markdown(&report))?);
    }
    let to_output = targets.into_iter().flatten().any(|path| !is_file(path));
    // What is told must not end up in the report itself.
    if to_output {
        told.iter().for_each(|line| out::complain(line));
    } else {
        out::print(&(told.join("\n") + "\n"))?;
    }
    Ok(Code::Clear)
}

fn is_file(path: &Path) -> bool {
    path != Path::new(STANDARD_OUTPUT)
}

/// Writes one report, and says where if it went to a file.
fn deliver(path: &Path, text: &str) -> anyhow::Result<Option<String>> {
    if !is_file(path) {
        out::print(text)?;
        return Ok(None);
    }
    let name = path.display();
    Ok(Some(match save_report(path, text)? {
        Written::New => format!("written: {name}"),
        Written::Replaced(before) => format!("written: {name}; the report before is now {}", before.display()),
        Written::Same => format!("unchanged: {name} is this report already"),
    }))
}

/// What would settle a finding, tried, in words.
fn settled_by(judged: &Judged, finding: &Finding) -> Vec<Paragraph> {
    let (remedies, tried) = found_by(judged, finding, &Watch::default());
    remedies_text(judged, finding, &remedies, &tried)
}

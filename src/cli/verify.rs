use std::path::Path;

use anyhow::ensure;

use crate::files::{no_link, read_points, read_record, read_text, record_text};
use crate::review::{Record, Slack, compare_override, compare_points, compare_record, compare_typed};
use crate::seal::Digest;
use crate::units::{Angle, Length, Share};

use super::args::VerifyArgs;
use super::code::Code;
use super::out;
use super::sign::{Opened, opened};
use super::standing::{outcome, recipe_of, signatures};

/// Says whether a record still stands, and whether the cell's copy is what was signed.
pub(super) fn run(args: &VerifyArgs) -> anyhow::Result<Code> {
    no_link(&args.record)?;
    let source = read_text(&args.record)?;
    let record = read_record(&source)?;
    let recipe = recipe_of(&args.record, &record)?;
    let Opened { judged, sources, run } = opened(&recipe)?;
    let compared = compare_record(&record, &judged, &sources, &run);
    let mut lines = vec![format!("{}: seal {}", args.record.display(), Digest::of(source.text.as_bytes()).code())];
    let mut code = Code::Clear;
    let (told, stands) = outcome(&compared);
    lines.extend(told);
    let (told, signed) = signatures(&args.record, args.signers.as_deref(), &record)?;
    lines.extend(told);
    if !(stands && signed) {
        code = Code::NotClear;
    }
    let (told, same) = cell(args, &judged, &record)?;
    lines.extend(told);
    if !same {
        code = Code::NotClear;
    }
    lines.push("It says that what was judged is unchanged; it is no leave to run an arm.".to_owned());
    out::print(&(lines.join("\n") + "\n"))?;
    Ok(code)
}

/// Whether the cell's copy is what was signed, as far as was given.
fn cell(args: &VerifyArgs, judged: &crate::review::Judged, record: &Record) -> anyhow::Result<(Vec<String>, bool)> {
    let slack = Slack { angle: Angle::deg(args.angle_slack), length: Length::mm(args.length_slack) };
    let mut differences = Vec::new();
    let mut compared = Vec::new();
    if let Some(points) = &args.points {
        let table = read_points(&read_text(points)?, &judged.arm)?;
        differences.extend(compare_points(judged, &table, slack));
        compared.push("points");
    }
    if !args.tool.is_empty() || !args.load.is_empty() {
        differences.extend(compare_typed(judged, &args.tool, &args.load, slack));
        compared.push("tool and load as typed");
    }
    if let Some(share) = args.run_at {
        ensure!(share > 0.0 && share <= 100.0, "--override is {share}; it must be above 0 and at most 100 %");
        differences.extend(compare_override(judged, record, Share::percent(share)));
        compared.push("override");
    }
    Ok(match (compared.is_empty(), differences.is_empty()) {
        (true, _) => (vec!["the cell's copy was not compared (--points)".to_owned()], true),
        (false, true) => (vec![format!("the cell's copy agrees in {}", compared.join(", "))], true),
        (false, false) => {
            let told = differences.into_iter().map(|told| format!("  {told}"));
            (std::iter::once("the cell's copy differs:".to_owned()).chain(told).collect(), false)
        }
    })
}

/// The text of a record and its seal, for the page on the wall.
pub(super) fn page(record: &Path) -> anyhow::Result<Code> {
    no_link(record)?;
    let read = read_record(&read_text(record)?)?;
    out::print(&crate::report::wall_page(&read, &Digest::of(record_text(&read).as_bytes())))?;
    Ok(Code::Clear)
}

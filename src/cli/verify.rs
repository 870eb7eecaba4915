use std::path::{Path, PathBuf};

use anyhow::ensure;

use crate::files::{is_there, no_link, read_points, read_record, read_text, record_path, record_text, signature_path, signed_part};
use crate::review::{Compared, Outcome, Record, Slack, compare_override, compare_points, compare_record, compare_typed};
use crate::seal::{Digest, Signers, check_signature};
use crate::units::{Angle, Length, Share};

use super::args::VerifyArgs;
use super::code::Code;
use super::out;
use super::sign::{Opened, opened};

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
    let (told, signed) = signatures(args, &record)?;
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

/// The recipe that a record is of: beside it, under the name that it gives.
fn recipe_of(place: &Path, record: &Record) -> anyhow::Result<PathBuf> {
    let recipe = place.with_file_name(&record.recipe.path);
    anyhow::ensure!(
        Path::new(&record.recipe.path).components().count() == 1,
        "the record names its recipe by a path, {}; it must be a name in its own folder",
        record.recipe.path
    );
    anyhow::ensure!(
        record_path(&recipe) == place,
        "the record is of {} and must be called {}: it was renamed, or belongs to another recipe",
        record.recipe.path,
        record_path(&recipe).display()
    );
    Ok(recipe)
}

fn outcome(compared: &Compared) -> (Vec<String>, bool) {
    let mut lines = Vec::new();
    let bytes = |compared: &Compared| compared.other_bytes.join(" and ");
    let stands = match compared.outcome {
        Outcome::Stands if compared.other_bytes.is_empty() => {
            lines.push("the record stands: the same files, the same results".to_owned());
            true
        }
        Outcome::Stands => {
            lines.push(format!(
                "the record stands: {} changed in layout or comments only, and the results are the same",
                bytes(compared)
            ));
            true
        }
        Outcome::ContentChanged => {
            lines.push("content changed:".to_owned());
            for change in &compared.changes {
                let value = |value: &Option<String>| value.clone().unwrap_or_else(|| "nothing".to_owned());
                lines.push(format!("  {}, {}: {} -> {}", change.of, change.key, value(&change.before), value(&change.after)));
            }
            lines.extend(compared.segments.iter().map(|segment| format!("  {}", segment.words())));
            let count = compared.standing.len();
            lines.push(format!("  {count} segments stand as they were signed; the others need signing again"));
            false
        }
        Outcome::OtherVersion => {
            lines.push("made by another version whose results differ:".to_owned());
            lines.extend(compared.differences.iter().map(|told| format!("  {told}")));
            false
        }
        Outcome::ResultsDiffer => {
            lines.push("the record says something else than is found in the same content:".to_owned());
            lines.extend(compared.differences.iter().map(|told| format!("  {told}")));
            false
        }
    };
    (lines, stands)
}

/// What the names under a record are worth.
fn signatures(args: &VerifyArgs, record: &Record) -> anyhow::Result<(Vec<String>, bool)> {
    let list = args.signers.as_deref().map(|path| read_text(path).map(|source| Signers::read(&source.text))).transpose()?;
    let mut lines = Vec::new();
    let mut good = true;
    for (line, why) in list.iter().flat_map(|list| &list.left_out) {
        lines.push(format!("line {line} of the list of signers is left out: {why}"));
    }
    for (index, person) in record.people.iter().enumerate() {
        let who = format!("{} {} on {}", person.role.words(), person.name, person.date);
        let place = signature_path(&args.record, index);
        let there = is_there(&place);
        let told = match (&person.key, there) {
            (None, false) => "no signature: a name only".to_owned(),
            (None, true) => {
                good = false;
                format!("signature bad: {} stands there although the record names no key", place.display())
            }
            (Some(_), false) => {
                good = false;
                format!("signature missing: {} should stand beside the record", place.display())
            }
            (Some(key), true) => {
                no_link(&place)?;
                let armoured = read_text(&place)?.text;
                match check_signature(&armoured, signed_part(record, index).as_bytes()) {
                    Err(bad) => {
                        good = false;
                        format!("signature bad: {bad}")
                    }
                    Ok(signed) if signed.fingerprint != *key => {
                        good = false;
                        format!("signature bad: made by {}, the record names {key}", signed.fingerprint)
                    }
                    Ok(signed) => match list.as_ref().map(|list| list.whose(&signed)) {
                        None => format!("signature good by {key}; whose key that is was not asked (--signers)"),
                        Some(Some(signer)) => format!("signature good, by the key of {}", signer.principal),
                        Some(None) => {
                            good = false;
                            format!("signer unknown: the signature is good, but {key} is not in the list of signers")
                        }
                    },
                }
            }
        };
        lines.push(format!("{who}: {told}"));
    }
    if list.is_some() && record.people.last().is_none_or(|person| person.key.is_none()) {
        good = false;
        // A signature stands for all above it, so only what comes after the last one can have been put there by anybody.
        lines.push(if record.people.iter().all(|person| person.key.is_none()) {
            "no signature although a list of signers was given".to_owned()
        } else {
            "no signature covers the last name, although a list of signers was given: anybody can have put it there".to_owned()
        });
    }
    Ok((lines, good))
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

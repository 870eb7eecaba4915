use std::path::Path;

use crate::checks::Watch;
use crate::report::check_json;
use crate::review::{CAUTION, Judged, headline, proof_summary, reduced_speed, reduced_speed_text};

use super::args::CheckArgs;
use super::chosen::{Chosen, chosen};
use super::code::Code;
use super::findings_text::findings_text;
use super::not_checked_text::{doubts_text, hanging, not_checked_text};
use super::out::{self, Reader};
use super::table::table;

/// Judges recipes one after the other and prints what was found. A recipe that can't be judged does not stop the others.
pub(super) fn run(args: &CheckArgs) -> anyhow::Result<Code> {
    let recipes: Vec<Option<&Path>> =
        if args.demo { vec![None] } else { args.recipes.iter().map(|path| Some(path.as_path())).collect() };
    let mut worst = Code::Clear;
    let mut reader = Reader::Listens;
    let mut before = false;
    for recipe in recipes {
        match chosen(recipe) {
            Ok(chosen) => {
                worst = worst.max(Code::of(chosen.judged.survey.verdict()));
                // The code speaks of all recipes, so they are judged even when nobody reads any more.
                if reader == Reader::Listens {
                    reader = out::print(&told(args, &chosen, before))?;
                }
                before = true;
            }
            Err(rejected) => {
                worst = Code::NotJudged;
                out::complain(&rejected.to_string());
            }
        }
    }
    Ok(worst)
}

fn told(args: &CheckArgs, chosen: &Chosen, before: bool) -> String {
    let judged = &chosen.judged;
    if args.json {
        return check_json(judged, &chosen.recipe_file, &chosen.arm_file) + "\n";
    }
    if args.quiet {
        return headline(judged) + "\n";
    }
    let width = usize::from(args.width);
    let apart = if before { "\n" } else { "" };
    let parts = [
        told_in(&headline(judged), width)
            + &told_in(&format!("no arm connected; {} on {}", chosen.recipe_file, judged.arm.name()), width),
        table(judged, width.min(80)),
        findings_text(judged, width),
        doubts_text(judged, width),
        reduced_text(judged, width),
        hanging("proof: ", &proof_summary(judged), width),
        not_checked_text(judged, width),
        crate::review::wrap(CAUTION, width).join("\n") + "\n",
    ];
    let parts: Vec<String> = parts.into_iter().filter(|part| !part.is_empty()).collect();
    apart.to_owned() + &parts.join("\n")
}

fn told_in(text: &str, width: usize) -> String {
    crate::review::wrap(text, width).join("\n") + "\n"
}

/// The second judgement, in manual mode at reduced speed.
fn reduced_text(judged: &Judged, width: usize) -> String {
    let reduced = reduced_speed(judged, &Watch::default()).expect("nobody stops this watch");
    hanging("reduced speed: ", &reduced_speed_text(judged, &reduced).join(" "), width)
}

use std::path::{Path, PathBuf};

use crate::checks::Watch;
use crate::files::{Rejected, is_folder, out_of_date, recipes_below};
use crate::report::{check_json, not_judged_json};
use crate::review::{CAUTION, Judged, headline, many, proof_summary, reduced_speed, reduced_speed_text};

use super::args::CheckArgs;
use super::bar::Bar;
use super::chosen::{Chosen, chosen};
use super::code::Code;
use super::findings_text::findings_text;
use super::not_checked_text::{doubts_text, hanging, not_checked_text};
use super::out::{self, Reader};
use super::table::table;

/// Something to be judged.
enum Item {
    /// The built-in demonstration cell.
    Demo,
    /// A recipe, and why it is looked at, where that was asked for.
    Recipe(PathBuf, Option<String>),
    /// What could not even be looked at below a folder.
    Unread(PathBuf, Rejected),
}

/// What came of it.
struct Outcome {
    code: Code,
    /// For standard output.
    told: String,
    /// For standard error.
    complaint: Option<String>,
}

/// Judges recipes on all cores and prints what was found in their order. One that can't be judged does not stop the others.
pub(super) fn run(args: &CheckArgs) -> anyhow::Result<Code> {
    let a_line_each = args.recipes.iter().any(|path| is_folder(path)) || args.changed;
    let (items, left_out) = items(args);
    if args.list {
        return list(&items);
    }
    let mut counts = [0; 3];
    let mut reader = Reader::Listens;
    let mut failed = None;
    let mut before = false;
    let bar = std::cell::RefCell::new(Bar::over(items.len()));
    let hand_on = |outcome: Outcome| {
        counts[outcome.code as usize] += 1;
        bar.borrow().wipe();
        if let Some(complaint) = outcome.complaint {
            out::complain(&complaint);
        }
        // The code speaks of all recipes, so they are judged even when nobody reads any more.
        if !outcome.told.is_empty() && reader == Reader::Listens && failed.is_none() {
            let apart = if before && !(args.json || args.quiet || a_line_each) { "\n" } else { "" };
            match out::print(&format!("{apart}{}", outcome.told)) {
                Ok(still) => reader = still,
                Err(error) => failed = Some(error),
            }
            before = true;
        }
        bar.borrow_mut().draw();
    };
    many(&items, |item| outcome(args, item, a_line_each), hand_on, |done| bar.borrow_mut().done(done));
    bar.borrow().wipe();
    if let Some(error) = failed {
        return Err(error);
    }
    let [clear, not_clear, not_judged] = counts;
    if a_line_each {
        let left_out =
            if args.changed { format!(", {left_out} left out: their records are of the same files") } else { String::new() };
        out::complain(&format!("{clear} clear, {not_clear} not clear, {not_judged} not judged{left_out}"));
    }
    Ok(match counts {
        // A wrong folder must not pass as a good one.
        [0, 0, 0] if left_out == 0 => {
            out::complain("no recipe was found");
            Code::NotJudged
        }
        [_, 0, 0] => Code::Clear,
        [_, _, 0] => Code::NotClear,
        _ => Code::NotJudged,
    })
}

/// Everything that was asked for, folders by what is below them, and how many recipes were left out because nothing changed.
fn items(args: &CheckArgs) -> (Vec<Item>, usize) {
    if args.demo {
        return (vec![Item::Demo], 0);
    }
    let mut left_out = 0;
    let mut items = Vec::new();
    let mut recipe = |items: &mut Vec<Item>, path: PathBuf| match args.changed.then(|| out_of_date(&path)) {
        Some(None) => left_out += 1,
        why => items.push(Item::Recipe(path, why.flatten())),
    };
    for path in &args.recipes {
        if is_folder(path) {
            let below = recipes_below(path);
            items.extend(below.unread.into_iter().map(|(path, why)| Item::Unread(path, why)));
            below.recipes.into_iter().for_each(|path| recipe(&mut items, path));
        } else {
            recipe(&mut items, path.clone());
        }
    }
    (items, left_out)
}

/// Names the recipes, a line each, and judges none.
fn list(items: &[Item]) -> anyhow::Result<Code> {
    let mut code = Code::Clear;
    let mut lines = String::new();
    for item in items {
        match item {
            Item::Demo => {}
            Item::Recipe(path, _) => lines += &format!("{}\n", path.display()),
            Item::Unread(_, why) => {
                out::complain(&why.to_string());
                code = Code::NotJudged;
            }
        }
    }
    out::print(&lines)?;
    Ok(code)
}

fn outcome(args: &CheckArgs, item: &Item, a_line_each: bool) -> Outcome {
    let (path, why) = match item {
        Item::Demo => (None, &None),
        Item::Recipe(path, why) => (Some(path.as_path()), why),
        Item::Unread(path, why) => return not_judged(args, path, why, a_line_each),
    };
    match (chosen(path), path) {
        (Ok(chosen), _) => {
            let code = Code::of(chosen.judged.survey.verdict());
            let why = why.as_ref().map_or_else(String::new, |why| format!(" ({why})"));
            let told = match a_line_each && !args.json {
                true => format!("{}: {}{why}\n", chosen.recipe_file, headline(&chosen.judged)),
                false => told(args, &chosen),
            };
            Outcome { code, told, complaint: None }
        }
        (Err(rejected), Some(path)) => not_judged(args, path, &rejected, a_line_each),
        (Err(rejected), None) => Outcome { code: Code::NotJudged, told: String::new(), complaint: Some(rejected.to_string()) },
    }
}

/// Among many a line like those of the others; else all complaints on standard error.
fn not_judged(args: &CheckArgs, path: &Path, why: &Rejected, a_line_each: bool) -> Outcome {
    let path = path.display().to_string();
    let (told, complaint) = match &why.complaints[..] {
        _ if !a_line_each => (String::new(), Some(why.to_string())),
        all if args.json => (not_judged_json(&path, all) + "\n", None),
        [first, more @ ..] => {
            let more = if more.is_empty() { String::new() } else { format!("; {} more", more.len()) };
            (format!("{path}: NOT JUDGED: {first}{more}\n"), None)
        }
        [] => (format!("{path}: NOT JUDGED\n"), None),
    };
    Outcome { code: Code::NotJudged, told, complaint }
}

fn told(args: &CheckArgs, chosen: &Chosen) -> String {
    let judged = &chosen.judged;
    if args.json {
        return check_json(judged, &chosen.recipe_file, &chosen.arm_file) + "\n";
    }
    if args.quiet {
        return headline(judged) + "\n";
    }
    let width = usize::from(args.width);
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
    parts.join("\n")
}

fn told_in(text: &str, width: usize) -> String {
    crate::review::wrap(text, width).join("\n") + "\n"
}

/// The second judgement, in manual mode at reduced speed.
fn reduced_text(judged: &Judged, width: usize) -> String {
    let reduced = reduced_speed(judged, &Watch::default()).expect("nobody stops this watch");
    hanging("reduced speed: ", &reduced_speed_text(judged, &reduced).join(" "), width)
}

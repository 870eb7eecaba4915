//! Keeps the layers of the source: which module may name which, and which library may be named where. Read from the text of `src`,
//! comments and strings taken out, so that a broken rule is told with file and name before anybody reads the code.

mod source;

use source::{Source, tree};

/// The modules, lowest first; each may name only those before it.
///
/// `program` stands below `dynamics` because what hangs on the flange (`program::Carried`) is part of what a recipe says, and the
/// holding torque is computed from it.
const ORDER: [&str; 14] = [
    "units",
    "geometry",
    "arm",
    "kinematics",
    "program",
    "dynamics",
    "motion",
    "seal",
    "checks",
    "review",
    "files",
    "report",
    "tui",
    "cli",
];

/// The one file that starts the screen. Apart from it `tui` and `cli` never name each other.
const STARTS_THE_SCREEN: &str = "cli/screen.rs";

/// Names that belong in one place: the name, where it may stand (a path's beginning), and why it stands nowhere else.
const KEPT: [(&str, &[&str], &str); 17] = [
    ("ratatui", &["tui/"], "the core knows no terminal"),
    ("crossterm", &["tui/"], "the core knows no terminal"),
    ("clap", &["cli/"], "the core knows no command line"),
    ("clap_complete", &["cli/"], "the core knows no command line"),
    ("clap_mangen", &["cli/"], "the core knows no command line"),
    ("serde", &["files/", "report/"], "the core knows no file format"),
    ("serde_json", &["files/", "report/"], "the core knows no file format"),
    ("toml", &["files/", "report/"], "the core knows no file format"),
    ("toml_edit", &["files/save/"], "one place writes into people's files"),
    ("toml_parser", &["files/save/"], "one place writes into people's files"),
    ("std::fs", &["files/", "report/"], "the core reads and writes nothing"),
    (
        "std::thread",
        &["review/many", "review/recheck", "review/remedies/desk", "tui/run"],
        "few places have threads, so each can stop its own",
    ),
    (
        "crossbeam_channel",
        &["review/recheck", "review/remedies/desk", "tui/run"],
        "few places have threads, so each can stop its own",
    ),
    ("rayon", &["checks/survey"], "one place spreads work over the cores"),
    ("println", &["cli/", "main.rs"], "the rest returns what it has to say"),
    ("eprintln", &["cli/", "main.rs"], "the rest returns what it has to say"),
    ("dbg", &[], "it is left over"),
];

/// Lines of a file at most.
const MOST_LINES: usize = 400;

/// Names that say nothing of what a file holds.
const EMPTY_NAMES: [&str; 8] = ["util", "utils", "common", "helper", "helpers", "manager", "misc", "lib_ext"];

fn rank(module: &str) -> Option<usize> {
    ORDER.iter().position(|known| *known == module)
}

/// Modules named upwards, or modules that the order does not know.
fn upward(source: &Source) -> Vec<String> {
    let Some(module) = source.module() else { return Vec::new() };
    let Some(own) = rank(module) else { return vec![format!("{}: the order does not know the module {module}", source.path)] };
    source
        .modules_named(&ORDER)
        .into_iter()
        .filter(|named| {
            let starts_the_screen = source.path == STARTS_THE_SCREEN && named == "tui";
            let sideways = (module, named.as_str()) == ("cli", "tui");
            !starts_the_screen && (sideways || rank(named).is_none_or(|rank| rank > own))
        })
        .map(|named| format!("{}: {module} must not name {named}", source.path))
        .collect()
}

fn out_of_place(source: &Source) -> Vec<String> {
    KEPT.iter()
        .filter(|(name, places, _)| source.names(name) && !places.iter().any(|place| source.path.starts_with(place)))
        .map(|(name, _, why)| format!("{}: {name} must not be named here: {why}", source.path))
        .collect()
}

fn two_up(source: &Source) -> Vec<String> {
    let found = source.code.contains("super::super");
    found.then(|| format!("{}: super::super; name the module from the crate's top", source.path)).into_iter().collect()
}

fn too_long(source: &Source) -> Vec<String> {
    let lines = source.text.lines().count();
    (lines > MOST_LINES).then(|| format!("{}: {lines} lines; split it", source.path)).into_iter().collect()
}

fn empty_name(source: &Source) -> Vec<String> {
    source
        .path
        .split('/')
        .map(|part| part.trim_end_matches(".rs"))
        .filter(|part| EMPTY_NAMES.contains(part))
        .map(|part| format!("{}: \"{part}\" says nothing of what is in it", source.path))
        .collect()
}

fn complaints(sources: &[Source], rule: impl Fn(&Source) -> Vec<String>) -> String {
    sources.iter().flat_map(rule).collect::<Vec<_>>().join("\n")
}

fn made_up(path: &str, text: &str) -> Source {
    Source::of(path.into(), text.into())
}

#[test]
fn a_module_names_only_those_below_it() {
    let src = tree("src");
    assert!(src.len() > 50, "only {} files were read", src.len());
    assert_eq!(complaints(&src, upward), "");
}

#[test]
fn a_name_upwards_is_found_however_it_is_written() {
    for text in [
        "use crate::motion::Plan;",
        "use crate::{geometry::Pose, motion::{Plan, Law}};",
        "fn f() -> crate::motion::Plan { todo!() }",
        "use crate::{\n    arm::{Arm, Joints},\n    motion,\n};",
        "use super::motion::Plan;",
        "pub(in crate::motion) fn f() {}",
    ] {
        assert_eq!(upward(&made_up("arm/mod.rs", text)), ["arm/mod.rs: arm must not name motion"], "{text}");
    }
    for text in [
        "use crate::geometry::Pose;",
        "use crate::{geometry::Pose, units::{Angle, Length}};",
        "// use crate::motion::Plan;",
        "/* crate::motion /* nested */ crate::motion */",
        "const S: &str = \"crate::motion \\\" crate::motion\"; const R: &str = r#\"crate::motion\"#; const C: char = '\"';",
        "/// See [`crate::motion`].\nfn f<'a>(x: &'a str) {}",
    ] {
        assert_eq!(upward(&made_up("arm/mod.rs", text)), [""; 0], "{text}");
    }
    assert_eq!(upward(&made_up("common_ground/mod.rs", "")).len(), 1);
}

#[test]
fn the_screen_and_the_command_line_meet_in_one_file() {
    let names_tui = "use crate::tui::run::run;";
    assert_eq!(upward(&made_up("cli/screen.rs", names_tui)), [""; 0]);
    assert_eq!(upward(&made_up("cli/check.rs", names_tui)), ["cli/check.rs: cli must not name tui"]);
    assert_eq!(upward(&made_up("tui/run.rs", "use crate::cli::Args;")), ["tui/run.rs: tui must not name cli"]);
}

#[test]
fn libraries_files_threads_and_output_stay_in_their_place() {
    assert_eq!(complaints(&tree("src"), out_of_place), "");
}

#[test]
fn a_name_out_of_its_place_is_found() {
    for (path, text, name) in [
        ("review/mod.rs", "use ratatui::layout::Rect;", "ratatui"),
        ("checks/judge.rs", "fn f(k: crossterm::event::KeyEvent) {}", "crossterm"),
        ("tui/draw.rs", "use clap::Parser;", "clap"),
        ("review/many.rs", "use clap_complete::Shell;", "clap_complete"),
        ("review/many.rs", "use clap_mangen::Man;", "clap_mangen"),
        ("arm/joint.rs", "#[derive(serde::Serialize)] struct S;", "serde"),
        ("cli/check.rs", "let x = serde_json::to_string(&y);", "serde_json"),
        ("program/recipe.rs", "use toml;", "toml"),
        ("files/raw.rs", "use toml_edit::Document;", "toml_edit"),
        ("files/raw.rs", "use toml_parser::Source;", "toml_parser"),
        ("cli/check.rs", "use std::{fmt, fs, path::Path};", "std::fs"),
        ("cli/check.rs", "std::fs::read_to_string(p)", "std::fs"),
        ("motion/plan.rs", "std::thread::spawn(f);", "std::thread"),
        ("tui/draw.rs", "use crossbeam_channel::Sender;", "crossbeam_channel"),
        ("checks/judge.rs", "use rayon::prelude::*;", "rayon"),
        ("files/mod.rs", "println!(\"{x}\");", "println"),
        ("tui/run.rs", "eprintln!(\"{x}\");", "eprintln"),
        ("cli/check.rs", "dbg!(x);", "dbg"),
    ] {
        let found = out_of_place(&made_up(path, text));
        assert!(found.len() == 1 && found[0].starts_with(&format!("{path}: {name} must")), "{text}: {found:?}");
    }
    for (path, text) in [
        ("tui/draw.rs", "use ratatui::layout::Rect; use crossterm::event::KeyEvent;"),
        ("files/raw.rs", "use serde::Deserialize; fn f() { std::fs::read(p); toml::from_str(s); }"),
        ("review/recheck.rs", "std::thread::spawn(f); use crossbeam_channel::Sender;"),
        ("review/recheck/worker.rs", "use std::thread;"),
        ("checks/survey.rs", "use rayon::prelude::*; use std::sync::atomic::AtomicBool;"),
        ("main.rs", "eprintln!(\"{x}\");"),
        ("motion/plan.rs", "// println!, serde::Serialize, std::fs\nlet toml = 1; let thread = fs; writeln!(f);"),
        ("review/mod.rs", "use std::{fmt, path::Path};"),
    ] {
        assert_eq!(out_of_place(&made_up(path, text)), [""; 0], "{text}");
    }
}

#[test]
fn nobody_reaches_two_modules_up() {
    assert_eq!(complaints(&tree("src"), two_up), "");
    assert_eq!(two_up(&made_up("checks/proof/ball.rs", "use super::super::Check;")).len(), 1);
    assert_eq!(two_up(&made_up("checks/proof/ball.rs", "use super::Check; // not super::super")), [""; 0]);
}

#[test]
fn files_are_short_and_named_after_what_is_in_them() {
    for dir in ["src", "tests"] {
        assert_eq!(complaints(&tree(dir), too_long), "");
        assert_eq!(complaints(&tree(dir), empty_name), "");
    }
    assert_eq!(too_long(&made_up("arm/a.rs", &"\n".repeat(401))).len(), 1);
    assert_eq!(too_long(&made_up("arm/a.rs", &"\n".repeat(400))), [""; 0]);
    assert_eq!(empty_name(&made_up("arm/utils.rs", "")).len(), 1);
    assert_eq!(empty_name(&made_up("common/mod.rs", "")).len(), 1);
    assert_eq!(empty_name(&made_up("arm/joint.rs", "")), [""; 0]);
}

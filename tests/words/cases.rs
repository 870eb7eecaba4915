use std::sync::Arc;

use elbowroom::checks::{Check, Finding, Watch};
use elbowroom::files::{read_arm, read_recipe};
use elbowroom::review::{Explanation, Judged, Label, explain, wrap};

/// A six-axis arm with a spherical wrist.
pub const SIX: &str = include_str!("six-axis.toml");
/// A six-axis arm whose file gives all that torque in motion needs.
pub const FULL: &str = include_str!("../../recipes/arms/six-axis-12kg.toml");
/// An arm of four joints, the third of which slides.
pub const FOUR: &str = include_str!("../../recipes/arms/four-axis-rrpr.toml");

/// What stands above the waypoints in these tests.
const HEAD: &str = r#"
elbowroom-recipe = 1
name = "Test"
arm = "arm.toml"
[usual]
accel = 1000
[[tool]]
name = "gripper"
tcp = { xyz = [0, 0, 165] }
mass = 3.4
com = [0, 0, 60]
[[load]]
name = "housing"
mass = 6.5
com = [0, 0, -15]
"#;

/// A line that passes a straight wrist halfway, at `speed` mm/s.
pub fn past_a_straight_wrist(speed: f64) -> Judged {
    let points = format!(
        r#"{READY}
        [[waypoint]]
        name = "in"
        pose = {{ xyz = [1060, 250, 620], rpy = [180, -55, 0] }}
        arrive = "joint"
        share = 40
        [[waypoint]]
        name = "out"
        pose = {{ xyz = [1060, -250, 620], rpy = [180, -55, 0] }}
        arrive = "line"
        speed = {speed}
        "#
    );
    judged(SIX, "", &points)
}

/// A waypoint from which the others start.
pub const READY: &str = r#"
[[waypoint]]
name = "ready"
joints = [0, -20, -20, 0, 60, 0]
"#;

/// A line out to full stretch.
pub const STRETCH: &str = r#"
carrying = "housing"
[[waypoint]]
name = "near"
joints = [-22, 28, -33, 0, 55, 0]
[[waypoint]]
name = "far"
joints = [-22, 75, -62, 0, 35, 0]
arrive = "joint"
share = 30
"#;

/// Judges a recipe of the usual head, criteria (`[acceptance]` and more tables) and waypoints on an arm.
pub fn judged(arm: &str, criteria: &str, waypoints: &str) -> Judged {
    let (top, waypoints) = match waypoints.split_once("[[waypoint]]") {
        Some((top, rest)) => (top.to_owned(), format!("[[waypoint]]{rest}")),
        None => (String::new(), waypoints.to_owned()),
    };
    let (first, tables) = HEAD.split_once("[usual]").expect("the head has it");
    let text = format!("{first}{top}\n[usual]{tables}\n{criteria}\n{waypoints}");
    let arm = Arc::new(read_arm(arm, "arm.toml").unwrap_or_else(|wrong| panic!("{wrong}")));
    let recipe = Arc::new(read_recipe(&text, "test.toml", &arm).unwrap_or_else(|wrong| panic!("{wrong}")));
    Judged::of(&arm, &recipe, None, &Watch::default()).expect("nobody stops it")
}

/// The same with a tool that the work lets turn about its own axis.
pub fn judged_freely(arm: &str, waypoints: &str) -> Judged {
    let mut judged = judged(arm, "", waypoints);
    let mut recipe = (*judged.recipe).clone();
    recipe.tools[0].turns_freely = true;
    judged = Judged::of(&judged.arm, &Arc::new(recipe), None, &Watch::default()).expect("nobody stops it");
    judged
}

/// The worst finding of a check on the last segment that has one.
pub fn found(judged: &Judged, check: Check) -> Finding {
    let of = |finding: &&Finding| finding.check == check;
    *judged.survey.findings.iter().find(of).unwrap_or_else(|| panic!("no {check:?} in {:?}", judged.survey.findings))
}

/// The text of one paragraph.
pub fn says(judged: &Judged, finding: &Finding, label: Label) -> String {
    explain(judged, finding).paragraphs.into_iter().find(|paragraph| paragraph.label == label).expect("it has one").text
}

/// An explanation as a narrow and a usual terminal show it.
pub fn shown(told: &Explanation) -> String {
    let mut text = String::new();
    for width in [40, 80] {
        text += &format!("{}\n", "-".repeat(width));
        let mut lines = wrap(&told.title, width);
        for paragraph in &told.paragraphs {
            lines.push(paragraph.label.words().to_uppercase());
            lines.extend(wrap(&without_count(&paragraph.text), width));
            lines.extend(paragraph.bars.iter().map(|bar| format!("{}: {} ({:+.3})", bar.name, bar.figure, bar.share)));
        }
        for line in lines {
            assert!(unicode_width::UnicodeWidthStr::width(line.as_str()) <= width, "wider than {width}: {line}");
            text += &format!("{line}\n");
        }
    }
    text
}

/// The text without the number of instants looked at, which is the sweep's business.
fn without_count(text: &str) -> String {
    let words: Vec<&str> = text.split(' ').collect();
    let count = |k: usize| words.get(k + 1).is_some_and(|next| next.starts_with("instants"));
    (0..words.len())
        .map(|k| if count(k) && words[k].parse::<usize>().is_ok() { "so many" } else { words[k] })
        .collect::<Vec<_>>()
        .join(" ")
}

/// The figure that stands before `unit` behind the words `after`.
pub fn figure(text: &str, after: &str, unit: &str) -> f64 {
    let (_, rest) = text.split_once(after).unwrap_or_else(|| panic!("no \"{after}\" in: {text}"));
    let end = rest.find(unit).unwrap_or_else(|| panic!("no \"{unit}\" behind \"{after}\" in: {text}"));
    rest[..end].trim().parse().unwrap_or_else(|_| panic!("\"{}\" is no figure in: {text}", &rest[..end]))
}

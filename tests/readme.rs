//! What the README shows as files can be read, and what it says of the demonstration is so.

use std::path::Path;
use std::sync::Arc;

use elbowroom::checks::{Verdict, Watch};
use elbowroom::files;
use elbowroom::review::{Judged, headline};

fn readme() -> String {
    std::fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("README.md")).expect("the README")
}

fn blocks<'a>(text: &'a str, kind: &str) -> Vec<&'a str> {
    let fence = format!("```{kind}\n");
    text.split(fence.as_str()).skip(1).filter_map(|rest| rest.split("```").next()).collect()
}

#[test]
fn the_files_in_the_readme_can_be_read() {
    let text = readme();
    let examples = blocks(&text, "toml");
    let [arm, recipe] = examples[..] else { panic!("{} examples", examples.len()) };
    // It shows the first joint of six; the load diagram names a later one.
    let arm = files::read_arm(&arm.replace("joint = \"J5\"", "joint = \"J1\""), "README.md");
    let task_missing = arm.expect_err("an arm of one joint needs a task").to_string();
    assert!(task_missing.contains("task") && task_missing.lines().count() <= 2, "{task_missing}");
    let demo = files::demo();
    let recipe = files::read_recipe(recipe, "README.md", &demo.arm).unwrap_or_else(|rejected| panic!("{rejected}"));
    let judged = Judged::of(&Arc::new(demo.arm), &Arc::new(recipe), None, &Watch::default()).expect("not stopped");
    assert_eq!(judged.survey.verdict(), Verdict::Clear, "{:?}", judged.survey.findings);
    let displayed = |doubt: &elbowroom::checks::Doubt| matches!(doubt, elbowroom::checks::Doubt::Shown { .. });
    assert!(!judged.survey.doubts.iter().any(displayed));
}

#[test]
fn the_screen_in_the_readme_is_that_of_the_demonstration() {
    let text = readme();
    let screen = blocks(&text, "text")[0];
    let demo = files::demo();
    let judged = Judged::of(&Arc::new(demo.arm), &Arc::new(demo.recipe), None, &Watch::default()).expect("not stopped");
    assert!(screen.starts_with(&headline(&judged)), "{}", headline(&judged));
    assert!(screen.lines().count() == 24 && screen.lines().all(|line| line.chars().count() <= 80));
}

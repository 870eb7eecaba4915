//! A catalogue of broken files, each with all that is said about it, word for word.

mod arms;
mod opening;
mod recipes;
mod scribbles;

use elbowroom::files::{Rejected, read_arm, read_recipe};

const ARM: &str = include_str!("arm.toml");
const RECIPE: &str = include_str!("recipe.toml");

/// A valid text, what in it is replaced by what, and everything that is then said, a line a complaint.
type Case = (&'static str, &'static str, &'static str);

fn arm_says(text: &str) -> String {
    told(read_arm(text, "arm.toml").map(|_| ()))
}

fn recipe_says(text: &str) -> String {
    let arm = read_arm(ARM, "arm.toml").expect("the unbroken arm file reads");
    told(read_recipe(text, "recipe.toml", &arm).map(|_| ()))
}

fn told(result: Result<(), Rejected>) -> String {
    result.err().map(|rejected| rejected.to_string()).unwrap_or_default()
}

fn check(valid: &str, cases: &[Case], says: impl Fn(&str) -> String) {
    assert_eq!(says(valid), "");
    let mut wrong = String::new();
    for (from, to, expected) in cases {
        assert!(valid.contains(from), "the valid text does not hold {from:?}");
        let said = says(&valid.replacen(from, to, 1));
        if said != *expected {
            wrong.push_str(&format!("{from:?} -> {to:?}\nexpected: {expected}\n    said: {said}\n\n"));
        }
    }
    assert!(wrong.is_empty(), "\n{wrong}");
}
#[test]
fn an_arm_file_with_one_thing_broken_says_just_that() {
    check(ARM, arms::ARMS, arm_says);
}

#[test]
fn a_recipe_with_one_thing_broken_says_just_that() {
    check(RECIPE, recipes::RECIPES, recipe_says);
}

#[test]
fn faults_of_many_kinds_are_told_together_and_in_order() {
    let text = ARM
        .replace("rate = 175", "rate = -1")
        .replace("a = 100, ", "")
        .replace("rated-load", "rated-lod")
        .replace("accel = 500", "");
    assert_eq!(
        arm_says(&text),
        "joint J1: dh: a is missing; it must be a number (mm) (arm.toml:9:6)\n\
         joint J1: rate is -1 deg/s; it must be above 0 (arm.toml:11:8)\n\
         joint J2: accel is missing; it must be a number (deg/s²) (arm.toml:17:1)\n\
         flange: unknown key \"rated-lod\"; did you mean \"rated-load\"? (arm.toml:36:1)"
    );
}

#[test]
fn a_byte_order_mark_and_either_line_ending_change_nothing() {
    let broken = ARM.replace("rate = 175", "rate = -1");
    for text in [broken.clone(), broken.replace('\n', "\r\n"), format!("\u{feff}{broken}")] {
        assert_eq!(arm_says(&text), "joint J1: rate is -1 deg/s; it must be above 0 (arm.toml:11:8)");
    }
    assert_eq!(arm_says("\u{feff}name = 1").matches("arm.toml:1:1)").count(), 1);
}

#[test]
fn a_file_with_nothing_in_it_is_told_what_belongs_there() {
    for text in ["", "\n", "# only words\n", "\u{feff}"] {
        assert_eq!(arm_says(text), "the file holds nothing; an arm file has the line \"elbowroom-arm = 1\" (arm.toml:1:1)");
    }
    assert_eq!(
        recipe_says("[package]\nname = \"x\"\n"),
        "recipe: elbowroom-recipe is missing; a recipe has the line \"elbowroom-recipe = 1\" (recipe.toml:1:1)",
        "somebody else's file is not picked apart"
    );
}

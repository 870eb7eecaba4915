//! Every kind of doubt: when it is raised, when it is not, and its words on a narrow and on a usual terminal.

use elbowroom::checks::Doubt;
use elbowroom::review::{Judged, doubt_text, wrap};

use crate::cases::{READY, SIX, judged};

/// The doubts of a recipe but for those that the tests' own arm and loads always raise: they leave out rotors, friction and
/// inertias, which [`what_leaves_motion_in_part_is_doubted`] is about.
fn own(judged: &Judged) -> Vec<&Doubt> {
    let in_part = |doubt: &&Doubt| matches!(doubt, Doubt::MotionInPart | Doubt::NoInertia { .. });
    judged.survey.doubts.iter().filter(|doubt| !in_part(doubt)).collect()
}

#[test]
fn what_leaves_motion_in_part_is_doubted() {
    let judged = judged(SIX, "", &then_joints(NEXT));
    let told: Vec<String> = judged.survey.doubts.iter().map(|doubt| wrap(&doubt_text(&judged, doubt), 80).join("\n")).collect();
    insta::assert_snapshot!("doubt_motion_in_part", told.join("\n"));
    let demo = elbowroom::files::demo();
    let whole = elbowroom::review::Judged::of(&demo.arm.into(), &demo.recipe.into(), None, &elbowroom::checks::Watch::default());
    assert!(!has(&whole.expect("not stopped"), |doubt| matches!(doubt, Doubt::MotionInPart | Doubt::NoInertia { .. })));
}

/// All doubts of a recipe as both terminals show them.
fn told(judged: &Judged) -> String {
    let mut text = String::new();
    for width in [40, 80] {
        text += &format!("{}\n", "-".repeat(width));
        for doubt in own(judged) {
            text += &(wrap(&doubt_text(judged, doubt), width).join("\n") + "\n");
        }
    }
    text
}

fn has(judged: &Judged, wanted: impl Fn(&Doubt) -> bool) -> bool {
    judged.survey.doubts.iter().any(wanted)
}

/// A second waypoint reached by a joint move.
fn then_joints(values: &str) -> String {
    format!("{READY}[[waypoint]]\nname = \"next\"\njoints = [{values}]\narrive = \"joint\"\nshare = 40\n")
}

const NEXT: &str = "10, -20, -20, 0, 60, 0";

fn replaced(old: &str, new: &str) -> Judged {
    // The usual head's tool and load stand behind `old`; the doubted one replaces them.
    let criteria = format!("[[tool]]\nname = \"doubted\"\n{old}\n{new}");
    judged(SIX, &criteria, &then_joints(NEXT))
}

#[test]
fn centres_of_mass_far_off_or_missing_are_doubted() {
    let far = replaced("tcp = { xyz = [0, 0, 700] }\nmass = 4", "com = [0, 30, 420]");
    insta::assert_snapshot!("doubt_far_centre", told(&far));
    let missing = replaced("tcp = { xyz = [0, 0, 200] }\nmass = 4", "com = [0, 0, 0]");
    insta::assert_snapshot!("doubt_centre_at_flange", told(&missing));
    let load = judged(SIX, "[[load]]\nname = \"beam\"\nmass = 3\ncom = [0, 0, 650]", &then_joints(NEXT));
    insta::assert_snapshot!("doubt_far_load", told(&load));
    let near = replaced("tcp = { xyz = [0, 0, 700] }\nmass = 4", "com = [0, 0, 399]");
    assert!(own(&near).is_empty(), "{:?}", near.survey.doubts);
}

#[test]
fn a_name_that_denies_the_mount_is_doubted() {
    let named = |word: &str, rpy: &str| {
        let arm = SIX.replace("name = \"Six-axis, 12 kg, 1.4 m\"", &format!("name = \"Six-axis, {word}\""));
        judged(&arm, &format!("[mount]\nxyz = [0, 0, 2000]\nrpy = {rpy}"), &then_joints(NEXT))
    };
    insta::assert_snapshot!("doubt_mount", told(&named("floor", "[180, 0, 0]")));
    for (word, rpy) in [("ceiling", "[180, 0, 0]"), ("floor", "[0, 0, 90]"), ("wall", "[90, 0, 0]"), ("floored", "[180, 0, 0]")] {
        assert!(!has(&named(word, rpy), |doubt| matches!(doubt, Doubt::MountByName { .. })), "{word} {rpy}");
    }
    for (word, rpy) in [("ceiling", "[0, 0, 0]"), ("wall", "[180, 0, 0]"), ("Overhead", "[90, 0, 0]")] {
        assert!(has(&named(word, rpy), |doubt| matches!(doubt, Doubt::MountByName { .. })), "{word} {rpy}");
    }
}

#[test]
fn joint_values_that_look_like_radians_are_doubted() {
    let start = "[[waypoint]]\nname = \"ready\"\njoints = [0, -0.3491, -0.3491, 0, 1.0472, 0]\n";
    let next = "[[waypoint]]\nname = \"next\"\njoints = [1.5708, 0, 0, 0, 1.0472, 0]\narrive = \"joint\"\nshare = 40\n";
    insta::assert_snapshot!("doubt_radians", told(&judged(SIX, "", &format!("{start}{next}"))));
    // A few small values that people write in degrees are no radians.
    let degrees = start.replace("-0.3491", "-2.5").replace("1.0472", "5");
    let next = next.replace("1.5708", "3").replace("1.0472", "5.5");
    assert!(own(&judged(SIX, "", &format!("{degrees}{next}"))).is_empty());
}

#[test]
fn poses_that_look_like_radians_and_metres_are_doubted() {
    let pose = |name: &str, xyz: &str, rpy: &str| {
        format!("[[waypoint]]\nname = \"{name}\"\npose = {{ xyz = {xyz}, rpy = {rpy} }}\narrive = \"joint\"\nshare = 40\n")
    };
    let radians = format!("{READY}{}", pose("in", "[900, 100, 600]", "[3.1416, 0, -0.7854]"));
    insta::assert_snapshot!("doubt_radians_in_poses", told(&judged(SIX, "", &radians)));
    let metres = format!("{READY}{}", pose("in", "[0.9, 0.1, 0.6]", "[180, 0, 0]"));
    insta::assert_snapshot!("doubt_metres", told(&judged(SIX, "", &metres)));
    let tool = replaced("tcp = { xyz = [0, 0, 0.165] }", "mass = 2\ncom = [0, 0, 60]");
    insta::assert_snapshot!("doubt_metres_of_a_tool", told(&tool));
}

#[test]
fn a_speed_beyond_the_arm_is_doubted() {
    let line = |speed: u32| {
        format!(
            "{READY}[[waypoint]]\nname = \"across\"\npose = {{ xyz = [760, -60, 520], rpy = [180, 0, 0] }}\narrive = \"joint\"\n\
             share = 40\n[[waypoint]]\nname = \"down\"\npose = {{ xyz = [760, -60, 420], rpy = [180, 0, 0] }}\narrive = \"line\"\n\
             speed = {speed}\n"
        )
    };
    let judged_fast = judged(SIX, "", &line(25_000));
    insta::assert_snapshot!("doubt_speed", told(&judged_fast));
    let bound = judged_fast.survey.doubts.iter().find_map(|doubt| match doubt {
        Doubt::SpeedBeyondArm { most, .. } => Some(*most),
        _ => None,
    });
    // By hand, from the arm file: how far the TCP can be from each joint's axis system, m, and the joint's rate, deg/s.
    let shoulder = 0.155f64.hypot(0.430);
    let by_hand: f64 = [(0.26, 450.0), (0.26, 330.0), (0.905, 330.0), (1.02, 185.0), (1.615, 165.0), (1.615 + shoulder, 175.0)]
        .map(|(far, rate): (f64, f64)| far * rate.to_radians())
        .iter()
        .sum();
    assert!((bound.expect("doubted") - by_hand).abs() < 1e-9, "{bound:?} {by_hand}");
    assert!(!has(&judged(SIX, "", &line(2500)), |doubt| matches!(doubt, Doubt::SpeedBeyondArm { .. })));
}

#[test]
fn a_joint_that_goes_the_long_way_is_doubted() {
    let from = READY.replace("60, 0]", "60, -100]");
    let to = |j6: f64| format!("{from}{}", then_joints(&format!("10, -20, -20, 0, 60, {j6}")).replace(READY, ""));
    let long = judged(SIX, "", &to(150.0));
    insta::assert_snapshot!("doubt_long_way", told(&long));
    assert!(long.survey.doubts.iter().any(|doubt| match doubt {
        Doubt::LongWay { turns, shorter, .. } =>
            (turns.to_degrees() - 250.0).abs() < 1e-9 && (shorter.to_degrees() + 110.0).abs() < 1e-9,
        _ => false,
    }));
    assert!(own(&judged(SIX, "", &to(80.0))).is_empty(), "half a turn has no shorter way");
    // J4 ends at 190 degrees, so -100 to 150 has no other way.
    let wrist = to(-100.0).replace("-20, 0, 60, -100]\narrive", "-20, 150, 60, -100]\narrive");
    let wrist = wrist.replacen("-20, 0, 60", "-20, -100, 60", 1);
    assert!(!has(&judged(SIX, "", &wrist), |doubt| matches!(doubt, Doubt::LongWay { .. })), "{wrist}");
}

#[test]
fn a_pose_that_leaves_a_turn_open_is_doubted() {
    let from = READY.replace("60, 0]", "60, 300]");
    let pose =
        "[[waypoint]]\nname = \"in\"\npose = { xyz = [900, 100, 600], rpy = [180, 0, 70] }\narrive = \"joint\"\nshare = 40\n";
    let open = judged(SIX, "", &format!("{from}{pose}"));
    assert!(has(&open, |doubt| matches!(doubt, Doubt::WhichTurn { .. })), "{:?}", open.plan.segments[0].end);
    insta::assert_snapshot!("doubt_which_turn", told(&open));
    assert!(!has(&judged(SIX, "", &format!("{READY}{pose}")), |doubt| matches!(doubt, Doubt::WhichTurn { .. })));
}

#[test]
fn a_cycle_that_never_turns_back_is_doubted() {
    let turns = |last: f64| {
        let at = |name: &str, j6: f64| {
            format!("[[waypoint]]\nname = \"{name}\"\njoints = [0, -20, -20, 0, 60, {j6}]\narrive = \"joint\"\nshare = 40\n")
        };
        format!("{READY}{}{}{}", at("one way", 170.0), at("other way", -100.0), at("home", last))
    };
    let on = turns(340.0).replace("60, -100]", "60, 175]").replace("60, 0]", "60, -20]");
    let on = judged(SIX, "", &on);
    assert!(has(&on, |doubt| matches!(doubt, Doubt::NotUnwound { turned, .. } if (turned.to_degrees() - 360.0).abs() < 1e-9)));
    insta::assert_snapshot!("doubt_not_unwound", told(&on));
}

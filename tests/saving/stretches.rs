use elbowroom::files::demo;
use elbowroom::geometry::V3;
use elbowroom::kinematics::Posture;
use elbowroom::program::edit_stretch::{delete, duplicate, free_name, reorder, reverse, with_load, with_tool};
use elbowroom::program::{Edit, Recipe, Taught, Tool, frame_in_base, rename};
use elbowroom::review::shift;

use super::drawn::Draw;

fn after(recipe: &Recipe, edit: &Edit) -> Recipe {
    let mut after = recipe.clone();
    let back = edit.apply(&mut after).expect("it fits");
    let mut undone = after.clone();
    back.apply(&mut undone).expect("it fits");
    assert_eq!(&undone, recipe, "it can be undone");
    after
}

fn names(recipe: &Recipe) -> Vec<&str> {
    recipe.waypoints.iter().map(|waypoint| waypoint.name.as_str()).collect()
}

/// The demonstration recipe with a second tool used half way.
fn two_tools() -> Recipe {
    let mut recipe = demo().recipe;
    let second = Tool { name: "second".to_owned(), ..recipe.tools[0].clone() };
    recipe.tools.push(second);
    recipe.waypoints[8].tool = Some("second".to_owned());
    recipe
}

fn tools(recipe: &Recipe) -> Vec<Option<&str>> {
    recipe.hanging().map(|hanging| hanging.tool.map(|tool| tool.name.as_str())).collect()
}

fn loads(recipe: &Recipe) -> Vec<Option<&str>> {
    recipe.hanging().map(|hanging| hanging.before.map(|load| load.name.as_str())).collect()
}

#[test]
fn a_stretch_is_moved_as_a_whole_whichever_way() {
    let (recipe, arm) = (demo().recipe, demo().arm);
    let mut draw = Draw::seeded(3);
    for _ in 0..200 {
        let first = draw.below(recipe.waypoints.len());
        let last = first + draw.below(recipe.waypoints.len() - first);
        let to = draw.below(recipe.waypoints.len() - (last - first));
        let moved = after(&recipe, &reorder(&recipe, first..=last, to).expect("nothing is taught near another"));
        let mut expected = names(&recipe);
        let stretch: Vec<&str> = expected.drain(first..=last).collect();
        expected.splice(to..to, stretch);
        assert_eq!(names(&moved), expected, "{first}..={last} to {to}");
        assert!(moved.faults(&arm).is_empty(), "{:?}", moved.faults(&arm));
    }
    assert!(reorder(&recipe, 12..=14, 0).is_err() && reorder(&recipe, 0..=2, 12).is_err());
}

#[test]
fn a_waypoint_that_others_are_taught_near_is_not_deleted_or_moved_behind_them() {
    let mut recipe = demo().recipe;
    if let Taught::Pose { near, .. } = &mut recipe.waypoints[8].taught {
        *near = Some("touch".to_owned());
    }
    assert_eq!(
        delete(&recipe, 5..=5).expect_err("refused"),
        "waypoint 9 \"window in\" is taught near \"touch\"; change that first, or delete it too"
    );
    assert!(delete(&recipe, 5..=8).is_ok());
    assert!(reorder(&recipe, 5..=5, 9).expect_err("refused").contains("would come before \"touch\""));
    assert!(delete(&recipe, 0..=12).expect_err("refused").contains("at least 2"));
    let renamed = after(&recipe, &rename::waypoint(&recipe, 5, "contact"));
    assert!(matches!(&renamed.waypoints[8].taught, Taught::Pose { near: Some(near), .. } if near == "contact"));
}

#[test]
fn deleting_keeps_the_tool_behind_and_leaves_a_recipe_without_faults() {
    let (recipe, arm) = (two_tools(), demo().arm);
    for first in 0..recipe.waypoints.len() {
        for last in first..recipe.waypoints.len().min(first + 4) {
            let left = after(&recipe, &delete(&recipe, first..=last).expect("nothing stands in the way"));
            assert!(left.faults(&arm).is_empty(), "{first}..={last}: {:?}", left.faults(&arm));
            let mut expected = tools(&recipe);
            expected.drain(first..=last);
            assert_eq!(tools(&left), expected, "{first}..={last}");
        }
    }
}

#[test]
fn a_duplicate_has_free_names_and_no_faults() {
    let (recipe, arm) = (two_tools(), demo().arm);
    for first in 0..recipe.waypoints.len() {
        let last = (first + 3).min(recipe.waypoints.len() - 1);
        let twice = after(&recipe, &duplicate(&recipe, first..=last));
        assert!(twice.faults(&arm).is_empty(), "{:?}", twice.faults(&arm));
        assert_eq!(twice.waypoints.len(), recipe.waypoints.len() + last - first + 1);
        assert_eq!(names(&twice)[..=last], names(&recipe)[..=last]);
        assert_eq!(twice.waypoints[last + 1].taught, recipe.waypoints[first].taught);
    }
    let taken = ["a", "a 2", "p7"].map(str::to_owned);
    assert_eq!((free_name("a", &taken).as_str(), free_name("a 2", &taken).as_str()), ("a 3", "a 3"));
    assert_eq!(free_name("p7", &taken), "p7 2");
}

#[test]
fn a_stretch_turned_round_twice_is_as_it_was() {
    let recipe = demo().recipe;
    let once = after(&recipe, &reverse(&recipe, 3..=10).expect("nothing changes in it"));
    let mut expected = names(&recipe);
    expected[3..=10].reverse();
    assert_eq!(names(&once), expected);
    // The line between "touch" and "pass end", with its speed, now runs the other way.
    assert_eq!(once.waypoint_named("touch"), Some(8));
    assert_eq!(once.waypoints[8].arrive, recipe.waypoints[6].arrive);
    assert_eq!(once.waypoints[8].push, recipe.waypoints[6].push);
    assert_eq!(once.waypoints[3].arrive, recipe.waypoints[3].arrive);
    assert_eq!(after(&once, &reverse(&once, 3..=10).expect("nor now")), recipe);
    assert!(reverse(&recipe, 1..=4).expect_err("refused").contains("takes or releases a load"));
    assert!(reverse(&two_tools(), 5..=9).expect_err("refused").contains("the tool changes"));
    assert!(reverse(&recipe, 0..=2).is_err() && reverse(&recipe, 5..=99).is_err());
}

#[test]
fn another_tool_or_load_holds_on_the_stretch_and_nowhere_else() {
    let (recipe, arm) = (two_tools(), demo().arm);
    let count = recipe.waypoints.len();
    for first in 0..count {
        for last in first..count {
            for tool in ["gripper", "second"] {
                let changed = after(&recipe, &with_tool(&recipe, first..=last, tool).expect("there is such a tool"));
                let mut expected = tools(&recipe);
                expected[first..=last].fill(Some(tool));
                assert_eq!(tools(&changed), expected, "{first}..={last} {tool}");
            }
            if first == 0 {
                assert!(with_load(&recipe, first..=last, None).is_err());
                continue;
            }
            for load in [None, Some("housing")] {
                let changed = after(&recipe, &with_load(&recipe, first..=last, load).expect("there is such a load"));
                let mut expected = loads(&recipe);
                expected[first..=last].fill(load);
                assert_eq!(loads(&changed), expected, "{first}..={last} {load:?}");
                assert!(changed.faults(&arm).is_empty());
            }
        }
    }
    assert!(with_tool(&recipe, 1..=2, "none").is_err() && with_load(&recipe, 1..=2, Some("none")).is_err());
}

#[test]
fn a_shift_moves_every_point_by_the_offset_whether_taught_as_pose_or_as_joint_values() {
    let opened = demo();
    let mut recipe = opened.recipe;
    recipe.frames.push(elbowroom::program::Frame {
        name: "bench".to_owned(),
        pose: elbowroom::geometry::Pose::new(
            V3::new(0.4, 0.1, 0.0),
            elbowroom::geometry::Rotation::from_rpy_deg([0.0, 20.0, 65.0]),
        ),
        parent: "base".to_owned(),
    });
    if let Taught::Pose { pose, .. } = &mut recipe.waypoints[4].taught {
        pose.frame = Some("bench".to_owned());
    }
    let offset = V3::new(0.01, -0.02, 0.015);
    for frame in ["base", "world", "bench"] {
        let edit = shift(&recipe, &opened.arm, 0..=13, offset, frame).expect("all are in reach");
        let shifted = after(&recipe, &edit);
        let asked = frame_in_base(&recipe, frame).expect("a frame").axes * offset;
        for (index, (old, new)) in recipe.waypoints.iter().zip(&shifted.waypoints).enumerate() {
            let place = |recipe: &Recipe, taught: &Taught| match taught {
                Taught::Joints(q) => Posture::at(opened.arm.chain(), q).tcp(&recipe.hanging_at(index).arriving().tcp).at,
                Taught::Pose { pose, .. } => {
                    frame_in_base(recipe, pose.frame.as_deref().unwrap_or("base")).expect("a frame").point(&pose.at)
                }
            };
            let moved = place(&shifted, &new.taught) - place(&recipe, &old.taught);
            assert!((moved - asked).norm() < 1e-9, "{index} in {frame}: {moved:?}");
            if let (Taught::Joints(old), Taught::Joints(new)) = (&old.taught, &new.taught) {
                assert!(old.zip(new, |a, b| a - b).largest() < 0.2, "the posture stays");
            }
        }
    }
    let far = shift(&recipe, &opened.arm, 0..=0, V3::new(9.0, 0.0, 0.0), "base").expect_err("out of reach");
    assert!(far.starts_with("waypoint 1 \"ready\": no joint values were found"), "{far}");
}

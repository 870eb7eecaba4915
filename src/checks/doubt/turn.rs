use std::f64::consts::{PI, TAU};

use crate::arm::{Arm, Joint, JointKind, Joints};
use crate::motion::Plan;
use crate::program::{Recipe, Taught};

use super::Doubt;

/// Half a turn and this much count as half a turn, rad: what people type has four digits.
const HALF_TURN: f64 = PI + 1e-5;
/// A cycle comes back when no joint is farther off than this but for whole turns, rad or m (about a degree).
const COMES_BACK: f64 = 0.02;

/// What is probably not meant about whole turns on the way to waypoint `index`.
pub(super) fn at_waypoint(arm: &Arm, recipe: &Recipe, plan: &Plan, index: usize) -> Vec<Doubt> {
    let Some(q) = joint_values(plan, index) else { return Vec::new() };
    let by_pose = matches!(recipe.waypoints[index].taught, Taught::Pose { .. });
    let before = plan.arriving(index).filter(|segment| !segment.follows_path());
    let mut found = Vec::new();
    for (joint, data) in turning(arm) {
        let long = before.and_then(|segment| shorter_way(data, segment.start[joint], q[joint]));
        if let Some([turns, shorter]) = long {
            found.push(Doubt::LongWay { waypoint: index, joint, turns, shorter });
        }
        if by_pose && let Some(other) = other_turn(data, q[joint]) {
            found.push(Doubt::WhichTurn { waypoint: index, joint, value: q[joint], other });
        }
    }
    found
}

fn turning(arm: &Arm) -> impl Iterator<Item = (usize, &Joint)> {
    arm.joints().iter().enumerate().filter(|(_, joint)| joint.kind == JointKind::Revolute)
}

/// The joint values that a waypoint has in the plan; `None` where none were found.
fn joint_values(plan: &Plan, index: usize) -> Option<Joints> {
    match index.checked_sub(1) {
        None => plan.segments.first().map(|segment| segment.start),
        Some(_) => plan.arriving(index).filter(|segment| segment.trouble.is_none()).map(|segment| segment.end),
    }
}

/// How far a joint turns from `from` to `to`, and how far it would turn to the same posture by the shorter way in its range, if
/// there is one.
fn shorter_way(joint: &Joint, from: f64, to: f64) -> Option<[f64; 2]> {
    let turns = to - from;
    if !(turns.abs() > HALF_TURN) {
        return None;
    }
    let shorter = turns - (turns / TAU).round() * TAU;
    (joint.range.to_end(from + shorter) >= 0.0).then_some([turns, shorter])
}

/// The value nearest to 0 that means the same posture as one beyond half a turn, if the joint can take it.
fn other_turn(joint: &Joint, value: f64) -> Option<f64> {
    if !(value.abs() > HALF_TURN) {
        return None;
    }
    let other = value - (value / TAU).round() * TAU;
    (joint.range.to_end(other) >= 0.0).then_some(other)
}

/// What the whole cycle does to cables along the wrist.
pub(super) fn over_the_cycle(arm: &Arm, plan: &Plan) -> Vec<Doubt> {
    let (Some(first), Some(last)) = (plan.segments.first(), plan.segments.last()) else { return Vec::new() };
    let closes = plan.segments.iter().all(|segment| segment.trouble.is_none()) && is_same_but_turns(arm, &first.start, &last.end);
    let mut found = Vec::new();
    for (joint, _) in wrist(arm) {
        let turned = last.end[joint] - first.start[joint];
        if closes && turned.abs() > HALF_TURN {
            found.push(Doubt::NotUnwound { joint, turned });
        }
    }
    found
}

/// Whether two sets of joint values are one posture but for whole turns.
fn is_same_but_turns(arm: &Arm, a: &Joints, b: &Joints) -> bool {
    arm.joints().iter().enumerate().all(|(j, joint)| {
        let gap = a[j] - b[j];
        let gap = if joint.kind == JointKind::Revolute { gap - (gap / TAU).round() * TAU } else { gap };
        gap.abs() <= COMES_BACK
    })
}

/// The joints of the wrist: the last three of an arm of six joints or more, otherwise the last one; those of them that turn.
fn wrist(arm: &Arm) -> impl Iterator<Item = (usize, &Joint)> {
    let first = if arm.len() >= 6 { arm.len() - 3 } else { arm.len() - 1 };
    turning(arm).filter(move |(joint, _)| *joint >= first)
}

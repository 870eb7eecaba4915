use crate::arm::{Arm, Joints};
use crate::geometry::{Pose, V3};
use crate::kinematics::{Posture, Reached, pose_error, reach};
use crate::program::{Carried, Given, Recipe, Taught, frame_in_base};

use super::NoPath;

/// How far a pose may miss in directions that the arm's task leaves out, m (a tenth of a millimetre).
const LEFT_OUT_M: f64 = 1e-4;
/// The same for turning, rad (a tenth of a degree).
const LEFT_OUT_RAD: f64 = 1.745e-3;

/// Where a waypoint is: its joint values, or why there are none.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Place {
    pub q: Joints,
    pub trouble: Option<NoPath>,
}

/// A pose of the recipe in the base; an open orientation is filled with `otherwise`.
pub fn pose_in_base(recipe: &Recipe, given: &Given, otherwise: &Pose) -> Pose {
    let frame = given.frame.as_deref().and_then(|name| frame_in_base(recipe, name)).unwrap_or_else(Pose::identity);
    let at = frame.point(&given.at);
    let axes = given.rotation.map_or(otherwise.axes, |rotation| frame.axes * rotation.matrix());
    Pose { axes, at }
}

/// A point of the recipe in the base, m.
pub(super) fn point_in_base(recipe: &Recipe, given: &Given) -> V3 {
    pose_in_base(recipe, given, &Pose::identity()).at
}

/// The pose that waypoint `index` asks of the TCP, base; `now` is the posture before it.
pub(super) fn wanted_pose(arm: &Arm, recipe: &Recipe, index: usize, carried: &Carried, now: &Joints) -> Pose {
    let tcp = |q: &Joints| Posture::at(arm.chain(), q).tcp(&carried.tcp);
    match &recipe.waypoints[index].taught {
        Taught::Joints(q) => tcp(q),
        Taught::Pose { pose, .. } => pose_in_base(recipe, pose, &tcp(now)),
    }
}

/// Joint values for waypoint `index`, of the posture nearest to `near`.
pub(super) fn resolve(arm: &Arm, recipe: &Recipe, index: usize, carried: &Carried, near: &Joints) -> Place {
    let given = match &recipe.waypoints[index].taught {
        Taught::Joints(q) => return Place { q: *q, trouble: None },
        Taught::Pose { pose, .. } => pose,
    };
    let target = wanted_pose(arm, recipe, index, carried, near);
    match reach(arm, &carried.tcp, &target, near) {
        Reached::Yes { q, .. } => Place { q, trouble: misses_left_out(arm, carried, &target, &q, given.rotation.is_some()) },
        Reached::No { nearest, gap, sigma } => {
            let gap = gap[..3].iter().map(|g| g * g).sum::<f64>().sqrt();
            let trouble = if Reached::at_limit(sigma) {
                NoPath::OutOfReach { u: 0.0, q: nearest, sigma, gap }
            } else {
                NoPath::Lost { u: 0.0, q: nearest, sigma }
            };
            Place { q: nearest, trouble: Some(trouble) }
        }
    }
}

/// Whether a posture that satisfies the arm's task misses the pose in a direction that the task leaves out.
pub(super) fn misses_left_out(arm: &Arm, carried: &Carried, target: &Pose, q: &Joints, turning_too: bool) -> Option<NoPath> {
    if arm.task().is_whole() {
        return None;
    }
    let gap = pose_error(&Posture::at(arm.chain(), q).tcp(&carried.tcp), target);
    let fits = (0..6).all(|row| match row {
        0..3 => gap[row].abs() <= LEFT_OUT_M,
        _ => !turning_too || gap[row].abs() <= LEFT_OUT_RAD,
    });
    (!fits).then_some(NoPath::Orientation { gap, q: *q })
}

use crate::arm::{Arm, Joints, MAX_JOINTS};
use crate::geometry::{Pose, V3};
use crate::kinematics::{Jacobian, Lu, Posture, Reached, pose_error, reach, stacked};
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
        Reached::Yes { q, .. } => {
            let q = steadied(arm, &carried.tcp, &target, &q);
            Place { q, trouble: misses_left_out(arm, carried, &target, &q, given.rotation.is_some()) }
        }
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

/// Joint values are found again from the nearest point of a grid this wide, rad or m.
const GRID: f64 = 1.0 / 1048576.0;
/// Steps of Newton from there: each squares what is missing, and so few end at rounding.
const GRID_STEPS: usize = 4;
/// What is found again may differ by this much, rad or m; near a singular posture it differs by more and is left as it was.
const SAME_VALUES: f64 = 1e-9;

/// The joint values `q` of a pose (TCP at `tcp` on the flange, `target` in the base), but for their last digits, which depend on the
/// pose alone and no longer on the way on which they were found. So an edit further up changes nothing behind a pose that it leaves
/// in place. Of a redundant arm the way there decides where it stands, so its values stay as they are.
pub(super) fn steadied(arm: &Arm, tcp: &Pose, target: &Pose, q: &Joints) -> Joints {
    let (task, n) = (arm.task(), arm.len());
    if arm.is_redundant() {
        return *q;
    }
    let mut found = Joints::from_fn(n, |j| (q[j] / GRID).round() * GRID);
    for _ in 0..GRID_STEPS {
        let posture = Posture::at(arm.chain(), &found);
        let now = posture.tcp(tcp);
        let jacobian = Jacobian::at(arm.chain(), &posture, &now.at);
        let gap = pose_error(&now, target);
        let mut wanted = [0.0; MAX_JOINTS];
        for (slot, &row) in task.rows().iter().enumerate() {
            wanted[slot] = gap[row];
        }
        let step = Lu::of(stacked(&jacobian, task, &[]), n).solve(&wanted);
        found = Joints::from_fn(n, |j| found[j] + step[j]);
    }
    if found.zip(q, |a, b| a - b).largest() <= SAME_VALUES { found } else { *q }
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

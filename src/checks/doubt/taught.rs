use crate::arm::Arm;
use crate::geometry::Pose;
use crate::kinematics::{Posture, pose_error};
use crate::motion::{Passed, Plan, pose_in_base};
use crate::program::{Hanging, Recipe, Taught, Then};

use super::Doubt;

/// A displayed pose may differ by this much, m.
const SHOWN_M: f64 = 1e-3;
/// A displayed orientation may differ by this much, rad (a tenth of a degree).
const SHOWN_RAD: f64 = 1.745_33e-3;

/// What is probably wrong with a waypoint as it was taught, and with what is carried on the way to it. The same pose under two
/// names is none: a cycle often comes back.
pub(super) fn doubts(arm: &Arm, recipe: &Recipe, plan: &Plan, index: usize, hangs: Hanging) -> Vec<Doubt> {
    let mut found: Vec<Doubt> = shown_gap(arm, recipe, plan, index, hangs).into_iter().collect();
    match (&recipe.waypoints[index].then, hangs.before) {
        (Some(Then::Take(_)), Some(_)) => found.push(Doubt::TakenTwice { waypoint: index }),
        (Some(Then::Release), None) => found.push(Doubt::NothingToRelease { waypoint: index }),
        _ => {}
    }
    let fly_by = plan.fly_bys.binary_search_by_key(&index, |fly_by| fly_by.waypoint).ok().map(|at| plan.fly_bys[at]);
    match fly_by.map(|fly_by| (fly_by.passed, fly_by.radius)) {
        Some((Passed::Cut, radius)) => found.push(Doubt::FlyByCut { waypoint: index, radius }),
        Some((Passed::Stopped, _)) => found.push(Doubt::FlyByStops { waypoint: index }),
        Some((Passed::Whole, _)) | None => {}
    }
    let Some(segment) = plan.arriving(index) else { return found };
    if segment.trouble.is_none() && segment.duration() == 0.0 {
        found.push(Doubt::NoMotion { waypoint: index });
    }
    if let Some(rated) = arm.flange().rated_load
        && segment.carried.mass() > rated
    {
        found.push(Doubt::OverRatedLoad { waypoint: index, carried: segment.carried.mass(), rated });
    }
    found
}

fn shown_gap(arm: &Arm, recipe: &Recipe, plan: &Plan, waypoint: usize, hangs: Hanging) -> Option<Doubt> {
    let shown = recipe.waypoints[waypoint].shown.as_ref()?;
    let q = match (&recipe.waypoints[waypoint].taught, plan.arriving(waypoint)) {
        (Taught::Joints(q), _) => *q,
        (_, Some(segment)) => segment.end,
        (_, None) => plan.segments.first()?.start,
    };
    let tcp = hangs.tool.map_or_else(Pose::identity, |tool| tool.tcp);
    let now = Posture::at(arm.chain(), &q).tcp(&tcp);
    let error = pose_error(&now, &pose_in_base(recipe, shown, &now));
    let length = |part: &[f64]| part.iter().map(|v| v * v).sum::<f64>().sqrt();
    let (gap, turn) = (length(&error[..3]), length(&error[3..]));
    (!(gap <= SHOWN_M && turn <= SHOWN_RAD)).then_some(Doubt::Shown { waypoint, gap, turn })
}

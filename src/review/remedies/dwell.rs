use crate::arm::Joints;
use crate::checks::Cycle;
use crate::dynamics::holding_torque;
use crate::kinematics::Posture;
use crate::program::Edit;
use crate::units::Seconds;

use super::trial::Trial;
use super::{Change, Judged, Outcome, size};

/// Dwells are offered in steps of this, s.
const STEP: f64 = 0.1;
/// No cycle is made longer than so many times itself.
const LONGEST: f64 = 10.0;

/// A longer dwell where standing asks least, until the root mean square of the torque over the cycle leaves the reserve.
///
/// With the torque `h` at the stop, `(whole + h² d) / (duration + d) = allowed²` yields `d`; every joint has its own, the longest
/// counts.
pub(super) fn dwell(trial: &Trial) -> Outcome {
    let (plan, recipe) = (&trial.judged.plan, trial.recipe());
    let cycle = &trial.judged.survey.cycle;
    let mut tries: Vec<(usize, f64)> = (0..plan.segments.len())
        .filter(|&index| !plan.segments[index].blend && recipe.waypoints[plan.segments[index].to].fly_by.is_none())
        .filter_map(|index| Some((plan.segments[index].to, longest(trial, cycle, index)?)))
        .filter(|(_, more)| *more <= LONGEST * cycle.duration)
        .collect();
    tries.sort_by(|a, b| a.1.total_cmp(&b.1));
    let mut outcome = Outcome::nothing();
    for (waypoint, more) in tries.into_iter().take(3) {
        let from = recipe.waypoints[waypoint].dwell;
        for extra in 0..3 {
            let steps = ((from.as_s() + more) / STEP).ceil() + f64::from(extra);
            let to = Seconds::s(crate::units::tidy(steps * STEP));
            let edit = Edit::change(recipe, waypoint, |point| point.dwell = to);
            let size = size::stood((to.as_s() - from.as_s()) / cycle.duration);
            outcome = Outcome::of(trial.offer(Change::Dwell { waypoint, from, to }, edit, size, false));
            if !outcome.found.is_empty() {
                return outcome;
            }
        }
    }
    outcome
}

/// How much longer the arm must stand at the end of a segment, s; `None` where standing there asks too much of a joint.
fn longest(trial: &Trial, cycle: &Cycle, index: usize) -> Option<f64> {
    let judged = trial.judged;
    let held = held_at_end(judged, index);
    let mut more: f64 = 0.0;
    for (j, joint) in judged.arm.joints().iter().enumerate() {
        let allowed = joint.torque?.holding * (1.0 - judged.recipe.acceptance.rms_reserve.as_fraction());
        let over = cycle.shares[j].whole - allowed * allowed * cycle.duration;
        if over > 0.0 {
            let gains = allowed * allowed - held[j] * held[j];
            if !(gains > 0.0) {
                return None;
            }
            more = more.max(over / gains);
        }
    }
    Some(more)
}

/// The torque of every joint that holds the arm at the stop at a segment's end, N·m or N.
fn held_at_end(judged: &Judged, index: usize) -> Joints {
    let segment = &judged.plan.segments[index];
    let posture = Posture::at(judged.arm.chain(), &segment.end);
    let push = segment.push.map(|push| push.in_base(&posture.tcp(&segment.carried.tcp)));
    let held = holding_torque(judged.arm.chain(), &posture, &segment.carried, &judged.plan.gravity, push.as_ref());
    Joints::from_fn(held.len(), |j| held[j] - judged.arm.joints()[j].drive.balance(segment.end[j]))
}

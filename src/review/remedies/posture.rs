use std::sync::Arc;

use crate::arm::{JointKind, Joints};
use crate::kinematics::every_branch;
use crate::motion::{Plan, Segment};
use crate::program::{Arrive, Edit, Given, Recipe, Taught};

use super::moved::{tcp_at, typed};
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome, Remedy, size};

/// Postures are offered at most.
const MOST_OFFERED: usize = 2;
/// Two sets of joint values count as one posture when no joint differs by more, rad or m (half a degree).
const SAME: f64 = 0.009;

/// A run is what keeps one posture: a waypoint that is reached by a joint move (or the first), and all those after it that lines
/// and arcs lead to.
struct Run {
    first: usize,
    last: usize,
}

/// Another posture at the segment's start or end, and at all waypoints that lines lead to from there: all branches of the inverse
/// kinematics, and whole turns within the ranges.
pub(super) fn posture(trial: &Trial) -> Outcome {
    let mut tries: Vec<(Run, Joints, Joints)> = Vec::new();
    let runs = if trial.segment().follows_path() {
        vec![run(trial, trial.to())]
    } else {
        vec![run(trial, trial.to()), run(trial, trial.to() - 1)]
    };
    for run in runs {
        let Some(tcp) = tcp_at(&trial.judged.plan, &trial.judged.arm, run.first) else { continue };
        let now = joints_at(&trial.judged.plan, run.first);
        for other in others(trial, &tcp, run.first, &now) {
            tries.push((Run { ..run }, now, other));
        }
    }
    let arm = &trial.judged.arm;
    tries.sort_by(|a, b| size::posed(arm, &a.1, &a.2).total_cmp(&size::posed(arm, &b.1, &b.2)));
    let mut nearest = Nearest::default();
    let mut short = None;
    let mut found = Vec::new();
    for (run, now, other) in tries {
        if found.len() >= MOST_OFFERED || trial.watch.is_stopped() {
            break;
        }
        // Whole turns more are another way to the same posture.
        let known = found.iter().any(|remedy: &Remedy| match &remedy.change {
            Change::Posture { to, .. } => to.zip(&other, |a, b| (0.5 * (a - b)).sin()).largest() < SAME,
            _ => false,
        });
        if known {
            continue;
        }
        let Some(edit) = posed(trial, &run, &other) else { continue };
        let seen = trial.look(&edit, Aim::Check);
        nearest.note(seen);
        if !seen.clear {
            continue;
        }
        let change = Change::Posture { waypoint: run.first, last: run.last, from: now, to: other };
        match trial.offer(change, edit, size::posed(arm, &now, &other), false) {
            Ok(remedy) => found.push(remedy),
            Err(why) => short = Some(why),
        }
    }
    Outcome { found, short: short.unwrap_or(nearest.short()) }
}

fn run(trial: &Trial, waypoint: usize) -> Run {
    let waypoints = &trial.recipe().waypoints;
    let by_path = |index: usize| waypoints[index].arrive.as_ref().is_some_and(Arrive::follows_path);
    let first = (0..=waypoint).rev().find(|&index| index == 0 || !by_path(index)).unwrap_or(0);
    let last = (first + 1..waypoints.len()).take_while(|&index| by_path(index)).last().unwrap_or(first);
    Run { first, last }
}

fn joints_at(plan: &Plan, waypoint: usize) -> Joints {
    let at = |waypoint: usize, end: bool| plan.arriving(waypoint).map(|s: &Arc<Segment>| if end { s.end } else { s.start });
    at(waypoint, true).or_else(|| at(waypoint + 1, false)).unwrap_or_else(|| Joints::zeros(0))
}

/// All other joint values for one pose, each within the joints' ranges.
fn others(trial: &Trial, tcp: &crate::geometry::Pose, waypoint: usize, now: &Joints) -> Vec<Joints> {
    let arm = &trial.judged.arm;
    let on_flange = trial.recipe().hanging_at(waypoint).arriving().tcp;
    let mut found: Vec<Joints> = Vec::new();
    for branch in every_branch(arm, &on_flange, tcp, now).found {
        let mut turned = vec![branch];
        for (j, joint) in arm.joints().iter().enumerate().filter(|(_, joint)| joint.kind == JointKind::Revolute) {
            for q in turned.clone() {
                for turn in [-std::f64::consts::TAU, std::f64::consts::TAU] {
                    let mut other = q;
                    other[j] += turn;
                    if joint.range.to_end(other[j]) >= 0.0 {
                        turned.push(other);
                    }
                }
            }
        }
        found.extend(turned);
    }
    let in_range = |q: &Joints| q.iter().zip(arm.joints()).all(|(value, joint)| joint.range.to_end(*value) >= 0.0);
    found.retain(|q| in_range(q) && q.zip(now, |a, b| a - b).largest() > SAME);
    found
}

/// The edit that takes another posture at the first waypoint of a run. Those after it that were taught by joint values get the
/// values at which lines then arrive.
fn posed(trial: &Trial, run: &Run, to: &Joints) -> Option<Edit> {
    let (judged, recipe) = (trial.judged, trial.recipe());
    let arm = &judged.arm;
    let mut changed = recipe.clone();
    let teach =
        |recipe: &mut Recipe, index: usize, q: &Joints| recipe.waypoints[index].taught = Taught::Joints(typed_finely(arm, q));
    teach(&mut changed, run.first, to);
    let by_joints: Vec<usize> =
        (run.first + 1..=run.last).filter(|&k| matches!(recipe.waypoints[k].taught, Taught::Joints(_))).collect();
    if !by_joints.is_empty() {
        for &k in &by_joints {
            let tcp = tcp_at(&judged.plan, arm, k)?;
            let pose = Given { at: tcp.at, rotation: Some(tcp.rotation()), frame: None };
            changed.waypoints[k].taught = Taught::Pose { pose, near: None };
        }
        let before = Some((judged.recipe.as_ref(), judged.plan.as_ref()));
        let plan = Plan::again(arm, &changed, before, &|| !trial.watch.is_stopped())?.plan;
        for &k in &by_joints {
            let segment = plan.arriving(k).filter(|segment| segment.trouble.is_none())?;
            teach(&mut changed, k, &segment.end);
        }
    }
    let edits = std::iter::once(run.first).chain(by_joints);
    let edit = |index: usize| Edit::Change { index, waypoint: Box::new(changed.waypoints[index].clone()) };
    Some(Edit::Together(edits.map(edit).collect()))
}

/// Joint values rounded so finely that the TCP stays where it is within hundredths of a millimetre.
pub(super) fn typed_finely(arm: &crate::arm::Arm, q: &Joints) -> Joints {
    const FINER: f64 = 100.0;
    let scaled = Joints::from_fn(q.len(), |j| q[j] * FINER);
    let rounded = typed(arm, &scaled);
    Joints::from_fn(q.len(), |j| rounded[j] / FINER)
}

use crate::program::{Arrive, Edit, Taught};
use crate::units::{Length, Share};

use super::greatest::greatest_from_above;
use super::leaves::leaves;
use super::posture::typed_finely;
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome, Remedy, Short, size};

/// A joint move instead of the line or arc, no faster than that is.
///
/// By a joint move the end may be reached by other turns than by the line, and all that follows then stands in another posture.
/// Where that brings something bad, the end is taught by the joint values that it has now, and the better of both is offered.
pub(super) fn joint_move(trial: &Trial) -> Outcome {
    let free = offered(trial, false);
    if matches!(&free, Ok(remedy) if remedy.effect.worsens.is_empty() && remedy.effect.doubts.is_empty()) {
        return Outcome::of(free);
    }
    Outcome::of(match (free, offered(trial, true)) {
        (Ok(free), Ok(kept)) => Ok(if kept.order(&free).is_lt() { kept } else { free }),
        (Ok(one), Err(_)) | (Err(_), Ok(one)) => Ok(one),
        (Err(free), Err(_)) => Err(free),
    })
}

/// The joint move with the end as it is taught, or with the joint values that it has now.
fn offered(trial: &Trial, keeps: bool) -> Result<Remedy, Short> {
    let nothing = Short::Nearest(None);
    let segment = trial.judged.plan.arriving(trial.to()).ok_or(nothing)?;
    let by_pose = matches!(trial.recipe().waypoints[trial.to()].taught, Taught::Pose { .. });
    if keeps && !(by_pose && segment.trouble.is_none()) {
        return Err(nothing);
    }
    let edit = |percent: u32| {
        trial.change(|waypoint| {
            waypoint.arrive = Some(Arrive::Joint { share: Some(Share::percent(f64::from(percent))), accel_share: None });
            if keeps {
                waypoint.taught = Taught::Joints(typed_finely(&trial.judged.arm, &segment.end));
            }
        })
    };
    let most = trial.recipe().usual.share.map_or(100.0, Share::as_percent).clamp(1.0, 100.0);
    let above = share_below(segment.duration(), most as u32, |percent| planned(trial, &edit(percent)).map(|new| new.duration()));
    let mut nearest = Nearest::default();
    let mut clear = |percent: u32, aim: Aim| nearest.note(trial.look(&edit(percent), aim));
    let found = [Aim::All, Aim::Check].into_iter().find_map(|aim| greatest_from_above(above + 1, above, |at| clear(at, aim)));
    let Some(percent) = found else { return Err(nearest.short()) };
    // The end may be reached in another posture by a joint move, so its joint values are those of the new plan.
    let new = planned(trial, &edit(percent)).ok_or(nothing)?;
    let bound = Length::m(leaves(&trial.judged.arm, &new.start, &new.end, &segment.carried.tcp, &segment.path));
    let change = Change::JointMove { share: Share::percent(f64::from(percent)), leaves: bound, keeps };
    let size = if keeps { size::left_and_taught(bound) } else { size::left(bound) };
    trial.offer(change, edit(percent), size, false)
}

fn planned(trial: &Trial, edit: &Edit) -> Option<std::sync::Arc<crate::motion::Segment>> {
    let mut recipe = trial.recipe().clone();
    edit.apply(&mut recipe).ok()?;
    let judged = trial.judged;
    let before = Some((judged.recipe.as_ref(), judged.plan.as_ref()));
    let plan = crate::motion::Plan::again(&judged.arm, &recipe, before, &|| !trial.watch.is_stopped())?.plan;
    plan.arriving(trial.to()).cloned()
}

/// The greatest whole percent at which the joint move lasts no less than `duration`, s; at least 1.
fn share_below(duration: f64, most: u32, lasts: impl Fn(u32) -> Option<f64>) -> u32 {
    let (mut low, mut high) = (1, most + 1);
    while high - low > 1 {
        let middle = low + (high - low) / 2;
        if lasts(middle).is_some_and(|lasts| lasts >= duration) {
            low = middle;
        } else {
            high = middle;
        }
    }
    low
}

use crate::program::{Arrive, Edit};
use crate::units::{Length, Share};

use super::greatest::greatest_from_above;
use super::leaves::leaves;
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome, size};

/// A joint move instead of the line or arc, no faster than that is.
pub(super) fn joint_move(trial: &Trial) -> Outcome {
    let recipe = trial.recipe();
    let Some(segment) = trial.judged.plan.arriving(trial.to()) else { return Outcome::nothing() };
    let edit = |percent: u32| {
        trial.change(|waypoint| {
            waypoint.arrive = Some(Arrive::Joint { share: Some(Share::percent(f64::from(percent))), accel_share: None });
        })
    };
    let most = recipe.usual.share.map_or(100.0, Share::as_percent).clamp(1.0, 100.0);
    let above = shares_below(trial, segment.duration(), most as u32);
    let mut nearest = Nearest::default();
    let mut found = None;
    for aim in [Aim::All, Aim::Check] {
        found = greatest_from_above(above + 1, above, |percent| {
            let seen = trial.look(&edit(percent), aim);
            nearest.note(seen)
        });
        if found.is_some() {
            break;
        }
    }
    let Some(percent) = found else { return Outcome::short(nearest.short()) };
    // The end may be reached in another posture by a joint move, so its joint values are those of the new plan.
    let Some(new) = planned(trial, &edit(percent)) else { return Outcome::nothing() };
    let bound = leaves(&trial.judged.arm, &new.start, &new.end, &segment.carried.tcp, &segment.path);
    let change = Change::JointMove { share: Share::percent(f64::from(percent)), leaves: Length::m(bound) };
    Outcome::of(trial.offer(change, edit(percent), size::left(Length::m(bound)), false))
}

fn planned(trial: &Trial, edit: &Edit) -> Option<std::sync::Arc<crate::motion::Segment>> {
    let mut recipe = trial.recipe().clone();
    edit.apply(&mut recipe).ok()?;
    let judged = trial.judged;
    let before = Some((judged.recipe.as_ref(), judged.plan.as_ref()));
    let plan = crate::motion::Plan::again(&judged.arm, &recipe, before, &|| !trial.watch.is_stopped())?.plan;
    plan.arriving(trial.to()).cloned()
}

/// The greatest whole percent at which the joint move lasts no less than `duration`; at least 1.
fn shares_below(trial: &Trial, duration: f64, most: u32) -> u32 {
    let lasts = |percent: u32| {
        let edit = trial.change(|waypoint| {
            waypoint.arrive = Some(Arrive::Joint { share: Some(Share::percent(f64::from(percent))), accel_share: None });
        });
        planned(trial, &edit).map_or(0.0, |segment| segment.duration())
    };
    let (mut low, mut high) = (1, most + 1);
    while high - low > 1 {
        let middle = low + (high - low) / 2;
        if lasts(middle) >= duration {
            low = middle;
        } else {
            high = middle;
        }
    }
    low
}

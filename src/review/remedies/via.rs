use crate::geometry::{Rotation, V3};
use crate::program::{Arrive, Edit, Given, Taught, Waypoint};
use crate::units::{Angle, Length, Seconds};

use super::least::{Reach, shortest};
use super::shift::{directions, grown};
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome, size};

/// How far beside the line a point is tried, m.
const BESIDE: Reach = Reach { first: 0.004, most: 0.128, widest: 0.064 };
/// A point is added no nearer to an end than this share of the line.
const FROM_END: f64 = 0.05;
/// Where the trouble is at an end, a point is added at this share of the line from there.
const NEAR_END: f64 = 0.25;

/// A stop point added on a line where the trouble is, or as little beside it as it must be.
pub(super) fn via(trial: &Trial) -> Outcome {
    let u = match trial.finding.worst().u {
        u if u < FROM_END => NEAR_END,
        u if u > 1.0 - FROM_END => 1.0 - NEAR_END,
        u => u,
    };
    let segment = trial.judged.plan.arriving(trial.to());
    let Some(there) = segment.and_then(|segment| segment.path.target(u)) else { return Outcome::nothing() };
    let edit = |by: &V3| {
        let recipe = trial.recipe();
        let old = &recipe.waypoints[trial.to()];
        let mm = |v: f64| Length::mm(crate::units::tidy((Length::m(v).as_mm() * 10.0).round() / 10.0)).as_m();
        let rpy = there.pose.rotation().rpy().map(|rad| crate::units::tidy((Angle::rad(rad).as_deg() * 100.0).round() / 100.0));
        let pose =
            Given { at: (there.pose.at + by).map(mm), rotation: turns(trial).then(|| Rotation::from_rpy_deg(rpy)), frame: None };
        let waypoint = Waypoint {
            name: new_name(trial),
            taught: Taught::Pose { pose, near: None },
            shown: None,
            arrive: old.arrive.clone().filter(|arrive| matches!(arrive, Arrive::Line(_))),
            tool: old.tool.clone(),
            fly_by: None,
            dwell: Seconds::s(0.0),
            then: None,
            push: None,
        };
        Edit::Insert { index: trial.to(), waypoint: Box::new(waypoint) }
    };
    let told = |by: V3| (Change::Via { u, by }, size::added(Length::m(by.norm())));
    let mut nearest = Nearest::default();
    for aim in [Aim::All, Aim::Check] {
        let mut clear = |by: &V3| {
            let seen = trial.look(&edit(by), aim);
            nearest.note(seen)
        };
        let found = if clear(&V3::zeros()) { Some(V3::zeros()) } else { shortest(&directions(trial, false), BESIDE, clear) };
        if let Some(by) = found {
            return Outcome::of(grown(trial, by, |by| Some(edit(by)), told));
        }
    }
    Outcome::short(nearest.short())
}

/// Whether the arm's waypoints say how the tool is turned.
fn turns(trial: &Trial) -> bool {
    match &trial.recipe().waypoints[trial.to()].taught {
        Taught::Pose { pose, .. } => pose.rotation.is_some(),
        Taught::Joints(_) => true,
    }
}

fn new_name(trial: &Trial) -> String {
    let name = |k: usize| if k == 0 { "on the way".to_owned() } else { format!("on the way {}", k + 1) };
    let free = (0..).map(name).find(|name| trial.recipe().waypoint_named(name).is_none());
    free.unwrap_or_default()
}

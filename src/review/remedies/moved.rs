//! Waypoints moved and turned: the edits that do it.

use crate::arm::{Arm, JointKind, Joints};
use crate::geometry::{Pose, Rotation, V3, turn_about};
use crate::kinematics::{Posture, Reached, reach};
use crate::motion::Plan;
use crate::program::{Arrive, Edit, Given, Recipe, Taught, Waypoint, frame_in_base};
use crate::units::{Angle, Length};

use super::Ends;
use super::trial::Trial;

/// Steps to which new positions are rounded, mm: what people type.
const MM: f64 = 0.1;
/// Steps to which new joint values and angles are rounded, degrees.
const DEG: f64 = 0.01;
/// Steps to which new values of sliding joints are rounded, mm.
const SLIDE_MM: f64 = 0.01;

/// A displacement of a waypoint: along, and about its TCP, both in base axes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Displacement {
    /// By a vector, m.
    Along(V3),
    /// About a unit axis by an angle, rad.
    About(V3, f64),
    /// About the tool's own z axis by an angle, rad.
    Own(f64),
}

impl Displacement {
    fn pose(self, tcp: &Pose) -> Pose {
        match self {
            Self::Along(by) => Pose { at: tcp.at + by, ..*tcp },
            Self::About(axis, angle) => Pose { axes: turn_about(&axis, angle) * tcp.axes, ..*tcp },
            Self::Own(angle) => Pose { axes: tcp.axes * turn_about(&V3::z(), angle), ..*tcp },
        }
    }
}

impl Ends {
    /// The waypoints meant of the segment that arrives at `to`.
    pub(super) fn waypoints(self, to: usize) -> Vec<usize> {
        match self {
            Self::Both => vec![to - 1, to],
            Self::Start => vec![to - 1],
            Self::End => vec![to],
        }
    }
}

/// The edit that displaces the ends of the trial's segment, rounded to what people type; `None` where a waypoint taught by its
/// joints can't be brought there.
pub(super) fn displaced(trial: &Trial, ends: Ends, by: Displacement) -> Option<Edit> {
    let to = trial.to();
    let edits: Option<Vec<Edit>> =
        ends.waypoints(to).into_iter().map(|index| moved(trial, index, by, ends == Ends::Both && index == to)).collect();
    Some(Edit::Together(edits?))
}

fn moved(trial: &Trial, index: usize, by: Displacement, with_via: bool) -> Option<Edit> {
    let (arm, recipe) = (&trial.judged.arm, trial.recipe());
    let mut waypoint = recipe.waypoints[index].clone();
    match &mut waypoint.taught {
        Taught::Joints(q) => {
            let tcp = recipe.hanging_at(index).arriving().tcp;
            let target = by.pose(&Posture::at(arm.chain(), q).tcp(&tcp));
            let Reached::Yes { q: there, .. } = reach(arm, &tcp, &target, q) else { return None };
            *q = typed(arm, &there);
        }
        Taught::Pose { pose, .. } => move_given(recipe, pose, by)?,
    }
    // What the cell displayed was displayed at the old place.
    waypoint.shown = None;
    if let (true, Some(Arrive::Arc { via, .. }), Displacement::Along(_)) = (with_via, &mut waypoint.arrive, by) {
        move_given(recipe, via, by)?;
    }
    Some(Edit::Change { index, waypoint: Box::new(waypoint) })
}

fn move_given(recipe: &Recipe, given: &mut Given, by: Displacement) -> Option<()> {
    let frame = given.frame.as_deref().map_or_else(|| Some(Pose::identity()), |name| frame_in_base(recipe, name))?;
    let axes = given.rotation.map(Rotation::matrix);
    let tcp = frame.then(&Pose { axes: axes.unwrap_or_else(crate::geometry::M3::identity), at: given.at });
    let there = frame.inverse().then(&by.pose(&tcp));
    if let Displacement::Along(_) = by {
        given.at = V3::from_iterator(there.at.iter().map(|m| Length::mm(to_step(Length::m(*m).as_mm(), MM)).as_m()));
        return Some(());
    }
    axes?;
    let rpy = Rotation::from_matrix(&there.axes).rpy().map(|rad| to_step(Angle::rad(rad).as_deg(), DEG));
    given.rotation = Some(Rotation::from_rpy_deg(rpy));
    Some(())
}

/// Joint values as people type them.
pub(super) fn typed(arm: &Arm, q: &Joints) -> Joints {
    Joints::from_fn(q.len(), |j| match arm.joints()[j].kind {
        JointKind::Revolute => Angle::deg(to_step(Angle::rad(q[j]).as_deg(), DEG)).as_rad(),
        JointKind::Prismatic => Length::mm(to_step(Length::m(q[j]).as_mm(), SLIDE_MM)).as_m(),
    })
}

fn to_step(value: f64, step: f64) -> f64 {
    crate::units::tidy((value / step).round() * step)
}

/// Which ends of the segment may be moved: not where something is taken or released, nor where the tool pushes the work.
pub(super) fn free_ends(trial: &Trial) -> Vec<Ends> {
    let (recipe, to) = (trial.recipe(), trial.to());
    let pushes = |index: usize| recipe.waypoints.get(index).is_some_and(|waypoint: &Waypoint| waypoint.push.is_some());
    let free = |index: usize| recipe.waypoints[index].then.is_none() && !pushes(index) && !pushes(index + 1);
    match (free(to - 1), free(to)) {
        (true, true) => vec![Ends::End, Ends::Start, Ends::Both],
        (true, false) => vec![Ends::Start],
        (false, true) => vec![Ends::End],
        (false, false) => Vec::new(),
    }
}

/// The TCP at a waypoint as it is planned, base; `None` where it could not be found.
pub(super) fn tcp_at(plan: &Plan, arm: &Arm, waypoint: usize) -> Option<Pose> {
    let (segment, q) = match plan.arriving(waypoint) {
        Some(segment) => (segment, segment.end),
        None => {
            let segment = plan.arriving(waypoint + 1)?;
            (segment, segment.start)
        }
    };
    Some(Posture::at(arm.chain(), &q).tcp(&segment.carried.tcp))
}

use std::sync::Arc;

use crate::arm::{Arm, Joints};
use crate::geometry::{Pose, V3};
use crate::kinematics::Posture;
use crate::program::{Arrive, Carried, PathSpeed, PushAxes, Recipe, Taught, Usual, frame_in_base};
use crate::units::{Jerk, Share, Speed, TurnJerk};

use super::resolve::{Place, misses_left_out, point_in_base, resolve, steadied, wanted_pose};
use super::{Law, Limits, NoPath, Path, Push, Segment, Track};

/// Two sets of joint values count as one posture when no joint differs by more, rad or m (0.006 degrees).
const SAME_POSTURE: f64 = 1e-4;
/// A path shorter than this (m) that turns less than that (rad) has no motion.
const NO_LENGTH: f64 = 1e-9;

/// What the plan of a segment from stop to stop depends on besides the recipe's own tables and its waypoint.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Around {
    /// Where it starts.
    pub start: Place,
    /// The joint values of the waypoint that its waypoint names as near.
    pub near: Option<Joints>,
    /// Tool and load on the way.
    pub carried: Carried,
    /// Tool and load when the waypoint is left.
    pub leaving: Carried,
    /// Named points of the tool, flange axes, m.
    pub points: Arc<[V3]>,
}

/// The segment that arrives at waypoint `to`, from stop to stop, and where that waypoint is.
pub(super) fn leg(arm: &Arm, recipe: &Recipe, to: usize, around: &Around) -> (Segment, Place) {
    let segment = segment(arm, recipe, to, around);
    let found = !matches!(segment.trouble, Some(NoPath::OutOfReach { .. } | NoPath::Lost { .. } | NoPath::StartUnknown))
        || matches!(recipe.waypoints[to].taught, Taught::Joints(_));
    let place =
        if found { Place { q: segment.end, trouble: None } } else { resolve(arm, recipe, to, &segment.carried, &segment.start) };
    (segment, place)
}

fn segment(arm: &Arm, recipe: &Recipe, to: usize, around: &Around) -> Segment {
    let waypoint = &recipe.waypoints[to];
    let Around { carried, near, .. } = *around;
    let start = around.start.q;
    let arrive = waypoint.arrive.clone().unwrap_or(Arrive::Joint { share: None, accel_share: None });
    let mut segment = Segment {
        to,
        blend: false,
        part: [0.0, 1.0],
        path: Path::Joint { from: start, to: start },
        law: Law::none(),
        limits: None,
        track: Track::default(),
        start,
        end: start,
        carried,
        carried_after: waypoint.then.is_some().then_some(around.leaving),
        points: Arc::clone(&around.points),
        push: push_in_base(recipe, to),
        shares: None,
        trouble: None,
        dwell: waypoint.dwell.as_s(),
    };
    if around.start.trouble.is_some() {
        segment.trouble = Some(NoPath::StartUnknown);
        segment.end = resolve(arm, recipe, to, &carried, &start).q;
        return segment;
    }
    match arrive {
        Arrive::Joint { share, accel_share } => {
            let place = resolve(arm, recipe, to, &carried, &near.unwrap_or(start));
            let share = share.or(recipe.usual.share).map_or(1.0, Share::as_fraction);
            let accel_share = accel_share.unwrap_or(recipe.usual.accel_share).as_fraction();
            segment.end = place.q;
            segment.trouble = place.trouble;
            segment.path = Path::Joint { from: start, to: place.q };
            segment.shares = Some([share, accel_share]);
            segment.limits = joint_limits(arm, &start, &place.q, share, accel_share);
            segment.law = from_rest(segment.limits);
        }
        Arrive::Line(speed) => {
            let from = Posture::at(arm.chain(), &start).tcp(&carried.tcp);
            let target = wanted_pose(arm, recipe, to, &carried, &start);
            segment.path = Path::line(from, &target);
            follow(arm, recipe, &mut segment, &target, near, &speed);
        }
        Arrive::Arc { via, speed } => {
            let from = Posture::at(arm.chain(), &start).tcp(&carried.tcp);
            let target = wanted_pose(arm, recipe, to, &carried, &start);
            let via = point_in_base(recipe, &via);
            if crate::program::arc_fault(&from.at, &via, &target.at).is_some() {
                segment.trouble = Some(NoPath::StraightArc);
                segment.end = resolve(arm, recipe, to, &carried, &start).q;
                return segment;
            }
            segment.path = Path::arc(&from, &via, &target);
            follow(arm, recipe, &mut segment, &target, near, &speed);
        }
    }
    segment
}

/// Tracks a line or arc, times it, and compares its end with what was taught there.
fn follow(arm: &Arm, recipe: &Recipe, segment: &mut Segment, target: &Pose, near: Option<Joints>, speed: &PathSpeed) {
    segment.limits = path_limits(&segment.path, speed, &recipe.usual);
    segment.law = from_rest(segment.limits);
    segment.track = Track::along(arm, &segment.path, &segment.carried.tcp, &segment.start);
    if let Some(lost) = segment.track.lost {
        let at_limit = crate::kinematics::Reached::at_limit(lost.sigma);
        segment.trouble = Some(if at_limit {
            NoPath::OutOfReach { u: lost.u, q: lost.q, sigma: lost.sigma, gap: 0.0 }
        } else {
            NoPath::Lost { u: lost.u, q: lost.q, sigma: lost.sigma }
        });
    }
    let arrives = segment.track.nodes.last().map_or(segment.start, |node| node.q);
    segment.end = arrives;
    if segment.trouble.is_some() {
        if let Taught::Joints(q) = &recipe.waypoints[segment.to].taught {
            segment.end = *q;
        }
        return;
    }
    let taught = match &recipe.waypoints[segment.to].taught {
        Taught::Joints(q) => Some(*q),
        Taught::Pose { .. } => near.map(|near| resolve(arm, recipe, segment.to, &segment.carried, &near).q),
    };
    if let Some(taught) = taught
        && !(arrives.zip(&taught, |a, b| a - b).largest() <= SAME_POSTURE)
    {
        segment.trouble = Some(NoPath::OtherPosture { arrives, taught });
        segment.end = taught;
        return;
    }
    let turning_too = match &recipe.waypoints[segment.to].taught {
        Taught::Pose { pose, .. } => pose.rotation.is_some(),
        Taught::Joints(_) => true,
    };
    segment.end = if matches!(recipe.waypoints[segment.to].taught, Taught::Pose { .. }) {
        steadied(arm, &segment.carried.tcp, target, &arrives)
    } else {
        arrives
    };
    segment.trouble = misses_left_out(arm, &segment.carried, target, &arrives, turning_too);
}

/// The law from rest to rest.
fn from_rest(limits: Option<Limits>) -> Law {
    limits.map_or_else(Law::none, |limits| Law::between(0.0, 0.0, limits))
}

/// The limits of a joint move: every joint within its share, all together, the slowest leads. `None` without motion.
fn joint_limits(arm: &Arm, from: &Joints, to: &Joints, share: f64, accel_share: f64) -> Option<Limits> {
    let (mut rate, mut accel, mut jerk) = (f64::INFINITY, f64::INFINITY, f64::INFINITY);
    for (j, joint) in arm.joints().iter().enumerate() {
        let way = (to[j] - from[j]).abs();
        rate = rate.min(share * joint.rate / way);
        accel = accel.min(accel_share * joint.accel / way);
        jerk = jerk.min(joint.jerk.map_or(f64::INFINITY, |jerk| accel_share * jerk / way));
    }
    let moves = rate.is_finite() && accel.is_finite() && from.zip(to, |a, b| a - b).largest() > NO_LENGTH;
    moves.then_some(Limits { rate, accel, jerk })
}

/// The limits of a line or arc: of moving and turning, the slower leads, in rate, in acceleration and in jerk. `None` without
/// motion.
fn path_limits(path: &Path, speed: &PathSpeed, usual: &Usual) -> Option<Limits> {
    let (length, turn) = (path.length(), path.turn());
    if length <= NO_LENGTH && turn <= NO_LENGTH {
        return None;
    }
    let moving = speed.speed.or(usual.speed).map_or(f64::INFINITY, Speed::as_m_per_s);
    let moving_accel = speed.accel.unwrap_or(usual.accel).as_m_per_s2();
    let turning = speed.turn_speed.unwrap_or(usual.turn_speed).as_rad_per_s();
    let turning_accel = speed.turn_accel.unwrap_or(usual.turn_accel).as_rad_per_s2();
    let moving_jerk = speed.jerk.or(usual.jerk).map_or(f64::INFINITY, Jerk::as_m_per_s3);
    let turning_jerk = speed.turn_jerk.or(usual.turn_jerk).map_or(f64::INFINITY, TurnJerk::as_rad_per_s3);
    let least = |moving: f64, turning: f64| {
        let along = if length > NO_LENGTH { moving / length } else { f64::INFINITY };
        let about = if turn > NO_LENGTH { turning / turn } else { f64::INFINITY };
        along.min(about)
    };
    Some(Limits { rate: least(moving, turning), accel: least(moving_accel, turning_accel), jerk: least(moving_jerk, turning_jerk) })
}

fn push_in_base(recipe: &Recipe, to: usize) -> Option<Push> {
    let push = recipe.waypoints[to].push.as_ref()?;
    Some(match &push.axes {
        PushAxes::Tool => Push { force: push.force, torque: push.torque, with_tool: true },
        PushAxes::Frame(name) => {
            let axes = frame_in_base(recipe, name).unwrap_or_else(Pose::identity).axes;
            Push { force: axes * push.force, torque: axes * push.torque, with_tool: false }
        }
    })
}

use std::sync::Arc;

use crate::arm::{Arm, Joints};
use crate::dynamics::gravity_in_base;
use crate::geometry::{Pose, V3};
use crate::kinematics::Posture;
use crate::program::{Arrive, Carried, PathSpeed, PushAxes, Recipe, Taught, Usual, frame_in_base};
use crate::units::{Jerk, Share, Speed, TurnJerk};

use super::fly_by::{Run, rounded};
use super::resolve::{Place, misses_left_out, point_in_base, resolve, wanted_pose};
use super::{FlyBy, Law, Limits, NoPath, Path, Push, Segment, Track};

/// A plan is a recipe turned into motion: joint values at every waypoint, the path and timing of every segment.
#[derive(Debug, Clone)]
pub struct Plan {
    /// One segment for every waypoint but the first, in order, and after it the blend past that waypoint where it is a fly-by
    /// point.
    pub segments: Vec<Arc<Segment>>,
    /// For each segment that a blend cuts something off: the whole of it, from stop to stop, as a controller that stops at the
    /// fly-by point runs it.
    pub stops: Vec<Option<Arc<Segment>>>,
    /// The fly-by points.
    pub fly_bys: Vec<FlyBy>,
    /// When each segment starts on the cycle, s.
    pub starts: Vec<f64>,
    /// Gravity in base axes, m/s².
    pub gravity: V3,
    /// How long the arm stands at the first waypoint, s.
    pub first_dwell: f64,
}

/// A cursor is one instant on the cycle: a segment and the time since it started, which may run on into the dwell at its end.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Cursor {
    /// Which segment, counted from 0.
    pub segment: usize,
    /// Time since it started, s.
    pub time: f64,
}

/// Two sets of joint values count as one posture when no joint differs by more, rad or m (0.006 degrees).
const SAME_POSTURE: f64 = 1e-4;
/// A path shorter than this (m) that turns less than that (rad) has no motion.
const NO_LENGTH: f64 = 1e-9;

impl Plan {
    /// Plans a recipe without faults.
    pub fn of(arm: &Arm, recipe: &Recipe) -> Self {
        let gravity = gravity_in_base(&recipe.mount);
        let first_dwell = recipe.waypoints.first().map_or(0.0, |w| w.dwell.as_s());
        let mut plan =
            Self { segments: Vec::new(), stops: Vec::new(), fly_bys: Vec::new(), starts: Vec::new(), gravity, first_dwell };
        if recipe.waypoints.is_empty() {
            return plan;
        }
        let middle = Joints::from_fn(arm.len(), |j| arm.joints()[j].range.middle());
        let mut places = vec![resolve(arm, recipe, 0, &carried_at(recipe, 0), &middle)];
        let mut stops = Vec::with_capacity(recipe.waypoints.len());
        for to in 1..recipe.waypoints.len() {
            let segment = plan_segment(arm, recipe, to, &places);
            let found = !matches!(segment.trouble, Some(NoPath::OutOfReach { .. } | NoPath::Lost { .. } | NoPath::StartUnknown))
                || matches!(recipe.waypoints[to].taught, Taught::Joints(_));
            places.push(if found {
                Place { q: segment.end, trouble: None }
            } else {
                resolve(arm, recipe, to, &segment.carried, &segment.start)
            });
            stops.push(segment);
        }
        let (runs, fly_bys) = rounded(arm, recipe, stops);
        plan.fly_bys = fly_bys;
        let mut time = first_dwell;
        for Run { segment, stop } in runs {
            plan.starts.push(time);
            time += segment.duration() + segment.dwell;
            plan.segments.push(Arc::new(segment));
            plan.stops.push(stop.map(Arc::new));
        }
        plan
    }

    /// The segment that arrives at a waypoint (counted from 0), from stop to stop; none for the first.
    pub fn arriving(&self, waypoint: usize) -> Option<&Arc<Segment>> {
        let index = self.index_arriving(waypoint)?;
        Some(self.stops[index].as_ref().unwrap_or(&self.segments[index]))
    }

    /// The place among all segments of the one that arrives at a waypoint (counted from 0); a blend past it stands one behind.
    pub fn index_arriving(&self, waypoint: usize) -> Option<usize> {
        let index = self.segments.partition_point(|segment| segment.to < waypoint);
        self.segments.get(index).is_some_and(|segment| segment.to == waypoint).then_some(index)
    }

    /// A segment as it runs on the cycle, or the version of it that stops at both ends where `stop` says so and there is one.
    pub fn version(&self, index: usize, stop: bool) -> &Arc<Segment> {
        self.stops[index].as_ref().filter(|_| stop).unwrap_or(&self.segments[index])
    }

    /// The fraction of a segment on the cycle that is nearest to fraction `u` of its version from stop to stop.
    pub fn nearest_on_cycle(&self, index: usize, u: f64) -> f64 {
        let [from, to] = self.segments[index].part;
        ((u - from) / (to - from)).clamp(0.0, 1.0)
    }

    /// Duration of the whole cycle, dwells included, s.
    pub fn duration(&self) -> f64 {
        match (self.starts.last(), self.segments.last()) {
            (Some(start), Some(segment)) => start + segment.duration() + segment.dwell,
            _ => self.first_dwell,
        }
    }

    /// When the cursor's instant is on the cycle, s.
    pub fn time(&self, cursor: Cursor) -> f64 {
        self.starts.get(cursor.segment).copied().unwrap_or(0.0) + cursor.time
    }

    /// The cursor of an instant on the cycle; times outside are brought to its ends.
    pub fn cursor(&self, time: f64) -> Cursor {
        let segment = self.starts.partition_point(|start| *start <= time).saturating_sub(1);
        let start = self.starts.get(segment).copied().unwrap_or(0.0);
        let lasts = self.segments.get(segment).map_or(0.0, |s| s.duration() + s.dwell);
        Cursor { segment, time: (time - start).clamp(0.0, lasts) }
    }
}

fn carried_at(recipe: &Recipe, index: usize) -> Carried {
    Carried::of(recipe.tool_at(index), recipe.load_before(index))
}

fn plan_segment(arm: &Arm, recipe: &Recipe, to: usize, places: &[Place]) -> Segment {
    let waypoint = &recipe.waypoints[to];
    let carried = carried_at(recipe, to);
    let start = places[to - 1].q;
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
        carried_after: waypoint.then.is_some().then(|| Carried::of(recipe.tool_at(to), recipe.load_after(to))),
        push: push_in_base(recipe, to),
        shares: None,
        trouble: None,
        dwell: waypoint.dwell.as_s(),
    };
    if places[to - 1].trouble.is_some() {
        segment.trouble = Some(NoPath::StartUnknown);
        segment.end = resolve(arm, recipe, to, &carried, &start).q;
        return segment;
    }
    let near = match &waypoint.taught {
        Taught::Pose { near: Some(name), .. } => recipe.waypoint_named(name).and_then(|index| places.get(index)).map(|p| p.q),
        _ => None,
    };
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

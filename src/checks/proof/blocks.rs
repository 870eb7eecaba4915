//! Constructed cases for the blocks of the proof: each uses at least 99 % of what its bound allows, so that a bound cut by 2 % fails.
//! What happens is computed afresh by what computes everything else, never by the proof.

use std::sync::Arc;

use crate::arm::{Arm, ArmData, Body, Drive, Flange, Grounds, Joint, JointKind, Joints, Placement, Range, Task, TaskRow};
use crate::dynamics::holding_torque;
use crate::geometry::{Pose, V3, turn_about};
use crate::kinematics::{Jacobian, Posture, invert};
use crate::motion::{Follower, Instant, Law, Path, Push, Segment, Target, Track};
use crate::program::Carried;

use super::ball::Slope;
use super::leaf::{Leaf, Middle, ToolMoves};
use super::newton_euler::Ways;
use super::points;
use super::view::{Reference, View};

const HALF: f64 = 1e-3;
const NONE: [f64; 2] = [0.0; 2];

/// A joint that turns about `axis` at `at` in the system before it.
fn joint(axis: V3, at: V3) -> Joint {
    Joint {
        name: "J".to_owned(),
        kind: JointKind::Revolute,
        placement: Placement::Axis { place: Pose { at, ..Pose::identity() }, axis },
        range: Range { low: -3.0, high: 3.0 },
        rate: 2.0,
        accel: 2.0,
        torque: None,
        brake: None,
        drive: Drive::default(),
        stop: None,
        jerk: None,
        link: None,
    }
}

fn arm(mut joints: Vec<Joint>, com: V3, rows: &[TaskRow]) -> Arm {
    for (j, joint) in joints.iter_mut().enumerate() {
        joint.name = format!("J{}", j + 1);
    }
    let last = joints.last_mut().expect("one at least");
    last.link = Some(Body { mass: 2.0, com, inertia: None, grounds: Grounds::Sheet });
    let flange = Flange::default();
    Arm::build(ArmData { name: "Block".to_owned(), joints, flange, characteristic_length: None, task: Task::of(rows) })
        .expect("a sound arm")
}

fn instant(arm: &Arm, carried: &Carried, q: &[f64], slope: &[f64]) -> Instant {
    let (q, slope) = (Joints::from_slice(q), Joints::from_slice(slope));
    let posture = Posture::at(arm.chain(), &q);
    let tcp = posture.tcp(&carried.tcp);
    let jacobian = Jacobian::at(arm.chain(), &posture, &tcp.at);
    Instant { u: 0.5, q, slope, bend: Joints::zeros(q.len()), posture, tcp, jacobian, lu: None }
}

/// The same `s` further on, the joints running evenly.
fn later(arm: &Arm, carried: &Carried, at: &Instant, s: f64) -> Instant {
    let q: Vec<f64> = at.q.iter().zip(at.slope.iter()).map(|(q, slope)| q + s * slope).collect();
    instant(arm, carried, &q, &at.slope)
}

/// The change of a torque at both ends of the stretch is within the spread of the middle's, and uses it to the last percent.
fn uses_its_spread(told: Slope, torque: impl Fn(f64) -> f64) {
    let step = 1e-5;
    let change = |s: f64| (torque(s + step) - torque(s - step)) / (2.0 * step);
    assert!((torque(0.0) - told.value).abs() < 1e-12 && (change(0.0) - told.change).abs() < 1e-7, "{told:?}");
    let off = (change(HALF) - told.change).abs().max((change(-HALF) - told.change).abs());
    assert!(off <= told.spread * (1.0 + 1e-3), "{off} lies beyond {told:?}");
    assert!(off > 0.99 * told.spread, "only {off} of {told:?}");
}

#[test]
fn the_torque_of_weights_uses_its_spread() {
    // Level, the torque stands at its peak: its change is none in the middle and grows evenly to both sides.
    let arm = arm(vec![joint(V3::y(), V3::zeros())], V3::x(), &[TaskRow::X]);
    let (carried, gravity) = (Carried::nothing(), V3::z() * -9.8);
    let at = instant(&arm, &carried, &[0.0], &[1.2]);
    let view = View::of(arm.chain(), &at, &carried, None, gravity, Reference::Tcp, 0);
    let motion = view.motion(&at.slope, &NONE, HALF, 0.0);
    let told = view.weights(&motion, &at.slope, &NONE)[0];
    uses_its_spread(told, |s| holding_torque(arm.chain(), &later(&arm, &carried, &at, s).posture, &carried, &gravity, None)[0]);
}

#[test]
fn the_torque_of_a_process_force_uses_its_spread() {
    let carried = Carried { tcp: Pose { at: V3::x() * 0.7, ..Pose::identity() }, ..Carried::nothing() };
    // A force that stands still in the base acts on a lever that turns; one that turns with the tool acts on a lever that stands.
    let swings = arm(vec![joint(V3::y(), V3::zeros())], V3::zeros(), &[TaskRow::X]);
    let turns = arm(vec![joint(V3::y(), V3::zeros()), joint(V3::y(), V3::x() * 0.7)], V3::zeros(), &[TaskRow::X, TaskRow::Z]);
    let with_tool = Carried::nothing();
    for (arm, carried, slope, with_tool_axes) in [(&swings, &carried, vec![1.2], false), (&turns, &with_tool, vec![0.0, 1.2], true)]
    {
        let push = Push { force: V3::z() * 30.0, torque: V3::zeros(), with_tool: with_tool_axes };
        let at = instant(arm, carried, &vec![0.0; slope.len()], &slope);
        let view = View::of(arm.chain(), &at, carried, Some(push), V3::zeros(), Reference::Tcp, 0);
        let motion = view.motion(&at.slope, &NONE, HALF, 0.0);
        let told = view.push(&motion).expect("there is a force")[0];
        uses_its_spread(told, |s| {
            let there = later(arm, carried, &at, s);
            holding_torque(arm.chain(), &there.posture, carried, &V3::zeros(), Some(&push.in_base(&there.tcp)))[0]
        });
    }
}

#[test]
fn the_speed_of_a_point_uses_its_bound() {
    let half = 0.1 * HALF;
    // The second joint straightens the arm, so that the point that the first swings gets faster.
    let arm = arm(vec![joint(V3::z(), V3::zeros()), joint(V3::z(), V3::x() * 0.5)], V3::zeros(), &[TaskRow::X, TaskRow::Y]);
    let carried = Carried { tcp: Pose { at: V3::x() * 0.4, ..Pose::identity() }, ..Carried::nothing() };
    let at = instant(&arm, &carried, &[0.3, -1.2], &[1.0, 0.8]);
    let view = View::of(arm.chain(), &at, &carried, None, V3::zeros(), Reference::Tcp, 0);
    let motion = view.motion(&at.slope, &NONE, half, 0.0);
    let ways = Ways { slope: &at.slope, slope_spread: &NONE, bend: &NONE, bend_spread: &NONE };
    let point = points::Carried { joints: 2, at: at.tcp.at };
    let bound = view.point_speed(&motion, &ways, point, half);
    let speed = |s: f64| {
        let step = 1e-6;
        (later(&arm, &carried, &at, s + step).tcp.at - later(&arm, &carried, &at, s - step).tcp.at).norm() / (2.0 * step)
    };
    let reached = speed(half).max(speed(-half));
    assert!(reached <= bound * (1.0 + 1e-9) && reached > 0.99 * bound, "{reached} of {bound}");
    let grown = (reached - speed(0.0)) / (bound - speed(0.0));
    assert!(grown > 0.99, "of what it may grow by only {grown}");
    // The joint in between is no part of what moves the elbow.
    let elbow = view.point_speed(&motion, &ways, points::Carried { joints: 1, at: view.axis_point(1) }, half);
    assert!((elbow - 0.5).abs() < 1e-5 && elbow >= 0.5, "{elbow}");
}

#[test]
fn the_lever_of_a_load_uses_its_bound() {
    // Turned by the second joint, the point goes away from the axis of the first, which is square to it.
    let arm = arm(vec![joint(V3::z(), V3::zeros()), joint(V3::y(), V3::x() * 0.2)], V3::zeros(), &[TaskRow::X, TaskRow::Y]);
    let carried = Carried { tcp: Pose { at: V3::new(0.1, 0.0, 0.3), ..Pose::identity() }, ..Carried::nothing() };
    let at = instant(&arm, &carried, &[0.0, 0.2], &[0.0, 1.0]);
    let view = View::of(arm.chain(), &at, &carried, None, V3::zeros(), Reference::Tcp, 0).seen_from_the_last_link();
    let half = 0.1 * HALF;
    let motion = view.motion(&at.slope, &NONE, half, 0.0);
    let bound = super::flange::lever(&view, &motion, 0, &at.tcp.at, half);
    let lever = |s: f64| later(&arm, &carried, &at, s).tcp.at.xy().norm();
    let reached = lever(half).max(lever(-half));
    assert!(reached <= bound * (1.0 + 1e-12) && reached - lever(0.0) > 0.99 * (bound - lever(0.0)), "{reached} of {bound}");
}

#[test]
fn a_point_of_a_turning_tool_uses_its_bound() {
    // A point square off the axis that the tool turns about: its third derivative is the cube of the turning times its distance.
    let target = Target {
        pose: Pose::identity(),
        velocity: V3::x() * 0.4,
        bend: V3::zeros(),
        third: 0.0,
        turning: V3::z() * 1.5,
        swing: V3::zeros(),
        swing_change: 0.0,
        even: true,
    };
    let rho = V3::new(0.2, 0.1, 0.0);
    let moves = ToolMoves::of(&target, &rho, HALF);
    let velocity = |s: f64| target.velocity + target.turning.cross(&(turn_about(&V3::z(), 1.5 * s) * rho));
    let rest = velocity(HALF) - moves.velocity - moves.bend * HALF;
    let bound = 0.5 * HALF * HALF * moves.third;
    assert!(rest.norm() <= bound * (1.0 + 1e-9) && rest.norm() > 0.99 * bound, "{} of {bound}", rest.norm());
}

/// A stretch around the middle of a line along x that one turning joint follows, whose slope, bend and third derivative all grow.
struct Line {
    arm: Arm,
    segment: Segment,
}

impl Line {
    /// From where the joint is at `start`, rad, so far along x, m.
    fn from(start: f64, along: f64) -> Self {
        let arm = arm(vec![joint(V3::z(), V3::zeros())], V3::zeros(), &[TaskRow::X]);
        let carried = Carried { tcp: Pose { at: V3::x(), ..Pose::identity() }, ..Carried::nothing() };
        let start = Joints::from_slice(&[start]);
        let from = Posture::at(arm.chain(), &start).tcp(&carried.tcp);
        let path = Path::line(from, &Pose { at: from.at + V3::x() * along, ..from });
        let track = Track::along(&arm, &path, &carried.tcp, &start);
        let end = track.nodes.last().expect("it can be followed").q;
        let segment = Segment {
            to: 1,
            blend: false,
            part: [0.0, 1.0],
            path,
            law: Law::even(1.0),
            limits: None,
            track,
            start,
            end,
            carried,
            carried_after: None,
            points: Arc::default(),
            push: None,
            shares: None,
            trouble: None,
            dwell: 0.0,
        };
        Self { arm, segment }
    }

    fn at(&self, u: f64) -> Instant {
        Follower::of(&self.arm, &self.segment).at(u).expect("it can be followed")
    }

    fn with<T>(&self, half: f64, look: impl Fn(&Middle, &Leaf) -> T) -> T {
        let at = self.at(0.5);
        let view = View::of(self.arm.chain(), &at, &self.segment.carried, None, V3::zeros(), Reference::Tcp, 0);
        let target = self.segment.path.target(0.5).expect("a line has one");
        let middle = Middle::of(&self.arm, view, &at, target, &[]).expect("regular");
        let leaf = middle.prove(half).expect("it closes");
        look(&middle, &leaf)
    }
}

#[test]
fn the_theorem_uses_its_spread() {
    // In the middle the link stands square to the line, so that no part of a ball points where the line doesn't.
    let line = Line::from(0.1f64.acos(), -0.2);
    let [here, low, high] = [0.5, 0.5 - HALF, 0.5 + HALF].map(|u| line.at(u));
    line.with(HALF, |middle, leaf| {
        assert!((middle.slope[0] - here.slope[0]).abs() < 1e-12 && (middle.bend[0] - here.bend[0]).abs() < 1e-9);
        let off = [low, high].map(|there| (there.bend[0] - here.bend[0]).abs()).into_iter().fold(0.0, f64::max);
        assert!(off <= leaf.spread[0], "{off} lies beyond {}", leaf.spread[0]);
        assert!(off > 0.99 * leaf.spread[0], "only {off} of {}", leaf.spread[0]);
    });
}

#[test]
fn joint_values_and_slopes_use_their_bounds() {
    let line = Line::from(1.0, 0.2);
    let here = line.at(0.5);
    let [low, high] = [0.5 - HALF, 0.5 + HALF].map(|u| line.at(u));
    line.with(HALF, |middle, leaf| {
        let [[least, most], ..] = middle.spans(leaf);
        let (low_q, high_q) = (low.q[0].min(high.q[0]), low.q[0].max(high.q[0]));
        assert!(least <= low_q && high_q <= most, "{low_q} to {high_q} lie beyond {least} to {most}");
        assert!((high_q - low_q) > 0.99 * (most - least), "{low_q} to {high_q} of {least} to {most}");
        let off = [low, high].map(|there| (there.slope[0] - here.slope[0]).abs()).into_iter().fold(0.0, f64::max);
        assert!(off <= leaf.slope_spread[0] && off > 0.99 * leaf.slope_spread[0], "{off} of {}", leaf.slope_spread[0]);
    });
}

#[test]
fn the_speed_left_uses_its_bound() {
    let line = Line::from(1.0, 0.2);
    // What a unit of speed along x asks of the joint, over its rate.
    let asks = |at: &Instant| invert(at.lu.as_ref().expect("split"))[0][0].abs() / line.arm.joints()[0].rate;
    let [here, low, high] = [0.5, 0.5 - HALF, 0.5 + HALF].map(|u| asks(&line.at(u)));
    line.with(HALF, |middle, leaf| {
        let bound = super::bounds::most_asked_by_speed(middle, leaf).expect("it closes");
        let reached = low.max(high);
        assert!(reached <= bound && reached - here > 0.99 * (bound - here), "{here} {reached} {bound}");
    });
}

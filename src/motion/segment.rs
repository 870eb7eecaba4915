use std::sync::Arc;

use crate::arm::Joints;
use crate::dynamics::Wrench;
use crate::geometry::{Pose, V3};
use crate::program::Carried;

use super::{Law, Limits, Path, Track};

/// Why a segment has no motion, or none that could be found.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum NoPath {
    /// The arm cannot get there: it reached a posture that limits it.
    OutOfReach {
        /// Fraction of the path up to which it could be followed; 0 where the end itself is out of reach of a joint move.
        u: f64,
        /// Joint values of the limiting posture.
        q: Joints,
        /// Smallest singular value there.
        sigma: f64,
        /// Distance of the TCP from where it should be, m; 0 on a path.
        gap: f64,
    },
    /// The search failed without a limiting posture, so nothing is known.
    Lost {
        /// Fraction of the path up to which it could be followed.
        u: f64,
        /// Joint values there.
        q: Joints,
        /// Smallest singular value there.
        sigma: f64,
    },
    /// The path arrives in another posture than the one taught at its end.
    OtherPosture {
        /// Joint values on arriving.
        arrives: Joints,
        /// Joint values taught (or nearest to the waypoint named by `near`).
        taught: Joints,
    },
    /// The arm reaches the place but not the orientation, since it has too few joints.
    Orientation {
        /// By how much it misses: m along, rad about.
        gap: [f64; 6],
        /// Joint values there.
        q: Joints,
    },
    /// It starts from a waypoint that cannot be reached.
    StartUnknown,
    /// The three points of its arc stand in one line.
    StraightArc,
}

impl NoPath {
    /// Whether it is certain that no motion exists; otherwise the segment is just unproven.
    pub fn is_certain(&self) -> bool {
        !matches!(self, Self::Lost { .. } | Self::StartUnknown)
    }
}

/// What the tool exerts on the work during a segment.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Push {
    /// Force, N, in the axes below.
    pub force: V3,
    /// Torque, N·m, in the axes below.
    pub torque: V3,
    /// Whether the axes are the tool's and turn with it; otherwise they are the base's.
    pub with_tool: bool,
}

impl Push {
    /// The wrench in base axes with the TCP at `tcp`.
    #[inline]
    pub fn in_base(&self, tcp: &Pose) -> Wrench {
        if self.with_tool {
            Wrench { force: tcp.axes * self.force, torque: tcp.axes * self.torque }
        } else {
            Wrench { force: self.force, torque: self.torque }
        }
    }
}

/// A segment is the motion that arrives at a waypoint, with all that its judgement depends on besides arm, gravity and criteria.
#[derive(Debug, Clone, PartialEq)]
pub struct Segment {
    /// The waypoint that it arrives at, counted from 0. People read it one higher.
    pub to: usize,
    /// Whether it is the blend past the fly-by point `to`, between the two segments that meet there.
    pub blend: bool,
    /// Which part of the taught path it runs, as fractions: all of it but for what blends cut off at its ends.
    pub part: [f64; 2],
    /// Its geometry.
    pub path: Path,
    /// How it runs with time.
    pub law: Law,
    /// Within which limits; none without motion and on a blend.
    pub limits: Option<Limits>,
    /// Joint values along a line or arc.
    pub track: Track,
    /// Joint values at its start.
    pub start: Joints,
    /// Joint values at its end.
    pub end: Joints,
    /// Tool and load during it.
    pub carried: Carried,
    /// Tool and load when the waypoint is left, where something was taken or released.
    pub carried_after: Option<Carried>,
    /// Named points of the tool, flange axes, m, in the tool's order.
    pub points: Arc<[V3]>,
    /// Process force.
    pub push: Option<Push>,
    /// For a joint move: the shares of the joints' rates and accelerations that it was given.
    pub shares: Option<[f64; 2]>,
    /// Why it can't be run, if so.
    pub trouble: Option<NoPath>,
    /// Length of time that the arm stands at its end, s.
    pub dwell: f64,
}

impl Segment {
    /// Its number as people read it: that of the waypoint it arrives at.
    pub fn number(&self) -> usize {
        self.to + 1
    }

    /// The same segment at an override of `k`, above 0 and at most 1: the path as it is, time stretched. The stop at its end is
    /// not.
    #[must_use]
    pub fn at_override(&self, k: f64) -> Self {
        let shares = self.shares.map(|[rate, accel]| [rate * k, accel * k * k]);
        Self { law: self.law.scaled(k), shares, ..self.clone() }
    }

    /// How people tell it from others: its number, and that it is a blend, such as `7` or `7, fly-by`.
    pub fn label(&self) -> String {
        if self.blend { format!("{}, fly-by", self.number()) } else { self.number().to_string() }
    }

    /// How long it moves, s.
    pub fn duration(&self) -> f64 {
        self.law.duration()
    }

    /// Whether the TCP follows a given path.
    pub fn follows_path(&self) -> bool {
        !matches!(self.path, Path::Joint { .. } | Path::JointBlend(_))
    }

    /// The fraction up to which there is a motion to judge.
    pub fn followed_to(&self) -> f64 {
        match (&self.trouble, &self.track.lost) {
            (Some(NoPath::StartUnknown | NoPath::StraightArc), _) => 0.0,
            (Some(NoPath::OutOfReach { .. } | NoPath::Lost { .. }), None) => 0.0,
            (_, Some(lost)) => lost.u,
            _ => 1.0,
        }
    }
}

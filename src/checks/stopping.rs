use crate::arm::{Arm, Stop};
use crate::geometry::V3;
use crate::motion::{Instant, Segment};

use super::Place;
use super::looks::Looks;

/// How a joint runs on when a stop is asked for at its fastest instant.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct JointStop {
    /// Which joint.
    pub joint: usize,
    /// How far it runs on, rad or m, without sign.
    pub run_on: f64,
    /// How long until it rests, s.
    pub time: f64,
    /// The instant at which the stop is asked for.
    pub at: Place,
}

/// The worst that a stop asks for on a segment, found by looking at instants of it; shown, never judged.
#[derive(Debug, Clone, PartialEq)]
pub struct Stopping {
    /// Every joint that moves, each at its own worst instant.
    pub joints: Vec<JointStop>,
    /// The longest way that the TCP runs on along its path, m: all joints keep the path and brake together, as slowly as the one
    /// that needs longest.
    pub tcp: f64,
    /// The instant at which the stop is asked for, for the TCP.
    pub tcp_at: Place,
    /// The longest time that the whole arm takes to rest so, s.
    pub time: f64,
    /// The instant at which the stop is asked for, for the time.
    pub time_at: Place,
}

impl Stopping {
    /// The joint that runs on farthest of those that turn, or of those that slide.
    pub fn farthest(&self, arm: &Arm, turns: bool) -> Option<&JointStop> {
        let kind = |stop: &&JointStop| arm.chain().turns[stop.joint] == turns;
        self.joints.iter().filter(kind).max_by(|a, b| a.run_on.total_cmp(&b.run_on))
    }
}

/// A joint slower than this rests but for rounding, rad/s or m/s.
const AT_REST: f64 = 1e-9;

/// What a stop at any instant of a segment asks for. `None` where the arm file lacks stopping data of a joint that moves, or there
/// is no motion.
pub fn stopping(arm: &Arm, segment: &Segment) -> Option<Stopping> {
    let looks = Looks::along(arm, segment);
    let mut joints = Vec::new();
    for (joint, data) in arm.joints().iter().enumerate() {
        let (rate, at) = looks.greatest(|instant, rate| (instant.slope[joint] * rate).abs())?;
        if rate > AT_REST {
            let stop = data.stop?;
            joints.push(JointStop { joint, run_on: stop.run_on(rate, data.rate), time: stop.time(rate, data.rate), at });
        }
    }
    let (tcp, tcp_at) = looks.greatest(|instant, rate| together(arm, instant, rate)[0])?;
    let (time, time_at) = looks.greatest(|instant, rate| together(arm, instant, rate)[1])?;
    Some(Stopping { joints, tcp, tcp_at, time, time_at })
}

/// How far the TCP runs on (m) and how long it takes (s) where the path's fraction runs at `rate` (1/s) and all joints brake
/// together: after the longest reaction of any that moves, evenly, for as long as the one that needs longest.
fn together(arm: &Arm, instant: &Instant, rate: f64) -> [f64; 2] {
    let (mut reaction, mut braking) = (0.0f64, 0.0f64);
    for (j, data) in arm.joints().iter().enumerate() {
        let joint_rate = instant.slope[j] * rate;
        let Some(stop) = data.stop.filter(|_| joint_rate.abs() > AT_REST) else { continue };
        let free = Stop { reaction: 0.0, ..stop };
        reaction = reaction.max(stop.reaction);
        braking = braking.max(free.time(joint_rate, data.rate));
    }
    let [x, y, z, ..] = instant.jacobian.twist(&instant.slope);
    let speed = V3::new(x, y, z).norm() * rate;
    [speed * (reaction + 0.5 * braking), reaction + braking]
}

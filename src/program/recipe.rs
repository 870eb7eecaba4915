use crate::geometry::Pose;
use crate::units::{Acceleration, Jerk, Share, Speed, TurnAcceleration, TurnJerk, TurnRate};

use super::{Acceptance, Frame, Load, Tool, Waypoint};

/// What segments use where they say nothing themselves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Usual {
    /// Speed of the TCP on lines and arcs.
    pub speed: Option<Speed>,
    /// Acceleration of the TCP on lines and arcs.
    pub accel: Acceleration,
    /// Turning rate of the tool on lines and arcs.
    pub turn_speed: TurnRate,
    /// Turning acceleration of the tool on lines and arcs.
    pub turn_accel: TurnAcceleration,
    /// Jerk of the TCP on lines and arcs; without one, ramps are even.
    pub jerk: Option<Jerk>,
    /// Turning jerk of the tool on lines and arcs; without one, ramps are even.
    pub turn_jerk: Option<TurnJerk>,
    /// Share of the joints' rates on joint moves.
    pub share: Option<Share>,
    /// Share of the joints' accelerations on joint moves.
    pub accel_share: Share,
}

impl Default for Usual {
    fn default() -> Self {
        Self {
            speed: None,
            accel: Acceleration::mm_per_s2(1000.0),
            turn_speed: TurnRate::deg_per_s(90.0),
            turn_accel: TurnAcceleration::deg_per_s2(360.0),
            jerk: None,
            turn_jerk: None,
            share: None,
            accel_share: Share::WHOLE,
        }
    }
}

/// What happens when the last waypoint is left behind.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Repeat {
    /// The cycle starts again at once; any pause is the dwell at the last waypoint.
    #[default]
    Start,
    /// It runs once.
    Never,
}

/// A recipe is everything a person opens to be judged: which arm, how it is mounted, tools, loads, frames, waypoints, criteria.
#[derive(Debug, Clone, PartialEq)]
pub struct Recipe {
    /// Its name.
    pub name: String,
    /// The arm file, as the recipe writes it (a path relative to the recipe).
    pub arm: String,
    /// Where the base stands in the world; gravity is world -z.
    pub mount: Pose,
    /// What it is judged by.
    pub acceptance: Acceptance,
    /// What segments use where they say nothing.
    pub usual: Usual,
    /// Tools; the first is on the flange at the first waypoint.
    pub tools: Vec<Tool>,
    /// Loads.
    pub loads: Vec<Load>,
    /// Frames.
    pub frames: Vec<Frame>,
    /// How the cycle goes on after the last waypoint.
    pub repeat: Repeat,
    /// The load in the tool at the first waypoint.
    pub carrying: Option<String>,
    /// Waypoints in order.
    pub waypoints: Vec<Waypoint>,
}

impl Recipe {
    /// The waypoint of that name, counted from 0.
    pub fn waypoint_named(&self, name: &str) -> Option<usize> {
        self.waypoints.iter().position(|waypoint| waypoint.name == name)
    }
}

use crate::arm::Joints;
use crate::geometry::{Rotation, V3};
use crate::units::{Length, Seconds};

use super::Arrive;

/// A pose as a recipe gives it, in a named coordinate system.
#[derive(Debug, Clone, PartialEq)]
pub struct Given {
    /// Position, m.
    pub at: V3,
    /// Orientation; `None` where it does not matter (a via point, or an arm whose task has no turning).
    pub rotation: Option<Rotation>,
    /// The system it is given in: `world`, a frame of the recipe, or `None` for the arm's base.
    pub frame: Option<String>,
}

/// What was taught at a waypoint.
#[derive(Debug, Clone, PartialEq)]
pub enum Taught {
    /// Joint values, rad or m.
    Joints(Joints),
    /// A pose of the TCP.
    Pose {
        /// The pose.
        pose: Given,
        /// The waypoint whose posture is nearest; the one before where not given.
        near: Option<String>,
    },
}

/// The pose that the cell's own display gave for a waypoint taught as joint values.
pub type Shown = Given;

/// What happens to the load at a waypoint, after the arm has stopped there.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Then {
    /// The tool takes this load.
    Take(String),
    /// The tool lets its load go.
    Release,
}

/// The axes in which a process force stays fixed while the tool moves.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum PushAxes {
    /// The TCP system: the force turns with the tool.
    Tool,
    /// The base (`base`), `world`, or a frame of the recipe.
    Frame(String),
}

/// What the tool exerts on the work at the TCP, on the segment that arrives here.
#[derive(Debug, Clone, PartialEq)]
pub struct Push {
    /// Force, N.
    pub force: V3,
    /// Torque, N·m.
    pub torque: V3,
    /// In which axes both stay fixed.
    pub axes: PushAxes,
}

/// A waypoint is a taught point, how to arrive at it, and what happens there.
#[derive(Debug, Clone, PartialEq)]
pub struct Waypoint {
    /// Its name.
    pub name: String,
    /// What was taught.
    pub taught: Taught,
    /// What the cell displayed there, if noted.
    pub shown: Option<Shown>,
    /// How to arrive; `None` only at the first.
    pub arrive: Option<Arrive>,
    /// The tool used from this segment on; the one before where not given.
    pub tool: Option<String>,
    /// Radius within which the arm may pass by without stopping; a stop point where not given.
    pub fly_by: Option<Length>,
    /// How long the arm stands here.
    pub dwell: Seconds,
    /// Taking or releasing a load, at the end of the dwell.
    pub then: Option<Then>,
    /// Process force on the segment that arrives here.
    pub push: Option<Push>,
}

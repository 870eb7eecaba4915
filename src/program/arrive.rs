use crate::units::{Acceleration, Jerk, Share, Speed, TurnAcceleration, TurnJerk, TurnRate};

use super::Given;

/// How fast a line or an arc is followed. Of moving and turning, the slower leads.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct PathSpeed {
    /// Speed of the TCP; the recipe's usual one where not given.
    pub speed: Option<Speed>,
    /// Acceleration of the TCP along the path.
    pub accel: Option<Acceleration>,
    /// Turning rate of the tool.
    pub turn_speed: Option<TurnRate>,
    /// Turning acceleration of the tool.
    pub turn_accel: Option<TurnAcceleration>,
    /// Jerk of the TCP along the path; without one, its ramps are even.
    pub jerk: Option<Jerk>,
    /// Turning jerk of the tool; without one, its ramps are even.
    pub turn_jerk: Option<TurnJerk>,
}

/// How the arm arrives at a waypoint: the kind of segment that ends there.
#[derive(Debug, Clone, PartialEq)]
pub enum Arrive {
    /// All joints start and stop together; the slowest joint leads.
    Joint {
        /// Share of the joints' rates.
        share: Option<Share>,
        /// Share of the joints' accelerations.
        accel_share: Option<Share>,
    },
    /// The TCP follows a straight line while the tool turns the shortest way.
    Line(PathSpeed),
    /// The TCP follows the circle through the start, `via` and the end.
    Arc {
        /// A point on the way; only its position counts.
        via: Given,
        /// How fast.
        speed: PathSpeed,
    },
}

impl Arrive {
    /// Its word in a recipe.
    pub fn word(&self) -> &'static str {
        match self {
            Self::Joint { .. } => "joint",
            Self::Line(_) => "line",
            Self::Arc { .. } => "arc",
        }
    }

    /// Whether the TCP follows a given path, so that the Jacobian must be inverted.
    pub fn follows_path(&self) -> bool {
        !matches!(self, Self::Joint { .. })
    }
}

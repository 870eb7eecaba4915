use crate::units::{Dimension, Measure};

use super::{Body, Curve, Drive, Grounds, Placement, Stop};

/// How a joint moves.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum JointKind {
    /// Turns about its axis; values in rad, torques in N·m.
    Revolute,
    /// Slides along its axis; values in m, "torques" are forces in N.
    Prismatic,
}

impl JointKind {
    /// What the joint's value measures.
    pub fn value(self) -> Dimension {
        self.pick(Dimension::Angle, Dimension::Length)
    }

    /// What its rate measures.
    pub fn rate(self) -> Dimension {
        self.pick(Dimension::TurnRate, Dimension::Speed)
    }

    /// What its acceleration measures.
    pub fn acceleration(self) -> Dimension {
        self.pick(Dimension::TurnAcceleration, Dimension::Acceleration)
    }

    /// What its jerk measures.
    pub fn jerk(self) -> Dimension {
        self.pick(Dimension::TurnJerk, Dimension::Jerk)
    }

    /// What its drive supplies.
    pub fn effort(self) -> Dimension {
        self.pick(Dimension::Torque, Dimension::Force)
    }

    fn pick(self, revolute: Dimension, prismatic: Dimension) -> Dimension {
        match self {
            Self::Revolute => revolute,
            Self::Prismatic => prismatic,
        }
    }
}

/// The values that a joint may take, from `low` to `high`, rad or m.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Range {
    /// Least value.
    pub low: f64,
    /// Greatest value.
    pub high: f64,
}

impl Range {
    /// The middle of the range.
    pub fn middle(self) -> f64 {
        0.5 * (self.low + self.high)
    }

    /// Half of its width.
    pub fn half(self) -> f64 {
        0.5 * (self.high - self.low)
    }

    /// How far `value` is from the nearer end; negative beyond it; NaN stays NaN.
    pub fn to_end(self, value: f64) -> f64 {
        self.half() - (value - self.middle()).abs()
    }
}

/// What a joint's drive can supply, N·m or N.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TorqueRating {
    /// Continuously, at standstill.
    pub holding: f64,
    /// For a short time, against the size of the joint's rate (rad/s or m/s), if the maker says.
    pub peak: Option<Curve>,
    /// Where the figures come from.
    pub grounds: Grounds,
}

/// One joint with the link that it moves.
#[derive(Debug, Clone, PartialEq)]
pub struct Joint {
    /// Its name, such as `J1`.
    pub name: String,
    /// How it moves.
    pub kind: JointKind,
    /// Where its axis is.
    pub placement: Placement,
    /// Values that it may take.
    pub range: Range,
    /// Greatest rate, rad/s or m/s.
    pub rate: f64,
    /// Greatest acceleration, rad/s² or m/s².
    pub accel: f64,
    /// Greatest jerk, rad/s³ or m/s³; without one, accelerations begin and end at once.
    pub jerk: Option<f64>,
    /// What its drive can supply; makers often don't say.
    pub torque: Option<TorqueRating>,
    /// What its brake holds, N·m or N.
    pub brake: Option<f64>,
    /// Rotor, friction and balancer; makers often don't say.
    pub drive: Drive,
    /// How it comes to rest when a stop is asked for; makers often say so for some joints only.
    pub stop: Option<Stop>,
    /// The link that it moves, in that link's coordinate system; makers often don't say.
    pub link: Option<Body>,
}

impl Joint {
    /// A joint value with its unit.
    pub fn value(&self, si: f64) -> Measure {
        Measure::si(si, self.kind.value())
    }

    /// A rate with its unit.
    pub fn rate_of(&self, si: f64) -> Measure {
        Measure::si(si, self.kind.rate())
    }

    /// An acceleration with its unit.
    pub fn acceleration_of(&self, si: f64) -> Measure {
        Measure::si(si, self.kind.acceleration())
    }

    /// A torque or force with its unit.
    pub fn effort_of(&self, si: f64) -> Measure {
        Measure::si(si, self.kind.effort())
    }
}

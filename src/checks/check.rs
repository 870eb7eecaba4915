use crate::arm::MAX_JOINTS;

/// A check is one thing that a segment is judged by. In this order: the arm's limits, then the cell's criteria.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Check {
    /// Whether a motion exists at all.
    Reach,
    /// Joint values against the joints' ranges.
    Range,
    /// Joint rates against the joints' rates.
    Rate,
    /// Joint accelerations against the joints' accelerations.
    Accel,
    /// Holding torque against the drives' continuous ratings.
    Holding,
    /// Torque in motion against the drives' peak ratings.
    Moving,
    /// Holding torque against the brakes.
    Brake,
    /// Tool and load against the flange's rated load and load diagram.
    Flange,
    /// Root mean square of the torque over the whole cycle against the drives' continuous ratings. Judged for the cycle, not for a
    /// segment.
    Rms,
    /// Smallest singular value against the least one allowed.
    Singular,
    /// Tool speed left in the worst direction against the least one allowed.
    SpeedLeft,
    /// Speed of the TCP against the cell's limit.
    TcpSpeed,
    /// Speed of the fastest of flange, wrist centre, elbow and the tool's named points against the cell's limit.
    PointSpeed,
    /// How far the wrist winds cables over the whole cycle against the cell's limit. Judged for the cycle, not for a segment.
    WindUp,
}

impl Check {
    /// All checks in order.
    pub const ALL: [Self; 14] = [
        Self::Reach,
        Self::Range,
        Self::Rate,
        Self::Accel,
        Self::Holding,
        Self::Moving,
        Self::Brake,
        Self::Flange,
        Self::Rms,
        Self::Singular,
        Self::SpeedLeft,
        Self::TcpSpeed,
        Self::PointSpeed,
        Self::WindUp,
    ];

    /// Its name in data.
    pub fn key(self) -> &'static str {
        match self {
            Self::Reach => "reach",
            Self::Range => "range",
            Self::Rate => "rate",
            Self::Accel => "accel",
            Self::Holding => "holding",
            Self::Moving => "moving",
            Self::Brake => "brake",
            Self::Flange => "flange",
            Self::Rms => "rms",
            Self::Singular => "singular",
            Self::SpeedLeft => "speed_left",
            Self::TcpSpeed => "tcp_speed",
            Self::PointSpeed => "point_speed",
            Self::WindUp => "wind_up",
        }
    }

    /// The check of that name in data; `None` for any other text.
    pub fn from_key(key: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|check| check.key() == key)
    }

    /// Whether it judges by what the arm can do; the others judge by what the cell asks.
    pub fn is_arm_limit(self) -> bool {
        !matches!(self, Self::Singular | Self::SpeedLeft | Self::TcpSpeed | Self::PointSpeed | Self::WindUp)
    }

    /// Whether it is judged for the whole cycle and has no result of its own on a segment.
    pub fn is_of_cycle(self) -> bool {
        matches!(self, Self::Rms | Self::WindUp)
    }

    /// Whether it has a channel for every joint.
    pub fn is_per_joint(self) -> bool {
        matches!(self, Self::Range | Self::Rate | Self::Accel | Self::Holding | Self::Moving | Self::Brake)
    }

    /// Whether it also looks at the stop with what was taken or released there.
    pub fn looks_after_stop(self) -> bool {
        matches!(self, Self::Holding | Self::Brake | Self::Flange)
    }

    /// Whether breaking it alone makes a segment `tight` at worst: closeness is a matter of care, not of what the arm can do.
    pub fn is_tight_at_worst(self) -> bool {
        matches!(self, Self::Singular | Self::SpeedLeft)
    }

    /// Whether it depends on where the arm is alone and not on how fast: what breaks it does so at every override.
    pub fn is_of_posture_alone(self) -> bool {
        matches!(
            self,
            Self::Reach
                | Self::Range
                | Self::Holding
                | Self::Brake
                | Self::Flange
                | Self::Singular
                | Self::SpeedLeft
                | Self::WindUp
        )
    }

    /// Whether what it asks grows with the override at every place of a path, so that clear at one override is clear at every
    /// lower one.
    pub fn grows_with_speed(self) -> bool {
        matches!(self, Self::Rate | Self::Accel | Self::TcpSpeed | Self::PointSpeed)
    }

    /// Its first channel; none for reach, and for what is judged over the whole cycle.
    pub(super) fn first_channel(self) -> Option<usize> {
        match self {
            Self::Reach | Self::Rms | Self::WindUp => None,
            Self::Range => Some(0),
            Self::Rate => Some(MAX_JOINTS),
            Self::Accel => Some(2 * MAX_JOINTS),
            Self::Holding => Some(3 * MAX_JOINTS),
            Self::Moving => Some(4 * MAX_JOINTS),
            Self::Brake => Some(5 * MAX_JOINTS),
            // The rated load, then moment and inertia for each listed axis.
            Self::Flange => Some(6 * MAX_JOINTS),
            Self::Singular => Some(8 * MAX_JOINTS + 1),
            Self::SpeedLeft => Some(8 * MAX_JOINTS + 2),
            Self::TcpSpeed => Some(8 * MAX_JOINTS + 3),
            // The cell's limit for all points, then that of the flange alone in manual mode at reduced speed.
            Self::PointSpeed => Some(8 * MAX_JOINTS + 4),
        }
    }
}

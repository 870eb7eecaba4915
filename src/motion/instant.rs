use crate::arm::Joints;
use crate::geometry::Pose;
use crate::kinematics::{Jacobian, Lu, Posture};

/// An instant is the arm at one place of a path, with what the path asks of it there. Derivatives are by the path's fraction u;
/// a law turns them into rates and accelerations.
#[derive(Debug, Clone, Copy)]
pub struct Instant {
    /// Fraction of the path.
    pub u: f64,
    /// Joint values.
    pub q: Joints,
    /// First derivative of the joint values by u.
    pub slope: Joints,
    /// Second derivative of the joint values by u.
    pub bend: Joints,
    /// The arm there.
    pub posture: Posture,
    /// The TCP, base.
    pub tcp: Pose,
    /// The Jacobian at the TCP.
    pub jacobian: Jacobian,
    /// The stacked Jacobian split for solving, on lines and arcs.
    pub lu: Option<Lu>,
}

impl Instant {
    /// Joint rates where the fraction runs at `rate` (1/s).
    pub fn rates(&self, rate: f64) -> Joints {
        Joints::from_fn(self.q.len(), |j| self.slope[j] * rate)
    }

    /// Joint accelerations where the fraction runs at `rate` (1/s) and speeds up by `accel` (1/s²).
    pub fn accelerations(&self, rate: f64, accel: f64) -> Joints {
        Joints::from_fn(self.q.len(), |j| self.bend[j] * rate * rate + self.slope[j] * accel)
    }
}

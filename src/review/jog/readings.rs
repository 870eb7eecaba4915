use crate::arm::{Joints, MAX_JOINTS};
use crate::dynamics::holding_torque;
use crate::geometry::{Pose, V3};
use crate::kinematics::{Jacobian, Lu, Posture, SpeedLeft, invert, null_rows, smallest_singular_value, speed_left, stacked};

use super::Stand;

/// Readings are what the arm's limits say of one posture at rest.
#[derive(Debug, Clone, Copy)]
pub struct Readings {
    /// The whole arm.
    pub posture: Posture,
    /// The Jacobian at the TCP.
    pub jacobian: Jacobian,
    /// The TCP, base.
    pub tcp: Pose,
    /// How far each joint is from the nearer end of its range, rad or m; negative beyond it.
    pub to_end: Joints,
    /// Holding torque of each drive with tool and load, balancers taken off, N·m or N.
    pub holding: Joints,
    /// Smallest singular value, lengths divided by the characteristic length.
    pub smallest: f64,
    /// Tool speed left in the worst direction, with that direction (base axes).
    pub left: SpeedLeft,
}

impl Readings {
    /// The readings where the arm stands; `gravity` in base axes, m/s².
    pub fn at(stand: &Stand, gravity: &V3) -> Self {
        let Stand { arm, carried, q } = *stand;
        let posture = Posture::at(arm.chain(), &q);
        let tcp = posture.tcp(&carried.tcp);
        let jacobian = Jacobian::at(arm.chain(), &posture, &tcp.at);
        let null =
            if arm.is_redundant() { null_rows(&jacobian, arm.task(), arm.joints()) } else { [[0.0; MAX_JOINTS]; MAX_JOINTS] };
        let lu = Lu::of(stacked(&jacobian, arm.task(), &null), arm.len());
        let torque = holding_torque(arm.chain(), &posture, carried, gravity, None);
        Self {
            posture,
            jacobian,
            tcp,
            to_end: Joints::from_fn(arm.len(), |j| arm.joints()[j].range.to_end(q[j])),
            holding: Joints::from_fn(arm.len(), |j| torque[j] - arm.joints()[j].drive.balance(q[j])),
            smallest: smallest_singular_value(&jacobian.scaled_rows(arm.task(), arm.characteristic_length().m)),
            left: speed_left(&invert(&lu), arm.task(), arm.joints()),
        }
    }
}

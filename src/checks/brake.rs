use crate::arm::{Arm, Grounds, Joint};
use crate::program::Acceptance;

use super::{Channel, Check, Scale, Unproved};

/// What a brake would have to hold if the power failed at an instant, against what it holds: the weights alone, since nothing
/// pushes any more. Whether it also stops the arm in time is another matter. Not judged where the arm file gives no brake.
pub(super) fn channel(joint: &Joint, index: usize, criteria: &Acceptance) -> Channel {
    Channel {
        check: Check::Brake,
        joint: Some(index),
        of: joint.kind.effort(),
        scale: joint.brake.map_or(Scale::Open, Scale::Ceiling),
        reserve: criteria.brake_reserve.as_fraction(),
        judged: joint.brake.is_some(),
    }
}

/// Why brakes can't be called clear for this arm whatever the figures, if so.
pub(super) fn unproved(arm: &Arm) -> Option<Unproved> {
    if !arm.has_masses() {
        return Some(Unproved::NoMasses);
    }
    arm.joints().iter().any(|joint| joint.link.is_some_and(|link| link.grounds == Grounds::Guess)).then_some(Unproved::Guess)
}

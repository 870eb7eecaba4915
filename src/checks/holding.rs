use crate::arm::{Arm, Grounds, Joint};
use crate::program::Acceptance;

use super::{Channel, Check, Scale, Unproved};

/// Holding torque against the drive's continuous rating; only shown where there is no rating.
pub(super) fn channel(joint: &Joint, index: usize, criteria: &Acceptance) -> Channel {
    Channel {
        check: Check::Holding,
        joint: Some(index),
        of: joint.kind.effort(),
        scale: joint.torque.map_or(Scale::Open, |torque| Scale::Ceiling(torque.holding)),
        reserve: criteria.holding_reserve.as_fraction(),
        judged: joint.torque.is_some(),
    }
}

/// Why holding can't be called clear for this arm whatever the figures, if so.
pub(super) fn unproved(arm: &Arm) -> Option<Unproved> {
    if arm.joints().iter().any(|joint| joint.torque.is_none()) {
        return Some(Unproved::NoRating);
    }
    if !arm.has_masses() {
        return Some(Unproved::NoMasses);
    }
    let guessed = |joint: &Joint| {
        joint.torque.is_some_and(|t| t.grounds == Grounds::Guess) || joint.link.is_some_and(|l| l.grounds == Grounds::Guess)
    };
    arm.joints().iter().any(guessed).then_some(Unproved::Guess)
}

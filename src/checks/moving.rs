use crate::arm::{Arm, Joint};
use crate::program::Acceptance;

use super::{Channel, Check, Scale, Unproved};

/// Torque in motion against the drive's peak rating at that rate. Judged where all that it is made of is given; otherwise what
/// links, tool and load ask is shown, and it is flagged where that alone is over the rating.
pub(super) fn channel(arm: &Arm, joint: &Joint, index: usize, criteria: &Acceptance) -> Channel {
    let peak = joint.torque.and_then(|torque| torque.peak);
    Channel {
        check: Check::Moving,
        joint: Some(index),
        of: joint.kind.effort(),
        scale: match peak {
            None => Scale::Open,
            Some(curve) if curve.is_level() => Scale::Ceiling(curve.at(0.0)),
            Some(curve) => Scale::CeilingByRate(curve),
        },
        reserve: criteria.moving_reserve.as_fraction(),
        judged: peak.is_some() && is_complete(arm, index),
    }
}

/// Whether all that the torque in motion of a joint is made of is given: masses and inertias of the links from it on outwards, and
/// its own rotor and friction.
pub fn is_complete(arm: &Arm, joint: usize) -> bool {
    arm.has_inertias(joint) && arm.joints()[joint].drive.is_complete()
}

/// Why torque in motion can't be called clear for this arm whatever the figures, if so.
pub(super) fn unproved(arm: &Arm) -> Option<Unproved> {
    let guessed = |joint: &Joint| {
        joint.drive.is_guessed()
            || joint.torque.is_some_and(|t| t.grounds == crate::arm::Grounds::Guess)
            || joint.link.is_some_and(|l| l.grounds == crate::arm::Grounds::Guess)
    };
    arm.joints().iter().any(guessed).then_some(Unproved::Guess)
}

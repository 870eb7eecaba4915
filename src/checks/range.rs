use crate::arm::{Joint, JointKind};
use crate::program::Acceptance;

use super::{Channel, Check, Scale};

/// Joint values against the joint's range; the reserve is the least distance to its end.
pub(super) fn channel(joint: &Joint, index: usize, criteria: &Acceptance) -> Channel {
    let half = joint.range.half();
    let least = match joint.kind {
        JointKind::Revolute => criteria.range_least.as_rad(),
        JointKind::Prismatic => criteria.slide_least.as_m(),
    };
    Channel {
        check: Check::Range,
        joint: Some(index),
        of: joint.kind.value(),
        scale: Scale::Within { middle: joint.range.middle(), half },
        reserve: (least / half).min(1.0),
        judged: true,
    }
}

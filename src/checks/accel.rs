use crate::arm::Joint;
use crate::program::Acceptance;

use super::{Channel, Check, Scale};

/// Joint accelerations against the joint's acceleration. The reserve judges lines and arcs, as with rates.
pub(super) fn channel(joint: &Joint, index: usize, criteria: &Acceptance, follows_path: bool) -> Channel {
    Channel {
        check: Check::Accel,
        joint: Some(index),
        of: joint.kind.acceleration(),
        scale: Scale::Ceiling(joint.accel),
        reserve: if follows_path { criteria.accel_reserve.as_fraction() } else { 0.0 },
        judged: true,
    }
}

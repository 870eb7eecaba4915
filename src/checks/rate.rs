use crate::arm::Joint;
use crate::program::Acceptance;

use super::{Channel, Check, Scale};

/// Joint rates against the joint's rate. The reserve judges lines and arcs; a joint move keeps its share by construction.
pub(super) fn channel(joint: &Joint, index: usize, criteria: &Acceptance, follows_path: bool) -> Channel {
    Channel {
        check: Check::Rate,
        joint: Some(index),
        of: joint.kind.rate(),
        scale: Scale::Ceiling(joint.rate),
        reserve: if follows_path { criteria.rate_reserve.as_fraction() } else { 0.0 },
        judged: true,
    }
}

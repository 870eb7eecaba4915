use crate::program::Acceptance;
use crate::units::Dimension;

use super::{Channel, Check, Scale};

/// Smallest singular value against the least one allowed. Judged on lines and arcs, where the Jacobian is inverted.
pub(super) fn channel(criteria: &Acceptance, follows_path: bool) -> Channel {
    Channel {
        check: Check::Singular,
        joint: None,
        of: Dimension::Ratio,
        scale: Scale::Floor(criteria.singular_least),
        reserve: 0.0,
        judged: follows_path,
    }
}

/// Tool speed left in the worst direction against the least one allowed. Judged on lines and arcs.
pub(super) fn speed_left_channel(criteria: &Acceptance, follows_path: bool) -> Channel {
    Channel {
        check: Check::SpeedLeft,
        joint: None,
        of: Dimension::Speed,
        scale: Scale::Floor(criteria.tool_speed_left.as_m_per_s()),
        reserve: 0.0,
        judged: follows_path,
    }
}

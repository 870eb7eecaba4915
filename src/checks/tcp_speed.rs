use crate::program::Acceptance;
use crate::units::Dimension;

use super::{Channel, Check, Scale};

/// Speed of the TCP against the cell's limit; only shown where the cell has none.
pub(super) fn channel(criteria: &Acceptance) -> Channel {
    Channel {
        check: Check::TcpSpeed,
        joint: None,
        of: Dimension::Speed,
        scale: criteria.tcp_speed.map_or(Scale::Open, |speed| Scale::Ceiling(speed.as_m_per_s())),
        reserve: 0.0,
        judged: criteria.tcp_speed.is_some(),
    }
}

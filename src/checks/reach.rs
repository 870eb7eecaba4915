use crate::motion::Segment;

use super::Verdict;

/// Whether a motion exists: a verdict without a room.
pub(super) fn verdict(segment: &Segment) -> Verdict {
    match &segment.trouble {
        None => Verdict::Clear,
        Some(trouble) if trouble.is_certain() => Verdict::NoPath,
        Some(_) => Verdict::Unproven,
    }
}

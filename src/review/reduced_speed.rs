use crate::checks::{SegmentSurvey, Spot, SpotPeak, Watch, each_segment, judge_with_flange_held_to, spot_peaks};
use crate::motion::Segment;
use crate::program::Acceptance;
use crate::units::{Share, Speed};

use super::Judged;

/// The most that the TCP may move at in manual mode at reduced speed, m/s: 250 mm/s (ISO 10218-1:2011, 5.6.2). The flange is held
/// to it here as well.
pub const REDUCED_SPEED: f64 = 0.250;

/// A speed may exceed the reduced one by this share and count as being at it: 250 mm/s on a line is computed give or take
/// rounding.
const ROUNDING: f64 = 1e-9;

/// One segment in manual mode at reduced speed: judged a second time, at the override that this needs.
#[derive(Debug, Clone, PartialEq)]
pub struct Reduced {
    /// Which segment of the plan, counted from 0.
    pub segment: usize,
    /// Peaks of the speeds of TCP, flange and other points at full speed, found by looking. Empty without motion.
    pub peaks: Vec<SpotPeak>,
    /// The override at which TCP and flange keep the reduced speed, rounded down to a whole percent (to a tenth below one); all of
    /// it where they keep it anyway.
    pub run_at: Share,
    /// The segment's survey at that override, with the speeds of TCP and flange judged against the reduced one.
    pub survey: SegmentSurvey,
}

impl Reduced {
    /// Whether the segment can't run at full speed in manual mode.
    pub fn needs_override(&self) -> bool {
        self.run_at < Share::WHOLE
    }

    /// The peak of the TCP or of the flange at full speed, m/s; 0 without motion.
    pub fn peak(&self, spot: &Spot) -> f64 {
        self.peaks.iter().find(|peak| peak.spot == *spot).map_or(0.0, |peak| peak.speed)
    }
}

/// Every segment in manual mode at reduced speed, in the plan's order. `None` if the watch stopped it.
pub fn reduced_speed(judged: &Judged, watch: &Watch) -> Option<Vec<Reduced>> {
    let least = |limit: Speed| if limit.as_m_per_s() < REDUCED_SPEED { limit } else { Speed::m_per_s(REDUCED_SPEED) };
    let given = judged.recipe.acceptance;
    let limit = given.tcp_speed.map_or(Speed::m_per_s(REDUCED_SPEED), least);
    let criteria = Acceptance { tcp_speed: Some(limit), ..given };
    each_segment(&judged.plan, watch, |index, segment| {
        let peaks = peaks(judged, segment);
        let fastest = peaks.iter().filter(|peak| matches!(peak.spot, Spot::Tcp | Spot::Flange)).map(|peak| peak.speed);
        let run_at = override_for(fastest.fold(0.0, |most, speed| if speed <= most { most } else { speed }));
        let held = Speed::m_per_s(REDUCED_SPEED);
        let survey = judge_with_flange_held_to(held, &judged.arm, index, segment, &criteria, judged.plan.gravity, run_at);
        Reduced { segment: index, peaks, run_at, survey }
    })
}

/// Peaks of the speeds of all points that are told on a segment.
fn peaks(judged: &Judged, segment: &Segment) -> Vec<SpotPeak> {
    let points = judged.recipe.hanging_at(segment.to).tool.map_or(&[][..], |tool| &tool.points);
    spot_peaks(&judged.arm, segment, points)
}

/// The override that brings a speed (m/s) down to the reduced one, rounded down.
fn override_for(fastest: f64) -> Share {
    let needed = REDUCED_SPEED / fastest;
    if needed >= 1.0 - ROUNDING {
        Share::WHOLE
    } else if needed >= 0.01 {
        Share::percent((needed * 100.0 + ROUNDING).floor())
    } else {
        Share::percent((needed * 1000.0).floor().max(1.0) / 10.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn overrides_round_to_the_safe_side() {
        let percent = |mm_per_s: f64| override_for(mm_per_s / 1000.0).as_percent();
        assert_eq!(percent(250.0), 100.0);
        assert_eq!(percent(0.0), 100.0);
        assert_eq!(percent(400.0), 62.0);
        assert_eq!(percent(500.0), 50.0);
        assert!((percent(30_000.0) - 0.8).abs() < 1e-12);
        assert!(override_for(f64::NAN).as_percent() < 1.0, "what is no number gets the least");
    }
}

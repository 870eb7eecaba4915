use crate::checks::{Check, Finding, Verdict};
use crate::review::Judged;
use crate::units::Dimension;

use super::gauges::{Gauge, Probe};

/// What the chart shows.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Subject {
    /// Which check.
    pub check: Check,
    /// Which joint; `None` for the worst of all.
    pub joint: Option<usize>,
    /// One segment; `None` for the whole cycle.
    pub segment: Option<usize>,
}

/// A curve is one quantity over time, ready to be drawn.
#[derive(Debug, Clone, Default)]
pub struct Curve {
    /// Points in order of time.
    pub points: Vec<Point>,
    /// From when to when on the cycle, s.
    pub span: [f64; 2],
    /// What is drawn, where it has no limit; otherwise shares of the limit.
    pub unlimited: Option<Dimension>,
    /// Whether the worst of all joints is drawn although one was chosen, since the cycle is long.
    pub worst_joint: bool,
}

/// A point of a curve.
#[derive(Debug, Clone, Copy)]
pub struct Point {
    /// When on the cycle, s.
    pub time: f64,
    /// What is asked of the limit, 1 being all of it, or the value in people's units. `NAN` where there is none.
    pub asked: f64,
    /// More than this asked breaks the reserve.
    pub allowed: f64,
    /// The verdict on this instant.
    pub verdict: Verdict,
}

/// Even looks along a segment that fills the chart.
const LOOKS: usize = 160;
/// Even looks along each segment of a cycle.
const LOOKS_IN_CYCLE: usize = 16;
/// Cycles of more segments are drawn from what the check has kept.
const MOST_SEGMENTS: usize = 48;
/// Most points of a curve; more are reduced to least and greatest.
const MOST_POINTS: usize = 4096;

impl Curve {
    /// The curve of a subject.
    pub fn of(judged: &Judged, subject: Subject) -> Self {
        let plan = &judged.plan;
        let mut curve = Self::default();
        match subject.segment {
            Some(segment) => {
                let (Some(start), Some(planned)) = (plan.starts.get(segment), plan.segments.get(segment)) else { return curve };
                curve.span = [*start, start + planned.duration() + planned.dwell];
                curve.add(judged, segment, false, subject, LOOKS);
            }
            None => {
                curve.span = [0.0, plan.duration()];
                for segment in 0..plan.segments.len() {
                    if plan.segments.len() <= MOST_SEGMENTS {
                        curve.add(judged, segment, false, subject, LOOKS_IN_CYCLE);
                    } else {
                        curve.add_kept(judged, segment, subject.check);
                        curve.worst_joint = subject.joint.is_some();
                    }
                }
            }
        }
        curve.thin();
        curve
    }

    /// The curve of what a finding is about, along the version of its segment that it is of: times are on the cycle, or where that
    /// version stops at fly-by points since its start.
    pub fn of_finding(judged: &Judged, finding: &Finding) -> Self {
        let mut curve = Self::default();
        let planned = judged.plan.version(finding.segment, finding.stop);
        let start = if finding.stop { 0.0 } else { judged.plan.starts[finding.segment] };
        curve.span = [start, start + planned.duration() + planned.dwell];
        let subject = Subject { check: finding.check, joint: finding.joint, segment: Some(finding.segment) };
        curve.add(judged, finding.segment, finding.stop, subject, LOOKS);
        curve.thin();
        curve
    }

    /// Looks at a segment, or at its version that stops at fly-by points: evenly, and at every instant that the check found worth a look, so that no narrow peak is lost.
    fn add(&mut self, judged: &Judged, segment: usize, stop: bool, subject: Subject, looks: usize) {
        let Some(probe) = Probe::of_version(judged, segment, stop) else { return };
        let planned = judged.plan.version(segment, stop);
        let (start, lasts) = (if stop { 0.0 } else { judged.plan.starts[segment] }, planned.duration());
        let survey = &judged.survey.segments[segment];
        let mut times: Vec<f64> = (0..=looks).map(|k| lasts * k as f64 / looks as f64).collect();
        if !stop {
            times.extend(survey.profile.places.iter().map(|place| place.time));
        }
        // Where a path is lost it is worst, and nothing else looks there.
        let seen = survey.findings.iter().filter(|finding| finding.stop || !stop);
        times.extend(seen.map(|finding| if stop { finding.worst() } else { judged.on_cycle(finding, finding.worst()) }.time));
        times.extend(planned.law.pieces().iter().map(|piece| piece.start));
        if planned.dwell > 0.0 || planned.carried_after.is_some() {
            times.extend([lasts + 0.01 * planned.dwell, lasts + 0.99 * planned.dwell, lasts + planned.dwell]);
        }
        // With what was taken or released there it is the next segment's matter, but for what is judged at the stop.
        let after = planned.carried_after.is_some() && !subject.check.looks_after_stop();
        times.retain(|time| time.is_finite() && !(after && *time >= lasts + planned.dwell));
        times.sort_by(f64::total_cmp);
        times.dedup();
        for time in times {
            let worst = probe.read(time).and_then(|(_, reading)| {
                probe
                    .gauges(&reading, subject.check)
                    .filter(|gauge| subject.joint.is_none() || gauge.joint.is_none() || gauge.joint == subject.joint)
                    .min_by(|a, b| spare(a).total_cmp(&spare(b)))
            });
            self.points.push(self.point(start + time, worst.as_ref()));
            if let Some(gauge) = worst
                && !gauge.limit.is_finite()
            {
                self.unlimited = Some(gauge.value.of);
            }
        }
    }

    fn point(&self, time: f64, gauge: Option<&Gauge>) -> Point {
        let Some(gauge) = gauge else { return Point { time, asked: f64::NAN, allowed: f64::NAN, verdict: Verdict::Clear } };
        let asked = if gauge.limit.is_finite() { 1.0 - gauge.room.as_fraction() } else { gauge.value.shown().abs() };
        Point { time, asked, allowed: 1.0 - gauge.reserve, verdict: gauge.verdict }
    }

    /// Takes what the check kept of a segment: the least room of all joints.
    fn add_kept(&mut self, judged: &Judged, segment: usize, check: Check) {
        let survey = &judged.survey.segments[segment];
        let column = Check::ALL.iter().position(|other| *other == check).unwrap_or(0);
        let start = judged.plan.starts[segment];
        let allowed = survey.check(check).worst().map_or(f64::NAN, |peak| 1.0 - peak.reserve.as_fraction());
        for (place, rooms) in survey.profile.places.iter().zip(&survey.profile.rooms) {
            let asked = 1.0 - f64::from(rooms[column]);
            let verdict = match asked {
                asked if asked > 1.0 + 1e-6 && !check.is_tight_at_worst() => Verdict::Over,
                asked if asked > allowed + 1e-6 => Verdict::Tight,
                _ => Verdict::Clear,
            };
            self.points.push(Point { time: start + place.time, asked, allowed, verdict });
        }
    }

    /// Keeps the least and the greatest point of every slot where there are too many.
    fn thin(&mut self) {
        if self.points.len() <= MOST_POINTS {
            return;
        }
        let per_slot = self.points.len().div_ceil(MOST_POINTS / 2);
        self.points = self
            .points
            .chunks(per_slot)
            .flat_map(|slot| {
                let least = slot.iter().min_by(|a, b| a.asked.total_cmp(&b.asked));
                let most = slot.iter().max_by(|a, b| a.asked.total_cmp(&b.asked));
                let mut both: Vec<Point> = least.into_iter().chain(most).copied().collect();
                both.sort_by(|a, b| a.time.total_cmp(&b.time));
                both
            })
            .collect();
    }

    /// The most that is asked.
    pub fn most(&self) -> f64 {
        self.points.iter().map(|point| point.asked).fold(0.0, f64::max)
    }
}

fn spare(gauge: &Gauge) -> f64 {
    // Without a limit the largest value counts.
    if gauge.limit.is_finite() { gauge.room.as_fraction() - gauge.reserve } else { -gauge.value.si.abs() }
}

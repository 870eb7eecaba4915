use std::sync::Arc;

use crate::arm::{Arm, Joint, JointKind};
use crate::motion::{Plan, Segment};
use crate::program::Recipe;
use crate::units::{Dimension, Measure, Room};

use super::proof::{Effort, cover};
use super::{
    Channel, Check, CheckResult, Excess, Finding, JointSpan, Kind, Meter, Peak, Place, Proof, Scale, SegmentSurvey, Unproved,
    Verdict,
};

/// One end of what a joint turns through on the cycle: its value, on which segment (counted from 0), and where.
type End = (f64, usize, Place);

/// Values no farther apart than this count as equal, rad: the first of them is told.
const EQUAL: f64 = 1e-9;

/// How far the wrist winds cables over the cycle: for every turning joint of the wrist the least and the greatest value on all
/// segments may be no farther apart than the recipe allows. Judged where it sets a limit. Between the looks the values are bounded
/// by the proof of the path; where those bounds are too wide, they are proved closer.
pub(super) fn wind_up(arm: &Arm, recipe: &Recipe, plan: &Plan, segments: &[Arc<SegmentSurvey>]) -> (CheckResult, Vec<Finding>) {
    let mut result = CheckResult {
        check: Check::WindUp,
        judged: false,
        verdict: Verdict::Clear,
        proof: Proof::Open(Unproved::SamplesOnly),
        peaks: Vec::new(),
    };
    let mut findings = Vec::new();
    let Some(limit) = recipe.acceptance.wind_up else { return (result, findings) };
    let mut proved = Some(Room::fraction(1.0));
    for joint in wrist(arm) {
        let channel = Channel {
            check: Check::WindUp,
            joint: Some(joint),
            of: Dimension::Angle,
            scale: Scale::Ceiling(limit.as_rad()),
            reserve: 0.0,
            judged: true,
        };
        let Some([low, high]) = extremes(segments, joint) else { continue };
        result.judged = true;
        let winds = high.0 - low.0;
        let later = if (high.1, high.2.time) > (low.1, low.2.time) { high } else { low };
        let peak = Peak {
            joint: Some(joint),
            at: later.2,
            demand: Measure::si(winds, channel.of),
            limit: Measure::si(limit.as_rad(), channel.of),
            room: channel.room(winds),
            reserve: Room::fraction(0.0),
            judged: true,
        };
        result.peaks.push(peak);
        let verdict = channel.verdict(channel.asked(winds));
        if verdict != Verdict::Clear {
            result.verdict = result.verdict.max(verdict);
            findings.push(finding(&peak, verdict, later, plan));
            continue;
        }
        let bound = bound(arm, recipe, plan, segments, joint, channel.over_above() * limit.as_rad());
        proved = proved.zip(bound).map(|(least, most)| {
            let room = channel.room(most);
            if room.as_fraction() < least.as_fraction() { room } else { least }
        });
    }
    if !result.judged {
        return (result, findings);
    }
    let followed = plan.segments.iter().all(|segment| segment.trouble.is_none());
    match (result.verdict, proved) {
        (Verdict::Clear, Some(room)) if followed => result.proof = Proof::Proved(room),
        (Verdict::Clear, _) => {
            let why = if followed { Unproved::BudgetSpent } else { Unproved::NotFollowed };
            result.verdict = Verdict::Unproven;
            result.proof = Proof::Open(why);
            if followed {
                findings.push(unknown(why, plan));
            }
        }
        _ => result.proof = Proof::Witness,
    }
    (result, findings)
}

/// The turning joints of the wrist: of the last three of an arm of six joints or more, otherwise the last one.
fn wrist(arm: &Arm) -> impl Iterator<Item = usize> {
    let first = if arm.len() >= 6 { arm.len() - 3 } else { arm.len() - 1 };
    let turns = |joint: &Joint| joint.kind == JointKind::Revolute;
    arm.joints().iter().enumerate().skip(first).filter(move |(_, joint)| turns(joint)).map(|(index, _)| index)
}

/// The least and the greatest value of a joint that were seen on the cycle, rad.
fn extremes(segments: &[Arc<SegmentSurvey>], joint: usize) -> Option<[End; 2]> {
    let spans = segments.iter().filter_map(|survey| Some((survey.spans.get(joint)?, survey.segment)));
    spans.fold(None, |found: Option<[End; 2]>, (span, segment)| {
        let [low, high] = [span.low, span.high].map(|(value, place)| (value, segment, place));
        let [least, most] = found.unwrap_or([low, high]);
        Some([if low.0 < least.0 - EQUAL { low } else { least }, if high.0 > most.0 + EQUAL { high } else { most }])
    })
}

/// What a joint can turn through at most, rad; `None` where that is not known, or not known to be within `limit`.
fn bound(arm: &Arm, recipe: &Recipe, plan: &Plan, segments: &[Arc<SegmentSurvey>], joint: usize, limit: f64) -> Option<f64> {
    let proved: Option<Vec<[f64; 2]>> = segments.iter().map(|survey| survey.spans.get(joint)?.proved).collect();
    let mut proved = proved?;
    let width = |spans: &[[f64; 2]]| {
        let low = spans.iter().map(|span| span[0]).fold(f64::INFINITY, f64::min);
        let high = spans.iter().map(|span| span[1]).fold(f64::NEG_INFINITY, f64::max);
        high - low
    };
    if width(&proved) <= limit {
        return Some(width(&proved));
    }
    // Some bound is wider than what it is of. Whatever stands out beyond what was seen of the cycle is proved closer.
    let [low, high] = extremes(segments, joint)?;
    for (index, span) in proved.iter_mut().enumerate() {
        if span[0] >= low.0 && span[1] <= high.0 {
            continue;
        }
        let versions = [Some(&plan.segments[index]), plan.stops[index].as_ref()];
        let closer: Option<Vec<[f64; 2]>> =
            versions.into_iter().flatten().map(|segment| closely(arm, recipe, plan, segment, joint)).collect();
        let closer = closer?;
        *span = [width_end(&closer, 0, f64::min), width_end(&closer, 1, f64::max)];
    }
    Some(width(&proved)).filter(|width| *width <= limit)
}

fn width_end(spans: &[[f64; 2]], end: usize, of: fn(f64, f64) -> f64) -> f64 {
    spans.iter().map(|span| span[end]).reduce(of).unwrap_or(f64::NAN)
}

/// Between which values a joint stays on a segment, proved as closely as a proof on demand does.
fn closely(arm: &Arm, recipe: &Recipe, plan: &Plan, segment: &Segment, joint: usize) -> Option<[f64; 2]> {
    let meter = Meter::of(arm, segment, &recipe.acceptance, plan.gravity);
    let allowed = std::array::from_fn(|_| f64::INFINITY);
    cover(arm, segment, &meter, plan.gravity, &[], &allowed, Effort::narrow()).spans.map(|spans| spans[joint])
}

fn finding(peak: &Peak, verdict: Verdict, at: End, plan: &Plan) -> Finding {
    let [from, to] = whole(&plan.segments[at.1]);
    Finding {
        segment: at.1,
        check: Check::WindUp,
        joint: peak.joint,
        verdict,
        from,
        to,
        kind: Kind::Excess(Excess::over_the_cycle(peak)),
        stop: false,
    }
}

/// A finding that it is not known how far the wrist winds cables.
fn unknown(why: Unproved, plan: &Plan) -> Finding {
    let [from, to] = plan.segments.first().map_or([Place { time: 0.0, u: 0.0 }; 2], |first| whole(first));
    let kind = Kind::Unproved(why);
    Finding { segment: 0, check: Check::WindUp, joint: None, verdict: Verdict::Unproven, from, to, kind, stop: false }
}

fn whole(segment: &Segment) -> [Place; 2] {
    [(0.0, 0.0), (segment.duration(), 1.0)].map(|(time, u)| Place { time, u })
}

/// The joints whose turning winds cables between them: where the wrist is at its least and at its greatest on the cycle, as the
/// waypoints that those segments arrive at, counted from 0.
pub fn wound_between(plan: &Plan, segments: &[Arc<SegmentSurvey>], joint: usize) -> Option<[usize; 2]> {
    let mut ends = extremes(segments, joint)?.map(|(_, segment, place)| (segment, place.time));
    ends.sort_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)));
    Some(ends.map(|(segment, _)| plan.segments[segment].to))
}

/// What a joint turned through on one segment, rad (m for one that slides): the least and the greatest value seen, and where.
pub(super) fn span_of(values: impl Iterator<Item = (f64, Place)>, proved: Option<[f64; 2]>) -> Option<JointSpan> {
    values.fold(None, |span: Option<JointSpan>, (value, place)| {
        let span = span.unwrap_or(JointSpan { low: (value, place), high: (value, place), proved });
        let low = if value < span.low.0 { (value, place) } else { span.low };
        let high = if value > span.high.0 { (value, place) } else { span.high };
        Some(JointSpan { low, high, proved })
    })
}

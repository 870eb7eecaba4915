use crate::arm::Arm;
use crate::geometry::V3;
use crate::motion::Segment;
use crate::program::Acceptance;
use crate::units::{Measure, Room};

use super::stretch::{finding, stretches, worst_of};
use super::sweep::{Look, Sweep};
use super::{
    Check, CheckResult, Finding, Kind, Meter, Peak, Place, Profile, Proof, SegmentSurvey, Unproved, Verdict, holding, reach,
};

/// Judges one segment by every check.
pub(super) fn judge(arm: &Arm, index: usize, segment: &Segment, criteria: &Acceptance, gravity: V3) -> SegmentSurvey {
    let meter = Meter::of(arm, segment, criteria, gravity);
    let sweep = Sweep::of(arm, &meter, segment);
    let after = look_after_stop(&sweep, &meter, segment);
    let mut findings = Vec::new();
    let mut checks = Vec::new();
    for check in Check::ALL {
        let result = match check {
            Check::Reach => judge_reach(index, segment, &mut findings),
            _ => judge_channels(check, arm, index, segment, &meter, &sweep, after.as_ref(), &mut findings),
        };
        checks.push(result);
    }
    findings.sort_by(Finding::order);
    let verdict = checks.iter().map(|result| result.verdict).max().unwrap_or(Verdict::Unproven);
    let profile = profile(&meter, &sweep);
    SegmentSurvey { segment: index, verdict, checks, findings, profile, looked_at: sweep.looks.len() }
}

fn judge_reach(index: usize, segment: &Segment, findings: &mut Vec<Finding>) -> CheckResult {
    let verdict = reach::verdict(segment);
    let mut proof = Proof::Open(Unproved::SamplesOnly);
    if let Some(trouble) = segment.trouble {
        let u = segment.followed_to();
        let at = Place { time: segment.law.time_of(u), u };
        let start = Place { time: 0.0, u: 0.0 };
        findings.push(Finding {
            segment: index,
            check: Check::Reach,
            joint: None,
            verdict,
            from: start,
            to: at,
            kind: Kind::NoPath(trouble),
        });
        proof = if trouble.is_certain() { Proof::Witness } else { Proof::Open(Unproved::NotFollowed) };
    }
    CheckResult { check: Check::Reach, judged: true, verdict, proof, peaks: Vec::new() }
}

/// The holding torque at the stop with what was taken or released there.
fn look_after_stop(sweep: &Sweep, meter: &Meter, segment: &Segment) -> Option<Look> {
    let carried = segment.carried_after.as_ref()?;
    let instant = sweep.instant(1.0).filter(|_| segment.followed_to() >= 1.0)?;
    let place = Place { time: segment.duration() + segment.dwell, u: 1.0 };
    Some(sweep.look_of(place, meter.read_with(&instant, 0.0, 0.0, carried)))
}

#[expect(clippy::too_many_arguments, reason = "the parts of one judgement, each of its own kind")]
fn judge_channels(
    check: Check,
    arm: &Arm,
    index: usize,
    segment: &Segment,
    meter: &Meter,
    sweep: &Sweep,
    after: Option<&Look>,
    findings: &mut Vec<Finding>,
) -> CheckResult {
    let slots = meter.slots(check);
    let judged = slots.clone().any(|slot| meter.channel(slot).judged) || check == Check::Holding;
    let mut result =
        CheckResult { check, judged, verdict: Verdict::Clear, proof: Proof::Open(Unproved::SamplesOnly), peaks: Vec::new() };
    let after = after.filter(|_| check == Check::Holding);
    for slot in slots {
        let mut found = stretches(sweep, meter, slot, index);
        if let Some(look) = after
            && meter.channel(slot).verdict(look.asked[slot]) != Verdict::Clear
        {
            let mut at_stop = finding(meter.channel(slot), index, look, slot, [look.place; 2], None);
            if let Kind::Excess(excess) = &mut at_stop.kind {
                excess.after_stop = true;
            }
            found.push(at_stop);
        }
        result.verdict = found.iter().map(|finding| finding.verdict).fold(result.verdict, Verdict::max);
        findings.extend(found);
        result.peaks.extend(peak(meter, sweep, after, slot));
    }
    if result.verdict != Verdict::Clear {
        result.proof = Proof::Witness;
    } else if !judged {
        return result;
    } else if let Some(why) = why_unproven(check, arm, segment) {
        result.verdict = Verdict::Unproven;
        result.proof = Proof::Open(why);
        if why != Unproved::NotFollowed {
            let [from, to] = [(0.0, 0.0), (segment.duration(), 1.0)].map(|(time, u)| Place { time, u });
            let kind = Kind::Unproved(why);
            findings.push(Finding { segment: index, check, joint: None, verdict: Verdict::Unproven, from, to, kind });
        }
    }
    result
}

fn why_unproven(check: Check, arm: &Arm, segment: &Segment) -> Option<Unproved> {
    if segment.followed_to() < 1.0 {
        return Some(Unproved::NotFollowed);
    }
    if check == Check::Holding { holding::unproved(arm) } else { None }
}

fn peak(meter: &Meter, sweep: &Sweep, after: Option<&Look>, slot: usize) -> Option<Peak> {
    let channel = meter.channel(slot);
    if sweep.looks.is_empty() {
        return None;
    }
    // A channel without a limit asks nothing, so its largest value is its peak.
    let open = sweep.looks.iter().all(|look| look.asked[slot] == 0.0);
    let mut worst = if open {
        sweep.looks.iter().max_by(|a, b| a.reading[slot].abs().total_cmp(&b.reading[slot].abs())).expect("not empty")
    } else {
        worst_of(&sweep.looks, slot)
    };
    if let Some(look) = after.filter(|look| look.asked[slot] > worst.asked[slot]) {
        worst = look;
    }
    let value = worst.reading[slot];
    Some(Peak {
        joint: channel.joint,
        at: worst.place,
        demand: Measure::si(value, channel.of),
        limit: Measure::si(channel.limit(value), channel.of),
        room: channel.room(value),
        reserve: Room::fraction(channel.reserve),
    })
}

fn profile(meter: &Meter, sweep: &Sweep) -> Profile {
    let places = sweep.looks.iter().map(|look| look.place).collect();
    let room = |look: &Look, check: Check| {
        let judged = meter.slots(check).filter(|&slot| meter.channel(slot).judged);
        judged.map(|slot| (1.0 - look.asked[slot]) as f32).fold(f32::NAN, f32::min)
    };
    let rooms = sweep.looks.iter().map(|look| Check::ALL.map(|check| room(look, check))).collect();
    Profile { places, rooms }
}

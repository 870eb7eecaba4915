use crate::motion::{Plan, Segment};

use super::{CheckResult, Finding, JointSpan, Peak, Place, Proof, SegmentSurvey, Verdict};

/// The result of a segment that a blend cuts something off, from that of its version on the cycle and that of its version which
/// stops at the fly-by point: a controller may run either, so the worse of both counts in every check.
///
/// Findings of the stop version stand only where the cycle shows nothing as bad of that check and joint, and are marked. Peaks
/// taken from it stand at the nearest place of the cycle; the profile is the cycle's.
pub(super) fn worse_of_both(plan: &Plan, mut run: SegmentSurvey, stop: &SegmentSurvey) -> SegmentSurvey {
    let segment = &plan.segments[run.segment];
    for (result, other) in run.checks.iter_mut().zip(&stop.checks) {
        result.judged |= other.judged;
        result.verdict = result.verdict.max(other.verdict);
        result.proof = weaker(result.proof, other.proof);
        take_worse_peaks(plan, segment, run.segment, result, other);
    }
    let as_bad = |finding: &Finding| {
        run.findings
            .iter()
            .any(|known| (known.check, known.joint) == (finding.check, finding.joint) && known.verdict >= finding.verdict)
    };
    let more: Vec<Finding> =
        stop.findings.iter().filter(|finding| !as_bad(finding)).map(|finding| Finding { stop: true, ..*finding }).collect();
    run.findings.extend(more);
    run.findings.sort_by(Finding::order);
    run.verdict = run.checks.iter().map(|result| result.verdict).max().unwrap_or(Verdict::Unproven);
    run.looked_at += stop.looked_at;
    run.tally.postures += stop.tally.postures;
    run.tally.trials += stop.tally.trials;
    for (span, other) in run.spans.iter_mut().zip(&stop.spans) {
        take_wider_span(plan, segment, run.segment, span, other);
    }
    run
}

/// Between which values a joint stays in either version.
fn take_wider_span(plan: &Plan, segment: &Segment, index: usize, span: &mut JointSpan, other: &JointSpan) {
    let on_cycle = |(value, place): (f64, Place)| {
        let u = plan.nearest_on_cycle(index, place.u);
        (value, Place { time: segment.law.time_of(u), u })
    };
    if other.low.0 < span.low.0 {
        span.low = on_cycle(other.low);
    }
    if other.high.0 > span.high.0 {
        span.high = on_cycle(other.high);
    }
    span.proved = span.proved.zip(other.proved).map(|(a, b)| [a[0].min(b[0]), a[1].max(b[1])]);
}

fn weaker(one: Proof, other: Proof) -> Proof {
    match (one, other) {
        (Proof::Witness, _) | (_, Proof::Witness) => Proof::Witness,
        (Proof::Open(why), _) | (_, Proof::Open(why)) => Proof::Open(why),
        (Proof::Settled, _) | (_, Proof::Settled) => Proof::Settled,
        (Proof::Proved(a), Proof::Proved(b)) => Proof::Proved(if b < a { b } else { a }),
    }
}

fn take_worse_peaks(plan: &Plan, segment: &Segment, index: usize, result: &mut CheckResult, other: &CheckResult) {
    let on_cycle = |peak: &Peak| {
        let u = plan.nearest_on_cycle(index, peak.at.u);
        Peak { at: Place { time: segment.law.time_of(u), u }, ..*peak }
    };
    if result.peaks.len() != other.peaks.len() {
        result.peaks = other.peaks.iter().map(on_cycle).collect();
        return;
    }
    for (peak, stopping) in result.peaks.iter_mut().zip(&other.peaks) {
        if !(stopping.room.as_fraction() >= peak.room.as_fraction()) {
            *peak = on_cycle(stopping);
        }
    }
}

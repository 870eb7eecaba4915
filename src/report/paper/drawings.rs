use crate::checks::{Check, Finding, Kind, Peak};
use crate::review::drawn::{Curve, Gauges, Subject};
use crate::review::{Judged, check_words, segment_row};
use crate::units::Seconds;

use super::block::{Drawing, Shows, Stance};

/// What a finding is about over time, and the arm at its worst instant.
pub(super) fn of_finding(judged: &Judged, finding: &Finding) -> Vec<Drawing> {
    chart(judged, finding).into_iter().chain(arm(judged, finding)).collect()
}

fn chart(judged: &Judged, finding: &Finding) -> Option<Drawing> {
    let Kind::Excess(excess) = &finding.kind else { return None };
    // The cycle's torque is a sum, and what comes after a release is at an instant.
    if finding.check == Check::Rms {
        return None;
    }
    let curve = Curve::of_finding(judged, finding);
    let limit = match finding.check {
        Check::Singular | Check::SpeedLeft => format!("{} where {} must be left", excess.demand, excess.limit),
        Check::Range => format!("{}, its end at {}", excess.demand, excess.limit),
        _ => format!("asks {} of {}", excess.room.asks(), excess.limit),
    };
    let caption = format!("{} on segment {}: {limit}, {}.", what(judged, finding), label(judged, finding), when(judged, finding));
    Some(Drawing { caption, shows: Shows::Chart(Box::new(curve)) })
}

fn arm(judged: &Judged, finding: &Finding) -> Option<Drawing> {
    if finding.check == Check::Rms || matches!(finding.kind, Kind::Unproved(_)) {
        return None;
    }
    let gauges = Gauges::at_worst(judged, finding)?;
    let mount = judged.recipe.mount;
    let stance = Stance {
        mount,
        stick: gauges.posture.stick().iter().map(|point| mount.point(point)).collect(),
        tcp: mount.point(&gauges.tcp.at),
        loaded: gauges.load > 0.0,
        verdict: finding.verdict,
    };
    let caption = format!("The arm {}, from the side and from above.", when(judged, finding));
    Some(Drawing { caption, shows: Shows::Arm(Box::new(stance)) })
}

/// What is nearest to its reserve on a segment (counted from 0), over time; `None` where there is no motion, or nothing to draw.
pub(super) fn of_segment(judged: &Judged, index: usize) -> Option<Drawing> {
    let (check, peak): (Check, &Peak) = judged.survey.segments[index].nearest().map(|(result, peak)| (result.check, peak))?;
    if check == Check::Rms || !peak.limit.si.is_finite() {
        return None;
    }
    let curve = Curve::of(judged, Subject { check, joint: peak.joint, segment: Some(index) });
    let [_, to, .., nearest] = segment_row(judged, index);
    let caption = format!("Segment {} to \"{to}\": {nearest}.", judged.plan.segments[index].label());
    Some(Drawing { caption, shows: Shows::Chart(Box::new(curve)) })
}

fn what(judged: &Judged, finding: &Finding) -> String {
    let joint = finding.joint.map_or(String::new(), |j| format!("{} ", judged.arm.joints()[j].name));
    format!("{joint}{}", check_words(finding.check))
}

fn label(judged: &Judged, finding: &Finding) -> String {
    let segment = &judged.plan.segments[finding.segment];
    format!("{} to \"{}\"", segment.label(), judged.recipe.waypoints[segment.to].name)
}

/// When the worst instant of a finding is, as its text tells it.
fn when(judged: &Judged, finding: &Finding) -> String {
    let time = finding.worst().time;
    if finding.stop {
        format!("{} after the start of the version that stops", Seconds::s(time))
    } else {
        format!("{} into the cycle", Seconds::s(judged.plan.starts[finding.segment] + time))
    }
}

use crate::checks::{Check, Verdict};
use crate::motion::Segment;
use crate::program::{Arrive, PathSpeed};
use crate::units::{Measure, Share};

use super::{Judged, check_words, explain};

/// The headings over [`segment_row`].
pub const SEGMENT_HEADS: [&str; 6] = ["#", "to", "how", "asked", "verdict", "nearest to its reserve"];

/// A segment (counted from 0) in brief, under [`SEGMENT_HEADS`].
pub fn segment_row(judged: &Judged, index: usize) -> [String; 6] {
    let segment = &judged.plan.segments[index];
    let waypoint = &judged.recipe.waypoints[segment.to];
    let how = if segment.blend { "fly-by" } else { waypoint.arrive.as_ref().map_or("joint", |arrive| arrive.word()) };
    [
        segment.number().to_string(),
        waypoint.name.clone(),
        how.to_owned(),
        asked(judged, segment),
        judged.survey.segments[index].verdict.word().to_owned(),
        nearest(judged, index),
    ]
}

/// The speed or share that a segment was given.
fn asked(judged: &Judged, segment: &Segment) -> String {
    if segment.blend {
        return judged.recipe.waypoints[segment.to].fly_by.map_or(String::new(), |radius| radius.to_string());
    }
    let usual = &judged.recipe.usual;
    let path = |speed: &PathSpeed| match speed.speed.or(usual.speed) {
        Some(given) => given.to_string(),
        None => speed.turn_speed.unwrap_or(usual.turn_speed).to_string(),
    };
    match &judged.recipe.waypoints[segment.to].arrive {
        Some(Arrive::Line(speed) | Arrive::Arc { speed, .. }) => path(speed),
        _ => segment.shares.map_or(String::new(), |[share, _]| Share::fraction(share).to_string()),
    }
}

/// `room -54 %, rate J4, asks 154 %`.
fn nearest(judged: &Judged, index: usize) -> String {
    let survey = &judged.survey.segments[index];
    if let Some(finding) =
        survey.findings.first().filter(|finding| finding.check == Check::Reach || finding.verdict == Verdict::Unproven)
    {
        let title = explain(judged, finding).title;
        return title.split_once(": ").map_or(title.clone(), |(_, rest)| rest.to_owned());
    }
    let Some((result, peak)) = survey.nearest() else { return "no motion".to_owned() };
    let joint = peak.joint.map(|j| &judged.arm.joints()[j]);
    let check = if result.check == Check::Accel { "accel" } else { check_words(result.check) };
    let name = joint.map_or(check.to_owned(), |joint| format!("{check} {}", joint.name));
    let figure = match (result.check, joint) {
        (Check::Range, Some(joint)) => {
            format!(", {} to end", Measure::si(joint.range.to_end(peak.demand.si), peak.demand.of).text_down(1))
        }
        (Check::Singular | Check::SpeedLeft, _) => String::new(),
        _ => format!(", asks {}", peak.room.asks()),
    };
    format!("room {}, {name}{figure}", peak.room)
}

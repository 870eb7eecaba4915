use crate::checks::{Check, Finding, Kind};
use crate::review::{Short, Tried};
use crate::units::Room;

use super::Judged;
use super::listing::all_of;
use super::remedy::{capital, kind_words, subject, subject_of};

/// What was tried without success, and how near each came; kinds that came equally near together.
pub(super) fn tried_text(judged: &Judged, finding: &Finding, tried: &[Tried]) -> Option<String> {
    let mut alike: Vec<(String, Vec<String>)> = Vec::new();
    for one in tried {
        let (near, kind) = (nearness(judged, finding, one.short), kind_words(one.kind).to_owned());
        match alike.iter_mut().find(|(known, _)| *known == near) {
            Some((_, kinds)) => kinds.push(kind),
            None => alike.push((near, vec![kind])),
        }
    }
    let told: Vec<String> = alike.iter().map(|(near, kinds)| format!("{} ({near})", all_of(kinds))).collect();
    (!told.is_empty()).then(|| format!("{}.", capital(&told.join("; "))))
}

/// How near something came that was tried without success, or what stands in its way.
fn nearness(judged: &Judged, finding: &Finding, short: Short) -> String {
    match short {
        Short::Nearest(Some(room)) => {
            let now = match &finding.kind {
                Kind::Excess(excess) => Some(excess.room),
                Kind::NoPath(_) | Kind::Unproved(_) => None,
            };
            let told = room_words(judged, finding, room);
            match now.map(|now| room_words(judged, finding, now)) {
                Some(now) if now == told => format!("no better than now, {now}"),
                _ => format!("at best {told}"),
            }
        }
        Short::Nearest(None) if finding.check == Check::Reach => "still no path".to_owned(),
        Short::Nearest(None) => "there is none that could be judged".to_owned(),
        Short::Spoils { segment, check, joint } => {
            let label = judged.plan.segments[segment].label();
            format!("{} is in the way on segment {label}", subject_of(judged, check, joint))
        }
        Short::Fixed => "the work fixes the points".to_owned(),
    }
}

/// A room of a finding's check and joint: `J4 rate with room 3 %`; of a range, how far the joint stands from its end.
fn room_words(judged: &Judged, finding: &Finding, room: Room) -> String {
    match finding.joint.map(|j| &judged.arm.joints()[j]).filter(|_| finding.check == Check::Range) {
        Some(joint) => {
            let left = joint.value(room.as_fraction() * joint.range.half());
            format!("{} {} from its end", joint.name, left.text_down(1))
        }
        None => format!("{} with room {room}", subject(judged, finding)),
    }
}

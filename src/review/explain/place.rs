use crate::checks::{Excess, Finding, Kind, Place};
use crate::motion::Segment;
use crate::program::{Arrive, Then};
use crate::units::{Dimension, Measure, Seconds, Share};

use super::{Judged, Label, Paragraph};

/// A path shorter than this is told in tenths of a millimetre, m.
const SHORT: f64 = 0.01;
/// A path shorter than this has no length to tell, m.
const NO_LENGTH: f64 = 1e-9;

/// How far along a segment a fraction is, as people measure it: mm on a path, degrees of a turn on the spot, percent of a joint
/// move.
pub(super) fn along(segment: &Segment, u: f64) -> String {
    let (length, turn) = (segment.path.length(), segment.path.turn());
    if !segment.follows_path() || segment.blend {
        Share::fraction(u).to_string()
    } else if length > NO_LENGTH {
        Measure::si(length * u, Dimension::Length).text(usize::from(length < SHORT))
    } else {
        Measure::si(turn * u, Dimension::Angle).text(1)
    }
}

/// The whole of what [`along`] measures: `500 mm`, `the move`.
pub(super) fn whole(segment: &Segment) -> String {
    if segment.blend {
        "the blend".to_owned()
    } else if segment.follows_path() {
        along(segment, 1.0)
    } else {
        "the move".to_owned()
    }
}

/// When a place is on the cycle: `9.32 s into the cycle`.
pub(super) fn on_cycle(judged: &Judged, segment: usize, place: Place) -> String {
    format!("{} into the cycle", Seconds::s(judged.plan.starts[segment] + place.time))
}

/// When a place is on its own segment, where that is not run as the cycle has it.
fn from_start(place: Place) -> String {
    format!("{} after its start", Seconds::s(place.time))
}

/// A segment by number, kind and names: `Segment 10, the line from "window in" to "window out"`.
pub(super) fn name(judged: &Judged, segment: usize) -> String {
    let planned = &judged.plan.segments[segment];
    let waypoints = &judged.recipe.waypoints;
    if planned.blend {
        return format!(
            "Segment {}, the blend past waypoint {} \"{}\"",
            planned.label(),
            planned.number(),
            waypoints[planned.to].name
        );
    }
    let kind = match waypoints[planned.to].arrive.as_ref().map(Arrive::word) {
        Some("joint") | None => "joint move",
        Some(word) => word,
    };
    let [from, to] = [planned.to - 1, planned.to].map(|index| waypoints[index].name.as_str());
    format!("Segment {}, the {kind} from \"{from}\" to \"{to}\"", planned.number())
}

/// Where a finding is: segment, stretch, worst instant and its time on the cycle.
pub(super) fn paragraph(judged: &Judged, finding: &Finding) -> Paragraph {
    let segment = judged.plan.version(finding.segment, finding.stop);
    let name = name(judged, finding.segment);
    let name = if finding.stop { name + ", in the version that stops at its fly-by points" } else { name };
    let when = |place: Place| if finding.stop { from_start(place) } else { on_cycle(judged, finding.segment, place) };
    let text = match &finding.kind {
        Kind::Excess(excess) if excess.after_stop => {
            let then = match &judged.recipe.waypoints[segment.to].then {
                Some(Then::Take(load)) => format!("once \"{load}\" is taken"),
                _ => "once the load is released".to_owned(),
            };
            format!("{name}: at the stop at its end, {then}, {}.", when(excess.worst))
        }
        Kind::Excess(excess) => format!(
            "{name}. {}, worst at {}, {}.",
            stretch(segment, finding, excess),
            along(segment, excess.worst.u),
            when(excess.worst)
        ),
        _ if finding.to.u >= 1.0 => format!("{name}, all along it."),
        _ if finding.to.u <= 0.0 => format!("{name}, from its start."),
        _ => format!("{name}. Followed up to {} of {}, {}.", along(segment, finding.to.u), whole(segment), when(finding.to)),
    };
    Paragraph::says(Label::Where, text)
}

fn stretch(segment: &Segment, finding: &Finding, excess: &Excess) -> String {
    let short_of = if finding.check.is_tight_at_worst() { "Below what is asked for" } else { "Short of the reserve" };
    match excess.over {
        Some([from, to]) if excess.reserve.as_fraction() > 0.0 && (from, to) != (finding.from, finding.to) => {
            let flagged = between(segment, finding.from, finding.to);
            format!("Over the limit {}, and short of the reserve {flagged}", between(segment, from, to))
        }
        Some([from, to]) => format!("Over the limit {}", between(segment, from, to)),
        None => format!("{short_of} {}", between(segment, finding.from, finding.to)),
    }
}

fn between(segment: &Segment, from: Place, to: Place) -> String {
    let [first, last] = [from.u, to.u].map(|u| along(segment, u));
    let whole = whole(segment);
    match (from.u <= 0.0, to.u >= 1.0) {
        (true, true) if segment.follows_path() && !segment.blend => format!("all along its {whole}"),
        (true, true) => "all along".to_owned(),
        _ if first == last => format!("at {first} of {whole}"),
        (true, false) => format!("from its start to {last} of {whole}"),
        (false, true) => format!("from {first} to its end, the last {} of {whole}", along(segment, 1.0 - from.u)),
        (false, false) => format!("from {first} to {last} of {whole}"),
    }
}

use crate::checks::{Check, Finding, Kind};
use crate::geometry::V3;
use crate::review::{Change, Ends, Remedy, RemedyKind, Short, Tried};
use crate::units::{Angle, Dimension, Length, Measure, Room, Seconds};

use super::direction::{axis, way};
use super::listing::{all_of, first_of};
use super::place::along;
use super::{Judged, Label, Paragraph, check_words, doubt_text, explain};

/// A cycle longer or shorter by less than this takes as long as before, s: half of the last digit that is shown.
const SAME_TIME: f64 = 0.005;
/// A displacement, or a part of one, that is told as 0.0 mm is nothing, m: half of the last digit that is shown.
const NOTHING: f64 = 5e-5;

/// What is said of a search that was stopped after some of the kinds of remedy.
pub fn stopped_text([tried, of]: [usize; 2]) -> String {
    format!("The search was stopped: {tried} of {of} kinds of change were tried.")
}

/// The remedies of a finding as paragraphs, the least change first, and one more for what was tried without success.
pub fn remedies_text(judged: &Judged, finding: &Finding, remedies: &[Remedy], tried: &[Tried]) -> Vec<Paragraph> {
    let mut told: Vec<Paragraph> =
        remedies.iter().map(|remedy| Paragraph::says(Label::Remedies, remedy_text(judged, finding, remedy))).collect();
    if let Some(text) = tried_text(judged, finding, tried) {
        let opening = if remedies.is_empty() { "Nothing that was tried settles it." } else { "Tried without success:" };
        told.push(Paragraph::says(Label::Remedies, format!("{opening} {text}")));
    } else if told.is_empty() {
        told.push(Paragraph::says(Label::Remedies, nothing_to_try(judged, finding)));
    }
    told
}

fn nothing_to_try(judged: &Judged, finding: &Finding) -> &'static str {
    let lost = judged.plan.version(finding.segment, finding.stop).trouble.is_some();
    match finding.kind {
        _ if lost && finding.check != Check::Reach => {
            "This segment has no path to its end yet. Settle that first; this finding may go with it, or change."
        }
        Kind::Unproved(_) => "Nothing in the program settles this; the data that are missing do.",
        _ => "No change of this segment alone settles this; look at the waypoint and at the segment before it.",
    }
}

/// A remedy in a few words, for a list: `slower: 400 mm/s to 232 mm/s`.
pub fn remedy_title(judged: &Judged, remedy: &Remedy) -> String {
    let but = match (remedy.effect.worsens.is_empty(), remedy.effect.doubts.is_empty()) {
        (false, _) => ", makes another worse",
        (true, false) => ", brings a doubt",
        (true, true) => "",
    };
    format!("{}: {}{but}", kind_words(remedy.kind()), figures(judged, &remedy.change))
}

/// A remedy in a few sentences: what to change, what it settles and leaves, what it makes worse, what it costs.
pub fn remedy_text(judged: &Judged, finding: &Finding, remedy: &Remedy) -> String {
    let mut told = vec![format!("{}.", capital(&advice(judged, finding, &remedy.change)))];
    told.extend(rooms(judged, finding, remedy));
    told.extend(also_settled(judged, finding, remedy));
    told.extend(left_over(remedy));
    told.extend(worse(remedy));
    told.extend(doubtful(remedy));
    told.extend(costs(remedy));
    if remedy.edit.is_some() && moves_elsewhere(remedy.kind()) {
        told.push("Whether the new way is free is not judged.".to_owned());
    }
    told.join(" ")
}

/// Whether arm or tool then pass where they did not pass before, so that they may meet something.
fn moves_elsewhere(kind: RemedyKind) -> bool {
    !matches!(kind, RemedyKind::Slower | RemedyKind::Acceleration | RemedyKind::Dwell)
}

/// The room of the finding's check and joint, before and after.
fn rooms(judged: &Judged, finding: &Finding, remedy: &Remedy) -> Option<String> {
    let [before, after] = [remedy.room[0]?, remedy.room[1]?];
    let joint = finding.joint.map(|j| &judged.arm.joints()[j]);
    Some(match joint.filter(|_| finding.check == Check::Range) {
        Some(joint) => {
            let [now, then] = [before, after].map(|room| joint.value(room.as_fraction() * joint.range.half()).text_down(1));
            format!("{} then stands {then} from its end at the least, where it is {now} now.", joint.name)
        }
        None => format!("{} then leaves room of {after}, where it is {before} now.", capital(&subject(judged, finding))),
    })
}

/// A kind of remedy in words.
pub fn kind_words(kind: RemedyKind) -> &'static str {
    match kind {
        RemedyKind::Slower => "slower",
        RemedyKind::Acceleration => "softer acceleration",
        RemedyKind::FlyBy => "another fly-by",
        RemedyKind::Dwell => "a longer dwell",
        RemedyKind::Turn => "turn the tool",
        RemedyKind::Tilt => "tilt the tool",
        RemedyKind::Shift => "shift",
        RemedyKind::Via => "a point on the way",
        RemedyKind::JointMove => "joint move",
        RemedyKind::Posture => "another posture",
        RemedyKind::Override => "override",
        RemedyKind::Load => "a lighter load",
        RemedyKind::Centre => "a nearer centre of mass",
        RemedyKind::Grip => "another grip",
        RemedyKind::MountHeight => "another height of the base",
        RemedyKind::MountTilt => "a leaning base",
    }
}

/// What of a finding a room is of: `J4 rate`.
fn subject(judged: &Judged, finding: &Finding) -> String {
    subject_of(judged, finding.check, finding.joint)
}

fn subject_of(judged: &Judged, check: Check, joint: Option<usize>) -> String {
    let joint = joint.map_or(String::new(), |j| format!("{} ", judged.arm.joints()[j].name));
    format!("{joint}{}", check_words(check))
}

fn figures(judged: &Judged, change: &Change) -> String {
    match change {
        Change::Speed { from, to } => format!("{from} to {to}"),
        Change::TurnSpeed { from, to } => format!("{from} to {to}"),
        Change::Share { from, to } | Change::AccelShare { from, to } => format!("{from} to {to}"),
        Change::Pace { to } | Change::Override { share: to } => to.to_string(),
        Change::Accel { from, to } => format!("{from} to {to}"),
        Change::TurnAccel { from, to } => format!("{from} to {to}"),
        Change::FlyBy { from, to, .. } => to.map_or_else(|| format!("{from} to a stop"), |to| format!("{from} to {to}")),
        Change::Dwell { from, to, .. } => format!("{} to {}", tenths(*from), tenths(*to)),
        Change::Turn { ends, angle } => format!("{} {}", signed(*angle), ends_words(*ends)),
        Change::Tilt { ends, angle, .. } => format!("{} {}", angle.measure().text(1), ends_words(*ends)),
        Change::Shift { ends, by } => format!("{} {}", length(by), ends_words(*ends)),
        Change::Via { by, .. } if is_told_as_nothing(by) => "on the line".to_owned(),
        Change::Via { by, .. } => format!("{} beside the line", length(by)),
        Change::JointMove { leaves, .. } => format!("leaves the path by {}", leaves.measure().text_up(0)),
        Change::Posture { waypoint, .. } => format!("from \"{}\" on", judged.recipe.waypoints[*waypoint].name),
        Change::Load { from, to } => format!("{from} to {to}"),
        Change::Centre { by } => length(by),
        Change::Grip { axis, angle } => format!("turned {} about tool {}", angle.measure().text(0), ["x", "y", "z"][*axis]),
        Change::MountHeight { by } => higher(*by),
        Change::MountTilt { axis, angle } => format!("{} about base {}", signed(*angle), ["x", "y", "z"][*axis]),
    }
}

/// What to do, without the full stop.
fn advice(judged: &Judged, finding: &Finding, change: &Change) -> String {
    let segment = judged.plan.version(finding.segment, finding.stop);
    let number = format!("segment {}", segment.number());
    let name = |waypoint: usize| format!("\"{}\"", judged.recipe.waypoints[waypoint].name);
    let at = |ends: Ends| match ends {
        Ends::Both => format!("at both ends, {} and {}", name(segment.to - 1), name(segment.to)),
        Ends::Start => format!("at its start, {}", name(segment.to - 1)),
        Ends::End => format!("at its end, {}", name(segment.to)),
    };
    match change {
        Change::Speed { from, to } => format!("run {number} at {to} instead of {from}"),
        Change::TurnSpeed { from, to } => format!("turn the tool on {number} at {to} instead of {from}"),
        Change::Share { from, to } => format!("run {number} with a share of {to} instead of {from}"),
        Change::Pace { to } => format!("run both segments that meet in {} at {to} of their speeds", name(segment.to)),
        Change::Accel { from, to } => format!("speed up and slow down on {number} with {to} instead of {from}"),
        Change::TurnAccel { from, to } => format!("speed the turn of the tool up and down on {number} with {to} instead of {from}"),
        Change::AccelShare { from, to } => format!("give {number} an acceleration share of {to} instead of {from}"),
        Change::FlyBy { waypoint, from, to: Some(to) } => {
            format!("pass {} within {to} instead of {from}", name(*waypoint))
        }
        Change::FlyBy { waypoint, from, to: None } => format!("stop at {} instead of passing it within {from}", name(*waypoint)),
        Change::Dwell { waypoint, from, to } => {
            format!("stand {} at {} instead of {}", tenths(*to), name(*waypoint), tenths(*from))
        }
        Change::Turn { ends, angle } => {
            format!("turn the tool by {} about its own axis on {number}, {}", signed(*angle), at(*ends))
        }
        Change::Tilt { ends, axis: about, angle } => {
            format!("tilt the tool by {} about {} on {number}, {}", angle.measure().text(1), axis(about), at(*ends))
        }
        Change::Shift { ends, by } => {
            format!("shift {number} by {}, {}", displacement(judged, by), at(*ends))
        }
        Change::Via { u, by } => {
            let beside = if is_told_as_nothing(by) {
                "on the line itself".to_owned()
            } else {
                format!("beside the line by {}", displacement(judged, by))
            };
            format!("let {number} stop at a point on the way, {} from its start and {beside}", along(segment, *u))
        }
        Change::JointMove { share, leaves, keeps } => {
            let taught = if *keeps {
                format!(", with {} taught by the joint values that it has now, so that the posture stays", name(segment.to))
            } else {
                String::new()
            };
            format!(
                "let the arm go by a joint move with a share of {share} on {number}{taught}; the TCP then leaves the path by up to {}",
                leaves.measure().text_up(0)
            )
        }
        Change::Posture { waypoint, last, from, to } => {
            let span = if waypoint == last {
                format!("at {}:", name(*waypoint))
            } else {
                format!("from {} to {}: at {}", name(*waypoint), name(*last), name(*waypoint))
            };
            let moves: Vec<String> = (0..from.len())
                .filter(|&j| (to[j] - from[j]).abs() > 1e-3)
                .map(|j| {
                    let joint = &judged.arm.joints()[j];
                    format!("{} {} instead of {}", joint.name, joint.value(to[j]).signed(), joint.value(from[j]).signed())
                })
                .collect();
            format!("take another posture {span} {}", all_of(&moves))
        }
        Change::Override { share } => {
            format!("at an override of {share} it would be settled on {number}, for information; that slows down everything")
        }
        Change::Load { from, to } => format!(
            "with its centre of mass where it is, the heaviest load that leaves the reserve is {} of {from}, for information",
            to.measure().text_down(1)
        ),
        Change::Centre { by } => {
            format!(
                "with the centre of mass of the load {} nearer, {} in TCP axes, it would be settled, for information",
                length(by),
                tool_parts(by)
            )
        }
        Change::Grip { axis, angle } => format!(
            "with the load turned {} in the grip about tool {} it would be settled, for information",
            angle.measure().text(0),
            ["x", "y", "z"][*axis]
        ),
        Change::MountHeight { by } => format!("with the base {} it would be settled, for information", higher(*by)),
        Change::MountTilt { axis, angle } => format!(
            "with the base leaning {} about its {} axis it would be settled, for information",
            signed(*angle),
            ["x", "y", "z"][*axis]
        ),
    }
}

/// Findings that go as well.
fn also_settled(judged: &Judged, finding: &Finding, remedy: &Remedy) -> Option<String> {
    let mut others: Vec<String> = Vec::new();
    for other in &remedy.effect.settles {
        let same = (other.segment, other.check, other.joint) == (finding.segment, finding.check, finding.joint);
        let words = if other.segment == finding.segment || other.check.is_of_cycle() {
            subject(judged, other)
        } else {
            format!("{} on segment {}", subject(judged, other), judged.plan.segments[other.segment].label())
        };
        // What could not be judged before is no finding that a remedy settles.
        if !same && !matches!(other.kind, Kind::Unproved(_)) && !others.contains(&words) {
            others.push(words);
        }
    }
    (!others.is_empty()).then(|| format!("It settles {} as well.", all_of(&first_of(&others))))
}

/// Findings that stay on the segment.
fn left_over(remedy: &Remedy) -> Option<String> {
    let is_worse = |finding: &&Finding| !remedy.effect.worsens.contains(finding);
    let stays: Vec<String> =
        remedy.effect.remains.iter().filter(is_worse).map(|finding| explain(&remedy.after, finding).title).collect();
    (!stays.is_empty()).then(|| format!("Still there after it: {}.", first_of(&stays).join("; ")))
}

/// Findings that are new or worse.
fn worse(remedy: &Remedy) -> Option<String> {
    let worse: Vec<String> = remedy
        .effect
        .worsens
        .iter()
        .map(|finding| {
            let label = remedy.after.plan.segments[finding.segment].label();
            format!("segment {label}, {}", explain(&remedy.after, finding).title)
        })
        .collect();
    (!worse.is_empty()).then(|| format!("But it makes worse: {}.", first_of(&worse).join("; ")))
}

/// Doubts that are new.
fn doubtful(remedy: &Remedy) -> Option<String> {
    let doubts = &remedy.effect.doubts;
    let first = doubt_text(&remedy.after, doubts.first()?);
    Some(match doubts.len() {
        1 => format!("But it brings a doubt: {first}"),
        many => format!("But it brings {many} doubts, the first: {first}"),
    })
}

fn costs(remedy: &Remedy) -> Option<String> {
    let by = remedy.costs.as_s();
    if by >= SAME_TIME {
        Some(format!("It costs {} on the cycle.", remedy.costs.measure().text_up(2)))
    } else if by <= -SAME_TIME {
        Some(format!("It saves {} on the cycle.", Seconds::s(-by).measure().text_down(2)))
    } else {
        remedy.edit.is_some().then(|| "The cycle takes as long as before.".to_owned())
    }
}

/// What was tried without success, and how near each came; kinds that came equally near together.
fn tried_text(judged: &Judged, finding: &Finding, tried: &[Tried]) -> Option<String> {
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

fn ends_words(ends: Ends) -> &'static str {
    match ends {
        Ends::Both => "at both ends",
        Ends::Start => "at the start",
        Ends::End => "at the end",
    }
}

/// The length of a displacement, in tenths of a millimetre.
fn length(by: &V3) -> String {
    Length::m(by.norm()).measure().text(1)
}

/// A displacement in base axes: its length, where it goes, and its parts: `21.0 mm forward and up (base x +18.4 mm and base z +10.0 mm)`.
fn displacement(judged: &Judged, by: &V3) -> String {
    let way = way(&judged.recipe, by).map_or(String::new(), |way| format!(" {way}"));
    format!("{}{way} ({})", length(by), told_parts(by, "base"))
}

fn tool_parts(by: &V3) -> String {
    told_parts(by, "tool")
}

fn told_parts(by: &V3, axes: &str) -> String {
    let told: Vec<String> = ["x", "y", "z"]
        .iter()
        .zip(by.iter())
        .filter(|(_, part)| part.abs() > NOTHING)
        .map(|(name, part)| {
            let text = Measure::si(*part, Dimension::Length).text(1);
            format!("{axes} {name} {}{text}", if *part > 0.0 { "+" } else { "" })
        })
        .collect();
    all_of(&told)
}

/// Whether a displacement is so small that its length would be told as none.
fn is_told_as_nothing(by: &V3) -> bool {
    by.norm() < NOTHING
}

fn signed(angle: Angle) -> String {
    let text = angle.measure().text(1);
    if angle.as_rad() > 0.0 { format!("+{text}") } else { text }
}

fn higher(by: Length) -> String {
    let text = Length::m(by.as_m().abs()).measure().text(0);
    format!("{text} {}", if by.as_m() > 0.0 { "higher" } else { "lower" })
}

fn tenths(time: Seconds) -> String {
    time.measure().text(1)
}

fn capital(text: &str) -> String {
    let mut letters = text.chars();
    letters.next().map_or(String::new(), |first| first.to_uppercase().collect::<String>() + letters.as_str())
}

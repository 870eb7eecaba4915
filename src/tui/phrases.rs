use crate::checks::{Check, CheckResult, Peak, SegmentSurvey, Unproved};
use crate::motion::NoPath;
use crate::program::{Arrive, Recipe, Then, Usual};
use crate::review::{Judged, check_brief};
use crate::units::{Measure, Speed};

/// A joint's name, or nothing for a check that has none.
pub fn joint_word(judged: &Judged, joint: Option<usize>) -> &str {
    joint.and_then(|index| judged.arm.joints().get(index)).map_or("", |joint| joint.name.as_str())
}

/// How a waypoint is arrived at: kind and what was asked.
pub fn how(recipe: &Recipe, waypoint: usize) -> String {
    let usual = &recipe.usual;
    match &recipe.waypoints[waypoint].arrive {
        None => String::new(),
        Some(Arrive::Joint { share, .. }) => match share.or(usual.share) {
            Some(share) => format!("joint {share}"),
            None => "joint 100 %".to_owned(),
        },
        Some(arrive @ Arrive::Line(speed)) => path(arrive, speed.speed, usual),
        Some(arrive @ Arrive::Arc { speed, .. }) => path(arrive, speed.speed, usual),
    }
}

fn path(arrive: &Arrive, speed: Option<Speed>, usual: &Usual) -> String {
    match speed.or(usual.speed) {
        Some(speed) => format!("{} {speed}", arrive.word()),
        None => arrive.word().to_owned(),
    }
}

/// What happens at a waypoint, and on the way to it, beyond moving there; empty for nothing.
pub fn events(recipe: &Recipe, waypoint: usize) -> Vec<String> {
    let point = &recipe.waypoints[waypoint];
    let mut told = Vec::new();
    if let Some(push) = &point.push {
        told.push(format!("pushes {}", Measure::si(push.force.norm(), crate::units::Dimension::Force).text(0)));
    }
    if let Some(radius) = point.fly_by {
        told.push(format!("fly-by {}", radius.measure().text(0)));
    }
    if point.dwell.as_s() > 0.0 {
        told.push(format!("stands {}", point.dwell.measure().text(1)));
    }
    match &point.then {
        Some(Then::Take(load)) => told.push(format!("takes {load}")),
        Some(Then::Release) => {
            let load = recipe.hanging_at(waypoint).before.map_or("", |load| load.name.as_str());
            told.push(format!("releases {load}").trim_end().to_owned());
        }
        None => {}
    }
    told
}

/// Where a segment is nearest to its reserve, such as "J4 rate asks 154 %"; without "asks" if `brief`.
pub fn nearest(judged: &Judged, survey: &SegmentSurvey, brief: bool) -> String {
    let segment = &judged.plan.segments[survey.segment];
    if let Some(trouble) = &segment.trouble {
        return no_path(trouble).to_owned();
    }
    let unproved = survey.findings.iter().find_map(|finding| match finding.kind {
        crate::checks::Kind::Unproved(why) if finding.verdict == survey.verdict => Some((finding.check, why)),
        _ => None,
    });
    if let Some((check, why)) = unproved {
        return format!("{}: {}", check_brief(check), why_open(why));
    }
    survey.nearest().map_or_else(String::new, |(result, worst)| peak(judged, result, worst, brief))
}

fn peak(judged: &Judged, result: &CheckResult, peak: &Peak, brief: bool) -> String {
    let word = if brief && result.check == Check::Holding { "hold" } else { check_brief(result.check) };
    let what = [joint_word(judged, peak.joint), word].join(" ");
    let what = what.trim_start();
    match result.check {
        Check::Range => {
            let left = Measure::si((peak.limit.si - peak.demand.si).abs(), peak.demand.of);
            let beyond = peak.room.as_fraction() < 0.0;
            let end = if beyond { "beyond" } else { "to end" };
            format!("{} {} {end}", joint_word(judged, peak.joint), left.text(1))
        }
        Check::Singular => format!("{what} {}", peak.demand),
        Check::SpeedLeft => format!("{what} {}", peak.demand.text(0)),
        _ if brief => format!("{what} {:.0} %", peak.room.asked_percent()),
        _ => format!("{what} asks {:.0} %", peak.room.asked_percent()),
    }
}

fn no_path(trouble: &NoPath) -> &'static str {
    match trouble {
        NoPath::OutOfReach { .. } => "out of reach",
        NoPath::Lost { .. } => "path not followed",
        NoPath::OtherPosture { .. } => "other posture",
        NoPath::Orientation { .. } => "orientation missed",
        NoPath::StartUnknown => "start not reached",
        NoPath::StraightArc => "arc is straight",
    }
}

fn why_open(why: Unproved) -> &'static str {
    match why {
        Unproved::SamplesOnly => "samples only",
        Unproved::BudgetSpent | Unproved::TooNarrow | Unproved::NotOneBranch => "not settled",
        Unproved::NotFollowed => "not followed",
        Unproved::NoRating => "no rating",
        Unproved::NoMasses => "no masses",
        Unproved::Guess => "on a guess",
    }
}

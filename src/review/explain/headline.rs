use crate::checks::{Check, Verdict};

use super::Judged;

/// One sentence on the whole recipe: "Housing transfer: NOT READY: 1 over, 1 tight, 11 clear".
pub fn headline(judged: &Judged) -> String {
    let survey = &judged.survey;
    let ready = if survey.verdict() == Verdict::Clear { "READY TO SIGN" } else { "NOT READY" };
    let cycle = survey.cycle.verdict();
    let of_cycle = (cycle != Verdict::Clear).then(|| format!("the cycle as a whole {}", cycle.word()));
    let counts: Vec<String> = Verdict::ALL
        .into_iter()
        .map(|verdict| (survey.count(verdict), verdict))
        .filter(|(count, _)| *count > 0)
        .map(|(count, verdict)| format!("{count} {}", verdict.word()))
        .chain(of_cycle)
        .collect();
    format!("{}: {ready}: {}", judged.recipe.name, counts.join(", "))
}

/// The words for a check, as they stand in titles and tables.
pub fn check_words(check: Check) -> &'static str {
    match check {
        Check::Reach => "reach",
        Check::Range => "range",
        Check::Rate => "rate",
        Check::Accel => "acceleration",
        Check::Holding => "holding",
        Check::Moving => "torque in motion",
        Check::Brake => "brake",
        Check::Flange => "load at the flange",
        Check::Rms => "torque over the cycle",
        Check::Singular => "singularity",
        Check::SpeedLeft => "tool speed left",
        Check::TcpSpeed => "TCP speed",
        Check::PointSpeed => "point speed",
        Check::WindUp => "wind-up of cables",
    }
}

/// A check's word where there is little room: in rows, and over columns.
pub fn check_brief(check: Check) -> &'static str {
    match check {
        Check::Reach => "reach",
        Check::Range => "range",
        Check::Rate => "rate",
        Check::Accel => "accel",
        Check::Holding => "holding",
        Check::Moving => "moving",
        Check::Brake => "brake",
        Check::Flange => "flange",
        Check::Rms => "rms",
        Check::Singular => "singular",
        Check::SpeedLeft => "speed left",
        Check::TcpSpeed => "TCP speed",
        Check::PointSpeed => "point speed",
        Check::WindUp => "wind-up",
    }
}

use crate::arm::Arm;
use crate::kinematics::SpeedLeft;
use crate::review::jog::{Axes, Refused, Step, Stop};
use crate::review::line_words;
use crate::tui::app::App;
use crate::units::{Angle, Dimension, Length, Measure};

use super::{Jogging, size};

/// The sentence above everything.
pub fn headline(app: &App, jog: &Jogging) -> String {
    let way = jog.axes.as_ref().map_or("joint by joint".to_owned(), |axes| format!("{} axes", axes.name()));
    format!("JOG of the model, no arm connected: {way}, steps of {}", size(app, jog).text(1))
}

/// The system that a pose is recorded in.
pub(super) fn posed_in(jog: &Jogging) -> String {
    jog.axes.as_ref().and_then(Axes::for_pose).unwrap_or_else(|| "base".to_owned())
}

/// The chosen row: a joint's name, or a direction and its axes.
pub(super) fn row(app: &App, jog: &Jogging) -> String {
    match (&jog.axes, jog.direction()) {
        (Some(axes), Some(direction)) => format!("{} in {}", coordinate(direction.slot()), axes.name()),
        _ => app.arm.joints()[jog.row].name.clone(),
    }
}

fn coordinate(slot: usize) -> &'static str {
    ["x", "y", "z", "roll", "pitch", "yaw"][slot]
}

/// What stopped a step.
pub(super) fn stop(arm: &Arm, stop: Stop) -> String {
    match stop {
        Stop::RangeEnd { joint, high } => {
            let data = &arm.joints()[joint];
            let (end, value) = if high { ("high", data.range.high) } else { ("low", data.range.low) };
            format!("{} is at the {end} end of its range, {}", data.name, data.value(value).text(1))
        }
        Stop::JointTooFar { joint } => {
            let data = &arm.joints()[joint];
            let most = match data.kind.value() {
                Dimension::Angle => crate::review::jog::MOST_TURN,
                _ => crate::review::jog::MOST_SLIDE,
            };
            format!("stopped: {} would move more than {} in one step", data.name, data.value(most).text(0))
        }
    }
}

/// What is to be said of a step; nothing of one that was done as asked.
pub(super) fn step(arm: &Arm, step: &Step) -> Option<String> {
    let way = Length::m(step.missing[..3].iter().map(|m| m * m).sum::<f64>().sqrt()).measure();
    let turn = Angle::rad(step.missing[3..].iter().map(|m| m * m).sum::<f64>().sqrt()).measure();
    let missing = format!("{} and {} missing", way.text_up(2), turn.text_up(2));
    // Down and not below 0: 99.9 % done is not done.
    let share = format!("{:.0} %", (100.0 * step.done + ROUNDING).floor().max(0.0));
    match step.stop {
        Some(why) => Some(format!("{}; {share} of the step done", stop(arm, why))),
        None if step.damping > 0.0 => {
            let near = Measure::si(step.smallest, Dimension::Ratio).text(3);
            Some(format!("damped, singular {near}: {share} of the step done, {missing}"))
        }
        None if step.missing.iter().any(|m| !(m.abs() <= LANDED)) => Some(format!("{share} of the step done, {missing}")),
        None => None,
    }
}

/// Rounding of a share that was done in full, percent.
const ROUNDING: f64 = 1e-6;

/// What is missing less than this counts as nothing, m and rad.
const LANDED: f64 = 1e-9;

/// Why nothing was moved.
pub(super) fn refused(arm: &Arm, refused: &Refused) -> String {
    match refused {
        Refused::NotInTask => format!("this arm's task leaves that direction out (it has {})", arm.task().words()),
        Refused::BeyondRange { joint, value } => {
            let data = &arm.joints()[*joint];
            let [value, low, high] = [*value, data.range.low, data.range.high].map(|v| data.value(v).text(1));
            format!("{} would be at {value}; its range is {low} to {high}", data.name)
        }
        Refused::OutOfReach { missing } => {
            format!("no posture was found there; the nearest misses it by {}", Length::m(*missing).measure().text_up(1))
        }
    }
}

/// Tool speed left, with its direction and the joint that stops it.
pub(super) fn speed_left(app: &App, left: &SpeedLeft) -> String {
    if !left.moving.is_finite() {
        return "any".to_owned();
    }
    let speed = Measure::si(left.moving, Dimension::Speed).text_down(0);
    let joint = &app.arm.joints()[left.joint].name;
    format!("{speed} {}; {joint} stops it", line_words(app.taught(), &left.direction))
}

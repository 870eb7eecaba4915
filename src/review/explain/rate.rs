use crate::arm::JointKind;
use crate::checks::{Check, Excess};
use crate::geometry::V3;
use crate::units::{Angle, Length, Measure, Room, Speed, TurnRate};

use super::direction::{axis, heading, in_tool};
use super::fight::amplified;
use super::scene::Scene;
use super::{Label, Paragraph, proof_text};

/// Speeds below this count as standing still, m/s.
const STILL: f64 = 1e-6;
/// Turning rates below this count as none, rad/s.
const NO_TURN: f64 = 1e-4;
/// Two rates that differ by less than this share are told as one another's reason.
const LIKE: f64 = 0.25;

/// What, why, left alone and rests on of a joint's rate.
pub(super) fn paragraphs(scene: &Scene, joint: usize, excess: &Excess) -> [Paragraph; 4] {
    [
        Paragraph::says(Label::What, format!("{} {}", asked_for(&scene.joint(joint).name, excess), at_most(excess))),
        Paragraph::says(Label::Why, why(scene, joint, excess)),
        Paragraph::says(Label::LeftAlone, left_alone(scene, joint, excess)),
        Paragraph::says(Label::RestsOn, rests_on(scene, joint)),
    ]
}

/// `J4 is asked for +509 °/s of 330 °/s: 154 %.`
pub(super) fn asked_for(name: &str, excess: &Excess) -> String {
    format!("{name} is asked for {} of {}: {}.", excess.demand.signed(), excess.limit, excess.room.asks())
}

/// `The reserve of 10 % asks for at most 297 °/s.` Nothing where no reserve is asked for.
pub(super) fn at_most(excess: &Excess) -> String {
    if excess.reserve.as_fraction() <= 0.0 {
        return String::new();
    }
    format!("The reserve of {} leaves at most {} of that.", percent(excess.reserve), allowed(excess).text_down(0))
}

/// The greatest demand that leaves the reserve.
pub(super) fn allowed(excess: &Excess) -> Measure {
    Measure::si((1.0 - excess.reserve.as_fraction()) * excess.limit.si, excess.limit.of)
}

/// A reserve as it was given.
fn percent(reserve: Room) -> String {
    crate::units::Share::fraction(reserve.as_fraction()).to_string()
}

/// What the tool does at an instant: `The TCP moves at 400 mm/s to the right (along base -y), which is tool -y`.
pub(super) fn tool_moves(scene: &Scene) -> String {
    let recipe = &scene.judged.recipe;
    let (velocity, turning) = (scene.velocity(), scene.turning());
    let moves = (velocity.norm() > STILL).then(|| {
        let speed = Speed::m_per_s(velocity.norm());
        format!("moves at {speed} {}, in its own axes {}", heading(recipe, &velocity), in_tool(&scene.instant.tcp.axes, &velocity))
    });
    let turns =
        (turning.norm() > NO_TURN).then(|| format!("turns at {} about {}", TurnRate::rad_per_s(turning.norm()), axis(&turning)));
    match (moves, turns) {
        (Some(moves), Some(turns)) => format!("The tool {moves}, and {turns}."),
        (Some(only), None) | (None, Some(only)) => format!("The tool {only}."),
        (None, None) => "The tool stands still.".to_owned(),
    }
}

fn why(scene: &Scene, joint: usize, excess: &Excess) -> String {
    let name = &scene.joint(joint).name;
    let cause = amplified(scene, joint).unwrap_or_else(|| plain_cause(scene, joint));
    let rate = scene.rate * allowed(excess).si / excess.demand.si.abs();
    format!(
        "{} {cause} Rates grow in step with the speed of the whole segment: by that rule {name} would stay within {} here at {}, \
         an estimate for this one instant.",
        tool_moves(scene),
        allowed(excess).text_down(0),
        scene.asking(rate)
    )
}

/// Why a joint is fast where no singular posture explains it.
fn plain_cause(scene: &Scene, joint: usize) -> String {
    let data = scene.joint(joint);
    let opening = match scene.closeness() {
        None => "No singular posture was found near.".to_owned(),
        Some(close) => format!(
            "A singular posture is {} of joint motion away, but it is not what makes {} fast.",
            Angle::rad(close.distance).measure().text(0),
            data.name
        ),
    };
    if data.kind == JointKind::Prismatic {
        return format!("{opening} {} slides that fast because the tool moves that way.", data.name);
    }
    let column = scene.instant.jacobian.columns()[joint];
    let push = V3::new(column[0], column[1], column[2]);
    let lever = push.norm();
    let around = push.dot(&scene.velocity()) / lever;
    let (alone, rate) = (around / lever, scene.rates()[joint]);
    if (alone - rate).abs() < LIKE * rate.abs() {
        return format!(
            "{opening} The axis of {} stands {} from the TCP, and moving that at {} around its axis takes {} by itself.",
            data.name,
            Length::m(lever),
            Speed::m_per_s(around.abs()),
            data.rate_of(alone.abs())
        );
    }
    let about = scene.instant.posture.axis(joint).dot(&scene.turning());
    if (about - rate).abs() < LIKE * rate.abs() {
        let turn = TurnRate::rad_per_s(about.abs());
        return format!("{opening} The tool turns at {turn} about the axis of {}, which takes that rate by itself.", data.name);
    }
    format!(
        "{opening} The axis of {} stands {} from the TCP; its rate follows from the tool's motion together with that of the \
         other joints.",
        data.name,
        Length::m(lever)
    )
}

fn left_alone(scene: &Scene, joint: usize, excess: &Excess) -> String {
    let name = &scene.joint(joint).name;
    if excess.room.as_fraction() < 0.0 {
        return format!(
            "{name} can't keep up. Depending on its controller the arm slows down along the path, falls behind and leaves it, or \
             stops with a fault of the drive. \
             It shows only at speed, never when the points are stepped through by hand."
        );
    }
    format!(
        "{name} keeps up as long as the data hold. What is missing is the margin for a point shifted by a few millimetres or an \
         override above 100 %."
    )
}

fn rests_on(scene: &Scene, joint: usize) -> String {
    let data = scene.joint(joint);
    let result = scene.survey().check(Check::Rate);
    let taught = if scene.segment.follows_path() {
        "the points taught at its ends, the tool's TCP and the speed given"
    } else {
        "the joint values at its ends and the share given"
    };
    format!(
        "The rate of {} in the arm file, {}; {taught}. {}",
        data.name,
        data.rate_of(data.rate),
        proof_text(scene.survey(), result)
    )
}

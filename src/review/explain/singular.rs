use crate::checks::{Check, Excess};
use crate::kinematics::{Closeness, SingularKind, condition};
use crate::units::{Angle, Dimension, Length, Measure, Speed, TurnRate};

use super::direction::{axis, beside_tool, line};
use super::listing::all_of;
use super::scene::Scene;
use super::{Label, Paragraph, proof_text};

/// A joint is told on the way to the singular posture from this motion on, rad (half a degree).
const TELLING: f64 = 8.7e-3;

/// What, why, left alone and rests on of closeness to a singular posture, told by the singular value or the speed left.
pub(super) fn paragraphs(scene: &Scene, check: Check, excess: &Excess) -> [Paragraph; 4] {
    let (demand, limit) = (excess.demand, excess.limit);
    let what = match check {
        Check::SpeedLeft => format!(
            "With every joint at its full rate and the orientation held, the tool keeps {} in its worst direction; the recipe \
             asks for {} in every direction.",
            demand.text_down(0),
            limit
        ),
        _ => format!(
            "The smallest singular value falls to {}; the recipe allows {} or more on lines and arcs.",
            demand.text(4),
            limit.text(3)
        ),
    };
    let alone = "Nothing is over because of this alone. But the arm is touchy here: a point shifted by millimetres, or an arm \
        that differs a little from its model, may ask much more of the joints named, and some controllers refuse or slow a path \
        this close.";
    let length = scene.arm().characteristic_length();
    let stated = if length.stated { "stated in the arm file" } else { "computed from the arm, since its file states none" };
    let rests = match check {
        Check::SpeedLeft => "The joints' rates and the arm's geometry, and on no characteristic length.".to_owned(),
        _ => format!(
            "The arm's geometry, the TCP, and the characteristic length of {}, {stated}; with another length the figure is \
             another.",
            Length::m(length.m).measure().text(0)
        ),
    };
    [
        Paragraph::says(Label::What, what),
        Paragraph::says(Label::Why, why(scene)),
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, format!("{rests} {}", proof_text(scene.survey(), scene.survey().check(check)))),
    ]
}

fn why(scene: &Scene) -> String {
    let parts = scene.parts();
    let condition = condition(&parts.values, parts.count);
    let sigma = Measure::si(parts.values[parts.count - 1], Dimension::Ratio).text(4);
    let number = if condition.is_finite() {
        format!("the condition number is {}", Measure::si(condition, Dimension::Ratio).text(0))
    } else {
        "the condition number is beyond all bounds".to_owned()
    };
    format!("{} {} The smallest singular value is {sigma} here and {number}.", posture(scene), speed(scene))
}

/// Which singular posture is near, and how far it is joint by joint.
fn posture(scene: &Scene) -> String {
    let Some(close) = scene.closeness() else {
        return if scene.arm().is_redundant() {
            "The arm has more joints than the path needs; how far it is from a singular posture is not estimated.".to_owned()
        } else {
            "Singular postures are far: none was found within 30° of joint motion.".to_owned()
        };
    };
    let name = |j: usize| scene.joint(j).name.as_str();
    let kind = match close.kind {
        Some(SingularKind::Wrist) => {
            format!("The wrist is close to straight, with the axes of {} and {} in line", name(3), name(5))
        }
        Some(SingularKind::Elbow) => "The arm is close to fully stretched or folded".to_owned(),
        Some(SingularKind::Shoulder) => format!("The wrist centre is close to the axis of {}", name(0)),
        None => "A singular posture is close".to_owned(),
    };
    format!("{kind}: about {} of joint motion away{}.", Angle::rad(close.distance).measure().text(1), by_joint(scene, &close))
}

fn by_joint(scene: &Scene, close: &Closeness) -> String {
    let moves: Vec<String> = (0..scene.arm().len())
        .map(|j| (j, close.posture[j] - scene.instant.q[j]))
        .filter(|(_, way)| way.abs() > TELLING)
        .map(|(j, way)| format!("{} by {}", scene.joint(j).name, scene.joint(j).value(way).signed()))
        .collect();
    if moves.is_empty() { String::new() } else { format!(", {}", all_of(&moves)) }
}

/// What is left of the tool's speed, where, and what was asked.
fn speed(scene: &Scene) -> String {
    let left = scene.speed_left();
    let recipe = &scene.judged.recipe;
    let mut told = Vec::new();
    if left.moving.is_finite() {
        told.push(format!(
            "With the orientation held, {} lets the tool move at no more than {} {}, {}.",
            scene.joint(left.joint).name,
            Speed::m_per_s(left.moving).measure().text_down(0),
            line(recipe, &left.direction),
            beside_tool(&scene.instant.tcp.axes, &left.direction)
        ));
    }
    if left.turning.is_finite() {
        told.push(format!(
            "With the TCP held, it can turn at {} about {}.",
            TurnRate::rad_per_s(left.turning).measure().text_down(1),
            axis(&left.axis)
        ));
    }
    let top = scene.segment.law.top_rate() * scene.segment.path.length();
    if top > 0.0 {
        told.push(format!("The program runs the segment at {}.", Speed::m_per_s(top)));
    }
    told.join(" ")
}

use crate::arm::Joint;
use crate::checks::{Check, Excess};
use crate::units::Measure;

use super::rate::tool_moves;
use super::scene::Scene;
use super::{Label, Paragraph, proof_text};

/// How far a joint is from the end named in a finding: `1.2° to its end` or `0.8° beyond its end`.
pub(super) fn to_end_text(joint: &Joint, excess: &Excess) -> String {
    let left = joint.range.to_end(excess.demand.si);
    if left < 0.0 {
        Measure::si(-left, excess.demand.of).text_up(1) + " beyond its end"
    } else {
        Measure::si(left, excess.demand.of).text_down(1) + " to its end"
    }
}

/// What, why, left alone and rests on of a joint's range.
pub(super) fn paragraphs(scene: &Scene, joint: usize, excess: &Excess) -> [Paragraph; 4] {
    let data = scene.joint(joint);
    let end = if excess.limit.si > data.range.middle() { "upper" } else { "lower" };
    let least = Measure::si(excess.reserve.as_fraction() * data.range.half(), excess.limit.of);
    let what = format!(
        "{} stands at {}, {}, the {end} one at {}. The recipe asks for at least {} to every end.",
        data.name,
        excess.demand.signed(),
        to_end_text(data, excess),
        excess.limit.signed(),
        least.text(1)
    );
    let over = excess.room.as_fraction() < 0.0;
    let alone = if over {
        format!(
            "The arm stops at the latest where {} reaches its end: its controller refuses the move, or ends it on the way.",
            data.name
        )
    } else {
        format!(
            "{} still turns freely here. A point shifted a little, or a zero position set anew after a repair, uses up what \
            is left.",
            data.name
        )
        .replace("turns", if data.kind == crate::arm::JointKind::Revolute { "turns" } else { "slides" })
    };
    let rests = format!(
        "The range of {} in the arm file, {} to {}; a range set narrower in the cell is not known here. {}",
        data.name,
        data.value(data.range.low).signed(),
        data.value(data.range.high).signed(),
        proof_text(scene.survey(), scene.survey().check(Check::Range))
    );
    [
        Paragraph::says(Label::What, what),
        Paragraph::says(Label::Why, why(scene, joint, excess)),
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

fn why(scene: &Scene, joint: usize, excess: &Excess) -> String {
    let data = scene.joint(joint);
    let [start, end] = [scene.segment.start[joint], scene.segment.end[joint]];
    let of = |si: f64| data.value(si).signed();
    if excess.worst.u <= 0.0 || excess.worst.u >= 1.0 {
        let which = if excess.worst.u <= 0.0 { "start" } else { "end" };
        return format!(
            "It is worst at the very {which} of the segment, so the waypoint there decides, not the way. Over the segment {} \
             goes from {} to {}.",
            data.name,
            of(start),
            of(end)
        );
    }
    format!(
        "{} starts at {} and ends at {}; in between the path takes it to {}. Both waypoints alone would not show this. {} Speed \
         changes nothing about it.",
        data.name,
        of(start),
        of(end),
        of(excess.demand.si),
        tool_moves(scene)
    )
}

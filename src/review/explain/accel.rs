use crate::checks::{Check, Excess};

use super::fight::amplified;
use super::rate::{allowed, asked_for, at_most, tool_moves};
use super::scene::Scene;
use super::{Label, Paragraph, proof_text};

/// One of two parts leads when it is at least this many times the other.
const LEADS: f64 = 2.0;

/// What, why, left alone and rests on of a joint's acceleration.
pub(super) fn paragraphs(scene: &Scene, joint: usize, excess: &Excess) -> [Paragraph; 4] {
    let data = scene.joint(joint);
    let alone = if excess.room.as_fraction() < 0.0 {
        format!(
            "{} can't change its rate that fast. Depending on its controller the arm rounds this off and leaves the path for a \
             moment, slows down, or stops with a fault of the drive.",
            data.name
        )
    } else {
        format!("{} follows as long as the data hold; a heavier part or a stiffer grease in the cold takes the rest.", data.name)
    };
    let rests = format!(
        "The acceleration of {} in the arm file, {}, taken to hold for every load and posture; the speed law{}. {}",
        data.name,
        data.acceleration_of(data.accel),
        ramps(scene),
        proof_text(scene.survey(), scene.survey().check(Check::Accel))
    );
    [
        Paragraph::says(Label::What, format!("{} {}", asked_for(&data.name, excess), at_most(excess)).trim_end().to_owned()),
        Paragraph::says(Label::Why, why(scene, joint, excess)),
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

/// What is taken of the ramps of the speed.
fn ramps(scene: &Scene) -> &'static str {
    if scene.segment.blend {
        ", which is taken to run evenly past the fly-by point"
    } else if scene.segment.limits.is_some_and(|limits| limits.jerk.is_finite()) {
        ", whose ramps begin and end within the limit of jerk given"
    } else {
        ", which is taken to start and end its ramps at once"
    }
}

/// The two parts of a joint's acceleration: what the bend of its way asks at this speed, and what the ramp of the speed asks. SI.
fn parts(scene: &Scene, joint: usize) -> [f64; 2] {
    [scene.instant.bend[joint] * scene.rate * scene.rate, scene.instant.slope[joint] * scene.accel]
}

fn why(scene: &Scene, joint: usize, excess: &Excess) -> String {
    let data = scene.joint(joint);
    let [bend, ramp] = parts(scene, joint);
    let of = |si: f64| data.acceleration_of(si).signed();
    let moves = tool_moves(scene);
    if bend.abs() < LEADS * ramp.abs() {
        let share = allowed(excess).si / excess.demand.si.abs();
        let moves = if scene.rate > 0.0 { moves + " " } else { String::new() };
        let ramps = if scene.accel >= 0.0 { "speeds up" } else { "slows down" };
        let both = if ramp.abs() > LEADS * bend.abs() {
            format!("The demand comes from the ramp: the segment {ramps} here, which asks {} of {}.", of(ramp), data.name)
        } else {
            format!(
                "{} comes from the ramp, for the segment {ramps} here, and {} from the bend of the joint's way.",
                of(ramp),
                of(bend)
            )
        };
        return format!(
            "{moves}{both} The ramp's part shrinks in step with the acceleration given: by that rule {} would meet it here, an \
             estimate for this one instant.",
            scene.asking_accel(scene.accel.abs() * share)
        );
    }
    let near = amplified(scene, joint)
        .or_else(|| {
            scene.closeness().map(|_| "A singular posture is near, and joints change their rates quickly around it.".to_owned())
        })
        .unwrap_or_else(|| "No singular posture was found near; the path itself bends the joint's way.".to_owned());
    // With the ramp's part as it is, the bend's part may be no more than this; it grows with the square of the speed.
    let spare = allowed(excess).si - ramp * excess.demand.si.signum();
    let estimate = if spare > 0.0 {
        format!(
            "by that rule {} would be enough here, an estimate for this one instant",
            scene.asking(scene.rate * (spare / bend.abs()).sqrt())
        )
    } else {
        "but the ramp alone asks for more than there is".to_owned()
    };
    let adds = if of(ramp) == of(0.0) { String::new() } else { format!("; the ramp of the speed adds {}", of(ramp)) };
    format!(
        "{moves} Even at constant speed {} has to change its rate by {}, for its way bends here{adds}. {near} The bend's part \
         grows with the square of the speed: {estimate}.",
        data.name,
        of(bend)
    )
}

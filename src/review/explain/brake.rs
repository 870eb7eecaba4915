use crate::checks::{Check, Excess};

use super::holding::{bars, lever};
use super::rate::at_most;
use super::scene::Scene;
use super::{Label, Paragraph, proof_text};

/// What, why, left alone and rests on of a brake.
pub(super) fn paragraphs(scene: &Scene, joint: usize, excess: &Excess) -> [Paragraph; 4] {
    let data = scene.joint(joint);
    let what = format!(
        "If the power fails here, the brake of {} must hold {} of {}: {}. {}",
        data.name,
        excess.demand.signed(),
        excess.limit,
        excess.room.asks(),
        at_most(excess)
    );
    let why = format!(
        "With the motor off, the brake alone carries the weight.{} Going slower changes nothing in this; a lighter load, or a \
         posture that brings it nearer to the axis, does.",
        lever(scene, joint)
    );
    let alone = if excess.room.as_fraction() < 0.0 {
        format!("On an emergency stop or a power failure {} sinks, with whatever the arm carries and whoever is below.", data.name)
    } else {
        format!("The brake of {} holds while it is new and dry. A worn or oily brake holds less than its sheet says.", data.name)
    };
    let rests = format!(
        "The brake of {} in the arm file, {}, and the masses and centres of links, tool and load as typed. Nothing pushes the tool \
         any more, and friction is not credited. Whether the brake also stops a moving arm in time is not judged. {}",
        data.name,
        excess.limit,
        proof_text(scene.survey(), scene.survey().check(Check::Brake))
    );
    [
        Paragraph::says(Label::What, what.trim_end().to_owned()),
        Paragraph { label: Label::Why, text: why, bars: bars(scene, joint, excess.limit, false) },
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

use crate::checks::{Check, Excess};
use crate::dynamics::MovingParts;
use crate::units::Measure;

use super::holding::grounds;
use super::listing::sum_of;
use super::rate::{allowed, at_most, tool_moves};
use super::scene::Scene;
use super::{Bar, Label, Paragraph, proof_text};

/// Below this share of the top rate a segment starts or stops.
const STANDS: f64 = 1e-6;

/// What, why, left alone and rests on of torque in motion.
pub(super) fn paragraphs(scene: &Scene, joint: usize, excess: &Excess) -> [Paragraph; 4] {
    let data = scene.joint(joint);
    let parts = scene.moving_parts(joint);
    let by_rate = data.torque.and_then(|torque| torque.peak).is_some_and(|peak| !peak.is_level());
    let at = if by_rate {
        format!(", which is what its motor gives at {}", data.rate_of(scene.rates()[joint].abs()))
    } else {
        String::new()
    };
    let what = format!(
        "{} must supply {} in motion, of {}{at}: {}. {}",
        data.name,
        excess.demand.signed(),
        excess.limit,
        excess.room.asks(),
        at_most(excess)
    );
    let alone = if excess.room.as_fraction() < 0.0 {
        format!(
            "The motor of {} can't give that. The arm falls behind its path and leaves it, or its drive stops with a fault, with \
             the part in the grip.",
            data.name
        )
    } else {
        format!(
            "{} follows as long as the data hold; a heavier part or grease that is stiff in the cold takes the rest.",
            data.name
        )
    };
    [
        Paragraph::says(Label::What, what.trim_end().to_owned()),
        Paragraph { label: Label::Why, text: why(scene, joint, excess, &parts), bars: bars(&parts, excess.limit) },
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests_on(scene, joint)),
    ]
}

/// The parts with their names.
fn named(parts: &MovingParts) -> Vec<(String, f64)> {
    [
        ("weight", parts.weight),
        ("acceleration", parts.acceleration),
        ("Coriolis parts", parts.turning),
        ("push of the work", parts.push),
        ("rotor", parts.rotor),
        ("balancer", parts.balancer),
        ("friction", parts.friction()),
    ]
    .map(|(name, part)| (name.to_owned(), part))
    .to_vec()
}

fn bars(parts: &MovingParts, limit: Measure) -> Vec<Bar> {
    sum_of(named(parts), limit)
}

fn why(scene: &Scene, joint: usize, excess: &Excess, parts: &MovingParts) -> String {
    let data = scene.joint(joint);
    let demand = excess.demand.si;
    let largest = named(parts).into_iter().max_by(|a, b| (a.1 * demand).total_cmp(&(b.1 * demand)));
    let name = largest.map_or(String::new(), |(name, _)| name);
    let runs = scene.rate > STANDS * scene.segment.law.top_rate();
    let does = if runs { tool_moves(scene) } else { "The segment starts or stops here.".to_owned() };
    let lead = format!("{does} The largest part of what {} supplies is {name}.", data.name);
    let going = parts.acceleration + parts.turning + parts.rotor;
    let law = "Going at a share of the pace shrinks acceleration, rotor and the Coriolis parts (with the centrifugal ones) by its square; \
               weight and push stay as they are.";
    let still = parts.at_pace(0.0);
    match pace(scene, joint, excess, parts) {
        Some(k) => format!(
            "{lead} {law} By that rule {} would stay within {} here at {} and {}, an estimate for this one instant.",
            data.name,
            allowed(excess).text_down(0),
            scene.asking(k * scene.segment.law.top_rate()),
            scene.asking_accel(k * k * scene.segment.law.pieces()[0].accel)
        ),
        None if going * demand <= 0.0 => format!("{lead} The motion relieves this joint here, so going slower does not help."),
        None => format!(
            "{lead} Standing still here asks {} already, more than the reserve leaves, so going slower alone is not enough.",
            data.effort_of(still).signed()
        ),
    }
}

/// The largest share of the pace, in steps of a hundredth, at which this instant would keep its reserve.
fn pace(scene: &Scene, joint: usize, excess: &Excess, parts: &MovingParts) -> Option<f64> {
    let peak = scene.joint(joint).torque?.peak?;
    let rate = scene.rates()[joint].abs();
    let asked = |k: f64| parts.at_pace(k).abs() / peak.at(k * rate);
    (5..100).rev().map(|percent| f64::from(percent) / 100.0).find(|k| asked(*k) <= 1.0 - excess.reserve.as_fraction())
}

fn rests_on(scene: &Scene, joint: usize) -> String {
    let data = scene.joint(joint);
    let rating = data.torque.map_or(String::new(), |torque| format!(" ({})", grounds(torque.grounds)));
    let drive = match (data.drive.rotor, data.drive.friction) {
        (Some(_), Some(_)) => "its rotor and friction",
        (Some(_), None) => "its rotor; the arm file gives no friction, so the real demand is higher",
        (None, Some(_)) => "its friction; the arm file gives no rotor, so the real demand is mostly higher",
        (None, None) => "nothing else; the arm file gives neither rotor nor friction, so the real demand is mostly higher",
    };
    format!(
        "The peak rating of {}{rating}, masses and inertias of links, tool and load as typed, and {drive}. Friction counts only \
         where it adds. The speed law is taken to start and end its ramps at once. {}",
        data.name,
        proof_text(scene.survey(), scene.survey().check(Check::Moving))
    )
}

use crate::arm::JointKind;
use crate::checks::{Check, Excess};
use crate::geometry::V3;
use crate::units::{Length, Measure, Speed};

use super::listing::all_of;
use super::rate::tool_moves;
use super::scene::Scene;
use super::{Label, Paragraph, proof_text};

/// A joint that makes less than this share of the TCP's speed is not told.
const TELLING: f64 = 0.2;

/// What, why, left alone and rests on of the TCP's speed.
pub(super) fn paragraphs(scene: &Scene, excess: &Excess) -> [Paragraph; 4] {
    let what = format!(
        "The TCP moves at {}; the recipe's limit for this cell is {}. That is {} of it.",
        excess.demand,
        excess.limit,
        excess.room.asks()
    );
    let rate = scene.rate * excess.limit.si / excess.demand.si;
    let estimate = format!(
        "The TCP's speed grows in step with that of the segment: by that rule it would stay within the limit here at {}, an \
         estimate for this one instant.",
        scene.asking(rate)
    );
    let why = if scene.segment.follows_path() {
        format!("{} The speed given for the segment is what makes it so.", tool_moves(scene))
    } else {
        format!(
            "A joint move runs by the joints' rates, and the TCP's speed follows from them. {} {}",
            tool_moves(scene),
            joints(scene)
        )
    };
    let alone = "No limit of the arm is broken by this alone. But whatever the cell's limit stands for, such as the part's hold in the \
                 grip or the distances that the safeguards were laid out for, no longer fits.";
    let rests = format!(
        "The limit in the recipe, the tool's TCP and the speed or share given. It is the speed of the TCP alone; elbow, tool \
         corners and part may be faster. {}",
        proof_text(scene.survey(), scene.survey().check(Check::TcpSpeed))
    );
    [
        Paragraph::says(Label::What, what),
        Paragraph::says(Label::Why, format!("{why} {estimate}")),
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

/// Which joints make the TCP's speed: `J1 turns at +105 °/s with the TCP 890 mm from its axis and makes 1631 mm/s`.
fn joints(scene: &Scene) -> String {
    let total = scene.velocity();
    let rates = scene.rates();
    let mut makes: Vec<(usize, f64)> = (0..scene.arm().len())
        .map(|j| {
            let c = scene.instant.jacobian.columns()[j];
            (j, V3::new(c[0], c[1], c[2]).dot(&total) / total.norm() * rates[j])
        })
        .filter(|(_, part)| *part > TELLING * total.norm())
        .collect();
    makes.sort_by(|a, b| b.1.total_cmp(&a.1));
    let told: Vec<String> = makes.iter().map(|&(j, part)| joint(scene, j, rates[j], part)).collect();
    if told.is_empty() { String::new() } else { format!("Of this {}.", all_of(&told)) }
}

fn joint(scene: &Scene, j: usize, rate: f64, part: f64) -> String {
    let data = scene.joint(j);
    let posture = &scene.instant.posture;
    let lever = posture.axis(j).cross(&(scene.instant.tcp.at - posture.origin(j))).norm();
    let rate: Measure = data.rate_of(rate);
    match data.kind {
        JointKind::Revolute => format!(
            "{} makes {}, turning at {} with the TCP {} from its axis",
            data.name,
            Speed::m_per_s(part),
            rate.signed(),
            Length::m(lever).measure().text(0)
        ),
        JointKind::Prismatic => format!("{} makes {}, sliding at {}", data.name, Speed::m_per_s(part), rate.signed()),
    }
}

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
    let estimate = slower(scene, excess, "The TCP's speed");
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

/// At which speed of the segment a point would keep its limit, by the rule that both grow in step.
pub(super) fn slower(scene: &Scene, excess: &Excess, what: &str) -> String {
    let rate = scene.rate * excess.limit.si / excess.demand.si;
    format!(
        "{what} grows in step with that of the segment: by that rule it would stay within the limit here at {}, an estimate for this \
         one instant.",
        scene.asking(rate)
    )
}

/// A point that the first `joints` joints carry: how people call it, where it is (base axes, m) and how it moves (m/s).
pub(super) struct Moved<'a> {
    pub word: &'a str,
    pub at: V3,
    pub joints: usize,
    pub velocity: V3,
}

/// Which joints make the TCP's speed.
fn joints(scene: &Scene) -> String {
    made_by(
        scene,
        "Of this",
        &Moved { word: "the TCP", at: scene.instant.tcp.at, joints: scene.arm().len(), velocity: scene.velocity() },
    )
}

/// Which joints make a point's speed, after the words `of`: `Of this J1 makes 1631 mm/s, turning at +105 °/s with the TCP 890 mm from its axis`.
pub(super) fn made_by(scene: &Scene, of: &str, point: &Moved) -> String {
    let rates = scene.rates();
    let posture = &scene.instant.posture;
    let total = point.velocity.norm();
    let mut makes: Vec<(usize, f64)> = (0..point.joints)
        .map(|j| {
            let axis = posture.axis(j);
            let turns = scene.joint(j).kind == JointKind::Revolute;
            let column = if turns { axis.cross(&(point.at - posture.origin(j))) } else { axis };
            (j, column.dot(&point.velocity) / total * rates[j])
        })
        .filter(|(_, part)| *part > TELLING * total)
        .collect();
    makes.sort_by(|a, b| b.1.total_cmp(&a.1));
    let told: Vec<String> = makes.iter().map(|&(j, part)| joint(scene, j, rates[j], part, point)).collect();
    if told.is_empty() { String::new() } else { format!("{of} {}.", all_of(&told)) }
}

fn joint(scene: &Scene, j: usize, rate: f64, part: f64, point: &Moved) -> String {
    let data = scene.joint(j);
    let posture = &scene.instant.posture;
    let lever = posture.axis(j).cross(&(point.at - posture.origin(j))).norm();
    let rate: Measure = data.rate_of(rate);
    match data.kind {
        JointKind::Revolute => format!(
            "{} makes {}, turning at {} with {} {} from its axis",
            data.name,
            Speed::m_per_s(part),
            rate.signed(),
            point.word,
            Length::m(lever).measure().text(0)
        ),
        JointKind::Prismatic => format!("{} makes {}, sliding at {}", data.name, Speed::m_per_s(part), rate.signed()),
    }
}

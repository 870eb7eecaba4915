use crate::checks::{Check, Excess, Spot, fastest_point};
use crate::units::Speed;

use super::scene::Scene;
use super::tcp_speed::{Moved, made_by, slower};
use super::{Label, Paragraph, proof_text, spot_words};

/// A point moves as fast as the TCP where the two differ by less than this, m/s.
const ALIKE: f64 = 0.001;

/// What, why, left alone and rests on of the speed of flange, wrist centre, elbow or a named point.
pub(super) fn paragraphs(scene: &Scene, excess: &Excess) -> [Paragraph; 4] {
    let judged = scene.judged;
    let points = judged.recipe.hanging_at(scene.segment.to).tool.map_or(&[][..], |tool| &tool.points);
    let fastest = fastest_point(&judged.arm, scene.segment, points, &scene.instant, scene.rate);
    let name = fastest.as_ref().map_or("the point".to_owned(), |(spot, ..)| match spot {
        Spot::Tool(_) => spot_words(spot),
        _ => format!("the {}", spot_words(spot)),
    });
    let what = format!(
        "{} moves at {}; the recipe's limit for points of arm and tool is {}. That is {} of it.",
        capital(&name),
        excess.demand,
        excess.limit,
        excess.room.asks()
    );
    let tcp = scene.velocity().norm();
    let beside = if (tcp - excess.demand.si).abs() < ALIKE {
        "The TCP moves just as fast.".to_owned()
    } else {
        let than = if tcp < excess.demand.si { "slower" } else { "faster" };
        format!("The TCP is {than}, at {}.", Speed::m_per_s(tcp))
    };
    let made = fastest.map_or(String::new(), |(_, carrying, velocity)| {
        let joints = carrying.joints();
        let at = carrying.place(&scene.instant);
        made_by(scene, &format!("Of the speed of {name}"), &Moved { word: "that point", at, joints, velocity })
    });
    let alone = "No limit of the arm is broken by this alone. But somebody set that limit for what this point may strike or shake, and \
                 the TCP's speed does not tell of it.";
    let rests = format!(
        "The limit in the recipe, the arm's geometry, the points that the tool names, and the speed or share given. Corners of the \
         part and hoses are not among those points. {}",
        proof_text(scene.survey(), scene.survey().check(Check::PointSpeed))
    );
    let why = [made, beside, slower(scene, excess, &format!("The speed of {name}"))];
    let why: Vec<String> = why.into_iter().filter(|sentence| !sentence.is_empty()).collect();
    [
        Paragraph::says(Label::What, what),
        Paragraph::says(Label::Why, why.join(" ")),
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

/// The same with a capital letter, as at the start of a sentence.
fn capital(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map_or(String::new(), |first| first.to_uppercase().chain(letters).collect())
}

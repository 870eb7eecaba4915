use crate::kinematics::SingularKind;
use crate::units::{Angle, Dimension, Measure, TurnRate};

use super::direction::{axis, line};
use super::listing::all_of;
use super::scene::Scene;

/// A joint's part in the combination of joint rates that moves the tool least counts from this share on.
const TAKES_PART: f64 = 0.3;
/// The wrist's joints make the lost direction when their squared parts in it come to more than this.
const MOSTLY: f64 = 0.7;
/// The lost direction explains a joint's rate when it makes up at least this share of it.
const EXPLAINS: f64 = 0.5;

/// Turning rates below this count as none, rad/s.
const NO_TURN: f64 = 1e-4;

/// What the nearness of a singular posture does to a joint's rate, in a few sentences; `None` where it does not explain it.
pub(super) fn amplified(scene: &Scene, joint: usize) -> Option<String> {
    // On a joint move nothing is inverted, so no posture amplifies anything.
    if !scene.segment.follows_path() || scene.arm().is_redundant() {
        return None;
    }
    let closeness = scene.closeness();
    let parts = scene.parts();
    let last = parts.count - 1;
    let rates = scene.rates();
    let lost = lost_share(scene, joint);
    if closeness.is_none() || lost.abs() < EXPLAINS * rates[joint].abs() {
        return None;
    }
    let name = |j: usize| scene.joint(j).name.clone();
    let fighting: Vec<usize> = (0..scene.arm().len()).filter(|&j| parts.joints[last][j].abs() > TAKES_PART).collect();
    let told: Vec<String> =
        fighting.iter().map(|&j| format!("{} at {}", name(j), scene.joint(j).rate_of(rates[j]).signed())).collect();
    let against = match fighting.len() {
        0 | 1 => String::new(),
        _ => format!(" {} turn against each other and nearly cancel.", all_of(&told)),
    };
    // The nearest singular posture and the direction with the smallest singular value need not belong together.
    let by_wrist: f64 = parts.joints[last].iter().skip(3).map(|share| share * share).sum();
    let kind = closeness.and_then(|close| close.kind).filter(|kind| (*kind == SingularKind::Wrist) == (by_wrist > MOSTLY));
    if kind == Some(SingularKind::Wrist) && joint >= 3 {
        return Some(format!("{}{against}", wrist(scene, joint)));
    }
    let opening = match kind {
        Some(SingularKind::Wrist) => "The wrist is nearly straight".to_owned(),
        Some(SingularKind::Elbow) => "The arm is nearly stretched or folded".to_owned(),
        Some(SingularKind::Shoulder) => format!("The wrist centre passes close to the axis of {}", name(0)),
        None => format!(
            "The arm passes close to a posture in which {} lose a direction",
            all_of(&fighting.iter().map(|&j| name(j)).collect::<Vec<_>>())
        ),
    };
    let of = |si: f64| scene.joint(joint).rate_of(si).signed();
    Some(format!(
        "{opening}, and one direction of motion is nearly lost; the tool feels it most {}. That direction alone asks \
         {} of {}, all other motion together {}.{against}",
        line(&scene.judged.recipe, &scene.speed_left().direction),
        of(lost),
        name(joint),
        of(rates[joint] - lost)
    ))
}

/// The part of a joint's rate that serves the direction with the smallest singular value, SI.
fn lost_share(scene: &Scene, joint: usize) -> f64 {
    let parts = scene.parts();
    let last = parts.count - 1;
    let along: f64 = (0..scene.arm().len()).map(|j| parts.joints[last][j] * scene.rates()[j]).sum();
    along * parts.joints[last][joint]
}

/// The wrist's own law: a turn across the two axes in line must be made by the outer wrist joints against each other, `w / sin`
/// and `w / tan` of the angle between their axes.
fn wrist(scene: &Scene, joint: usize) -> String {
    let posture = &scene.instant.posture;
    let [first, middle, last] = [3, 4, 5].map(|j| posture.axis(j));
    let rates = scene.rates();
    let across = middle.cross(&first).normalize();
    // What the three wrist joints together must turn across the axes in line, rad/s.
    let asked = last.dot(&across) * rates[5];
    let apart = first.cross(&last).norm().min(1.0).asin();
    let gain = rates[joint].abs() / asked.abs();
    let names = [3, 4, 5].map(|j| scene.joint(j).name.as_str());
    let cause = if scene.turning().norm() < NO_TURN {
        format!(
            "The tool keeps its orientation, so the wrist must turn back what {} turn: ",
            all_of(&[0, 1, 2].map(|j| scene.joint(j).name.clone()))
        )
    } else {
        "For the tool's turn and against that of the joints before it the wrist must turn: ".to_owned()
    };
    format!(
        "The wrist is nearly straight: {} stands {} from where the axes of {} and {} are in line. {cause}{} of that lies across \
         both, about {}. With {} at a right angle that would ask no more than the same rate of any wrist joint; here it asks {} times \
         as much of {}.",
        names[1],
        Angle::rad(apart).measure().text(1),
        names[0],
        names[2],
        TurnRate::rad_per_s(asked.abs()),
        axis(&(across * asked)),
        names[1],
        Measure::si(gain, Dimension::Ratio).text(usize::from(gain < 10.0)),
        scene.joint(joint).name,
    )
}

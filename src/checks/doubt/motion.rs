use crate::arm::{Arm, Body};
use crate::program::Recipe;

use super::Doubt;

/// What makes the torque in motion less than the whole, where it is rated at all.
pub(super) fn doubts(arm: &Arm, recipe: &Recipe) -> Vec<Doubt> {
    let rated = |j: &usize| arm.joints()[*j].torque.is_some_and(|torque| torque.peak.is_some());
    let mut found = Vec::new();
    if !(0..arm.len()).any(|j| rated(&j)) {
        return found;
    }
    if (0..arm.len()).any(|j| rated(&j) && !crate::checks::is_complete(arm, j)) {
        found.push(Doubt::MotionInPart);
    }
    let point = |body: &Body| body.mass > 0.0 && body.inertia.is_none();
    for tool in recipe.tools.iter().filter(|tool| tool.body.as_ref().is_some_and(point)) {
        found.push(Doubt::NoInertia { thing: format!("Tool \"{}\"", tool.name) });
    }
    for load in recipe.loads.iter().filter(|load| point(&load.body)) {
        found.push(Doubt::NoInertia { thing: format!("Load \"{}\"", load.name) });
    }
    found
}

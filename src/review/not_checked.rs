use crate::checks::{Check, Proof, Unproved};

use super::Judged;

/// What this program did not judge about a recipe, a sentence each. What is particular to the recipe comes first. Stands wherever
/// a verdict stands.
pub fn not_checked(judged: &Judged) -> Vec<String> {
    let mut told = particular(judged);
    told.extend(
        [
            "Clearance: whether arm, tool, part or cables touch anything, themselves included.",
            "Stopping time and distance, and the separation of people from the arm.",
            "Safeguards, interlocks, emergency stops and the cell's risk assessment.",
            "Torque in motion: only what holding still asks is judged.",
            "Brakes, gears, heat and wear.",
            "Cables and hoses: how they wind and pull.",
            "The grip: whether the tool holds the part.",
            "The task program's logic, signals and waiting times.",
            "How the first waypoint is reached, and the way back to it when the cycle starts again.",
            "Whether the cell runs the waypoints, tool and load that stand in this recipe.",
        ]
        .map(str::to_owned),
    );
    told
}

fn particular(judged: &Judged) -> Vec<String> {
    let (arm, recipe, survey) = (&judged.arm, &judged.recipe, &judged.survey);
    let mut told = Vec::new();
    let numbers: Vec<String> = judged
        .plan
        .segments
        .iter()
        .filter(|segment| segment.followed_to() < 1.0)
        .map(|segment| segment.number().to_string())
        .collect();
    if !numbers.is_empty() {
        told.push(format!("All that comes after the place where the path is lost, on segment {}.", numbers.join(", ")));
    }
    if arm.joints().iter().any(|joint| joint.torque.is_none()) {
        told.push("Holding, in part: the arm file does not rate every joint's holding torque.".to_owned());
    }
    if !arm.has_masses() {
        told.push("Holding, in part: the arm file does not give every link's mass, so those weights are left out.".to_owned());
    }
    if recipe.acceptance.tcp_speed.is_none() {
        told.push("TCP speed: the recipe sets no limit, so it is shown but not judged.".to_owned());
    }
    if recipe.waypoints.iter().any(|waypoint| waypoint.fly_by.is_some()) {
        told.push("Fly-by: how the cell's controller rounds the corner. A blend tangent to both segments is judged, and so is a stop at the \
             waypoint; controllers differ, and what yours does between the two is not.".to_owned());
    }
    if recipe.waypoints.iter().any(|waypoint| waypoint.push.is_some()) {
        told.push("The process force: whether it is what the recipe says, and the contact that makes it.".to_owned());
    }
    if arm.flange().rated_load.is_none() {
        told.push("The flange's rated load: the arm file gives none.".to_owned());
    }
    if !arm.flange().wrist.is_empty() {
        told.push("The load diagram's limits of moment and inertia at the wrist.".to_owned());
    }
    let only_samples = survey
        .segments
        .iter()
        .flat_map(|segment| &segment.checks)
        .any(|result| result.judged && result.check != Check::Reach && result.proof == Proof::Open(Unproved::SamplesOnly));
    if only_samples {
        told.push("Instants between those looked at, wherever a result is not marked as proved.".to_owned());
    }
    told
}

use crate::checks::{Check, Proof, Unproved, is_closed, is_complete};
use crate::program::Repeat;

use super::Judged;
use super::explain::all_of;

/// What this program did not judge about a recipe, a sentence each. What is particular to the recipe comes first. Stands wherever
/// a verdict stands.
pub fn not_checked(judged: &Judged) -> Vec<String> {
    let mut told = particular(judged);
    told.extend(
        [
            "Clearance: whether arm, tool, part or cables touch anything, themselves included.",
            "Stopping time and distance, and the separation of people from the arm.",
            "Safeguards, interlocks, emergency stops and the cell's risk assessment.",
            "Gears, heat and wear; brakes beyond what they hold at standstill.",
            "Cables and hoses: how they pull and rub.",
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
    told.extend(torque(judged));
    if recipe.acceptance.tcp_speed.is_none() {
        told.push("TCP speed: the recipe sets no limit, so it is shown but not judged.".to_owned());
    }
    told.push(match recipe.acceptance.point_speed {
        None => "Speeds of flange, wrist centre, elbow and the tool's named points: the recipe sets no point-speed, so that of the TCP is \
                 judged and theirs only told (plan)."
            .to_owned(),
        Some(_) => "Speeds of other points than TCP, flange, wrist centre, elbow and those that the tool names: corners of the part, \
                    hoses."
            .to_owned(),
    });
    if recipe.acceptance.wind_up.is_none() {
        told.push("How far the wrist winds cables over the cycle: the recipe sets no wind-up.".to_owned());
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
    if arm.flange().wrist.is_empty() {
        told.push("The load diagram: the arm file gives no limits of moment and inertia at the wrist.".to_owned());
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

/// What of torque in motion, brakes and the cycle's torque was not judged.
fn torque(judged: &Judged) -> Vec<String> {
    let (arm, recipe) = (&judged.arm, &judged.recipe);
    let names = |lacks: &dyn Fn(usize) -> bool| -> Option<String> {
        let names: Vec<String> = (0..arm.len()).filter(|j| lacks(*j)).map(|j| arm.joints()[j].name.clone()).collect();
        (!names.is_empty()).then(|| all_of(&names))
    };
    let rated = |j: usize| arm.joints()[j].torque.is_some_and(|torque| torque.peak.is_some());
    let mut told = Vec::new();
    if let Some(names) = names(&|j| !rated(j)) {
        told.push(format!("Torque in motion of {names}: the arm file gives no peak rating."));
    }
    if let Some(names) = names(&|j| rated(j) && !is_complete(arm, j)) {
        told.push(format!(
            "Torque in motion of {names}: the arm file leaves out inertia, rotor or friction; links, tool and load alone are not over."
        ));
    }
    if let Some(names) = names(&|j| arm.joints()[j].brake.is_none()) {
        told.push(format!("Brakes of {names}: the arm file gives none."));
    }
    if recipe.repeat == Repeat::Never {
        told.push("Torque over the cycle: the recipe says that it runs once.".to_owned());
    } else if !is_closed(recipe, &judged.plan) {
        told.push("Torque over the cycle: it does not end in the posture, with the tool and load, that it begins with, so the way back is missing.".to_owned());
    } else if judged.survey.cycle.rms.proof == Proof::Open(Unproved::NotFollowed) {
        told.push("Torque over the cycle: a path could not be followed to its end.".to_owned());
    } else if let Some(names) = names(&|j| !is_complete(arm, j) || arm.joints()[j].torque.is_none()) {
        told.push(format!("Torque over the cycle of {names}: its torque in motion is not known as a whole, or not rated."));
    }
    told
}

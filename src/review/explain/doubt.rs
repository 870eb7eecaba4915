use crate::arm::Joint;
use crate::checks::Doubt;
use crate::units::{Angle, Length, Mass};

use super::Judged;

/// An angle below this is not told beside a gap, rad (a twentieth of a degree).
const NO_TURN: f64 = 8.7e-4;

/// Tells a doubt in one or two sentences.
pub fn doubt_text(judged: &Judged, doubt: &Doubt) -> String {
    let name = |waypoint: usize| format!("Waypoint {} \"{}\"", waypoint + 1, judged.recipe.waypoints[waypoint].name);
    match doubt {
        Doubt::Shown { waypoint, gap, turn } => {
            let gap = Length::m(*gap).measure().text(1);
            let apart = if *turn > NO_TURN { format!("{gap} and {}", Angle::rad(*turn).measure().text(1)) } else { gap };
            format!(
                "{}: the pose that the cell showed there is {apart} from where this recipe puts the TCP. A wrong tool or frame \
                 number \
                 when it was noted, or a TCP or arm that differs from the recipe, looks like this.",
                name(*waypoint)
            )
        }
        Doubt::ToolWithoutMass { tool } => {
            format!("Tool \"{tool}\" has no mass. Holding is judged as if it weighed nothing.")
        }
        Doubt::LoadWithoutMass { load } => {
            format!("Load \"{load}\" has a mass of 0 kg. Holding is judged as if it weighed nothing.")
        }
        Doubt::TakenTwice { waypoint } => {
            format!("{} takes a load while the tool still carries one. From there on only the new one is counted.", name(*waypoint))
        }
        Doubt::NothingToRelease { waypoint } => format!("{} releases a load, but the tool carries none there.", name(*waypoint)),
        Doubt::NoMotion { waypoint } => {
            format!(
                "{} is where the waypoint before it is, so the segment between them has no motion. A point taught twice looks \
                 like this.",
                name(*waypoint)
            )
        }
        Doubt::MotionInPart => {
            let lacking = |joint: &&Joint| !joint.drive.is_complete() || joint.link.is_none_or(|link| link.inertia.is_none());
            let names: Vec<String> = judged.arm.joints().iter().filter(lacking).map(|joint| joint.name.clone()).collect();
            format!(
                "Torque in motion is links, tool and load only: for {} the arm file leaves out the link's inertia, the rotor or the \
                 friction. Where that alone is over the peak rating it is told; otherwise it counts as not checked.",
                super::listing::all_of(&names)
            )
        }
        Doubt::NoInertia { thing } => {
            format!("{thing} has no inertia. In motion it is judged as a point, which asks too little of the wrist.")
        }
        Doubt::OverRatedLoad { waypoint, carried, rated } => format!(
            "On the way to waypoint {} \"{}\" tool and load weigh {} together; the flange is rated for {}. The maker's limits \
             then no longer hold, whatever else is clear.",
            waypoint + 1,
            judged.recipe.waypoints[*waypoint].name,
            Mass::kg(*carried),
            Mass::kg(*rated)
        ),
    }
}

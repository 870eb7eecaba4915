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
        Doubt::FlyByCut { waypoint, radius } => format!(
            "{} asks for a fly-by radius of {}, which is more than the segments beside it leave room for. The blend is judged with \
             as much as they do; the cell's controller may do otherwise.",
            name(*waypoint),
            Length::m(*radius).measure().text(0)
        ),
        Doubt::FlyByStops { waypoint } => format!(
            "{} is a fly-by point that is judged as a stop point: a segment beside it has no motion, turns on the spot or could \
             not be followed, or the tool or the process force changes there.",
            name(*waypoint)
        ),
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

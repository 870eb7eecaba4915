use crate::arm::Joint;
use crate::checks::{Angles, Doubt, Hung, Lengths};
use crate::units::{Angle, Length, Mass, Measure, Speed};

use super::Judged;

/// An angle below this is not told beside a gap, rad (a twentieth of a degree).
const NO_TURN: f64 = 8.7e-4;

/// Tells a doubt in one to three sentences.
pub fn doubt_text(judged: &Judged, doubt: &Doubt) -> String {
    let about = doubt.waypoint().map_or(String::new(), |waypoint| name(judged, waypoint));
    match doubt {
        Doubt::Shown { gap, turn, .. } => {
            let gap = Length::m(*gap).measure().text(1);
            let apart = if *turn > NO_TURN { format!("{gap} and {}", Angle::rad(*turn).measure().text(1)) } else { gap };
            format!(
                "{about}: the pose that the cell showed there is {apart} from where this recipe puts the TCP. A wrong tool or frame \
                 number when it was noted, or a TCP or arm that differs from the recipe, looks like this."
            )
        }
        Doubt::TakenTwice { .. } => {
            format!("{about} takes a load while the tool still carries one. From there on only the new one is counted.")
        }
        Doubt::NothingToRelease { .. } => format!("{about} releases a load, but the tool carries none there."),
        Doubt::NoMotion { .. } => format!(
            "{about} is where the waypoint before it is, so the segment between them has no motion. A point taught twice looks \
             like this."
        ),
        Doubt::OverRatedLoad { carried, rated, .. } => format!(
            "On the way to {} tool and load weigh {} together; the flange is rated for {}. The maker's limits then no longer hold, \
             whatever else is clear.",
            lower(&about),
            Mass::kg(*carried),
            Mass::kg(*rated)
        ),
        Doubt::FlyByCut { radius, .. } => format!(
            "{about} asks for a fly-by radius of {}, which is more than the segments beside it leave room for. The blend is judged \
             with as much as they do; the cell's controller may do otherwise.",
            Length::m(*radius).measure().text(0)
        ),
        Doubt::FlyByStops { .. } => format!(
            "{about} is a fly-by point that is judged as a stop point: a segment beside it has no motion, turns on the spot or \
             could not be followed, or the tool or the process force changes there."
        ),
        Doubt::SpeedBeyondArm { speed, most, .. } => format!(
            "{about} is approached at {}. No posture lets this arm move its TCP faster than {}. A digit too many, or a figure in \
             another unit, looks like this.",
            Speed::m_per_s(*speed),
            Speed::m_per_s(*most).measure().text_up(0)
        ),
        Doubt::LongWay { .. } | Doubt::WhichTurn { .. } | Doubt::NotUnwound { .. } => turning_text(judged, doubt, &about),
        Doubt::MotionInPart => {
            let lacking = |joint: &&Joint| !joint.drive.is_complete() || joint.link.is_none_or(|link| link.inertia.is_none());
            let names: Vec<String> = judged.arm.joints().iter().filter(lacking).map(|joint| joint.name.clone()).collect();
            format!(
                "Torque in motion is links, tool and load only: for {} the arm file leaves out the link's inertia, the rotor or the \
                 friction. Where that alone is over the peak rating it is told; otherwise it counts as not checked.",
                super::listing::all_of(&names)
            )
        }
        _ => table_text(doubt),
    }
}

/// `Waypoint 7 "pass end"`.
fn name(judged: &Judged, waypoint: usize) -> String {
    format!("Waypoint {} \"{}\"", waypoint + 1, judged.recipe.waypoints[waypoint].name)
}

/// The same within a sentence.
fn lower(name: &str) -> String {
    name.replacen('W', "w", 1)
}

fn angle(rad: f64) -> Measure {
    Angle::rad(rad).measure()
}

/// Doubts about whole turns and cables.
fn turning_text(judged: &Judged, doubt: &Doubt, about: &str) -> String {
    let joint = |j: usize| judged.arm.joints()[j].name.as_str();
    match *doubt {
        Doubt::LongWay { joint: j, turns, shorter, .. } => format!(
            "{about}: {} turns by {} on the way there; {} would end in the same posture and is within its range. A value noted a \
             whole turn off looks like this, unless the long way is meant to keep cables from winding.",
            joint(j),
            angle(turns).signed(),
            angle(shorter).signed()
        ),
        Doubt::WhichTurn { joint: j, value, other, .. } => format!(
            "{about} is taught as a pose, which leaves open by which turn {} gets there: this program takes {}, the value nearest to \
             the waypoint before; {} is the same pose and within the range too. Whether the cell takes the same turn must be \
             looked at there.",
            joint(j),
            angle(value).signed(),
            angle(other).signed()
        ),
        Doubt::NotUnwound { joint: j, turned } => format!(
            "{} ends the cycle {} from where it began. Before the next cycle it must turn all that way back, or cables wind \
             further with each.",
            joint(j),
            angle(turned).signed()
        ),
        _ => String::new(),
    }
}

/// Doubts about tools, loads, mount and units.
fn table_text(doubt: &Doubt) -> String {
    match doubt {
        Doubt::ToolWithoutMass { tool } => {
            format!("Tool \"{tool}\" has no mass. Holding is judged as if it weighed nothing.")
        }
        Doubt::LoadWithoutMass { load } => {
            format!("Load \"{load}\" has a mass of 0 kg. Holding is judged as if it weighed nothing.")
        }
        Doubt::FarCentre { of, distance } => {
            let (thing, from) = match of {
                Hung::Tool(name) => (format!("Tool \"{name}\""), "the flange"),
                Hung::Load(name) => (format!("Load \"{name}\""), "the TCP"),
            };
            format!(
                "{thing} has its centre of mass {} from {from}. A figure in another unit, or one taken from another origin, looks \
                 like this.",
                Length::m(*distance)
            )
        }
        Doubt::NoInertia { thing } => {
            format!("{thing} has no inertia. In motion it is judged as a point, which asks too little of the wrist.")
        }
        Doubt::CentreAtFlange { tool } => format!(
            "Tool \"{tool}\" has its centre of mass at [0, 0, 0], on the flange's face itself. Its leverage is then left out; a \
             centre that nobody noted looks like this."
        ),
        Doubt::MountByName { word, lean } => format!(
            "The name of the recipe or of its arm says \"{word}\", but the mount leans the base's z axis {} from upright. If the \
             name is about the mount, one of the two is wrong, and with it the weight on every joint.",
            Angle::rad(*lean).measure().text(0)
        ),
        Doubt::LikeRadians { of, largest } => {
            let (which, unit) = match of {
                Angles::Joints => ("Every value of a turning joint that was taught", "Joint values"),
                Angles::Orientations => ("Every orientation that was taught", "Angles"),
            };
            let largest = angle(*largest).text_up(2);
            format!("{which} is {largest} or less. {unit} noted in radians look like this; a recipe takes them as degrees.")
        }
        Doubt::LikeMetres { of, largest } => {
            let largest = Length::m(*largest).measure();
            match of {
                Lengths::Positions => format!(
                    "Every position that was taught in base or world is within {} of the origin. Positions noted in metres look \
                     like this; a recipe takes them as millimetres.",
                    largest.text_up(1)
                ),
                Lengths::Tcp(tool) => format!(
                    "Tool \"{tool}\" has its TCP {} from the flange. A length noted in metres looks like this; a recipe takes it as \
                     millimetres.",
                    largest.text(3)
                ),
            }
        }
        _ => String::new(),
    }
}

use crate::checks::{Check, Excess};
use crate::dynamics::at_axis;
use crate::geometry::M3;
use crate::program::Carried;
use crate::units::{Dimension, Length, Mass};

use super::listing::sum_of;
use super::scene::Scene;
use super::{Bar, Label, Paragraph, proof_text};

/// What, why, left alone and rests on of the load at the flange.
pub(super) fn paragraphs(scene: &Scene, joint: Option<usize>, excess: &Excess) -> [Paragraph; 4] {
    let axis = joint.map(|j| format!("the axis of {}", scene.joint(j).name));
    let asks = excess.room.asks();
    let what = match (&axis, excess.demand.of) {
        (None, _) => format!("Tool and load weigh {} together; the flange is rated for {}: {asks}.", excess.demand, excess.limit),
        (Some(axis), Dimension::Torque) => {
            format!("About {axis} tool and load may weigh {} of the {} that it may carry: {asks}.", excess.demand, excess.limit)
        }
        (Some(axis), _) => format!("About {axis} tool and load have an inertia of {} of {}: {asks}.", excess.demand, excess.limit),
    };
    let why = format!("{} It does not depend on the speed, so going slower does not help.", why(scene, joint, excess));
    let rests = format!(
        "The limits of flange and wrist axes in the arm file, and masses, centres and inertias of tool and load as typed; one \
         without an inertia counts as a point. {}",
        proof_text(scene.survey(), scene.survey().check(Check::Flange))
    );
    [
        Paragraph::says(Label::What, what),
        Paragraph { label: Label::Why, text: why, bars: bars(scene, joint, excess) },
        Paragraph::says(
            Label::LeftAlone,
            "The maker's limits then no longer hold, whatever else is clear: gears of the wrist wear out early, and the \
             controller's own model of the load is wrong.",
        ),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

fn why(scene: &Scene, joint: Option<usize>, excess: &Excess) -> String {
    let Some(joint) = joint else { return "A lighter tool or load is the only remedy.".to_owned() };
    let there = at_axis(&scene.instant.posture, scene.carried, joint);
    let mass = Mass::kg(scene.carried.mass());
    let lever = Length::m(there.lever).measure().text(0);
    if excess.demand.of == Dimension::Torque {
        return format!(
            "Together they weigh {mass}, and the centre of that is {lever} from the axis. That lever is taken as level, the worst \
             that a posture can make of it. A lighter load, or one whose centre is nearer to the axis, helps."
        );
    }
    format!(
        "Together they weigh {mass}, {lever} from the axis to their centre; inertia grows with the square of that distance. A load \
         held nearer to the axis helps most."
    )
}

/// What tool and load have in it.
fn bars(scene: &Scene, joint: Option<usize>, excess: &Excess) -> Vec<Bar> {
    let carried = scene.carried;
    let tool = Carried { load_mass: 0.0, load_inertia: M3::zeros(), ..*carried };
    let load = Carried { tool_mass: 0.0, tool_inertia: M3::zeros(), ..*carried };
    let [tool_name, load_name] = scene.carried_names();
    let part = |part: &Carried| match joint {
        None => Some(part.mass()),
        Some(j) if excess.demand.of == Dimension::Inertia => Some(at_axis(&scene.instant.posture, part, j).inertia),
        // Levers of two centres do not add up.
        Some(_) => None,
    };
    match (part(&tool), part(&load)) {
        (Some(a), Some(b)) => sum_of(vec![(tool_name, a), (load_name, b)], excess.limit),
        _ => Vec::new(),
    }
}

use crate::arm::{Arm, Body};
use crate::kinematics::{Posture, pose_error};
use crate::motion::{Plan, pose_in_base};
use crate::program::{Recipe, Taught, Then};

/// A doubt is something in the data that is probably a mistake. It changes no verdict.
#[derive(Debug, Clone, PartialEq)]
pub enum Doubt {
    /// The pose that the cell displayed is not where the model puts the TCP.
    Shown {
        /// Which waypoint, counted from 0.
        waypoint: usize,
        /// Distance, m.
        gap: f64,
        /// Angle between the two, rad; 0 where no orientation was noted.
        turn: f64,
    },
    /// A tool without a mass.
    ToolWithoutMass {
        /// Its name.
        tool: String,
    },
    /// A load of 0 kg.
    LoadWithoutMass {
        /// Its name.
        load: String,
    },
    /// A load is taken while the tool carries one.
    TakenTwice {
        /// Which waypoint, counted from 0.
        waypoint: usize,
    },
    /// Something is released while the tool carries nothing.
    NothingToRelease {
        /// Which waypoint, counted from 0.
        waypoint: usize,
    },
    /// A segment whose ends coincide.
    NoMotion {
        /// The waypoint it arrives at, counted from 0.
        waypoint: usize,
    },
    /// Torque in motion is rated but not known as a whole: some link's inertia, rotor or friction is missing.
    MotionInPart,
    /// A tool or load with a mass but without an inertia.
    NoInertia {
        /// What it is and its name.
        thing: String,
    },
    /// Tool and load together exceed the flange's rated load.
    OverRatedLoad {
        /// The waypoint it arrives at, counted from 0.
        waypoint: usize,
        /// Tool and load, kg.
        carried: f64,
        /// Rated load, kg.
        rated: f64,
    },
}

/// A displayed pose may differ by this much, m.
const SHOWN_M: f64 = 1e-3;
/// A displayed orientation may differ by this much, rad (a tenth of a degree).
const SHOWN_RAD: f64 = 1.745_33e-3;

/// Everything in a recipe that is probably a mistake, in order of the waypoints.
pub fn doubts(arm: &Arm, recipe: &Recipe, plan: &Plan) -> Vec<Doubt> {
    let mut found = Vec::new();
    for tool in recipe.tools.iter().filter(|tool| tool.body.is_none_or(|body| body.mass == 0.0)) {
        found.push(Doubt::ToolWithoutMass { tool: tool.name.clone() });
    }
    for load in recipe.loads.iter().filter(|load| load.body.mass == 0.0) {
        found.push(Doubt::LoadWithoutMass { load: load.name.clone() });
    }
    found.extend(motion_in_part(arm, recipe));
    for (index, waypoint) in recipe.waypoints.iter().enumerate() {
        found.extend(shown_gap(arm, recipe, plan, index));
        match (&waypoint.then, recipe.load_before(index)) {
            (Some(Then::Take(_)), Some(_)) => found.push(Doubt::TakenTwice { waypoint: index }),
            (Some(Then::Release), None) => found.push(Doubt::NothingToRelease { waypoint: index }),
            _ => {}
        }
        let Some(segment) = index.checked_sub(1).and_then(|before| plan.segments.get(before)) else { continue };
        if segment.trouble.is_none() && segment.duration() == 0.0 {
            found.push(Doubt::NoMotion { waypoint: index });
        }
        if let Some(rated) = arm.flange().rated_load
            && segment.carried.mass() > rated
        {
            found.push(Doubt::OverRatedLoad { waypoint: index, carried: segment.carried.mass(), rated });
        }
    }
    found
}

/// What makes the torque in motion less than the whole, where it is rated at all.
fn motion_in_part(arm: &Arm, recipe: &Recipe) -> Vec<Doubt> {
    let rated = |j: &usize| arm.joints()[*j].torque.is_some_and(|torque| torque.peak.is_some());
    let mut found = Vec::new();
    if !(0..arm.len()).any(|j| rated(&j)) {
        return found;
    }
    if (0..arm.len()).any(|j| rated(&j) && !super::moving::is_complete(arm, j)) {
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

fn shown_gap(arm: &Arm, recipe: &Recipe, plan: &Plan, waypoint: usize) -> Option<Doubt> {
    let shown = recipe.waypoints[waypoint].shown.as_ref()?;
    let q = match (&recipe.waypoints[waypoint].taught, waypoint.checked_sub(1).and_then(|k| plan.segments.get(k))) {
        (Taught::Joints(q), _) => *q,
        (_, Some(segment)) => segment.end,
        (_, None) => plan.segments.first()?.start,
    };
    let tcp = recipe.tool_at(waypoint).map_or_else(crate::geometry::Pose::identity, |tool| tool.tcp);
    let now = Posture::at(arm.chain(), &q).tcp(&tcp);
    let error = pose_error(&now, &pose_in_base(recipe, shown, &now));
    let length = |part: &[f64]| part.iter().map(|v| v * v).sum::<f64>().sqrt();
    let (gap, turn) = (length(&error[..3]), length(&error[3..]));
    (!(gap <= SHOWN_M && turn <= SHOWN_RAD)).then_some(Doubt::Shown { waypoint, gap, turn })
}

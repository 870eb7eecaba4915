use crate::arm::Arm;
use crate::kinematics::{Posture, pose_error};
use crate::motion::{Passed, Plan, pose_in_base};
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
    /// A fly-by point whose blend is cut to a part of a neighbour that is too short for it.
    FlyByCut {
        /// Which waypoint, counted from 0.
        waypoint: usize,
        /// The radius asked for, m.
        radius: f64,
    },
    /// A fly-by point that can't be passed without a stop, so that it is judged as a stop point only.
    FlyByStops {
        /// Which waypoint, counted from 0.
        waypoint: usize,
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
    for (index, waypoint) in recipe.waypoints.iter().enumerate() {
        found.extend(shown_gap(arm, recipe, plan, index));
        match (&waypoint.then, recipe.load_before(index)) {
            (Some(Then::Take(_)), Some(_)) => found.push(Doubt::TakenTwice { waypoint: index }),
            (Some(Then::Release), None) => found.push(Doubt::NothingToRelease { waypoint: index }),
            _ => {}
        }
        let fly_by = plan.fly_bys.binary_search_by_key(&index, |fly_by| fly_by.waypoint).ok().map(|at| plan.fly_bys[at]);
        match fly_by.map(|fly_by| (fly_by.passed, fly_by.radius)) {
            Some((Passed::Cut, radius)) => found.push(Doubt::FlyByCut { waypoint: index, radius }),
            Some((Passed::Stopped, _)) => found.push(Doubt::FlyByStops { waypoint: index }),
            Some((Passed::Whole, _)) | None => {}
        }
        let Some(segment) = plan.arriving(index) else { continue };
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

fn shown_gap(arm: &Arm, recipe: &Recipe, plan: &Plan, waypoint: usize) -> Option<Doubt> {
    let shown = recipe.waypoints[waypoint].shown.as_ref()?;
    let q = match (&recipe.waypoints[waypoint].taught, plan.arriving(waypoint)) {
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

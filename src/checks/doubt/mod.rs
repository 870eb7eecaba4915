//! Doubts: data that is probably a mistake.

mod data;
mod fast;
mod motion;
mod taught;
mod turn;

use crate::arm::Arm;
use crate::motion::Plan;
use crate::program::Recipe;

pub use data::{Angles, Hung, Lengths};

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
    /// A fly-by radius that the segments beside it leave no room for.
    FlyByCut {
        /// Which waypoint, counted from 0.
        waypoint: usize,
        /// The radius asked for, m.
        radius: f64,
    },
    /// A fly-by point that is judged as a stop point.
    FlyByStops {
        /// Which waypoint, counted from 0.
        waypoint: usize,
    },
    /// The centre of mass of a tool or load is so far away that it looks like a slip.
    FarCentre {
        /// What hangs there.
        of: Hung,
        /// Distance of the centre from the flange (a load: from the TCP), m.
        distance: f64,
    },
    /// A tool has a mass, and its centre is the origin of the flange itself.
    CentreAtFlange {
        /// Its name.
        tool: String,
    },
    /// A name speaks of another mount than the recipe gives.
    MountByName {
        /// The word in the name of recipe or arm.
        word: &'static str,
        /// How far the base's z axis leans from upright, rad.
        lean: f64,
    },
    /// All angles of a kind are so small that they may have been noted in radians.
    LikeRadians {
        /// Which angles.
        of: Angles,
        /// The largest of them, rad as read.
        largest: f64,
    },
    /// All lengths of a kind are so small that they may have been noted in metres.
    LikeMetres {
        /// Which lengths.
        of: Lengths,
        /// The largest of them, m as read.
        largest: f64,
    },
    /// A line or arc is given a speed that the arm has in no posture.
    SpeedBeyondArm {
        /// The waypoint it arrives at, counted from 0.
        waypoint: usize,
        /// The speed given, m/s.
        speed: f64,
        /// No posture moves the TCP faster than this, m/s.
        most: f64,
    },
    /// A joint move turns a joint more than half a turn where a shorter way ends in the same posture.
    LongWay {
        /// The waypoint it arrives at, counted from 0.
        waypoint: usize,
        /// Which joint.
        joint: usize,
        /// By how much it turns, rad.
        turns: f64,
        /// By how much it would turn the other way, rad.
        shorter: f64,
    },
    /// A pose leaves open by which turn of a joint it is reached: a joint stands beyond half a turn, and a whole turn back is in
    /// its range as well.
    WhichTurn {
        /// Which waypoint, counted from 0.
        waypoint: usize,
        /// Which joint.
        joint: usize,
        /// The value taken, rad.
        value: f64,
        /// The other value, rad.
        other: f64,
    },
    /// The cycle ends in the posture in which it began but for whole turns, so that every cycle winds cables further or must first
    /// turn back.
    NotUnwound {
        /// Which joint.
        joint: usize,
        /// End less start, rad.
        turned: f64,
    },
}

impl Doubt {
    /// The waypoint that it is about, counted from 0, if it is about one.
    pub fn waypoint(&self) -> Option<usize> {
        match self {
            Self::Shown { waypoint, .. }
            | Self::TakenTwice { waypoint }
            | Self::NothingToRelease { waypoint }
            | Self::NoMotion { waypoint }
            | Self::FlyByCut { waypoint, .. }
            | Self::FlyByStops { waypoint }
            | Self::OverRatedLoad { waypoint, .. }
            | Self::SpeedBeyondArm { waypoint, .. }
            | Self::LongWay { waypoint, .. }
            | Self::WhichTurn { waypoint, .. } => Some(*waypoint),
            Self::ToolWithoutMass { .. }
            | Self::LoadWithoutMass { .. }
            | Self::MotionInPart
            | Self::NoInertia { .. }
            | Self::FarCentre { .. }
            | Self::CentreAtFlange { .. }
            | Self::MountByName { .. }
            | Self::LikeRadians { .. }
            | Self::LikeMetres { .. }
            | Self::NotUnwound { .. } => None,
        }
    }

    /// The joint that it is about, if it is about one.
    pub fn joint(&self) -> Option<usize> {
        match self {
            Self::LongWay { joint, .. } | Self::WhichTurn { joint, .. } | Self::NotUnwound { joint, .. } => Some(*joint),
            _ => None,
        }
    }

    /// Whether two doubts are of one kind, whatever their figures and whomever they are about.
    pub fn is_alike(&self, other: &Self) -> bool {
        std::mem::discriminant(self) == std::mem::discriminant(other)
    }
}

/// Everything in a recipe that is probably a mistake: what stands in its tables, then in order of the waypoints, then of the whole
/// cycle.
pub fn doubts(arm: &Arm, recipe: &Recipe, plan: &Plan) -> Vec<Doubt> {
    let mut found = data::doubts(arm, recipe);
    found.extend(motion::doubts(arm, recipe));
    for (index, hangs) in recipe.hanging().enumerate() {
        found.extend(taught::doubts(arm, recipe, plan, index, hangs));
        found.extend(turn::at_waypoint(arm, recipe, plan, index));
        found.extend(fast::doubt(arm, recipe, plan, index));
    }
    found.extend(turn::over_the_cycle(arm, plan));
    found
}

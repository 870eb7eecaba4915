use crate::arm::{Arm, JointKind};
use crate::geometry::V3;
use crate::program::{BASE, Given, Recipe, Taught, WORLD};
use crate::units::{Angle, Length};

use super::Doubt;

/// What hangs on the flange.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Hung {
    /// A tool, by name.
    Tool(String),
    /// A load, by name.
    Load(String),
}

/// Angles that one person probably noted in one unit.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Angles {
    /// The values of turning joints at all waypoints taught by joint values.
    Joints,
    /// The orientations of all waypoints taught by poses.
    Orientations,
}

/// Lengths that one person probably noted in one unit.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Lengths {
    /// The positions of all waypoints taught by poses in base or world.
    Positions,
    /// Where the TCP of this tool stands on the flange.
    Tcp(String),
}

/// A centre of mass farther than this is doubted, m. A chosen figure: few tools are longer to their centre.
const FAR_CENTRE: f64 = 0.4;
/// Fewer angles or positions than this say nothing about their unit.
const ENOUGH: usize = 3;
/// An angle within this of a tenth of a degree, in degrees, is one that people write.
const WRITTEN: f64 = 1e-6;
/// Positions nearer to the base than this can't be meant: they lie inside its column, m.
const IN_THE_COLUMN: f64 = 0.01;
/// A TCP nearer to the flange than this, but not on it, can't be meant, m.
const ON_THE_FLANGE: f64 = 2e-3;
/// An angle noted with four digits is off by at most this, rad.
const FOUR_DIGITS: f64 = 1e-3;

/// What is probably wrong with tools, loads, mount and units.
pub(super) fn doubts(arm: &Arm, recipe: &Recipe) -> Vec<Doubt> {
    let mut found = Vec::new();
    for tool in &recipe.tools {
        let name = || tool.name.clone();
        match tool.body {
            Some(body) if body.mass > 0.0 => {
                if body.com == V3::zeros() {
                    found.push(Doubt::CentreAtFlange { tool: name() });
                }
                found.extend(far_centre(Hung::Tool(name()), &body.com));
            }
            _ => found.push(Doubt::ToolWithoutMass { tool: name() }),
        }
        let length = tool.tcp.at.norm();
        if length > 0.0 && length < ON_THE_FLANGE {
            found.push(Doubt::LikeMetres { of: Lengths::Tcp(name()), largest: length });
        }
    }
    for load in &recipe.loads {
        if load.body.mass == 0.0 {
            found.push(Doubt::LoadWithoutMass { load: load.name.clone() });
        }
        found.extend(far_centre(Hung::Load(load.name.clone()), &load.body.com));
    }
    found.extend(mount_by_name(arm, recipe));
    found.extend(joints_like_radians(arm, recipe));
    found.extend(orientations_like_radians(recipe));
    found.extend(positions_like_metres(recipe));
    found
}

fn far_centre(of: Hung, com: &V3) -> Option<Doubt> {
    let distance = com.norm();
    (distance > FAR_CENTRE).then_some(Doubt::FarCentre { of, distance })
}

/// A mount that the name of the recipe or arm denies: a word, and between which leans of the base's z axis it holds, degrees.
const MOUNTS: [(&str, [f64; 2]); 6] = [
    ("floor", [0.0, 60.0]),
    ("pedestal", [0.0, 60.0]),
    ("wall", [30.0, 150.0]),
    ("ceiling", [120.0, 180.0]),
    ("overhead", [120.0, 180.0]),
    ("hanging", [120.0, 180.0]),
];

fn mount_by_name(arm: &Arm, recipe: &Recipe) -> Option<Doubt> {
    let lean = recipe.mount.axes[(2, 2)].clamp(-1.0, 1.0).acos();
    let names = format!("{} {}", recipe.name, arm.name()).to_lowercase();
    let words: Vec<&str> = names.split(|c: char| !c.is_alphanumeric()).collect();
    let said: Vec<_> = MOUNTS.iter().filter(|(word, _)| words.contains(word)).collect();
    let holds = |between: &[f64; 2]| (between[0]..=between[1]).contains(&Angle::rad(lean).as_deg());
    // A name with two of the words ("wall panel to floor") says nothing about the mount.
    match said[..] {
        [(word, between)] if !holds(between) => Some(Doubt::MountByName { word, lean }),
        _ => None,
    }
}

/// Whether an angle in rad is one that nobody writes in degrees: no multiple of a tenth.
fn is_odd(angle: f64) -> bool {
    let tenths = Angle::rad(angle).as_deg() * 10.0;
    (tenths - tenths.round()).abs() > 10.0 * WRITTEN
}

fn largest(values: &[f64]) -> f64 {
    values.iter().fold(0.0, |most, value| if value.abs() <= most { most } else { value.abs() })
}

fn joints_like_radians(arm: &Arm, recipe: &Recipe) -> Option<Doubt> {
    let turning = |j: &usize| arm.joints()[*j].kind == JointKind::Revolute;
    let mut angles = Vec::new();
    for waypoint in &recipe.waypoints {
        if let Taught::Joints(q) = &waypoint.taught {
            angles.extend((0..arm.len()).filter(turning).map(|j| q[j]).filter(|angle| *angle != 0.0));
        }
    }
    // 2 pi as a number of degrees.
    let small = largest(&angles) <= Angle::deg(std::f64::consts::TAU).as_rad();
    let doubted = angles.len() >= ENOUGH && small && angles.iter().any(|angle| is_odd(*angle));
    doubted.then(|| Doubt::LikeRadians { of: Angles::Joints, largest: largest(&angles) })
}

/// Triples such as 3.1416, 0, -0.7854: small, and one of them an eighth of a turn or several, if it is read in radians.
fn orientations_like_radians(recipe: &Recipe) -> Option<Doubt> {
    let mut angles = Vec::new();
    for waypoint in &recipe.waypoints {
        if let Taught::Pose { pose: Given { rotation: Some(rotation), .. }, .. } = &waypoint.taught {
            angles.extend(rotation.rpy());
        }
    }
    let read = |angle: &f64| Angle::rad(*angle).as_deg();
    let eighth = std::f64::consts::FRAC_PI_4;
    let named = |number: f64| {
        let eighths = (number / eighth).round();
        eighths != 0.0 && (number - eighths * eighth).abs() < FOUR_DIGITS
    };
    let small = angles.iter().all(|angle| read(angle).abs() <= std::f64::consts::PI + FOUR_DIGITS);
    let doubted = small && angles.iter().any(|angle| named(read(angle)));
    doubted.then(|| Doubt::LikeRadians { of: Angles::Orientations, largest: largest(&angles) })
}

/// Only poses in base or world count: in a frame of its own a waypoint may well stand at its origin.
fn positions_like_metres(recipe: &Recipe) -> Option<Doubt> {
    let of_base = |given: &Given| given.frame.as_deref().is_none_or(|frame| frame == BASE || frame == WORLD);
    let at: Vec<f64> = recipe
        .waypoints
        .iter()
        .filter_map(|waypoint| match &waypoint.taught {
            Taught::Pose { pose, .. } if of_base(pose) => Some(pose.at),
            _ => None,
        })
        .flat_map(|at| [at.x, at.y, at.z])
        .collect();
    let most = largest(&at);
    let doubted = at.len() >= ENOUGH && most > 0.0 && most < Length::m(IN_THE_COLUMN).as_m();
    doubted.then_some(Doubt::LikeMetres { of: Lengths::Positions, largest: most })
}

use crate::arm::Joints;
use crate::geometry::{Pose, turn_between};
use crate::kinematics::Posture;
use crate::program::frame_in_base;
use crate::review::Judged;
use crate::units::{Angle, Length, Mass};

/// What the cell says of one waypoint.
#[derive(Debug, Clone, PartialEq)]
pub enum Reported {
    /// Joint values, rad or m.
    Joints(Joints),
    /// A pose of the TCP; its orientation counts where `turns`. It stands in the named frame, or in that of the recipe's own pose
    /// (the base for a waypoint taught as joint values).
    Pose {
        /// Where.
        pose: Pose,
        /// Whether the orientation was given.
        turns: bool,
        /// The frame, if named.
        frame: Option<String>,
    },
}

/// One row of a table of points read back from the cell.
#[derive(Debug, Clone, PartialEq)]
pub struct CellPoint {
    /// The waypoint's name.
    pub name: String,
    /// The line of the table, counted from 1.
    pub line: usize,
    /// What it says.
    pub says: Reported,
}

/// A table of points read back from the cell.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct CellTable {
    /// Its rows.
    pub points: Vec<CellPoint>,
}

/// A tool or load as somebody typed it from the cell.
#[derive(Debug, Clone, PartialEq)]
pub struct CellTool {
    /// Its name in the recipe.
    pub name: String,
    /// Its mass, kg.
    pub mass: f64,
    /// Where its TCP stands on the flange, m; not for a load.
    pub tcp: Option<[f64; 3]>,
}

/// By how much a point may differ and still count as the same.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Slack {
    /// For angles.
    pub angle: Angle,
    /// For lengths.
    pub length: Length,
}

impl Default for Slack {
    /// The last digit that a controller's display usually shows, with room for its rounding: from memory.
    fn default() -> Self {
        Self { angle: Angle::deg(0.01), length: Length::mm(0.1) }
    }
}

/// By how much a mass may differ from what was typed, kg: displays show a hundredth (from memory), and half of that may be rounding.
pub const MASS_SLACK: f64 = 0.005;

/// Slack for the digits that a change of units costs, as a share.
const ROUNDING: f64 = 1e-9;

fn within(gap: f64, slack: f64) -> bool {
    gap <= slack * (1.0 + ROUNDING) + f64::EPSILON
}

/// Compares the points that the cell will run with those of a recipe. Yields every difference in words; none where all agree.
pub fn compare_points(judged: &Judged, table: &CellTable, slack: Slack) -> Vec<String> {
    let mut told = Vec::new();
    for (index, waypoint) in judged.recipe.waypoints.iter().enumerate() {
        let mut rows = table.points.iter().filter(|point| point.name == waypoint.name);
        let Some(row) = rows.next() else {
            told.push(format!("waypoint {} \"{}\" is not in the table", index + 1, waypoint.name));
            continue;
        };
        if let Some(again) = rows.next() {
            told.push(format!(
                "waypoint {} \"{}\" is in the table twice, in lines {} and {}",
                index + 1,
                waypoint.name,
                row.line,
                again.line
            ));
        }
        told.extend(
            differs(judged, index, &row.says, slack).map(|how| format!("waypoint {} \"{}\": {how}", index + 1, waypoint.name)),
        );
    }
    for point in table.points.iter().filter(|point| judged.recipe.waypoint_named(&point.name).is_none()) {
        told.push(format!("the table's \"{}\" (line {}) is no waypoint of the recipe", point.name, point.line));
    }
    let named: Vec<usize> = table.points.iter().filter_map(|point| judged.recipe.waypoint_named(&point.name)).collect();
    if !named.is_sorted() {
        told.push("the waypoints stand in another order in the table than in the recipe".to_owned());
    }
    told
}

/// Joint values of a waypoint as the plan has them.
fn planned(judged: &Judged, index: usize) -> Option<Joints> {
    match index {
        0 => judged.plan.segments.first().map(|segment| segment.start),
        _ => judged.plan.arriving(index).map(|segment| segment.end),
    }
}

fn differs(judged: &Judged, index: usize, says: &Reported, slack: Slack) -> Option<String> {
    let Some(q) = planned(judged, index) else { return Some("the plan has no joint values there".to_owned()) };
    match says {
        Reported::Joints(given) => {
            let off: Vec<String> = judged
                .arm
                .joints()
                .iter()
                .enumerate()
                .filter(|(j, joint)| {
                    let most = if joint.kind.value() == crate::units::Dimension::Angle {
                        slack.angle.as_rad()
                    } else {
                        slack.length.as_m()
                    };
                    !within((given[*j] - q[*j]).abs(), most)
                })
                .map(|(j, joint)| {
                    let text = |si: f64| crate::units::Measure::si(si, joint.kind.value()).text(3);
                    format!("{} is {} in the cell, {} in the recipe", joint.name, text(given[j]), text(q[j]))
                })
                .collect();
            (!off.is_empty()).then(|| off.join("; "))
        }
        Reported::Pose { pose, turns, frame } => {
            let own = match &judged.recipe.waypoints[index].taught {
                crate::program::Taught::Pose { pose, .. } => pose.frame.clone(),
                crate::program::Taught::Joints(_) => None,
            };
            let name = frame.clone().or(own).unwrap_or_else(|| crate::program::BASE.to_owned());
            let Some(stands) = frame_in_base(&judged.recipe, &name) else { return Some(format!("there is no frame \"{name}\"")) };
            let wanted = Posture::at(judged.arm.chain(), &q).tcp(&judged.recipe.hanging_at(index).arriving().tcp);
            let given = stands.then(pose);
            let gap = (given.at - wanted.at).norm();
            let (_, turn) = turn_between(&wanted.axes, &given.axes);
            let turned = *turns && !within(turn.abs(), slack.angle.as_rad());
            if within(gap, slack.length.as_m()) && !turned {
                return None;
            }
            let by = Length::m(gap).measure().text(3);
            Some(if *turns {
                format!("the cell's pose is {by} and {} from the recipe's", Angle::rad(turn.abs()).measure().text(3))
            } else {
                format!("the cell's position is {by} from the recipe's")
            })
        }
    }
}

/// Compares tools and loads as typed from the cell with those of a recipe. Yields every difference in words.
pub fn compare_typed(judged: &Judged, tools: &[CellTool], loads: &[CellTool], slack: Slack) -> Vec<String> {
    let mut told = Vec::new();
    let mass = |kind: &str, name: &str, typed: f64, given: Option<f64>| {
        let given = given.unwrap_or(0.0);
        let says = format!(
            "{kind} \"{name}\" weighs {} in the cell, {} in the recipe",
            Mass::kg(typed).measure().text(3),
            Mass::kg(given).measure().text(3)
        );
        (!within((typed - given).abs(), MASS_SLACK)).then_some(says)
    };
    for typed in tools {
        let Some(tool) = judged.recipe.tools.iter().find(|tool| tool.name == typed.name) else {
            told.push(format!("the recipe has no tool \"{}\"", typed.name));
            continue;
        };
        told.extend(mass("tool", &tool.name, typed.mass, tool.body.map(|body| body.mass)));
        if let Some(tcp) = typed.tcp {
            let gap = (crate::geometry::V3::from(tcp) - tool.tcp.at).norm();
            if !within(gap, slack.length.as_m()) {
                told.push(format!(
                    "tool \"{}\" has its TCP {} from where the recipe puts it",
                    tool.name,
                    Length::m(gap).measure().text(3)
                ));
            }
        }
    }
    for typed in loads {
        match judged.recipe.loads.iter().find(|load| load.name == typed.name) {
            Some(load) => told.extend(mass("load", &load.name, typed.mass, Some(load.body.mass))),
            None => told.push(format!("the recipe has no load \"{}\"", typed.name)),
        }
    }
    told
}

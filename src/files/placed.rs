use crate::geometry::{Pose, Rotation, V3};
use crate::program::{BASE, Given};

use super::table::Table;

/// How far a quaternion's or an axis's length may be from 1, as people type 0.707.
const UNIT_SLACK: f64 = 1e-2;

/// A pose in a table of its own: `xyz`, and `rpy` or `quaternion` where it turns.
pub(super) fn own_pose(table: &Table<'_>) -> Pose {
    table.only(&["xyz", "rpy", "quaternion"]);
    pose(table)
}

/// The pose that a table's keys `xyz`, `rpy` and `quaternion` give; without the last two it does not turn.
pub(super) fn pose(table: &Table<'_>) -> Pose {
    Pose::new(point(table), rotation(table).unwrap_or_else(Rotation::identity))
}

/// A pose as a waypoint gives it, with the frame that it is given in.
pub(super) fn given(table: &Table<'_>) -> Given {
    table.only(&["xyz", "rpy", "quaternion", "frame"]);
    Given { at: point(table), rotation: rotation(table), frame: frame(table) }
}

/// A point on the way: `xyz` and `frame`.
pub(super) fn via(table: &Table<'_>) -> Given {
    table.only(&["xyz", "frame"]);
    Given { at: point(table), rotation: None, frame: frame(table) }
}

/// Turns mm into m.
pub(super) fn metres(mm: [f64; 3]) -> V3 {
    V3::from(mm) / 1000.0
}

/// `vector` at length 1, if it was meant to be; otherwise as it is, with its length.
pub(super) fn unit(vector: V3) -> Result<V3, f64> {
    let length = vector.norm();
    if (length - 1.0).abs() <= UNIT_SLACK { Ok(vector / length) } else { Err(length) }
}

fn point(table: &Table<'_>) -> V3 {
    table.numbers("xyz", "mm").map_or_else(V3::zeros, metres)
}

fn frame(table: &Table<'_>) -> Option<String> {
    table.maybe_text("frame").filter(|name| *name != BASE).map(str::to_owned)
}

/// The orientation, `None` where none is given. A stand-in where it can't be taken, so that it isn't called missing.
fn rotation(table: &Table<'_>) -> Option<Rotation> {
    let rpy = table.maybe_numbers("rpy").map(Rotation::from_rpy_deg);
    let quaternion = table.maybe_numbers("quaternion").map(|wxyz| of_quaternion(table, wxyz));
    match (table.has("rpy"), table.has("quaternion")) {
        (true, true) => {
            table.complain("quaternion", "rpy and quaternion both give the orientation; keep one of them");
            Some(Rotation::identity())
        }
        (false, false) if table.is_bad("rpy") || table.is_bad("quaternion") => Some(Rotation::identity()),
        (false, false) => None,
        _ => rpy.or(quaternion).or(Some(Rotation::identity())),
    }
}

fn of_quaternion(table: &Table<'_>, wxyz: [f64; 4]) -> Rotation {
    let length = wxyz.iter().map(|v| v * v).sum::<f64>().sqrt();
    let rotation = Rotation::from_wxyz(wxyz).filter(|_| (length - 1.0).abs() <= UNIT_SLACK);
    rotation.unwrap_or_else(|| {
        table.complain("quaternion", format_args!("quaternion has length {length:.4}; it must be 1"));
        Rotation::identity()
    })
}

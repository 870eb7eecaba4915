use crate::arm::Task;
use crate::geometry::{Pose, turn_between};

/// What is still missing from `now` to `target`, base axes: metres along, then the rotation vector (axis times angle, rad).
/// Good for gaps of any size.
pub fn pose_error(now: &Pose, target: &Pose) -> [f64; 6] {
    let d = target.at - now.at;
    let (axis, angle) = turn_between(&now.axes, &target.axes);
    let turn = axis * angle;
    [d.x, d.y, d.z, turn.x, turn.y, turn.z]
}

/// Like [`pose_error`] but cheap and for small gaps: the turning part is axis times the *sine* of the angle.
#[inline]
pub fn small_error(now: &Pose, target: &Pose) -> [f64; 6] {
    let d = target.at - now.at;
    let turn = (now.axes.column(0).cross(&target.axes.column(0))
        + now.axes.column(1).cross(&target.axes.column(1))
        + now.axes.column(2).cross(&target.axes.column(2)))
        * 0.5;
    [d.x, d.y, d.z, turn.x, turn.y, turn.z]
}

/// Whether the task's rows of an error are within `metres` and `radians`; never with NaN.
pub fn within(error: &[f64; 6], task: &Task, metres: f64, radians: f64) -> bool {
    task.rows().iter().all(|&row| error[row].abs() <= if row < 3 { metres } else { radians })
}

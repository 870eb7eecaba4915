use std::ops::RangeInclusive;

use crate::arm::Arm;
use crate::geometry::{Pose, V3};
use crate::kinematics::{Posture, Reached, reach};
use crate::program::{Arrive, Edit, Given, Recipe, Taught, frame_in_base};

/// Waypoints `stretch` (counted from 0, both ends in it) shifted by `offset`, m, along the axes of `frame` (`base`, `world` or one of
/// the recipe). Poses and via points are shifted as they are given; joint values are found anew for the shifted TCP, nearest to those
/// that were taught. The pose that the cell displayed there is dropped, for it belongs to the old point.
///
/// # Errors
/// If there is no such stretch or frame, or if joint values that reach a shifted point were not found: which waypoint, and how far
/// the arm comes.
pub fn shift(recipe: &Recipe, arm: &Arm, stretch: RangeInclusive<usize>, offset: V3, frame: &str) -> Result<Edit, String> {
    let (first, last) = stretch.into_inner();
    if first > last || last >= recipe.waypoints.len() {
        return Err(format!("there is no such stretch; there are {} waypoints", recipe.waypoints.len()));
    }
    if !offset.iter().all(|v| v.is_finite()) {
        return Err("the offset is not a number".to_owned());
    }
    let axes = frame_in_base(recipe, frame).ok_or_else(|| format!("there is no frame \"{frame}\""))?.axes;
    let in_base = axes * offset;
    let mut edits = Vec::new();
    for index in first..=last {
        let mut waypoint = recipe.waypoints[index].clone();
        match &mut waypoint.taught {
            Taught::Pose { pose, .. } => shift_given(recipe, pose, &in_base, frame, &offset)?,
            Taught::Joints(q) => {
                let tcp = recipe.hanging_at(index).arriving().tcp;
                let now = Posture::at(arm.chain(), q).tcp(&tcp);
                let target = Pose { axes: now.axes, at: now.at + in_base };
                match reach(arm, &tcp, &target, q) {
                    Reached::Yes { q: found, .. } => *q = found,
                    Reached::No { gap, .. } => {
                        let missing = V3::new(gap[0], gap[1], gap[2]).norm() * 1000.0;
                        return Err(format!(
                            "waypoint {} \"{}\": no joint values were found that reach the shifted point; the nearest are {missing:.1} mm off",
                            index + 1,
                            waypoint.name
                        ));
                    }
                }
            }
        }
        if let Some(Arrive::Arc { via, .. }) = &mut waypoint.arrive {
            shift_given(recipe, via, &in_base, frame, &offset)?;
        }
        waypoint.shown = None;
        edits.push(Edit::Change { index, waypoint: Box::new(waypoint) });
    }
    Ok(if edits.len() == 1 { edits.remove(0) } else { Edit::Together(edits) })
}

/// Shifts a point in the axes that it is given in; exactly, where those are the axes of the offset.
fn shift_given(recipe: &Recipe, given: &mut Given, in_base: &V3, frame: &str, offset: &V3) -> Result<(), String> {
    let own = given.frame.as_deref().unwrap_or(crate::program::BASE);
    if own == frame {
        given.at += offset;
        return Ok(());
    }
    let axes = frame_in_base(recipe, own).ok_or_else(|| format!("there is no frame \"{own}\""))?.axes;
    given.at += axes.transpose() * in_base;
    Ok(())
}

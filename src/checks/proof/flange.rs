use crate::checks::channel::{CHANNELS, Channel};
use crate::checks::{Check, Meter};
use crate::geometry::{M3, V3};
use crate::units::{Dimension, STANDARD_GRAVITY};

use super::ball::Moving;
use super::bounds::{Asked, asked_of};
use super::newton_euler::{Tensor, Ways};
use super::view::{Motion, View};

/// Bounds of what tool and load do to the flange and to the wrist axes over a stretch, seen from the last link, on which both are
/// fixed: there only the axes move, and only by the joints beyond them.
pub(super) fn bound(meter: &Meter, needs: &[usize], view: &View, ways: &Ways, half: f64, slack: f64, asked: &mut Asked) {
    let mut motion: Option<(View, Motion)> = None;
    for slot in meter.slots(Check::Flange).filter(|slot| needs.contains(slot) && *slot < CHANNELS) {
        let channel = meter.channel(slot);
        let most = match channel.joint {
            None => view.carried.mass(),
            Some(joint) => {
                let (view, motion) = motion.get_or_insert_with(|| {
                    let seen = view.seen_from_the_last_link();
                    let motion = seen.motion(ways.slope, ways.slope_spread, half, slack);
                    (seen, motion)
                });
                at_axis(channel, view, motion, joint, half)
            }
        };
        asked[slot] = asked_of(channel, most);
    }
}

/// The most that the moment of weight or the inertia about an axis can be.
fn at_axis(channel: &Channel, view: &View, motion: &Motion, j: usize, half: f64) -> f64 {
    let carried = view.carried;
    let flange = view.at.posture.flange();
    let lever = |com: &V3| lever(view, motion, j, &flange.point(com), half);
    if channel.of == Dimension::Torque {
        let mass = carried.mass();
        return if mass > 0.0 { mass * STANDARD_GRAVITY * lever(&(carried.moment() / mass)) } else { 0.0 };
    }
    let turned = half * motion.z[j].change.most();
    let bodies = [
        (carried.tool_mass, &carried.tool_com, &carried.tool_inertia),
        (carried.load_mass, &carried.load_com, &carried.load_inertia),
    ];
    let axis = flange.axes.transpose() * view.z[j];
    bodies.iter().map(|(mass, com, tensor)| mass * lever(com).powi(2) + about(tensor, &axis, turned)).sum()
}

/// The farthest that a point of the last link (base axes in the middle, m) can be from the axis of joint `j`.
pub(super) fn lever(view: &View, motion: &Motion, j: usize, point: &V3, half: f64) -> f64 {
    let reference = view.at.tcp.at - view.to_tcp;
    let offset = Moving::fixed(point - reference, &motion.turning[view.chain.len], half, 0.0);
    let across = motion.z[j].cross(&motion.r[j].plus(&offset));
    let (v, c) = (across.at.centre, across.change.centre * half);
    (v + c).norm().max((v - c).norm()) + half * across.change.radius
}

/// The most that `z I z` can be for a unit vector that turned by `moved` rad from `axis`. What it changes by for each radian is
/// `2 z' I z`, of which the part along z is none: never more than the distance of the largest and the least principal moment.
fn about(tensor: &M3, axis: &V3, moved: f64) -> f64 {
    axis.dot(&(tensor * axis)) + moved.min(1.0) * Tensor::of(*tensor).apart
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::turn_about;

    #[test]
    fn the_inertia_about_a_moving_axis_is_met_to_the_last_percent() {
        // Half-way between the principal axes of 2 and 1 the moment changes by the whole of their distance for each radian.
        let tensor = M3::from_diagonal(&V3::new(2.0, 1.0, 1.4));
        let axis = V3::new(1.0, 1.0, 0.0).normalize();
        let moved = 1e-3;
        let there = turn_about(&V3::z(), -moved) * axis;
        let [here, there] = [axis, there].map(|axis| axis.dot(&(tensor * axis)));
        let bound = about(&tensor, &axis, moved);
        assert!(there <= bound && there - here > 0.99 * (bound - here), "{here} {there} {bound}");
    }
}

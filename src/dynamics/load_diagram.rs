use crate::kinematics::Posture;
use crate::program::Carried;
use crate::units::STANDARD_GRAVITY;

/// What tool and load do to one wrist axis, as load diagrams tell it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AtAxis {
    /// Distance of their common centre from the axis, m.
    pub lever: f64,
    /// Their weight times that distance, N·m: the most that it can be, with the weight square to the lever.
    pub moment: f64,
    /// Their moment of inertia about the axis, kg·m².
    pub inertia: f64,
}

/// What tool and load do to the axis of joint `j`. Depends on the joints beyond it only.
pub fn at_axis(posture: &Posture, carried: &Carried, j: usize) -> AtAxis {
    let (z, o, flange) = (posture.axis(j), posture.origin(j), posture.flange());
    let mass = carried.mass();
    let lever = if mass > 0.0 { z.cross(&(flange.point(&(carried.moment() / mass)) - o)).norm() } else { 0.0 };
    // Steiner's theorem for each of the two.
    let bodies =
        [(carried.tool_mass, carried.tool_com, carried.tool_inertia), (carried.load_mass, carried.load_com, carried.load_inertia)];
    let axis = flange.axes.transpose() * z;
    let inertia = bodies
        .iter()
        .map(|(mass, com, tensor)| axis.dot(&(tensor * axis)) + mass * z.cross(&(flange.point(com) - o)).norm_squared())
        .sum();
    AtAxis { lever, moment: mass * STANDARD_GRAVITY * lever, inertia }
}

use crate::arm::{Chain, Drive, Joints};
use crate::geometry::{M3, V3};
use crate::kinematics::Posture;
use crate::program::Carried;

use super::Wrench;

/// How the joints move at an instant: rates and accelerations, SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Going {
    /// Rates, rad/s or m/s.
    pub rates: Joints,
    /// Accelerations, rad/s² or m/s².
    pub accelerations: Joints,
}

impl Going {
    /// An arm of `len` joints that stands still.
    pub fn still(len: usize) -> Self {
        Self { rates: Joints::zeros(len), accelerations: Joints::zeros(len) }
    }
}

/// Moving torque of links, tool, load and process force: what each drive must supply so that the arm moves as told, N·m (N for a
/// sliding joint), positive in the sense of the joint's value. Without rotors, friction and balancers, which belong to the joints
/// alone.
///
/// Recursive Newton-Euler in base axes: outwards every link's turning rate, its change, and the acceleration of its axis system,
/// where gravity is an acceleration of the base the other way; inwards the forces and torques that this takes. `gravity` in base
/// axes, m/s²; `push` is what the tool exerts on the work. At rest it is the holding torque.
#[inline]
pub fn moving_torque(
    chain: &Chain,
    posture: &Posture,
    carried: &Carried,
    gravity: &V3,
    push: Option<&Wrench>,
    going: &Going,
) -> Joints {
    let n = chain.len;
    // What each link takes: a force, and a torque about its axis point, base axes.
    let mut force = [V3::zeros(); crate::arm::MAX_JOINTS];
    let mut torque = [V3::zeros(); crate::arm::MAX_JOINTS];
    let (mut turning, mut change, mut at, mut accel) = (V3::zeros(), V3::zeros(), V3::zeros(), -gravity);
    for j in 0..n {
        let (z, o) = (posture.axis(j), posture.origin(j));
        let (rate, speeding) = (going.rates[j], going.accelerations[j]);
        let step = o - at;
        accel += change.cross(&step) + turning.cross(&turning.cross(&step));
        if chain.turns[j] {
            change += z * speeding + turning.cross(&z) * rate;
            turning += z * rate;
        } else {
            accel += z * speeding + turning.cross(&z) * (2.0 * rate);
        }
        at = o;
        let mut takes = |mass: f64, centre: V3, axes: &M3, inertia: &M3| {
            let lever = centre - o;
            let pull = (accel + change.cross(&lever) + turning.cross(&turning.cross(&lever))) * mass;
            // Multiplied from the right, so that no tensor has to be turned as a whole.
            let turned = |v: &V3| axes * (inertia * (axes.transpose() * v));
            force[j] += pull;
            torque[j] += lever.cross(&pull) + turned(&change) + turning.cross(&turned(&turning));
        };
        let frame = posture.frame(j);
        takes(chain.mass[j], frame.point(&chain.com[j]), &frame.axes, &chain.inertia[j]);
        if j + 1 == n {
            let flange = posture.flange();
            takes(carried.tool_mass, flange.point(&carried.tool_com), &flange.axes, &carried.tool_inertia);
            takes(carried.load_mass, flange.point(&carried.load_com), &flange.axes, &carried.load_inertia);
            if let Some(push) = push {
                force[j] += push.force;
                torque[j] += push.torque + (flange.point(&carried.tcp.at) - o).cross(&push.force);
            }
        }
    }
    let mut asked = Joints::zeros(n);
    let (mut whole, mut moment) = (V3::zeros(), V3::zeros());
    for j in (0..n).rev() {
        if j + 1 < n {
            moment += (posture.origin(j + 1) - posture.origin(j)).cross(&whole);
        }
        whole += force[j];
        moment += torque[j];
        let z = posture.axis(j);
        asked[j] = if chain.turns[j] { z.dot(&moment) } else { z.dot(&whole) };
    }
    asked
}

/// What a joint's drive adds to the moving torque of links, tool and load: what rotor and balancer ask, N·m or N, at a joint value
/// and an acceleration, SI.
#[inline]
pub fn drive_torque(drive: &Drive, value: f64, acceleration: f64) -> f64 {
    drive.rotor_inertia() * acceleration - drive.balance(value)
}

/// A demand with friction on top where that makes it larger. Friction is never credited: a new or warm gear has less of it than the
/// arm file says, so the worst of all frictions between none and the given one counts, which is one of the two.
#[inline]
pub fn with_friction(demand: f64, friction: f64) -> f64 {
    if (demand + friction).abs() > demand.abs() { demand + friction } else { demand }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn friction_may_raise_a_demand_but_never_lower_it() {
        assert_eq!(with_friction(50.0, 6.0), 56.0);
        assert_eq!(with_friction(-50.0, 6.0), -50.0);
        assert_eq!(with_friction(-2.0, 6.0), 4.0);
        assert_eq!(with_friction(0.0, -6.0), -6.0);
        assert!(with_friction(f64::NAN, 6.0).is_nan());
    }
}

use crate::arm::{Chain, Joints};
use crate::geometry::V3;
use crate::kinematics::Posture;
use crate::program::Carried;

/// A wrench is a force and a torque at the TCP, base axes, N and N·m. Here always what the *tool exerts on the work*; the work
/// pushes back with the opposite.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wrench {
    /// Force, N.
    pub force: V3,
    /// Torque, N·m.
    pub torque: V3,
}

/// Holding torque: what each drive must supply so that the arm stands still, N·m (N for a sliding joint), positive in the sense
/// of the joint's value.
///
/// By virtual work it is minus what gravity does to the joint, plus what the tool exerts on the work: masses beyond joint j with
/// total mass M and mass moment S about its origin ask `-z · (S x g)` of a revolute joint and `-M z · g` of a prismatic one; the
/// wrench asks `z · (torque + r x force)` or `z · force`. `gravity` in base axes, m/s². Masses are gathered from the tip inwards.
#[inline]
pub fn holding_torque(chain: &Chain, posture: &Posture, carried: &Carried, gravity: &V3, push: Option<&Wrench>) -> Joints {
    let mut torque = Joints::zeros(chain.len);
    let flange = posture.flange();
    // Mass moment about the base origin of all that is beyond the joint, kg·m.
    let mut mass = carried.mass();
    let mut moment = flange.axes * carried.moment() + flange.at * mass;
    for j in (0..chain.len).rev() {
        mass += chain.mass[j];
        moment += posture.frame(j).point(&chain.com[j]) * chain.mass[j];
        let z = posture.axis(j);
        torque[j] =
            if chain.turns[j] { -z.dot(&(moment - posture.origin(j) * mass).cross(gravity)) } else { -z.dot(gravity) * mass };
    }
    if let Some(push) = push {
        let tcp = flange.point(&carried.tcp.at);
        for j in 0..chain.len {
            let z = posture.axis(j);
            torque[j] += if chain.turns[j] {
                z.dot(&(push.torque + (tcp - posture.origin(j)).cross(&push.force)))
            } else {
                z.dot(&push.force)
            };
        }
    }
    torque
}

//! Arms from screw axes, the form in which the companion package of a textbook gives its examples.

use elbowroom::arm::{Arm, JointKind, Joints, Placement, TaskRow};
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::{Jacobian, Posture};

/// One screw: its joint, how much that moves for a unit of the screw's value (the length of the screw's turning part), and the
/// sliding joint of its pitch, with that pitch in m/rad.
struct Slot {
    joint: usize,
    scale: f64,
    pitch: Option<(usize, f64)>,
}

/// An arm from screw axes (turning part before moving part, base axes, at joint values 0), and where its end is on the flange.
///
/// All axis systems stand parallel to the base at joint values 0, each with its origin on its axis. A screw with a pitch, which
/// no joint of ours has, becomes a turning joint and a sliding one along the same axis that moves with it; one whose direction is
/// not of unit length becomes a joint that moves so many times as far.
pub struct ScrewArm {
    /// The arm.
    pub arm: Arm,
    /// Its end on the flange.
    pub tcp: Pose,
    slots: Vec<Slot>,
}

impl ScrewArm {
    /// `end` is where the end stands at joint values 0; `masses` are kg and centres (base, at joint values 0), one a screw or none.
    pub fn of(screws: &[[f64; 6]], end: &Pose, masses: &[(f64, V3)], rows: &[TaskRow]) -> Self {
        let mut joints = Vec::new();
        let mut slots = Vec::new();
        let mut before = V3::zeros();
        let mut add = |kind: JointKind, axis: V3, at: V3| {
            let place = Pose { axes: M3::identity(), at: at - before };
            before = at;
            joints.push(super::joint(kind, Placement::Axis { place, axis }));
            joints.len() - 1
        };
        for screw in screws {
            let (w, v) = (V3::new(screw[0], screw[1], screw[2]), V3::new(screw[3], screw[4], screw[5]));
            let scale = w.norm();
            if scale == 0.0 {
                slots.push(Slot { joint: add(JointKind::Prismatic, v, V3::zeros()), scale: 1.0, pitch: None });
                continue;
            }
            let (w, v) = (w / scale, v / scale);
            let pitch = w.dot(&v);
            // v = -w x p + pitch w, so the point of the axis nearest to the origin is w x v.
            let joint = add(JointKind::Revolute, w, w.cross(&v));
            let pitch = (pitch != 0.0).then(|| (add(JointKind::Prismatic, w, w.cross(&v)), pitch));
            slots.push(Slot { joint, scale, pitch });
        }
        let mut at = V3::zeros();
        let origins: Vec<V3> = joints
            .iter()
            .map(|joint| {
                let Placement::Axis { place, .. } = joint.placement else { unreachable!("made above") };
                at += place.at;
                at
            })
            .collect();
        for (slot, (mass, com)) in slots.iter().zip(masses) {
            let last = slot.pitch.map_or(slot.joint, |(slide, _)| slide);
            joints[last] = super::weighing(joints[last].clone(), *mass, (com - origins[last]).into());
        }
        let tcp = Pose { axes: end.axes, at: end.at - at };
        Self { arm: super::arm(joints, rows), tcp, slots }
    }

    /// Joint values of the arm for one value a screw.
    pub fn q(&self, screw_values: &[f64]) -> Joints {
        let mut q = Joints::zeros(self.arm.len());
        for (slot, value) in self.slots.iter().zip(screw_values) {
            q[slot.joint] = slot.scale * value;
            if let Some((slide, pitch)) = slot.pitch {
                q[slide] = pitch * slot.scale * value;
            }
        }
        q
    }

    /// The whole arm.
    pub fn posture(&self, screw_values: &[f64]) -> Posture {
        Posture::at(self.arm.chain(), &self.q(screw_values))
    }

    /// Where the end stands.
    pub fn end(&self, screw_values: &[f64]) -> Pose {
        self.posture(screw_values).tcp(&self.tcp)
    }

    /// The Jacobian of `point` (base) by the screws' values, in the package's order: turning before moving; one column a screw.
    pub fn jacobian(&self, screw_values: &[f64], point: &V3) -> Vec<[f64; 6]> {
        let jacobian = Jacobian::at(self.arm.chain(), &self.posture(screw_values), point);
        let column = |slot: &Slot| {
            let mut sum = jacobian.columns()[slot.joint];
            if let Some((slide, pitch)) = slot.pitch {
                sum.iter_mut().zip(jacobian.columns()[slide]).for_each(|(s, c)| *s += pitch * c);
            }
            let [x, y, z, a, b, c] = sum.map(|s| s * slot.scale);
            [a, b, c, x, y, z]
        };
        self.slots.iter().map(column).collect()
    }

    /// What the screws ask by virtual work, from what the arm's joints ask.
    pub fn efforts(&self, joints: &Joints) -> Vec<f64> {
        let effort =
            |slot: &Slot| slot.scale * (joints[slot.joint] + slot.pitch.map_or(0.0, |(slide, pitch)| pitch * joints[slide]));
        self.slots.iter().map(effort).collect()
    }
}

//! Arms from screw axes, the form in which the companion package of a textbook gives its examples.

use elbowroom::arm::{Arm, JointKind, Joints, Placement, TaskRow};
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::{Jacobian, Posture};

/// An arm from screw axes (turning part before moving part, base axes, at joint values 0), and where its end is on the flange.
///
/// All axis systems stand parallel to the base at joint values 0, each with its origin on its axis. A screw with a pitch, which
/// no joint of ours has, becomes a turning joint and a sliding one along the same axis that moves with it.
pub struct ScrewArm {
    /// The arm.
    pub arm: Arm,
    /// Its end on the flange.
    pub tcp: Pose,
    /// For each screw its joint and the joint of its pitch, with that pitch in m/rad.
    joints: Vec<(usize, Option<(usize, f64)>)>,
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
            if w.norm() == 0.0 {
                slots.push((add(JointKind::Prismatic, v, V3::zeros()), None));
                continue;
            }
            let pitch = w.dot(&v);
            // v = -w x p + pitch w, so the point of the axis nearest to the origin is w x v.
            let turn = add(JointKind::Revolute, w, w.cross(&v));
            slots.push((turn, (pitch != 0.0).then(|| (add(JointKind::Prismatic, w, w.cross(&v)), pitch))));
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
        for ((turn, pitch), (mass, com)) in slots.iter().zip(masses) {
            let last = pitch.map_or(*turn, |(slide, _)| slide);
            joints[last] = super::weighing(joints[last].clone(), *mass, (com - origins[last]).into());
        }
        let tcp = Pose { axes: end.axes, at: end.at - at };
        Self { arm: super::arm(joints, rows), tcp, joints: slots }
    }

    /// Joint values of the arm for one value a screw.
    pub fn q(&self, screw_values: &[f64]) -> Joints {
        let mut q = Joints::zeros(self.arm.len());
        for ((turn, pitch), value) in self.joints.iter().zip(screw_values) {
            q[*turn] = *value;
            if let Some((slide, pitch)) = pitch {
                q[*slide] = pitch * value;
            }
        }
        q
    }

    /// Where the end stands.
    pub fn end(&self, screw_values: &[f64]) -> Pose {
        Posture::at(self.arm.chain(), &self.q(screw_values)).tcp(&self.tcp)
    }

    /// The Jacobian of `point` (base) by the screws' values, in the package's order: turning before moving; one column a screw.
    pub fn jacobian(&self, screw_values: &[f64], point: &V3) -> Vec<[f64; 6]> {
        let posture = Posture::at(self.arm.chain(), &self.q(screw_values));
        let jacobian = Jacobian::at(self.arm.chain(), &posture, point);
        let column = |(turn, pitch): &(usize, Option<(usize, f64)>)| {
            let mut sum = jacobian.columns()[*turn];
            if let Some((slide, pitch)) = pitch {
                sum.iter_mut().zip(jacobian.columns()[*slide]).for_each(|(s, c)| *s += pitch * c);
            }
            [sum[3], sum[4], sum[5], sum[0], sum[1], sum[2]]
        };
        self.joints.iter().map(column).collect()
    }
}

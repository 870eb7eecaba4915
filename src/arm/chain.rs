use crate::geometry::{M3, Pose, V3};

use super::{Joint, JointKind, MAX_JOINTS};

/// A chain is the arm's geometry in the form that every computation uses: before each joint a fixed pose, then a motion about or
/// along the local z axis.
#[derive(Debug, Clone)]
pub struct Chain {
    /// Number of joints.
    pub len: usize,
    /// From the moved axis system of joint j-1 (the base for j = 0) to the unmoved one of joint j.
    pub fixed: [Pose; MAX_JOINTS],
    /// Which joints turn (the others slide).
    pub turns: [bool; MAX_JOINTS],
    /// From the moved axis system of the last joint to the flange.
    pub flange: Pose,
    /// Link masses, kg; 0 where the arm file gives none.
    pub mass: [f64; MAX_JOINTS],
    /// Link centres of mass in the moved axis system of their joint, m.
    pub com: [V3; MAX_JOINTS],
    /// Link inertias about their centres in the moved axis system of their joint, kg·m²; zero where the arm file gives none.
    pub inertia: [M3; MAX_JOINTS],
}

impl Chain {
    pub(super) fn of(joints: &[Joint]) -> Self {
        let mut chain = Self {
            len: joints.len(),
            fixed: [Pose::identity(); MAX_JOINTS],
            turns: [true; MAX_JOINTS],
            flange: Pose::identity(),
            mass: [0.0; MAX_JOINTS],
            com: [V3::zeros(); MAX_JOINTS],
            inertia: [M3::zeros(); MAX_JOINTS],
        };
        let mut link = Pose::identity();
        for (j, joint) in joints.iter().enumerate() {
            let around = joint.placement.around();
            chain.fixed[j] = link.then(&around.before);
            chain.turns[j] = joint.kind == JointKind::Revolute;
            if let Some(body) = &joint.link {
                chain.mass[j] = body.mass;
                chain.com[j] = around.after.point(&body.com);
                let tensor = body.inertia.unwrap_or_else(M3::zeros);
                chain.inertia[j] = around.after.axes * tensor * around.after.axes.transpose();
            }
            link = around.after;
        }
        chain.flange = link;
        chain
    }
}

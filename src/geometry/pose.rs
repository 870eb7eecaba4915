use super::{M3, Rotation, V3};

/// A pose is where a coordinate system stands in another: its axes (columns of `axes`) and its origin `at`, m.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pose {
    /// Rotation matrix; its columns are the axes of the posed system.
    pub axes: M3,
    /// Origin of the posed system, m.
    pub at: V3,
}

impl Pose {
    /// Both systems coincide.
    pub fn identity() -> Self {
        Self { axes: M3::identity(), at: V3::zeros() }
    }

    /// From an origin in m and a rotation.
    pub fn new(at: V3, rotation: Rotation) -> Self {
        Self { axes: rotation.matrix(), at }
    }

    /// The pose `next`, given in this one's system, in the system that this one is given in.
    #[must_use]
    pub fn then(&self, next: &Self) -> Self {
        Self { axes: self.axes * next.axes, at: self.axes * next.at + self.at }
    }

    /// Where the outer system stands in this one.
    #[must_use]
    pub fn inverse(&self) -> Self {
        let axes = self.axes.transpose();
        Self { axes, at: -(axes * self.at) }
    }

    /// A point given in this system, in the outer one, m.
    pub fn point(&self, p: &V3) -> V3 {
        self.axes * p + self.at
    }

    /// The rotation of this pose.
    pub fn rotation(&self) -> Rotation {
        Rotation::from_matrix(&self.axes)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_pose_and_its_inverse_cancel() {
        let pose = Pose::new(V3::new(0.1, -2.0, 3.0), Rotation::from_rpy(0.3, -0.8, 2.0));
        let both = pose.then(&pose.inverse());
        assert!((both.axes - M3::identity()).norm() < 1e-15);
        assert!(both.at.norm() < 1e-15);
        assert!((pose.inverse().point(&pose.point(&V3::x())) - V3::x()).norm() < 1e-15);
    }
}

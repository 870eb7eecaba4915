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
    #[inline]
    pub fn then(&self, next: &Self) -> Self {
        Self { axes: product(&self.axes, &next.axes), at: self.point(&next.at) }
    }

    /// Where the outer system stands in this one.
    #[must_use]
    pub fn inverse(&self) -> Self {
        let axes = self.axes.transpose();
        Self { axes, at: -(axes * self.at) }
    }

    /// A point given in this system, in the outer one, m.
    #[inline]
    pub fn point(&self, p: &V3) -> V3 {
        let a = &self.axes;
        V3::new(
            a.m11 * p.x + a.m12 * p.y + a.m13 * p.z + self.at.x,
            a.m21 * p.x + a.m22 * p.y + a.m23 * p.z + self.at.y,
            a.m31 * p.x + a.m32 * p.y + a.m33 * p.z + self.at.z,
        )
    }

    /// The rotation of this pose.
    pub fn rotation(&self) -> Rotation {
        Rotation::from_matrix(&self.axes)
    }
}

/// The product of two matrices, written out: it stands in the innermost loops, where the library's general product costs thrice
/// as much.
#[inline]
fn product(a: &M3, b: &M3) -> M3 {
    let (a, b): (&[[f64; 3]; 3], &[[f64; 3]; 3]) = (&a.data.0, &b.data.0);
    let mut columns = [[0.0; 3]; 3];
    for (column, b) in columns.iter_mut().zip(b) {
        for k in 0..3 {
            column[k] = a[0][k] * b[0] + a[1][k] * b[1] + a[2][k] * b[2];
        }
    }
    M3::from_array_storage(nalgebra::ArrayStorage(columns))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_pose_and_its_inverse_cancel() {
        let pose = Pose::new(V3::new(0.1, -2.0, 3.0), Rotation::from_rpy(0.3, -0.8, 2.0));
        let other = Pose::new(V3::new(-1.0, 0.4, 0.2), Rotation::from_rpy(-2.0, 0.1, 0.7));
        assert!((pose.then(&other).axes - pose.axes * other.axes).norm() < 1e-15);
        let both = pose.then(&pose.inverse());
        assert!((both.axes - M3::identity()).norm() < 1e-15);
        assert!(both.at.norm() < 1e-15);
        assert!((pose.inverse().point(&pose.point(&V3::x())) - V3::x()).norm() < 1e-15);
    }
}

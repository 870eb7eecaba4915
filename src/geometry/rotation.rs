use nalgebra::{Rotation3, Unit, UnitQuaternion};

use super::{M3, V3};

/// A rotation between two coordinate systems, kept as a unit quaternion.
///
/// Triples are roll, pitch, yaw: turns about the *fixed* x, then y, then z axis, so the matrix is `Rz(yaw) Ry(pitch) Rx(roll)`.
/// ISO 9787 leaves the order of the three angles open; this one is used everywhere here.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rotation(UnitQuaternion<f64>);

impl Rotation {
    /// No rotation.
    pub fn identity() -> Self {
        Self(UnitQuaternion::identity())
    }

    /// From roll, pitch, yaw about the fixed x, y, z axes, rad.
    pub fn from_rpy(roll: f64, pitch: f64, yaw: f64) -> Self {
        Self(UnitQuaternion::from_euler_angles(roll, pitch, yaw))
    }

    /// From roll, pitch, yaw in degrees.
    pub fn from_rpy_deg(rpy: [f64; 3]) -> Self {
        let [r, p, y] = rpy.map(f64::to_radians);
        Self::from_rpy(r, p, y)
    }

    /// From a quaternion w, x, y, z, which is normalised; `None` if it is zero or not finite.
    pub fn from_wxyz([w, x, y, z]: [f64; 4]) -> Option<Self> {
        let q = nalgebra::Quaternion::new(w, x, y, z);
        let norm = q.norm();
        (norm.is_finite() && norm > 1e-9).then(|| Self(UnitQuaternion::from_quaternion(q)))
    }

    /// Its four elements w, x, y, z as they are kept, of which [`Self::from_kept`] makes the very same rotation.
    pub fn kept(self) -> [f64; 4] {
        let q = self.0.quaternion();
        [q.w, q.i, q.j, q.k]
    }

    /// From elements that [`Self::kept`] gave, taken as they are; `None` if they are no rotation's.
    pub fn from_kept([w, x, y, z]: [f64; 4]) -> Option<Self> {
        let q = nalgebra::Quaternion::new(w, x, y, z);
        ((q.norm() - 1.0).abs() < 1e-9).then(|| Self(UnitQuaternion::new_unchecked(q)))
    }

    /// From a rotation matrix.
    pub fn from_matrix(axes: &M3) -> Self {
        Self(UnitQuaternion::from_rotation_matrix(&Rotation3::from_matrix_unchecked(*axes)))
    }

    /// As a rotation matrix.
    pub fn matrix(self) -> M3 {
        self.0.to_rotation_matrix().into_inner()
    }

    /// As roll, pitch, yaw about the fixed x, y, z axes, rad. Where pitch is +-90° only yaw -+ roll is fixed, and roll is told as 0.
    pub fn rpy(self) -> [f64; 3] {
        let m = self.matrix();
        let level = m[(2, 1)].hypot(m[(2, 2)]);
        let pitch = (-m[(2, 0)]).atan2(level);
        if level < UPRIGHT {
            return [0.0, pitch, (-m[(0, 1)]).atan2(m[(1, 1)])];
        }
        [m[(2, 1)].atan2(m[(2, 2)]), pitch, m[(1, 0)].atan2(m[(0, 0)])]
    }

    /// As a quaternion w, x, y, z with w >= 0.
    pub fn wxyz(self) -> [f64; 4] {
        let q = self.0.quaternion();
        let sign = if q.w < 0.0 { -1.0 } else { 1.0 };
        [q.w * sign, q.i * sign, q.j * sign, q.k * sign]
    }
}

/// Below this cosine of the pitch, roll and yaw can't be told apart in double precision.
const UPRIGHT: f64 = 1e-9;

/// The rotation matrix of a turn of `angle` rad about the unit vector `axis` (Rodrigues' formula).
pub fn turn_about(axis: &V3, angle: f64) -> M3 {
    Rotation3::from_axis_angle(&Unit::new_unchecked(*axis), angle).into_inner()
}

/// The shortest turn that takes the axes `from` to the axes `to`: its unit axis (in the outer system) and its angle, 0 to pi rad.
/// A half turn has two shortest ways; the one with the axis that `Rotation3` yields is taken. No turn has the axis x.
pub fn turn_between(from: &M3, to: &M3) -> (V3, f64) {
    let turn = UnitQuaternion::from_rotation_matrix(&Rotation3::from_matrix_unchecked(to * from.transpose()));
    turn.axis_angle().map_or((V3::x(), 0.0), |(axis, angle)| (axis.into_inner(), angle))
}

/// Sine and cosine of an angle in degrees, exact at multiples of 90, so that a DH twist of 90 degrees is really square.
pub fn exact_sin_cos(deg: f64) -> (f64, f64) {
    match deg.rem_euclid(360.0) {
        0.0 => (0.0, 1.0),
        90.0 => (1.0, 0.0),
        180.0 => (0.0, -1.0),
        270.0 => (-1.0, 0.0),
        _ => deg.to_radians().sin_cos(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_triple_turns_about_fixed_axes_in_order() {
        let m = Rotation::from_rpy_deg([90.0, 0.0, 90.0]).matrix();
        // Roll first takes y to z; the yaw about fixed z then leaves it there.
        assert!((m * V3::y() - V3::z()).norm() < 1e-15);
        assert!((m * V3::x() - V3::y()).norm() < 1e-15);
    }

    #[test]
    fn triples_and_quaternions_come_back() {
        for rpy in [[10.0, -20.0, 170.0], [0.0, 90.0, 30.0], [180.0, 0.0, -45.0], [-120.0, 89.0, 3.0]] {
            let rotation = Rotation::from_rpy_deg(rpy);
            let [r, p, y] = rotation.rpy();
            assert!((Rotation::from_rpy(r, p, y).matrix() - rotation.matrix()).norm() < 1e-12, "{rpy:?}");
            let back = Rotation::from_wxyz(rotation.wxyz()).expect("unit");
            assert!((back.matrix() - rotation.matrix()).norm() < 1e-14);
        }
        assert!(Rotation::from_wxyz([0.0; 4]).is_none());
        assert!(Rotation::from_wxyz([f64::NAN, 0.0, 0.0, 1.0]).is_none());
    }

    #[test]
    fn the_shortest_turn_is_found_whatever_the_sign_of_the_quaternion() {
        let from = Rotation::from_rpy_deg([0.0, 0.0, 170.0]).matrix();
        let to = Rotation::from_rpy_deg([0.0, 0.0, -170.0]).matrix();
        let (axis, angle) = turn_between(&from, &to);
        assert!((angle.to_degrees() - 20.0).abs() < 1e-12);
        assert!((axis - V3::z()).norm() < 1e-12);
        assert_eq!(turn_between(&to, &to).1, 0.0);
    }
}

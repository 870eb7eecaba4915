use crate::geometry::{M3, Pose, V3, exact_sin_cos, turn_between};

/// Which of the two customs of Denavit-Hartenberg parameters is meant.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Convention {
    /// Classical (distal): `Rz(theta) Tz(d) Tx(a) Rx(alpha)`.
    Classical,
    /// Modified (proximal): `Rx(alpha) Tx(a) Rz(theta) Tz(d)`.
    Modified,
}

/// Where a joint's axis stands in the coordinate system of the link before it. A joint value of 0 is the placement itself.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Placement {
    /// Denavit-Hartenberg parameters. The joint's value adds to `theta` (revolute) or to `d` (prismatic).
    Dh {
        /// Which custom.
        convention: Convention,
        /// Link length, m.
        a: f64,
        /// Link twist, degrees: exact at multiples of 90.
        alpha_deg: f64,
        /// Link offset, m.
        d: f64,
        /// Joint angle at value 0, degrees.
        theta_deg: f64,
    },
    /// A coordinate system and the axis in it, as URDF gives them. The link moves with that system.
    Axis {
        /// The joint's coordinate system in the link before.
        place: Pose,
        /// Unit vector of the axis in it.
        axis: V3,
    },
}

/// The poses around a joint: `before` leads from the link before to a system whose z axis is the joint's; the joint then turns
/// about or slides along z; `after` leads on to the joint's own link.
#[derive(Debug, Clone, Copy)]
pub(super) struct Around {
    pub before: Pose,
    pub after: Pose,
}

impl Placement {
    pub(super) fn around(&self) -> Around {
        match *self {
            Self::Dh { convention, a, alpha_deg, d, theta_deg } => {
                // The fixed part along and about z commutes with the joint's motion, so it may stand behind it.
                let z = Pose { axes: turn_z(theta_deg), at: V3::new(0.0, 0.0, d) };
                let x = Pose { axes: turn_x(alpha_deg), at: V3::new(a, 0.0, 0.0) };
                match convention {
                    Convention::Classical => Around { before: Pose::identity(), after: z.then(&x) },
                    Convention::Modified => Around { before: x, after: z },
                }
            }
            Self::Axis { place, axis } => {
                let align = Pose { axes: z_onto(&axis), at: V3::zeros() };
                Around { before: place.then(&align), after: align.inverse() }
            }
        }
    }
}

fn turn_z(deg: f64) -> M3 {
    let (s, c) = exact_sin_cos(deg);
    M3::new(c, -s, 0.0, s, c, 0.0, 0.0, 0.0, 1.0)
}

fn turn_x(deg: f64) -> M3 {
    let (s, c) = exact_sin_cos(deg);
    M3::new(1.0, 0.0, 0.0, 0.0, c, -s, 0.0, s, c)
}

/// A rotation that takes z onto the unit vector `axis`; the identity where it is z already.
fn z_onto(axis: &V3) -> M3 {
    let side = V3::z().cross(axis);
    if side.norm() < 1e-12 {
        return if axis.z > 0.0 { M3::identity() } else { M3::from_diagonal(&V3::new(1.0, -1.0, -1.0)) };
    }
    let x = side.normalize();
    let y = axis.cross(&x);
    let m = M3::from_columns(&[x, y, *axis]);
    // Drop the needless turn about z, so that nearly-z axes get nearly the identity.
    let (turn, angle) = turn_between(&M3::from_columns(&[x, V3::z().cross(&x), V3::z()]), &m);
    crate::geometry::turn_about(&turn, angle)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn any_axis_is_reached_by_a_rotation() {
        for axis in [V3::z(), -V3::z(), V3::x(), -V3::y(), V3::new(0.6, 0.0, 0.8), V3::new(-0.48, 0.64, -0.6)] {
            let m = z_onto(&axis);
            assert!((m * V3::z() - axis).norm() < 1e-14, "{axis:?}");
            assert!((m * m.transpose() - M3::identity()).norm() < 1e-14);
            assert!((m.determinant() - 1.0).abs() < 1e-14);
        }
    }
}

//! Points, rotations and poses: the one place where angle triples and quaternions are turned into matrices and back.

mod pose;
mod rotation;
mod sin_cos;

pub use nalgebra::{Matrix3, UnitQuaternion, Vector3};
pub use pose::Pose;
pub use rotation::{Rotation, exact_sin_cos, turn_about, turn_between};
pub use sin_cos::sin_cos;

/// A vector or point in space, m (or what its user says), in the axes that its user names.
pub type V3 = Vector3<f64>;
/// A 3 x 3 matrix, mostly a rotation.
pub type M3 = Matrix3<f64>;

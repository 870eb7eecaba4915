use crate::geometry::{Pose, V3};
use crate::units::STANDARD_GRAVITY;

/// Gravity in base axes, m/s², for a base mounted at `mount` in the world, whose gravity points along -z.
pub fn gravity_in_base(mount: &Pose) -> V3 {
    mount.axes.transpose() * V3::new(0.0, 0.0, -STANDARD_GRAVITY)
}

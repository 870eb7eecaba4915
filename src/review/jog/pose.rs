use crate::arm::{Arm, Joints};
use crate::geometry::{Pose, Rotation, V3};
use crate::kinematics::{Reached, reach};

use super::{Refused, Stand};

/// The six coordinates of a pose (base) in a system (base): x, y, z in m, then roll, pitch, yaw in rad about the system's fixed axes.
pub fn coordinates(system: &Pose, pose: &Pose) -> [f64; 6] {
    let there = system.inverse().then(pose);
    let [roll, pitch, yaw] = there.rotation().rpy();
    [there.at.x, there.at.y, there.at.z, roll, pitch, yaw]
}

/// The pose (base) that has these coordinates in a system (base).
pub fn pose_from(system: &Pose, [x, y, z, roll, pitch, yaw]: [f64; 6]) -> Pose {
    system.then(&Pose::new(V3::new(x, y, z), Rotation::from_rpy(roll, pitch, yaw)))
}

/// A joint value this far beyond its range's end, rad or m, is at the end but for rounding.
const ROUNDING: f64 = 1e-9;

/// The joint values that put the TCP at a pose (base), of the branch nearest to where the arm stands.
///
/// # Errors
/// [`Refused::OutOfReach`] if none were found, [`Refused::BeyondRange`] if a joint would leave its range.
pub fn to_pose(stand: &Stand, target: &Pose) -> Result<Joints, Refused> {
    let missing = |gap: &[f64; 6]| gap[..3].iter().map(|g| g * g).sum::<f64>().sqrt();
    match reach(stand.arm, &stand.carried.tcp, target, &stand.q) {
        Reached::Yes { q, .. } => within_ranges(stand.arm, q),
        Reached::No { gap, .. } => Err(Refused::OutOfReach { missing: missing(&gap) }),
    }
}

fn within_ranges(arm: &Arm, q: Joints) -> Result<Joints, Refused> {
    let beyond = arm.joints().iter().enumerate().find(|(j, joint)| !(joint.range.to_end(q[*j]) >= -ROUNDING));
    match beyond {
        Some((joint, _)) => Err(Refused::BeyondRange { joint, value: q[joint] }),
        None => Ok(Joints::from_fn(arm.len(), |j| q[j].clamp(arm.joints()[j].range.low, arm.joints()[j].range.high))),
    }
}

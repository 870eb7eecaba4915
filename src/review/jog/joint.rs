use crate::arm::{Arm, Joints};

use super::{Refused, Stop};

/// The joint values after one joint was moved by `by` (rad or m), and the range end that stopped it, if one did. A joint that
/// stands beyond its range can only be moved back.
pub fn joint_step(arm: &Arm, q: &Joints, joint: usize, by: f64) -> (Joints, Option<Stop>) {
    let range = arm.joints()[joint].range;
    let mut after = *q;
    let wanted = q[joint] + by;
    let (low, high) = (range.low.min(q[joint]), range.high.max(q[joint]));
    after[joint] = wanted.clamp(low, high);
    let stop = (wanted != after[joint]).then_some(Stop::RangeEnd { joint, high: wanted > after[joint] });
    (after, stop)
}

/// The joint values with one joint at `value`, rad or m.
///
/// # Errors
/// [`Refused::BeyondRange`] if it is not in the joint's range.
pub fn joint_to(arm: &Arm, q: &Joints, joint: usize, value: f64) -> Result<Joints, Refused> {
    let range = arm.joints()[joint].range;
    if !(value >= range.low && value <= range.high) {
        return Err(Refused::BeyondRange { joint, value });
    }
    let mut after = *q;
    after[joint] = value;
    Ok(after)
}

use crate::arm::Chain;
use crate::geometry::V3;

use super::Posture;

/// What the twist of a point of the last link changes by when all joint rates stay as they are: `J' q'`, base axes, in the units
/// of the rates squared (m and rad over the parameter squared).
#[inline]
pub fn drift(chain: &Chain, posture: &Posture, point: &V3, rates: &[f64]) -> [f64; 6] {
    let (mut turning, mut spin) = (V3::zeros(), V3::zeros());
    let mut moving = V3::zeros();
    let mut origin = posture.origin(0);
    for (j, &rate) in rates[..chain.len].iter().enumerate() {
        let next = posture.origin(j);
        let lever = next - origin;
        moving += spin.cross(&lever) + turning.cross(&turning.cross(&lever));
        origin = next;
        let z = posture.axis(j) * rate;
        if chain.turns[j] {
            spin += turning.cross(&z);
            turning += z;
        } else {
            moving += turning.cross(&z) * 2.0;
        }
    }
    let lever = point - origin;
    moving += spin.cross(&lever) + turning.cross(&turning.cross(&lever));
    [moving.x, moving.y, moving.z, spin.x, spin.y, spin.z]
}

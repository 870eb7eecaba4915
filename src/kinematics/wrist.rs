use crate::arm::Chain;
use crate::geometry::V3;

use super::Posture;

/// How far apart wrist axes may pass and still count as meeting in one point, m. Well below what arms are measured to.
const MEETING: f64 = 1e-6;

/// A spherical wrist: the last three joints turn about axes that always meet in one point, the wrist centre.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SphericalWrist {
    /// The wrist centre in the axis system of the last joint, m.
    pub centre: V3,
}

/// The spherical wrist of a six-joint arm whose joints all turn, if it has one.
pub fn spherical_wrist(chain: &Chain) -> Option<SphericalWrist> {
    if chain.len != 6 || !chain.turns[..6].iter().all(|turns| *turns) {
        return None;
    }
    // Any posture will do, since what meets in one point must do so in all; a second, general one is the check.
    let meet = |q: &[f64; 6]| {
        let posture = Posture::at(chain, q);
        let a = crossing(&posture, 3, 4)?;
        let b = crossing(&posture, 4, 5)?;
        ((a - b).norm() < MEETING).then(|| posture.frame(5).inverse().point(&b))
    };
    let first = meet(&[0.0, 0.0, 0.0, 0.4, 1.1, -0.7])?;
    let second = meet(&[0.3, -0.2, 0.5, -1.3, -0.6, 2.0])?;
    ((first - second).norm() < MEETING).then_some(SphericalWrist { centre: first })
}

/// Where the axes of joints `a` and `b` meet, base, m.
fn crossing(posture: &Posture, a: usize, b: usize) -> Option<V3> {
    let (za, zb) = (posture.axis(a), posture.axis(b));
    let between = posture.origin(b) - posture.origin(a);
    let side = za.cross(&zb);
    let square = side.norm_squared();
    if square < 1e-6 || (between.dot(&side) / square.sqrt()).abs() > MEETING {
        return None;
    }
    let along = between.cross(&zb).dot(&side) / square;
    Some(posture.origin(a) + za * along)
}

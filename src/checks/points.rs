use crate::arm::Arm;
use crate::geometry::V3;
use crate::kinematics::spherical_wrist;
use crate::motion::{Instant, Segment};
use crate::program::ToolPoint;

use super::Place;
use super::looks::Looks;

/// A point of the arm or of what hangs on it whose speed people ask for.
#[derive(Debug, Clone, PartialEq)]
pub enum Spot {
    /// The tool centre point.
    Tcp,
    /// The origin of the flange.
    Flange,
    /// Where the wrist axes meet.
    WristCentre,
    /// The point of the third axis where the axis system of that joint stands; it moves with the second link.
    Elbow,
    /// A named point of the tool.
    Tool(String),
}

/// The greatest speed of a point on a segment that was found by looking; it is not proved between the instants.
#[derive(Debug, Clone, PartialEq)]
pub struct SpotPeak {
    /// Which point.
    pub spot: Spot,
    /// Its speed there, m/s.
    pub speed: f64,
    /// Where.
    pub at: Place,
}

/// A point and how it is carried: by the joints before number `joints`, at `at` in the axis system of the last of them.
struct Carrying {
    spot: Spot,
    joints: usize,
    at: V3,
}

/// An arm of fewer joints has no elbow to speak of.
const WITH_ELBOW: usize = 5;

/// Peaks of the speeds of TCP, flange, wrist centre, elbow and the tool's named points on a segment, as far as it can be followed.
/// Empty where it can't be followed at all or has no motion.
pub fn spot_peaks(arm: &Arm, segment: &Segment, points: &[ToolPoint]) -> Vec<SpotPeak> {
    let looks = Looks::along(arm, segment);
    let peak = |point: Carrying| {
        let (speed, at) = looks.greatest(|instant, rate| by_fraction(arm, instant, &point).norm() * rate)?;
        Some(SpotPeak { spot: point.spot, speed, at })
    };
    carried_points(arm, segment, points).into_iter().filter_map(peak).collect()
}

/// The velocity of a point by the path's fraction, base axes, m.
fn by_fraction(arm: &Arm, instant: &Instant, point: &Carrying) -> V3 {
    let posture = &instant.posture;
    let at = posture.frame(point.joints - 1).point(&point.at);
    (0..point.joints)
        .map(|j| {
            let axis = posture.axis(j);
            let lever = if arm.chain().turns[j] { axis.cross(&(at - posture.origin(j))) } else { axis };
            lever * instant.slope[j]
        })
        .sum()
}

fn carried_points(arm: &Arm, segment: &Segment, points: &[ToolPoint]) -> Vec<Carrying> {
    let (chain, n) = (arm.chain(), arm.len());
    let on_flange = |spot: Spot, at: &V3| Carrying { spot, joints: n, at: chain.flange.point(at) };
    let mut all = vec![on_flange(Spot::Tcp, &segment.carried.tcp.at), on_flange(Spot::Flange, &V3::zeros())];
    if let Some(wrist) = spherical_wrist(chain) {
        all.push(Carrying { spot: Spot::WristCentre, joints: n, at: wrist.centre });
    }
    if n >= WITH_ELBOW {
        all.push(Carrying { spot: Spot::Elbow, joints: 2, at: chain.fixed[2].at });
    }
    all.extend(points.iter().map(|point| on_flange(Spot::Tool(point.name.clone()), &point.at)));
    all
}

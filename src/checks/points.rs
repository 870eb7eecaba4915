use crate::arm::Arm;
use crate::geometry::V3;
use crate::kinematics::spherical_wrist;
use crate::motion::{Follower, Instant, Segment};
use crate::program::ToolPoint;

use super::Place;

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

/// Looks along each piece of a law before the best of them is looked at more closely.
const LOOKS: usize = 48;
/// Halvings of the closer look: to a millionth of the distance between two looks.
const CLOSER: usize = 30;
/// An arm of fewer joints has no elbow to speak of.
const WITH_ELBOW: usize = 5;

/// Peaks of the speeds of TCP, flange, wrist centre, elbow and the tool's named points on a segment, as far as it can be followed.
/// Empty where it can't be followed at all or has no motion.
pub fn spot_peaks(arm: &Arm, segment: &Segment, points: &[ToolPoint]) -> Vec<SpotPeak> {
    let follower = Follower::of(arm, segment);
    carried_points(arm, segment, points).into_iter().filter_map(|point| peak(arm, segment, &follower, &point)).collect()
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

fn peak(arm: &Arm, segment: &Segment, follower: &Follower, point: &Carrying) -> Option<SpotPeak> {
    let speed = |instant: &Instant, rate: f64| by_fraction(arm, instant, point).norm() * rate;
    let (speed, at) = greatest(segment, follower, speed)?;
    Some(SpotPeak { spot: point.spot.clone(), speed, at })
}

/// The greatest value on a segment that is found by looking, of something that depends on the instant and on the rate of the path's
/// fraction (1/s), and where. `None` where there is no motion to look at.
pub(super) fn greatest(segment: &Segment, follower: &Follower, value: impl Fn(&Instant, f64) -> f64) -> Option<(f64, Place)> {
    let until = segment.followed_to();
    let pieces = segment.law.pieces();
    let look = |piece: usize, dt: f64| {
        let [u, rate, _] = pieces[piece].at(dt);
        let u = u.clamp(0.0, 1.0);
        let instant = follower.at(u).filter(|_| u <= until)?;
        Some((value(&instant, rate.max(0.0)), Place { time: pieces[piece].start + dt, u }))
    };
    let mut best: Option<(f64, Place, usize, f64)> = None;
    for (index, piece) in pieces.iter().enumerate().filter(|(_, piece)| piece.duration > 0.0) {
        for k in 0..=LOOKS {
            let dt = piece.duration * k as f64 / LOOKS as f64;
            let Some((value, place)) = look(index, dt) else { continue };
            if best.is_none_or(|(most, ..)| value > most) {
                best = Some((value, place, index, dt));
            }
        }
    }
    let (mut most, mut at, piece, mut dt) = best?;
    let mut step = pieces[piece].duration / LOOKS as f64;
    for _ in 0..CLOSER {
        step *= 0.5;
        for there in [dt - step, dt + step] {
            let inside = (0.0..=pieces[piece].duration).contains(&there);
            if let Some((more, place)) = look(piece, there).filter(|(more, _)| inside && *more > most) {
                (most, at, dt) = (more, place, there);
            }
        }
    }
    Some((most, at))
}

use crate::arm::Arm;
use crate::geometry::V3;
use crate::kinematics::spherical_wrist;
use crate::motion::{Instant, Segment};
use crate::program::{Acceptance, ToolPoint};
use crate::units::{Dimension, Speed};

use super::looks::Looks;
use super::{Channel, Check, Place, Scale};

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

/// A carrying tells how a point is carried: by the joints before number `joints`, at `at` (m) in the axis system of the last of them.
#[derive(Debug, Clone, Copy)]
pub struct Carrying {
    pub(super) joints: usize,
    at: V3,
}

/// An arm of fewer joints has no elbow to speak of.
const WITH_ELBOW: usize = 5;

impl Carrying {
    /// A point of what is bolted to the flange, flange axes, m.
    fn on_flange(arm: &Arm, at: &V3) -> Self {
        Self { joints: arm.len(), at: arm.chain().flange.point(at) }
    }

    /// The origin of the flange.
    pub(super) fn flange(arm: &Arm) -> Self {
        Self::on_flange(arm, &V3::zeros())
    }

    /// How many joints move it: the first so many.
    pub fn joints(&self) -> usize {
        self.joints
    }

    /// Where it is at an instant, base axes, m.
    #[inline]
    pub fn place(&self, instant: &Instant) -> V3 {
        instant.posture.frame(self.joints - 1).point(&self.at)
    }

    /// Its velocity by the path's fraction, base axes, m.
    #[inline]
    pub fn velocity(&self, arm: &Arm, instant: &Instant) -> V3 {
        let posture = &instant.posture;
        let at = self.place(instant);
        (0..self.joints)
            .map(|j| {
                let axis = posture.axis(j);
                let lever = if arm.chain().turns[j] { axis.cross(&(at - posture.origin(j))) } else { axis };
                lever * instant.slope[j]
            })
            .sum()
    }
}

/// The points of the arm itself that are judged, and those that the segment's tool names, in the order of their names.
pub(super) fn watched(arm: &Arm, segment: &Segment) -> Vec<Carrying> {
    let named = segment.points.iter().map(|at| Carrying::on_flange(arm, at));
    of_arm(arm).into_iter().map(|(_, point)| point).chain(named).collect()
}

fn of_arm(arm: &Arm) -> Vec<(Spot, Carrying)> {
    let chain = arm.chain();
    let mut all = vec![(Spot::Flange, Carrying::flange(arm))];
    if let Some(wrist) = spherical_wrist(chain) {
        all.push((Spot::WristCentre, Carrying { joints: arm.len(), at: wrist.centre }));
    }
    if arm.len() >= WITH_ELBOW {
        all.push((Spot::Elbow, Carrying { joints: 2, at: chain.fixed[2].at }));
    }
    all
}

fn spots(arm: &Arm, segment: &Segment, points: &[ToolPoint]) -> Vec<(Spot, Carrying)> {
    let named = points.iter().map(|point| (Spot::Tool(point.name.clone()), Carrying::on_flange(arm, &point.at)));
    let tcp = (Spot::Tcp, Carrying::on_flange(arm, &segment.carried.tcp.at));
    std::iter::once(tcp).chain(of_arm(arm)).chain(named).collect()
}

/// Peaks of the speeds of TCP, flange, wrist centre, elbow and the tool's named points on a segment, as far as it can be followed.
/// Empty where it can't be followed at all or has no motion.
pub fn spot_peaks(arm: &Arm, segment: &Segment, points: &[ToolPoint]) -> Vec<SpotPeak> {
    let looks = Looks::along(arm, segment);
    let peak = |(spot, point): (Spot, Carrying)| {
        let (speed, at) = looks.greatest(|instant, rate| point.velocity(arm, instant).norm() * rate)?;
        Some(SpotPeak { spot, speed, at })
    };
    spots(arm, segment, points).into_iter().filter_map(peak).collect()
}

/// The fastest of all points but the TCP at an instant whose fraction runs at `rate` (1/s): which, how it is carried, and its velocity
/// in base axes, m/s.
pub fn fastest_point(
    arm: &Arm,
    segment: &Segment,
    points: &[ToolPoint],
    instant: &Instant,
    rate: f64,
) -> Option<(Spot, Carrying, V3)> {
    let of = |(spot, point): (Spot, Carrying)| {
        let velocity = point.velocity(arm, instant) * rate;
        (spot, point, velocity)
    };
    spots(arm, segment, points).into_iter().skip(1).map(of).max_by(|a, b| a.2.norm().total_cmp(&b.2.norm()))
}

/// Speed of the fastest point against the cell's limit.
pub(super) fn channel(criteria: &Acceptance) -> Channel {
    of_limit(criteria.point_speed)
}

/// Speed of the flange alone against a limit.
pub(super) fn flange_channel(limit: Speed) -> Channel {
    of_limit(Some(limit))
}

fn of_limit(limit: Option<Speed>) -> Channel {
    Channel {
        check: Check::PointSpeed,
        joint: None,
        of: Dimension::Speed,
        scale: limit.map_or(Scale::Open, |speed| Scale::Ceiling(speed.as_m_per_s())),
        reserve: 0.0,
        judged: limit.is_some(),
    }
}

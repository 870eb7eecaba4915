//! How much a remedy changes of what the person taught, so that remedies of different kinds can be ranked. A size of 1 is about
//! where a person would call it another program. The figures are this project's own judgement, not a standard's.

use crate::arm::{Arm, JointKind, Joints};
use crate::units::{Angle, Length};

/// A waypoint moved this far counts 1, m.
const FAR: f64 = 0.030;
/// A tool turned this far where it matters counts 1, rad (10 degrees).
const TILTED: f64 = 0.175;
/// A tool turned this far where it does not matter counts 1, rad (180 degrees).
const TURNED: f64 = std::f64::consts::PI;
/// A speed brought down to this share counts 1.
const SLOW: f64 = 0.5;
/// A softer acceleration counts so much of a lower speed: the path and the speed stay.
const SOFTER: f64 = 0.5;
/// Standing so much of the cycle longer counts 1.
const LONGER: f64 = 0.10;
/// What an added point counts by itself: one more point to maintain.
const ADDED: f64 = 0.5;
/// What another way of moving counts by itself.
const OTHER_WAY: f64 = 0.5;
/// What a pose taught anew by its joint values counts by itself: it stays where it is, and its frame no longer moves it.
const BY_JOINTS: f64 = 0.25;
/// What another posture counts by itself: all points of it are taught anew.
const OTHER_POSTURE: f64 = 1.0;

/// A speed, share or override lowered to `share` of what it was.
pub(super) fn slowed(share: f64) -> f64 {
    (1.0 / share - 1.0) / (1.0 / SLOW - 1.0)
}

/// An acceleration lowered to `share` of what it was.
pub(super) fn softened(share: f64) -> f64 {
    SOFTER * slowed(share)
}

/// A dwell longer by `more` of the cycle (a fraction).
pub(super) fn stood(more: f64) -> f64 {
    more / LONGER
}

/// A waypoint moved so far.
pub(super) fn moved(way: Length) -> f64 {
    way.as_m() / FAR
}

/// A point added so far beside the path.
pub(super) fn added(way: Length) -> f64 {
    ADDED + moved(way)
}

/// A fly-by radius changed by so much.
pub(super) fn rounded(by: Length) -> f64 {
    moved(by)
}

/// A tool tilted so far.
pub(super) fn tilted(angle: Angle) -> f64 {
    angle.as_rad().abs() / TILTED
}

/// A tool turned about its own axis where that does not matter.
pub(super) fn turned(angle: Angle) -> f64 {
    angle.as_rad().abs() / TURNED
}

/// A path left by so much.
pub(super) fn left(way: Length) -> f64 {
    OTHER_WAY + moved(way)
}

/// A path left by so much, and its end taught by joint values.
pub(super) fn left_and_taught(way: Length) -> f64 {
    left(way) + BY_JOINTS
}

/// A posture changed: its largest turn, as a share of half a turn (of the range where a joint slides).
pub(super) fn posed(arm: &Arm, from: &Joints, to: &Joints) -> f64 {
    let share = |(j, way): (usize, f64)| match arm.joints()[j].kind {
        JointKind::Revolute => way.abs() / TURNED,
        JointKind::Prismatic => way.abs() / arm.joints()[j].range.half(),
    };
    OTHER_POSTURE + from.zip(to, |a, b| b - a).iter().copied().enumerate().map(share).fold(0.0, f64::max)
}

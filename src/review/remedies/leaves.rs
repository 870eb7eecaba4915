//! How far the TCP leaves a line or an arc on a joint move.

use crate::arm::{Arm, Joints};
use crate::geometry::{Pose, V3};
use crate::kinematics::Posture;
use crate::motion::Path;

/// The bound is closed to this, m.
const CLOSED: f64 = 2e-4;
/// Intervals looked at most; the bound that is then left is told.
const MOST: usize = 200_000;

/// At least how far the TCP gets from a line or an arc anywhere on the joint move between two sets of joint values, m; no more
/// than 0.2 mm above the greatest distance. A bound for every place of the move, not only for those looked at.
///
/// The TCP can move no farther within a part of the move than its joints allow, each by its way times the greatest lever that the
/// links beyond it make (or its way, where it slides). A distance to a set of points grows no faster than the TCP moves, so half of
/// that is enough to bound a part by its middle; parts whose bound is too high are halved.
pub(super) fn leaves(arm: &Arm, from: &Joints, to: &Joints, tcp: &Pose, path: &Path) -> f64 {
    let runs = most_run(arm, from, to, tcp);
    let distance = |u: f64| {
        let q = from.zip(to, |a, b| a + u * (b - a));
        off(path, &Posture::at(arm.chain(), &q).tcp(tcp).at)
    };
    let mut greatest = distance(0.0).max(distance(1.0));
    let mut parts = vec![(0.0, 1.0)];
    let mut left = MOST;
    let mut bound = greatest;
    while let Some((a, b)) = parts.pop() {
        let middle = 0.5 * (a + b);
        let there = distance(middle);
        greatest = greatest.max(there);
        let most = there + 0.5 * (b - a) * runs;
        left = left.saturating_sub(1);
        if most > greatest + CLOSED && left > 0 {
            parts.extend([(a, middle), (middle, b)]);
        } else {
            bound = bound.max(most);
        }
    }
    // A part set aside early was bounded against what was the greatest then, which was no more than it is now.
    bound.max(greatest)
}

/// At least the length of the TCP's way over the whole joint move, m.
fn most_run(arm: &Arm, from: &Joints, to: &Joints, tcp: &Pose) -> f64 {
    let chain = arm.chain();
    let n = arm.len();
    let mut lever = chain.flange.at.norm() + tcp.at.norm();
    let mut run = 0.0;
    for j in (0..n).rev() {
        let way = (to[j] - from[j]).abs();
        run += if chain.turns[j] { way * lever } else { way };
        // The next joint's lever reaches over this joint's own place, and over as far as it slides.
        let slides = if chain.turns[j] { 0.0 } else { from[j].abs().max(to[j].abs()) };
        lever += chain.fixed[j].at.norm() + slides;
    }
    run
}

/// How far a point is from the nearest one of a line or arc, m.
fn off(path: &Path, point: &V3) -> f64 {
    match path {
        Path::Line { start, along, .. } => {
            let square = along.norm_squared();
            let u = if square > 0.0 { ((point - start.at).dot(along) / square).clamp(0.0, 1.0) } else { 0.0 };
            (point - start.at - along * u).norm()
        }
        Path::Arc { start, arm, normal, sweep, .. } => {
            let out = point - start.at;
            let angle = normal.dot(&arm.cross(&out)).atan2(arm.dot(&out)).rem_euclid(std::f64::consts::TAU);
            let at = |u: f64| path.target(u).map_or(f64::INFINITY, |target| (point - target.pose.at).norm());
            if angle <= *sweep { at(angle / sweep) } else { at(0.0).min(at(1.0)) }
        }
        _ => 0.0,
    }
}

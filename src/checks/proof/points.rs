use crate::checks::points::Carrying;
use crate::geometry::V3;

use super::ball::{Ball, Moving};
use super::leaf::{Leaf, Middle, ToolMoves};
use super::newton_euler::Ways;
use super::view::{Motion, View};

/// A point that the first `joints` joints carry, and where it is in the middle of the stretch, base axes, m.
#[derive(Debug, Clone, Copy)]
pub(super) struct Carried {
    pub joints: usize,
    pub at: V3,
}

impl Carried {
    pub fn of(point: &Carrying, view: &View) -> Self {
        Self { joints: point.joints, at: point.place(view.at) }
    }
}

impl View<'_> {
    /// The greatest speed of a point by the fraction over a stretch, m: that of the middle and its change there, each a sum over
    /// the joints' columns, and how much that change may be off.
    ///
    /// The speed in the middle is known to within what the slopes are unsure of there, which is what their spread holds besides
    /// the bend's, and to within the slack of the joint values.
    pub fn point_speed(&self, motion: &Motion, ways: &Ways, point: Carried, half: f64) -> f64 {
        let mut velocity = Moving::zero();
        let mut lever = Moving::zero();
        let (mut length, mut unsure) = (0.0, 0.0);
        for j in (0..point.joints).rev() {
            let reach = if j + 1 == point.joints { point.at - self.axis_point(j) } else { self.e[j] };
            let (slope, spread) = (ways.slope[j], ways.slope_spread[j]);
            let slide = if self.chain.turns[j] { None } else { Some((slope, spread)) };
            length += reach.norm();
            lever = lever.plus(&self.carried_by(motion, j, reach, slide, 1.0)).tightened(half, motion.slack * length);
            let column = if self.chain.turns[j] { motion.z[j].cross(&lever) } else { motion.z[j] };
            let by_slope = |ball: &Ball| ball.times(slope, spread);
            let change = by_slope(&column.change).plus(&column.at.times(ways.bend[j], ways.bend_spread[j]));
            velocity = velocity.plus(&Moving { at: by_slope(&column.at), change });
            let own = (spread - half * (ways.bend[j].abs() + ways.bend_spread[j])).max(0.0);
            unsure += own * column.at.most() + motion.slack * 2.0 * length.max(1.0) * slope.abs();
        }
        let (v, c) = (velocity.at.centre, velocity.change.centre * half);
        (v + c).norm().max((v - c).norm()) + half * velocity.change.radius + unsure
    }
}

impl Middle<'_> {
    /// The greatest speed of a point by the fraction over a leaf, m. Where the path says how the tool moves and turns, it says so of
    /// every point of the last link too; of other points the joints do.
    pub fn point_speed(&self, leaf: &Leaf, ways: &Ways, point: &Carrying) -> f64 {
        let point = Carried::of(point, &self.view);
        if !(self.arm.task().is_whole() && point.joints == self.arm.len()) {
            return self.view.point_speed(&leaf.motion, ways, point, leaf.half);
        }
        let rho = point.at - self.view.at.tcp.at;
        let ToolMoves { velocity, bend, third, .. } = ToolMoves::of(&self.target, &rho, leaf.half);
        let c = bend * leaf.half;
        (velocity + c).norm().max((velocity - c).norm()) + 0.5 * leaf.half * leaf.half * third + self.unsure_of_speed(&rho)
    }
}

use crate::arm::{Joints, MAX_JOINTS};

use super::leaf::{Leaf, Middle, Row};

/// A box of joint values: everything within `width` of `centre`, joint by joint.
#[derive(Debug, Clone, Copy)]
pub(super) struct Enclosure {
    pub centre: Row,
    pub width: Row,
}

impl Enclosure {
    /// A single posture.
    pub fn point(q: &Joints) -> Self {
        let mut centre = [0.0; MAX_JOINTS];
        centre[..q.len()].copy_from_slice(q);
        Self { centre, width: [POINT; MAX_JOINTS] }
    }
}

/// Joint values that were computed and stored are sure to this, rad or m.
const POINT: f64 = 1e-9;

/// What is kept of a proved leaf, so that it can be joined to its neighbours.
#[derive(Debug, Clone)]
pub(super) struct Joined {
    pub middle: f64,
    pub half: f64,
    pub start: Enclosure,
    pub end: Enclosure,
    n: usize,
    turns: [bool; MAX_JOINTS],
    error: [Row; MAX_JOINTS],
    norms: [[f64; 2]; MAX_JOINTS],
    spread: Row,
    reach: f64,
}

impl Joined {
    pub fn of(middle: &Middle, leaf: &Leaf) -> Self {
        let n = middle.arm.len();
        let h = leaf.half;
        let mut error = leaf.rest;
        let (mut start, mut end) =
            (Enclosure { centre: [0.0; MAX_JOINTS], width: [0.0; MAX_JOINTS] }, Enclosure::point(&middle.at.q));
        for i in 0..n {
            for j in 0..n {
                error[i][j] += h * middle.first[i][j].abs();
            }
            let bent = middle.at.q[i] + 0.5 * h * h * middle.bend[i];
            start.centre[i] = bent - h * middle.slope[i];
            end.centre[i] = bent + h * middle.slope[i];
            // The slope in the middle is as unsure as what its spread holds besides the bend.
            let unsure = (leaf.slope_spread[i] - h * (middle.bend[i].abs() + leaf.spread[i])).max(0.0);
            start.width[i] = 0.5 * h * h * leaf.spread[i] + h * unsure + middle.slack[i];
            end.width[i] = start.width[i];
        }
        Self {
            middle: middle.at.u,
            half: h,
            start,
            end,
            n,
            turns: middle.arm.chain().turns,
            error,
            norms: middle.norms,
            spread: leaf.spread,
            reach: middle.view.reach(),
        }
    }

    /// Whether the one solution in `other` and this leaf's path at its border (`mine`) must be the same posture, both being
    /// solutions for one and the same pose.
    ///
    /// If both lie in one box on which some Y keeps `|Y J - I| <= E` with spectral radius below 1, the mean value theorem leaves
    /// no room for two solutions; turns add `0.6 theta`, theta being the largest turn within the box, since rotations do not
    /// add up like vectors.
    pub fn meets(&self, mine: &Enclosure, other: &Enclosure) -> bool {
        let (mut turn, mut slide) = (0.0, 0.0);
        for j in 0..self.n {
            let low = (mine.centre[j] - mine.width[j]).min(other.centre[j] - other.width[j]);
            let high = (mine.centre[j] + mine.width[j]).max(other.centre[j] + other.width[j]);
            if (mine.centre[j] - other.centre[j]).abs() > mine.width[j] + other.width[j] + POINT {
                return false;
            }
            if self.turns[j] {
                turn += high - low;
            } else {
                slide += high - low;
            }
        }
        if !(turn <= 1.0) {
            return false;
        }
        // A column's translation part changes by at most its lever for each radian and 1 for each metre.
        let moved = (self.reach + slide) * turn + slide;
        let turned = 1.6 * turn;
        (0..self.n).all(|i| {
            let [moving, turning] = self.norms[i];
            let more = moving * moved + turning * turned;
            (0..self.n).map(|j| (self.error[i][j] + more) * self.spread[j]).sum::<f64>() < self.spread[i]
        })
    }
}

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
    n: usize,
    q: Row,
    slope: Row,
    bend: Row,
    unsure: Row,
    slack: Row,
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
        for i in 0..n {
            for j in 0..n {
                error[i][j] += h * middle.first[i][j].abs();
            }
        }
        let mut q = [0.0; MAX_JOINTS];
        q[..n].copy_from_slice(&middle.at.q);
        Self {
            middle: middle.at.u,
            half: h,
            n,
            q,
            slope: middle.slope,
            bend: middle.bend,
            unsure: middle.unsure(),
            slack: middle.slack,
            turns: middle.arm.chain().turns,
            error,
            norms: middle.norms,
            spread: leaf.spread,
            reach: middle.view.reach(),
        }
    }

    /// Where this leaf's path is at fraction `u`, which must lie on it.
    pub fn enclosure(&self, u: f64) -> Enclosure {
        let s = u - self.middle;
        let mut enclosure = Enclosure { centre: [0.0; MAX_JOINTS], width: [0.0; MAX_JOINTS] };
        for i in 0..self.n {
            enclosure.centre[i] = self.q[i] + s * (self.slope[i] + 0.5 * s * self.bend[i]);
            enclosure.width[i] = 0.5 * s * s * self.spread[i] + s.abs() * self.unsure[i] + self.slack[i];
        }
        enclosure
    }

    /// Whether the solutions in two enclosures, both for the pose at a border of this leaf, must be the same posture.
    ///
    /// If both lie in one box on which some Y keeps `|Y J - I| <= E` with spectral radius below 1, the mean value theorem leaves
    /// no room for two solutions; turns add `0.6 theta`, theta being the largest turn within the box, since rotations do not
    /// add up like vectors.
    pub fn meets(&self, one: &Enclosure, other: &Enclosure) -> bool {
        let (mut turn, mut slide) = (0.0, 0.0);
        for j in 0..self.n {
            let low = (one.centre[j] - one.width[j]).min(other.centre[j] - other.width[j]);
            let high = (one.centre[j] + one.width[j]).max(other.centre[j] + other.width[j]);
            if (one.centre[j] - other.centre[j]).abs() > one.width[j] + other.width[j] + POINT {
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
        is_contraction(self.n, &self.spread, |i, j| {
            let [moving, turning] = self.norms[i];
            self.error[i][j] + moving * moved + turning * turned
        })
    }
}

/// The same as [`Joined::meets`] by a closer look: from a posture at the border itself, with the Jacobian's change over the box
/// followed joint by joint. Costs one more posture, and closes where the leaves are too wide.
pub(super) fn meet_at(border: &Middle, one: &Enclosure, other: &Enclosure) -> bool {
    let n = border.arm.len();
    let mut box_half = [0.0; MAX_JOINTS];
    let mut turn = 0.0;
    for j in 0..n {
        let q = border.at.q[j];
        let reach = |e: &Enclosure| (e.centre[j] - q).abs() + e.width[j];
        box_half[j] = reach(one).max(reach(other)) + POINT;
        if border.arm.chain().turns[j] {
            turn += 2.0 * box_half[j];
        }
    }
    if !(turn <= 1.0) {
        return false;
    }
    // From the middle to any posture of the box joints run straight, by at most its half-widths over a stretch of length 1.
    let motion = border.view.motion(&[0.0; MAX_JOINTS], &box_half, 1.0, 0.0);
    let columns: Vec<[f64; 2]> = (0..n)
        .map(|j| {
            let turned = if border.arm.chain().turns[j] { motion.z[j].change.radius + 0.6 * turn } else { 0.0 };
            [border.view.column(&motion, j).change.radius, turned]
        })
        .collect();
    is_contraction(n, &[1.0; MAX_JOINTS], |i, j| {
        let [moving, turning] = border.norms[i];
        border.defect[i][j] + moving * columns[j][0] + turning * columns[j][1]
    })
}

/// Steps towards a vector that shows the spectral radius to be below 1.
const SOUGHT: usize = 60;

/// Whether the non-negative matrix `error` has a spectral radius below 1: shown by any d > 0 with `E d < d`. The one that solves
/// `d = seed + E d` is sought by iteration.
fn is_contraction(n: usize, seed: &Row, error: impl Fn(usize, usize) -> f64) -> bool {
    let mut d = *seed;
    for _ in 0..SOUGHT {
        let pulled: Row = std::array::from_fn(|i| if i < n { (0..n).map(|j| error(i, j) * d[j]).sum::<f64>() } else { 0.0 });
        if !pulled.iter().all(|value| value.is_finite()) {
            return false;
        }
        if (0..n).all(|i| pulled[i] < d[i]) {
            return true;
        }
        for i in 0..n {
            d[i] = seed[i] + pulled[i];
        }
    }
    false
}

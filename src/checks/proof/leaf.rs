use crate::arm::{Arm, MAX_JOINTS};
use crate::geometry::V3;
use crate::kinematics::{invert, small_error};
use crate::motion::{Instant, Target};

use super::ball::{Ball, Moving};
use super::view::{Motion, View};

/// A column or row of numbers, one a joint.
pub(super) type Row = [f64; MAX_JOINTS];

/// Everything about the middle of a stretch of a line or arc that does not depend on the stretch's width.
#[derive(Debug, Clone)]
pub(super) struct Middle<'a> {
    pub arm: &'a Arm,
    pub view: View<'a>,
    pub at: &'a Instant,
    /// An inverse of the stacked Jacobian at the reference point, rows by joint, columns by task row and null row.
    pub y: [Row; MAX_JOINTS],
    /// Its translation parts, base axes.
    pub y_moving: [V3; MAX_JOINTS],
    /// Its rotation parts, base axes.
    pub y_turning: [V3; MAX_JOINTS],
    /// Norms of both.
    pub norms: [[f64; 2]; MAX_JOINTS],
    /// `|I - Y J|`.
    pub defect: [Row; MAX_JOINTS],
    /// Slopes `Y x'`.
    pub slope: Row,
    /// `Y J'`: the first-order part of how `Y J` leaves the identity.
    pub first: [Row; MAX_JOINTS],
    /// Second derivatives `Y (x'' - J' slope)`.
    pub bend: Row,
    pub target: Target,
    /// How unsure the joint values in the middle are, rad or m, each joint.
    pub slack: Row,
    slack_sum: f64,
}

/// A stretch on which the joint path is proved to exist, to be the only one near, and to bend by no more than told.
#[derive(Debug, Clone)]
pub(super) struct Leaf {
    /// Half its width, in fractions of the path.
    pub half: f64,
    /// The second derivative is within this of the middle's throughout.
    pub spread: Row,
    /// The first derivative is within this of the middle's throughout.
    pub slope_spread: Row,
    /// How far `Y J` may be from the identity throughout, entry by entry, without its first-order part.
    pub rest: [Row; MAX_JOINTS],
    /// The arm's motion over it.
    pub motion: Motion,
}

/// How the path moves a point of the tool over a stretch, by its fraction, m: velocity and second derivative in the middle, and at
/// least the size of the third anywhere.
#[derive(Debug, Clone, Copy)]
pub(super) struct ToolMoves {
    pub velocity: V3,
    pub bend: V3,
    pub third: f64,
    /// The most that the tool's turning changes, rad.
    most_swing: f64,
}

impl ToolMoves {
    /// Of a point that stands `rho` (base axes, m) off the TCP and turns with the tool: `y = velocity + turning x rho` in the base,
    /// and its derivatives.
    pub fn of(target: &Target, rho: &V3, half: f64) -> Self {
        let Target { velocity, bend, third, turning, swing, swing_change, .. } = *target;
        let spin = |v: &V3| turning.cross(v);
        // The most that the tool's turning, its derivative and its second derivative amount to over the stretch.
        let most_swing = swing.norm() + half * swing_change;
        let most_turn = turning.norm() + half * most_swing;
        let turn = most_turn.powi(3) + 3.0 * most_turn * most_swing + swing_change;
        Self {
            velocity: velocity + spin(rho),
            bend: bend + swing.cross(rho) + spin(&spin(rho)),
            third: third + turn * rho.norm(),
            most_swing,
        }
    }
}

/// All radii are taken larger by this share, for what rounding may do.
const OUTWARD: f64 = 1.0 + 1e-10;
/// The least spread of a second derivative that is tried, rad or m by the path's fraction squared.
const LEAST_SPREAD: f64 = 1e-9;
/// How often the spread is widened before the stretch is given up.
const WIDENINGS: usize = 5;

impl<'a> Middle<'a> {
    /// The middle of a stretch at an instant of a line or arc; `None` where the Jacobian can't be inverted.
    pub fn of(arm: &'a Arm, view: View<'a>, at: &'a Instant, target: Target, null: &[Row]) -> Option<Self> {
        let n = arm.len();
        let task = arm.task();
        let y = invert(at.lu.as_ref()?);
        let mut middle = Self {
            arm,
            view,
            at,
            y,
            y_moving: [V3::zeros(); MAX_JOINTS],
            y_turning: [V3::zeros(); MAX_JOINTS],
            norms: [[0.0; 2]; MAX_JOINTS],
            defect: [[0.0; MAX_JOINTS]; MAX_JOINTS],
            slope: [0.0; MAX_JOINTS],
            first: [[0.0; MAX_JOINTS]; MAX_JOINTS],
            bend: [0.0; MAX_JOINTS],
            target,
            slack: [0.0; MAX_JOINTS],
            slack_sum: 0.0,
        };
        // From the TCP to the reference point: the same motion, told of another point of the last link.
        let offset = middle.view.to_tcp;
        let error = small_error(&at.tcp, &target.pose);
        let moving = target.velocity - target.turning.cross(&offset);
        let motion = middle.view.motion(&[0.0; MAX_JOINTS], &[0.0; MAX_JOINTS], 0.0, 0.0);
        for i in 0..n {
            let (mut along, mut about) = (V3::zeros(), V3::zeros());
            let mut residual = 0.0;
            for (slot, &row) in task.rows().iter().enumerate() {
                if row < 3 {
                    along[row] = y[i][slot];
                } else {
                    about[row - 3] = y[i][slot];
                }
                residual += y[i][slot] * error[row];
            }
            let about = if task.is_whole() { about + offset.cross(&along) } else { about };
            middle.y_moving[i] = along;
            middle.y_turning[i] = about;
            middle.norms[i] = [along.norm(), about.norm()];
            let size = middle.norms[i][0] + middle.norms[i][1];
            middle.slope[i] = along.dot(&moving) + about.dot(&target.turning);
            middle.slack[i] = 2.0 * residual.abs() + 1e-14 * (1.0 + size);
            middle.slack_sum += middle.slack[i];
        }
        middle.measure_defect(&motion, null);
        middle.measure_change();
        middle.is_sound().then_some(middle)
    }

    /// `|I - Y J|` with the Jacobian at the reference point.
    fn measure_defect(&mut self, motion: &Motion, null: &[Row]) {
        let n = self.arm.len();
        let m = self.arm.task().rows().len();
        for i in 0..n {
            for j in 0..n {
                let column = self.view.column(motion, j).at.centre;
                let axis = if self.arm.chain().turns[j] { self.view.z[j] } else { V3::zeros() };
                let mut entry = self.y_moving[i].dot(&column) + self.y_turning[i].dot(&axis);
                for (slot, row) in null.iter().enumerate() {
                    entry += self.y[i][m + slot] * row[j];
                }
                self.defect[i][j] = (entry - if i == j { 1.0 } else { 0.0 }).abs();
            }
        }
    }

    /// The Jacobian's change in the middle and the bend that follows.
    fn measure_change(&mut self) {
        let n = self.arm.len();
        let motion = self.view.motion(&self.slope, &[0.0; MAX_JOINTS], 0.0, 0.0);
        let [moved, turned] = self.target_change(&motion, 0.0);
        for i in 0..n {
            self.bend[i] = self.y_moving[i].dot(&moved.centre) + self.y_turning[i].dot(&turned.centre);
            for j in 0..n {
                let column = self.view.column(&motion, j).change.centre;
                let axis = if self.arm.chain().turns[j] { motion.z[j].change.centre } else { V3::zeros() };
                self.first[i][j] = self.y_moving[i].dot(&column) + self.y_turning[i].dot(&axis);
                self.bend[i] -= self.first[i][j] * self.slope[j];
            }
        }
    }

    /// Whether figures are finite, `Y` is an inverse indeed, and a solution lies within the slack of the computed joint values:
    /// `|Y e| + E slack < slack`, E being how far `Y J` may be from the identity that near.
    fn is_sound(&self) -> bool {
        let n = self.arm.len();
        let reach: f64 = 2.0 * (self.view.reach() + 1.0);
        (0..n).all(|i| {
            let near = self.slack_sum * (self.norms[i][0] * reach + self.norms[i][1]);
            let pull: f64 = (0..n).map(|j| (self.defect[i][j] + near) * self.slack[j]).sum();
            self.slope[i].is_finite()
                && self.bend[i].is_finite()
                && self.defect[i][..n].iter().all(|d| *d < 1e-3)
                && 0.5 * self.slack[i] + pull < self.slack[i]
        })
    }

    /// Tries to prove the stretch of half-width `half` around the middle (see the module's text for the theorem). `None` if it
    /// does not close at this width.
    pub fn prove(&self, half: f64) -> Option<Leaf> {
        let n = self.arm.len();
        let mut spread = [LEAST_SPREAD; MAX_JOINTS];
        for _ in 0..=WIDENINGS {
            let (leaf, reached) = self.bound(half, &spread);
            if !reached[..n].iter().all(|value| value.is_finite()) {
                return None;
            }
            if (0..n).all(|j| reached[j] < spread[j]) {
                // What follows from the assumed spread is proved, and it is the tighter of the two.
                return Some(Leaf { spread: reached, ..leaf });
            }
            for j in 0..n {
                spread[j] = spread[j].max(1.15 * reached[j]);
            }
        }
        None
    }

    /// How unsure the slope in the middle is: it is `Y x'` only to within the defect and the slack.
    pub fn unsure(&self) -> Row {
        let n = self.arm.len();
        std::array::from_fn(|j| {
            let misfit = (0..n).map(|k| self.defect[j][k] * self.slope[k].abs()).sum::<f64>();
            2.0 * misfit + self.slack_sum * (self.bend[j].abs() + self.slope[j].abs())
        })
    }

    /// The leaf for an assumed `spread` of the second derivative, and the spread that would follow from it.
    fn bound(&self, half: f64, spread: &Row) -> (Leaf, Row) {
        let n = self.arm.len();
        let mut slope_spread = [0.0; MAX_JOINTS];
        let unsure = self.unsure();
        for j in 0..n {
            slope_spread[j] = (half * (self.bend[j].abs() + spread[j]) + unsure[j]) * OUTWARD;
        }
        let motion = self.view.motion(&self.slope, &slope_spread, half, self.slack_sum);
        let [moved, turned] = self.target_change(&motion, half);
        let mut rest = self.defect;
        let mut reached = [0.0; MAX_JOINTS];
        for i in 0..n {
            reached[i] = self.norms[i][0] * moved.radius + self.norms[i][1] * turned.radius;
        }
        for j in 0..n {
            let column = self.view.column(&motion, j);
            let axis = if self.arm.chain().turns[j] { motion.z[j].change.radius } else { 0.0 };
            let length = column.at.centre.norm();
            let most_slope = self.slope[j].abs() + slope_spread[j];
            for i in 0..n {
                let [moving, turning] = self.norms[i];
                let radius = moving * column.change.radius + turning * axis;
                rest[i][j] = (rest[i][j] + half * radius + self.slack_sum * (moving * length + turning)) * OUTWARD;
                reached[i] += radius * most_slope + self.first[i][j].abs() * slope_spread[j];
            }
        }
        for i in 0..n {
            for j in 0..n {
                reached[i] += (half * self.first[i][j].abs() + rest[i][j]) * (self.bend[j].abs() + spread[j]);
            }
            reached[i] *= OUTWARD;
        }
        (Leaf { half, spread: *spread, slope_spread, rest, motion }, reached)
    }

    /// What the path asks of the twist's derivative, seen from the viewing link: translation and rotation.
    fn target_change(&self, motion: &Motion, half: f64) -> [Ball; 2] {
        let Target { turning, swing, swing_change, .. } = self.target;
        let base = &motion.turning[0];
        let whole = self.arm.task().is_whole();
        // A task that leaves out turning is told of the TCP itself.
        let rho = if whole { -self.view.to_tcp } else { V3::zeros() };
        let ToolMoves { velocity: y, bend: y1, third: y2, most_swing } = ToolMoves::of(&self.target, &rho, half);
        let most_y1 = y1.norm() + half * y2;
        let y1_seen = Ball { centre: y1, radius: half * (y2 + base.most() * most_y1) };
        let y_seen = Ball { centre: y, radius: half * (most_y1 + base.most() * (y.norm() + half * most_y1)) };
        let moved = y1_seen.plus(&base.cross(&y_seen));
        // The turning as it is in the middle moves with the base; what it grows by comes on top.
        let grown = Ball { centre: V3::zeros(), radius: half * most_swing };
        let growth = half * (swing_change + base.most() * most_swing) + self.slack_sum * most_swing;
        let turned = Moving::fixed(turning, base, half, self.slack_sum)
            .change
            .plus(&Ball { centre: swing, radius: growth })
            .plus(&base.cross(&grown));
        [moved, turned]
    }

    /// How unsure the place of a point that stands `rho` off the TCP makes its speed, m.
    pub fn unsure_of_speed(&self, rho: &V3) -> f64 {
        2.0 * self.slack_sum * self.target.turning.norm() * rho.norm()
    }

    /// Between which values each joint stays over a leaf, rad or m: a parabola of the middle's slope and bend, and what the spread of
    /// the bend and the slack add.
    pub fn spans(&self, leaf: &Leaf) -> [[f64; 2]; MAX_JOINTS] {
        let h = leaf.half;
        let mut spans = [[0.0; 2]; MAX_JOINTS];
        let unsure = self.unsure();
        for (j, span) in spans.iter_mut().enumerate().take(self.arm.len()) {
            let (u, a) = (self.slope[j], self.bend[j]);
            let turns = (a != 0.0 && (u / a).abs() < h).then(|| -0.5 * u * u / a);
            let values = [Some(-u * h + 0.5 * a * h * h), Some(u * h + 0.5 * a * h * h), Some(0.0), turns];
            let out = (0.5 * h * h * leaf.spread[j] + h * unsure[j] + self.slack[j]) * OUTWARD + 1e-14 * (1.0 + self.at.q[j].abs());
            let values = values.into_iter().flatten();
            let [low, high] = values.fold([0.0f64; 2], |[low, high], value| [low.min(value), high.max(value)]);
            *span = [self.at.q[j] + low - out, self.at.q[j] + high + out];
        }
        spans
    }

    /// How wide a stretch may hope to be: where the first-order part alone would make the theorem fail.
    pub fn hope(&self) -> f64 {
        let n = self.arm.len();
        let size = |j: usize| self.slope[j].abs() + 1e-3;
        let most = (0..n).map(|i| (0..n).map(|j| self.first[i][j].abs() * size(j)).sum::<f64>() / size(i)).fold(0.0f64, f64::max);
        if most > 0.0 { 1.0 / most } else { f64::INFINITY }
    }
}

impl Middle<'_> {
    /// The greatest speed of the TCP by the fraction over a leaf, m.
    pub fn tcp_speed(&self, leaf: &Leaf) -> f64 {
        if self.arm.task().rows().iter().filter(|row| **row < 3).count() == 3 {
            // The path gives it: constant on a line, and on a circle too.
            let Target { velocity, bend, third, even, .. } = self.target;
            if even {
                return velocity.norm();
            }
            let ends = (velocity + bend * leaf.half).norm().max((velocity - bend * leaf.half).norm());
            return ends + 0.5 * leaf.half * leaf.half * third;
        }
        let offset = self.view.tcp_offset(&leaf.motion);
        let velocity = (0..self.arm.len()).fold(Ball::zero(), |sum, j| {
            let column = self.view.tcp_column(&leaf.motion, &offset, j).at;
            sum.plus(&column.times(self.slope[j], leaf.slope_spread[j]))
        });
        velocity.most()
    }
}

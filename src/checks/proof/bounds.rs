use crate::arm::Arm;
use crate::checks::channel::{CHANNELS, Channel, Scale};
use crate::checks::{Check, Meter};
use crate::geometry::V3;
use crate::motion::Piece;

use super::ball::{Ball, Moving};
use super::flange;
use super::leaf::{Leaf, Middle, Row};
use super::newton_euler::Ways;
use super::torque::{Stretch, Torques};
use super::view::{Motion, View};

/// How the fraction runs with time over a stretch, which lies on one piece of the law.
#[derive(Debug, Clone, Copy)]
pub(super) struct Pace {
    /// The piece.
    pub piece: Piece,
    /// Fraction in the middle.
    pub u: f64,
    /// Squared rate in the middle, 1/s².
    pub rate_squared: f64,
    /// Acceleration in the middle, 1/s².
    pub accel: f64,
}

/// Nearer than this to an end of a piece, as a fraction of the path, its end is meant: time is known badly where the fraction
/// stands still.
const NEAR_END: f64 = 1e-9;

impl Pace {
    /// From when to when, s into the piece, the fraction is within `half` of the middle: never too short a time.
    fn times(self, half: f64) -> [f64; 2] {
        let Piece { duration, .. } = self.piece;
        let (from, to) = (self.u - half, self.u + half);
        let first = if from <= self.piece.u + NEAR_END { 0.0 } else { self.piece.time_of(from) - 1e-9 * duration };
        let last = if to >= self.piece.end() - NEAR_END { duration } else { self.piece.time_of(to) + 1e-9 * duration };
        [first.max(0.0), last.min(duration)]
    }

    /// The greatest squared rate over a stretch of half-width `half`.
    pub fn most_squared(self, half: f64) -> f64 {
        if self.piece.jerk == 0.0 {
            return (self.rate_squared + 2.0 * self.accel.abs() * half).max(0.0);
        }
        let [first, last] = self.times(half);
        let top = -self.piece.accel / self.piece.jerk;
        let within = (top > first && top < last).then_some(top);
        [first, last].into_iter().chain(within).map(|t| self.piece.at(t)[1].powi(2)).fold(0.0, f64::max)
    }

    /// Places s (from the middle), accelerations and squared rates between which a stretch of half-width `half` stays. Without jerk
    /// the acceleration is constant and the squared rate runs evenly with s, so its two ends are enough; with jerk all three are
    /// bounded apart from each other.
    pub fn vertices(self, half: f64) -> impl Iterator<Item = [f64; 3]> {
        let mut vertices = [[0.0; 3]; 8];
        if self.piece.jerk == 0.0 {
            for (vertex, s) in vertices.iter_mut().zip([-half, half]) {
                *vertex = [s, self.accel, self.rate_squared + 2.0 * self.accel * s];
            }
            return vertices.into_iter().take(2);
        }
        let times = self.times(half);
        let slowest = times.map(|t| self.piece.at(t)[1].max(0.0).powi(2)).into_iter().fold(f64::INFINITY, f64::min);
        // A rate that falls and rises again within the piece is least in between.
        let turning = -self.piece.accel / self.piece.jerk;
        let slowest = if turning > times[0] && turning < times[1] {
            slowest.min(self.piece.at(turning)[1].max(0.0).powi(2))
        } else {
            slowest
        };
        let accels = times.map(|t| self.piece.at(t)[2]);
        let squares = [slowest, self.most_squared(half)];
        for (index, vertex) in vertices.iter_mut().enumerate() {
            *vertex = [if index < 4 { -half } else { half }, accels[index / 2 % 2], squares[index % 2]];
        }
        vertices.into_iter().take(8)
    }

    /// The greatest size of the acceleration over a stretch of half-width `half`.
    pub fn most_accel(self, half: f64) -> f64 {
        if self.piece.jerk == 0.0 {
            return self.accel.abs();
        }
        self.times(half).map(|t| self.piece.at(t)[2].abs()).into_iter().fold(0.0, f64::max)
    }

    /// The greatest size over a stretch of half-width `half` of the acceleration `a s'² + (u + a (s - m)) s''` of a joint whose
    /// slope is `u` in the middle m and whose bend is `a` throughout.
    fn most_joint_accel(self, half: f64, u: f64, a: f64) -> f64 {
        if self.piece.jerk == 0.0 {
            let value = u * self.accel + a * self.rate_squared;
            let change = 3.0 * a * self.accel;
            return (value + half * change).abs().max((value - half * change).abs());
        }
        // A polynomial of time: no farther above its ends than an eighth of its second derivative times the time squared.
        let [first, last] = self.times(half);
        let at = |t: f64| {
            let [s, rate, accel] = self.piece.at(t);
            (a * rate * rate + (u + a * (s - self.u)) * accel).abs()
        };
        let rate = self.most_squared(half).sqrt();
        let second = a.abs() * (3.0 * self.most_accel(half).powi(2) + 4.0 * rate * self.piece.jerk.abs());
        at(first).max(at(last)) + 0.125 * (last - first).powi(2) * second
    }
}

/// What every needed channel asks at most over a stretch.
pub(super) type Asked = [f64; CHANNELS];

/// Outward margin of a bound as a share of the limit: more than the middle's own rounding and slack can amount to.
const MARGIN: f64 = 1e-10;

/// What a largest size asks of a ceiling; an open channel asks nothing.
pub(super) fn asked_of(channel: &Channel, most: f64) -> f64 {
    match channel.scale {
        Scale::Ceiling(limit) => most / limit + MARGIN,
        Scale::Within { half, .. } => most / half + MARGIN,
        Scale::CeilingByRate(_) => channel.asked(most) + MARGIN,
        Scale::Floor(_) | Scale::Open => 0.0,
    }
}

/// Bounds over a stretch of a line or arc. Slots not in `needs` stay 0.
pub(super) fn on_path(meter: &Meter, needs: &[usize], middle: &Middle, leaf: &Leaf, pace: Pace) -> Asked {
    let h = leaf.half;
    let fastest_squared = pace.most_squared(h);
    let fastest = fastest_squared.sqrt();
    let mut asked = [0.0; CHANNELS];
    let ways = Ways { slope: &middle.slope, slope_spread: &leaf.slope_spread, bend: &middle.bend, bend_spread: &leaf.spread };
    let stretch = Stretch { view: &middle.view, motion: &leaf.motion, ways, half: h };
    let torques = Torques::over(middle.arm.joints(), meter, needs, stretch);
    flange::bound(meter, needs, &middle.view, &ways, h, leaf.motion.slack, &mut asked);
    for &slot in needs {
        let channel = meter.channel(slot);
        let j = channel.joint.unwrap_or(0);
        let (u, a, d) = (middle.slope[j], middle.bend[j], leaf.spread[j]);
        asked[slot] = match channel.check {
            Check::Range => {
                let Scale::Within { middle: centre, .. } = channel.scale else { continue };
                let off = middle.at.q[j] - centre;
                let ends = (off + u * h + 0.5 * a * h * h).abs().max((off - u * h + 0.5 * a * h * h).abs());
                // Between the ends a parabola may rise by what it bends; the rest is spread and slack.
                asked_of(channel, ends + 0.5 * h * h * (a.abs() + d) + middle.slack[j])
            }
            Check::Rate => {
                let most = (u + a * h).abs().max((u - a * h).abs()) + h * d + (leaf.slope_spread[j] - h * (a.abs() + d)).max(0.0);
                asked_of(channel, most * fastest)
            }
            Check::Accel => {
                let most = pace.most_joint_accel(h, u, a);
                asked_of(channel, most + d * (h * pace.most_accel(h) + fastest_squared))
            }
            Check::Holding | Check::Moving | Check::Brake => torques.as_ref().map_or(f64::NAN, |t| t.asked(channel, pace)),
            Check::Flange => asked[slot],
            Check::SpeedLeft => speed_left(channel, middle, leaf),
            Check::TcpSpeed => asked_of(channel, middle.tcp_speed(leaf) * fastest),
            Check::Singular | Check::Reach | Check::Rms => 0.0,
        };
    }
    if let Some(slot) = meter.slots(Check::Singular).find(|slot| needs.contains(slot)) {
        let channel = meter.channel(slot);
        let Scale::Floor(least) = channel.scale else { return asked };
        // A yes or no: the least singular value allowed is kept throughout, or nothing is known.
        asked[slot] =
            if super::closeness::keeps(middle, leaf, least / (1.0 - channel.reserve)) { 1.0 - channel.reserve } else { 2.0 };
    }
    asked
}

/// The tool speed left: translation rows of the inverse Jacobian over the stretch, by their first-order part and a bound of the
/// rest: `J⁻¹ = Y - F Y + F² J⁻¹` with `|F| <= h |Y J'| + rest`.
fn speed_left(channel: &Channel, middle: &Middle, leaf: &Leaf) -> f64 {
    let Scale::Floor(least) = channel.scale else { return 0.0 };
    let n = middle.arm.len();
    let h = leaf.half;
    let error = |i: usize, j: usize| h * middle.first[i][j].abs() + leaf.rest[i][j];
    // A bound b of the rows of J⁻¹: b >= yt + E b, found by iteration from below; E has spectral radius below 1.
    let mut b: Row = std::array::from_fn(|i| middle.norms[i][0]);
    for _ in 0..60 {
        let next: Row = std::array::from_fn(|i| middle.norms[i][0] + (0..n).map(|j| error(i, j) * b[j]).sum::<f64>());
        let settled = (0..n).all(|i| next[i] <= b[i] * (1.0 + 1e-6) + 1e-12);
        b = next.map(|value| value * (1.0 + 1e-6) + 1e-12);
        if settled {
            break;
        }
        if !b[..n].iter().all(|value| value.is_finite()) {
            return 2.0;
        }
    }
    let closed = (0..n).all(|i| middle.norms[i][0] + (0..n).map(|j| error(i, j) * b[j]).sum::<f64>() <= b[i]);
    if !closed {
        return 2.0;
    }
    let eb: Row = std::array::from_fn(|i| (0..n).map(|j| error(i, j) * b[j]).sum::<f64>());
    (0..n)
        .map(|i| {
            let change: V3 = (0..n).fold(V3::zeros(), |sum, j| sum + middle.y_moving[j] * middle.first[i][j]);
            let row = middle.y_moving[i];
            let ends = (row - change * h).norm().max((row + change * h).norm());
            let rest: f64 = (0..n).map(|j| leaf.rest[i][j] * middle.norms[j][0] + error(i, j) * eb[j]).sum();
            least * (ends + rest) / middle.arm.joints()[i].rate
        })
        .fold(0.0, f64::max)
        + MARGIN
}

/// A stretch of a joint move or of a blend by joints: the arm's motion over it, its half-width, the joints' slopes and bends in
/// the middle, and how far both may be from that.
pub(super) struct Even<'a> {
    pub view: &'a View<'a>,
    pub motion: &'a Motion,
    pub slope: &'a Row,
    pub slope_spread: &'a Row,
    pub bend: &'a Row,
    pub bend_spread: &'a Row,
    pub half: f64,
}

/// Bounds over a stretch of a joint move: only torques, flange and TCP speed need any; the rest is exact by its ends.
pub(super) fn on_joint_move(arm: &Arm, meter: &Meter, needs: &[usize], even: &Even, pace: Pace) -> Asked {
    let mut asked = [0.0; CHANNELS];
    let Even { view, motion, slope, slope_spread, bend, bend_spread, half } = *even;
    let ways = Ways { slope, slope_spread, bend, bend_spread };
    let torques = Torques::over(arm.joints(), meter, needs, Stretch { view, motion, ways, half });
    flange::bound(meter, needs, view, &ways, half, motion.slack, &mut asked);
    for &slot in needs {
        let channel = meter.channel(slot);
        asked[slot] = match channel.check {
            Check::Holding | Check::Moving | Check::Brake => torques.as_ref().map_or(f64::NAN, |t| t.asked(channel, pace)),
            Check::Flange => asked[slot],
            Check::TcpSpeed => {
                let offset = view.tcp_offset(motion);
                let twist = (0..arm.len()).fold(Moving::zero(), |sum, j| {
                    let column = view.tcp_column(motion, &offset, j);
                    let scaled = |ball: &Ball| ball.times(slope[j], slope_spread[j]);
                    let change = scaled(&column.change).plus(&column.at.times(bend[j], bend_spread[j]));
                    sum.plus(&Moving { at: scaled(&column.at), change })
                });
                let (v, c) = (twist.at.centre, twist.change.centre * half);
                let most = (v + c).norm().max((v - c).norm()) + half * twist.change.radius;
                asked_of(channel, most * pace.most_squared(half).sqrt())
            }
            _ => 0.0,
        };
    }
    asked
}

use crate::arm::Arm;
use crate::checks::channel::{CHANNELS, Channel, Scale};
use crate::checks::points::Carrying;
use crate::checks::{Check, Meter};
use crate::geometry::V3;

use super::flange;
use super::leaf::{Leaf, Middle, Row};
use super::newton_euler::Ways;
use super::pace::Pace;
use super::points::Carried;
use super::torque::{Stretch, Torques};
use super::view::{Motion, View};

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

/// The greater of two sizes; what is no number stays no number.
fn most_of(most: f64, next: f64) -> f64 {
    if next <= most { most } else { next }
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
            Check::PointSpeed => {
                let speed = |point: &Carrying| middle.point_speed(leaf, &ways, point);
                asked_of(channel, meter.points(slot).iter().map(speed).fold(0.0, most_of) * fastest)
            }
            Check::Singular | Check::Reach | Check::Rms | Check::WindUp => 0.0,
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
    most_asked_by_speed(middle, leaf).map_or(2.0, |most| least * most + MARGIN)
}

/// The most over a leaf that a unit of tool speed in the worst direction asks of any joint's rate, s/m; `None` where no bound is found.
pub(super) fn most_asked_by_speed(middle: &Middle, leaf: &Leaf) -> Option<f64> {
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
            return None;
        }
    }
    let closed = (0..n).all(|i| middle.norms[i][0] + (0..n).map(|j| error(i, j) * b[j]).sum::<f64>() <= b[i]);
    if !closed {
        return None;
    }
    let eb: Row = std::array::from_fn(|i| (0..n).map(|j| error(i, j) * b[j]).sum::<f64>());
    let asked = (0..n).map(|i| {
        let change: V3 = (0..n).fold(V3::zeros(), |sum, j| sum + middle.y_moving[j] * middle.first[i][j]);
        let row = middle.y_moving[i];
        let ends = (row - change * h).norm().max((row + change * h).norm());
        let rest: f64 = (0..n).map(|j| leaf.rest[i][j] * middle.norms[j][0] + error(i, j) * eb[j]).sum();
        (ends + rest) / middle.arm.joints()[i].rate
    });
    Some(asked.fold(0.0, most_of))
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
                let tcp = Carried { joints: arm.len(), at: view.at.tcp.at };
                asked_of(channel, view.point_speed(motion, &ways, tcp, half) * pace.most_squared(half).sqrt())
            }
            Check::PointSpeed => {
                let speed = |point: &Carrying| view.point_speed(motion, &ways, Carried::of(point, view), half);
                asked_of(channel, meter.points(slot).iter().map(speed).fold(0.0, most_of) * pace.most_squared(half).sqrt())
            }
            _ => 0.0,
        };
    }
    asked
}

use crate::arm::{Joint, MAX_JOINTS};
use crate::checks::channel::{Channel, Scale};
use crate::checks::meter::STANDS;
use crate::checks::{Check, Meter};

use super::ball::Slope;
use super::bounds::asked_of;
use super::newton_euler::{About, Bodies, Ways};
use super::pace::Pace;
use super::view::{Motion, View};

/// A stretch of a segment with the arm's motion over it.
pub(super) struct Stretch<'a> {
    pub view: &'a View<'a>,
    pub motion: &'a Motion,
    pub ways: Ways<'a>,
    pub half: f64,
}

/// What the torques of all joints are over a stretch.
pub(super) struct Torques<'a> {
    stretch: Stretch<'a>,
    joints: &'a [Joint],
    /// Holding torque of the weights, less what balancers do.
    weights: [Slope; MAX_JOINTS],
    push: Option<[Slope; MAX_JOINTS]>,
    /// Torque for each unit of the law's acceleration and of its squared rate, where motion counts.
    going: Option<[[About; MAX_JOINTS]; 2]>,
}

impl<'a> Torques<'a> {
    /// The torques over a stretch; `None` where no needed channel asks for one.
    pub fn over(joints: &'a [Joint], meter: &Meter, needs: &[usize], stretch: Stretch<'a>) -> Option<Self> {
        let wants = |check: Check| meter.slots(check).any(|slot| needs.contains(&slot));
        let moving = wants(Check::Moving);
        if !(moving || wants(Check::Holding) || wants(Check::Brake)) {
            return None;
        }
        let Stretch { view, motion, ways, .. } = &stretch;
        let mut weights = view.weights(motion, ways.slope, ways.slope_spread);
        for (j, joint) in joints.iter().enumerate() {
            weights[j] = weights[j].plus(balance(joint, &stretch, j));
        }
        let push = if moving || wants(Check::Holding) { view.push(motion) } else { None };
        let going = moving.then(|| Bodies::of(view).asked(view, motion, ways));
        Some(Self { stretch, joints, weights, push, going })
    }

    /// The most that a channel of holding, moving torque or brake asks over the stretch.
    pub fn asked(&self, channel: &Channel, pace: Pace) -> f64 {
        let j = channel.joint.unwrap_or(0);
        match channel.check {
            Check::Brake => asked_of(channel, self.weights[j].most(self.stretch.half)),
            Check::Moving => self.moving(channel, j, pace),
            _ => asked_of(channel, self.still(j).most(self.stretch.half)),
        }
    }

    /// What standing still asks.
    fn still(&self, j: usize) -> Slope {
        self.push.as_ref().map_or(self.weights[j], |push| self.weights[j].plus(push[j]))
    }

    /// `still(s) + alpha s'' + beta s'^2` and the rotor's part, all but for their radii even in each of s, s'' and s'^2: their
    /// vertices are looked at and the radii added.
    fn moving(&self, channel: &Channel, j: usize, pace: Pace) -> f64 {
        let Some([alpha, beta]) = &self.going else { return f64::NAN };
        let Stretch { ways, half, .. } = &self.stretch;
        let (u, a, du, d) = (ways.slope[j], ways.bend[j], ways.slope_spread[j], ways.bend_spread[j]);
        let h = *half;
        let drive = &self.joints[j].drive;
        let still = self.still(j);
        let rotor = drive.rotor_inertia();
        let fastest_squared = pace.most_squared(h);
        let at = |s: f64, accel: f64, squared: f64| {
            let speeding = (u + a * s) * accel + a * squared;
            still.value + s * still.change + alpha[j].0 * accel + beta[j].0 * squared + rotor * speeding
        };
        let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
        for [s, accel, squared] in pace.vertices(h) {
            let asked = at(s, accel, squared);
            if asked.is_nan() {
                return f64::NAN;
            }
            (low, high) = (low.min(asked), high.max(asked));
        }
        // Where the law comes to rest its squared rate is 0 at the end of the stretch, give or take the seam.
        let most_accel = pace.most_accel(h);
        let unsure = rotor * (d * fastest_squared + (du - h * a.abs()).max(0.0) * most_accel);
        let radius = h * still.spread + alpha[j].1 * most_accel + beta[j].1 * fastest_squared + unsure;
        let (low, high) = (low - radius, high + radius);
        let fastest = (u.abs() + du) * fastest_squared.sqrt();
        let friction = drive.friction.map_or(0.0, |friction| friction.asks(1.0, fastest));
        // A joint that stands still all along has no friction to overcome, as the meter reads it.
        let friction = if u.abs() + du <= STANDS { 0.0 } else { friction };
        let up = if u + du > 0.0 { friction } else { 0.0 };
        let down = if u - du < 0.0 { friction } else { 0.0 };
        let most = (high + up).max(down - low);
        let limited = match channel.scale {
            Scale::CeilingByRate(curve) => Channel { scale: Scale::Ceiling(curve.at(fastest)), ..*channel },
            _ => *channel,
        };
        if radius.is_nan() { f64::NAN } else { asked_of(&limited, most) }
    }
}

/// What a balancer takes off a joint's torque: its value in the middle, and its change by the slopes that its curve has where the
/// joint may be.
fn balance(joint: &Joint, stretch: &Stretch, j: usize) -> Slope {
    let Some(curve) = &joint.drive.balancer else { return Slope::default() };
    let (u, du) = (stretch.ways.slope[j], stretch.ways.slope_spread[j]);
    let q = stretch.view.at.q[j];
    let reach = stretch.half * (u.abs() + du) + stretch.motion.slack;
    let [least, most] = curve.slopes(q - reach, q + reach);
    let (slope, apart) = (0.5 * (least + most), 0.5 * (most - least));
    Slope { value: -curve.at(q), change: -slope * u, spread: slope.abs() * du + apart * (u.abs() + du) }
}

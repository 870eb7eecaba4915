use crate::arm::{Arm, Joints, MAX_JOINTS};
use crate::motion::{Follower, Segment};
use crate::program::Carried;

use super::{Meter, Place};

/// The squared torque of every joint summed up over one segment, for the root mean square over the cycle.
#[derive(Debug, Clone, PartialEq)]
pub struct TorqueSum {
    /// Integral over the motion, N²·m²·s or N²·s; NaN where the segment could not be followed to its end.
    pub moves: Joints,
    /// Integral over the dwell at its end.
    pub stands: Joints,
    /// Where each joint's torque is highest.
    pub highest: [Place; MAX_JOINTS],
}

/// The integral of a squared torque is settled to this share of the squared continuous rating, on average over the time.
pub const SETTLED: f64 = 1e-5;
/// Intervals of one piece of a speed law are halved at most this often.
const MOST_HALVINGS: u32 = 16;

/// Squares of all joints' torques at an instant, or their integrals.
type Squares = [f64; MAX_JOINTS];

impl TorqueSum {
    /// Sums up a segment: piece by piece of its law by adaptive Simpson's rule, then the dwell, in which the arm stands with its
    /// motors on and holds what the tool carries.
    pub(super) fn of(arm: &Arm, segment: &Segment, meter: &Meter) -> Self {
        let n = arm.len();
        let run = Run { arm, meter, segment, follower: Follower::of(arm, segment) };
        if segment.trouble.is_some() || segment.followed_to() < 1.0 {
            let unknown = Joints::from_fn(n, |_| f64::NAN);
            return Self { moves: unknown, stands: unknown, highest: [Place { time: 0.0, u: 0.0 }; MAX_JOINTS] };
        }
        let (moves, highest) = run.integral();
        Self { moves: Joints::from_slice(&moves[..n]), stands: run.standing(1.0, segment.dwell, &{ segment.carried }), highest }
    }

    /// The integral over a time in which the arm stands at the start of a segment with what it carries there.
    pub(super) fn before(arm: &Arm, segment: &Segment, meter: &Meter, carried: &Carried, time: f64) -> Joints {
        Run { arm, meter, segment, follower: Follower::of(arm, segment) }.standing(0.0, time, carried)
    }
}

/// One segment while its torque is summed up.
struct Run<'a> {
    arm: &'a Arm,
    meter: &'a Meter<'a>,
    segment: &'a Segment,
    follower: Follower<'a>,
}

/// A look while a torque is summed up: when, and the squares there.
#[derive(Clone, Copy)]
struct At {
    dt: f64,
    squares: Squares,
}

impl Run<'_> {
    /// The integral over the motion of every joint's squared torque, and where each was highest.
    fn integral(&self) -> (Squares, [Place; MAX_JOINTS]) {
        let mut sum = [0.0; MAX_JOINTS];
        let mut highest = [(0.0, Place { time: 0.0, u: 0.0 }); MAX_JOINTS];
        for (index, piece) in self.segment.law.pieces().iter().enumerate().filter(|(_, piece)| piece.duration > 0.0) {
            let mut look = |dt: f64| {
                let [u, rate, accel] = self.segment.law.pieces()[index].at(dt);
                let u = u.clamp(0.0, 1.0);
                let squares = self.squares(u, rate.max(0.0), accel);
                for (j, square) in squares.iter().enumerate() {
                    if *square > highest[j].0 {
                        highest[j] = (*square, Place { time: piece.start + dt, u });
                    }
                }
                At { dt, squares }
            };
            let (a, m, b) = (look(0.0), look(0.5 * piece.duration), look(piece.duration));
            let mut open = vec![(a, m, b, MOST_HALVINGS)];
            while let Some((a, m, b, left)) = open.pop() {
                let [one, other] = [look(0.5 * (a.dt + m.dt)), look(0.5 * (m.dt + b.dt))];
                let whole = simpson(&a, &m, &b);
                let [first, second] = [simpson(&a, &one, &m), simpson(&m, &other, &b)];
                let off = |j: usize| (first[j] + second[j] - whole[j]) / 15.0;
                // What is not a number gets no better by halving.
                let settled = (0..self.arm.len()).all(|j| !(off(j).abs() > self.allowed(j) * (b.dt - a.dt)));
                if settled || left == 0 {
                    for j in 0..self.arm.len() {
                        sum[j] += first[j] + second[j] + off(j);
                    }
                } else {
                    open.push((a, one, m, left - 1));
                    open.push((m, other, b, left - 1));
                }
            }
        }
        (sum, highest.map(|(_, place)| place))
    }

    /// What the squared torque of a joint may be off by, on average.
    fn allowed(&self, j: usize) -> f64 {
        self.arm.joints()[j].torque.map_or(f64::INFINITY, |torque| SETTLED * torque.holding * torque.holding)
    }

    /// The integral over a dwell at fraction `u`, in which the process force, which belongs to the motion, is left out.
    fn standing(&self, u: f64, time: f64, carried: &Carried) -> Joints {
        let n = self.arm.len();
        if !(time > 0.0) {
            return Joints::zeros(n);
        }
        let Some(instant) = self.follower.at(u) else { return Joints::from_fn(n, |_| f64::NAN) };
        let torque = self.meter.moving_torques(&instant, 0.0, 0.0, carried);
        Joints::from_fn(n, |j| torque[j] * torque[j] * time)
    }

    fn squares(&self, u: f64, rate: f64, accel: f64) -> Squares {
        let Some(instant) = self.follower.at(u) else { return [f64::NAN; MAX_JOINTS] };
        let torque = self.meter.moving_torques(&instant, rate, accel, &self.segment.carried);
        std::array::from_fn(|j| torque.get(j).map_or(0.0, |torque| torque * torque))
    }
}

/// Simpson's rule over three looks at even distances.
fn simpson(a: &At, m: &At, b: &At) -> Squares {
    std::array::from_fn(|j| (b.dt - a.dt) / 6.0 * (a.squares[j] + 4.0 * m.squares[j] + b.squares[j]))
}

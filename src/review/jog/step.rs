use crate::arm::{Arm, JointKind, Joints, MAX_JOINTS};
use crate::geometry::{Pose, V3, turn_about};
use crate::kinematics::{Jacobian, Lu, Posture, pose_error, smallest_singular_value, within};
use crate::program::Carried;

/// Below this smallest singular value steps are damped (lengths divided by the characteristic length): where joints must turn some
/// fifty times as far as the tool. It is what recipes usually allow on lines and arcs at the least; common practice, no source.
pub const DAMPED_BELOW: f64 = 0.02;
/// The damping at a singular posture itself. From [`DAMPED_BELOW`] on it grows as `λ² = λ0² (1 - (σ / σ0)²)`, the rule for damped
/// least squares of Nakamura and Hanafusa (1986) in the form with singular values (from memory). It bounds what any part of a
/// gap asks of the joints to `1 / (2 λ)` of it.
pub const GREATEST_DAMPING: f64 = 0.02;
/// No joint turns farther than this in one step, rad (30 degrees): a hand that steps the tool expects no other posture.
pub const MOST_TURN: f64 = std::f64::consts::PI / 6.0;
/// No joint slides farther than this in one step, m.
pub const MOST_SLIDE: f64 = 0.2;

/// A step is walked in parts no longer than this, m.
const PART_M: f64 = 5e-3;
/// The same for turning, rad (one degree).
const PART_RAD: f64 = std::f64::consts::PI / 180.0;
/// What is missing from the end of a step must be below this, m and rad: a thousandth of what counts as landed (1e-9).
const LANDED: f64 = 1e-12;
/// Steps of Newton (damped where need be) at each part's end; without damping three arrive.
const TRIES: usize = 8;
/// Halvings of a part that runs into a range end: a part in a million million is left.
const HALVINGS: usize = 40;
/// A direction may have this share outside the arm's task and still count as in it: rounding.
const OUTSIDE: f64 = 1e-9;

/// Where the arm stands and what hangs on it.
#[derive(Debug, Clone, Copy)]
pub struct Stand<'a> {
    /// The arm.
    pub arm: &'a Arm,
    /// Tool and load.
    pub carried: &'a Carried,
    /// Joint values.
    pub q: Joints,
}

/// What stopped a step before its end.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Stop {
    /// A joint is at an end of its range.
    RangeEnd {
        /// Which joint.
        joint: usize,
        /// Whether it is the high end.
        high: bool,
    },
    /// A joint would move farther than one step allows ([`MOST_TURN`], [`MOST_SLIDE`]).
    JointTooFar {
        /// Which joint.
        joint: usize,
    },
}

/// Why the arm was not moved at all.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Refused {
    /// The arm's task leaves this direction out.
    NotInTask,
    /// A joint value is not in the joint's range.
    BeyondRange {
        /// Which joint.
        joint: usize,
        /// The value, rad or m.
        value: f64,
    },
    /// No joint values were found that reach the pose.
    OutOfReach {
        /// How far from it the nearest found posture stays, m.
        missing: f64,
    },
}

/// A step as it was done.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Step {
    /// Joint values after it.
    pub q: Joints,
    /// The share of the asked step that the TCP made in the asked direction.
    pub done: f64,
    /// What is missing to the asked pose: m along and rad about the base axes; 0 in directions that the task leaves out.
    pub missing: [f64; 6],
    /// The greatest damping that was used, 0 for none.
    pub damping: f64,
    /// The smallest singular value on the way.
    pub smallest: f64,
    /// What stopped it.
    pub stop: Option<Stop>,
}

/// The arm after its TCP was asked to move along the unit twist `direction` (base axes, either moving or turning) by `by` (m or rad).
///
/// The step is walked in parts. Each part solves for the joint motion least in its sum of squared shares of the joints' rates,
/// damped near singular postures, again and again until it lands. Without damping and stop it ends on the asked pose to 1e-9.
///
/// # Errors
/// [`Refused::NotInTask`].
pub fn cartesian_step(stand: &Stand, direction: &[f64; 6], by: f64) -> Result<Step, Refused> {
    let task = stand.arm.task();
    if !(0..6).all(|row| task.rows().contains(&row) || direction[row].abs() <= OUTSIDE) {
        return Err(Refused::NotInTask);
    }
    let walk = Walk::of(stand, direction, by);
    let turns = direction[3..].iter().any(|part| *part != 0.0);
    let parts = (by.abs() / if turns { PART_RAD } else { PART_M }).ceil().max(1.0);
    let (mut q, mut stop, mut damping, mut smallest) = (stand.q, None, 0.0f64, f64::INFINITY);
    for part in 1..=parts as usize {
        let (from, to) = ((part - 1) as f64 / parts, part as f64 / parts);
        let near = walk.near(&q, to);
        smallest = smallest.min(near.smallest);
        damping = damping.max(near.damping);
        let Some(kept) = walk.broken(&near.q) else {
            q = near.q;
            continue;
        };
        stop = Some(kept);
        let (mut good, mut bad) = (from, to);
        for _ in 0..HALVINGS {
            let middle = 0.5 * (good + bad);
            let near = walk.near(&q, middle);
            match walk.broken(&near.q) {
                None => (q, good) = (near.q, middle),
                Some(other) => (stop, bad) = (Some(other), middle),
            }
        }
        break;
    }
    let missing = walk.missing(&q, 1.0);
    Ok(Step { q, done: walk.done(&q), missing, damping, smallest, stop })
}

struct Walk<'a> {
    arm: &'a Arm,
    carried: &'a Carried,
    start: Joints,
    from: Pose,
    direction: [f64; 6],
    by: f64,
    /// How much each joint is moved for its share in the least motion, 1 for the fastest, rad or m.
    weights: Joints,
}

struct Near {
    q: Joints,
    damping: f64,
    smallest: f64,
}

impl<'a> Walk<'a> {
    fn of(stand: &Stand<'a>, direction: &[f64; 6], by: f64) -> Self {
        let Stand { arm, carried, q } = *stand;
        let length = arm.characteristic_length().m;
        let unit = |j: usize| if arm.joints()[j].kind == JointKind::Prismatic { length } else { 1.0 };
        let fastest = (0..arm.len()).map(|j| arm.joints()[j].rate / unit(j)).fold(0.0, f64::max);
        // Rates weigh only where there is a choice, so that the damping means the same for every other arm.
        let weights = Joints::from_fn(arm.len(), |j| if arm.is_redundant() { arm.joints()[j].rate / fastest } else { unit(j) });
        let from = Posture::at(arm.chain(), &q).tcp(&carried.tcp);
        Self { arm, carried, start: q, from, direction: *direction, by, weights }
    }

    /// Where the TCP should be at a fraction of the step.
    fn target(&self, fraction: f64) -> Pose {
        let [x, y, z, a, b, c] = self.direction;
        let (along, about, by) = (V3::new(x, y, z), V3::new(a, b, c), self.by * fraction);
        let axes = if about.norm() > 0.0 { turn_about(&about, by) * self.from.axes } else { self.from.axes };
        Pose { axes, at: self.from.at + along * by }
    }

    fn missing(&self, q: &Joints, fraction: f64) -> [f64; 6] {
        let now = Posture::at(self.arm.chain(), q).tcp(&self.carried.tcp);
        let gap = pose_error(&now, &self.target(fraction));
        let rows = self.arm.task().rows();
        std::array::from_fn(|row| if rows.contains(&row) { gap[row] } else { 0.0 })
    }

    fn done(&self, q: &Joints) -> f64 {
        let now = Posture::at(self.arm.chain(), q).tcp(&self.carried.tcp);
        let way = pose_error(&self.from, &now);
        way.iter().zip(&self.direction).map(|(a, b)| a * b).sum::<f64>() / self.by
    }

    fn size(&self, gap: &[f64; 6]) -> f64 {
        let length = self.arm.characteristic_length().m;
        (0..6).map(|row| if row < 3 { (gap[row] / length).powi(2) } else { gap[row].powi(2) }).sum()
    }

    /// The joint values from `q` on that come nearest to the pose at a fraction.
    fn near(&self, q: &Joints, fraction: f64) -> Near {
        let mut near = Near { q: *q, damping: 0.0, smallest: f64::INFINITY };
        let mut gap = self.missing(q, fraction);
        for _ in 0..TRIES {
            if within(&gap, self.arm.task(), LANDED, LANDED) {
                break;
            }
            let (motion, damping, smallest) = self.solve(&near.q, &gap);
            near.damping = near.damping.max(damping);
            near.smallest = near.smallest.min(smallest);
            // What would lead farther away is made shorter, or not at all.
            let mut share = 1.0;
            let better = (0..12).find_map(|_| {
                let next = near.q.zip(&motion, |a, b| a + share * b);
                let left = self.missing(&next, fraction);
                share *= 0.5;
                (self.size(&left) < self.size(&gap)).then_some((next, left))
            });
            let Some((next, left)) = better else { break };
            (near.q, gap) = (next, left);
        }
        near
    }

    /// Joint motion `W Aᵀ (A Aᵀ + λ² 1)⁻¹ gap`, A the scaled task rows times the weights W, with its λ and the smallest singular value.
    fn solve(&self, q: &Joints, gap: &[f64; 6]) -> (Joints, f64, f64) {
        let (arm, task, length) = (self.arm, self.arm.task(), self.arm.characteristic_length().m);
        let posture = Posture::at(arm.chain(), q);
        let jacobian = Jacobian::at(arm.chain(), &posture, &posture.tcp(&self.carried.tcp).at);
        let scaled = jacobian.scaled_rows(task, length);
        let smallest = smallest_singular_value(&scaled);
        let near = 1.0 - (smallest / DAMPED_BELOW).powi(2);
        let damping = if smallest >= DAMPED_BELOW { 0.0 } else { GREATEST_DAMPING * near.sqrt() };
        let m = scaled.rows;
        let mut a = scaled.entries;
        a.iter_mut().for_each(|row| row.iter_mut().zip(self.weights.iter()).for_each(|(entry, weight)| *entry *= weight));
        let mut gram = [[0.0; MAX_JOINTS]; MAX_JOINTS];
        let mut wanted = [0.0; MAX_JOINTS];
        for (i, &row) in task.rows().iter().enumerate() {
            for k in 0..m {
                gram[i][k] = a[i].iter().zip(&a[k]).map(|(x, y)| x * y).sum();
            }
            gram[i][i] += damping * damping;
            wanted[i] = if row < 3 { gap[row] / length } else { gap[row] };
        }
        let pulls = Lu::of(gram, m).solve(&wanted);
        let motion = Joints::from_fn(arm.len(), |j| self.weights[j] * (0..m).map(|i| a[i][j] * pulls[i]).sum::<f64>());
        (motion, damping, smallest)
    }

    /// What forbids these joint values, if anything. A joint that began beyond its range may stay where it was.
    fn broken(&self, q: &Joints) -> Option<Stop> {
        self.arm.joints().iter().enumerate().find_map(|(joint, data)| {
            let (now, start) = (q[joint], self.start[joint]);
            let most = if data.kind == JointKind::Prismatic { MOST_SLIDE } else { MOST_TURN };
            if !(now <= data.range.high.max(start)) {
                Some(Stop::RangeEnd { joint, high: true })
            } else if !(now >= data.range.low.min(start)) {
                Some(Stop::RangeEnd { joint, high: false })
            } else if !((now - start).abs() <= most) {
                Some(Stop::JointTooFar { joint })
            } else {
                None
            }
        })
    }
}

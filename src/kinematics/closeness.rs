use crate::arm::{Arm, Joint, Joints, MAX_JOINTS, Task};
use crate::geometry::V3;

use super::{Jacobian, Lu, Posture, SphericalWrist, stacked};

/// What remains of the tool's speed in its worst direction when every joint keeps its rate. 0 at a singular posture.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SpeedLeft {
    /// Speed of the TCP that any direction allows with the orientation held, m/s. Infinite where the task has no moving.
    pub moving: f64,
    /// The direction that allows no more than that, unit vector, base axes.
    pub direction: V3,
    /// The joint that stops it.
    pub joint: usize,
    /// Turning rate that any axis allows with the TCP held, rad/s. Infinite where the task has no turning.
    pub turning: f64,
    /// The axis that allows no more than that, unit vector, base axes.
    pub axis: V3,
}

/// Speeds left, from the inverse of the stacked Jacobian (rows: joints; columns: the task's rows in order).
pub fn speed_left(inverse: &[[f64; MAX_JOINTS]; MAX_JOINTS], task: &Task, joints: &[Joint]) -> SpeedLeft {
    let mut left = SpeedLeft { moving: f64::INFINITY, direction: V3::x(), joint: 0, turning: f64::INFINITY, axis: V3::x() };
    for (j, (row, joint)) in inverse.iter().zip(joints).enumerate() {
        let (mut along, mut about) = (V3::zeros(), V3::zeros());
        for (slot, &axis) in task.rows().iter().enumerate() {
            if axis < 3 {
                along[axis] = row[slot];
            } else {
                about[axis - 3] = row[slot];
            }
        }
        let (moving, turning) = (joint.rate / along.norm(), joint.rate / about.norm());
        if moving < left.moving || moving.is_nan() {
            left.moving = if moving.is_nan() { 0.0 } else { moving };
            left.direction = along.try_normalize(0.0).unwrap_or(V3::x());
            left.joint = j;
        }
        if turning < left.turning || turning.is_nan() {
            left.turning = if turning.is_nan() { 0.0 } else { turning };
            left.axis = about.try_normalize(0.0).unwrap_or(V3::x());
        }
    }
    left
}

/// The kind of a singular posture, where the arm has a spherical wrist.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum SingularKind {
    /// The first and third wrist axes in line.
    Wrist,
    /// The arm stretched or folded.
    Elbow,
    /// The wrist centre on the first axis, or beside it by no more than the shoulder's offset.
    Shoulder,
}

/// How close a posture is to a singular one.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Closeness {
    /// The singular posture that Newton's method reached, joint values.
    pub posture: Joints,
    /// Distance to it: norm of the joint motion, rad, sliding joints divided by the characteristic length. An estimate, no proof.
    pub distance: f64,
    /// Its kind, for arms with a spherical wrist.
    pub kind: Option<SingularKind>,
}

/// Beyond this joint motion a singular posture is just "far", rad (30 degrees).
const FAR: f64 = std::f64::consts::PI / 6.0;

/// How many Newton steps are made towards the singular posture at most. Mostly four or five arrive; where two singular values vanish at
/// once each step only halves the way.
const STEPS: usize = 32;

/// Closer than this to the singular posture, rad, as Newton's next step would be long, it counts as reached.
const ARRIVED: f64 = 1e-7;

/// The singular posture nearest to `q`, as Newton steps along the gradient of the determinant find it; `None` if it is farther
/// than 30 degrees of joint motion, if they find none, or if the arm has more joints than its task rows.
pub fn singular_posture(arm: &Arm, wrist: Option<SphericalWrist>, q: &Joints) -> Option<Closeness> {
    if arm.is_redundant() {
        return None;
    }
    let length = arm.characteristic_length().m;
    let mut at = *q;
    let mut arrived = false;
    for _ in 0..STEPS {
        // Where there is no finite gradient, the posture is singular to the last digit: it is what was sought.
        let gradient = log_determinant_gradient(arm, &at);
        // In scaled joint values (sliding joints divided by the length) the gradient of log|det| is multiplied by it.
        let scale = |j: usize| if arm.chain().turns[j] { 1.0 } else { length };
        let square = gradient.map_or(f64::INFINITY, |g| (0..arm.len()).map(|j| (g[j] * scale(j)).powi(2)).sum());
        arrived = 1.0 / square.sqrt() < ARRIVED;
        let Some(gradient) = gradient.filter(|_| square.is_finite()) else { break };
        for j in 0..arm.len() {
            at[j] -= gradient[j] * scale(j).powi(2) / square;
        }
        let so_far = distance(arm, length, q, &at);
        if arrived || so_far.is_nan() || so_far > 2.0 * FAR {
            break;
        }
    }
    let distance = distance(arm, length, q, &at);
    (arrived && distance <= FAR).then(|| Closeness { posture: at, distance, kind: wrist.map(|wrist| kind(arm, wrist, &at)) })
}

fn distance(arm: &Arm, length: f64, a: &Joints, b: &Joints) -> f64 {
    let square = |j: usize| {
        let d = b[j] - a[j];
        (if arm.chain().turns[j] { d } else { d / length }).powi(2)
    };
    (0..arm.len()).map(square).sum::<f64>().sqrt()
}

/// Gradient of log|det J| of the task's rows by the joint values: `tr(J⁻¹ dJ/dq_k)`. The reference point is the flange, of which
/// it is independent for a whole task.
fn log_determinant_gradient(arm: &Arm, q: &Joints) -> Option<Joints> {
    let chain = arm.chain();
    let n = arm.len();
    let posture = Posture::at(chain, q);
    let jacobian = Jacobian::at(chain, &posture, &posture.flange().at);
    let inverse = super::invert(&Lu::of(stacked(&jacobian, arm.task(), &[]), n));
    let mut gradient = Joints::zeros(n);
    for k in 0..n {
        let mut trace = 0.0;
        for j in 0..n {
            let change = jacobian_change(chain, &jacobian, j, k);
            for (slot, &row) in arm.task().rows().iter().enumerate() {
                trace += inverse[j][slot] * change[row];
            }
        }
        gradient[k] = trace;
    }
    gradient.is_finite().then_some(gradient)
}

/// `dJ_j / dq_k`: how column j changes with joint k, base axes.
fn jacobian_change(chain: &crate::arm::Chain, jacobian: &Jacobian, j: usize, k: usize) -> [f64; 6] {
    let (low, high) = (j.min(k), j.max(k));
    if !chain.turns[low] {
        return [0.0; 6];
    }
    let part = |j: usize, from: usize| {
        let c = jacobian.columns()[j];
        V3::new(c[from], c[from + 1], c[from + 2])
    };
    let moved = part(low, 3).cross(&part(high, 0));
    let turned = if k < j && chain.turns[j] { part(k, 3).cross(&part(j, 3)) } else { V3::zeros() };
    [moved.x, moved.y, moved.z, turned.x, turned.y, turned.z]
}

/// Sine between the outer wrist axes below which a singular posture is the wrist's own.
const WRIST_IN_LINE: f64 = 0.02;
/// Sine between what joints 2 and 3 do to the wrist centre below which the arm is stretched or folded.
const ARM_IN_LINE: f64 = 0.02;

fn kind(arm: &Arm, wrist: SphericalWrist, q: &Joints) -> SingularKind {
    let posture = Posture::at(arm.chain(), q);
    if posture.axis(3).cross(&posture.axis(5)).norm() < WRIST_IN_LINE {
        return SingularKind::Wrist;
    }
    // The wrist centre loses a direction where the three joints before it move it in one plane: because two of them move it along
    // one line, or else because the first has no part of its own.
    let centre = posture.frame(5).point(&wrist.centre);
    let moved = |j: usize| posture.axis(j).cross(&(centre - posture.origin(j)));
    let (second, third) = (moved(1), moved(2));
    let in_line = second.cross(&third).norm() <= ARM_IN_LINE * second.norm() * third.norm();
    if in_line { SingularKind::Elbow } else { SingularKind::Shoulder }
}

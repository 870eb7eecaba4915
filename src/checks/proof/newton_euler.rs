use crate::arm::MAX_JOINTS;
use crate::geometry::{M3, V3};

use super::ball::{Ball, Moving};
use super::view::{Motion, View};

/// The bodies that an arm moves, one a link, the last with tool and load: what Newton-Euler needs of each, base axes in the middle
/// of a stretch, about the link's axis point.
#[derive(Debug, Clone)]
pub(super) struct Bodies {
    mass: [f64; MAX_JOINTS],
    /// Mass moments, kg·m.
    moment: [V3; MAX_JOINTS],
    /// Inertia tensors about the axis points, kg·m².
    inertia: [Tensor; MAX_JOINTS],
}

/// An inertia tensor, its largest principal moment, and how far its principal moments are apart.
#[derive(Debug, Clone, Copy)]
pub(super) struct Tensor {
    matrix: M3,
    most: f64,
    pub apart: f64,
}

/// A number known to within a spread.
pub(super) type About = (f64, f64);

/// How the joints move over a stretch, by the path's fraction: each figure to within its spread.
#[derive(Debug, Clone, Copy)]
pub(super) struct Ways<'a> {
    pub slope: &'a [f64],
    pub slope_spread: &'a [f64],
    pub bend: &'a [f64],
    pub bend_spread: &'a [f64],
}

/// Principal moments are taken this much farther apart, for rounding.
const OUTWARD: f64 = 1.0 + 1e-9;

impl Tensor {
    pub fn of(matrix: M3) -> Self {
        let mean = matrix.trace() / 3.0;
        let rest = matrix - M3::identity() * mean;
        let size = (rest.norm_squared() / 6.0).sqrt();
        if !(size > 1e-15 * mean.abs()) {
            return Self { matrix, most: mean.abs() * OUTWARD, apart: if size.is_nan() { f64::NAN } else { 2.0 * size } };
        }
        // Principal moments of a symmetric tensor by the angle of its third invariant: mean + 2 size cos(angle), and a third of a
        // turn on.
        let angle = (0.5 * (rest / size).determinant()).clamp(-1.0, 1.0).acos() / 3.0;
        let [high, low] = [angle.cos(), (angle + std::f64::consts::TAU / 3.0).cos()].map(|c| 2.0 * size * c);
        let slack = 2.0 * size * (OUTWARD - 1.0);
        Self { matrix, most: (mean + high).abs() * OUTWARD + slack, apart: (high - low) * OUTWARD + slack }
    }

    /// The product with a vector, for a body that turns by at most `angle` rad. A tensor that turns by an angle changes by no more
    /// than that angle times the distance of its largest and its least principal moment, and never by more than this distance.
    fn times(&self, vector: &Ball, angle: f64) -> Ball {
        let turned = angle.min(1.0) * self.apart;
        Ball { centre: self.matrix * vector.centre, radius: self.most * vector.radius + turned * vector.most() }
    }
}

impl Bodies {
    /// The bodies in the middle of a stretch.
    pub fn of(view: &View) -> Self {
        let (chain, posture, carried) = (view.chain, &view.at.posture, view.carried);
        let n = chain.len;
        let zero = Tensor { matrix: M3::zeros(), most: 0.0, apart: 0.0 };
        let mut bodies = Self { mass: [0.0; MAX_JOINTS], moment: [V3::zeros(); MAX_JOINTS], inertia: [zero; MAX_JOINTS] };
        let flange = posture.flange();
        for j in 0..n {
            let o = view.axis_point(j);
            let (mut mass, mut moment, mut inertia) = (0.0, V3::zeros(), M3::zeros());
            let mut add = |m: f64, centre: V3, axes: &M3, tensor: &M3| {
                let r = centre - o;
                mass += m;
                moment += r * m;
                // Steiner's theorem.
                inertia += axes * tensor * axes.transpose() + (M3::identity() * r.norm_squared() - r * r.transpose()) * m;
            };
            let frame = posture.frame(j);
            add(chain.mass[j], frame.point(&chain.com[j]), &frame.axes, &chain.inertia[j]);
            if j + 1 == n {
                add(carried.tool_mass, flange.point(&carried.tool_com), &flange.axes, &carried.tool_inertia);
                add(carried.load_mass, flange.point(&carried.load_com), &flange.axes, &carried.load_inertia);
            }
            (bodies.mass[j], bodies.moment[j], bodies.inertia[j]) = (mass, moment, Tensor::of(inertia));
        }
        bodies
    }

    /// What moving torque asks for each unit of the law's acceleration, and for each unit of its squared rate: Newton-Euler with
    /// the slopes as accelerations and no rates, and with the slopes as rates and the bends as accelerations; both without
    /// gravity.
    pub fn asked(&self, view: &View, motion: &Motion, ways: &Ways) -> [[About; MAX_JOINTS]; 2] {
        let pairs = |values: &[f64], spreads: &[f64]| -> [About; MAX_JOINTS] {
            std::array::from_fn(|j| if j < view.chain.len { (values[j], spreads[j]) } else { (0.0, 0.0) })
        };
        let slopes = pairs(ways.slope, ways.slope_spread);
        let bends = pairs(ways.bend, ways.bend_spread);
        [self.newton_euler(view, motion, ways, None, &slopes), self.newton_euler(view, motion, ways, Some(&slopes), &bends)]
    }

    /// Newton-Euler in balls, vectors as the view's link sees them. Link j is told about the point of it that stands on its joint's
    /// axis in the middle of the stretch; a slide takes that point along the axis.
    fn newton_euler(
        &self,
        view: &View,
        motion: &Motion,
        ways: &Ways,
        rates: Option<&[About; MAX_JOINTS]>,
        accelerations: &[About; MAX_JOINTS],
    ) -> [About; MAX_JOINTS] {
        let n = view.chain.len;
        let zero = [Ball::zero(); MAX_JOINTS];
        let (mut force, mut torque, mut along, mut slide) = (zero, zero, zero, [None; MAX_JOINTS]);
        let (mut turning, mut change, mut accel) = (Ball::zero(), Ball::zero(), Ball::zero());
        for j in 0..n {
            let z = motion.z[j].at;
            let (speeding, spread) = accelerations[j];
            let twice = |turning: &Ball, v: &Ball| turning.cross(&turning.cross(v));
            if view.chain.turns[j] {
                change = change.plus(&z.times(speeding, spread));
                if let Some(rates) = rates {
                    change = change.plus(&turning.cross(&z).times(rates[j].0, rates[j].1));
                    turning = turning.plus(&z.times(rates[j].0, rates[j].1));
                }
            } else {
                let reach = motion.half * (ways.slope[j].abs() + ways.slope_spread[j]) + motion.slack;
                let slid = Ball { centre: V3::zeros(), radius: reach };
                accel = accel.plus(&z.times(speeding, spread)).plus(&change.cross(&slid));
                if let Some(rates) = rates {
                    accel = accel.plus(&turning.cross(&z).times(2.0 * rates[j].0, 2.0 * rates[j].1)).plus(&twice(&turning, &slid));
                }
                slide[j] = Some(slid);
            }
            let fixed = |v: V3| Moving::fixed(v, &motion.turning[j + 1], motion.half, motion.slack).at;
            let (moment, e) = (fixed(self.moment[j]), fixed(view.e[j]));
            let angle = motion.half * motion.turning[j + 1].most() + motion.slack;
            let tensor = &self.inertia[j];
            force[j] = accel.times(self.mass[j], 0.0).plus(&change.cross(&moment));
            torque[j] = tensor.times(&change, angle).plus(&moment.cross(&accel));
            accel = accel.plus(&change.cross(&e));
            if rates.is_some() {
                force[j] = force[j].plus(&twice(&turning, &moment));
                torque[j] = torque[j].plus(&turning.cross(&tensor.times(&turning, angle)));
                accel = accel.plus(&twice(&turning, &e));
            }
            along[j] = e;
        }
        let mut asked = [(0.0, 0.0); MAX_JOINTS];
        let (mut whole, mut moment) = (Ball::zero(), Ball::zero());
        for j in (0..n).rev() {
            moment = moment.plus(&along[j].cross(&whole)).plus(&torque[j]);
            whole = whole.plus(&force[j]);
            asked[j] = motion.z[j].at.dot(if view.chain.turns[j] { &moment } else { &whole });
            if let Some(slid) = &slide[j] {
                moment = moment.plus(&slid.cross(&whole));
            }
        }
        asked
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::arm::{Arm, ArmData, Body, Drive, Flange, Grounds, Joint, JointKind, Joints, Placement, Range, Task, TaskRow};
    use crate::checks::proof::view::Reference;
    use crate::dynamics::{Going, moving_torque};
    use crate::geometry::Pose;
    use crate::kinematics::{Jacobian, Posture};
    use crate::motion::Instant;
    use crate::program::Carried;

    /// Two joints through one point, about z and about y, and a body whose principal axes stand at 45 degrees between x and z.
    fn slanted() -> Arm {
        let joint = |name: &str, axis: V3, link: Option<Body>| Joint {
            name: name.to_owned(),
            kind: JointKind::Revolute,
            placement: Placement::Axis { place: Pose::identity(), axis },
            range: Range { low: -1.5, high: 1.5 },
            rate: 1.5,
            accel: 1.5,
            torque: None,
            brake: None,
            drive: Drive::default(),
            stop: None,
            jerk: None,
            link,
        };
        let tensor = Body::tensor([1.0, 1.0, 1.0, 0.0, 0.3, 0.0]);
        let body = Body { mass: 1.0, com: V3::zeros(), inertia: Some(tensor), grounds: Grounds::Sheet };
        Arm::build(ArmData {
            name: "Slanted".to_owned(),
            joints: vec![joint("1", V3::z(), None), joint("2", V3::y(), Some(body))],
            flange: Flange::default(),
            characteristic_length: None,
            task: Task::of(&[TaskRow::X, TaskRow::Y]),
        })
        .expect("sound")
    }

    fn instant(arm: &Arm, q: Joints, slope: Joints) -> Instant {
        let posture = Posture::at(arm.chain(), &q);
        let tcp = posture.tcp(&Pose::identity());
        let jacobian = Jacobian::at(arm.chain(), &posture, &tcp.at);
        Instant { u: 0.5, q, slope, bend: Joints::zeros(q.len()), posture, tcp, jacobian, lu: None }
    }

    #[test]
    fn a_turning_tensor_is_met_to_the_last_percent() {
        let arm = slanted();
        let (carried, half) = (Carried::nothing(), 1e-3);
        // Joint 2 turns little beside joint 1, so that the bound, which knows only how long the sum is, is met as well.
        let slope = Joints::from_slice(&[1.0, 0.05]);
        let at = instant(&arm, Joints::zeros(2), slope);
        let view = View::of(arm.chain(), &at, &carried, None, V3::zeros(), Reference::Tcp, 1);
        let none = [0.0; 2];
        let motion = view.motion(&slope, &none, half, 0.0);
        let ways = Ways { slope: &slope, slope_spread: &none, bend: &none, bend_spread: &none };
        let [alpha, _] = Bodies::of(&view).asked(&view, &motion, &ways);
        let asked = |s: f64| {
            let posture = Posture::at(arm.chain(), &[s * slope[0], s * slope[1]]);
            let going = Going { rates: Joints::zeros(2), accelerations: slope };
            moving_torque(arm.chain(), &posture, &carried, &V3::zeros(), None, &going)[0]
        };
        let reached = (asked(half) - alpha[0].0).abs().max((asked(-half) - alpha[0].0).abs());
        assert!((asked(0.0) - alpha[0].0).abs() < 1e-12);
        assert!(reached <= alpha[0].1, "{reached} lies beyond {}", alpha[0].1);
        assert!(reached > 0.99 * alpha[0].1, "only {reached} of {}", alpha[0].1);
    }

    #[test]
    fn principal_moments_come_from_invariants() {
        for moments in [[1.0, 2.0, 2.5], [3.0, 3.0, 3.0], [0.5, 0.5, 1.0], [1.0, 1.0, 0.2], [0.0, 0.0, 0.0]] {
            let axes = crate::geometry::turn_about(&V3::new(0.6, 0.0, 0.8), 0.7);
            let tensor = Tensor::of(axes * M3::from_diagonal(&V3::from(moments)) * axes.transpose());
            let most = moments.iter().fold(0.0f64, |most, m| most.max(*m));
            let least = moments.iter().fold(f64::INFINITY, |least, m| least.min(*m));
            assert!((tensor.most - most).abs() < 1e-7 && (tensor.apart - (most - least)).abs() < 1e-7, "{moments:?} {tensor:?}");
        }
        assert!(Tensor::of(M3::identity() * f64::NAN).apart.is_nan());
    }
}

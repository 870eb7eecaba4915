use crate::arm::{Chain, MAX_JOINTS};
use crate::geometry::V3;
use crate::kinematics::Posture;
use crate::motion::{Instant, Push};
use crate::program::Carried;

use super::ball::{Ball, Moving, Slope};

/// A view is the arm in the middle of a stretch, as seen from one of its own links: everything that the bounds start from.
///
/// Vectors stand in base axes as they are in the middle. Which link looks on changes no answer, only the cost: seen from the
/// middle of the arm, neither end moves much.
#[derive(Debug, Clone)]
pub(super) struct View<'a> {
    pub chain: &'a Chain,
    /// The middle itself.
    pub at: &'a Instant,
    /// Tool and load.
    pub carried: &'a Carried,
    /// The link that looks on: 0 is the base, j + 1 the link of joint j.
    viewer: usize,
    /// Axes.
    pub z: [V3; MAX_JOINTS],
    /// From a point on each axis to a point on the next; the last to the reference point.
    pub e: [V3; MAX_JOINTS],
    /// Mass moment of each link with all that hangs on its end, about its axis point, kg·m.
    b: [V3; MAX_JOINTS],
    /// Mass from each link on outwards, kg.
    mass: [f64; MAX_JOINTS],
    /// From the reference point to the TCP, m.
    pub to_tcp: V3,
    gravity: V3,
    push: Option<Push>,
    push_in_base: [V3; 2],
}

/// A view set in motion over a stretch.
#[derive(Debug, Clone)]
pub(super) struct Motion {
    /// Axes.
    pub z: [Moving; MAX_JOINTS],
    /// From each axis to the reference point.
    pub r: [Moving; MAX_JOINTS],
    /// Turning of every link, 0 the base, seen from the viewer.
    pub turning: [Ball; MAX_JOINTS + 1],
    pub slack: f64,
    pub half: f64,
}

/// Points that joint axes are nearest to, for the reference point: enough to make the system of equations regular.
const PULL_TO_TCP: f64 = 1e-3;

impl<'a> View<'a> {
    /// The view at an instant. `centre` is the wrist centre in the last axis system where there is one.
    pub fn of(
        chain: &'a Chain,
        at: &'a Instant,
        carried: &'a Carried,
        push: Option<Push>,
        gravity: V3,
        reference: Reference,
        viewer: usize,
    ) -> Self {
        let n = chain.len;
        let posture = &at.posture;
        let tcp = at.tcp.at;
        let p = match reference {
            Reference::Tcp => tcp,
            Reference::InLastLink(point) => posture.frame(n - 1).point(&point),
            Reference::NearLastAxes => near_last_axes(chain, posture, &tcp),
        };
        let mut view = Self {
            chain,
            at,
            carried,
            viewer,
            z: [V3::zeros(); MAX_JOINTS],
            e: [V3::zeros(); MAX_JOINTS],
            b: [V3::zeros(); MAX_JOINTS],
            mass: [0.0; MAX_JOINTS],
            to_tcp: tcp - p,
            gravity,
            push,
            push_in_base: [V3::zeros(); 2],
        };
        if let Some(push) = push {
            let wrench = push.in_base(&at.tcp);
            view.push_in_base = [wrench.force, wrench.torque];
        }
        let flange = posture.flange();
        let mut next = p;
        let mut beyond = carried.mass();
        for j in (0..n).rev() {
            let z = posture.axis(j);
            // The foot of the next point on this axis: no lever is longer than it must be.
            let o = posture.origin(j) + z * z.dot(&(next - posture.origin(j)));
            view.z[j] = z;
            view.e[j] = next - o;
            let own = (posture.frame(j).point(&chain.com[j]) - o) * chain.mass[j];
            view.b[j] = if j + 1 == n {
                own + flange.axes * carried.moment() + (flange.at - o) * carried.mass()
            } else {
                own + view.e[j] * beyond
            };
            beyond += chain.mass[j];
            view.mass[j] = beyond;
            next = o;
        }
        view
    }

    /// The arm over a stretch of half-width `half`, each joint's slope within `spread` of `slope`, the middle's joint values
    /// unsure by `slack` rad in all.
    #[inline]
    pub fn motion(&self, slope: &[f64], spread: &[f64], half: f64, slack: f64) -> Motion {
        let n = self.chain.len;
        let mut motion = Motion {
            z: [Moving::zero(); MAX_JOINTS],
            r: [Moving::zero(); MAX_JOINTS],
            turning: [Ball::zero(); MAX_JOINTS + 1],
            slack,
            half,
        };
        for j in self.viewer..n {
            motion.z[j] = Moving::fixed(self.z[j], &motion.turning[j], half, slack);
            motion.turning[j + 1] = if self.chain.turns[j] {
                motion.turning[j].plus(&motion.z[j].at.times(slope[j], spread[j]))
            } else {
                motion.turning[j]
            };
        }
        for j in (0..self.viewer).rev() {
            motion.z[j] = Moving::fixed(self.z[j], &motion.turning[j + 1], half, slack);
            motion.turning[j] = if self.chain.turns[j] {
                motion.turning[j + 1].plus(&motion.z[j].at.times(-slope[j], spread[j]))
            } else {
                motion.turning[j + 1]
            };
        }
        let mut r = Moving::zero();
        let mut length = 0.0;
        for j in (0..n).rev() {
            let slide = if self.chain.turns[j] { None } else { Some((slope[j], spread[j])) };
            r = r.plus(&self.carried_by(&motion, j, self.e[j], slide, 1.0));
            length += self.e[j].norm();
            r = r.tightened(half, slack * length);
            motion.r[j] = r;
        }
        motion
    }

    /// A vector fixed in the link of joint `j`; if that joint slides, `weight` times its slide is added.
    #[inline]
    pub fn carried_by(&self, motion: &Motion, j: usize, vector: V3, slide: Option<(f64, f64)>, weight: f64) -> Moving {
        let fixed = Moving::fixed(vector, &motion.turning[j + 1], motion.half, motion.slack);
        let Some((slope, spread)) = slide else { return fixed };
        // The slide itself: along z, from 0 in the middle, up to half * |slope|; z turns with the link.
        let reach = motion.half * (slope.abs() + spread) * weight.abs() + motion.slack * weight.abs();
        let along = motion.z[j].at.times(slope * weight, spread * weight.abs());
        let swung = motion.turning[j + 1].most() * reach;
        Moving {
            at: Ball { centre: fixed.at.centre, radius: fixed.at.radius + reach },
            change: Ball { centre: fixed.change.centre + along.centre, radius: fixed.change.radius + along.radius + swung },
        }
    }

    /// How far the reference point can be from any axis, m.
    pub fn reach(&self) -> f64 {
        self.e[..self.chain.len].iter().map(V3::norm).sum()
    }

    /// The Jacobian's translation column of joint `j` at the reference point.
    #[inline]
    pub fn column(&self, motion: &Motion, j: usize) -> Moving {
        if self.chain.turns[j] { motion.z[j].cross(&motion.r[j]) } else { motion.z[j] }
    }

    /// From the reference point to the TCP.
    #[inline]
    pub fn tcp_offset(&self, motion: &Motion) -> Moving {
        Moving::fixed(self.to_tcp, &motion.turning[self.chain.len], motion.half, motion.slack)
    }

    /// The Jacobian's translation column of joint `j` at the TCP.
    #[inline]
    pub fn tcp_column(&self, motion: &Motion, offset: &Moving, j: usize) -> Moving {
        if !self.chain.turns[j] {
            return motion.z[j];
        }
        motion.z[j].cross(&motion.r[j].plus(offset))
    }

    /// A vector fixed in the base.
    #[inline]
    pub fn base_vector(&self, motion: &Motion, vector: V3) -> Moving {
        Moving::fixed(vector, &motion.turning[0], motion.half, motion.slack)
    }

    /// The same view from the last link.
    pub fn seen_from_the_last_link(&self) -> Self {
        Self { viewer: self.chain.len, ..self.clone() }
    }

    /// The point of joint `j`'s axis that vectors of its link start from, base, m.
    pub fn axis_point(&self, j: usize) -> V3 {
        let reference = self.at.tcp.at - self.to_tcp;
        self.e[j..self.chain.len].iter().fold(reference, |point, e| point - e)
    }

    /// The holding torque that the weights ask of every joint.
    #[inline]
    pub fn weights(&self, motion: &Motion, slope: &[f64], spread: &[f64]) -> [Slope; MAX_JOINTS] {
        let n = self.chain.len;
        let mut torque = [Slope::default(); MAX_JOINTS];
        let g = self.base_vector(motion, self.gravity);
        let mut s = Moving::zero();
        let mut size = 0.0;
        for j in (0..n).rev() {
            let slide = if self.chain.turns[j] { None } else { Some((slope[j], spread[j])) };
            s = s.plus(&self.carried_by(motion, j, self.b[j], slide, self.mass[j]));
            size += self.b[j].norm();
            s = s.tightened(motion.half, motion.slack * size);
            torque[j] = if self.chain.turns[j] {
                let t = motion.z[j].cross(&s).tightened(motion.half, 2.0 * motion.slack * size);
                t.dot(&g).times(-1.0)
            } else {
                motion.z[j].dot(&g).times(-self.mass[j])
            };
        }
        torque
    }

    /// What a process force adds to that; `None` without one.
    pub fn push(&self, motion: &Motion) -> Option<[Slope; MAX_JOINTS]> {
        let push = self.push?;
        let n = self.chain.len;
        let [force, moment] = self.push_in_base.map(|vector| {
            if push.with_tool {
                Moving::fixed(vector, &motion.turning[n], motion.half, motion.slack)
            } else {
                self.base_vector(motion, vector)
            }
        });
        let offset = self.tcp_offset(motion);
        let mut torque = [Slope::default(); MAX_JOINTS];
        for j in 0..n {
            torque[j] = if self.chain.turns[j] {
                let turn = motion.r[j].plus(&offset).cross(&force).plus(&moment);
                motion.z[j].dot(&turn)
            } else {
                motion.z[j].dot(&force)
            };
        }
        Some(torque)
    }
}

/// Which point of the last link the velocities are taken of.
#[derive(Debug, Clone, Copy)]
pub(super) enum Reference {
    /// The TCP: where the task leaves out turning, no other point's velocity is known.
    Tcp,
    /// A point fixed in the last axis system: the wrist centre.
    InLastLink(V3),
    /// The point nearest to the last three axes.
    NearLastAxes,
}

fn near_last_axes(chain: &Chain, posture: &Posture, tcp: &V3) -> V3 {
    let n = chain.len;
    let mut sum = crate::geometry::M3::identity() * PULL_TO_TCP;
    let mut right = tcp * PULL_TO_TCP;
    for j in n.saturating_sub(3)..n {
        if chain.turns[j] {
            let z = posture.axis(j);
            let across = crate::geometry::M3::identity() - z * z.transpose();
            sum += across;
            right += across * posture.origin(j);
        }
    }
    sum.try_inverse().map_or(*tcp, |inverse| inverse * right)
}

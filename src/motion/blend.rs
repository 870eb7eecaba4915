use crate::arm::Joints;
use crate::geometry::{M3, Pose, V3, turn_about};

use super::{Path, Target};

/// A blend of the TCP is the way past a fly-by point between two lines or arcs, over x from 0 to 1: the position a cubic that
/// meets both paths in place and direction, the rotation `exp(after x²) exp(-before (1 - x)²)` times that of the fly-by point.
/// Run evenly it matches place, orientation and their rates at both ends.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Blend {
    /// Position, base, m: the coefficients of 1, x, x², x³.
    place: [V3; 4],
    /// Turn over the end of the path before, rotation vector in base axes, rad.
    before: V3,
    /// Turn over the beginning of the path after, rotation vector in base axes, rad.
    after: V3,
    /// Axes at the fly-by point, base.
    axes: M3,
}

impl Blend {
    /// Between a path that is left `ends[0]` before its end and one that is joined `ends[1]` after its start, both fractions.
    /// `None` unless both are lines or arcs.
    pub fn between(before: &Path, after: &Path, ends: [f64; 2]) -> Option<Self> {
        let [a, corner, b] = [before.target(1.0 - ends[0])?, before.target(1.0)?, after.target(ends[1])?];
        let [from, to] = [a.pose.at, b.pose.at];
        let [leaving, joining] = [a.velocity * (2.0 * ends[0]), b.velocity * (2.0 * ends[1])];
        Some(Self {
            place: [from, leaving, (to - from) * 3.0 - leaving * 2.0 - joining, (from - to) * 2.0 + leaving + joining],
            before: corner.turning * ends[0],
            after: b.turning * ends[1],
            axes: corner.pose.axes,
        })
    }

    /// Length of the TCP's way, m, by Simpson's rule.
    pub fn length(&self) -> f64 {
        let speed = |k: usize| self.target(k as f64 / 16.0).velocity.norm();
        (0..8).map(|k| speed(2 * k) + 4.0 * speed(2 * k + 1) + speed(2 * k + 2)).sum::<f64>() / 48.0
    }

    /// Angle that the tool turns at most, rad.
    pub fn turn(&self) -> f64 {
        self.before.norm() + self.after.norm()
    }

    /// Where the TCP must be at `x`.
    pub(super) fn target(&self, x: f64) -> Target {
        let [p, v, a, j] = self.place;
        let (w1, w2) = (self.before, self.after);
        let turned = rotation(&(w2 * (x * x)));
        let first = turned * w1;
        let across = w2.cross(&first);
        let left = 1.0 - x;
        // |w''| <= (4x + 4|1 - 2x|) |w1||w2| + 8x²(1 - x) |w2|²|w1|, each factor at its largest over the blend.
        let (n1, n2) = (w1.norm(), w2.norm());
        Target {
            pose: Pose { axes: turned * rotation(&(w1 * (-left * left))) * self.axes, at: p + (v + (a + j * x) * x) * x },
            velocity: v + (a * 2.0 + j * (3.0 * x)) * x,
            bend: a * 2.0 + j * (6.0 * x),
            third: 6.0 * j.norm(),
            turning: w2 * (2.0 * x) + first * (2.0 * left),
            swing: (w2 - first) * 2.0 + across * (4.0 * x * left),
            swing_change: 8.0 * n1 * n2 + 1.2 * n1 * n2 * n2,
            even: false,
        }
    }
}

fn rotation(vector: &V3) -> M3 {
    let angle = vector.norm();
    if angle > 0.0 { turn_about(&(vector / angle), angle) } else { M3::identity() }
}

/// A joint blend is the way past a fly-by point where a joint move meets it on one side at least: each joint a cubic over x from 0
/// to 1 that meets both neighbours in value and, run evenly, in rate.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct JointBlend {
    /// The coefficients of 1, x, x², x³, each a joint, rad or m.
    pub(super) terms: [Joints; 4],
}

impl JointBlend {
    /// From joint values `ends[0]` to `ends[1]` with the derivatives by x `slopes` there.
    pub fn between(ends: [Joints; 2], slopes: [Joints; 2]) -> Self {
        let ([p, q], [v, w]) = (ends, slopes);
        let of = |term: &dyn Fn(usize) -> f64| Joints::from_fn(p.len(), term);
        let bend = of(&|j| 3.0 * (q[j] - p[j]) - 2.0 * v[j] - w[j]);
        let third = of(&|j| 2.0 * (p[j] - q[j]) + v[j] + w[j]);
        Self { terms: [p, v, bend, third] }
    }

    /// Joint values and their first and second derivatives by x.
    pub fn at(&self, x: f64) -> [Joints; 3] {
        let [p, v, a, c] = &self.terms;
        let of = |term: &dyn Fn(usize) -> f64| Joints::from_fn(p.len(), term);
        [
            of(&|j| p[j] + x * (v[j] + x * (a[j] + x * c[j]))),
            of(&|j| v[j] + x * (2.0 * a[j] + 3.0 * x * c[j])),
            of(&|j| 2.0 * a[j] + 6.0 * x * c[j]),
        ]
    }

    /// The third derivative of each joint by x, constant.
    pub fn third(&self) -> Joints {
        Joints::from_fn(self.terms[3].len(), |j| 6.0 * self.terms[3][j])
    }

    /// Every x within the blend at which some joint's value or rate is greatest or least.
    pub fn turning_points(&self) -> Vec<f64> {
        let mut found = Vec::new();
        for j in 0..self.terms[0].len() {
            let [_, v, a, c] = self.terms.map(|term| term[j]);
            // v + 2a x + 3c x² = 0 in the form that does not cancel, and its own turning point.
            let root = (a * a - 3.0 * c * v).sqrt();
            let sum = -(a + if a < 0.0 { -root } else { root });
            found.extend([v / sum, sum / (3.0 * c), -a / (3.0 * c)].into_iter().filter(|x| *x > 0.0 && *x < 1.0));
        }
        found
    }
}

use std::f64::consts::{FRAC_PI_4, PI};

use nalgebra::Matrix4;

use crate::arm::{Chain, Joints};
use crate::geometry::{M3, Pose, V3, sin_cos};

use super::SphericalWrist;

/// Two equations count as one when the sine between them is below this.
const ONE_EQUATION: f64 = 1e-9;
/// A pair of complex roots this close to the real line may be one double root.
const NEARLY_REAL: f64 = 1e-4;
/// Sine between the outer wrist axes below which they count as in line. Their angle comes from a cosine, so half the digits are lost.
const IN_LINE: f64 = 1e-6;
/// A cosine may exceed 1 by this much and still mean an arm that is just stretched.
const JUST_BEYOND: f64 = 1e-9;

/// Joint values of a six-joint arm with a spherical wrist that put its last axis system at `target` (base): up to eight, near
/// enough for Newton's method to finish. `None` where the arm's first axes are so placed that the method does not apply. Where a
/// joint may take any value, it takes that of `near`.
///
/// Pieper's method (Stanford University, 1968): the wrist centre's height along the first axis and its distance from that axis's
/// origin don't depend on the first joint. They leave two equations that are linear in sine and cosine of the second, and with it
/// gone one in the third joint: a quartic in the tangent of half its angle. The wrist follows from the orientation.
pub(super) fn wrist_branches(chain: &Chain, wrist: SphericalWrist, target: &Pose, near: &Joints) -> Option<Vec<Joints>> {
    let centre = target.point(&wrist.centre);
    let fixed = &chain.fixed;
    // The wrist centre stands still in the third link: there, seen from the last axis system at any wrist joint values.
    let held = fixed[3].then(&fixed[4]).then(&fixed[5]).point(&wrist.centre);
    let regional = Regional { t: fixed[0].inverse().point(&centre), turn: fixed[1].axes, step: fixed[1].at, third: fixed[2], held };
    let mut found = Vec::new();
    for [q1, q2, q3] in regional.solve(near)? {
        let mut axes = fixed[0].axes;
        for (j, q) in [q1, q2, q3].into_iter().enumerate() {
            axes = axes * about_z(q) * fixed[j + 1].axes;
        }
        for [q4, q5, q6] in turn_wrist(&(axes.transpose() * target.axes), &fixed[4].axes, &fixed[5].axes, near) {
            found.push(Joints::from_slice(&[q1, q2, q3, q4, q5, q6]));
        }
    }
    Some(found)
}

/// The first three joints' task: to bring the point `held` of the third link to `t`, seen from the first axis system.
struct Regional {
    t: V3,
    turn: M3,
    step: V3,
    third: Pose,
    held: V3,
}

impl Regional {
    /// The held point in the second axis system at the third joint's value.
    fn f(&self, q3: f64) -> V3 {
        self.third.point(&(about_z(q3) * self.held))
    }

    /// Both equations in what the second joint makes of f's first two components: rows (a, b, c) of `a x + b y = c`.
    fn equations(&self, f: &V3) -> [[f64; 3]; 2] {
        let e = self.turn.transpose() * self.step;
        let height = self.t.z - self.step.z - self.turn[(2, 2)] * f.z;
        let far = 0.5 * (self.t.norm_squared() - f.norm_squared() - self.step.norm_squared()) - e.z * f.z;
        [[self.turn[(2, 0)], self.turn[(2, 1)], height], [e.x, e.y, far]]
    }

    fn solve(&self, near: &Joints) -> Option<Vec<[f64; 3]>> {
        let [height, far] = self.equations(&self.f(0.0));
        let determinant = height[0] * far[1] - height[1] * far[0];
        let sizes = [height[0].hypot(height[1]), far[0].hypot(far[1])];
        let both = determinant.abs() > ONE_EQUATION * sizes[0] * sizes[1] && sizes[0] * sizes[1] > 0.0;
        let mut found = Vec::new();
        if both {
            let xy = |f: &V3| {
                let [[a, b, c], [d, e, g]] = self.equations(f);
                [(c * e - b * g) / determinant, (a * g - c * d) / determinant]
            };
            for q3 in roots(|q3| {
                let f = self.f(q3);
                let [x, y] = xy(&f);
                x * x + y * y - f.x * f.x - f.y * f.y
            }) {
                let f = self.f(q3);
                let [x, y] = xy(&f);
                found.push([y.atan2(x) - f.y.atan2(f.x), q3]);
            }
        } else {
            // One equation says something of the second joint; what the other adds is a condition on the third alone.
            let strong = usize::from(sizes[1] > sizes[0]);
            let size = sizes[strong];
            if size < 1e-12 {
                return None;
            }
            let rest = |q3: f64| {
                let rows = self.equations(&self.f(q3));
                let (s, w) = (rows[strong], rows[1 - strong]);
                let ratio = (s[0] * w[0] + s[1] * w[1]) / (size * size);
                w[2] - ratio * s[2]
            };
            for q3 in roots(rest) {
                let f = self.f(q3);
                let [a, b, c] = self.equations(&f)[strong];
                // a x + b y = c with (x, y) = f's components turned by the second joint.
                let cosine = c / (size * f.x.hypot(f.y));
                if cosine.abs() > 1.0 + JUST_BEYOND || cosine.is_nan() {
                    continue;
                }
                let off = cosine.clamp(-1.0, 1.0).acos();
                for side in [off, -off] {
                    found.push([b.atan2(a) + side - f.y.atan2(f.x), q3]);
                }
            }
        }
        let first = |[q2, q3]: [f64; 2]| {
            let g = self.turn * (about_z(q2) * self.f(q3)) + self.step;
            // On the first axis itself any value will do.
            let on_axis = self.t.x.hypot(self.t.y) < 1e-9;
            let q1 = if on_axis { near[0] } else { self.t.y.atan2(self.t.x) - g.y.atan2(g.x) };
            [q1, q2, q3]
        };
        Some(found.into_iter().map(first).collect())
    }
}

/// The wrist's joint values for the orientation `m`, seen from the fourth axis system: `m = Rz(q4) A Rz(q5) B Rz(q6)`.
fn turn_wrist(m: &M3, a: &M3, b: &M3, near: &Joints) -> Vec<[f64; 3]> {
    let v = b.column(2);
    // Third row of A, times the last axis turned by the fifth joint: what the fourth joint does not change.
    let (p, q) = (a[(2, 0)] * v.x + a[(2, 1)] * v.y, a[(2, 1)] * v.x - a[(2, 0)] * v.y);
    let size = p.hypot(q);
    let cosine = (m[(2, 2)] - a[(2, 2)] * v.z) / size;
    if cosine.abs() > 1.0 + JUST_BEYOND || cosine.is_nan() {
        return Vec::new();
    }
    let off = cosine.clamp(-1.0, 1.0).acos();
    let middle = q.atan2(p);
    let mut found = Vec::new();
    for q5 in [middle + off, middle - off] {
        let last = a * about_z(q5) * v;
        // With the outer axes in line only the sum of their joints is fixed.
        let q4 = if last.x.hypot(last.y) < IN_LINE { near[3] } else { m[(1, 2)].atan2(m[(0, 2)]) - last.y.atan2(last.x) };
        let rest = (about_z(q4) * a * about_z(q5) * b).transpose() * m;
        found.push([q4, q5, rest[(1, 0)].atan2(rest[(0, 0)])]);
    }
    found
}

/// The real roots, in one turn, of a trigonometric polynomial of the second degree.
fn roots(h: impl Fn(f64) -> f64) -> Vec<f64> {
    let samples: [f64; 8] = std::array::from_fn(|k| h(k as f64 * FRAC_PI_4));
    // Turn by so much that half a turn away, where the tangent has its pole, is far from a root.
    let far = (0..8).max_by(|i, j| samples[*i].abs().total_cmp(&samples[*j].abs())).unwrap_or(0);
    let start = far as f64 * FRAC_PI_4 - PI;
    let at = |k: usize| samples[(k + far + 4) % 8];
    let part = |order: f64, phase: fn(f64) -> f64| (0..8).map(|k| at(k) * phase(order * k as f64 * FRAC_PI_4)).sum::<f64>() / 4.0;
    let c0 = samples.iter().sum::<f64>() / 8.0;
    let (c1, s1, c2, s2) = (part(1.0, f64::cos), part(1.0, f64::sin), part(2.0, f64::cos), part(2.0, f64::sin));
    let lead = c0 - c1 + c2;
    if lead == 0.0 || !lead.is_finite() {
        return Vec::new();
    }
    let [a, b, c, d] = [2.0 * s1 - 4.0 * s2, 2.0 * c0 - 6.0 * c2, 2.0 * s1 + 4.0 * s2, c0 + c1 + c2].map(|v| v / lead);
    let companion = Matrix4::new(-a, -b, -c, -d, 1.0, 0.0, 0.0, 0.0, 0.0, 1.0, 0.0, 0.0, 0.0, 0.0, 1.0, 0.0);
    companion
        .complex_eigenvalues()
        .iter()
        .filter(|root| root.im.abs() <= NEARLY_REAL * (1.0 + root.re.abs()))
        .map(|root| start + 2.0 * root.re.atan())
        .collect()
}

fn about_z(angle: f64) -> M3 {
    let (s, c) = sin_cos(angle);
    M3::new(c, -s, 0.0, s, c, 0.0, 0.0, 0.0, 1.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_roots_of_a_trigonometric_polynomial_are_found() {
        let h = |q: f64| (q - 0.3).sin() * (q + 1.1).cos() + 0.2;
        let found = roots(h);
        assert!(!found.is_empty());
        assert!(found.iter().all(|q| h(*q).abs() < 1e-9));
        let changes = (0..3600).filter(|k| h(f64::from(*k) * 1e-3 * 1.745_329_3) * h(f64::from(k + 1) * 1e-3 * 1.745_329_3) < 0.0);
        assert_eq!(changes.count(), found.len());
        assert_eq!(roots(|q| 1.5 + q.sin()).len(), 0);
    }
}

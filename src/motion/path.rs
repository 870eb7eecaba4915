use crate::arm::Joints;
use crate::geometry::{Pose, V3, sin_cos, turn_about, turn_between};

use super::{Blend, JointBlend};

/// What the tool does on a path at one place: its pose and how that changes with the path's fraction u.
#[derive(Debug, Clone, Copy)]
pub struct Target {
    /// Pose of the TCP in the base.
    pub pose: Pose,
    /// First derivative of its position by u, m.
    pub velocity: V3,
    /// Second derivative of its position by u, m.
    pub bend: V3,
    /// At least the size of the third derivative of its position by u anywhere on the path, m.
    pub third: f64,
    /// Turning by u, rad, base axes. Constant along a line or arc, since the tool turns evenly about one axis.
    pub turning: V3,
    /// Derivative of the turning by u, rad; 0 but on a blend.
    pub swing: V3,
    /// At least the size of the second derivative of the turning by u anywhere on the path, rad.
    pub swing_change: f64,
    /// Whether the size of the velocity is the same all along.
    pub even: bool,
}

/// A path is the geometry of a segment, without time: from fraction u = 0 to 1.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Path {
    /// Joint values run evenly from one set to another.
    Joint {
        /// At u = 0.
        from: Joints,
        /// At u = 1.
        to: Joints,
    },
    /// The TCP runs along a straight line; the tool turns the shortest way.
    Line {
        /// Pose at u = 0, base.
        start: Pose,
        /// From start to end, m.
        along: V3,
        /// Axis of the tool's turn, unit vector, base axes.
        axis: V3,
        /// Angle of the tool's turn, 0 to pi rad.
        angle: f64,
    },
    /// The TCP runs along a circle; the tool turns the shortest way.
    Arc {
        /// Orientation at u = 0, and the centre of the circle as origin.
        start: Pose,
        /// From the centre to the start, m.
        arm: V3,
        /// Unit vector square to the circle's plane; the TCP runs around it by the right hand.
        normal: V3,
        /// Angle run, above 0 and below 2 pi rad.
        sweep: f64,
        /// Axis of the tool's turn, unit vector, base axes.
        axis: V3,
        /// Angle of the tool's turn, 0 to pi rad.
        angle: f64,
    },
    /// The TCP passes a fly-by point between two lines or arcs.
    Blend(Blend),
    /// The joints pass a fly-by point, a joint move on one side at least.
    JointBlend(JointBlend),
}

impl Path {
    /// A straight line between two poses (base).
    pub fn line(start: Pose, end: &Pose) -> Self {
        let (axis, angle) = turn_between(&start.axes, &end.axes);
        Self::Line { start, along: end.at - start.at, axis, angle }
    }

    /// The arc from `start` by `via` (base, m) to `end`. The three points must not stand in one line.
    pub fn arc(start: &Pose, via: &V3, end: &Pose) -> Self {
        let (a, b) = (via - start.at, end.at - start.at);
        let square = a.cross(&b);
        let normal = square.normalize();
        // The circumcentre of a triangle with one corner in the origin.
        let centre =
            start.at + (b.cross(&square) * a.norm_squared() + square.cross(&a) * b.norm_squared()) / (2.0 * square.norm_squared());
        let arm = start.at - centre;
        let to = end.at - centre;
        let sweep = normal.dot(&arm.cross(&to)).atan2(arm.dot(&to)).rem_euclid(std::f64::consts::TAU);
        let (axis, angle) = turn_between(&start.axes, &end.axes);
        Self::Arc { start: Pose { axes: start.axes, at: centre }, arm, normal, sweep, axis, angle }
    }

    /// The part of a joint move, line or arc from fraction `from` to `to` as a path of its own; a blend is never cut.
    #[must_use]
    pub fn part(&self, [from, to]: [f64; 2]) -> Self {
        let span = to - from;
        let there = self.target(from).map(|target| target.pose);
        match (*self, there) {
            (Self::Joint { from: p, to: q }, _) => {
                let at = |u: f64| p.zip(&q, |a, b| if u == 1.0 { b } else { a + u * (b - a) });
                Self::Joint { from: at(from), to: at(to) }
            }
            (Self::Line { along, axis, angle, .. }, Some(start)) => {
                Self::Line { start, along: along * span, axis, angle: angle * span }
            }
            (Self::Arc { start, arm, normal, sweep, axis, angle }, Some(there)) => Self::Arc {
                start: Pose { axes: there.axes, at: start.at },
                arm: turn_about(&normal, sweep * from) * arm,
                normal,
                sweep: sweep * span,
                axis,
                angle: angle * span,
            },
            _ => *self,
        }
    }

    /// Length that the TCP runs on a line or arc, m; 0 for a joint move, whose length depends on the arm.
    pub fn length(&self) -> f64 {
        match self {
            Self::Joint { .. } | Self::JointBlend(_) => 0.0,
            Self::Blend(blend) => blend.length(),
            Self::Line { along, .. } => along.norm(),
            Self::Arc { arm, sweep, .. } => arm.norm() * sweep,
        }
    }

    /// Angle that the tool turns on a line or arc, rad.
    pub fn turn(&self) -> f64 {
        match self {
            Self::Joint { .. } | Self::JointBlend(_) => 0.0,
            Self::Blend(blend) => blend.turn(),
            Self::Line { angle, .. } | Self::Arc { angle, .. } => *angle,
        }
    }

    /// Where the tool must be at fraction `u` of a line or arc. A joint move has no such target: `None`.
    #[inline]
    pub fn target(&self, u: f64) -> Option<Target> {
        match self {
            Self::Joint { .. } | Self::JointBlend(_) => None,
            Self::Blend(blend) => Some(blend.target(u)),
            Self::Line { start, along, axis, angle } => Some(Target {
                pose: Pose { axes: turned(start, axis, angle * u), at: start.at + along * u },
                velocity: *along,
                bend: V3::zeros(),
                third: 0.0,
                turning: axis * *angle,
                swing: V3::zeros(),
                swing_change: 0.0,
                even: true,
            }),
            Self::Arc { start, arm, normal, sweep, axis, angle } => {
                let (s, c) = sin_cos(sweep * u);
                // `arm` is square to `normal`, so the turn needs no third term.
                let out = arm * c + normal.cross(arm) * s;
                Some(Target {
                    pose: Pose { axes: turned(start, axis, angle * u), at: start.at + out },
                    velocity: normal.cross(&out) * *sweep,
                    bend: out * (-sweep * sweep),
                    third: arm.norm() * sweep.powi(3),
                    turning: axis * *angle,
                    swing: V3::zeros(),
                    swing_change: 0.0,
                    even: true,
                })
            }
        }
    }
}

fn turned(start: &Pose, axis: &V3, angle: f64) -> crate::geometry::M3 {
    if angle == 0.0 { start.axes } else { turn_about(axis, angle) * start.axes }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::Rotation;

    #[test]
    fn an_arc_through_three_points_has_the_radius_and_length_of_geometry() {
        // Circle through the unit points of the three axes; radius sqrt(2/3), sweep 240 degrees (elementary geometry).
        let at = |v: V3| Pose { axes: crate::geometry::M3::identity(), at: v };
        let arc = Path::arc(&at(V3::x()), &V3::y(), &at(V3::z()));
        let Path::Arc { arm, sweep, .. } = arc else { panic!("an arc") };
        assert!((arm.norm() - 0.816_496_580_927_726).abs() < 1e-12);
        assert!((sweep.to_degrees() - 240.0).abs() < 1e-10);
        assert!((arc.length() - 3.420_133_4).abs() < 1e-6);
        assert!((arc.target(0.5).expect("target").pose.at - V3::y()).norm() < 1e-12);
        assert!((arc.target(1.0).expect("target").pose.at - V3::z()).norm() < 1e-12);
    }

    #[test]
    fn derivatives_agree_with_differences() {
        let start = Pose::new(V3::new(0.1, 0.2, 0.3), Rotation::from_rpy(0.1, 0.2, 0.3));
        let end = Pose::new(V3::new(0.5, -0.1, 0.4), Rotation::from_rpy(-1.0, 0.7, 2.0));
        for path in [Path::line(start, &end), Path::arc(&start, &V3::new(0.4, 0.3, 0.1), &end)] {
            let (u, h) = (0.37, 1e-5);
            let [a, m, b] = [u - h, u, u + h].map(|u| path.target(u).expect("target"));
            assert!(((b.pose.at - a.pose.at) / (2.0 * h) - m.velocity).norm() < 1e-8);
            assert!(((b.velocity - a.velocity) / (2.0 * h) - m.bend).norm() < 1e-7);
            let (axis, angle) = turn_between(&a.pose.axes, &b.pose.axes);
            assert!((axis * (angle / (2.0 * h)) - m.turning).norm() < 1e-8);
        }
    }

    #[test]
    fn slerp_takes_the_short_way() {
        // Shoemake, SIGGRAPH 1985: a third of the way to 90 degrees about z is w .965926, z .258819.
        let quarter = Pose::new(V3::zeros(), Rotation::from_rpy_deg([0.0, 0.0, 90.0]));
        let third = Path::line(Pose::identity(), &quarter).target(1.0 / 3.0).expect("target");
        let [w, x, y, z] = third.pose.rotation().wxyz();
        assert!((w - 0.965_925_826).abs() < 1e-9 && (z - 0.258_819_045).abs() < 1e-9 && x.abs() + y.abs() < 1e-12);
    }
}

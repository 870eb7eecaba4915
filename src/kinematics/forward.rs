use crate::arm::{Chain, MAX_JOINTS};
use crate::geometry::{Pose, V3, sin_cos};

/// A posture is the whole arm at one set of joint values: where every joint's axis system and the flange stand in the base.
///
/// Axis system j is the one whose z is the axis of joint j, after the joint's own motion; the link of joint j is fixed in it.
#[derive(Debug, Clone, Copy)]
pub struct Posture {
    len: usize,
    frames: [Pose; MAX_JOINTS],
    flange: Pose,
}

impl Posture {
    /// The posture at joint values `q` (rad or m, one a joint).
    #[inline]
    pub fn at(chain: &Chain, q: &[f64]) -> Self {
        let mut posture = Self { len: chain.len, frames: [Pose::identity(); MAX_JOINTS], flange: Pose::identity() };
        let mut before = Pose::identity();
        // All turns first: they do not wait for each other, as the frames do.
        let mut turns = [(0.0, 1.0); MAX_JOINTS];
        for (turn, &value) in turns.iter_mut().zip(&q[..chain.len]) {
            *turn = sin_cos(value);
        }
        for (j, &value) in q[..chain.len].iter().enumerate() {
            let frame = &mut posture.frames[j];
            *frame = if j > 0 { before.then(&chain.fixed[j]) } else { chain.fixed[j] };
            if chain.turns[j] {
                let (s, c) = turns[j];
                let a = &mut frame.axes;
                (a.m11, a.m12) = (a.m11 * c + a.m12 * s, a.m12 * c - a.m11 * s);
                (a.m21, a.m22) = (a.m21 * c + a.m22 * s, a.m22 * c - a.m21 * s);
                (a.m31, a.m32) = (a.m31 * c + a.m32 * s, a.m32 * c - a.m31 * s);
            } else {
                let z: V3 = frame.axes.column(2).into_owned();
                frame.at += z * value;
            }
            before = *frame;
        }
        posture.flange = before.then(&chain.flange);
        posture
    }

    /// How many joints.
    pub fn len(&self) -> usize {
        self.len
    }

    /// Whether it has no joints.
    pub fn is_empty(&self) -> bool {
        self.len == 0
    }

    /// Axis system of joint `j` in the base.
    pub fn frame(&self, j: usize) -> &Pose {
        &self.frames[j]
    }

    /// Unit vector of the axis of joint `j`, base axes.
    #[inline]
    pub fn axis(&self, j: usize) -> V3 {
        self.frames[j].axes.column(2).into_owned()
    }

    /// A point on the axis of joint `j`, base, m.
    #[inline]
    pub fn origin(&self, j: usize) -> V3 {
        self.frames[j].at
    }

    /// Where the flange stands in the base.
    pub fn flange(&self) -> &Pose {
        &self.flange
    }

    /// Where something posed on the flange, such as a TCP, stands in the base.
    #[inline]
    pub fn tcp(&self, on_flange: &Pose) -> Pose {
        self.flange.then(on_flange)
    }

    /// The arm as a line to draw: base origin, the points where joints and links meet, flange origin; base, m.
    pub fn stick(&self) -> Vec<V3> {
        let mut points = vec![V3::zeros()];
        for j in 0..self.len {
            points.push(self.frames[j].at);
        }
        points.push(self.flange.at);
        points.dedup_by(|a, b| (*a - *b).norm() < 1e-9);
        points
    }
}

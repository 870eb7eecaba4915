use crate::motion::Piece;

/// How the fraction runs with time over a stretch, which lies on one piece of the law.
#[derive(Debug, Clone, Copy)]
pub(super) struct Pace {
    /// The piece.
    pub piece: Piece,
    /// Fraction in the middle.
    pub u: f64,
    /// Squared rate in the middle, 1/s².
    pub rate_squared: f64,
    /// Acceleration in the middle, 1/s².
    pub accel: f64,
}

/// Nearer than this to an end of a piece, as a fraction of the path, its end is meant: time is known badly where the fraction
/// stands still.
const NEAR_END: f64 = 1e-9;

impl Pace {
    /// From when to when, s into the piece, the fraction is within `half` of the middle: never too short a time.
    fn times(self, half: f64) -> [f64; 2] {
        let Piece { duration, .. } = self.piece;
        let (from, to) = (self.u - half, self.u + half);
        let first = if from <= self.piece.u + NEAR_END { 0.0 } else { self.piece.time_of(from) - 1e-9 * duration };
        let last = if to >= self.piece.end() - NEAR_END { duration } else { self.piece.time_of(to) + 1e-9 * duration };
        [first.max(0.0), last.min(duration)]
    }

    /// The greatest squared rate over a stretch of half-width `half`.
    pub fn most_squared(self, half: f64) -> f64 {
        if self.piece.jerk == 0.0 {
            return (self.rate_squared + 2.0 * self.accel.abs() * half).max(0.0);
        }
        let [first, last] = self.times(half);
        let top = -self.piece.accel / self.piece.jerk;
        let within = (top > first && top < last).then_some(top);
        [first, last].into_iter().chain(within).map(|t| self.piece.at(t)[1].powi(2)).fold(0.0, f64::max)
    }

    /// Places s (from the middle), accelerations and squared rates between which a stretch of half-width `half` stays. Without jerk
    /// the acceleration is constant and the squared rate runs evenly with s, so its two ends are enough; with jerk all three are
    /// bounded apart from each other.
    pub fn vertices(self, half: f64) -> impl Iterator<Item = [f64; 3]> {
        let mut vertices = [[0.0; 3]; 8];
        if self.piece.jerk == 0.0 {
            for (vertex, s) in vertices.iter_mut().zip([-half, half]) {
                *vertex = [s, self.accel, self.rate_squared + 2.0 * self.accel * s];
            }
            return vertices.into_iter().take(2);
        }
        let times = self.times(half);
        let slowest = times.map(|t| self.piece.at(t)[1].max(0.0).powi(2)).into_iter().fold(f64::INFINITY, f64::min);
        // A rate that falls and rises again within the piece is least in between.
        let turning = -self.piece.accel / self.piece.jerk;
        let slowest = if turning > times[0] && turning < times[1] {
            slowest.min(self.piece.at(turning)[1].max(0.0).powi(2))
        } else {
            slowest
        };
        let accels = times.map(|t| self.piece.at(t)[2]);
        let squares = [slowest, self.most_squared(half)];
        for (index, vertex) in vertices.iter_mut().enumerate() {
            *vertex = [if index < 4 { -half } else { half }, accels[index / 2 % 2], squares[index % 2]];
        }
        vertices.into_iter().take(8)
    }

    /// The greatest size of the acceleration over a stretch of half-width `half`.
    pub fn most_accel(self, half: f64) -> f64 {
        if self.piece.jerk == 0.0 {
            return self.accel.abs();
        }
        self.times(half).map(|t| self.piece.at(t)[2].abs()).into_iter().fold(0.0, f64::max)
    }

    /// The greatest size over a stretch of half-width `half` of the acceleration `a s'² + (u + a (s - m)) s''` of a joint whose
    /// slope is `u` in the middle m and whose bend is `a` throughout.
    pub fn most_joint_accel(self, half: f64, u: f64, a: f64) -> f64 {
        if self.piece.jerk == 0.0 {
            let value = u * self.accel + a * self.rate_squared;
            let change = 3.0 * a * self.accel;
            return (value + half * change).abs().max((value - half * change).abs());
        }
        // A polynomial of time: no farther above its ends than an eighth of its second derivative times the time squared.
        let [first, last] = self.times(half);
        let at = |t: f64| {
            let [s, rate, accel] = self.piece.at(t);
            (a * rate * rate + (u + a * (s - self.u)) * accel).abs()
        };
        let rate = self.most_squared(half).sqrt();
        let second = a.abs() * (3.0 * self.most_accel(half).powi(2) + 4.0 * rate * self.piece.jerk.abs());
        at(first).max(at(last)) + 0.125 * (last - first).powi(2) * second
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A stretch of a piece, by the time in its middle and half its width in fractions.
    fn stretch(piece: Piece, time: f64) -> Pace {
        let [u, rate, accel] = piece.at(time);
        Pace { piece, u, rate_squared: rate * rate, accel }
    }

    fn pieces() -> [Piece; 3] {
        let even = Piece { start: 0.0, duration: 1.0, u: 0.1, rate: 0.3, accel: 0.4, jerk: 0.0 };
        [even, Piece { jerk: 1.5, ..even }, Piece { accel: 0.9, jerk: -2.4, ..even }]
    }

    /// The greatest of what is looked at densely on the piece where the fraction is within `half` of the middle's.
    fn densely(pace: Pace, half: f64, value: impl Fn([f64; 3]) -> f64) -> f64 {
        let looks = (0..=200_000).map(|k| pace.piece.at(pace.piece.duration * f64::from(k) / 200_000.0));
        looks.filter(|look| (look[0] - pace.u).abs() <= half).map(value).fold(0.0, f64::max)
    }

    #[test]
    fn rates_and_accelerations_of_the_path_are_met_to_the_last_percent() {
        for piece in pieces() {
            for (time, half) in [(0.5, 0.02), (0.3, 0.1), (0.375, 0.05)] {
                let pace = stretch(piece, time);
                let squared = densely(pace, half, |[_, rate, _]| rate * rate);
                let bound = pace.most_squared(half);
                assert!(squared <= bound * (1.0 + 1e-9) && squared > 0.99 * bound, "{piece:?} {time}: {squared} of {bound}");
                let accel = densely(pace, half, |[_, _, accel]| accel.abs());
                let bound = pace.most_accel(half);
                assert!(accel <= bound * (1.0 + 1e-9) && accel > 0.99 * bound, "{piece:?} {time}: {accel} of {bound}");
            }
        }
    }

    #[test]
    fn accelerations_of_joints_are_met_to_the_last_percent() {
        for piece in pieces() {
            for (u, a) in [(1.3, 0.7), (-0.4, 2.0), (1.0, 0.0)] {
                let (pace, half) = (stretch(piece, 0.5), 0.01);
                let asked = |[s, rate, accel]: [f64; 3]| (a * rate * rate + (u + a * (s - pace.u)) * accel).abs();
                let (reached, bound) = (densely(pace, half, asked), pace.most_joint_accel(half, u, a));
                assert!(reached <= bound * (1.0 + 1e-9) && reached > 0.99 * bound, "{piece:?} {u} {a}: {reached} of {bound}");
            }
        }
    }

    #[test]
    fn vertices_enclose_the_law() {
        // What is even in place, acceleration and squared rate is greatest at a vertex; with jerk the three run apart, so that the
        // bound is met only as the stretch narrows.
        for piece in pieces() {
            let (pace, half) = (stretch(piece, 0.5), 0.002);
            for weights in [[1.0, 2.0, -1.0], [-3.0, 0.5, 0.7], [0.0, 1.0, 1.0]] {
                let of = |[s, accel, squared]: [f64; 3]| 5.0 + weights[0] * s + weights[1] * accel + weights[2] * squared;
                let bound = pace.vertices(half).map(of).fold(f64::NEG_INFINITY, f64::max);
                let reached = densely(pace, half, |[u, rate, accel]| of([u - pace.u, accel, rate * rate]));
                assert!(reached <= bound * (1.0 + 1e-9) && reached > 0.99 * bound, "{piece:?}: {reached} of {bound}");
            }
        }
    }
}

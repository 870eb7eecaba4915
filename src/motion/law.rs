/// Which side of an instant is meant, where something jumps.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Side {
    /// Coming up to it.
    Before,
    /// Leaving it.
    After,
}

/// A piece of a speed law: the path fraction as a polynomial of the time since the piece began.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Piece {
    /// When it begins, s after the segment's start.
    pub start: f64,
    /// How long it lasts, s.
    pub duration: f64,
    /// Fraction at its beginning.
    pub u: f64,
    /// Fraction per second at its beginning.
    pub rate: f64,
    /// Fraction per second squared, constant on the piece.
    pub accel: f64,
}

impl Piece {
    /// Fraction, its rate and its acceleration `dt` seconds into the piece.
    #[inline]
    pub fn at(&self, dt: f64) -> [f64; 3] {
        [self.u + dt * (self.rate + 0.5 * dt * self.accel), self.rate + dt * self.accel, self.accel]
    }

    /// Fraction at its end.
    pub fn end(&self) -> f64 {
        self.at(self.duration)[0]
    }

    /// How long into the piece the fraction is `u`, s.
    pub fn time_of(&self, u: f64) -> f64 {
        let ahead = u - self.u;
        if self.accel == 0.0 {
            return (ahead / self.rate).clamp(0.0, self.duration);
        }
        // The form of the quadratic's root that does not cancel; both pieces run forwards.
        let root = (self.rate * self.rate + 2.0 * self.accel * ahead).max(0.0).sqrt();
        let time = 2.0 * ahead / (self.rate + root);
        if time.is_nan() { 0.0 } else { time.clamp(0.0, self.duration) }
    }
}

/// A law says how the fraction of a path runs with time, from 0 to 1, from rest to rest. The trapezoidal law: even speeding up,
/// even running where the path is long enough, even slowing down.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Law {
    pieces: [Piece; 3],
    count: usize,
}

impl Law {
    /// The fastest trapezoid from 0 to 1 within `rate` (1/s) and `accel` (1/s²), both above 0.
    pub fn trapezoid(rate: f64, accel: f64) -> Self {
        let top = rate.min(accel.sqrt());
        let ramp = top / accel;
        let cruise = if top < rate { 0.0 } else { ((1.0 - ramp * top) / top).max(0.0) };
        let risen = 0.5 * ramp * top;
        let up = Piece { start: 0.0, duration: ramp, u: 0.0, rate: 0.0, accel };
        let even = Piece { start: ramp, duration: cruise, u: risen, rate: top, accel: 0.0 };
        let down = Piece { start: ramp + cruise, duration: ramp, u: 1.0 - risen, rate: top, accel: -accel };
        if cruise > 0.0 { Self { pieces: [up, even, down], count: 3 } } else { Self { pieces: [up, down, down], count: 2 } }
    }

    /// No motion, no time: for a segment whose ends coincide.
    pub fn none() -> Self {
        let still = Piece { start: 0.0, duration: 0.0, u: 0.0, rate: 0.0, accel: 0.0 };
        Self { pieces: [still; 3], count: 1 }
    }

    /// The same motion at an override of `k`, above 0: time runs `k` times as fast, so rates scale by `k` and accelerations by
    /// `k` squared. The path is untouched.
    #[must_use]
    pub fn scaled(&self, k: f64) -> Self {
        let scaled = |piece: &Piece| Piece {
            start: piece.start / k,
            duration: piece.duration / k,
            u: piece.u,
            rate: piece.rate * k,
            accel: piece.accel * k * k,
        };
        Self { pieces: self.pieces.each_ref().map(scaled), count: self.count }
    }

    /// Its pieces in order.
    pub fn pieces(&self) -> &[Piece] {
        &self.pieces[..self.count]
    }

    /// How long it lasts, s.
    pub fn duration(&self) -> f64 {
        let last = self.pieces()[self.count - 1];
        last.start + last.duration
    }

    /// The greatest rate of the fraction, 1/s.
    pub fn top_rate(&self) -> f64 {
        self.pieces().iter().map(|piece| piece.rate.max(piece.at(piece.duration)[1])).fold(0.0, f64::max)
    }

    /// Fraction, its rate and its acceleration at `t` seconds after the start, on the given side of a corner.
    pub fn at(&self, t: f64, side: Side) -> [f64; 3] {
        let within = |piece: &&Piece| match side {
            Side::Before => t <= piece.start + piece.duration,
            Side::After => t < piece.start + piece.duration,
        };
        let last = &self.pieces()[self.count - 1];
        let piece = self.pieces().iter().find(within).unwrap_or(last);
        let [u, rate, accel] = piece.at((t - piece.start).clamp(0.0, piece.duration));
        [u.clamp(0.0, 1.0), rate.max(0.0), accel]
    }

    /// When the fraction is `u`, s after the start.
    pub fn time_of(&self, u: f64) -> f64 {
        let last = &self.pieces()[self.count - 1];
        let piece = self.pieces().iter().find(|piece| u <= piece.end()).unwrap_or(last);
        piece.start + piece.time_of(u)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn trapezoids_have_the_durations_of_the_handbooks() {
        // Biagiotti & Melchiorri, Trajectory Planning for Automatic Machines and Robots, 2008, ch. 3: h = 10, v = 5, a = 10 takes
        // 2.5 s; h = 2 takes 0.894427 s.
        assert!((Law::trapezoid(5.0 / 10.0, 10.0 / 10.0).duration() - 2.5).abs() < 1e-12);
        assert!((Law::trapezoid(5.0 / 2.0, 10.0 / 2.0).duration() - 0.894_427_191).abs() < 1e-9);
        // Siciliano et al., Robotics, 2009, ch. 4, from memory: 0 to pi in 1 s at 6 pi rad/s²: blend time .211325 s, cruise
        // 3.98338 rad/s.
        let pi = std::f64::consts::PI;
        let law = Law::trapezoid(3.983_38 / pi, 6.0);
        assert!((law.pieces()[0].duration - 0.211_325).abs() < 1e-6);
        assert!((law.duration() - 1.0).abs() < 1e-5);
    }

    #[test]
    fn the_law_runs_from_rest_to_rest_without_a_jump_in_rate() {
        for (rate, accel) in [(0.5, 1.0), (2.5, 5.0), (1.0, 1.0), (100.0, 0.01), (1e-3, 50.0)] {
            let law = Law::trapezoid(rate, accel);
            assert_eq!(law.at(0.0, Side::After)[0], 0.0);
            assert!((law.at(law.duration(), Side::Before)[0] - 1.0).abs() < 1e-12);
            // The end of a long segment is known to the rounding of its time.
            let rounding = 1e-15 * law.duration() * accel;
            assert!(law.at(law.duration(), Side::Before)[1].abs() < 1e-9 * rate + rounding);
            for pair in law.pieces().windows(2) {
                assert!((pair[0].end() - pair[1].u).abs() < 1e-12);
                assert!((pair[0].at(pair[0].duration)[1] - pair[1].rate).abs() < 1e-12 * rate.max(1.0));
            }
            for u in [0.0, 1e-9, 0.1, 0.25, 0.5, 0.77, 1.0 - 1e-9, 1.0] {
                let t = law.time_of(u);
                assert!((law.at(t, Side::Before)[0] - u).abs() < 1e-12, "{rate} {accel} {u}");
            }
        }
    }

    #[test]
    fn an_override_scales_time_rates_and_accelerations_by_its_powers() {
        let law = Law::trapezoid(0.7, 1.3);
        for k in [0.1, 0.25, 0.58, 1.0] {
            let slow = law.scaled(k);
            assert!((slow.duration() - law.duration() / k).abs() < 1e-12);
            assert!((slow.top_rate() - k * law.top_rate()).abs() < 1e-12);
            for share in [0.0, 0.1, 0.4, 0.77, 1.0] {
                let [u, rate, accel] = law.at(share * law.duration(), Side::Before);
                let [slow_u, slow_rate, slow_accel] = slow.at(share * slow.duration(), Side::Before);
                assert!((u - slow_u).abs() < 1e-12 && (slow_rate - k * rate).abs() < 1e-12);
                assert!((slow_accel - k * k * accel).abs() < 1e-12, "{k} {share}");
            }
        }
    }

    #[test]
    fn corners_have_two_sides() {
        let law = Law::trapezoid(0.5, 1.0);
        let corner = law.pieces()[1].start;
        assert_eq!(law.at(corner, Side::Before)[2], 1.0);
        assert_eq!(law.at(corner, Side::After)[2], 0.0);
    }
}

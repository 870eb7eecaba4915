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
    /// Fraction per second squared at its beginning.
    pub accel: f64,
    /// Fraction per second cubed, constant on the piece; 0 where there is no jerk limit.
    pub jerk: f64,
}

/// How often an interval is halved to find an instant: enough for the last digit.
const HALVINGS: usize = 80;

/// Rates that differ by no more than this share are one, so that no ramp is made of rounding.
const SAME_RATE: f64 = 1e-9;

impl Piece {
    /// Fraction, its rate and its acceleration `dt` seconds into the piece.
    #[inline]
    pub fn at(&self, dt: f64) -> [f64; 3] {
        [
            self.u + dt * (self.rate + dt * (0.5 * self.accel + dt * self.jerk / 6.0)),
            self.rate + dt * (self.accel + 0.5 * dt * self.jerk),
            self.accel + dt * self.jerk,
        ]
    }

    /// Fraction at its end.
    pub fn end(&self) -> f64 {
        self.at(self.duration)[0]
    }

    /// How long into the piece the fraction is `u`, s.
    pub fn time_of(&self, u: f64) -> f64 {
        let ahead = u - self.u;
        if self.jerk != 0.0 {
            return self.cubic_time_of(u);
        }
        if self.accel == 0.0 {
            // A piece that stands still has no time at all.
            return if self.rate > 0.0 { (ahead / self.rate).clamp(0.0, self.duration) } else { 0.0 };
        }
        // The form of the quadratic's root that does not cancel; both pieces run forwards.
        let root = (self.rate * self.rate + 2.0 * self.accel * ahead).max(0.0).sqrt();
        let time = 2.0 * ahead / (self.rate + root);
        if time.is_nan() { 0.0 } else { time.clamp(0.0, self.duration) }
    }

    /// The same on a piece with jerk, where the fraction never falls: Newton within a bracket that is halved where he leaves it.
    fn cubic_time_of(&self, u: f64) -> f64 {
        let (mut low, mut high) = (0.0, self.duration);
        let mut time = 0.5 * self.duration;
        for _ in 0..HALVINGS {
            let [there, rate, _] = self.at(time);
            if there < u {
                low = time;
            } else {
                high = time;
            }
            let next = time - (there - u) / rate;
            let next = if next > low && next < high { next } else { 0.5 * (low + high) };
            if next == time || !(high > low) {
                break;
            }
            time = next;
        }
        if u <= self.u {
            0.0
        } else if u >= self.end() {
            self.duration
        } else {
            time
        }
    }
}

/// Limits bound the rate (1/s), acceleration (1/s²) and jerk (1/s³) of a path's fraction, all above 0. The jerk is infinite where
/// it has no limit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limits {
    /// Greatest rate, 1/s.
    pub rate: f64,
    /// Greatest acceleration, 1/s².
    pub accel: f64,
    /// Greatest jerk, 1/s³.
    pub jerk: f64,
}

impl Limits {
    /// The limits of the fraction of a part that is `span` of the whole.
    pub fn of_part(self, span: f64) -> Self {
        Self { rate: self.rate / span, accel: self.accel / span, jerk: self.jerk / span }
    }

    /// How long the change from rate `a` to rate `b` takes, s, and how long each of the two ramps of its acceleration.
    fn change(self, a: f64, b: f64) -> [f64; 2] {
        let by = (b - a).abs();
        if self.jerk.is_infinite() {
            [by / self.accel, 0.0]
        } else if by * self.jerk >= self.accel * self.accel {
            [by / self.accel + self.accel / self.jerk, self.accel / self.jerk]
        } else {
            let ramp = (by / self.jerk).sqrt();
            [2.0 * ramp, ramp]
        }
    }

    /// How far the fraction runs while its rate changes from `a` to `b`.
    fn way(self, a: f64, b: f64) -> f64 {
        0.5 * (a + b) * self.change(a, b)[0]
    }

    /// The greatest rate that can be reached from rate `a` (or left from, to come down to `a`) within `span` of the fraction.
    pub(super) fn reached(self, a: f64, span: f64) -> f64 {
        if !(self.way(a, self.rate) > span) {
            return self.rate;
        }
        bisect(a, self.rate, |rate| self.way(a, rate) <= span)
    }
}

/// The last number from `low` on, below `high`, for which something holds that holds at `low`.
fn bisect(mut low: f64, mut high: f64, holds: impl Fn(f64) -> bool) -> f64 {
    for _ in 0..HALVINGS {
        let middle = 0.5 * (low + high);
        if holds(middle) {
            low = middle;
        } else {
            high = middle;
        }
    }
    low
}

/// A law says how the fraction of a path runs with time, from 0 to 1: speeding up, even running where the path is long enough,
/// slowing down. Without a jerk limit both ramps are even; with one they begin and end gently (double-S), in up to seven pieces.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Law {
    pieces: [Piece; 7],
    count: usize,
}

impl Law {
    /// The fastest trapezoid from 0 to 1 within `rate` (1/s) and `accel` (1/s²), both above 0.
    pub fn trapezoid(rate: f64, accel: f64) -> Self {
        let top = rate.min(accel.sqrt());
        let ramp = top / accel;
        let cruise = if top < rate { 0.0 } else { ((1.0 - ramp * top) / top).max(0.0) };
        let risen = 0.5 * ramp * top;
        let up = Piece { start: 0.0, duration: ramp, u: 0.0, rate: 0.0, accel, jerk: 0.0 };
        let even = Piece { start: ramp, duration: cruise, u: risen, rate: top, accel: 0.0, jerk: 0.0 };
        let down = Piece { start: ramp + cruise, duration: ramp, u: 1.0 - risen, rate: top, accel: -accel, jerk: 0.0 };
        let none = Self::none().pieces[0];
        let mut pieces = [none; 7];
        pieces[..3].copy_from_slice(&if cruise > 0.0 { [up, even, down] } else { [up, down, none] });
        Self { pieces, count: if cruise > 0.0 { 3 } else { 2 } }
    }

    /// The fastest law from 0 to 1 that begins at rate `from` and ends at rate `to` (1/s), both reachable from each other within
    /// the limits.
    pub fn between(from: f64, to: f64, limits: Limits) -> Self {
        if limits.jerk.is_infinite() && from == 0.0 && to == 0.0 {
            return Self::trapezoid(limits.rate, limits.accel);
        }
        let top = limits.rate;
        let [from, to] = [from, to].map(|rate| if (rate - top).abs() <= SAME_RATE * top { top } else { rate });
        let needs = |top: f64| limits.way(from, top) + limits.way(top, to);
        let least = from.max(to);
        let top = if needs(limits.rate) <= 1.0 {
            limits.rate
        } else if limits.jerk.is_infinite() {
            (limits.accel + 0.5 * (from * from + to * to)).sqrt().max(least)
        } else {
            bisect(least, limits.rate.max(least), |top| needs(top) <= 1.0)
        };
        let top = if top - least <= SAME_RATE * top { least } else { top };
        let mut law = Self { count: 0, ..Self::none() };
        let up = limits.way(from, top);
        let down = 1.0 - limits.way(top, to);
        law.ramp(0.0, from, top, limits);
        let cruise = (down - up) / top;
        // What rounding leaves between two ramps that meet is no piece of its own.
        if cruise * top > 1e-12 {
            law.push(Piece { start: law.duration(), duration: cruise, u: up, rate: top, accel: 0.0, jerk: 0.0 });
        }
        law.ramp(down, top, to, limits);
        if law.count == 0 { Self::none() } else { law }
    }

    /// Even running from 0 to 1 within `duration` s, above 0.
    pub fn even(duration: f64) -> Self {
        let piece = Piece { start: 0.0, duration, u: 0.0, rate: 1.0 / duration, accel: 0.0, jerk: 0.0 };
        Self { pieces: [piece; 7], count: 1 }
    }

    /// Adds the pieces of a change from rate `a` to rate `b`, beginning at fraction `u`.
    fn ramp(&mut self, u: f64, a: f64, b: f64, limits: Limits) {
        let [lasts, ramp] = limits.change(a, b);
        let sign = if b > a { 1.0 } else { -1.0 };
        let even = lasts - 2.0 * ramp;
        let (jerk, top) = if ramp > 0.0 { (limits.jerk, limits.jerk * ramp) } else { (0.0, limits.accel) };
        let mut piece = Piece { start: self.duration(), duration: 0.0, u, rate: a, accel: 0.0, jerk: 0.0 };
        for (duration, accel, jerk) in [(ramp, 0.0, jerk), (even, top, 0.0), (ramp, top, -jerk)] {
            if duration > 1e-12 * lasts {
                piece = Piece { duration, accel: sign * accel, jerk: sign * jerk, ..piece };
                self.push(piece);
                let [u, rate, _] = piece.at(duration);
                piece = Piece { start: piece.start + duration, u, rate, ..piece };
            }
        }
    }

    fn push(&mut self, piece: Piece) {
        self.pieces[self.count] = piece;
        self.count += 1;
    }

    /// No motion, no time: for a segment whose ends coincide.
    pub fn none() -> Self {
        let still = Piece { start: 0.0, duration: 0.0, u: 0.0, rate: 0.0, accel: 0.0, jerk: 0.0 };
        Self { pieces: [still; 7], count: 1 }
    }

    /// The same motion at an override of `k`, above 0: time runs `k` times as fast, so rates scale by `k`, accelerations by `k`
    /// squared and jerks by its cube. The path is untouched.
    #[must_use]
    pub fn scaled(&self, k: f64) -> Self {
        let scaled = |piece: &Piece| Piece {
            start: piece.start / k,
            duration: piece.duration / k,
            u: piece.u,
            rate: piece.rate * k,
            accel: piece.accel * k * k,
            jerk: piece.jerk * k * k * k,
        };
        Self { pieces: self.pieces.each_ref().map(scaled), count: self.count }
    }

    /// Its pieces in order.
    pub fn pieces(&self) -> &[Piece] {
        &self.pieces[..self.count]
    }

    /// How long it lasts, s.
    pub fn duration(&self) -> f64 {
        self.pieces().last().map_or(0.0, |last| last.start + last.duration)
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
    fn double_s_laws_have_the_durations_of_the_handbook() {
        // Biagiotti & Melchiorri, Trajectory Planning for Automatic Machines and Robots, 2008, Ex. 3.9: h = 10, j = 30, v0 = 1,
        // v = 5, a = 10, from rate 1 to rest: Ta .7333, Tv 1.1433, Td .8333, Tj .3333.
        let of = |rate: f64, accel: f64| Limits { rate: rate / 10.0, accel: accel / 10.0, jerk: 3.0 };
        let law = Law::between(0.1, 0.0, of(5.0, 10.0));
        let lasts: Vec<f64> = law.pieces().iter().map(|piece| piece.duration).collect();
        for (found, told) in lasts.iter().zip([0.3333, 0.0667, 0.3333, 1.1433, 0.3333, 0.1667, 0.3333]) {
            assert!((found - told).abs() < 1e-4, "{lasts:?}");
        }
        // Ex. 3.13: v0 = 0, v = 10, a = 20: Ta = Td = 1.1006, Tv 0, Tj .5503, reached 9.0856 (the print says 9.0826).
        let law = Law::between(0.0, 0.0, of(10.0, 20.0));
        let lasts: Vec<f64> = law.pieces().iter().map(|piece| piece.duration).collect();
        assert!(lasts.len() == 4 && lasts.iter().all(|t| (t - 0.5503).abs() < 1e-4), "{lasts:?}");
        assert!((law.top_rate() * 10.0 - 9.0856).abs() < 1e-4);
    }

    #[test]
    fn laws_between_rates_join_without_a_jump() {
        for jerk in [f64::INFINITY, 500.0, 3.0] {
            for (from, to) in [(0.0, 0.0), (0.3, 0.0), (0.0, 0.2), (0.3, 0.31), (0.4, 0.1)] {
                let limits = Limits { rate: 0.5, accel: 2.0, jerk };
                let law = Law::between(from, to, limits);
                assert!((law.at(0.0, Side::After)[1] - from).abs() < 1e-12);
                let [u, rate, _] = law.at(law.duration(), Side::Before);
                assert!((u - 1.0).abs() < 1e-12 && (rate - to).abs() < 1e-9, "{jerk} {from} {to}: {u} {rate}");
                for pair in law.pieces().windows(2) {
                    let [u, rate, accel] = pair[0].at(pair[0].duration);
                    assert!((u - pair[1].u).abs() < 1e-12 && (rate - pair[1].rate).abs() < 1e-11);
                    assert!(jerk.is_infinite() || (accel - pair[1].accel).abs() < 1e-9);
                    assert!(rate <= limits.rate * (1.0 + 1e-12) && accel.abs() <= limits.accel * (1.0 + 1e-9));
                }
                for k in 0..=1000 {
                    let u = k as f64 / 1000.0;
                    assert!((law.at(law.time_of(u), Side::Before)[0] - u).abs() < 1e-12, "{jerk} {from} {to} {u}");
                }
            }
        }
    }

    #[test]
    fn no_motion_takes_no_time() {
        assert_eq!(Law::none().duration(), 0.0);
        assert_eq!([0.0, 0.5, 1.0].map(|u| Law::none().time_of(u)), [0.0; 3]);
    }

    #[test]
    fn corners_have_two_sides() {
        let law = Law::trapezoid(0.5, 1.0);
        let corner = law.pieces()[1].start;
        assert_eq!(law.at(corner, Side::Before)[2], 1.0);
        assert_eq!(law.at(corner, Side::After)[2], 0.0);
    }
}

use crate::motion::{Follower, Instant, Segment};

use super::channel::CHANNELS;
use super::{Meter, Place, Reading};

/// One instant that was looked at.
#[derive(Debug, Clone, Copy)]
pub(super) struct Look {
    /// Where.
    pub place: Place,
    /// What was read there.
    pub reading: Reading,
    /// What each channel asks of its limit there.
    pub asked: [f64; CHANNELS],
}

/// A sweep looks at a segment: evenly at first, then closer wherever a peak could be higher than what was seen.
#[derive(Debug)]
pub(super) struct Sweep<'a> {
    meter: &'a Meter<'a>,
    follower: Follower<'a>,
    segment: &'a Segment,
    until: f64,
    /// What was looked at, in order of time. Corners of the law stand twice, once for each side.
    pub looks: Vec<Look>,
}

/// Looks along a whole segment before refining; ribbon and chart draw from them too.
const EVEN_LOOKS: f64 = 32.0;
/// The least intervals of one piece of the law.
const LEAST_LOOKS: f64 = 4.0;
/// A peak is settled when a closer look could not move it by more than this share of the limit.
const SETTLED: f64 = 5e-4;
/// Intervals are halved at most this often.
const MOST_HALVINGS: u32 = 24;
/// Looks at one segment, at most.
const MOST_LOOKS: usize = 3000;

impl<'a> Sweep<'a> {
    /// Sweeps a segment as far as it could be followed.
    pub fn of(arm: &'a crate::arm::Arm, meter: &'a Meter<'a>, segment: &'a Segment) -> Self {
        let mut sweep =
            Self { meter, follower: Follower::of(arm, segment), segment, until: segment.followed_to(), looks: Vec::new() };
        sweep.look_evenly();
        sweep.look_closer();
        sweep
    }

    /// One look at `dt` seconds into a piece of the law. `None` where the path can't be followed.
    pub fn look(&self, piece: usize, dt: f64) -> Option<Look> {
        let piece = &self.segment.law.pieces()[piece];
        let [u, rate, accel] = piece.at(dt);
        let u = u.clamp(0.0, 1.0);
        if u > self.until {
            return None;
        }
        let instant = self.follower.at(u)?;
        Some(self.read(Place { time: piece.start + dt, u }, &instant, rate.max(0.0), accel))
    }

    /// A look with a reading made elsewhere, such as at a stop with another load.
    pub fn read(&self, place: Place, instant: &Instant, rate: f64, accel: f64) -> Look {
        self.look_of(place, self.meter.read(instant, rate, accel))
    }

    /// A look from a reading.
    pub fn look_of(&self, place: Place, reading: Reading) -> Look {
        let mut asked = [0.0; CHANNELS];
        for &slot in self.meter.used() {
            asked[slot] = self.meter.channel(slot).asked_in(&reading, reading[slot]);
        }
        Look { place, reading, asked }
    }

    /// The instant at fraction `u`.
    pub fn instant(&self, u: f64) -> Option<Instant> {
        self.follower.at(u)
    }

    /// Adds looks at witnesses (fraction and time) and looks closer around them; false if there are none.
    pub fn add(&mut self, witnesses: &[(f64, f64)]) -> bool {
        let mut added = false;
        for &(_, time) in witnesses {
            let piece = self.segment.law.pieces().iter().position(|piece| time <= piece.start + piece.duration);
            let look = piece.and_then(|piece| self.look(piece, time - self.piece_start(piece)));
            self.looks.extend(look);
            added |= look.is_some();
        }
        if added {
            self.looks.sort_by(|a, b| a.place.time.total_cmp(&b.place.time));
            self.look_closer();
        }
        added
    }

    fn look_evenly(&mut self) {
        for (index, piece) in self.segment.law.pieces().iter().enumerate() {
            let count = (EVEN_LOOKS * (piece.end() - piece.u)).max(LEAST_LOOKS).ceil() as usize;
            let count = if piece.duration > 0.0 { count } else { 0 };
            for k in 0..=count {
                let dt = if count == 0 { 0.0 } else { piece.duration * k as f64 / count as f64 };
                if let Some(look) = self.look(index, dt) {
                    self.looks.push(look);
                }
            }
        }
    }

    /// Halves intervals in which some channel bends so much that its peak could be higher than any seen.
    fn look_closer(&mut self) {
        let mut most = [0.0f64; CHANNELS];
        for look in &self.looks {
            for &slot in self.meter.used() {
                most[slot] = most[slot].max(look.asked[slot]);
            }
        }
        let mut found = Vec::new();
        let mut count = self.looks.len();
        for pair in 0..self.looks.len().saturating_sub(1) {
            let (a, b) = (self.looks[pair], self.looks[pair + 1]);
            let piece = self.piece_between(&a, &b);
            let mut open = vec![(a, b, 0u32)];
            while let (Some((a, b, depth)), Some(piece)) = (open.pop(), piece) {
                let start = self.segment.law.pieces()[piece].start;
                let middle = 0.5 * (a.place.time + b.place.time);
                if count >= MOST_LOOKS || depth >= MOST_HALVINGS || middle <= a.place.time || middle >= b.place.time {
                    continue;
                }
                let Some(m) = self.look(piece, middle - start) else { continue };
                count += 1;
                let mut closer = false;
                for &slot in self.meter.used() {
                    let (fa, fm, fb) = (a.asked[slot], m.asked[slot], b.asked[slot]);
                    most[slot] = most[slot].max(fm);
                    let bend = (fm - 0.5 * (fa + fb)).abs();
                    closer |= bend > SETTLED && fa.max(fm).max(fb) + bend > most[slot];
                }
                found.push(m);
                if closer {
                    open.push((a, m, depth + 1));
                    open.push((m, b, depth + 1));
                }
            }
        }
        self.looks.extend(found);
        self.looks.sort_by(|a, b| a.place.time.total_cmp(&b.place.time));
    }

    /// The piece of the law in which both looks stand; `None` for the two sides of a corner.
    pub fn piece_between(&self, a: &Look, b: &Look) -> Option<usize> {
        if b.place.time <= a.place.time {
            return None;
        }
        let middle = 0.5 * (a.place.time + b.place.time);
        self.segment.law.pieces().iter().position(|piece| middle >= piece.start && middle <= piece.start + piece.duration)
    }

    /// When a piece of the law starts, s.
    pub fn piece_start(&self, piece: usize) -> f64 {
        self.segment.law.pieces()[piece].start
    }

    /// How long the segment moves, s.
    pub fn duration(&self) -> f64 {
        self.segment.duration()
    }
}

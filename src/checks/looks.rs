use crate::arm::Arm;
use crate::motion::{Follower, Instant, Segment};

use super::Place;

/// Looks along a segment, evenly on every piece of its law, kept so that many greatest values are found from the same ones.
pub(super) struct Looks<'a> {
    segment: &'a Segment,
    follower: Follower<'a>,
    looks: Vec<Look>,
}

/// One look: on which piece of the law and how long into it, s.
struct Look {
    piece: usize,
    dt: f64,
    seen: Seen,
}

/// What is seen at one instant: where it is, how fast the path's fraction runs (1/s), and the arm.
struct Seen {
    place: Place,
    rate: f64,
    instant: Instant,
}

/// Looks along each piece of a law.
const EVEN: usize = 24;
/// Halvings of the closer look around the best of them: to a millionth of the distance between two looks.
const CLOSER: usize = 20;

impl<'a> Looks<'a> {
    /// Looks along a segment as far as it can be followed.
    pub fn along(arm: &'a Arm, segment: &'a Segment) -> Self {
        let mut looks = Self { segment, follower: Follower::of(arm, segment), looks: Vec::new() };
        for (piece, law) in segment.law.pieces().iter().enumerate().filter(|(_, law)| law.duration > 0.0) {
            for k in 0..=EVEN {
                let dt = law.duration * k as f64 / EVEN as f64;
                let seen = looks.see(piece, dt);
                looks.looks.extend(seen.map(|seen| Look { piece, dt, seen }));
            }
        }
        looks
    }

    fn see(&self, piece: usize, dt: f64) -> Option<Seen> {
        let law = &self.segment.law.pieces()[piece];
        let [u, rate, _] = law.at(dt);
        let u = u.clamp(0.0, 1.0);
        if u > self.segment.followed_to() {
            return None;
        }
        let instant = self.follower.at(u)?;
        Some(Seen { place: Place { time: law.start + dt, u }, rate: rate.max(0.0), instant })
    }

    /// The greatest value, and where, of something that depends on the instant and on the rate of the path's fraction (1/s). It is
    /// found by looking, closer around the best look. `None` where there is no motion to look at.
    pub fn greatest(&self, value: impl Fn(&Instant, f64) -> f64) -> Option<(f64, Place)> {
        let of = |seen: &Seen| value(&seen.instant, seen.rate);
        let best = self.looks.iter().max_by(|a, b| of(&a.seen).total_cmp(&of(&b.seen)))?;
        let length = self.segment.law.pieces()[best.piece].duration;
        let (mut most, mut at, mut dt) = (of(&best.seen), best.seen.place, best.dt);
        let mut step = length / EVEN as f64;
        for _ in 0..CLOSER {
            step *= 0.5;
            for there in [dt - step, dt + step] {
                let seen = if (0.0..=length).contains(&there) { self.see(best.piece, there) } else { None };
                let Some(seen) = seen.filter(|seen| of(seen) > most) else { continue };
                (most, at, dt) = (of(&seen), seen.place, there);
            }
        }
        Some((most, at))
    }
}

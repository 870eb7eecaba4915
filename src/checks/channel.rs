use crate::arm::{Curve, MAX_JOINTS};
use crate::units::{Dimension, Room};

use super::{Check, Reading, Verdict};

/// How many channels there are for the largest arm.
pub(super) const CHANNELS: usize = 8 * MAX_JOINTS + 6;

/// A scale turns a channel's value into what it asks of its limit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Scale {
    /// The value's size must not exceed the limit.
    Ceiling(f64),
    /// The value's size must not exceed a limit that falls with the size of the joint's rate.
    CeilingByRate(Curve),
    /// The value must stay within `half` of `middle`.
    Within {
        /// Middle of what is allowed.
        middle: f64,
        /// Half of its width.
        half: f64,
    },
    /// The value must not fall below the limit; what is asked is `limit / value`.
    Floor(f64),
    /// There is no limit; the value is only shown.
    Open,
}

/// A channel is one quantity that is watched along a segment.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Channel {
    /// Which check it belongs to.
    pub check: Check,
    /// Which joint, for checks that have a channel a joint.
    pub joint: Option<usize>,
    /// What its value measures.
    pub of: Dimension,
    /// Its limit.
    pub scale: Scale,
    /// The room that must be left.
    pub reserve: f64,
    /// Whether it is judged on this segment, or only shown.
    pub judged: bool,
}

/// A demand may exceed its limit by this share and still count as being at it: a joint move at 100 % is computed to be 100 %
/// give or take rounding.
const ROUNDING: f64 = 1e-9;

/// Nothing asks more than this of its limit as far as the sweep is concerned; room is shown down to -999 %.
const MOST_ASKED: f64 = 11.0;

impl Channel {
    /// A channel that is not there: nothing is read and nothing judged.
    pub(super) const UNUSED: Self =
        Self { check: Check::Reach, joint: None, of: Dimension::Ratio, scale: Scale::Open, reserve: 0.0, judged: false };

    /// The channel as it stands for one reading: where the limit depends on the joint's rate, with the limit at that rate.
    #[inline]
    pub fn within(&self, reading: &Reading) -> Self {
        match (self.scale, self.joint) {
            (Scale::CeilingByRate(curve), Some(joint)) => {
                Self { scale: Scale::Ceiling(curve.at(reading[MAX_JOINTS + joint].abs())), ..*self }
            }
            _ => *self,
        }
    }

    /// What `value` asks of the limit, 1 being all of it. What is not a number asks everything. A limit that depends on the rate
    /// counts as at its lowest; see [`Channel::within`].
    #[inline]
    pub fn asked(&self, value: f64) -> f64 {
        let asked = match self.scale {
            Scale::Ceiling(limit) => value.abs() / limit,
            Scale::CeilingByRate(curve) => value.abs() / curve.at(f64::INFINITY),
            Scale::Within { middle, half } => (value - middle).abs() / half,
            Scale::Floor(limit) => {
                if value > 0.0 {
                    limit / value
                } else {
                    MOST_ASKED
                }
            }
            Scale::Open => 0.0,
        };
        if asked <= MOST_ASKED { asked } else { MOST_ASKED }
    }

    /// What `value` asks in a reading: as [`Channel::within`] and [`Channel::asked`], without a copy of the channel.
    #[inline]
    pub fn asked_in(&self, reading: &Reading, value: f64) -> f64 {
        match self.scale {
            Scale::CeilingByRate(_) => self.within(reading).asked(value),
            _ => self.asked(value),
        }
    }

    /// The room that `value` leaves.
    pub fn room(&self, value: f64) -> Room {
        Room::fraction(1.0 - self.asked(value))
    }

    /// More than this asked breaks the reserve.
    #[inline]
    pub fn flagged_above(&self) -> f64 {
        1.0 - self.reserve + ROUNDING
    }

    /// Whether it is flagged, though not judged, where what is known of it is over the limit by itself.
    #[inline]
    pub fn is_flagged_over(&self) -> bool {
        self.check == Check::Moving && !self.judged && self.scale != Scale::Open
    }

    /// More than this asked breaks the limit.
    #[inline]
    pub fn over_above(&self) -> f64 {
        1.0 + ROUNDING
    }

    /// The verdict on the most that was asked.
    pub fn verdict(&self, asked: f64) -> Verdict {
        if asked > self.over_above() && !self.check.is_tight_at_worst() {
            Verdict::Over
        } else if asked > self.flagged_above() {
            Verdict::Tight
        } else {
            Verdict::Clear
        }
    }

    /// The limit that `value` is told against: for a range the end that is nearer.
    pub fn limit(&self, value: f64) -> f64 {
        match self.scale {
            Scale::Ceiling(limit) | Scale::Floor(limit) => limit,
            Scale::CeilingByRate(curve) => curve.at(f64::INFINITY),
            Scale::Within { middle, half } => {
                if value < middle {
                    middle - half
                } else {
                    middle + half
                }
            }
            Scale::Open => f64::INFINITY,
        }
    }
}

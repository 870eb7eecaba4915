use std::fmt;

/// Room is what is left between a demand and its limit: `1 - demand / limit`. 1 is idle, 0 at the limit, negative over it.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct Room(f64);

/// No room is shown lower than this; a singular posture would read minus infinity.
const LOWEST_SHOWN: f64 = -9.99;

/// Rooms this near to a whole percent count as being there, %.
const AT_THE_LIMIT: f64 = 1e-6;

impl Room {
    /// Nothing asked.
    pub const IDLE: Self = Self(1.0);

    /// From a fraction of the limit: 0.25 is a quarter left.
    pub const fn fraction(value: f64) -> Self {
        Self(value)
    }

    /// What `demand` leaves of `limit`, both in one unit and not negative. A demand that is not a number leaves minus infinity:
    /// it never passes.
    pub fn of(demand: f64, limit: f64) -> Self {
        let room = 1.0 - demand / limit;
        Self(if room.is_nan() { f64::NEG_INFINITY } else { room })
    }

    /// As a fraction of the limit.
    pub const fn as_fraction(self) -> f64 {
        self.0
    }

    /// In percent, no lower than -999.
    pub fn as_percent(self) -> f64 {
        self.0.max(LOWEST_SHOWN) * 100.0
    }

    /// The demand in percent of the limit ("asks 154 %").
    pub fn asked_percent(self) -> f64 {
        (1.0 - self.0.max(LOWEST_SHOWN)) * 100.0
    }

    /// In whole percent as people read it. What is left is rounded down, so that 9.6 % never reads as 10 %; what is over is
    /// rounded to the nearest, but never up to 0.
    pub fn shown_percent(self) -> f64 {
        let percent = self.as_percent();
        let shown = if percent > -AT_THE_LIMIT { (percent + AT_THE_LIMIT).floor() } else { percent.round().min(-1.0) };
        if shown == 0.0 { 0.0 } else { shown }
    }

    /// What is asked of the limit, in whole percent: what [`Room::shown_percent`] leaves of 100, so that the two always add up.
    pub fn asks(self) -> String {
        format!("{} %", 100.0 - self.shown_percent())
    }

    /// The lesser of two rooms.
    pub fn least(self, other: Self) -> Self {
        if other.0 < self.0 || other.0.is_nan() { other } else { self }
    }
}

impl fmt::Display for Room {
    /// In whole percent as [`Room::shown_percent`] rounds it.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} %", self.shown_percent())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn room_is_what_is_left() {
        assert!((Room::of(154.0, 100.0).as_fraction() + 0.54).abs() < 1e-12);
        assert_eq!(Room::of(154.0, 100.0).to_string(), "-54 %");
        assert_eq!(Room::of(84.4, 100.0).to_string(), "15 %");
    }

    #[test]
    fn what_is_left_and_what_is_asked_add_up_as_they_are_shown() {
        for (asked, room, asks) in [
            (154.08, "-54 %", "154 %"),
            (83.8, "16 %", "84 %"),
            (90.4, "9 %", "91 %"),
            (100.2, "-1 %", "101 %"),
            (100.0, "0 %", "100 %"),
        ] {
            let left = Room::of(asked, 100.0);
            assert_eq!((left.to_string().as_str(), left.asks().as_str()), (room, asks));
        }
    }

    #[test]
    fn what_is_no_number_never_passes() {
        assert_eq!(Room::of(f64::NAN, 1.0).as_fraction(), f64::NEG_INFINITY);
        assert_eq!(Room::of(f64::NAN, 1.0).to_string(), "-999 %");
        assert!(Room::IDLE.least(Room::fraction(f64::NAN)).as_fraction().is_nan());
    }
}

/// How strongly a joint brakes when a stop is asked for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Braking {
    /// Evenly with this deceleration, rad/s² or m/s².
    Decel(f64),
    /// Evenly, from its full rate to rest in this time, s; from a lower rate with the same deceleration.
    FromFullRate(f64),
}

/// Stopping data of a joint: what the maker gives for the worst load and posture (ISO 10218-1, Annex B, asks makers for such data).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stop {
    /// How strongly it brakes.
    pub braking: Braking,
    /// Time from asking for the stop until it brakes, s; it runs on at its rate meanwhile.
    pub reaction: f64,
}

impl Stop {
    /// Its deceleration, rad/s² or m/s², for a joint whose full rate is `full`, rad/s or m/s.
    pub fn decel(&self, full: f64) -> f64 {
        match self.braking {
            Braking::Decel(decel) => decel,
            Braking::FromFullRate(time) => full / time,
        }
    }

    /// Time from asking for the stop until a joint at `rate` rests, s; 0 for one that rests.
    pub fn time(&self, rate: f64, full: f64) -> f64 {
        if rate == 0.0 { 0.0 } else { self.reaction + rate.abs() / self.decel(full) }
    }

    /// How far a joint at `rate` runs on meanwhile, rad or m, without sign.
    pub fn run_on(&self, rate: f64, full: f64) -> f64 {
        rate.abs() * (self.reaction + 0.5 * rate.abs() / self.decel(full))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_stop_takes_time_and_way_as_even_braking_does() {
        // By hand: 180 deg/s at 900 deg/s² takes 0.2 s and 18 degrees; 0.1 s of reaction adds 18 degrees.
        let stop = Stop { braking: Braking::Decel(900.0), reaction: 0.1 };
        assert!((stop.time(-180.0, 360.0) - 0.3).abs() < 1e-12);
        assert!((stop.run_on(-180.0, 360.0) - 36.0).abs() < 1e-12);
        // The same given as the time from the full rate.
        let same = Stop { braking: Braking::FromFullRate(0.4), reaction: 0.1 };
        assert!((same.run_on(180.0, 360.0) - 36.0).abs() < 1e-12);
        assert_eq!(stop.time(0.0, 360.0), 0.0);
    }
}

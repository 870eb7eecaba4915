use std::fmt;

use super::{Dimension, Measure};

macro_rules! quantity {
    ($(#[$doc:meta])* $name:ident, $dimension:ident, $si:ident, $as_si:ident, $shop:ident, $as_shop:ident, $si_unit:literal, $shop_unit:literal) => {
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, PartialOrd, Default)]
        pub struct $name(f64);

        impl $name {
            #[doc = concat!("From a number in ", $si_unit, ".")]
            pub const fn $si(value: f64) -> Self {
                Self(value)
            }
            #[doc = concat!("The number in ", $si_unit, ".")]
            pub const fn $as_si(self) -> f64 {
                self.0
            }
            #[doc = concat!("From a number in ", $shop_unit, ".")]
            pub fn $shop(value: f64) -> Self {
                Self(value / Dimension::$dimension.per_si())
            }
            #[doc = concat!("The number in ", $shop_unit, ".")]
            pub fn $as_shop(self) -> f64 {
                self.0 * Dimension::$dimension.per_si()
            }
            /// The same as a [`Measure`], for text and comparison.
            pub fn measure(self) -> Measure {
                Measure::si(self.0, Dimension::$dimension)
            }
        }

        impl fmt::Display for $name {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                self.measure().fmt(f)
            }
        }
    };
    ($(#[$doc:meta])* $name:ident, $dimension:ident, $si:ident, $as_si:ident, $si_unit:literal) => {
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, PartialOrd, Default)]
        pub struct $name(f64);

        impl $name {
            #[doc = concat!("From a number in ", $si_unit, ".")]
            pub const fn $si(value: f64) -> Self {
                Self(value)
            }
            #[doc = concat!("The number in ", $si_unit, ".")]
            pub const fn $as_si(self) -> f64 {
                self.0
            }
            /// The same as a [`Measure`], for text and comparison.
            pub fn measure(self) -> Measure {
                Measure::si(self.0, Dimension::$dimension)
            }
        }

        impl fmt::Display for $name {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                self.measure().fmt(f)
            }
        }
    };
}

quantity!(/// An angle.
    Angle, Angle, rad, as_rad, deg, as_deg, "radians", "degrees");
quantity!(/// A length.
    Length, Length, m, as_m, mm, as_mm, "metres", "millimetres");
quantity!(/// A turning rate.
    TurnRate, TurnRate, rad_per_s, as_rad_per_s, deg_per_s, as_deg_per_s, "rad/s", "deg/s");
quantity!(/// A speed along a path.
    Speed, Speed, m_per_s, as_m_per_s, mm_per_s, as_mm_per_s, "m/s", "mm/s");
quantity!(/// A turning acceleration.
    TurnAcceleration, TurnAcceleration, rad_per_s2, as_rad_per_s2, deg_per_s2, as_deg_per_s2, "rad/s²", "deg/s²");
quantity!(/// An acceleration along a path.
    Acceleration, Acceleration, m_per_s2, as_m_per_s2, mm_per_s2, as_mm_per_s2, "m/s²", "mm/s²");
quantity!(/// A turning jerk, by which an acceleration changes.
    TurnJerk, TurnJerk, rad_per_s3, as_rad_per_s3, deg_per_s3, as_deg_per_s3, "rad/s³", "deg/s³");
quantity!(/// A jerk along a path, by which an acceleration changes.
    Jerk, Jerk, m_per_s3, as_m_per_s3, mm_per_s3, as_mm_per_s3, "m/s³", "mm/s³");
quantity!(/// A torque.
    Torque, Torque, nm, as_nm, "N·m");
quantity!(/// A force.
    Force, Force, n, as_n, "N");
quantity!(/// A mass.
    Mass, Mass, kg, as_kg, "kg");
quantity!(/// A time span or an instant on the cycle.
    Seconds, Time, s, as_s, "seconds");

/// A share of a limit: 0 is nothing, 1 is all of it.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd, Default)]
pub struct Share(f64);

impl Share {
    /// All of it.
    pub const WHOLE: Self = Self(1.0);

    /// From a fraction, 1 being all of it.
    pub const fn fraction(value: f64) -> Self {
        Self(value)
    }

    /// From percent.
    pub fn percent(value: f64) -> Self {
        Self(value / 100.0)
    }

    /// As a fraction, 1 being all of it.
    pub const fn as_fraction(self) -> f64 {
        self.0
    }

    /// In percent.
    pub fn as_percent(self) -> f64 {
        self.0 * 100.0
    }
}

impl fmt::Display for Share {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:.0} %", self.as_percent())
    }
}

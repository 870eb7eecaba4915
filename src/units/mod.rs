//! Quantities as types, and the one place where numbers become text.
//!
//! Files and screens speak mm, degrees, kg, N, N·m, s; everything inside is SI and radians. A [`Measure`] carries a number
//! whose kind is known only at run time (a joint may turn or slide); the named types carry one whose kind is known.

mod fault;
mod measure;
mod named;
mod near;
mod room;
mod typed;

pub use fault::{Fault, Field, Step};
pub use measure::{Dimension, Measure, tidy};
pub use named::{
    Acceleration, Angle, Force, Jerk, Length, Mass, Seconds, Share, Speed, Torque, TurnAcceleration, TurnJerk, TurnRate,
};
pub use near::nearest_word;
pub use room::Room;
pub use typed::{typed, typed_share};

/// Standard gravity, m/s². Exact by definition (3rd CGPM, 1901).
pub const STANDARD_GRAVITY: f64 = 9.806_65;

//! Where the arm is, how joint rates and TCP velocities belong together, and which joint values reach a pose.

mod closeness;
mod drift;
mod error;
mod forward;
mod inverse;
mod jacobian;
mod linear;
mod pieper;
mod rates;
mod singular;
mod svd;
mod wrist;

pub use closeness::{Closeness, SingularKind, SpeedLeft, singular_posture, speed_left};
pub use drift::drift;
pub use error::{pose_error, small_error, within};
pub use forward::Posture;
pub use inverse::{Branches, Reached, every_branch, nearest_turn, reach};
pub use jacobian::{Jacobian, Scaled};
pub use linear::{Lu, invert};
pub use rates::{null_rows, stacked};
pub use singular::{condition, singular_values, smallest_singular_value};
pub use svd::{Svd, svd};
pub use wrist::{SphericalWrist, spherical_wrist};

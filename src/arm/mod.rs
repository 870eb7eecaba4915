//! The arm: joints, placement, masses, limits. Built once from checked data, never changed afterwards.

mod body;
mod build;
mod chain;
mod curve;
mod drive;
mod drive_faults;
mod flange;
mod joint;
mod joints;
mod placement;
mod stop;
mod task;

pub use body::{Body, Grounds};
pub use build::{Arm, ArmData, CharacteristicLength};
pub use chain::Chain;
pub use curve::Curve;
pub use drive::{Drive, Friction, Rotor};
pub use flange::{Flange, WristLimit};
pub use joint::{Joint, JointKind, Range, TorqueRating};
pub use joints::{Joints, MAX_JOINTS};
pub use placement::{Convention, Placement};
pub use stop::{Braking, Stop};
pub use task::{Task, TaskRow};

//! What the drives must supply: holding torque by virtual work, moving torque by recursive Newton-Euler.

mod gravity;
mod holding;
mod load_diagram;
mod moving;
mod moving_parts;
mod shares;

pub use gravity::gravity_in_base;
pub use holding::{Wrench, holding_torque};
pub use load_diagram::{AtAxis, at_axis};
pub use moving::{Going, drive_torque, moving_torque, with_friction};
pub use moving_parts::MovingParts;
pub use shares::{Shares, holding_shares};

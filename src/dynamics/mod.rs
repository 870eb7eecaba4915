//! What the drives must supply: holding torque by virtual work.

mod gravity;
mod holding;
mod shares;

pub use gravity::gravity_in_base;
pub use holding::{Wrench, holding_torque};
pub use shares::{Shares, holding_shares};

//! The program: what was taught. A [`Recipe`] is plain data, SI inside; [`Recipe::faults`] tells what in it can't be.

mod acceptance;
mod arrive;
mod carried;
mod datum;
mod edit;
pub mod edit_stretch;
mod faults;
mod frame;
mod hanging;
mod recipe;
pub mod rename;
mod stages;
mod tool;
mod waypoint;

pub use acceptance::Acceptance;
pub use arrive::{Arrive, PathSpeed};
pub use carried::Carried;
pub use datum::{Datum, Part, data_of, refuse_new_faults};
pub use edit::{Edit, NoSuchWaypoint};
pub(crate) use faults::arc_fault;
pub use frame::{BASE, Frame, WORLD, frame_in_base};
pub use hanging::Hanging;
pub use recipe::{Recipe, Repeat, Usual};
pub use stages::Stages;
pub use tool::{Load, Tool, ToolPoint};
pub use waypoint::{Given, Push, PushAxes, Shown, Taught, Then, Waypoint};

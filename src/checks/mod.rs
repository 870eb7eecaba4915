//! The checks: what each segment asks against what arm and cell allow. Numbers only; words are made in `review`.
//!
//! Every check fills *channels*, one a joint or one in all. A channel knows its limit and its reserve, so that the sweep, the
//! stretches and the proof treat all of them alike.

mod accel;
mod both;
mod channel;
mod check;
mod doubt;
mod finding;
mod holding;
mod judge;
mod meter;
mod proof;
mod range;
mod rate;
mod reach;
mod result;
mod singular;
mod stretch;
mod survey;
mod sweep;
mod tcp_speed;
mod verdict;

pub use channel::{Channel, Scale};
pub use check::Check;
pub use doubt::{Doubt, doubts};
pub use finding::{Excess, Finding, Kind};
pub use meter::{Meter, Reading};
pub use proof::Tally;
pub use result::{CheckResult, Peak, Place, Profile, Proof, SegmentSurvey, Unproved};
pub use survey::{Survey, Watch, survey};
pub use verdict::Verdict;

//! The checks: what each segment asks against what arm and cell allow. Numbers only; words are made in `review`.
//!
//! Every check fills *channels*, one a joint or one in all. A channel knows its limit and its reserve, so that the sweep, the
//! stretches and the proof treat all of them alike.

mod accel;
mod both;
mod brake;
mod channel;
mod check;
mod doubt;
mod finding;
mod flange;
mod holding;
mod judge;
mod looks;
mod meter;
mod moving;
mod points;
mod proof;
mod range;
mod rate;
mod reach;
mod result;
mod rms;
mod singular;
mod stopping;
mod stretch;
mod survey;
mod sweep;
mod tcp_speed;
mod torque_sum;
mod verdict;
mod wind_up;

pub use channel::{Channel, Scale};
pub use check::Check;
pub use doubt::{Angles, Doubt, Hung, Lengths, doubts};
pub use finding::{Excess, Finding, Kind};
pub use judge::{judge_at, judge_with_flange_held_to};
pub use meter::{Meter, Reading, direction};
pub use moving::is_complete;
pub use points::{Carrying, Spot, SpotPeak, fastest_point, spot_peaks};
pub use proof::Tally;
pub use result::{CheckResult, JointSpan, Peak, Place, Profile, Proof, SegmentSurvey, Unproved};
pub use rms::{Cycle, RmsShare, is_closed};
pub use stopping::{JointStop, Stopping, stopping};
pub use survey::{Before, Survey, Watch, each_segment, in_order, survey, tightened};
pub use torque_sum::TorqueSum;
pub use verdict::Verdict;
pub use wind_up::wound_between;

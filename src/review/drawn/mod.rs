//! What is drawn of a judged recipe, as numbers: verdicts along the cycle, a quantity over time, the arm at an instant, the path of
//! its TCP. Screen and reports share it; how it is put into cells or lines is theirs.

mod bands;
mod curve;
mod gauges;
mod sketch;

pub use bands::{Band, Bands, cell_of};
pub use curve::{Curve, Point, Subject};
pub use gauges::{Gauge, Gauges, Probe};
pub use sketch::{Sketch, Stroke};

use std::fmt::Write;

use crate::arm::Arm;
use crate::motion::{Plan, Segment};
use crate::program::Recipe;

use super::{Digest, Hashing};

/// The hash of everything that a segment's verdict depends on: its path, speed law, limits, postures, tool, load, process force and
/// dwell, in both versions where it has two; the acceptance criteria; gravity in base axes; and the arm. Its number is left out, so
/// that a waypoint put in before it does not void it. All of it is hashed as the data stand in memory, every float as the shortest
/// decimal that reads back as the same double.
pub fn segment_digest(arm: &Arm, recipe: &Recipe, plan: &Plan, index: usize) -> Digest {
    let mut hashing = Hashing::default();
    let numberless = |segment: &Segment| Segment { to: 0, ..segment.clone() };
    let run = numberless(&plan.segments[index]);
    let stop = plan.stops[index].as_ref().map(|stop| numberless(stop));
    // Hashing takes everything.
    let _ = write!(hashing, "{run:?}\0{stop:?}\0{:?}\0{:?}\0{:?}", recipe.acceptance, plan.gravity, arm.data());
    hashing.digest()
}

/// The hash of everything that the torque over the cycle depends on: its segments in order, how the cycle goes on, and what hangs on
/// the flange at its ends.
pub fn cycle_digest(recipe: &Recipe, plan: &Plan, segments: &[Digest]) -> Digest {
    let mut hashing = Hashing::default();
    let ends = plan.segments.last().map(|last| (recipe.hanging_at(0), recipe.hanging_at(last.to)));
    let _ = write!(hashing, "{segments:?}\0{:?}\0{:?}\0{ends:?}", recipe.repeat, plan.first_dwell);
    hashing.digest()
}

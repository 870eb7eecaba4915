use std::sync::Arc;

use crate::arm::Arm;
use crate::kinematics::Posture;
use crate::program::Recipe;

use super::{FlyBy, Passed, Path, Segment};

/// A blend takes at most this part of a neighbour.
const MOST: f64 = 0.5;
/// ... and this part where a blend takes from its other end too, so that some of it stays.
const MOST_OF_BOTH: f64 = 0.4;
/// Looks from a corner outwards along a joint move for the place where its TCP is the radius away.
const LOOKS: usize = 32;
/// A path shorter than this, m, has no place to leave it at.
const NO_LENGTH: f64 = 1e-6;
/// A corner that is rounded: which part of the segments before and after the blend takes, and how long each part takes at the pace
/// at which it is passed, s. A blend lasts twice as long.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Corner {
    pub ends: [f64; 2],
    pub half: f64,
}

/// What was found out about a fly-by point, and from what besides the segments that meet there.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Sought {
    radius: f64,
    most: [f64; 2],
    found: Option<(Corner, Passed)>,
}

impl Sought {
    /// What became of the fly-by point at `waypoint`.
    pub(super) fn fly_by(&self, waypoint: usize) -> FlyBy {
        FlyBy { waypoint, radius: self.radius, passed: self.found.map_or(Passed::Stopped, |(_, passed)| passed) }
    }

    /// Its corner before it is settled with the others.
    pub(super) fn corner(&self) -> Option<Corner> {
        self.found.map(|(corner, _)| corner)
    }
}

/// What is found out about the end of each segment where a fly-by is asked for. `known` tells what an earlier plan found out where
/// the same two segments meet.
pub(super) fn sought(
    arm: &Arm,
    recipe: &Recipe,
    legs: &[Arc<Segment>],
    known: impl Fn(usize) -> Option<Sought>,
) -> Vec<Option<Sought>> {
    let asked = |index: usize| recipe.waypoints[index].fly_by.map(crate::units::Length::as_m);
    let seek = |index: usize, before: &Segment| {
        let radius = asked(before.to)?;
        let Some(after) = legs.get(index + 1) else { return Some(Sought { radius, most: [0.0; 2], found: None }) };
        let most = [asked(before.to - 1), asked(after.to)].map(|other| other.map_or(MOST, |_| MOST_OF_BOTH));
        let known = known(index).filter(|known| known.radius == radius && known.most == most);
        Some(known.unwrap_or_else(|| Sought { radius, most, found: corner(arm, before, after, radius, most) }))
    };
    legs.iter().enumerate().map(|(index, before)| seek(index, before)).collect()
}

fn corner(arm: &Arm, before: &Segment, after: &Segment, radius: f64, most: [f64; 2]) -> Option<(Corner, Passed)> {
    let moves = |segment: &Segment| segment.trouble.is_none() && segment.limits.is_some();
    if !moves(before) || !moves(after) || before.carried != after.carried || before.push != after.push {
        return None;
    }
    let sides = [before, after];
    let mut whole = [0.0; 2];
    for side in 0..2 {
        whole[side] = share(arm, sides[side], side == 0, radius, most[side])?;
    }
    let mut ends = [whole[0].min(most[0]), whole[1].min(most[1])];
    let cut = ends != whole;
    if sides.iter().all(|side| side.follows_path()) {
        // Both sides are left and joined at one distance, so that the blend is passed at one speed.
        let distance = (ends[0] * before.path.length()).min(ends[1] * after.path.length());
        ends = [distance / before.path.length(), distance / after.path.length()];
    }
    let half = (0..2).map(|side| ends[side] / sides[side].limits.expect("moves").rate).fold(0.0, f64::max);
    Some((Corner { ends, half }, if cut { Passed::Cut } else { Passed::Whole }))
}

/// Which part of a segment lies within `radius` of its end (or start); more than `most` where it is not left before that. `None`
/// where the TCP has no way.
fn share(arm: &Arm, segment: &Segment, at_end: bool, radius: f64, most: f64) -> Option<f64> {
    let length = segment.path.length();
    if segment.follows_path() {
        return (length > NO_LENGTH).then(|| radius / length);
    }
    let Path::Joint { from, to } = segment.path else { return None };
    let tcp = |share: f64| {
        let u = if at_end { 1.0 - share } else { share };
        Posture::at(arm.chain(), &from.zip(&to, |a, b| a + u * (b - a))).tcp(&segment.carried.tcp).at
    };
    let corner = tcp(0.0);
    let is_out = |share: f64| (tcp(share) - corner).norm() >= radius;
    let step = most / LOOKS as f64;
    let Some(first) = (1..=LOOKS).find(|&k| is_out(step * k as f64)) else {
        return ((tcp(most) - corner).norm() > NO_LENGTH).then_some(2.0 * most);
    };
    let (mut inside, mut outside) = (step * (first - 1) as f64, step * first as f64);
    for _ in 0..50 {
        let middle = 0.5 * (inside + outside);
        if is_out(middle) {
            outside = middle;
        } else {
            inside = middle;
        }
    }
    Some(outside)
}

/// Slows corners down until every segment can get from the pace of the one before it to that of the one after it.
pub(super) fn settle(stops: &[Arc<Segment>], corners: &mut [Option<Corner>]) {
    let count = stops.len();
    let span = |corners: &[Option<Corner>], k: usize| {
        let taken = |corner: Option<Corner>, side: usize| corner.map_or(0.0, |corner| corner.ends[side]);
        let start = k.checked_sub(1).map_or(0.0, |before| taken(corners[before], 1));
        1.0 - start - taken(corners[k], 0)
    };
    // The rate at which the segment on a side of a corner meets it.
    let pace = |corner: Option<Corner>, side: usize| corner.map_or(0.0, |corner| corner.ends[side] / corner.half);
    let slow = |corner: &mut Option<Corner>, side: usize, most: f64| {
        if let Some(corner) = corner
            && corner.ends[side] / corner.half > most
        {
            corner.half = corner.ends[side] / most;
        }
    };
    for k in 0..count {
        let Some(limits) = stops[k].limits else { continue };
        let from = k.checked_sub(1).map_or(0.0, |before| pace(corners[before], 1));
        let most = limits.reached(from, span(corners, k));
        slow(&mut corners[k], 0, most);
    }
    for k in (1..count).rev() {
        let Some(limits) = stops[k].limits else { continue };
        let most = limits.reached(pace(corners[k], 0), span(corners, k));
        slow(&mut corners[k - 1], 1, most);
    }
}

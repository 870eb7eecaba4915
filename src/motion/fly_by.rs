use crate::arm::Arm;
use crate::kinematics::{Posture, Reached};
use crate::program::Recipe;

use super::{Blend, Follower, Instant, JointBlend, Law, NoPath, Path, Segment, Track};

/// What became of a fly-by point.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FlyBy {
    /// Which waypoint, counted from 0.
    pub waypoint: usize,
    /// The radius asked for, m.
    pub radius: f64,
    /// How it is passed.
    pub passed: Passed,
}

/// How a fly-by point is passed.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Passed {
    /// By a blend of the radius asked for.
    Whole,
    /// By a blend that is cut, for a neighbour is too short.
    Cut,
    /// Not at all: a neighbour has no motion or no way for its TCP, or the tool or the process force changes there.
    Stopped,
}

/// A blend takes at most this part of a neighbour.
const MOST: f64 = 0.5;
/// ... and this part where a blend takes from its other end too, so that some of it stays.
const MOST_OF_BOTH: f64 = 0.4;
/// Looks from a corner outwards along a joint move for the place where its TCP is the radius away.
const LOOKS: usize = 32;
/// A path shorter than this, m, has no place to leave it at.
const NO_LENGTH: f64 = 1e-6;
/// Two sets of joint values count as one posture when no joint differs by more, rad or m.
const SAME_POSTURE: f64 = 1e-6;

/// A corner that is rounded: which part of the segments before and after the blend takes, and how long each part takes at the pace
/// at which it is passed, s. A blend lasts twice as long.
#[derive(Debug, Clone, Copy)]
struct Corner {
    ends: [f64; 2],
    half: f64,
}

/// The corners between segments that are planned from stop to stop: for each segment the corner at its end, if it is rounded.
fn corners(arm: &Arm, recipe: &Recipe, stops: &[Segment]) -> (Vec<Option<Corner>>, Vec<FlyBy>) {
    let asked = |index: usize| recipe.waypoints[index].fly_by.map(crate::units::Length::as_m);
    let mut fly_bys = Vec::new();
    let corners = stops
        .iter()
        .enumerate()
        .map(|(index, before)| {
            let radius = asked(before.to)?;
            let found = stops.get(index + 1).and_then(|after| {
                let most = [asked(before.to - 1), asked(after.to)].map(|other| other.map_or(MOST, |_| MOST_OF_BOTH));
                corner(arm, before, after, radius, most)
            });
            let passed = found.map_or(Passed::Stopped, |(_, passed)| passed);
            fly_bys.push(FlyBy { waypoint: before.to, radius, passed });
            found.map(|(corner, _)| corner)
        })
        .collect();
    (corners, fly_bys)
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
fn settle(stops: &[Segment], corners: &mut [Option<Corner>]) {
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

/// A segment of the cycle, with the version of it that stops at both its ends where fly-by points cut something off it.
pub(super) struct Run {
    pub segment: Segment,
    pub stop: Option<Segment>,
}

/// The cycle's segments, blends between them, from those planned from stop to stop.
pub(super) fn rounded(arm: &Arm, recipe: &Recipe, stops: Vec<Segment>) -> (Vec<Run>, Vec<FlyBy>) {
    let (mut corners, fly_bys) = corners(arm, recipe, &stops);
    settle(&stops, &mut corners);
    let ends: Vec<[f64; 2]> = (0..stops.len())
        .map(|k| {
            let start = k.checked_sub(1).and_then(|before| corners[before]).map_or(0.0, |corner| corner.ends[1]);
            [start, corners[k].map_or(1.0, |corner| 1.0 - corner.ends[0])]
        })
        .collect();
    let blends: Vec<Option<Segment>> =
        (0..stops.len()).map(|k| corners[k].and_then(|corner| blend(arm, &stops[k], stops.get(k + 1)?, corner))).collect();
    let mut runs = Vec::with_capacity(stops.len());
    for (k, (stop, blend)) in stops.into_iter().zip(blends).enumerate() {
        if ends[k] == [0.0, 1.0] {
            runs.push(Run { segment: stop, stop: None });
        } else {
            let from = k.checked_sub(1).and_then(|before| corners[before]).map_or(0.0, |corner| corner.ends[1] / corner.half);
            let to = corners[k].map_or(0.0, |corner| corner.ends[0] / corner.half);
            let segment = trimmed(arm, &stop, ends[k], [from, to]);
            runs.push(Run { segment: segment.unwrap_or_else(|| stop.clone()), stop: Some(stop) });
        }
        runs.extend(blend.map(|segment| Run { segment, stop: None }));
    }
    (runs, fly_bys)
}

/// What stays of a segment between two fractions, run from one rate of its whole path's fraction to another.
fn trimmed(arm: &Arm, stop: &Segment, part: [f64; 2], rates: [f64; 2]) -> Option<Segment> {
    let span = part[1] - part[0];
    let follower = Follower::of(arm, stop);
    let [start, end] = [follower.at(part[0])?, follower.at(part[1])?];
    let limits = stop.limits?.of_part(span);
    let track = if stop.follows_path() { stop.track.part(part, &end) } else { Track::default() };
    Some(Segment {
        part,
        path: stop.path.part(part),
        law: Law::between(rates[0] / span, rates[1] / span, limits),
        limits: Some(limits),
        track,
        start: start.q,
        end: end.q,
        ..stop.clone()
    })
}

/// The blend from one segment to the next.
fn blend(arm: &Arm, before: &Segment, after: &Segment, corner: Corner) -> Option<Segment> {
    let leaves = Follower::of(arm, before).at(1.0 - corner.ends[0])?;
    let joins = Follower::of(arm, after).at(corner.ends[1])?;
    let mut segment = Segment {
        blend: true,
        part: [0.0, 1.0],
        law: Law::even(2.0 * corner.half),
        limits: None,
        track: Track::default(),
        start: leaves.q,
        end: joins.q,
        carried_after: None,
        shares: None,
        trouble: None,
        dwell: 0.0,
        ..before.clone()
    };
    // An arm of more joints than its task would arrive in another posture than the one that goes on, so it blends by joints.
    let tcp = if arm.is_redundant() { None } else { Blend::between(&before.path, &after.path, corner.ends) };
    let Some(tcp) = tcp else {
        let slope = |at: &Instant, end: f64| crate::arm::Joints::from_fn(at.q.len(), |j| 2.0 * end * at.slope[j]);
        let slopes = [slope(&leaves, corner.ends[0]), slope(&joins, corner.ends[1])];
        segment.path = Path::JointBlend(JointBlend::between([leaves.q, joins.q], slopes));
        return Some(segment);
    };
    segment.path = Path::Blend(tcp);
    segment.track = Track::along(arm, &segment.path, &segment.carried.tcp, &leaves.q);
    let arrives = segment.track.nodes.last().map_or(leaves.q, |node| node.q);
    segment.trouble = match segment.track.lost {
        Some(lost) if Reached::at_limit(lost.sigma) => {
            Some(NoPath::OutOfReach { u: lost.u, q: lost.q, sigma: lost.sigma, gap: 0.0 })
        }
        Some(lost) => Some(NoPath::Lost { u: lost.u, q: lost.q, sigma: lost.sigma }),
        None if !(arrives.zip(&joins.q, |a, b| a - b).largest() <= SAME_POSTURE) => {
            Some(NoPath::OtherPosture { arrives, taught: joins.q })
        }
        None => None,
    };
    Some(segment)
}

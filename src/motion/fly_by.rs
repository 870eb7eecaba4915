use std::sync::Arc;

use crate::arm::Arm;
use crate::kinematics::Reached;
use crate::program::Recipe;

use super::corner::{Corner, Sought, settle, sought};
use super::{Blend, Follower, Instant, JointBlend, Law, NoPath, Path, Plan, Segment, Track};

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

/// Two sets of joint values count as one posture when no joint differs by more, rad or m.
const SAME_POSTURE: f64 = 1e-6;

/// A segment of the cycle, with the version of it that stops at both its ends where fly-by points cut something off it.
pub(super) struct Run {
    pub segment: Arc<Segment>,
    pub stop: Option<Arc<Segment>>,
    /// Which segment of the earlier plan it is, but for its number.
    pub same: Option<usize>,
}

/// How one segment from stop to stop is laid into the cycle.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Laid {
    /// Which segment of the plan it is.
    pub at: usize,
    /// What was found out about its end, if a fly-by is asked for there.
    sought: Option<Sought>,
    /// The corner at its end.
    corner: Option<Corner>,
    /// Which part of it is run, and the rates of the whole path's fraction at that part's ends, 1/s.
    cut: Cut,
}

#[derive(Debug, Clone, Copy, PartialEq)]
struct Cut {
    ends: [f64; 2],
    rates: [f64; 2],
}

impl Laid {
    /// What became of the fly-by point at its end, which is `waypoint`.
    pub(super) fn fly_by(&self, waypoint: usize) -> Option<FlyBy> {
        self.sought.map(|sought| sought.fly_by(waypoint))
    }
}

/// An earlier plan, and which of its segments from stop to stop the new ones are.
pub(super) struct Earlier<'a> {
    pub plan: &'a Plan,
    pub laid: Vec<Laid>,
    pub same: &'a [Option<usize>],
}

impl Earlier<'_> {
    fn of(&self, k: usize) -> Option<&Laid> {
        self.laid.get((*self.same.get(k)?)?)
    }

    /// How segment `k` was laid, if the one behind it follows it in both plans.
    fn of_pair(&self, k: usize) -> Option<&Laid> {
        let [this, next] = [self.same.get(k)?.as_ref()?, self.same.get(k + 1)?.as_ref()?];
        (this + 1 == *next).then(|| self.of(k)).flatten()
    }
}

/// The same segment under another number.
pub(super) fn renumbered(segment: &Arc<Segment>, to: usize) -> Arc<Segment> {
    if segment.to == to { Arc::clone(segment) } else { Arc::new(Segment { to, ..(**segment).clone() }) }
}

/// The cycle's segments, blends between them, from those planned from stop to stop, and how each of these is laid.
pub(super) fn rounded(arm: &Arm, recipe: &Recipe, legs: &[Arc<Segment>], earlier: Option<&Earlier>) -> (Vec<Run>, Vec<Laid>) {
    let sought = sought(arm, recipe, legs, |k| earlier.and_then(|e| e.of_pair(k)).and_then(|laid| laid.sought));
    let mut corners: Vec<Option<Corner>> = sought.iter().map(|sought| sought.and_then(|sought| sought.corner())).collect();
    settle(legs, &mut corners);
    let mut runs = Vec::with_capacity(legs.len());
    let mut laid = Vec::with_capacity(legs.len());
    for (k, leg) in legs.iter().enumerate() {
        let before = k.checked_sub(1).and_then(|before| corners[before]);
        let cut = Cut {
            ends: [before.map_or(0.0, |corner| corner.ends[1]), corners[k].map_or(1.0, |corner| 1.0 - corner.ends[0])],
            rates: [
                before.map_or(0.0, |corner| corner.ends[1] / corner.half),
                corners[k].map_or(0.0, |corner| corner.ends[0] / corner.half),
            ],
        };
        laid.push(Laid { at: runs.len(), sought: sought[k], corner: corners[k], cut });
        runs.push(run(arm, leg, &cut, earlier.and_then(|e| Some((e.plan, e.of(k)?)))));
        if let Some(corner) = corners[k] {
            let known = earlier.and_then(|e| Some((e.plan, e.of_pair(k).filter(|laid| laid.corner == Some(corner))?)));
            runs.extend(bend(arm, [leg, &legs[k + 1]], corner, known));
        }
    }
    (runs, laid)
}

/// What runs of a segment from stop to stop.
fn run(arm: &Arm, leg: &Arc<Segment>, cut: &Cut, known: Option<(&Plan, &Laid)>) -> Run {
    let known = known.filter(|(_, laid)| laid.cut == *cut);
    let same = known.map(|(_, laid)| laid.at);
    if cut.ends == [0.0, 1.0] {
        return Run { segment: Arc::clone(leg), stop: None, same };
    }
    let stop = Some(Arc::clone(leg));
    let segment = match known {
        Some((plan, laid)) => renumbered(&plan.segments[laid.at], leg.to),
        None => trimmed(arm, leg, cut).map_or_else(|| Arc::clone(leg), Arc::new),
    };
    Run { segment, stop, same }
}

/// The blend behind a segment from stop to stop.
fn bend(arm: &Arm, [before, after]: [&Arc<Segment>; 2], corner: Corner, known: Option<(&Plan, &Laid)>) -> Option<Run> {
    let old = known.and_then(|(plan, laid)| Some((plan.segments.get(laid.at + 1).filter(|old| old.blend)?, laid.at + 1)));
    match old {
        Some((old, at)) => Some(Run { segment: renumbered(old, before.to), stop: None, same: Some(at) }),
        None => blend(arm, before, after, corner).map(|blend| Run { segment: Arc::new(blend), stop: None, same: None }),
    }
}

/// What stays of a segment between two fractions, run from one rate of its whole path's fraction to another.
fn trimmed(arm: &Arm, stop: &Segment, &Cut { ends: part, rates }: &Cut) -> Option<Segment> {
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

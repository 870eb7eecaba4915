use std::sync::Arc;

use crate::arm::{Arm, Joints};
use crate::motion::{Plan, Segment};
use crate::program::{Recipe, Repeat};
use crate::units::{Measure, Room};

use super::torque_sum::SETTLED;
use super::wind_up::wind_up;
use super::{
    Channel, Check, CheckResult, Excess, Finding, Kind, Meter, Peak, Place, Proof, Scale, SegmentSurvey, TorqueSum, Unproved,
    Verdict, moving,
};

/// What one joint's torque amounts to over the whole cycle.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RmsShare {
    /// Integral of the squared torque over the cycle, N²·m²·s or N²·s.
    pub whole: f64,
    /// The segment, its dwell included, that adds most to it, counted from 0, and what it adds.
    pub most: (usize, f64),
    /// What dwells add.
    pub dwells: f64,
}

/// The torque of every joint over the cycle.
#[derive(Debug, Clone, PartialEq)]
pub struct Cycle {
    /// The result of the check of root mean square torque; one peak a joint, with the root mean square as its demand.
    pub rms: CheckResult,
    /// The result of the check of cables wound by the wrist; one peak a joint that turns, with the angle between its least and
    /// greatest value as its demand.
    pub wind_up: CheckResult,
    /// One entry a joint.
    pub shares: Vec<RmsShare>,
    /// Duration of the cycle, dwells included, s.
    pub duration: f64,
}

/// Two postures count as one when no joint differs by more, rad or m (0.06 degrees).
const SAME_POSTURE: f64 = 1e-3;

/// The torque over the cycle, from the sums over its segments.
pub(super) fn cycle(arm: &Arm, recipe: &Recipe, plan: &Plan, segments: &[Arc<SegmentSurvey>]) -> (Cycle, Vec<Finding>) {
    let duration = plan.duration();
    let followed = plan.segments.iter().all(|segment| segment.followed_to() >= 1.0 && segment.trouble.is_none());
    let standing = plan.segments.first().filter(|_| plan.first_dwell > 0.0 && followed).map(|first| {
        let meter = Meter::of(arm, first, &recipe.acceptance, plan.gravity);
        // What is taken at the first waypoint is taken at the end of the dwell.
        let carried = recipe.hanging_at(0).arriving();
        TorqueSum::before(arm, first, &meter, &carried, plan.first_dwell)
    });
    let mut shares = Vec::with_capacity(arm.len());
    let mut worst = Vec::with_capacity(arm.len());
    for j in 0..arm.len() {
        let first = standing.as_ref().map_or(0.0, |sum| sum[j]);
        let mut share = RmsShare { whole: first, most: (0, first), dwells: first };
        for (index, survey) in segments.iter().enumerate() {
            let sum = &survey.torque;
            let adds = sum.moves[j] + sum.stands[j] + if index == 0 { first } else { 0.0 };
            share.whole += sum.moves[j] + sum.stands[j];
            share.dwells += sum.stands[j];
            if adds > share.most.1 {
                share.most = (index, adds);
            }
        }
        worst.push(segments.get(share.most.0).map_or(Place { time: 0.0, u: 0.0 }, |survey| survey.torque.highest[j]));
        shares.push(share);
    }
    // A place at which Newton did not settle leaves the sum unknown; reach tells of it.
    let followed = followed && shares.iter().all(|share| share.whole.is_finite());
    let mut findings = Vec::new();
    let repeats = recipe.repeat == Repeat::Start && followed && duration > 0.0 && is_closed(recipe, plan);
    let mut rms = CheckResult {
        check: Check::Rms,
        judged: false,
        verdict: Verdict::Clear,
        proof: Proof::Open(if followed { Unproved::SamplesOnly } else { Unproved::NotFollowed }),
        peaks: Vec::new(),
    };
    for (j, joint) in arm.joints().iter().enumerate().filter(|_| followed && duration > 0.0) {
        let channel = channel(arm, recipe, j, repeats);
        // What the integral may still be off by counts against the room.
        let value = (shares[j].whole / duration + joint.torque.map_or(0.0, |t| SETTLED * t.holding * t.holding)).sqrt();
        let peak = peak(&channel, value, worst[j]);
        let verdict = channel.verdict(channel.asked(value));
        let over_alone = repeats && joint.torque.is_some() && verdict == Verdict::Over;
        rms.judged |= channel.judged || over_alone;
        if (channel.judged && verdict != Verdict::Clear) || over_alone {
            rms.verdict = rms.verdict.max(verdict);
            rms.proof = Proof::Settled;
            findings.push(finding(&peak, shares[j].most.0, verdict, &plan.segments[shares[j].most.0]));
        }
        rms.peaks.push(Peak { judged: channel.judged || over_alone, ..peak });
    }
    if rms.judged && rms.verdict == Verdict::Clear {
        match moving::unproved(arm) {
            Some(why) => {
                rms.verdict = Verdict::Unproven;
                rms.proof = Proof::Open(why);
                findings.push(unknown(why, plan));
            }
            None => rms.proof = Proof::Settled,
        }
    }
    let (wind_up, of_cables) = wind_up(arm, recipe, plan, segments);
    findings.extend(of_cables);
    (Cycle { rms, wind_up, shares, duration }, findings)
}

/// Whether the cycle ends as it began, in the same posture with the same tool and load, so that it may start again.
pub fn is_closed(recipe: &Recipe, plan: &Plan) -> bool {
    let (Some(first), Some(last)) = (plan.segments.first(), plan.segments.last()) else { return false };
    let (begins, ends) = (recipe.hanging_at(0), recipe.hanging_at(last.to));
    first.start.zip(&last.end, |a, b| a - b).largest() <= SAME_POSTURE
        && begins.tool.map(|tool| &tool.name) == ends.tool.map(|tool| &tool.name)
        && begins.before.map(|load| &load.name) == ends.after.map(|load| &load.name)
}

/// The root mean square torque of a joint against its continuous rating; judged where all that it is made of is given.
fn channel(arm: &Arm, recipe: &Recipe, j: usize, repeats: bool) -> Channel {
    let joint = &arm.joints()[j];
    Channel {
        check: Check::Rms,
        joint: Some(j),
        of: joint.kind.effort(),
        scale: joint.torque.map_or(Scale::Open, |torque| Scale::Ceiling(torque.holding)),
        reserve: recipe.acceptance.rms_reserve.as_fraction(),
        judged: repeats && moving::is_complete(arm, j) && joint.torque.is_some(),
    }
}

/// A finding that the cycle's torque is not known.
fn unknown(why: Unproved, plan: &Plan) -> Finding {
    let end = plan.segments.first().map_or(0.0, |segment| segment.duration());
    let [from, to] = [(0.0, 0.0), (end, 1.0)].map(|(time, u)| Place { time, u });
    Finding {
        segment: 0,
        check: Check::Rms,
        joint: None,
        verdict: Verdict::Unproven,
        from,
        to,
        kind: Kind::Unproved(why),
        stop: false,
    }
}

fn peak(channel: &Channel, value: f64, at: Place) -> Peak {
    Peak {
        joint: channel.joint,
        at,
        demand: Measure::si(value, channel.of),
        limit: Measure::si(channel.limit(value), channel.of),
        room: channel.room(value),
        reserve: Room::fraction(channel.reserve),
        judged: channel.judged,
    }
}

fn finding(peak: &Peak, segment: usize, verdict: Verdict, planned: &Segment) -> Finding {
    let [from, to] = [(0.0, 0.0), (planned.duration(), 1.0)].map(|(time, u)| Place { time, u });
    Finding {
        segment,
        check: Check::Rms,
        joint: peak.joint,
        verdict,
        from,
        to,
        kind: Kind::Excess(Excess::over_the_cycle(peak)),
        stop: false,
    }
}

impl Cycle {
    /// The results of all checks of the cycle as a whole.
    pub fn checks(&self) -> [&CheckResult; 2] {
        [&self.rms, &self.wind_up]
    }

    /// The result of one of them; `None` for a check that is judged segment by segment.
    pub fn check(&self, check: Check) -> Option<&CheckResult> {
        self.checks().into_iter().find(|result| result.check == check)
    }

    /// The worst verdict of all of them.
    pub fn verdict(&self) -> Verdict {
        self.rms.verdict.max(self.wind_up.verdict)
    }

    /// Root mean square of a joint's torque, N·m or N; NaN where the cycle could not be followed.
    pub fn rms_of(&self, joint: usize) -> f64 {
        (self.shares[joint].whole / self.duration).sqrt()
    }

    /// All of them.
    pub fn all(&self) -> Joints {
        Joints::from_fn(self.shares.len(), |j| self.rms_of(j))
    }
}

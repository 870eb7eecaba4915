use crate::arm::{Arm, MAX_JOINTS};
use crate::geometry::V3;
use crate::motion::Segment;
use crate::program::Acceptance;
use crate::units::{Measure, Room, Share, Speed};

use super::channel::CHANNELS;
use super::proof::{Covered, Effort, Stuck, cover};
use super::stretch::{finding, first_largest, stretches, worst_of};
use super::sweep::{Look, Sweep};
use super::wind_up::span_of;
use super::{
    Check, CheckResult, Finding, JointSpan, Kind, Meter, Peak, Place, Profile, Proof, SegmentSurvey, Tally, TorqueSum, Unproved,
    Verdict, brake, holding, moving, reach,
};

/// One segment while it is judged.
struct Case<'a> {
    arm: &'a Arm,
    index: usize,
    segment: &'a Segment,
    meter: &'a Meter<'a>,
    gravity: V3,
    effort: Effort,
    sweep: Sweep<'a>,
    after: Option<Look>,
}

/// How often a witness that the proof found sends the sweep back to look closer.
const SECOND_LOOKS: usize = 3;

/// Judges the segment of a meter by every check; `index` is its number in the plan, counted from 0.
pub(super) fn judge(index: usize, meter: &Meter, effort: Effort) -> SegmentSurvey {
    let (arm, segment, gravity) = meter.reads();
    let sweep = Sweep::of(arm, meter, segment);
    let after = look_after_stop(&sweep, meter, segment);
    let mut case = Case { arm, index, segment, meter, gravity, effort, sweep, after };
    let (mut checks, mut findings) = case.look();
    let mut tally = Tally::default();
    let mut proved = None;
    for round in 0..=SECOND_LOOKS {
        let covered = case.prove(&checks);
        tally.postures += covered.tally.postures;
        tally.trials += covered.tally.trials;
        if round < SECOND_LOOKS && case.sweep.add(&covered.witnesses) {
            // The proof came upon an instant that the sweep had missed.
            (checks, findings) = case.look();
            continue;
        }
        case.settle(&covered, &mut checks, &mut findings);
        proved = covered.spans;
        break;
    }
    let spans = case.spans(proved);
    findings.sort_by(Finding::order);
    let verdict = checks.iter().map(|result| result.verdict).max().unwrap_or(Verdict::Unproven);
    let profile = profile(meter, &case.sweep);
    SegmentSurvey {
        segment: index,
        joint_move: !segment.follows_path() && !segment.blend,
        verdict,
        checks,
        findings,
        profile,
        torque: TorqueSum::of(arm, segment, meter),
        looked_at: case.sweep.looks.len(),
        tally,
        spans,
    }
}

/// Judges one segment at an override (above 0, at most 1): rates scale by it and accelerations by its square. Everything is
/// looked at and proved anew, since not every demand grows with speed.
pub fn judge_at(arm: &Arm, index: usize, segment: &Segment, criteria: &Acceptance, gravity: V3, run_at: Share) -> SegmentSurvey {
    let slowed = segment.at_override(run_at.as_fraction());
    judge(index, &Meter::of(arm, &slowed, criteria, gravity), Effort::default())
}

/// The same with the flange held to a speed of its own besides.
pub fn judge_with_flange_held_to(
    limit: Speed,
    arm: &Arm,
    index: usize,
    segment: &Segment,
    criteria: &Acceptance,
    gravity: V3,
    run_at: Share,
) -> SegmentSurvey {
    let slowed = segment.at_override(run_at.as_fraction());
    judge(index, &Meter::of(arm, &slowed, criteria, gravity).with_flange_held_to(limit), Effort::default())
}

impl Case<'_> {
    /// What samples show: results in which nothing bad is not yet proved.
    fn look(&self) -> (Vec<CheckResult>, Vec<Finding>) {
        let mut findings = Vec::new();
        let checks = Check::ALL
            .into_iter()
            .map(|check| match check {
                Check::Reach => judge_reach(self.index, self.segment, &mut findings),
                _ => self.look_at(check, &mut findings),
            })
            .collect();
        (checks, findings)
    }

    /// Proves every channel that samples show to be clear.
    fn prove(&self, checks: &[CheckResult]) -> Covered {
        if self.segment.trouble.is_some() {
            return Covered::nothing();
        }
        let open = checks.iter().filter(|result| result.judged && result.proof == Proof::Open(Unproved::SamplesOnly));
        let needs: Vec<usize> =
            open.flat_map(|result| self.meter.slots(result.check)).filter(|&slot| self.meter.channel(slot).judged).collect();
        cover(self.arm, self.segment, self.meter, self.gravity, &needs, &self.allowed(), self.effort)
    }

    /// Between which values each joint stays.
    fn spans(&self, proved: Option<[[f64; 2]; MAX_JOINTS]>) -> Vec<JointSpan> {
        let at_rest = [(0.0, 0.0, &self.segment.start), (self.segment.duration(), 1.0, &self.segment.end)];
        let still = self.sweep.looks.is_empty() && self.segment.trouble.is_none();
        let of_joint = |j: usize| {
            let seen = self.sweep.looks.iter().map(|look| (look.reading[j], look.place));
            let rests = at_rest.iter().filter(|_| still).map(|&(time, u, q)| (q[j], Place { time, u }));
            span_of(seen.chain(rests), proved.map(|spans| spans[j]))
        };
        (0..self.arm.len()).map_while(of_joint).collect()
    }

    /// What every channel may ask for the proof to close.
    fn allowed(&self) -> [f64; CHANNELS] {
        let seen = |slot: usize| self.sweep.looks.iter().map(|look| look.asked[slot]).fold(0.0, f64::max);
        std::array::from_fn(|slot| {
            let channel = self.meter.channel(slot);
            match self.effort.within {
                // Closeness is proved as a yes or no.
                Some(within) if channel.check != Check::Singular => channel.flagged_above().min(seen(slot) + within),
                _ => channel.flagged_above(),
            }
        })
    }

    /// Writes what was proved into the results.
    fn settle(&self, covered: &Covered, checks: &mut [CheckResult], findings: &mut Vec<Finding>) {
        for result in checks.iter_mut().filter(|result| result.judged && result.proof == Proof::Open(Unproved::SamplesOnly)) {
            let slots = self.meter.slots(result.check).filter(|&slot| self.meter.channel(slot).judged);
            let stop = self.after.as_ref().filter(|_| result.check.looks_after_stop());
            let asked = slots
                .map(|slot| Some(stop.map_or(0.0, |look| look.asked[slot]).max(covered.asked[slot]?)))
                .try_fold(0.0f64, |most, asked| Some(most.max(asked?)));
            let proved = if result.check == Check::Reach { covered.path.then_some(0.0) } else { asked };
            match proved {
                Some(asked) => result.proof = Proof::Proved(Room::fraction(1.0 - asked)),
                None => {
                    result.verdict = Verdict::Unproven;
                    let stuck = covered.stuck.unwrap_or(Stuck { why: Unproved::BudgetSpent, from: 0.0, to: 1.0 });
                    result.proof = Proof::Open(stuck.why);
                    let [from, to] = [stuck.from, stuck.to].map(|u| Place { time: self.segment.law.time_of(u), u });
                    findings.push(Finding { from, to, ..self.unproved(result.check, stuck.why) });
                }
            }
        }
    }

    fn unproved(&self, check: Check, why: Unproved) -> Finding {
        let [from, to] = [(0.0, 0.0), (self.segment.duration(), 1.0)].map(|(time, u)| Place { time, u });
        Finding {
            segment: self.index,
            check,
            joint: None,
            stop: false,
            verdict: Verdict::Unproven,
            from,
            to,
            kind: Kind::Unproved(why),
        }
    }

    fn look_at(&self, check: Check, findings: &mut Vec<Finding>) -> CheckResult {
        let slots = self.meter.slots(check);
        let judged = slots.clone().any(|slot| self.meter.channel(slot).judged) || check == Check::Holding;
        let proof = Proof::Open(Unproved::SamplesOnly);
        let mut result = CheckResult { check, judged, verdict: Verdict::Clear, proof, peaks: Vec::new() };
        let after = self.after.as_ref().filter(|_| check.looks_after_stop());
        for slot in slots {
            let channel = self.meter.channel(slot);
            let mut found = stretches(&self.sweep, self.meter, slot, self.index);
            if let Some(look) = after
                && channel.judged
                && channel.verdict(look.asked[slot]) != Verdict::Clear
            {
                let mut at_stop = finding(channel, self.index, look, slot, [look.place; 2], None);
                if let Kind::Excess(excess) = &mut at_stop.kind {
                    excess.after_stop = true;
                }
                found.push(at_stop);
            }
            // What is not judged may still be over by itself.
            result.judged |= !found.is_empty();
            result.verdict = found.iter().map(|finding| finding.verdict).fold(result.verdict, Verdict::max);
            findings.extend(found);
            result.peaks.extend(peak(self.meter, &self.sweep, after, slot));
        }
        if result.verdict != Verdict::Clear {
            result.proof = Proof::Witness;
        } else if judged && let Some(why) = why_unproven(check, self.arm, self.segment) {
            result.verdict = Verdict::Unproven;
            result.proof = Proof::Open(why);
            if why != Unproved::NotFollowed {
                findings.push(self.unproved(check, why));
            }
        }
        result
    }
}

fn judge_reach(index: usize, segment: &Segment, findings: &mut Vec<Finding>) -> CheckResult {
    let verdict = reach::verdict(segment);
    let mut proof = Proof::Open(Unproved::SamplesOnly);
    if let Some(trouble) = segment.trouble {
        let u = segment.followed_to();
        let at = Place { time: segment.law.time_of(u), u };
        let start = Place { time: 0.0, u: 0.0 };
        findings.push(Finding {
            segment: index,
            check: Check::Reach,
            joint: None,
            stop: false,
            verdict,
            from: start,
            to: at,
            kind: Kind::NoPath(trouble),
        });
        proof = if trouble.is_certain() { Proof::Witness } else { Proof::Open(Unproved::NotFollowed) };
    }
    CheckResult { check: Check::Reach, judged: true, verdict, proof, peaks: Vec::new() }
}

/// The holding torque at the stop with what was taken or released there.
fn look_after_stop(sweep: &Sweep, meter: &Meter, segment: &Segment) -> Option<Look> {
    let carried = segment.carried_after.as_ref()?;
    let instant = sweep.instant(1.0).filter(|_| segment.followed_to() >= 1.0)?;
    let place = Place { time: segment.duration() + segment.dwell, u: 1.0 };
    Some(sweep.look_of(place, meter.read_with(&instant, 0.0, 0.0, carried)))
}

fn why_unproven(check: Check, arm: &Arm, segment: &Segment) -> Option<Unproved> {
    if segment.followed_to() < 1.0 {
        return Some(Unproved::NotFollowed);
    }
    match check {
        Check::Holding => holding::unproved(arm),
        Check::Moving => moving::unproved(arm),
        Check::Brake => brake::unproved(arm),
        _ => None,
    }
}

fn peak(meter: &Meter, sweep: &Sweep, after: Option<&Look>, slot: usize) -> Option<Peak> {
    let channel = meter.channel(slot);
    if sweep.looks.is_empty() {
        return None;
    }
    // A channel without a limit asks nothing, so its largest value is its peak.
    let open = sweep.looks.iter().all(|look| look.asked[slot] == 0.0);
    let mut worst = if open { first_largest(&sweep.looks, |look| look.reading[slot].abs()) } else { worst_of(&sweep.looks, slot) };
    if let Some(look) = after.filter(|look| look.asked[slot] > worst.asked[slot]) {
        worst = look;
    }
    let value = worst.reading[slot];
    let channel = &channel.within(&worst.reading);
    Some(Peak {
        joint: channel.joint,
        at: worst.place,
        demand: Measure::si(value, channel.of),
        limit: Measure::si(channel.limit(value), channel.of),
        room: channel.room(value),
        reserve: Room::fraction(channel.reserve),
        judged: channel.judged || (channel.is_flagged_over() && channel.asked(value) > channel.over_above()),
    })
}

fn profile(meter: &Meter, sweep: &Sweep) -> Profile {
    let places = sweep.looks.iter().map(|look| look.place).collect();
    let room = |look: &Look, check: Check| {
        let judged = meter.slots(check).filter(|&slot| meter.channel(slot).judged);
        judged.map(|slot| (1.0 - look.asked[slot]) as f32).fold(f32::NAN, f32::min)
    };
    let rooms = sweep.looks.iter().map(|look| Check::ALL.map(|check| room(look, check))).collect();
    Profile { places, rooms }
}

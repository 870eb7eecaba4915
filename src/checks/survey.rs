use std::sync::Arc;
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};

use rayon::prelude::*;

use crate::arm::Arm;
use crate::geometry::V3;
use crate::motion::{Plan, Segment};
use crate::program::{Acceptance, Recipe};

use super::both::worse_of_both;
use super::judge::judge;
use super::proof::Effort;
use super::rms::cycle;
use super::{Check, Cycle, Doubt, Finding, Meter, Proof, SegmentSurvey, Tally, Verdict, doubts};

/// A survey is the result of checking a whole recipe.
#[derive(Debug, Clone, PartialEq)]
pub struct Survey {
    /// One result a segment.
    pub segments: Vec<Arc<SegmentSurvey>>,
    /// The torque over the whole cycle.
    pub cycle: Cycle,
    /// All findings, the worst first.
    pub findings: Vec<Finding>,
    /// Data that is probably wrong.
    pub doubts: Vec<Doubt>,
}

impl Survey {
    /// The worst verdict of all segments and of the cycle as a whole.
    pub fn verdict(&self) -> Verdict {
        self.segments.iter().map(|segment| segment.verdict).max().map_or(Verdict::Unproven, |worst| worst.max(self.cycle.verdict()))
    }

    /// What the proofs of all segments took.
    pub fn tally(&self) -> Tally {
        self.segments.iter().fold(Tally::default(), |sum, segment| Tally {
            postures: sum.postures + segment.tally.postures,
            trials: sum.trials + segment.tally.trials,
        })
    }

    /// The largest gap between what was seen and what is proved, as a share of the limit: on which segment, and of which check.
    pub fn largest_gap(&self) -> Option<(usize, Check, f64)> {
        let gaps =
            self.segments.iter().filter_map(|segment| segment.largest_gap().map(|(check, gap)| (segment.segment, check, gap)));
        gaps.max_by(|a, b| a.2.total_cmp(&b.2).then(b.0.cmp(&a.0)))
    }

    /// How many segments have a verdict.
    pub fn count(&self, verdict: Verdict) -> usize {
        self.segments.iter().filter(|segment| segment.verdict == verdict).count()
    }
}

/// A watch on a running survey: how far it is, and a way to stop it.
#[derive(Debug, Default)]
pub struct Watch {
    stop: AtomicBool,
    done: AtomicUsize,
}

impl Watch {
    /// Asks the survey to end soon.
    pub fn stop(&self) {
        self.stop.store(true, Ordering::Relaxed);
    }

    /// Whether it was asked to end.
    pub fn is_stopped(&self) -> bool {
        self.stop.load(Ordering::Relaxed)
    }

    /// How many segments are done.
    pub fn done(&self) -> usize {
        self.done.load(Ordering::Relaxed)
    }
}

/// Does the same work for every segment of a plan on all cores; results in the plan's order. `None` if the watch stopped it.
pub fn each_segment<T: Send>(plan: &Plan, watch: &Watch, work: impl Fn(usize, &Segment) -> T + Sync) -> Option<Vec<T>> {
    plan.segments
        .par_iter()
        .enumerate()
        .map(|(index, segment)| {
            let result = (!watch.is_stopped()).then(|| work(index, segment))?;
            watch.done.fetch_add(1, Ordering::Relaxed);
            Some(result)
        })
        .collect()
}

/// Does some work for every item on all cores and hands the results on in the items' order, each as soon as it and all before it
/// are done. Not to be called from work that itself runs so.
pub fn in_order<I: Sync, T: Send>(items: &[I], work: impl Fn(&I) -> T + Sync, mut hand_on: impl FnMut(T)) {
    let (send, receive) = std::sync::mpsc::channel();
    let work = &work;
    rayon::in_place_scope(|scope| {
        for (index, item) in items.iter().enumerate() {
            let send = send.clone();
            // Whoever waits for results stays until the last.
            scope.spawn(move |_| drop(send.send((index, work(item)))));
        }
        drop(send);
        let mut waiting = std::collections::BTreeMap::new();
        let mut next = 0;
        for (index, result) in receive {
            waiting.insert(index, result);
            while let Some(result) = waiting.remove(&next) {
                hand_on(result);
                next += 1;
            }
        }
    });
}

/// An earlier survey of the same arm, and which of its segments the new plan's are.
#[derive(Debug, Clone, Copy)]
pub struct Before<'a> {
    /// What its recipe was judged by.
    pub acceptance: &'a Acceptance,
    /// Gravity in base axes then, m/s².
    pub gravity: V3,
    /// What was found.
    pub survey: &'a Survey,
    /// For each segment of the new plan the earlier one that is the same but for its number.
    pub same: &'a [Option<usize>],
}

/// Checks a planned recipe on all cores. Segments that an earlier survey judged alike are taken from it. `None` if the watch stopped
/// it. The result depends neither on the number of cores nor on what was taken over.
pub fn survey(arm: &Arm, recipe: &Recipe, plan: &Plan, before: Option<Before>, watch: &Watch) -> Option<Survey> {
    let before = before.filter(|before| *before.acceptance == recipe.acceptance && before.gravity == plan.gravity);
    let segments: Option<Vec<Arc<SegmentSurvey>>> = plan
        .segments
        .par_iter()
        .enumerate()
        .map(|(index, _)| {
            if watch.is_stopped() {
                return None;
            }
            let known = before.and_then(|before| before.survey.segments.get((*before.same.get(index)?)?));
            let result =
                known.map_or_else(|| Arc::new(one(arm, recipe, plan, index, Effort::default())), |known| renumbered(known, index));
            watch.done.fetch_add(1, Ordering::Relaxed);
            Some(result)
        })
        .collect();
    let segments = segments?;
    let mut findings: Vec<Finding> = segments.iter().flat_map(|segment| segment.findings.iter().copied()).collect();
    let (cycle, of_cycle) = cycle(arm, recipe, plan, &segments);
    findings.extend(of_cycle);
    findings.sort_by(Finding::order);
    Some(Survey { segments, cycle, findings, doubts: doubts(arm, recipe, plan) })
}

/// Judges segment `index` of a plan (counted from 0) with bounds proved as near to what was seen as half a percent of each limit,
/// whatever that costs. Where that does not close, the result is that of [`survey`].
pub fn tightened(arm: &Arm, recipe: &Recipe, plan: &Plan, index: usize) -> SegmentSurvey {
    let tight = one(arm, recipe, plan, index, Effort::tight());
    let open = |survey: &SegmentSurvey| survey.checks.iter().filter(|result| matches!(result.proof, Proof::Open(_))).count();
    let plain = one(arm, recipe, plan, index, Effort::default());
    if open(&tight) <= open(&plain) { tight } else { plain }
}

/// The worse of the versions in which a segment may run.
fn one(arm: &Arm, recipe: &Recipe, plan: &Plan, index: usize, effort: Effort) -> SegmentSurvey {
    let judged = |segment: &Segment| judge(index, &Meter::of(arm, segment, &recipe.acceptance, plan.gravity), effort);
    let run = judged(&plan.segments[index]);
    match &plan.stops[index] {
        Some(stop) => worse_of_both(plan, run, &judged(stop)),
        None => run,
    }
}

/// The same result for a segment that stands at another place now.
fn renumbered(survey: &Arc<SegmentSurvey>, index: usize) -> Arc<SegmentSurvey> {
    if survey.segment == index {
        return Arc::clone(survey);
    }
    let findings = survey.findings.iter().map(|finding| Finding { segment: index, ..*finding }).collect();
    Arc::new(SegmentSurvey { segment: index, findings, ..(**survey).clone() })
}

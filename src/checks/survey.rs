use std::sync::Arc;
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};

use rayon::prelude::*;

use crate::arm::Arm;
use crate::motion::{Plan, Segment};
use crate::program::Recipe;

use super::both::worse_of_both;
use super::judge::judge;
use super::rms::cycle;
use super::{Cycle, Doubt, Finding, SegmentSurvey, Verdict, doubts};

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
        self.segments
            .iter()
            .map(|segment| segment.verdict)
            .max()
            .map_or(Verdict::Unproven, |worst| worst.max(self.cycle.rms.verdict))
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

/// Checks a planned recipe on all cores. Segments that an earlier survey of the same arm and criteria judged alike are taken from
/// it: `before` is that plan, recipe and survey. `None` if the watch stopped it. The result does not depend on the number of
/// cores.
pub fn survey(arm: &Arm, recipe: &Recipe, plan: &Plan, before: Option<(&Recipe, &Plan, &Survey)>, watch: &Watch) -> Option<Survey> {
    let before = before.filter(|(old, old_plan, _)| old.acceptance == recipe.acceptance && old_plan.gravity == plan.gravity);
    let segments: Option<Vec<Arc<SegmentSurvey>>> = plan
        .segments
        .par_iter()
        .enumerate()
        .map(|(index, segment)| {
            if watch.is_stopped() {
                return None;
            }
            let known = before.and_then(|(_, old, survey)| {
                let same = old.segments.iter().position(|other| Arc::ptr_eq(other, segment) || **other == **segment)?;
                let known = survey.segments.get(same)?;
                (known.segment == index && old.stops[same] == plan.stops[index]).then(|| Arc::clone(known))
            });
            let judged = |segment: &Segment| judge(arm, index, segment, &recipe.acceptance, plan.gravity);
            let result = known.unwrap_or_else(|| {
                let run = judged(segment);
                Arc::new(match &plan.stops[index] {
                    Some(stop) => worse_of_both(plan, run, &judged(stop)),
                    None => run,
                })
            });
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

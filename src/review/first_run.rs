use std::collections::BTreeMap;

use crate::checks::{Check, Finding, Kind, SegmentSurvey, Verdict, Watch, each_segment, judge_at};
use crate::motion::Segment;
use crate::units::Share;

use super::Judged;

/// What keeps a segment from being clear: a check, and the joint where it has one a joint.
pub type HeldBack = (Check, Option<usize>);

/// A stage of the first run: the whole program at one override.
#[derive(Debug, Clone, PartialEq)]
pub struct Stage {
    /// The override.
    pub run_at: Share,
    /// The verdict of each segment there, in the plan's order, each judged and proved at this very override.
    pub segments: Vec<Verdict>,
}

impl Stage {
    /// The worst verdict of all segments.
    pub fn verdict(&self) -> Verdict {
        self.segments.iter().copied().max().unwrap_or(Verdict::Unproven)
    }
}

/// How fast one segment is clear.
#[derive(Debug, Clone, PartialEq)]
pub struct SegmentRun {
    /// Which segment of the plan, counted from 0.
    pub segment: usize,
    /// The highest override in whole percent at which it was found clear, and proved so; `None` if none was found.
    pub highest: Option<Share>,
    /// Lower overrides that were tried and are not clear: not every demand grows with speed.
    pub gaps: Vec<Share>,
    /// What is not clear just above the highest override, or at every one; `None` where full speed is clear.
    pub held_back: Option<HeldBack>,
    /// Whether that is so at every override, since it does not depend on speed.
    pub at_any_speed: bool,
    /// Whether clear at the highest override is clear at every lower one, since each demand that is judged grows with the
    /// override or is the same at every one. Otherwise lower ones are known where they were tried.
    pub clear_below: bool,
}

/// A plan for the first run: which overrides are clear.
#[derive(Debug, Clone, PartialEq)]
pub struct FirstRun {
    /// The stages that the recipe asks for.
    pub stages: Vec<Stage>,
    /// Every segment.
    pub segments: Vec<SegmentRun>,
    /// The highest override in whole percent at which every segment is clear, each proved there; `None` if none was found.
    pub highest: Option<Share>,
}

/// Where a demand need not fall with speed, overrides are tried in steps of this many percent; between the highest clear one and
/// the next step they are tried one by one.
const STEP: usize = 5;
/// Override in percent at full speed.
const FULL: usize = 100;

/// Finds out at which overrides a judged recipe is clear. Every override that is told was judged and proved itself: rates grow
/// with it and accelerations with its square, but torques need not grow at all. `None` if the watch stopped it.
pub fn first_run(judged: &Judged, watch: &Watch) -> Option<FirstRun> {
    let shares = judged.recipe.acceptance.stages;
    let tried = each_segment(&judged.plan, watch, |index, segment| {
        let mut trial = Trial::of(judged, index, segment);
        let run = trial.search();
        let stages: Vec<Verdict> = shares.shares().iter().map(|share| trial.at(*share).verdict).collect();
        (run, stages, trial.known)
    })?;
    let stages = shares.shares().iter().enumerate();
    let stages =
        stages.map(|(k, share)| Stage { run_at: *share, segments: tried.iter().map(|(_, at, _)| at[k]).collect() }).collect();
    let highest = highest_of_all(judged, &tried.iter().map(|(run, _, known)| (run, known)).collect::<Vec<_>>());
    Some(FirstRun { stages, segments: tried.into_iter().map(|(run, ..)| run).collect(), highest })
}

/// What became of one override of one segment.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Outcome {
    verdict: Verdict,
    held_back: Option<HeldBack>,
}

impl Outcome {
    fn of(survey: &SegmentSurvey) -> Self {
        let worst = survey.findings.first().map(|finding| (finding.check, finding.joint));
        Self { verdict: survey.verdict, held_back: worst.filter(|_| survey.verdict != Verdict::Clear) }
    }
}

/// One segment while its overrides are tried.
struct Trial<'a> {
    judged: &'a Judged,
    index: usize,
    segment: &'a Segment,
    /// Outcomes by override in whole percent.
    known: BTreeMap<usize, Outcome>,
}

impl<'a> Trial<'a> {
    fn of(judged: &'a Judged, index: usize, segment: &'a Segment) -> Self {
        let known = BTreeMap::from([(FULL, Outcome::of(&judged.survey.segments[index]))]);
        Self { judged, index, segment, known }
    }

    fn at(&mut self, run_at: Share) -> Outcome {
        let percent = run_at.as_percent();
        if percent.fract() == 0.0 {
            return self.at_percent(percent as usize);
        }
        Outcome::of(&self.survey_at(run_at))
    }

    fn at_percent(&mut self, percent: usize) -> Outcome {
        if let Some(known) = self.known.get(&percent) {
            return *known;
        }
        let outcome = Outcome::of(&self.survey_at(Share::percent(percent as f64)));
        self.known.insert(percent, outcome);
        outcome
    }

    fn survey_at(&self, run_at: Share) -> SegmentSurvey {
        let Judged { arm, recipe, plan, .. } = self.judged;
        judge_at(arm, self.index, self.segment, &recipe.acceptance, plan.gravity, run_at)
    }

    fn search(&mut self) -> SegmentRun {
        let segment = self.index;
        let full = self.judged.survey.segments[self.index].as_ref();
        if let Some(finding) = full.findings.iter().find(|finding| holds_at_any_speed(finding)) {
            let held_back = Some((finding.check, finding.joint));
            return SegmentRun { segment, highest: None, gaps: Vec::new(), held_back, at_any_speed: true, clear_below: true };
        }
        let mut judged = full.checks.iter().filter(|result| result.judged).map(|result| result.check);
        let clear_below = judged.all(|check| check.is_of_posture_alone() || check.grows_with_speed());
        let is_clear = |percent: usize| self.at_percent(percent).verdict == Verdict::Clear;
        let (highest, gaps) = if clear_below { (halve(is_clear), Vec::new()) } else { step_down(is_clear) };
        let held_back = match highest {
            Some(FULL) => None,
            found => self.at_percent(found.unwrap_or(0) + 1).held_back,
        };
        SegmentRun {
            segment,
            highest: highest.map(share),
            gaps: gaps.into_iter().map(share).collect(),
            held_back,
            at_any_speed: false,
            clear_below,
        }
    }
}

/// The highest clear override in percent where every one below a clear one is clear too.
fn halve(mut is_clear: impl FnMut(usize) -> bool) -> Option<usize> {
    if is_clear(FULL) {
        return Some(FULL);
    }
    let (mut clear, mut not) = (0, FULL);
    while not - clear > 1 {
        let middle = usize::midpoint(clear, not);
        if is_clear(middle) {
            clear = middle;
        } else {
            not = middle;
        }
    }
    (clear > 0).then_some(clear)
}

/// The highest clear override in percent that steps find, and the steps below it that are not clear, the higher ones first.
fn step_down(mut is_clear: impl FnMut(usize) -> bool) -> (Option<usize>, Vec<usize>) {
    let (clear, not): (Vec<usize>, Vec<usize>) = (1..=FULL / STEP).rev().map(|k| k * STEP).partition(|percent| is_clear(*percent));
    // Below the least step nothing was tried yet.
    let found = clear.first().copied().unwrap_or(0);
    let highest = (found..(found + STEP).min(FULL + 1)).rev().find(|percent| *percent > 0 && is_clear(*percent));
    let gaps = not.into_iter().filter(|percent| *percent < highest.unwrap_or(0)).collect();
    (highest, gaps)
}

/// Whether a finding at full speed is one at every override. A proof that merely did not close may close at another.
fn holds_at_any_speed(finding: &Finding) -> bool {
    let open = matches!(finding.kind, Kind::Unproved(why) if why.is_of_proof_alone());
    finding.check.is_of_posture_alone() && !open
}

fn share(percent: usize) -> Share {
    Share::percent(percent as f64)
}

/// The highest override in whole percent at which all segments are clear.
fn highest_of_all(judged: &Judged, tried: &[(&SegmentRun, &BTreeMap<usize, Outcome>)]) -> Option<Share> {
    let mut trials: Vec<Trial> = tried
        .iter()
        .map(|(run, known)| Trial {
            judged,
            index: run.segment,
            segment: &judged.plan.segments[run.segment],
            known: (*known).clone(),
        })
        .collect();
    let each: Option<Vec<Share>> = tried.iter().map(|(run, _)| run.highest).collect();
    let most = each?.into_iter().map(|share| share.as_percent().round() as usize).min()?;
    // The next one down is only needed where some segment has a gap there.
    let candidates = std::iter::once(most).chain((1..most).rev().filter(|percent| percent % STEP == 0));
    candidates
        .into_iter()
        .find(|percent| trials.iter_mut().all(|trial| trial.at_percent(*percent).verdict == Verdict::Clear))
        .map(share)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn halving_finds_the_edge_of_what_is_clear() {
        for edge in 0..=FULL {
            assert_eq!(halve(|percent| percent <= edge), (edge > 0).then_some(edge));
        }
    }

    #[test]
    fn steps_find_the_edge_and_the_gaps_below_it() {
        for edge in 0..=FULL {
            assert_eq!(step_down(|percent| percent <= edge), ((edge > 0).then_some(edge), Vec::new()), "{edge}");
        }
        let with_a_gap = |percent: usize| percent <= 83 && !(38..=51).contains(&percent);
        assert_eq!(step_down(with_a_gap), (Some(83), vec![50, 45, 40]));
        assert_eq!(step_down(|_| false), (None, Vec::new()));
    }
}

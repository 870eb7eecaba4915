use crate::checks::{Check, Verdict};
use crate::review::{FirstRun, HeldBack, SegmentRun, Stage};

use super::listing::{all_of, first_of};
use super::{Judged, check_words};

/// What stands under every result.
pub const CAUTION: &str = "Elbowroom computes from data that people typed. It replaces no risk assessment, no safeguard \
                                  and no reduced-speed trial.";

/// What a person minds before and during a first run, in order; in the sense of ISO 10218-2. The first two come before any stage.
pub const FIRST_RUN_CAUTIONS: [&str; 6] = [
    "People leave the safeguarded space before drive power comes on, and stay out while the program runs.",
    "Each axis moves and is limited as intended, the emergency stop and every safeguard are tried, before the program is.",
    "Manual mode at reduced speed comes first, without the part and then with it, a hand at the stop.",
    "Then stage by stage, whole cycles at each; a higher one only after a lower one has shown nothing.",
    "A stage that is clear here is clear by the data that people typed. It is no leave to run the arm.",
    "The cell's risk assessment, the arm maker's documents and local codes come first and may ask for more.",
];

/// Segments with gaps in their clear overrides that are told one by one.
const MOST_WITH_GAPS: usize = 5;

/// The plan in a few sentences: how fast the whole program is clear, what holds back what, and where slower is not safer.
pub fn first_run_text(judged: &Judged, plan: &FirstRun) -> Vec<String> {
    let mut told = vec![match plan.highest {
        Some(share) if share.as_fraction() >= 1.0 => "The whole program is clear at full speed.".to_owned(),
        Some(share) => format!("The whole program is clear up to an override of {share}."),
        None => "At no override that was tried is the whole program clear.".to_owned(),
    }];
    let number = |run: &SegmentRun| judged.plan.segments[run.segment].number();
    let never = |run: &&SegmentRun| run.highest.is_none();
    let (blind, other): (Vec<&SegmentRun>, Vec<&SegmentRun>) = plan.segments.iter().filter(never).partition(|run| run.at_any_speed);
    for (runs, which) in [(blind, "which no override changes"), (other, "at every override that was tried")] {
        let told_each: Vec<String> =
            runs.iter().map(|run| format!("segment {} by {}", number(run), held_back_words(judged, run.held_back))).collect();
        if !told_each.is_empty() {
            told.push(format!("Held back, {which}: {}.", all_of(&first_of(&told_each))));
        }
    }
    let slower: Vec<String> = plan
        .segments
        .iter()
        .filter(|run| run.highest.is_some_and(|share| share.as_fraction() < 1.0))
        .map(|run| {
            let by = held_back_words(judged, run.held_back);
            format!("segment {} up to {}, held back by {by}", number(run), run.highest.unwrap_or_default())
        })
        .collect();
    if !slower.is_empty() {
        told.push(format!("Clear only below full speed: {}.", all_of(&first_of(&slower))));
    }
    for run in plan.segments.iter().filter(|run| !run.gaps.is_empty()).take(MOST_WITH_GAPS) {
        let gaps: Vec<String> = run.gaps.iter().map(ToString::to_string).collect();
        told.push(format!(
            "Segment {} is clear up to {}, but not at {}: not every demand falls with speed.",
            number(run),
            run.highest.unwrap_or_default(),
            all_of(&gaps)
        ));
    }
    told.push(
        if plan.segments.iter().all(|run| run.clear_below) {
            "Rates grow with the override and accelerations with its square, holding is the same at every one; so what is clear at \
             one override is clear at every lower one. Each that is told was judged and proved itself."
        } else {
            "Rates grow with the override and accelerations with its square, but not every demand falls with speed. Overrides were \
             tried in steps of 5 %, then of 1 %; each that is told was judged and proved itself, those between were not."
        }
        .to_owned(),
    );
    told
}

/// What holds a segment back, in words: `holding of J2`; empty for nothing.
pub fn held_back_words(judged: &Judged, held_back: Option<HeldBack>) -> String {
    match held_back {
        None => String::new(),
        Some((Check::Reach, _)) => "reach".to_owned(),
        Some((check, None)) => check_words(check).to_owned(),
        Some((check, Some(j))) => format!("{} of {}", check_words(check), judged.arm.joints()[j].name),
    }
}

/// What is not clear at a stage: `1 over (segment 10), 1 tight (12)`; empty where all is clear.
pub fn stage_words(judged: &Judged, stage: &Stage) -> String {
    let of = |verdict: Verdict| {
        let segments = judged.plan.segments.iter().zip(&stage.segments).filter(|(_, found)| **found == verdict);
        segments.map(|(segment, _)| segment.number().to_string()).collect::<Vec<_>>()
    };
    let told: Vec<String> = Verdict::ALL
        .into_iter()
        .filter(|verdict| *verdict != Verdict::Clear)
        .map(|verdict| (verdict, of(verdict)))
        .filter(|(_, numbers)| !numbers.is_empty())
        .map(|(verdict, numbers)| format!("{} {} (segment {})", numbers.len(), verdict.word(), first_of(&numbers).join(", ")))
        .collect();
    told.join(", ")
}

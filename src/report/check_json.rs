use serde::Serialize;

use crate::checks::{Watch, is_closed};
use crate::motion::Segment;
use crate::review::{Judged, not_checked, reduced_speed};
use crate::units::Seconds;

use super::finding_json::{DoubtJson, FindingJson};
use super::judged_json::{CheckJson, Checks, figure, percent, shown};
use super::plan_json::ReducedJson;

/// The name and version of the format that [`check_json`] writes.
pub const FORMAT: &str = "elbowroom-check/1";

#[derive(Debug, Serialize)]
struct Report {
    format: &'static str,
    version: &'static str,
    recipe: String,
    recipe_file: String,
    arm: String,
    arm_file: String,
    verdict: &'static str,
    duration_s: Option<f64>,
    segments: Vec<SegmentJson>,
    cycle: CycleJson,
    findings: Vec<FindingJson>,
    doubts: Vec<DoubtJson>,
    proof: ProofJson,
    reduced_speed: ReducedJson,
    not_checked: Vec<String>,
}

/// What is judged over the cycle as a whole.
#[derive(Debug, Serialize)]
struct CycleJson {
    verdict: &'static str,
    closed: bool,
    checks: Checks,
}

/// How the proof went: postures evaluated, bound trials, and the largest gap between what was seen and what is proved, in percent of
/// the limit, with its segment and check.
#[derive(Debug, Serialize)]
struct ProofJson {
    postures: usize,
    trials: usize,
    largest_gap: Option<f64>,
    segment: Option<usize>,
    check: Option<&'static str>,
}

impl ProofJson {
    fn of(judged: &Judged) -> Self {
        let tally = judged.survey.tally();
        let gap = judged.survey.largest_gap();
        Self {
            postures: tally.postures,
            trials: tally.trials,
            largest_gap: gap.and_then(|(_, _, gap)| figure(100.0 * gap)),
            segment: gap.map(|(segment, ..)| judged.plan.segments[segment].number()),
            check: gap.map(|(_, check, _)| check.key()),
        }
    }
}

/// One segment; where `fly_by` is true, the blend past its waypoint. `index` is its number as people read it: that of the waypoint
/// it arrives at, counted from 1.
#[derive(Debug, Serialize)]
struct SegmentJson {
    index: usize,
    from: String,
    to: String,
    fly_by: bool,
    arrive: &'static str,
    start_s: Option<f64>,
    duration_s: Option<f64>,
    dwell_s: Option<f64>,
    verdict: &'static str,
    room: Option<f64>,
    nearest: Option<&'static str>,
    checks: Checks,
}

/// A judged recipe as one JSON object on one line, without a line end: the same bytes for the same recipe and arm. `recipe_file`
/// and `arm_file` say where both came from. Rooms are in percent, all else in the files' units, each named by a `unit` beside it;
/// what has no finite figure is null.
pub fn check_json(judged: &Judged, recipe_file: &str, arm_file: &str) -> String {
    let segments = judged.plan.segments.iter().enumerate().map(|(index, segment)| segment_json(judged, index, segment)).collect();
    let reduced = reduced_speed(judged, &Watch::default()).expect("nobody stops this watch");
    let report = Report {
        format: FORMAT,
        version: env!("CARGO_PKG_VERSION"),
        recipe: judged.recipe.name.clone(),
        recipe_file: recipe_file.to_owned(),
        arm: judged.arm.name().to_owned(),
        arm_file: arm_file.to_owned(),
        verdict: judged.survey.verdict().word(),
        duration_s: figure(judged.plan.duration()),
        segments,
        cycle: cycle_json(judged),
        findings: judged.survey.findings.iter().map(|finding| FindingJson::of(judged, finding)).collect(),
        doubts: judged.survey.doubts.iter().map(|doubt| DoubtJson::of(judged, doubt)).collect(),
        reduced_speed: ReducedJson::of(judged, &reduced),
        proof: ProofJson::of(judged),
        not_checked: not_checked(judged),
    };
    serde_json::to_string(&report).expect("names are text, and figures are finite or null")
}

fn cycle_json(judged: &Judged) -> CycleJson {
    let cycle = &judged.survey.cycle;
    CycleJson {
        verdict: cycle.verdict().word(),
        closed: is_closed(&judged.recipe, &judged.plan),
        checks: Checks(cycle.checks().map(|result| (result.check, CheckJson::of_cycle(judged, result))).into()),
    }
}

fn segment_json(judged: &Judged, index: usize, segment: &Segment) -> SegmentJson {
    let survey = &judged.survey.segments[index];
    let waypoints = &judged.recipe.waypoints;
    let nearest = survey.nearest();
    SegmentJson {
        index: segment.number(),
        from: waypoints[segment.to - 1].name.clone(),
        to: waypoints[segment.to].name.clone(),
        fly_by: segment.blend,
        arrive: waypoints[segment.to].arrive.as_ref().map_or("joint", |arrive| arrive.word()),
        start_s: shown(Seconds::s(judged.plan.starts[index]).measure()),
        duration_s: figure(segment.duration()),
        dwell_s: figure(segment.dwell),
        verdict: survey.verdict.word(),
        room: nearest.and_then(|(_, peak)| percent(peak.room)),
        nearest: nearest.map(|(result, _)| result.check.key()),
        checks: Checks(survey.checks.iter().map(|result| (result.check, CheckJson::of(judged, segment, result))).collect()),
    }
}

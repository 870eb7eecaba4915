use serde::Serialize;

use crate::checks::{Spot, SpotPeak};
use crate::motion::Segment;
use crate::review::{FIRST_RUN_CAUTIONS, FirstRun, Judged, REDUCED_SPEED, Reduced, SegmentRun, first_run_text, reduced_speed_text};
use crate::units::{Share, Speed};

use super::judged_json::{At, figure, shown};
use super::stopping_json::{StoppingJson, stopping_json};

/// The name and version of the format that [`plan_json`] writes.
pub const PLAN_FORMAT: &str = "elbowroom-plan/1";

#[derive(Debug, Serialize)]
struct PlanJson {
    format: &'static str,
    version: &'static str,
    recipe: String,
    recipe_file: String,
    arm: String,
    arm_file: String,
    verdict: &'static str,
    /// Percent; null where no override was found clear.
    highest_override: Option<f64>,
    stages: Vec<StageJson>,
    segments: Vec<SegmentRunJson>,
    reduced_speed: ReducedJson,
    stopping: Vec<StoppingJson>,
    told: Vec<String>,
    cautions: [&'static str; FIRST_RUN_CAUTIONS.len()],
}

#[derive(Debug, Serialize)]
struct StageJson {
    #[serde(rename = "override")]
    run_at: Option<f64>,
    verdict: &'static str,
    segments: Vec<VerdictJson>,
}

#[derive(Debug, Serialize)]
struct VerdictJson {
    index: usize,
    verdict: &'static str,
}

#[derive(Debug, Serialize)]
struct SegmentRunJson {
    index: usize,
    highest_override: Option<f64>,
    not_clear_below: Vec<Option<f64>>,
    held_back_by: Option<&'static str>,
    joint: Option<String>,
    at_any_speed: bool,
    clear_below: bool,
}

/// The second judgement, in manual mode at reduced speed.
#[derive(Debug, Serialize)]
pub(super) struct ReducedJson {
    limit: Option<f64>,
    unit: &'static str,
    segments: Vec<ReducedSegmentJson>,
    told: Vec<String>,
}

#[derive(Debug, Serialize)]
struct ReducedSegmentJson {
    index: usize,
    #[serde(rename = "override")]
    run_at: Option<f64>,
    verdict: &'static str,
    not_clear: Vec<&'static str>,
    peaks: Vec<PeakJson>,
}

/// The peak of a point's speed at full override, found by looking.
#[derive(Debug, Serialize)]
struct PeakJson {
    point: &'static str,
    name: Option<String>,
    speed: Option<f64>,
    unit: &'static str,
    at: At,
}

/// A first-run plan as one JSON object on one line, without a line end: the same bytes for the same recipe and arm. Overrides are in
/// percent, all else in the files' units, each named by a `unit` beside it.
pub fn plan_json(judged: &Judged, plan: &FirstRun, reduced: &[Reduced], recipe_file: &str, arm_file: &str) -> String {
    let number = |segment: usize| judged.plan.segments[segment].number();
    let stages = plan.stages.iter().map(|stage| StageJson {
        run_at: percent(stage.run_at),
        verdict: stage.verdict().word(),
        segments: stage
            .segments
            .iter()
            .enumerate()
            .map(|(segment, verdict)| VerdictJson { index: number(segment), verdict: verdict.word() })
            .collect(),
    });
    let told = PlanJson {
        format: PLAN_FORMAT,
        version: env!("CARGO_PKG_VERSION"),
        recipe: judged.recipe.name.clone(),
        recipe_file: recipe_file.to_owned(),
        arm: judged.arm.name().to_owned(),
        arm_file: arm_file.to_owned(),
        verdict: judged.survey.verdict().word(),
        highest_override: plan.highest.and_then(percent),
        stages: stages.collect(),
        segments: plan.segments.iter().map(|run| segment_run(judged, run)).collect(),
        reduced_speed: ReducedJson::of(judged, reduced),
        stopping: stopping_json(judged),
        told: first_run_text(judged, plan),
        cautions: FIRST_RUN_CAUTIONS,
    };
    serde_json::to_string(&told).expect("names are text, and figures are finite or null")
}

fn percent(share: Share) -> Option<f64> {
    figure(share.as_percent())
}

fn segment_run(judged: &Judged, run: &SegmentRun) -> SegmentRunJson {
    SegmentRunJson {
        index: judged.plan.segments[run.segment].number(),
        highest_override: run.highest.and_then(percent),
        not_clear_below: run.gaps.iter().map(|share| percent(*share)).collect(),
        held_back_by: run.held_back.map(|(check, _)| check.key()),
        joint: run.held_back.and_then(|(_, joint)| joint).map(|j| judged.arm.joints()[j].name.clone()),
        at_any_speed: run.at_any_speed,
        clear_below: run.clear_below,
    }
}

impl ReducedJson {
    pub(super) fn of(judged: &Judged, reduced: &[Reduced]) -> Self {
        let limit = Speed::m_per_s(REDUCED_SPEED).measure();
        Self {
            limit: shown(limit),
            unit: limit.of.ascii(),
            segments: reduced.iter().map(|segment| reduced_segment(judged, segment)).collect(),
            told: reduced_speed_text(judged, reduced),
        }
    }
}

fn reduced_segment(judged: &Judged, reduced: &Reduced) -> ReducedSegmentJson {
    let segment = &judged.plan.segments[reduced.segment];
    let mut not_clear: Vec<&'static str> = reduced.survey.findings.iter().map(|finding| finding.check.key()).collect();
    not_clear.dedup();
    ReducedSegmentJson {
        index: segment.number(),
        run_at: percent(reduced.run_at),
        verdict: reduced.survey.verdict.word(),
        not_clear,
        peaks: reduced.peaks.iter().map(|peak| peak_json(segment, peak)).collect(),
    }
}

fn peak_json(segment: &Segment, peak: &SpotPeak) -> PeakJson {
    let (point, name) = match &peak.spot {
        Spot::Tcp => ("tcp", None),
        Spot::Flange => ("flange", None),
        Spot::WristCentre => ("wrist_centre", None),
        Spot::Elbow => ("elbow", None),
        Spot::Tool(name) => ("tool", Some(name.clone())),
    };
    let speed = Speed::m_per_s(peak.speed).measure();
    PeakJson { point, name, speed: shown(speed), unit: speed.of.ascii(), at: At::of(segment, peak.at) }
}

use crate::checks::{Spot, stopping};
use crate::review::{FirstRun, Reduced};
use crate::units::{Length, Seconds, Speed};

use super::{Judged, held_back_words, joint_stop_words, stage_words};

/// The stages of a first run below their headings: override, verdict, what is not clear there.
pub fn stage_rows(judged: &Judged, plan: &FirstRun) -> Vec<[String; 3]> {
    let mut rows = vec![["override", "verdict", "not clear"].map(str::to_owned)];
    rows.extend(
        plan.stages.iter().map(|stage| [stage.run_at.to_string(), stage.verdict().word().to_owned(), stage_words(judged, stage)]),
    );
    rows
}

/// The segments of a first run below their headings: how fast each is clear, the peaks of speed at full override, and the override
/// at reduced speed.
pub fn run_rows(judged: &Judged, plan: &FirstRun, reduced: &[Reduced]) -> Vec<[String; 7]> {
    let mut rows = vec![["#", "to", "clear to", "held back by", "TCP", "flange", "reduced at"].map(str::to_owned)];
    rows.extend(plan.segments.iter().zip(reduced).map(|(run, reduced)| {
        let segment = &judged.plan.segments[run.segment];
        let speed = |spot: Spot| Speed::m_per_s(reduced.peak(&spot)).measure().text_up(0);
        [
            segment.number().to_string(),
            judged.recipe.waypoints[segment.to].name.clone(),
            run.highest.map_or("never".to_owned(), |share| share.to_string()),
            held_back_words(judged, run.held_back),
            speed(Spot::Tcp),
            speed(Spot::Flange),
            reduced.run_at.to_string(),
        ]
    }));
    rows
}

/// What a stop asks for on every segment that has stopping data, below the headings: the TCP's way along its path, the joint that runs
/// on farthest, and the time until all rest.
pub fn stop_rows(judged: &Judged) -> Vec<[String; 6]> {
    let mut rows = vec![["#", "to", "TCP runs on", "at", "farthest joint", "rests after"].map(str::to_owned)];
    for segment in &judged.plan.segments {
        let Some(stop) = stopping(&judged.arm, segment) else { continue };
        rows.push([
            segment.number().to_string(),
            judged.recipe.waypoints[segment.to].name.clone(),
            Length::m(stop.tcp).measure().text_up(0),
            Seconds::s(stop.tcp_at.time).to_string(),
            joint_stop_words(judged, &stop),
            Seconds::s(stop.time).measure().text_up(2),
        ]);
    }
    rows
}

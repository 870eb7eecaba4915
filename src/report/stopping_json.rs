use serde::Serialize;

use crate::checks::{JointStop, stopping};
use crate::motion::Segment;
use crate::review::Judged;
use crate::units::Length;

use super::judged_json::{At, figure, shown};

/// What a stop asks for at the worst instants of one segment.
#[derive(Debug, Serialize)]
pub(super) struct StoppingJson {
    index: usize,
    tcp: Option<f64>,
    unit: &'static str,
    tcp_at: At,
    time_s: Option<f64>,
    time_at: At,
    joints: Vec<JointStopJson>,
}

#[derive(Debug, Serialize)]
struct JointStopJson {
    joint: String,
    runs_on: Option<f64>,
    unit: &'static str,
    time_s: Option<f64>,
    at: At,
}

/// Every segment whose moving joints all have stopping data.
pub(super) fn stopping_json(judged: &Judged) -> Vec<StoppingJson> {
    judged.plan.segments.iter().filter_map(|segment| segment_json(judged, segment)).collect()
}

fn segment_json(judged: &Judged, segment: &Segment) -> Option<StoppingJson> {
    let stop = stopping(&judged.arm, segment)?;
    let way = Length::m(stop.tcp).measure();
    Some(StoppingJson {
        index: segment.number(),
        tcp: shown(way),
        unit: way.of.ascii(),
        tcp_at: At::of(segment, stop.tcp_at),
        time_s: figure(stop.time),
        time_at: At::of(segment, stop.time_at),
        joints: stop.joints.iter().map(|joint| joint_json(judged, segment, joint)).collect(),
    })
}

fn joint_json(judged: &Judged, segment: &Segment, stop: &JointStop) -> JointStopJson {
    let joint = &judged.arm.joints()[stop.joint];
    let runs_on = joint.value(stop.run_on);
    JointStopJson {
        joint: joint.name.clone(),
        runs_on: shown(runs_on),
        unit: runs_on.of.ascii(),
        time_s: figure(stop.time),
        at: At::of(segment, stop.at),
    }
}

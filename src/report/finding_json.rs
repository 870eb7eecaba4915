use serde::Serialize;

use crate::checks::{Doubt, Finding, Kind};
use crate::review::{Judged, Label, doubt_text, explain};

use super::judged_json::{At, percent, shown};

/// A paragraph of an explanation.
#[derive(Debug, Serialize)]
struct Paragraph {
    label: &'static str,
    text: String,
    bars: Vec<Bar>,
}

/// A share of a sum.
#[derive(Debug, Serialize)]
struct Bar {
    name: String,
    figure: String,
    share: Option<f64>,
}

/// A finding with its figures and its words.
#[derive(Debug, Serialize)]
pub(super) struct FindingJson {
    segment: usize,
    fly_by: bool,
    stop_version: bool,
    check: &'static str,
    joint: Option<String>,
    verdict: &'static str,
    from: At,
    to: At,
    over: Option<[At; 2]>,
    worst: At,
    after_stop: bool,
    demand: Option<f64>,
    limit: Option<f64>,
    unit: Option<&'static str>,
    room: Option<f64>,
    reserve: Option<f64>,
    title: String,
    paragraphs: Vec<Paragraph>,
}

impl FindingJson {
    pub(super) fn of(judged: &Judged, finding: &Finding) -> Self {
        let segment = judged.plan.version(finding.segment, finding.stop);
        let at = |place| At::of(segment, place);
        let excess = match &finding.kind {
            Kind::Excess(excess) => Some(excess),
            Kind::NoPath(_) | Kind::Unproved(_) => None,
        };
        let told = explain(judged, finding);
        let paragraphs = told.paragraphs.into_iter().map(|paragraph| Paragraph {
            label: key(paragraph.label),
            text: paragraph.text,
            bars: paragraph
                .bars
                .into_iter()
                .map(|bar| Bar { name: bar.name, figure: bar.figure, share: super::judged_json::figure(bar.share) })
                .collect(),
        });
        Self {
            segment: segment.number(),
            fly_by: segment.blend,
            stop_version: finding.stop,
            check: finding.check.key(),
            joint: finding.joint.map(|j| judged.arm.joints()[j].name.clone()),
            verdict: finding.verdict.word(),
            from: at(finding.from),
            to: at(finding.to),
            over: excess.and_then(|excess| excess.over).map(|places| places.map(at)),
            worst: at(finding.worst()),
            after_stop: excess.is_some_and(|excess| excess.after_stop),
            demand: excess.and_then(|excess| shown(excess.demand)),
            limit: excess.and_then(|excess| shown(excess.limit)),
            unit: excess.map(|excess| excess.demand.of.ascii()),
            room: excess.and_then(|excess| percent(excess.room)),
            reserve: excess.and_then(|excess| percent(excess.reserve)),
            title: told.title,
            paragraphs: paragraphs.collect(),
        }
    }
}

fn key(label: Label) -> &'static str {
    match label {
        Label::What => "what",
        Label::Where => "where",
        Label::Why => "why",
        Label::LeftAlone => "left_alone",
        Label::RestsOn => "rests_on",
        Label::Remedies => "remedies",
    }
}

/// A doubt: the waypoint it is about (as people count), if it is about one, and its words.
#[derive(Debug, Serialize)]
pub(super) struct DoubtJson {
    waypoint: Option<usize>,
    text: String,
}

impl DoubtJson {
    pub(super) fn of(judged: &Judged, doubt: &Doubt) -> Self {
        Self { waypoint: doubt.waypoint().map(|index| index + 1), text: doubt_text(judged, doubt) }
    }
}

use serde::Serialize;

use crate::checks::{Check, Finding};
use crate::program::{Edit, Part, Recipe, data_of};
use crate::review::{Change, Judged, Remedy, RemedyKind, Short, Tried, doubt_text, remedy_text, remedy_title};
use crate::units::{Angle, Length, Measure, Share};

use super::judged_json::{figure, percent, shown};

/// A remedy with its figures and its words.
#[derive(Debug, Serialize)]
pub(super) struct RemedyJson {
    kind: &'static str,
    information: bool,
    title: String,
    text: String,
    size: SizeJson,
    weight: Option<f64>,
    costs_s: Option<f64>,
    room_before: Option<f64>,
    room_after: Option<f64>,
    settles: Vec<About>,
    remains: Vec<About>,
    worsens: Vec<About>,
    doubts: Vec<String>,
    edits: Vec<EditJson>,
}

/// How much is changed: what a figure is and would be, or by how much something is moved or turned.
#[derive(Debug, Default, Serialize)]
struct SizeJson {
    before: Option<f64>,
    after: Option<f64>,
    by: Option<f64>,
    unit: &'static str,
}

/// What a finding is about. `segment` is its number as people read it, `null` for what is judged over the cycle.
#[derive(Debug, Serialize)]
struct About {
    segment: Option<usize>,
    check: &'static str,
    joint: Option<String>,
    verdict: &'static str,
}

/// A waypoint that is changed or inserted, counted from 1 in the changed recipe, and what about it.
#[derive(Debug, Serialize)]
struct EditJson {
    waypoint: usize,
    name: String,
    inserted: bool,
    data: Vec<DatumJson>,
}

/// A datum as a recipe says it before and after, in its unit; `null` where it says nothing.
#[derive(Debug, Serialize)]
struct DatumJson {
    datum: String,
    unit: &'static str,
    before: Option<String>,
    after: Option<String>,
}

impl RemedyJson {
    pub(super) fn of(judged: &Judged, finding: &Finding, remedy: &Remedy) -> Self {
        let about = |findings: &[Finding], of: &Judged| findings.iter().map(|finding| About::of(of, finding)).collect();
        Self {
            kind: kind_key(remedy.kind()),
            information: remedy.edit.is_none(),
            title: remedy_title(judged, remedy),
            text: remedy_text(judged, finding, remedy),
            size: size(&remedy.change),
            weight: figure(remedy.size),
            costs_s: shown(remedy.costs.measure()),
            room_before: remedy.room[0].and_then(percent),
            room_after: remedy.room[1].and_then(percent),
            settles: about(&remedy.effect.settles, judged),
            remains: about(&remedy.effect.remains, &remedy.after),
            worsens: about(&remedy.effect.worsens, &remedy.after),
            doubts: remedy.effect.doubts.iter().map(|doubt| doubt_text(&remedy.after, doubt)).collect(),
            edits: remedy.edit.iter().flat_map(|edit| edits(judged, edit)).collect(),
        }
    }
}

impl About {
    fn of(judged: &Judged, finding: &Finding) -> Self {
        Self {
            segment: (!finding.check.is_of_cycle()).then(|| judged.plan.segments[finding.segment].number()),
            check: finding.check.key(),
            joint: joint_name(judged, finding.joint),
            verdict: finding.verdict.word(),
        }
    }
}

fn joint_name(judged: &Judged, joint: Option<usize>) -> Option<String> {
    joint.map(|j| judged.arm.joints()[j].name.clone())
}

/// A kind of remedy that was tried without success: how near it came, or what stands in its way.
#[derive(Debug, Serialize)]
pub(super) struct TriedJson {
    kind: &'static str,
    /// `nearest`, `spoils` or `fixed`.
    because: &'static str,
    room: Option<f64>,
    segment: Option<usize>,
    check: Option<&'static str>,
    joint: Option<String>,
}

impl TriedJson {
    pub(super) fn of(judged: &Judged, tried: &Tried) -> Self {
        let plain = |because| Self { kind: kind_key(tried.kind), because, room: None, segment: None, check: None, joint: None };
        match tried.short {
            Short::Nearest(room) => Self { room: room.and_then(percent), ..plain("nearest") },
            Short::Spoils { segment, check, joint } => Self {
                segment: spoilt_segment(judged, segment, check),
                check: Some(check.key()),
                joint: joint_name(judged, joint),
                ..plain("spoils")
            },
            Short::Fixed => plain("fixed"),
        }
    }
}

fn spoilt_segment(judged: &Judged, segment: usize, check: Check) -> Option<usize> {
    (!check.is_of_cycle()).then(|| judged.plan.segments[segment].number())
}

/// A kind of remedy as a word in data.
fn kind_key(kind: RemedyKind) -> &'static str {
    match kind {
        RemedyKind::Slower => "slower",
        RemedyKind::Acceleration => "acceleration",
        RemedyKind::FlyBy => "fly_by",
        RemedyKind::Dwell => "dwell",
        RemedyKind::Turn => "turn",
        RemedyKind::Tilt => "tilt",
        RemedyKind::Shift => "shift",
        RemedyKind::Via => "via",
        RemedyKind::JointMove => "joint_move",
        RemedyKind::Posture => "posture",
        RemedyKind::Override => "override",
        RemedyKind::Load => "load",
        RemedyKind::Centre => "centre",
        RemedyKind::Grip => "grip",
        RemedyKind::MountHeight => "mount_height",
        RemedyKind::MountTilt => "mount_tilt",
    }
}

fn size(change: &Change) -> SizeJson {
    match change {
        Change::Speed { from, to } => from_to(from.measure(), to.measure()),
        Change::TurnSpeed { from, to } => from_to(from.measure(), to.measure()),
        Change::Share { from, to } | Change::AccelShare { from, to } => shares(*from, *to),
        Change::Pace { to } | Change::Override { share: to } => shares(Share::WHOLE, *to),
        Change::Accel { from, to } => from_to(from.measure(), to.measure()),
        Change::TurnAccel { from, to } => from_to(from.measure(), to.measure()),
        Change::FlyBy { from, to, .. } => from_to(from.measure(), to.unwrap_or(Length::m(0.0)).measure()),
        Change::Dwell { from, to, .. } => from_to(from.measure(), to.measure()),
        Change::Load { from, to } => from_to(from.measure(), to.measure()),
        Change::Turn { angle, .. } | Change::Tilt { angle, .. } | Change::Grip { angle, .. } | Change::MountTilt { angle, .. } => {
            by(angle.measure())
        }
        Change::Shift { by: way, .. } | Change::Via { by: way, .. } | Change::Centre { by: way } => {
            by(Length::m(way.norm()).measure())
        }
        Change::JointMove { leaves, .. } => by(leaves.measure()),
        Change::MountHeight { by: way } => by(way.measure()),
        // The largest turn of a joint; a sliding joint's way is among the edits.
        Change::Posture { from, to, .. } => by(Angle::rad(from.zip(to, |a, b| b - a).largest()).measure()),
    }
}

fn from_to(before: Measure, after: Measure) -> SizeJson {
    SizeJson { before: shown(before), after: shown(after), by: None, unit: before.of.ascii() }
}

fn by(size: Measure) -> SizeJson {
    SizeJson { by: shown(size), unit: size.of.ascii(), ..SizeJson::default() }
}

fn shares(before: Share, after: Share) -> SizeJson {
    SizeJson { before: figure(before.as_percent()), after: figure(after.as_percent()), by: None, unit: "percent" }
}

/// What an edit changes, waypoint by waypoint; remedies change nothing else.
fn edits(judged: &Judged, edit: &Edit) -> Vec<EditJson> {
    let mut changed = (*judged.recipe).clone();
    if edit.apply(&mut changed).is_err() {
        return Vec::new();
    }
    single(edit)
        .into_iter()
        .filter_map(|edit| match edit {
            Edit::Change { index, .. } => Some((*index, false)),
            Edit::Insert { index, .. } => Some((*index, true)),
            _ => None,
        })
        .map(|(index, inserted)| EditJson {
            waypoint: index + 1,
            name: changed.waypoints[index].name.clone(),
            inserted,
            data: data(judged, &changed, index, inserted),
        })
        .collect()
}

fn single(edit: &Edit) -> Vec<&Edit> {
    match edit {
        Edit::Together(edits) => edits.iter().flat_map(single).collect(),
        one => vec![one],
    }
}

/// The data of a waypoint and of how it is arrived at that differ.
fn data(judged: &Judged, changed: &Recipe, index: usize, inserted: bool) -> Vec<DatumJson> {
    let mut told = Vec::new();
    for part in [Part::Waypoint(index), Part::Segment(index)] {
        let old = if inserted { Vec::new() } else { data_of(&judged.recipe, &judged.arm, part) };
        let new = data_of(changed, &judged.arm, part);
        let text = |data: &[crate::program::Datum], name: &str| {
            data.iter().find(|datum| datum.name == name).map(|datum| datum.text.clone()).filter(|text| !text.is_empty())
        };
        let gone = old.iter().filter(|datum| new.iter().all(|other| other.name != datum.name));
        for datum in new.iter().chain(gone) {
            let (before, after) = (text(&old, &datum.name), text(&new, &datum.name));
            if before != after {
                told.push(DatumJson { datum: datum.name.clone(), unit: datum.unit, before, after });
            }
        }
    }
    told
}

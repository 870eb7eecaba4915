use crate::checks::{Doubt, Finding, Kind, Verdict};
use crate::units::Room;

use super::Judged;

/// What a paragraph of an explanation answers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Label {
    /// What is asked of which joint, against which limit.
    What,
    /// Where on the segment and on the cycle.
    Where,
    /// The mechanics behind it.
    Why,
    /// What happens if nothing is changed.
    LeftAlone,
    /// What the verdict rests on.
    RestsOn,
}

impl Label {
    /// Its words.
    pub fn words(self) -> &'static str {
        match self {
            Self::What => "What",
            Self::Where => "Where",
            Self::Why => "Why",
            Self::LeftAlone => "Left alone",
            Self::RestsOn => "Rests on",
        }
    }
}

/// A bar is one share of a sum, to be drawn beside its figure.
#[derive(Debug, Clone, PartialEq)]
pub struct Bar {
    /// Whose share.
    pub name: String,
    /// The share with its unit, such as `212 N·m`.
    pub figure: String,
    /// The share over the limit, signed; a full bar is 1.
    pub share: f64,
}

/// A paragraph of an explanation: what it answers, a few sentences, and bars below them if there are any.
#[derive(Debug, Clone, PartialEq)]
pub struct Paragraph {
    /// What it answers.
    pub label: Label,
    /// Its sentences, not wrapped.
    pub text: String,
    /// Shares of a sum.
    pub bars: Vec<Bar>,
}

/// An explanation tells a finding in words.
#[derive(Debug, Clone, PartialEq)]
pub struct Explanation {
    /// One line: verdict, joint, check, figure.
    pub title: String,
    /// What, where, why, left alone, rests on; those that apply, in this order.
    pub paragraphs: Vec<Paragraph>,
}

/// One sentence on the whole recipe: "Housing transfer: NOT READY: 1 over, 1 tight, 11 clear".
pub fn headline(judged: &Judged) -> String {
    let survey = &judged.survey;
    let ready = if survey.verdict() == Verdict::Clear { "READY TO SIGN" } else { "NOT READY" };
    let counts: Vec<String> = Verdict::ALL
        .into_iter()
        .map(|verdict| (survey.count(verdict), verdict))
        .filter(|(count, _)| *count > 0)
        .map(|(count, verdict)| format!("{count} {}", verdict.word()))
        .collect();
    format!("{}: {ready}: {}", judged.recipe.name, counts.join(", "))
}

/// Tells a finding of a judged recipe.
pub fn explain(judged: &Judged, finding: &Finding) -> Explanation {
    let joint = finding.joint.map_or(String::new(), |j| format!("{} ", judged.arm.joints()[j].name));
    let text = match &finding.kind {
        Kind::Excess(excess) => format!("{} of {}, asks {:.0} %", excess.demand, excess.limit, excess.room.asked_percent()),
        Kind::NoPath(_) => "no motion exists".to_owned(),
        Kind::Unproved(_) => "not known".to_owned(),
    };
    Explanation {
        title: format!("{}: {joint}{}", finding.verdict.word(), finding.check.key()),
        paragraphs: vec![Paragraph { label: Label::What, text, bars: Vec::new() }],
    }
}

/// Tells of a segment (counted from 0) that has no finding: what is nearest to its reserve, and where.
pub fn no_finding(judged: &Judged, segment: usize) -> Explanation {
    let nearest = judged.survey.segments[segment].nearest();
    let room = nearest.map_or(Room::IDLE, |(_, peak)| peak.room);
    Explanation {
        title: format!("segment {} is clear", judged.plan.segments[segment].number()),
        paragraphs: vec![Paragraph { label: Label::What, text: format!("least room {room}"), bars: Vec::new() }],
    }
}

/// Tells a doubt in one or two sentences.
pub fn doubt_text(judged: &Judged, doubt: &Doubt) -> String {
    let _ = judged;
    format!("{doubt:?}")
}

//! The words in which findings, doubts and whole recipes are told. Screen, command line and reports share them.

mod accel;
mod bounds;
mod brake;
mod direction;
mod doubt;
mod edit;
mod explanation;
mod fight;
mod first_run;
mod flange;
mod headline;
mod holding;
mod in_vain;
mod listing;
mod moving;
mod no_finding;
mod place;
mod plan_rows;
mod point_speed;
mod proof;
mod range;
mod rate;
mod reach;
mod reduced_speed;
mod remedy;
mod rms;
mod scene;
mod segment_row;
mod singular;
mod stopping;
mod tcp_speed;
mod unproved;
mod wind_up;
mod wrap;

pub use bounds::{bounds_text, proof_summary};
pub use direction::line as line_words;
pub use doubt::doubt_text;
pub use edit::{difference_words, edit_words};
pub use explanation::{Bar, Explanation, Label, Paragraph};
pub use first_run::{CAUTION, FIRST_RUN_CAUTIONS, first_run_text, held_back_words, stage_words};
pub use headline::{check_brief, check_words, headline};
pub use no_finding::no_finding;
pub use plan_rows::{run_rows, stage_rows, stop_rows};
pub use proof::proof_text;
pub use reduced_speed::{fastest_text, reduced_speed_text};
pub use remedy::{kind_words, remedies_text, remedy_text, remedy_title, stopped_text};
pub use segment_row::{SEGMENT_HEADS, segment_row};
pub use stopping::{joint_stop_words, stopping_text};
pub use wrap::{glued, wrap};

use crate::checks::{Check, Excess, Finding, Kind};

use super::Judged;
pub(super) use listing::all_of;
use reduced_speed::spot_words;
use scene::Scene;

/// Tells a finding of a judged recipe.
pub fn explain(judged: &Judged, finding: &Finding) -> Explanation {
    let paragraphs = match &finding.kind {
        Kind::Excess(excess) => excess_paragraphs(judged, finding, excess),
        Kind::NoPath(trouble) => reach::paragraphs(judged, finding, trouble),
        Kind::Unproved(why) => unproved::paragraphs(judged, finding, *why),
    };
    Explanation { title: title(judged, finding), paragraphs }
}

/// Verdict, joint, check and figure of a finding in one line: `over: J4 rate, asks 154 %`.
fn title(judged: &Judged, finding: &Finding) -> String {
    let joint = finding.joint.map_or(String::new(), |j| format!("{} ", judged.arm.joints()[j].name));
    let figure = match &finding.kind {
        Kind::Excess(excess) => match finding.check {
            Check::Range => format!(", {}", range::to_end_text(&judged.arm.joints()[finding.joint.unwrap_or(0)], excess)),
            Check::Singular => format!(", smallest singular value {}", excess.demand),
            Check::SpeedLeft => format!(", {}", excess.demand.text_down(0)),
            _ => format!(", asks {}", excess.room.asks()),
        },
        Kind::NoPath(trouble) => format!(", {}", reach::in_brief(trouble)),
        Kind::Unproved(why) => format!(", {}", unproved::in_brief(*why)),
    };
    format!("{}: {joint}{}{figure}", finding.verdict.word(), check_words(finding.check))
}

fn excess_paragraphs(judged: &Judged, finding: &Finding, excess: &Excess) -> Vec<Paragraph> {
    match finding.check {
        Check::Rms => return rms::paragraphs(judged, finding, excess),
        Check::WindUp => return wind_up::paragraphs(judged, finding, excess),
        _ => {}
    }
    let Some(scene) = Scene::of(judged, finding, excess) else {
        return vec![place::paragraph(judged, finding)];
    };
    let [what, why, alone, rests] = match (finding.check, finding.joint) {
        (Check::Range, Some(joint)) => range::paragraphs(&scene, joint, excess),
        (Check::Rate, Some(joint)) => rate::paragraphs(&scene, joint, excess),
        (Check::Accel, Some(joint)) => accel::paragraphs(&scene, joint, excess),
        (Check::Holding, Some(joint)) => holding::paragraphs(&scene, joint, excess),
        (Check::Moving, Some(joint)) => moving::paragraphs(&scene, joint, excess),
        (Check::Brake, Some(joint)) => brake::paragraphs(&scene, joint, excess),
        (Check::Flange, joint) => flange::paragraphs(&scene, joint, excess),
        (Check::TcpSpeed, _) => tcp_speed::paragraphs(&scene, excess),
        (Check::PointSpeed, _) => point_speed::paragraphs(&scene, excess),
        _ => singular::paragraphs(&scene, finding.check, excess),
    };
    vec![what, place::paragraph(judged, finding), why, alone, rests]
}

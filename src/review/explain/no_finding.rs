use crate::checks::{Check, CheckResult, Peak, SegmentSurvey};
use crate::units::Measure;

use super::{Explanation, Judged, Label, Paragraph, check_words, place, proof_text};

/// Tells of a segment (counted from 0) that has no finding: what is nearest to its reserve, and where.
pub fn no_finding(judged: &Judged, segment: usize) -> Explanation {
    let planned = &judged.plan.segments[segment];
    let survey = &judged.survey.segments[segment];
    let title = format!("{}: segment {}", survey.verdict.word(), planned.label());
    let Some((result, peak)) = survey.nearest() else {
        let text = format!("{}. There is no motion, so nothing is asked.", place::name(judged, segment));
        return Explanation { title, paragraphs: vec![Paragraph::says(Label::What, text)] };
    };
    let what = format!("Every check leaves its reserve. Nearest to it is {}.", figure(judged, result, peak));
    let at = format!(
        "{}. Nearest at {} of {}, {}.",
        place::name(judged, segment),
        place::along(planned, peak.at.u),
        place::whole(planned),
        place::on_cycle(judged, segment, peak.at)
    );
    let rests = proof_text(survey, result);
    let what = others(judged, survey, result.check).map_or(what.clone(), |others| format!("{what} {others}"));
    let paragraphs =
        vec![Paragraph::says(Label::What, what), Paragraph::says(Label::Where, at), Paragraph::says(Label::RestsOn, rests)];
    Explanation { title, paragraphs }
}

/// The other checks in brief, the nearest joint of each.
fn others(judged: &Judged, survey: &SegmentSurvey, but: Check) -> Option<String> {
    let told: Vec<String> = survey
        .checks
        .iter()
        .filter(|result| result.judged && result.check != but)
        .filter_map(|result| Some(figure(judged, result, result.worst()?)))
        .collect();
    (!told.is_empty()).then(|| format!("The others: {}.", told.join("; ")))
}

/// `holding of J3: 213 N·m of 300 N·m, asks 71 %, reserve 20 %`.
fn figure(judged: &Judged, result: &CheckResult, peak: &Peak) -> String {
    let joint = peak.joint.map(|j| &judged.arm.joints()[j]);
    let of = joint.map_or(String::new(), |joint| format!(" of {}", joint.name));
    let name = check_words(result.check);
    match (result.check, joint) {
        (Check::Range, Some(joint)) => {
            let left = Measure::si(joint.range.to_end(peak.demand.si), peak.demand.of);
            format!("{name}{of}, {} from its end", left.text_down(1))
        }
        (Check::Singular, _) => format!("{name}, smallest singular value {} where {} is allowed", peak.demand, peak.limit),
        (Check::SpeedLeft, _) => format!("{name}, {} where {} are asked for", peak.demand.text_down(0), peak.limit),
        _ => {
            let demand = if joint.is_some() { peak.demand.signed() } else { peak.demand.to_string() };
            let reserve = if peak.reserve.as_fraction() > 0.0 { format!(", reserve {}", peak.reserve) } else { String::new() };
            format!("{name}{of}, {} of {}: asks {}{reserve}", demand, peak.limit, peak.room.asks())
        }
    }
}

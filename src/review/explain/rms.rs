use crate::checks::{Excess, Finding};
use crate::units::{Dimension, Measure, Seconds};

use super::holding::grounds;
use super::listing::adding_up;
use super::rate::{allowed, at_most};
use super::{Bar, Judged, Label, Paragraph, place, proof_text};

/// So many segments are told by name.
const TOLD: usize = 4;

/// All paragraphs of the torque over the cycle.
pub(super) fn paragraphs(judged: &Judged, finding: &Finding, excess: &Excess) -> Vec<Paragraph> {
    let cycle = &judged.survey.cycle;
    let joint = finding.joint.unwrap_or(0);
    let data = &judged.arm.joints()[joint];
    let share = &cycle.shares[joint];
    let lasts = Seconds::s(cycle.duration);
    let what = format!(
        "Over the whole cycle the torque of {} has a root mean square of {} of {}, its continuous rating: {}. {}",
        data.name,
        excess.demand,
        excess.limit,
        excess.room.asks(),
        at_most(excess)
    );
    let most = place::name(judged, finding.segment);
    let place = format!("The cycle of {lasts} as a whole, dwells included. {most}, adds most.");
    let pause = share.whole / allowed(excess).si.powi(2) - cycle.duration;
    let why = format!(
        "A motor warms with the square of its torque, and what its rating allows is an average over the cycle. Dwells make up {} of \
         it. A pause of {} in every cycle, where {} holds next to nothing, would be enough; going slower helps only as far as \
         speeding up and slowing down make the torque.",
        percent(share.dwells / share.whole),
        Seconds::s(pause.max(0.0)).measure().text_up(1),
        data.name
    );
    let alone = if excess.room.as_fraction() < 0.0 {
        format!(
            "One cycle runs well. After some minutes of production the motor of {} overheats and its protection stops the arm.",
            data.name
        )
    } else {
        format!("{} keeps cool as long as the data hold and the hall is no warmer than its sheet supposes.", data.name)
    };
    let rating = data.torque.map_or(String::new(), |torque| format!(" ({})", grounds(torque.grounds)));
    let rests = format!(
        "The continuous rating of {}{rating}, taken to hold at every rate; all that its torque in motion rests on; and that the arm \
         holds with its motors, not its brakes, wherever it stands, and starts again at once. {}",
        data.name,
        proof_text(&judged.survey.segments[finding.segment], &cycle.rms)
    );
    vec![
        Paragraph::says(Label::What, what.trim_end().to_owned()),
        Paragraph::says(Label::Where, place),
        Paragraph { label: Label::Why, text: why, bars: bars(judged, joint, excess) },
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

fn percent(share: f64) -> String {
    crate::units::Share::fraction(share).to_string()
}

/// What the segments add to the squared torque, the largest by name; a full bar is all that the rating allows over the cycle.
fn bars(judged: &Judged, joint: usize, excess: &Excess) -> Vec<Bar> {
    let survey = &judged.survey;
    let whole = survey.cycle.shares[joint].whole;
    let mut rows: Vec<(String, f64)> = survey
        .segments
        .iter()
        .zip(&judged.plan.segments)
        .map(|(survey, segment)| {
            (format!("segment {}", segment.number()), (survey.torque.moves[joint] + survey.torque.stands[joint]) / whole)
        })
        .collect();
    rows.sort_by(|a, b| b.1.total_cmp(&a.1));
    rows.truncate(TOLD);
    let rest = 1.0 - rows.iter().map(|(_, share)| share).sum::<f64>();
    if rest > 1e-9 {
        rows.push(("all others".to_owned(), rest));
    }
    let figures = adding_up(&rows.iter().map(|(_, share)| Measure::si(100.0 * share, Dimension::Ratio)).collect::<Vec<_>>(), 0);
    rows.push(("together".to_owned(), 1.0));
    let of_limit = (1.0 - excess.room.as_fraction()).powi(2);
    rows.into_iter()
        .zip(figures.into_iter().chain([100.0]))
        .map(|((name, share), figure)| Bar { name, figure: format!("{figure:.0} %"), share: share * of_limit })
        .collect()
}

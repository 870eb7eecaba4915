use crate::checks::{Excess, Finding, wound_between};
use crate::units::{Angle, Seconds};

use super::{Judged, Label, Paragraph, proof_text};

/// All paragraphs of how far a joint of the wrist winds cables over the cycle.
pub(super) fn paragraphs(judged: &Judged, finding: &Finding, excess: &Excess) -> Vec<Paragraph> {
    let joint = finding.joint.unwrap_or(0);
    let name = &judged.arm.joints()[joint].name;
    let spans = judged.survey.segments.iter().filter_map(|survey| survey.spans.get(joint));
    let (low, high) =
        spans.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), span| (low.min(span.low.0), high.max(span.high.0)));
    let what = format!(
        "{name} turns through {} over the cycle; the recipe allows {} for the sake of what runs along the wrist. That is {} of it.",
        excess.demand.text_up(0),
        excess.limit,
        excess.room.asks()
    );
    let place = match wound_between(&judged.plan, &judged.survey.segments, joint) {
        Some([from, to]) if from != to => format!(
            "The cycle of {} as a whole: the two ends are on the segments that arrive at {} and at {}.",
            Seconds::s(judged.plan.duration()),
            waypoint(judged, from),
            waypoint(judged, to)
        ),
        Some([at, _]) => format!("Both ends are on the segment that arrives at {}.", waypoint(judged, at)),
        None => "The cycle as a whole.".to_owned(),
    };
    let turn = |rad: f64| Angle::rad(rad).measure().signed();
    let why = format!(
        "It goes from {} to {}. Cables and hoses along the wrist are turned from one end to the other in every cycle, whichever way \
         the program goes in between. A posture with the tool turned the other way about, or a taught value a whole turn off, is \
         often what makes it so.",
        turn(low),
        turn(high)
    );
    let alone = "Nothing stops the arm. The dress pack pulls, rubs and tires, and gives way after weeks: a leak or a lost signal in \
                 the middle of a cycle.";
    let rests = format!(
        "The limit in the recipe, which is the cables' own, and the joint values of all segments, both versions of fly-by points \
         included. {}",
        proof_text(&judged.survey.segments[finding.segment], &judged.survey.cycle.wind_up)
    );
    vec![
        Paragraph::says(Label::What, what),
        Paragraph::says(Label::Where, place),
        Paragraph::says(Label::Why, why),
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(Label::RestsOn, rests),
    ]
}

fn waypoint(judged: &Judged, index: usize) -> String {
    format!("waypoint {} \"{}\"", index + 1, judged.recipe.waypoints[index].name)
}

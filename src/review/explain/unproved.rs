use crate::arm::{Grounds, Joint};
use crate::checks::{Check, Finding, Unproved};

use super::listing::all_of;
use super::{Judged, Label, Paragraph, check_words, place};

/// The reason in a few words, for a title.
pub(super) fn in_brief(why: Unproved) -> &'static str {
    match why {
        Unproved::SamplesOnly => "not proved between the instants looked at",
        Unproved::BudgetSpent => "the proof's budget ended",
        Unproved::TooNarrow => "the proof did not close",
        Unproved::NotOneBranch => "one posture not shown",
        Unproved::NotFollowed => "not followed to its end",
        Unproved::NoRating => "no rating to hold it against",
        Unproved::NoMasses => "no link masses",
        Unproved::Guess => "rests on a guess",
    }
}

/// What, where, why, left alone and rests on where nothing bad was seen but it is not known.
pub(super) fn paragraphs(judged: &Judged, finding: &Finding, why: Unproved) -> Vec<Paragraph> {
    let survey = &judged.survey.segments[finding.segment];
    let result = judged.survey.cycle.check(finding.check).unwrap_or_else(|| survey.check(finding.check));
    let what = match result.worst() {
        Some(peak) => format!(
            "For {} nothing bad was seen: the most that is asked is {}. But it is not known to hold everywhere.",
            check_words(finding.check),
            peak.room.asks()
        ),
        None if finding.check == Check::Reach => {
            "The path was followed to its end without a break. But that the arm keeps to one posture all along it is not known."
                .to_owned()
        }
        None => format!("For {} nothing can be said.", check_words(finding.check)),
    };
    let (reason, alone) = match why {
        Unproved::NoRating => (
            format!(
                "The arm file gives no holding torque for {}, so what they must hold has no limit to stand against.",
                missing(judged, |joint| joint.torque.is_none())
            ),
            "Whether the motors can hold arm, tool and load stays open. The first trial would tell, at the cost of a fault or a \
             sinking arm.",
        ),
        Unproved::NoMasses => (
            format!(
                "The arm file gives no mass for the link of {}, so the weight that the motors carry is only partly known.",
                missing(judged, |joint| joint.link.is_none())
            ),
            "Whether the motors can hold the arm stays open; what stands here leaves out the weights that are missing.",
        ),
        Unproved::Guess => (
            format!(
                "For {} a rating or a link mass is marked as a guess, and a guess is never enough for clear.",
                missing(judged, guessed)
            ),
            "The verdict moves with the guess, and how far off that may be nobody has said.",
        ),
        Unproved::BudgetSpent => (
            format!(
                "{} instants were looked at and all were good, but the proof for those between had used up its budget of postures when \
                 it came to the stretch named here. Something changes very quickly on this segment.",
                survey.looked_at
            ),
            "Where it was looked at nothing bad was seen; a narrow peak in between is possible all the same.",
        ),
        Unproved::TooNarrow => (
            format!(
                "{} instants were looked at and all were good, but in the middle of the stretch named here not even the narrowest \
                 surroundings could be proved: it comes too near to a limit there, or to a singular posture.",
                survey.looked_at
            ),
            "Where it was looked at nothing bad was seen; a narrow peak in between is possible all the same.",
        ),
        Unproved::NotOneBranch => (
            "Every stretch of the path was proved by itself, but not that the arm goes from one into the next in one posture."
                .to_owned(),
            "The arm may change its posture on the way, as it does when it passes through a singular one.",
        ),
        Unproved::SamplesOnly => (
            format!("{} instants were looked at and all were good; those between were not proved.", survey.looked_at),
            "Where it was looked at nothing bad was seen; a narrow peak in between is possible all the same.",
        ),
        Unproved::NotFollowed => (
            "The path could not be followed to its end, and what comes after the loss was not seen.".to_owned(),
            "What stands under reach tells what happens.",
        ),
    };
    vec![
        Paragraph::says(Label::What, what),
        place::paragraph(judged, finding),
        Paragraph::says(Label::Why, reason),
        Paragraph::says(Label::LeftAlone, alone),
    ]
}

fn missing(judged: &Judged, is_missing: impl Fn(&Joint) -> bool) -> String {
    let names: Vec<String> = judged.arm.joints().iter().filter(|joint| is_missing(joint)).map(|joint| joint.name.clone()).collect();
    if names.len() > 1 && names.len() == judged.arm.len() { "any of the joints".to_owned() } else { all_of(&names) }
}

fn guessed(joint: &Joint) -> bool {
    joint.drive.is_guessed()
        || joint.torque.is_some_and(|torque| torque.grounds == Grounds::Guess)
        || joint.link.is_some_and(|link| link.grounds == Grounds::Guess)
}

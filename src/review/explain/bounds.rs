use crate::checks::{Check, CheckResult, Proof, SegmentSurvey, Verdict};

use super::{Judged, check_words, unproved};

/// What was seen of every judged check of a segment and what is proved, a line each.
pub fn bounds_text(judged: &Judged, survey: &SegmentSurvey) -> Vec<String> {
    survey.checks.iter().filter(|result| result.judged && !result.check.is_of_cycle()).map(|result| told(judged, result)).collect()
}

fn told(judged: &Judged, result: &CheckResult) -> String {
    let name = check_words(result.check);
    let worst = result.worst();
    let of = worst.and_then(|peak| peak.joint).map_or(String::new(), |j| format!(" of {}", judged.arm.joints()[j].name));
    let seen = worst.map_or(String::new(), |peak| format!("seen {} of the limit, ", percent(1.0 - peak.room.as_fraction(), false)));
    match result.proof {
        Proof::Proved(_) if result.check == Check::Reach => format!("{name}: proved to be one path of one posture"),
        Proof::Proved(room) if result.check == Check::Singular => {
            let least = worst.map_or(String::new(), |peak| format!("seen {} and ", peak.demand));
            let kept = worst.map_or(String::new(), |peak| format!(" of {}", peak.limit));
            format!("{name}: {least}proved nowhere below what is allowed{kept}, reserve {room}")
        }
        Proof::Proved(room) => {
            format!("{name}{of}: {seen}proved nowhere more than {}", percent(1.0 - room.as_fraction(), true))
        }
        Proof::Settled => format!("{name}{of}: {seen}summed up"),
        Proof::Witness => format!("{name}{of}: {seen}{} by that instant", result.verdict.word()),
        Proof::Open(why) => format!("{name}{of}: {seen}{}: {}", Verdict::Unproven.word(), unproved::in_brief(why)),
    }
}

/// A share in percent with one digit, of a bound rounded up.
fn percent(share: f64, up: bool) -> String {
    let tenths = share * 1000.0;
    // A bound that is a whole number of tenths but for rounding is not told a tenth higher.
    let rounded = if up { (tenths - 1e-6).ceil() } else { tenths.round() };
    format!("{:.1} %", rounded / 10.0 + 0.0)
}

/// How the proof of a whole recipe went, in a sentence.
pub fn proof_summary(judged: &Judged) -> String {
    let tally = judged.survey.tally();
    let gap = judged.survey.largest_gap().map_or(String::new(), |(segment, check, gap)| {
        format!(
            "; at most {} of a limit lies between what was seen and what is proved (segment {}, {})",
            percent(gap, true),
            judged.plan.segments[segment].label(),
            check_words(check)
        )
    });
    format!("{} postures and {} bound trials{gap}.", tally.postures, tally.trials)
}

use crate::checks::{Check, CheckResult, Peak, Proof};
use crate::units::Room;

use super::{SealedCheck, Tightest};
use crate::review::Judged;

/// A room as a record writes it: rounded down to a tenth of a percent.
pub(super) fn room_text(room: Room) -> String {
    let tenths = (room.as_percent() * 10.0 + ROUNDING_SLACK).floor() / 10.0;
    format!("{:.1} %", if tenths == 0.0 { 0.0 } else { tenths })
}

/// Slack in tenths of a percent, so that 66.0 computed as 65.99999999 still reads 66.0.
const ROUNDING_SLACK: f64 = 1e-6;

/// What a check found, as a record has it; `None` where it was not judged.
pub(super) fn sealed_check(judged: &Judged, result: &CheckResult) -> Option<SealedCheck> {
    if !result.judged {
        return None;
    }
    let worst = result.worst();
    let joint = worst.and_then(|peak| peak.joint).map_or(String::new(), |j| judged.arm.joints()[j].name.clone());
    let proved = match result.proof {
        Proof::Proved(_) if worst.is_none() => "proved".to_owned(),
        Proof::Proved(room) => room_text(room),
        Proof::Settled => "summed up".to_owned(),
        Proof::Witness => "flagged".to_owned(),
        Proof::Open(_) => "open".to_owned(),
    };
    let room = worst.map_or(String::new(), |peak| room_text(peak.room));
    Some(SealedCheck { check: result.check, joint, verdict: result.verdict, room, proved })
}

/// Where every joint has least room over its reserve. Rates and accelerations of joint moves are left out where they are clear,
/// since they are what their shares make them.
pub(super) fn tightest(judged: &Judged) -> Vec<Tightest> {
    let spare = |peak: &Peak| peak.room.as_fraction() - peak.reserve.as_fraction();
    let of = |j: usize| {
        let mut worst: Option<(usize, Check, &Peak)> = None;
        for (index, survey) in judged.survey.segments.iter().enumerate() {
            for result in survey.checks.iter().filter(|result| result.judged) {
                let by_share = survey.joint_move && matches!(result.check, Check::Rate | Check::Accel);
                let peaks = result.peaks.iter().filter(|peak| peak.joint == Some(j) && peak.judged && peak.limit.si.is_finite());
                for peak in peaks.filter(|peak| !(by_share && spare(peak) >= 0.0)) {
                    if worst.is_none_or(|(_, _, known)| spare(peak) < spare(known)) {
                        worst = Some((index, result.check, peak));
                    }
                }
            }
        }
        worst.map(|(index, check, peak)| Tightest {
            joint: judged.arm.joints()[j].name.clone(),
            segment: super::made::label(judged, index),
            check,
            room: room_text(peak.room),
        })
    };
    (0..judged.arm.len()).filter_map(of).collect()
}

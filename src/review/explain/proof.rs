use crate::checks::{CheckResult, Proof, SegmentSurvey, Unproved};

/// How far a check's result is proved, in a sentence.
pub fn proof_text(survey: &SegmentSurvey, result: &CheckResult) -> String {
    let looked = format!("{} instants of the segment", survey.looked_at);
    match result.proof {
        Proof::Proved(room) => {
            format!("Proved for every instant between as well: the room is nowhere less than {room}.")
        }
        Proof::Settled => {
            "Summed up over every segment and dwell, closer until the sum no longer changed by a hundred-thousandth of the squared rating."
                .to_owned()
        }
        Proof::Witness => {
            format!("It was found by looking at {looked}, closer where it rises; the instant told here is enough to show it.")
        }
        Proof::Open(Unproved::BudgetSpent | Unproved::TooNarrow | Unproved::NotOneBranch) => {
            format!("{looked} were looked at, and the proof for those between did not close.")
        }
        Proof::Open(Unproved::NotFollowed) => format!("{looked} were looked at, up to where the path was lost."),
        Proof::Open(_) => format!("{looked} were looked at, closer where it rises; what lies between them is not proved."),
    }
}

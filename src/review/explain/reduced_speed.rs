use crate::checks::Verdict;
use crate::review::{REDUCED_SPEED, Reduced};
use crate::units::{Share, Speed};

use super::listing::first_of;
use super::{Judged, explain};

/// The program in manual mode at reduced speed, in a few sentences: which segments need an override for it, and what is not clear
/// there.
pub fn reduced_speed_text(judged: &Judged, reduced: &[Reduced]) -> Vec<String> {
    let limit = Speed::m_per_s(REDUCED_SPEED);
    let slowed: Vec<&Reduced> = reduced.iter().filter(|segment| segment.needs_override()).collect();
    let number = |of: &Reduced| judged.plan.segments[of.segment].number();
    let mut told = Vec::new();
    if slowed.is_empty() {
        told.push(format!("TCP and flange keep {limit} (ISO 10218-1:2011, 5.6.2) on every segment as it is."));
    } else {
        let least = slowed.iter().map(|segment| segment.run_at).fold(Share::WHOLE, |a, b| if b < a { b } else { a });
        let each: Vec<String> =
            slowed.iter().map(|segment| format!("{} at {}", number(segment), percent(segment.run_at))).collect();
        told.push(format!(
            "TCP and flange keep {limit} (ISO 10218-1:2011, 5.6.2) at an override of {} throughout; segment by segment: {}, the \
             others as they are.",
            percent(least),
            first_of(&each).join(", ")
        ));
    }
    let unclear: Vec<String> = reduced
        .iter()
        .filter(|segment| segment.survey.verdict != Verdict::Clear)
        .filter_map(|segment| {
            let title = explain(judged, segment.survey.findings.first()?).title;
            Some(format!("segment {}, {title}", number(segment)))
        })
        .collect();
    told.push(if unclear.is_empty() {
        "Judged again there, every segment is clear.".to_owned()
    } else {
        format!("Judged again there, not clear: {}.", first_of(&unclear).join("; "))
    });
    told.push(
        "The override is found by looking at the speeds of TCP and flange; that the TCP keeps the limit at it is then judged and \
         proved, for the flange it is not. Whether the controller limits the speed, and by which points, is its maker's matter."
            .to_owned(),
    );
    told
}

/// An override in whole percent, in tenths below one.
fn percent(share: Share) -> String {
    if share.as_percent() < 1.0 { format!("{:.1} %", share.as_percent()) } else { share.to_string() }
}

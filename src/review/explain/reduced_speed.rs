use crate::checks::{Spot, SpotPeak, Verdict};
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
        "The override is found by looking at the speeds of TCP and flange; that both keep the limit at it is then judged and proved. \
         Elbow and tool corners may be faster. Whether the controller limits the speed, and by which points, is its maker's matter."
            .to_owned(),
    );
    told
}

/// How fast each point of arm and tool gets anywhere in the program at full override: `TCP 3856 mm/s (segment 2)`.
pub fn fastest_text(judged: &Judged, reduced: &[Reduced]) -> String {
    let mut fastest: Vec<(&SpotPeak, usize)> = Vec::new();
    for (peak, segment) in reduced.iter().flat_map(|of| of.peaks.iter().map(|peak| (peak, of.segment))) {
        match fastest.iter_mut().find(|(known, _)| known.spot == peak.spot) {
            Some(known) if known.0.speed < peak.speed => *known = (peak, segment),
            Some(_) => {}
            None => fastest.push((peak, segment)),
        }
    }
    let told: Vec<String> = fastest
        .into_iter()
        .map(|(peak, segment)| {
            let speed = Speed::m_per_s(peak.speed).measure().text_up(0);
            format!("{} {speed} (segment {})", spot_words(&peak.spot), judged.plan.segments[segment].number())
        })
        .collect();
    if told.is_empty() { String::new() } else { format!("Fastest at full override, by looking: {}.", first_of(&told).join(", ")) }
}

/// How people call a point.
pub(super) fn spot_words(spot: &Spot) -> String {
    match spot {
        Spot::Tcp => "TCP".to_owned(),
        Spot::Flange => "flange".to_owned(),
        Spot::WristCentre => "wrist centre".to_owned(),
        Spot::Elbow => "elbow".to_owned(),
        Spot::Tool(name) => format!("\"{name}\""),
    }
}

/// An override in whole percent, in tenths below one.
fn percent(share: Share) -> String {
    if share.as_percent() < 1.0 { format!("{:.1} %", share.as_percent()) } else { share.to_string() }
}

use crate::arm::Joint;
use crate::checks::Stopping;

use super::Judged;
use super::listing::all_of;

/// What the stopping figures of a recipe rest on, or why there are none.
pub fn stopping_text(judged: &Judged) -> String {
    let without: Vec<String> =
        judged.arm.joints().iter().filter(|joint| joint.stop.is_none()).map(|joint: &Joint| joint.name.clone()).collect();
    if without.len() == judged.arm.len() {
        return "The arm file gives no stopping data, so how far the arm runs on is not told.".to_owned();
    }
    let missing = if without.is_empty() {
        String::new()
    } else {
        format!(" Segments that move {} are left out: the arm file gives no stopping data there.", all_of(&without))
    };
    format!(
        "Shown at full override, not judged. Each joint is told at its own worst instant. The TCP's way is along its path, as if all \
         joints kept the path and braked together, as slowly as the one that needs longest; where each brakes by itself the TCP \
         leaves the path. It rests on the stopping data in the arm file and on an even deceleration, and was found by looking. What \
         counts for distances is the maker's data and a measurement on the cell.{missing}"
    )
}

/// The joints that run on farthest: `J1 18.4°`, or `shoulder 4.0°, slide 120 mm` where some turn and some slide.
pub fn joint_stop_words(judged: &Judged, stop: &Stopping) -> String {
    let told: Vec<String> = [true, false]
        .into_iter()
        .filter_map(|turns| stop.farthest(&judged.arm, turns))
        .map(|farthest| {
            let joint = &judged.arm.joints()[farthest.joint];
            format!("{} {}", joint.name, joint.value(farthest.run_on).text_up(1))
        })
        .collect();
    told.join(", ")
}

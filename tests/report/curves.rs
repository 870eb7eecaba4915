//! What a chart draws is what the check found: read along the segment, not taken from the finding.

use std::sync::Arc;

use elbowroom::checks::{Check, Kind, Watch};
use elbowroom::files;
use elbowroom::program::{Acceptance, Recipe};
use elbowroom::review::Judged;
use elbowroom::review::drawn::{Curve, Gauges};
use elbowroom::units::{Angle, Share};

use super::recipe;

/// Reserves of this many percent: with nearly all of a limit almost everything is a finding, with less only the worst version of a
/// segment.
fn strict(recipe: &Recipe, percent: f64) -> Recipe {
    // A corner that a blend cuts off may be the nearest to an end of a range.
    let range_least = Angle::deg(percent);
    let most = Share::percent(percent);
    let acceptance = Acceptance {
        rate_reserve: most,
        accel_reserve: most,
        holding_reserve: most,
        moving_reserve: most,
        brake_reserve: most,
        range_least,
        ..recipe.acceptance
    };
    Recipe { acceptance, ..recipe.clone() }
}

#[test]
fn the_highest_point_of_a_curve_is_the_finding_it_is_drawn_for() {
    let (mut drawn, mut stopping) = (0, 0);
    let all = ["housing-transfer.toml", "lid-placing.toml", "sealant-ring.toml", "tray-feed.toml"].map(|name| (name, 97.0));
    let more = (20..70).flat_map(|percent| all.map(|(name, _)| (name, f64::from(percent))));
    for (name, percent) in all.into_iter().chain(more.filter(|(name, _)| name.starts_with(['l', 's']))) {
        let mut opened = files::open(&recipe(name)).expect("it opens");
        opened.recipe = strict(&opened.recipe, percent);
        let judged = Judged::of(&Arc::new(opened.arm), &Arc::new(opened.recipe), None, &Watch::default()).expect("not stopped");
        for finding in judged.survey.findings.iter().filter(|finding| finding.check != Check::Rms) {
            let Kind::Excess(excess) = &finding.kind else { continue };
            let alike = judged.survey.segments[finding.segment]
                .findings
                .iter()
                .filter(|other| (other.check, other.joint, other.stop) == (finding.check, finding.joint, finding.stop));
            // A segment may be flagged twice by one check; the curve is of the whole of it.
            let rooms = alike
                .filter_map(|other| if let Kind::Excess(excess) = &other.kind { Some(excess.room.as_fraction()) } else { None });
            let asked = 1.0 - rooms.fold(f64::INFINITY, f64::min);
            let most = Curve::of_finding(&judged, finding).most();
            assert!((most - asked).abs() < 2e-3 * asked, "{name}: {finding:?}: drawn {most}, found {asked}");
            let gauges = Gauges::at_worst(&judged, finding).expect("an arm");
            let gauge = gauges.get(finding.check, finding.joint);
            let there = gauge.map_or(f64::NAN, |gauge| gauge.room.as_fraction());
            if !excess.after_stop && finding.check != Check::Flange {
                assert!((there - excess.room.as_fraction()).abs() < 2e-3, "{name}: {finding:?}: {there}");
            }
            drawn += 1;
            stopping += usize::from(finding.stop);
        }
    }
    assert!(drawn > 300 && stopping > 0, "{drawn}, {stopping} of them where fly-by points are stopped at");
}

//! Where nothing settles a finding: what was tried, and how near each came.

use std::sync::Arc;

use elbowroom::checks::{Check, Finding, Kind, Watch};
use elbowroom::program::{Arrive, Edit};
use elbowroom::review::{Judged, RemedyKind, Short, Tried, kind_words, remedies_text};
use elbowroom::units::{Share, Speed};

use crate::cases::{SIX, demonstration, found, judged, past_a_straight_wrist, remedies};

const TOOL: &str = "[usual]\naccel = 1000\n[[tool]]\nname = \"gripper\"\ntcp = { xyz = [0, 0, 165] }\nmass = 3.4\ncom = [0, 0, 60]\n\
                    turns-freely = true\n[[load]]\nname = \"housing\"\nmass = 6.5\ncom = [0, 0, -15]\n";

/// An arm so weak at J2 that nothing in the program helps it to hold itself.
fn too_weak() -> Judged {
    let weak = SIX.replace("holding = 690", "holding = 300");
    judged(
        &weak,
        &format!("carrying = \"housing\"\nrepeat = \"start\"\n{TOOL}"),
        r#"
        [[waypoint]]
        name = "near"
        joints = [-22, 28, -33, 0, 55, 0]
        [[waypoint]]
        name = "far"
        pose = { xyz = [1100, -300, 500], rpy = [180, 0, 0] }
        arrive = "line"
        speed = 200
        [[waypoint]]
        name = "back"
        joints = [-22, 28, -33, 0, 55, 0]
        arrive = "joint"
        share = 30
        "#,
    )
}

/// A corner whose segments speed up too hard whatever the corner does.
fn hard_corner() -> Judged {
    judged(
        SIX,
        TOOL,
        r#"
        [[waypoint]]
        name = "ready"
        joints = [0, -20, -20, 0, 60, 0]
        [[waypoint]]
        name = "from"
        pose = { xyz = [800, -200, 500], rpy = [180, 0, 0] }
        arrive = "joint"
        share = 40
        [[waypoint]]
        name = "corner"
        pose = { xyz = [800, 200, 500], rpy = [180, 0, 0] }
        arrive = "line"
        speed = 700
        accel = 20000
        fly-by = 20
        [[waypoint]]
        name = "to"
        pose = { xyz = [1000, 200, 500], rpy = [180, 0, 0] }
        arrive = "line"
        speed = 700
        accel = 20000
        "#,
    )
}

/// A line to a place that is much too far away.
fn far_away() -> Judged {
    judged(
        SIX,
        TOOL,
        r#"
        [[waypoint]]
        name = "ready"
        joints = [0, -20, -20, 0, 60, 0]
        [[waypoint]]
        name = "near"
        pose = { xyz = [900, 0, 600], rpy = [180, 0, 0] }
        arrive = "joint"
        share = 40
        [[waypoint]]
        name = "much too far"
        pose = { xyz = [1900, 0, 600], rpy = [180, 0, 0] }
        arrive = "line"
        speed = 250
        "#,
    )
}

fn all() -> Vec<Judged> {
    vec![
        too_weak(),
        hard_corner(),
        far_away(),
        demonstration(),
        past_a_straight_wrist("[acceptance]\nsingular-least = 0.9\ntool-speed-left = 3000"),
    ]
}

fn reserve(finding: &Finding) -> f64 {
    match &finding.kind {
        Kind::Excess(excess) => excess.reserve.as_fraction(),
        _ => 0.0,
    }
}

#[test]
fn what_was_tried_in_vain_is_told_with_how_near_it_came() {
    let mut seen: Vec<RemedyKind> = Vec::new();
    for judged in all() {
        for finding in &judged.survey.findings {
            let (found, tried) = remedies(&judged, finding);
            if tried.is_empty() {
                continue;
            }
            let told = remedies_text(&judged, finding, &found, &tried).pop().expect("a paragraph").text.to_lowercase();
            for Tried { kind, short } in &tried {
                seen.push(*kind);
                assert!(told.contains(kind_words(*kind)), "{kind:?} is missing in: {told}");
                match short {
                    // What came near stayed short of the reserve, or it would have been offered.
                    Short::Nearest(Some(room)) => {
                        assert!(room.as_fraction() < reserve(finding) + 1e-9, "{kind:?} {room} {finding:?}");
                        let is_said = finding.check == Check::Range || told.contains(&format!("room {room}"));
                        assert!(is_said, "{room} is missing in: {told}");
                    }
                    Short::Spoils { segment, .. } => {
                        let label = judged.plan.segments[*segment].label().to_lowercase();
                        assert!(told.contains(&format!("in the way on segment {label}")), "{told}");
                    }
                    Short::Nearest(None) | Short::Fixed => {}
                }
            }
        }
    }
    let missing: Vec<RemedyKind> = RemedyKind::ALL.into_iter().filter(|kind| !seen.contains(kind)).collect();
    assert!(missing.is_empty(), "no case tries {missing:?} in vain");
}

fn tried(judged: &Judged, finding: &Finding, kind: RemedyKind) -> f64 {
    let (_, tried) = remedies(judged, finding);
    let short = tried.iter().find(|one| one.kind == kind).unwrap_or_else(|| panic!("{kind:?} in {tried:?}")).short;
    let Short::Nearest(Some(room)) = short else { panic!("{short:?}") };
    room.as_fraction()
}

/// The room of a finding's check and joint on its segment in a recipe judged afresh.
fn room(judged: &Judged, finding: &Finding, edit: &Edit) -> f64 {
    let mut recipe = (*judged.recipe).clone();
    edit.apply(&mut recipe).expect("it is there");
    let after = Judged::of(&judged.arm, &Arc::new(recipe), None, &Watch::default()).expect("nobody stops it");
    let peaks = &after.survey.segments[finding.segment].check(finding.check).peaks;
    peaks.iter().filter(|peak| peak.joint == finding.joint).map(|peak| peak.room.as_fraction()).fold(f64::INFINITY, f64::min)
}

/// The lightest load that is tried comes nearest, since the torque is linear in its mass; it is the least step, 0.1 kg.
#[test]
fn the_nearest_of_a_load_that_is_never_light_enough_is_the_lightest() {
    let judged = too_weak();
    let finding = found(&judged, Check::Holding);
    let mut loads = judged.recipe.loads.clone();
    loads[0].body.mass = 0.1;
    let lightest = room(&judged, &finding, &Edit::Loads(loads));
    let told = tried(&judged, &finding, RemedyKind::Load);
    assert!((told - lightest).abs() < 2e-3, "{told} {lightest}");
}

/// Where the ramp alone asks too much, no pace of the corner is slow enough; the nearest is no worse than any that is judged here.
#[test]
fn the_nearest_of_a_pace_that_is_never_slow_enough_is_as_good_as_any() {
    let judged = hard_corner();
    let of_blend = |finding: &&Finding| judged.plan.segments[finding.segment].blend && finding.check == Check::Accel;
    for finding in judged.survey.findings.iter().filter(of_blend) {
        let (_, vain) = remedies(&judged, finding);
        if !vain.iter().any(|one| one.kind == RemedyKind::Slower && matches!(one.short, Short::Nearest(Some(_)))) {
            continue;
        }
        let told = tried(&judged, finding, RemedyKind::Slower);
        for percent in [10.0, 50.0, 90.0] {
            let corner = judged.plan.segments[finding.segment].to;
            let slowed = |index: usize| {
                Edit::change(&judged.recipe, index, |waypoint| {
                    if let Some(Arrive::Line(speed)) = &mut waypoint.arrive {
                        speed.speed = Some(Speed::mm_per_s(700.0 * Share::percent(percent).as_fraction()));
                    }
                })
            };
            let there = room(&judged, finding, &Edit::Together(vec![slowed(corner), slowed(corner + 1)]));
            assert!(there <= told + 0.05, "{percent} %: {there} {told}");
        }
        return;
    }
    panic!("no pace was tried in vain: {:?}", judged.survey.findings);
}

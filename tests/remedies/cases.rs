use std::sync::Arc;

use elbowroom::checks::{Check, Finding, Watch};
use elbowroom::files::{demo, read_arm, read_recipe};
use elbowroom::review::{Judged, Remedy, RemedyKind, Tried, found_by};

/// A six-axis arm with a spherical wrist.
pub const SIX: &str = include_str!("../words/six-axis.toml");
/// Turn, lift and slide.
pub const THREE: &str = include_str!("../../recipes/arms/three-axis-rrp.toml");

/// Judges a recipe on an arm; `tables` stands above its waypoints.
pub fn judged(arm: &str, tables: &str, waypoints: &str) -> Judged {
    let text = format!("elbowroom-recipe = 1\nname = \"Test\"\narm = \"arm.toml\"\n{tables}\n{waypoints}");
    let arm = Arc::new(read_arm(arm, "arm.toml").unwrap_or_else(|wrong| panic!("{wrong}")));
    let recipe = Arc::new(read_recipe(&text, "test.toml", &arm).unwrap_or_else(|wrong| panic!("{wrong}")));
    Judged::of(&arm, &recipe, None, &Watch::default()).expect("nobody stops it")
}

/// The demonstration.
pub fn demonstration() -> Judged {
    let demo = demo();
    Judged::of(&Arc::new(demo.arm), &Arc::new(demo.recipe), None, &Watch::default()).expect("nobody stops it")
}

/// A line that passes a straight wrist halfway.
pub fn past_a_straight_wrist(more: &str) -> Judged {
    judged(
        SIX,
        &format!("[usual]\naccel = 1000\n[[tool]]\nname = \"gripper\"\ntcp = {{ xyz = [0, 0, 165] }}\n{more}"),
        r#"
        [[waypoint]]
        name = "ready"
        joints = [0, -20, -20, 0, 60, 0]
        [[waypoint]]
        name = "in"
        pose = { xyz = [1060, 250, 620], rpy = [180, -55, 0] }
        arrive = "joint"
        share = 40
        [[waypoint]]
        name = "out"
        pose = { xyz = [1060, -250, 620], rpy = [180, -55, 0] }
        arrive = "line"
        speed = 400
        "#,
    )
}

/// The worst finding of a check.
pub fn found(judged: &Judged, check: Check) -> Finding {
    let of = |finding: &&Finding| finding.check == check;
    *judged.survey.findings.iter().find(of).unwrap_or_else(|| panic!("no {check:?} in {:?}", judged.survey.findings))
}

/// All remedies of a finding, and what was tried in vain.
pub fn remedies(judged: &Judged, finding: &Finding) -> (Vec<Remedy>, Vec<Tried>) {
    found_by(judged, finding, &Watch::default())
}

/// The remedy of one kind.
pub fn remedy(judged: &Judged, finding: &Finding, kind: RemedyKind) -> Remedy {
    let (remedies, tried) = remedies(judged, finding);
    let told: Vec<_> = remedies.iter().map(|remedy| remedy.change).collect();
    remedies.into_iter().find(|remedy| remedy.kind() == kind).unwrap_or_else(|| panic!("no {kind:?} in {told:?}; {tried:?}"))
}

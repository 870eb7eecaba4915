use std::sync::Arc;

use elbowroom::checks::{Check, Finding, Watch};
use elbowroom::program::{Arrive, Edit, Recipe};
use elbowroom::review::{Change, Judged, RemedyKind, remedy_title};
use elbowroom::units::Speed;

use crate::cases::{SIX, judged, remedies};

/// From the wrist's centre to the TCP, m: the flange of this arm and the tool.
const HAND: f64 = 0.095 + 0.165;

/// A line across in front of an arm whose J2 holds too little there, and whose slow J1 has hardly any room left. Nearer to the base J2
/// holds it, and J1 must turn faster.
fn across() -> Judged {
    let arm = SIX.replacen("rate   = 175", "rate   = 20", 1).replace("holding = 690", "holding = 410");
    judged(
        &arm,
        "carrying = \"housing\"\n[usual]\naccel = 1000\n[[tool]]\nname = \"gripper\"\ntcp = { xyz = [0, 0, 165] }\nmass = 3.4\n\
         com = [0, 0, 60]\n[[load]]\nname = \"housing\"\nmass = 6.5\ncom = [0, 0, -15]\n",
        r#"
        [[waypoint]]
        name = "ready"
        joints = [0, -20, -20, 0, 60, 0]
        [[waypoint]]
        name = "left"
        pose = { xyz = [1200, 250, 620], rpy = [180, -55, 0] }
        arrive = "joint"
        share = 40
        [[waypoint]]
        name = "right"
        pose = { xyz = [1200, -250, 620], rpy = [180, -55, 0] }
        arrive = "line"
        speed = 305
        "#,
    )
}

fn afresh(judged: &Judged, recipe: Recipe) -> Judged {
    Judged::of(&judged.arm, &Arc::new(recipe), None, &Watch::default()).expect("nobody stops it")
}

fn on_line(judged: &Judged) -> Vec<&Finding> {
    judged.survey.findings.iter().filter(|finding| judged.plan.segments[finding.segment].to == 2).collect()
}

#[test]
fn a_shift_and_a_lower_speed_settle_together_what_neither_does_alone() {
    let before = across();
    let finding = *on_line(&before).into_iter().find(|finding| finding.check == Check::Holding).expect("J2 holds too little");
    let (found, tried) = remedies(&before, &finding);
    assert!(tried.iter().any(|one| one.kind == RemedyKind::Shift), "a shift alone was tried in vain: {tried:?}");
    let both = found.iter().find(|remedy| remedy.and.is_some()).unwrap_or_else(|| panic!("{tried:?}"));
    assert!(found.iter().all(|other| other.edit.is_none() || other.and.is_some()), "nothing does alone");
    let (Change::Shift { by, .. }, Some(Change::Speed { from, to })) = (both.change, both.and) else { panic!("{both:?}") };
    assert_eq!(from.as_mm_per_s(), 305.0);
    let title = remedy_title(&before, both);
    assert!(title.starts_with("shift: ") && title.contains(", and slower: 305 mm/s to "), "{title}");

    let mut recipe = (*before.recipe).clone();
    let back = both.edit.as_ref().expect("it can be made").apply(&mut recipe).expect("the waypoints are there");
    let after = afresh(&before, recipe.clone());
    assert!(on_line(&after).is_empty(), "{:?}", after.survey.findings);
    assert_eq!(after.survey.findings, both.after.survey.findings);

    let at = |recipe: &Recipe, mm_s: f64| {
        let mut recipe = recipe.clone();
        let slower = Edit::change(&recipe, 2, |waypoint| {
            if let Some(Arrive::Line(speed)) = &mut waypoint.arrive {
                speed.speed = Some(Speed::mm_per_s(mm_s));
            }
        });
        slower.apply(&mut recipe).expect("it is there");
        afresh(&before, recipe)
    };
    let only_shifted = at(&recipe, 305.0);
    assert!(on_line(&only_shifted).iter().all(|left| left.check == Check::Rate) && !on_line(&only_shifted).is_empty());
    let only_slower = at(&before.recipe, to.as_mm_per_s());
    assert!(on_line(&only_slower).iter().any(|left| left.check == Check::Holding));

    // By hand: the tool keeps its orientation, so the wrist's centre moves as the TCP does, and J1 turns with speed / distance.
    let away = 1.2 + by.x - HAND * 55f64.to_radians().sin();
    let most = (0.9 * 20f64.to_radians() * away * 1000.0).floor();
    assert_eq!(to.as_mm_per_s().round(), most, "{away} {by:?}");
    assert!(!on_line(&at(&recipe, most + 1.0)).is_empty());

    back.apply(&mut recipe).expect("the waypoints are there");
    assert_eq!(recipe, *before.recipe, "both are taken back at once");
}

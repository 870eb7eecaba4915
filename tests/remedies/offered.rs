use std::sync::Arc;

use elbowroom::checks::{Check, Finding, Verdict, Watch};
use elbowroom::program::Edit;
use elbowroom::review::{Judged, Remedy};

use crate::cases::{demonstration, remedies};
use crate::random::{self, Draw, Family};

/// Where a finding would be in the recipe as it was, with what it is about. A point that an edit inserts splits a segment in two.
fn key(judged: &Judged, finding: &Finding, edit: Option<&Edit>) -> (usize, bool, Check, Option<usize>) {
    let (to, blend) = (judged.plan.segments[finding.segment].to, judged.plan.segments[finding.segment].blend);
    let to = match edit {
        Some(Edit::Insert { index, .. }) if to > *index => to - 1,
        _ => to,
    };
    let of_cycle = finding.check.is_of_cycle();
    (if of_cycle { 0 } else { to }, !of_cycle && blend, finding.check, finding.joint)
}

/// Judges the recipe afresh with the edit and holds what was claimed against it.
fn holds(judged: &Judged, finding: &Finding, remedy: &Remedy) {
    let Some(edit) = &remedy.edit else { return };
    let mut recipe = (*judged.recipe).clone();
    let back = edit.apply(&mut recipe).expect("the waypoint is there");
    let fresh = Judged::of(&judged.arm, &Arc::new(recipe.clone()), None, &Watch::default()).expect("nobody stops it");
    let told = format!("{:?}", remedy.change);
    assert_eq!(fresh.survey.findings, remedy.after.survey.findings, "{told}");
    let wanted = key(judged, finding, None);
    assert!(fresh.survey.findings.iter().all(|left| key(&fresh, left, Some(edit)) != wanted), "{told} leaves {finding:?}");
    for new in &fresh.survey.findings {
        let there = judged
            .survey
            .findings
            .iter()
            .any(|old| key(judged, old, None) == key(&fresh, new, Some(edit)) && old.verdict >= new.verdict);
        assert!(there || remedy.effect.worsens.contains(new), "{told} hides {new:?}");
    }
    assert!(remedy.effect.worsens.iter().all(|new| new.verdict < finding.verdict), "{told}");
    let gone = &remedy.effect.settles;
    assert!(gone.iter().any(|old| key(judged, old, None) == wanted), "{told}: {gone:?}");
    let costs = fresh.plan.duration() - judged.plan.duration();
    assert!((costs - remedy.costs.as_s()).abs() < 1e-9);
    back.apply(&mut recipe).expect("the waypoint is there");
    assert_eq!(recipe, *judged.recipe, "{told} can be taken back");
}

#[test]
fn every_remedy_of_the_demonstration_holds_when_it_is_judged_afresh() {
    let judged = demonstration();
    assert!(!judged.survey.findings.is_empty());
    for finding in &judged.survey.findings {
        let (remedies, _) = remedies(&judged, finding);
        assert!(!remedies.is_empty(), "{finding:?}");
        remedies.iter().for_each(|remedy| holds(&judged, finding, remedy));
        assert!(remedies.windows(2).all(|pair| pair[0].order(&pair[1]).is_le()), "the least change first");
    }
}

#[test]
fn every_remedy_of_a_random_segment_holds_when_it_is_judged_afresh() {
    let mut draw = Draw(41);
    let mut offered = 0;
    for k in 0..24 {
        let family = [Family::SphericalWrist, Family::OffsetWrist, Family::FourSlide, Family::ThreeSlide][k % 4];
        let arm = random::arm(family, &mut draw);
        let recipe = random::segment(&arm, k % 3 != 0, &mut draw);
        let judged = random::judged(arm, recipe);
        let Some(finding) = judged.survey.findings.iter().find(|finding| finding.verdict != Verdict::Unproven) else { continue };
        let (remedies, _) = remedies(&judged, finding);
        offered += remedies.len();
        remedies.iter().for_each(|remedy| holds(&judged, finding, remedy));
    }
    assert!(offered > 12, "only {offered} remedies were offered");
}

#[test]
fn the_same_search_tells_the_same_in_the_same_order() {
    let judged = demonstration();
    let finding = judged.survey.findings[0];
    let told = || {
        let mut all = Vec::new();
        elbowroom::review::search(&judged, &finding, &Watch::default(), |told| all.push(format!("{:?}", told.kind())));
        let (remedies, tried) = remedies(&judged, &finding);
        let changes: Vec<_> = remedies.iter().map(|remedy| remedy.change).collect();
        (all, changes, tried)
    };
    assert_eq!(told(), told());
}

#[test]
fn a_stopped_search_ends_at_once_and_offers_nothing_half_judged() {
    let judged = demonstration();
    let watch = Watch::default();
    watch.stop();
    let mut heard = 0;
    elbowroom::review::search(&judged, &judged.survey.findings[0], &watch, |_| heard += 1);
    assert_eq!(heard, 0);
}

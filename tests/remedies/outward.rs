//! The least change of a fly-by radius and of the mount beside a dense search: its own loop over every step, each judged as a recipe
//! of its own.

use std::sync::Arc;

use elbowroom::checks::{Check, Finding, Verdict, Watch};
use elbowroom::geometry::{Pose, V3, turn_about};
use elbowroom::program::Recipe;
use elbowroom::review::{Change, Judged, RemedyKind};
use elbowroom::units::Length;

use crate::cases::{SIX, found, judged, remedy};

/// A change of the dense search is smaller than what was offered by at least this share.
const SMALLER: f64 = 0.95;

const TOOL: &str =
    "[usual]\naccel = 1000\n[[tool]]\nname = \"gripper\"\ntcp = { xyz = [0, 0, 165] }\nmass = 3.4\ncom = [0, 0, 60]\n";
const READY: &str = "[[waypoint]]\nname = \"ready\"\njoints = [0, -20, -20, 0, 60, 0]\n";

/// Whether a changed recipe, judged afresh, no longer has a finding's check and joint on its segment, and nothing that is worse.
fn settles(before: &Judged, finding: &Finding, how: impl FnOnce(&mut Recipe)) -> bool {
    let mut recipe = (*before.recipe).clone();
    how(&mut recipe);
    if !recipe.faults(&before.arm).is_empty() {
        return false;
    }
    let after = Judged::of(&before.arm, &Arc::new(recipe), None, &Watch::default()).expect("nobody stops it");
    let key = |judged: &Judged, of: &Finding| (judged.plan.segments[of.segment].to, of.check, of.joint);
    let wanted = key(before, finding);
    let worst = |judged: &Judged, of| {
        judged
            .survey
            .findings
            .iter()
            .filter(|other| key(judged, other) == of)
            .map(|other| other.verdict)
            .max()
            .unwrap_or(Verdict::Clear)
    };
    after.survey.findings.iter().all(|left| {
        let of = key(&after, left);
        of.1 != wanted.1 || of.0 != wanted.0
    }) && after.survey.findings.iter().all(|left| left.verdict <= worst(before, key(&after, left)))
}

#[test]
fn no_nearer_radius_of_a_dense_search_settles_it() {
    for (radius, speed) in [(30.0, 700), (30.0, 800), (40.0, 800), (12.0, 500)] {
        let corner = format!(
            r#"{READY}
            [[waypoint]]
            name = "from"
            pose = {{ xyz = [800, -200, 500], rpy = [180, 0, 0] }}
            arrive = "joint"
            share = 40
            [[waypoint]]
            name = "corner"
            pose = {{ xyz = [800, 200, 500], rpy = [180, 0, 0] }}
            arrive = "line"
            speed = {speed}
            accel = 5000
            fly-by = {radius}
            [[waypoint]]
            name = "to"
            pose = {{ xyz = [1000, 200, 500], rpy = [180, 0, 0] }}
            arrive = "line"
            speed = {speed}
            accel = 5000
            "#
        );
        let judged = judged(SIX, TOOL, &corner);
        let finding = found(&judged, Check::Accel);
        let Change::FlyBy { waypoint, to, .. } = remedy(&judged, &finding, RemedyKind::FlyBy).change else { panic!("a radius") };
        let least = (to.map_or(0.0, Length::as_mm) - radius).abs();
        let settled =
            |mm: f64| settles(&judged, &finding, |recipe| recipe.waypoints[waypoint].fly_by = (mm > 0.0).then(|| Length::mm(mm)));
        assert!(settled(to.map_or(0.0, Length::as_mm)), "{to:?} settles it by the same measure");
        // A finer step than any that is offered.
        let mut by = 0.25;
        while by <= SMALLER * least {
            for mm in [radius - by, radius + by] {
                assert!(mm <= 0.0 || !settled(mm), "{mm} mm is nearer to {radius} mm than {to:?}");
            }
            by += 0.25;
        }
    }
}

#[test]
fn no_smaller_change_of_the_height_in_a_dense_search_settles_it() {
    let far = format!(
        r#"{READY}
        [[waypoint]]
        name = "near"
        pose = {{ xyz = [900, 0, 900], rpy = [180, 0, 0], frame = "floor" }}
        arrive = "joint"
        share = 40
        [[waypoint]]
        name = "low and far"
        pose = {{ xyz = [1380, 0, 480], rpy = [180, 0, 0], frame = "floor" }}
        arrive = "line"
        speed = 250
        "#
    );
    let world = "[mount]\nxyz = [0, 0, 600]\n[[frame]]\nname = \"floor\"\nin = \"world\"\nxyz = [0, 0, 0]";
    let judged = judged(SIX, &format!("{TOOL}{world}"), &far);
    let finding = found(&judged, Check::Reach);
    let Change::MountHeight { by } = remedy(&judged, &finding, RemedyKind::MountHeight).change else { panic!("a height") };
    let settled = |mm: f64| settles(&judged, &finding, |recipe| recipe.mount.at.z += mm / 1000.0);
    assert!(settled(by.as_mm()));
    let mut mm = 1.0;
    while mm <= SMALLER * by.as_mm().abs() {
        assert!(!settled(mm) && !settled(-mm), "{mm} mm is less than {by}");
        mm += 1.0;
    }
}

#[test]
fn no_smaller_lean_in_a_dense_search_settles_it() {
    let stretch = r#"
    [[waypoint]]
    name = "near"
    joints = [-22, 28, -33, 0, 55, 0]
    [[waypoint]]
    name = "far"
    joints = [-22, 75, -62, 0, 35, 0]
    arrive = "joint"
    share = 30
    "#;
    let load = "carrying = \"housing\"\n[[load]]\nname = \"housing\"\nmass = 6.5\ncom = [0, 0, -15]\n";
    let (carrying, load) = load.split_once('\n').expect("two parts");
    let judged = judged(SIX, &format!("{carrying}\n{TOOL}{load}"), stretch);
    let finding = found(&judged, Check::Holding);
    let Change::MountTilt { angle, .. } = remedy(&judged, &finding, RemedyKind::MountTilt).change else { panic!("a lean") };
    let mut degrees = 0.25;
    while degrees <= SMALLER * angle.as_deg().abs() {
        for axis in [V3::x(), V3::y()] {
            for sense in [-1.0, 1.0] {
                let turn = turn_about(&axis, (sense * degrees).to_radians());
                let settled = settles(&judged, &finding, |recipe| {
                    recipe.mount = Pose { axes: recipe.mount.axes * turn, ..recipe.mount };
                });
                assert!(!settled, "{sense} x {degrees}° about {axis:?} is less than {angle}");
            }
        }
        degrees += 0.25;
    }
}

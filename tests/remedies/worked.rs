use elbowroom::checks::{Check, Kind};
use elbowroom::geometry::V3;
use elbowroom::kinematics::Posture;
use elbowroom::review::{Change, RemedyKind};
use elbowroom::units::STANDARD_GRAVITY;

use crate::cases::{SIX, THREE, demonstration, found, judged, past_a_straight_wrist, remedy};

/// Rates are linear in the speed: the fastest that leaves the reserve is the whole number below speed x allowed / asked.
#[test]
fn the_fastest_speed_past_a_straight_wrist_follows_the_scaling_law() {
    let judged = past_a_straight_wrist("[acceptance]\nsingular-least = 0.001\ntool-speed-left = 1");
    let finding = found(&judged, Check::Rate);
    let Kind::Excess(excess) = finding.kind else { panic!("an excess") };
    let Change::Speed { from, to } = remedy(&judged, &finding, RemedyKind::Slower).change else { panic!("a speed") };
    let by_law = from.as_mm_per_s() * (1.0 - excess.reserve.as_fraction()) * excess.limit.si / excess.demand.si.abs();
    assert_eq!(from.as_mm_per_s(), 400.0);
    // Acceleration grows with the square, so it may ask for less yet; here it does not.
    assert!((to.as_mm_per_s() - by_law.floor()).abs() < 1e-9, "{to} {by_law}");
}

/// The wrist rule by hand: near a straight wrist J6 must turn back w / sin q5, where w is what J1 to J3 turn across both axes, so
/// at the fastest speed offered |q5| is what asin(w / allowed) says.
#[test]
fn at_the_speed_offered_the_wrist_stands_at_the_angle_of_the_wrist_rule() {
    let judged = past_a_straight_wrist("[acceptance]\nsingular-least = 0.001\ntool-speed-left = 1");
    let finding = found(&judged, Check::Rate);
    let after = remedy(&judged, &finding, RemedyKind::Slower).after;
    let segment = &after.plan.segments[finding.segment];
    let instant = elbowroom::motion::Follower::of(&after.arm, segment).at(finding.worst().u).expect("followed");
    let rates = instant.rates(segment.law.top_rate());
    // What the arm's first three joints turn, across the plane of both wrist axes.
    let turned: V3 = (0..3).map(|j| instant.posture.axis(j) * rates[j]).sum();
    let [a4, a5, a6] = [3, 4, 5].map(|j| instant.posture.axis(j));
    let across = turned - a5 * turned.dot(&a5);
    let sine = a4.cross(&a6).norm();
    // q4' = -(w x a6) . a5 / sin, q6' = (w x a4) . a5 / sin: the sine rule in the plane square to the fifth axis.
    let [w4, w6] = [across.cross(&a6).dot(&a5).abs(), across.cross(&a4).dot(&a5).abs()];
    assert!((w4 / sine - rates[3].abs()).abs() < 1e-6 * rates[3].abs(), "{} {}", w4 / sine, rates[3]);
    assert!((w6 / sine - rates[5].abs()).abs() < 1e-6 * rates[5].abs());
    let allowed = 0.9 * after.arm.joints()[3].rate;
    assert!(sine >= w4 / allowed - 1e-9, "{sine} {}", w4 / allowed);
    // One mm/s more and the angle is too small: the least angle grows in step with the speed.
    assert!(sine < w4 / allowed * 1.01);
    assert!(rates[3] * rates[5] < 0.0, "they turn against each other");
}

/// Turn, lift, slide. On an upright line at the distance d from the shoulder's axis the shoulder turns fastest at the foot of the
/// perpendicular, with v / d (elementary geometry).
#[test]
fn the_fastest_speed_of_a_lifted_slide_is_the_distance_times_the_rate() {
    let judged = judged(
        THREE,
        "[usual]\naccel = 3000",
        r#"
        [[waypoint]]
        name = "below"
        pose = { xyz = [600, 0, 400] }
        [[waypoint]]
        name = "above"
        pose = { xyz = [600, 0, 1000] }
        arrive = "line"
        speed = 1300
        "#
        .replace(
            "[[waypoint]]\n        name = \"below\"\n        pose = { xyz = [600, 0, 400] }",
            "[[waypoint]]\n        name = \"below\"\n        joints = [0, -26.565051177077994, 370.820393249937]",
        )
        .as_str(),
    );
    let finding = found(&judged, Check::Rate);
    assert_eq!(finding.joint, Some(1));
    let Change::Speed { to, .. } = remedy(&judged, &finding, RemedyKind::Slower).change else { panic!("a speed") };
    let by_hand = (600.0 * 0.9 * 120f64.to_radians()).floor();
    assert!((to.as_mm_per_s() - by_hand).abs() < 1e-9, "{to} {by_hand}");
}

/// A load asks m g dh/dq of a joint, h being the height of its centre: linear in m.
#[test]
fn the_heaviest_load_is_that_of_the_closed_form() {
    let judged = judged(
        SIX,
        "carrying = \"housing\"\n[[tool]]\nname = \"gripper\"\ntcp = { xyz = [0, 0, 165] }\nmass = 3.4\ncom = [0, 0, 60]\n\
         [[load]]\nname = \"housing\"\nmass = 6.5\ncom = [0, 0, -15]\n",
        r#"
        [[waypoint]]
        name = "near"
        joints = [-22, 28, -33, 0, 55, 0]
        [[waypoint]]
        name = "far"
        joints = [-22, 75, -62, 0, 35, 0]
        arrive = "joint"
        share = 30
        "#,
    );
    let finding = found(&judged, Check::Holding);
    let Kind::Excess(excess) = finding.kind else { panic!("an excess") };
    let joint = finding.joint.expect("a joint's");
    let segment = &judged.plan.segments[finding.segment];
    let q = elbowroom::motion::Follower::of(&judged.arm, segment).at(finding.worst().u).expect("followed").q;
    let height = |step: f64| {
        let mut q = q;
        q[joint] += step;
        Posture::at(judged.arm.chain(), &q).flange().point(&segment.carried.load_com).z
    };
    let a_kg = (STANDARD_GRAVITY * (height(1e-6) - height(-1e-6)) / 2e-6).abs();
    let over = excess.demand.si.abs() - (1.0 - excess.reserve.as_fraction()) * excess.limit.si;
    let heaviest = ((6.5 - over / a_kg) * 10.0).floor() / 10.0;
    let Change::Load { from, to } = remedy(&judged, &finding, RemedyKind::Load).change else { panic!("a load") };
    assert!((from.as_kg() - 6.5).abs() < 1e-12);
    assert!((to.as_kg() - heaviest).abs() < 1e-9, "{to} {heaviest}");
}

/// Where a joint move turns one upright axis by an angle, the TCP leaves the chord by the sagitta R (1 - cos(angle / 2)).
#[test]
fn a_joint_move_about_one_axis_leaves_the_chord_by_its_sagitta() {
    let judged = judged(
        SIX,
        "[usual]\naccel = 9000\nturn-speed = 400\nturn-accel = 1500\n[[tool]]\nname = \"gripper\"\ntcp = { xyz = [0, 0, 165] }\n",
        r#"
        [[waypoint]]
        name = "right"
        joints = [-30, -20, -20, 0, 60, 0]
        [[waypoint]]
        name = "left"
        joints = [30, -20, -20, 0, 60, 0]
        arrive = "line"
        speed = 4000
        "#,
    );
    let finding = judged.survey.findings.iter().find(|f| matches!(f.check, Check::Rate | Check::Accel)).copied().expect("too fast");
    let Change::JointMove { leaves, .. } = remedy(&judged, &finding, RemedyKind::JointMove).change else { panic!("a joint move") };
    let tcp = Posture::at(judged.arm.chain(), &judged.plan.segments[0].start).tcp(&judged.plan.segments[0].carried.tcp);
    let sagitta = tcp.at.x.hypot(tcp.at.y) * (1.0 - 30f64.to_radians().cos());
    assert!(leaves.as_m() >= sagitta && leaves.as_m() < sagitta + 3e-4, "{} {sagitta}", leaves.as_m());
}

#[test]
fn the_demonstration_has_a_remedy_for_each_finding_that_leaves_the_reserve() {
    let judged = demonstration();
    let finding = found(&judged, Check::Rate);
    for kind in [RemedyKind::Slower, RemedyKind::JointMove, RemedyKind::Tilt, RemedyKind::Shift, RemedyKind::Via] {
        let remedy = remedy(&judged, &finding, kind);
        let [before, after] = remedy.room.map(|room| room.expect("a rate has room"));
        assert!(before.as_fraction() < 0.0 && after.as_fraction() >= 0.1, "{kind:?}: {before} {after}");
        assert!(remedy.edit.is_some() && remedy.effect.worsens.is_empty(), "{kind:?}");
    }
    let holding = found(&judged, Check::Holding);
    assert!(remedy(&judged, &holding, RemedyKind::Load).edit.is_none(), "a mass is a fact, not a choice");
}

//! The cell's limits of points of arm and tool and of cables, against places and joint values found another way.

use std::sync::Arc;

use elbowroom::checks::{Check, Proof, SegmentSurvey, Verdict, Watch};
use elbowroom::files::{demo, open};
use elbowroom::geometry::V3;
use elbowroom::kinematics::Posture;
use elbowroom::motion::{Follower, Plan, Segment, Side};
use elbowroom::program::{Recipe, ToolPoint};
use elbowroom::review::Judged;
use elbowroom::units::{Angle, Speed};

/// The demonstration with a point at the far end of its tool, and changed criteria.
fn demo_with(change: impl FnOnce(&mut Recipe)) -> Judged {
    let opened = demo();
    judged(opened.arm, opened.recipe, change)
}

fn judged(arm: elbowroom::arm::Arm, mut recipe: Recipe, change: impl FnOnce(&mut Recipe)) -> Judged {
    for tool in &mut recipe.tools {
        tool.points.push(ToolPoint { name: "far end".to_owned(), at: V3::new(0.11, -0.06, 0.2) });
    }
    change(&mut recipe);
    Judged::of(&Arc::new(arm), &Arc::new(recipe), None, &Watch::default()).expect("nobody stops it")
}

/// Flange, elbow, wrist centre and far end in the base, by forward kinematics alone.
fn places(posture: &Posture) -> [V3; 4] {
    [posture.flange().at, posture.origin(2), posture.origin(4), posture.flange().point(&V3::new(0.11, -0.06, 0.2))]
}

/// The greatest speed of any of these points, by differences of their places.
fn fastest(judged: &Judged, segment: &Segment) -> f64 {
    let follower = Follower::of(&judged.arm, segment);
    let at = |time: f64| places(&follower.at(segment.law.at(time, Side::Before)[0]).expect("followed").posture);
    let h = 1e-5;
    let speed = |k: u32| {
        let time = (segment.duration() * f64::from(k) / 4000.0).clamp(h, segment.duration() - h);
        let moved = at(time + h).into_iter().zip(at(time - h)).map(|(after, before)| (after - before).norm() / (2.0 * h));
        moved.fold(0.0, f64::max)
    };
    (0..=4000).map(speed).fold(0.0, f64::max)
}

fn result(survey: &SegmentSurvey) -> (Verdict, Option<f64>) {
    let check = survey.check(Check::PointSpeed);
    let proved = if let Proof::Proved(room) = check.proof { Some(1.0 - room.as_fraction()) } else { None };
    (check.verdict, proved)
}

#[test]
fn points_are_clear_just_above_their_greatest_speed_and_over_just_below() {
    let plain = demo_with(|_| {});
    assert!(!plain.survey.segments[0].check(Check::PointSpeed).judged, "the recipe sets no limit");
    for (index, segment) in plain.plan.segments.iter().enumerate() {
        let most = fastest(&plain, segment);
        let limited = |share: f64| demo_with(|recipe| recipe.acceptance.point_speed = Some(Speed::m_per_s(share * most)));
        let (above, below) = (limited(1.002), limited(0.998));
        let (verdict, proved) = result(&above.survey.segments[index]);
        assert_eq!(verdict, Verdict::Clear, "segment {index}: {most} m/s");
        let proved = proved.expect("clear is proved") * 1.002 * most;
        assert!(proved >= most - 1e-4 && proved <= 1.003 * most, "segment {index}: {most} m/s, proved {proved}");
        assert_eq!(result(&below.survey.segments[index]).0, Verdict::Over, "segment {index}: {most} m/s");
    }
}

#[test]
fn only_the_points_have_that_limit() {
    // On segments where the tool stands still but for the wrist, the far end is what moves fastest; without it the flange is.
    let with = demo_with(|recipe| recipe.acceptance.point_speed = Some(Speed::m_per_s(1.0)));
    let without = demo_with(|recipe| {
        recipe.acceptance.point_speed = Some(Speed::m_per_s(1.0));
        recipe.tools.iter_mut().for_each(|tool| tool.points.clear());
    });
    let demand = |judged: &Judged, index: usize| judged.survey.segments[index].check(Check::PointSpeed).peaks[0].demand.si;
    let faster = (0..with.plan.segments.len()).filter(|&index| demand(&with, index) > demand(&without, index) + 0.01).count();
    assert!(faster > 2, "{faster}");
    assert!((0..with.plan.segments.len()).all(|index| demand(&with, index) >= demand(&without, index) - 1e-9));
}

/// Least and greatest value of a joint on the cycle, by looking alone.
fn ends(judged: &Judged, joint: usize) -> [f64; 2] {
    let plan: &Plan = &judged.plan;
    let values = plan.segments.iter().chain(plan.stops.iter().flatten()).flat_map(|segment| {
        let follower = Follower::of(&judged.arm, segment);
        (0..=3000).map(|k| follower.at(f64::from(k) / 3000.0).expect("followed").q[joint]).collect::<Vec<_>>()
    });
    values.fold([f64::INFINITY, f64::NEG_INFINITY], |[low, high], q| [low.min(q), high.max(q)])
}

#[test]
fn cables_are_clear_just_above_what_the_wrist_turns_and_over_just_below() {
    for path in ["recipes/housing-transfer.toml", "recipes/sealant-ring.toml", "recipes/lid-placing.toml"] {
        let with = |limit: Option<f64>| {
            let opened = open(std::path::Path::new(path)).expect("a sound recipe");
            judged(opened.arm, opened.recipe, |recipe| recipe.acceptance.wind_up = limit.map(Angle::rad))
        };
        let plain = with(None);
        assert!(!plain.survey.cycle.wind_up.judged);
        let count = plain.arm.len();
        let wrist = if count >= 6 { count - 3..count } else { count - 1..count };
        let turned: Vec<f64> = wrist.map(|joint| ends(&plain, joint)).map(|[low, high]| high - low).collect();
        let most = turned.iter().copied().fold(0.0, f64::max);
        let above = with(Some(most * 1.0005)).survey.cycle.wind_up.clone();
        assert_eq!(above.verdict, Verdict::Clear, "{path}: {}", most.to_degrees());
        assert!(matches!(above.proof, Proof::Proved(room) if room.as_fraction() >= 0.0 && room.as_fraction() <= 0.0005));
        let below = with(Some(most * 0.9995));
        assert_eq!(below.survey.cycle.wind_up.verdict, Verdict::Over, "{path}");
        assert_eq!(below.survey.verdict(), Verdict::Over, "{path}");
        assert!(below.survey.findings.iter().any(|finding| finding.check == Check::WindUp));
        for (peak, turned) in below.survey.cycle.wind_up.peaks.iter().zip(&turned) {
            assert!((peak.demand.si - turned).abs() < 1e-3, "{path}: {} {turned}", peak.demand.si);
        }
    }
}

#[test]
fn cables_are_unproven_where_a_path_is_lost() {
    let lost = demo_with(|recipe| {
        recipe.acceptance.wind_up = Some(Angle::deg(700.0));
        let away = recipe
            .waypoints
            .iter_mut()
            .find(|waypoint| matches!(waypoint.taught, elbowroom::program::Taught::Pose { .. }) && waypoint.arrive.is_some());
        let Some(elbowroom::program::Taught::Pose { pose, .. }) = away.map(|waypoint| &mut waypoint.taught) else {
            panic!("the demonstration has poses")
        };
        pose.at += V3::x() * 5.0;
    });
    assert_eq!(lost.survey.cycle.wind_up.verdict, Verdict::Unproven);
}

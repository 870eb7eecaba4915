//! The proof hammered: nothing that dense sampling finds may lie beyond a proved bound.

mod random;

use elbowroom::arm::Joints;
use elbowroom::checks::{Check, Meter, Proof, Verdict, tightened};
use elbowroom::geometry::{Pose, Rotation, turn_about};
use elbowroom::kinematics::{Posture, singular_posture, spherical_wrist};
use elbowroom::motion::Follower;
use elbowroom::program::{Arrive, Given, PathSpeed, Recipe, Taught};
use elbowroom::review::Judged;
use elbowroom::units::{Share, Speed};
use random::{Draw, Family};

/// Looks along a judged segment evenly in time and path, and compares every proved check with what is there.
fn hammer(judged: &Judged, index: usize, looks: usize) {
    let segment = &judged.plan.segments[index];
    let survey = &judged.survey.segments[index];
    let meter = Meter::of(&judged.arm, segment, &judged.recipe.acceptance, judged.plan.gravity);
    let follower = Follower::of(&judged.arm, segment);
    for k in 0..=looks {
        let u = k as f64 / looks as f64;
        let time = segment.law.time_of(u);
        for side in [elbowroom::motion::Side::Before, elbowroom::motion::Side::After] {
            let [u, rate, accel] = segment.law.at(time, side);
            let Some(at) = follower.at(u) else {
                let reach = survey.check(Check::Reach).proof;
                assert!(!matches!(reach, Proof::Proved(_)), "a proved path can be followed, at u = {u} too");
                continue;
            };
            let reading = meter.read(&at, rate, accel);
            for (j, span) in survey.spans.iter().enumerate() {
                let Some([low, high]) = span.proved else { continue };
                let q = at.q[j];
                assert!(low <= q && q <= high, "{}: joint {j} at {q} at u = {u}, proved {low} to {high}", judged.arm.name());
            }
            for check in Check::ALL {
                let Proof::Proved(bound) = survey.check(check).proof else { continue };
                for slot in meter.slots(check).filter(|slot| meter.channel(*slot).judged) {
                    let room = meter.channel(slot).within(&reading).room(reading[slot]).as_fraction();
                    assert!(
                        room >= bound.as_fraction() - 1e-9,
                        "{} segment, {check:?} slot {slot}: room {room} at u = {u}, proved {bound:?}",
                        judged.arm.name()
                    );
                }
            }
        }
    }
}

fn hammer_family(family: Family, seed: u64, count: usize) {
    let mut draw = Draw(seed);
    let (mut clear, mut unproven, mut reasons) = (0, 0, Vec::new());
    let loads = [Check::Holding, Check::Moving, Check::Brake, Check::Flange, Check::PointSpeed];
    let mut proved = [0; 5];
    for k in 0..count {
        let arm = random::arm(family, &mut draw);
        let recipe = random::segment(&arm, k % 3 != 0, &mut draw);
        let judged = random::judged(arm, recipe);
        let survey = &judged.survey.segments[0];
        if judged.plan.segments[0].trouble.is_some() {
            continue;
        }
        if survey.verdict == Verdict::Clear {
            clear += 1;
        }
        for (check, count) in loads.iter().zip(&mut proved) {
            *count += usize::from(matches!(survey.check(*check).proof, Proof::Proved(_)));
        }
        for result in &survey.checks {
            if let Proof::Open(_) = result.proof
                && result.judged
            {
                assert_eq!(result.verdict, Verdict::Unproven, "an open proof is never clear");
            }
        }
        let open = |check: &Check| {
            let result = survey.check(*check);
            result.judged && matches!(result.proof, Proof::Open(why) if why.is_of_proof_alone())
        };
        if let Some(first) = Check::ALL.into_iter().find(open) {
            unproven += 1;
            reasons.push((k, first));
        }
        hammer(&judged, 0, 1500);
    }
    assert!(clear * 4 > count, "{family:?}: only {clear} of {count} clear, so little was hammered");
    assert!(proved.iter().all(|proved| proved * 4 > count), "{family:?}: {loads:?} proved {proved:?} times of {count}");
    assert!(unproven * 20 < count, "{family:?}: {unproven} of {count} segments unproven: {reasons:?}");
}

/// Bounds that were tightened on demand hold just as well, are no wider than before, and come as near as they promise.
#[test]
fn nothing_lies_beyond_a_tightened_bound() {
    let mut draw = Draw(6);
    let mut near = 0;
    for family in [Family::SphericalWrist, Family::OffsetWrist, Family::FourSlide, Family::ThreeSlide] {
        for k in 0..14 {
            let arm = random::arm(family, &mut draw);
            let recipe = random::segment(&arm, k % 3 != 0, &mut draw);
            let mut judged = random::judged(arm, recipe);
            if judged.survey.segments[0].verdict != Verdict::Clear {
                continue;
            }
            let closer = tightened(&judged.arm, &judged.recipe, &judged.plan, 0);
            for (before, after) in judged.survey.segments[0].checks.iter().zip(&closer.checks) {
                if let (Proof::Proved(wide), Proof::Proved(narrow)) = (before.proof, after.proof) {
                    assert!(narrow.as_fraction() >= wide.as_fraction() - 1e-12, "{:?}: {wide:?} {narrow:?}", before.check);
                }
            }
            near += usize::from(closer.largest_gap().is_some_and(|(_, gap)| gap <= 0.005 + 1e-9));
            let mut survey = (*judged.survey).clone();
            survey.segments[0] = std::sync::Arc::new(closer);
            judged.survey = std::sync::Arc::new(survey);
            hammer(&judged, 0, 5000);
        }
    }
    assert!(near > 20, "{near}");
}

#[test]
fn nothing_lies_beyond_a_bound_of_a_spherical_wrist() {
    hammer_family(Family::SphericalWrist, 1, 90);
}

#[test]
fn nothing_lies_beyond_a_bound_of_an_offset_wrist() {
    hammer_family(Family::OffsetWrist, 2, 90);
}

#[test]
fn nothing_lies_beyond_a_bound_of_seven_joints() {
    hammer_family(Family::Seven, 3, 60);
}

#[test]
fn nothing_lies_beyond_a_bound_of_four_joints_with_a_slide() {
    hammer_family(Family::FourSlide, 4, 90);
}

#[test]
fn nothing_lies_beyond_a_bound_of_three_joints_with_a_slide() {
    hammer_family(Family::ThreeSlide, 5, 90);
}

/// A line of 20 to 200 mm that starts where a posture is `away` from the singular posture nearest to it (norm of joint motion, rad),
/// slow enough that something is left to prove; closeness itself is not judged. `None` if no singular posture is near.
fn next_to_singular(arm: &elbowroom::arm::Arm, away: f64, draw: &mut Draw) -> Option<Recipe> {
    let q = random::posture(arm, draw);
    let near = singular_posture(arm, spherical_wrist(arm.chain()), &q)?;
    let start = Joints::from_fn(arm.len(), |j| near.posture[j] + (q[j] - near.posture[j]) * away / near.distance);
    let inside = |j: usize| arm.joints()[j].range.to_end(start[j]) > 0.1;
    if !(0..arm.len()).all(inside) {
        return None;
    }
    let from = Posture::at(arm.chain(), &start).tcp(&Pose::identity());
    let turn = turn_about(&draw.direction(), if arm.task().is_whole() { draw.between(0.0, 0.3) } else { 0.0 });
    let rotation = arm.task().turns().then(|| Rotation::from_matrix(&(turn * from.axes)));
    let pose = Given { at: from.at + draw.direction() * draw.between(0.02, 0.2), rotation, frame: None };
    let speed = PathSpeed { speed: Some(Speed::m_per_s(draw.between(0.002, 0.05))), ..PathSpeed::default() };
    let start = random::waypoint("start", Taught::Joints(start), None);
    let mut recipe =
        random::recipe(vec![start, random::waypoint("end", Taught::Pose { pose, near: None }, Some(Arrive::Line(speed)))]);
    recipe.acceptance.singular_least = 0.0;
    recipe.acceptance.tool_speed_left = Speed::m_per_s(0.0);
    recipe.acceptance.rate_reserve = Share::fraction(0.0);
    Some(recipe)
}

/// From a tenth of a radian down to a few millionths, which is micrometres at the tool.
#[test]
fn nothing_lies_beyond_a_bound_next_to_a_singular_posture() {
    let mut draw = Draw(21);
    for (family, least) in
        [(Family::SphericalWrist, 20), (Family::OffsetWrist, 12), (Family::FourSlide, 8), (Family::ThreeSlide, 8)]
    {
        let mut proved = 0;
        for k in 0..160 {
            let away = 0.1 * 0.7f64.powi(k % 30);
            let arm = random::arm(family, &mut draw);
            let Some(recipe) = next_to_singular(&arm, away, &mut draw) else { continue };
            let judged = random::judged(arm, recipe);
            if judged.plan.segments[0].trouble.is_some() {
                continue;
            }
            let of = |check: Check| matches!(judged.survey.segments[0].check(check).proof, Proof::Proved(_));
            proved += usize::from(of(Check::Holding) && of(Check::Reach));
            hammer(&judged, 0, 3000);
        }
        assert!(proved >= least, "{family:?}: only {proved} proved");
    }
}

/// An arc through two drawn places near a drawn posture.
fn arc(arm: &elbowroom::arm::Arm, draw: &mut Draw) -> Recipe {
    let start = random::posture(arm, draw);
    let from = Posture::at(arm.chain(), &start).tcp(&Pose::identity());
    let radius = draw.between(0.03, 0.2);
    let via = Given { at: from.at + draw.direction() * radius, rotation: None, frame: None };
    let turn = turn_about(&draw.direction(), if arm.task().is_whole() { draw.between(0.0, 0.6) } else { 0.0 });
    let rotation = arm.task().turns().then(|| Rotation::from_matrix(&(turn * from.axes)));
    let pose = Given { at: via.at + draw.direction() * radius, rotation, frame: None };
    let speed = PathSpeed { speed: Some(Speed::m_per_s(draw.between(0.02, 0.4))), ..PathSpeed::default() };
    let start = random::waypoint("start", Taught::Joints(start), None);
    random::recipe(vec![start, random::waypoint("end", Taught::Pose { pose, near: None }, Some(Arrive::Arc { via, speed }))])
}

#[test]
fn nothing_lies_beyond_a_bound_of_an_arc_or_of_limited_jerk() {
    let mut draw = Draw(22);
    for family in [Family::SphericalWrist, Family::OffsetWrist, Family::Seven, Family::FourSlide, Family::ThreeSlide] {
        let mut clear = 0;
        for k in 0..40 {
            let drawn = random::arm(family, &mut draw);
            let arm = if k % 2 == 0 { drawn } else { random::with_jerk(&drawn, draw.between(5.0, 50.0)) };
            let mut recipe = arc(&arm, &mut draw);
            if k % 2 == 1 {
                recipe.usual.jerk = Some(elbowroom::units::Jerk::m_per_s3(draw.between(5.0, 50.0)));
                recipe.usual.turn_jerk = Some(elbowroom::units::TurnJerk::rad_per_s3(draw.between(20.0, 200.0)));
            }
            let judged = random::judged(arm, recipe);
            if judged.plan.segments[0].trouble.is_none() {
                clear += usize::from(judged.survey.segments[0].verdict == Verdict::Clear);
                hammer(&judged, 0, 1500);
            }
        }
        assert!(clear > 4, "{family:?}: only {clear} clear");
    }
}

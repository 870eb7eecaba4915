//! The proof hammered: nothing that dense sampling finds may lie beyond a proved bound.

mod random;

use elbowroom::checks::{Check, Meter, Proof, Verdict, tightened};
use elbowroom::motion::Follower;
use elbowroom::review::Judged;
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

//! Fly-by points: blends meet their neighbours, the cycle does not stop there, and nothing lies beyond a proved bound.

mod random;

use elbowroom::arm::Arm;
use elbowroom::checks::{Check, Doubt, Meter, Proof, Verdict};
use elbowroom::geometry::{Pose, Rotation, turn_about};
use elbowroom::kinematics::Posture;
use elbowroom::motion::{Follower, Path, Plan, Side};
use elbowroom::program::{Arrive, Given, PathSpeed, Recipe, Taught, Waypoint};
use elbowroom::review::Judged;
use elbowroom::units::{Jerk, Length, Share, Speed, TurnJerk};
use random::{Draw, Family};

/// A waypoint near the one before it, reached as `how` says (0 line, 1 joint move, 2 arc).
fn next(arm: &Arm, from: &Pose, how: usize, name: &str, jerk: bool, draw: &mut Draw) -> (Waypoint, Pose) {
    let angle = if arm.task().is_whole() { draw.between(0.0, 0.4) } else { 0.0 };
    let axes = turn_about(&draw.direction(), angle) * from.axes;
    let to = Pose { axes, at: from.at + draw.direction() * draw.between(0.1, 0.25) };
    let given =
        |pose: &Pose| Given { at: pose.at, rotation: arm.task().turns().then(|| Rotation::from_matrix(&pose.axes)), frame: None };
    let speed = PathSpeed {
        speed: Some(Speed::m_per_s(draw.between(0.05, 0.3))),
        jerk: jerk.then(|| Jerk::m_per_s3(draw.between(3.0, 30.0))),
        turn_jerk: jerk.then(|| TurnJerk::rad_per_s3(draw.between(20.0, 200.0))),
        ..PathSpeed::default()
    };
    let arrive = match how {
        0 => Arrive::Line(speed),
        1 => Arrive::Joint { share: Some(Share::fraction(draw.between(0.1, 0.5))), accel_share: None },
        _ => {
            let via = from.at + (to.at - from.at) * 0.5 + draw.direction().cross(&(to.at - from.at)) * 0.4;
            Arrive::Arc { via: Given { at: via, rotation: None, frame: None }, speed }
        }
    };
    (random::waypoint(name, Taught::Pose { pose: given(&to), near: None }, Some(arrive)), to)
}

/// Four segments with three fly-by points between them, of drawn kinds.
fn program(family: Family, jerk: bool, draw: &mut Draw) -> (Arm, Recipe) {
    let mut arm = random::arm(family, draw);
    if jerk {
        arm = random::with_jerk(&arm, 60.0);
    }
    let start = random::posture(&arm, draw);
    let mut pose = Posture::at(arm.chain(), &start).tcp(&Pose::identity());
    let mut waypoints = vec![random::waypoint("start", Taught::Joints(start), None)];
    for k in 0..4 {
        let how = (draw.unit() * 3.0) as usize;
        let (mut waypoint, to) = next(&arm, &pose, how, &format!("w{k}"), jerk, draw);
        waypoint.fly_by = (k < 3).then(|| Length::m(draw.between(0.01, 0.08)));
        waypoints.push(waypoint);
        pose = to;
    }
    (arm, random::recipe(waypoints))
}

const FAMILIES: [Family; 5] = [Family::SphericalWrist, Family::OffsetWrist, Family::Seven, Family::FourSlide, Family::ThreeSlide];

#[test]
fn blends_meet_their_neighbours_in_value_and_rate_and_do_not_stop() {
    let mut draw = Draw(31);
    let (mut tcp, mut joints) = (0, 0);
    for k in 0..60 {
        let (arm, recipe) = program(FAMILIES[k % 5], k % 2 == 0, &mut draw);
        let plan = Plan::of(&arm, &recipe);
        for pair in plan.segments.windows(2) {
            let [one, other] = [&pair[0], &pair[1]];
            if !(one.blend || other.blend) || one.trouble.is_some() || other.trouble.is_some() {
                continue;
            }
            match (&one.path, one.blend) {
                (Path::Blend(_), _) => tcp += 1,
                (_, true) => joints += 1,
                _ => {}
            }
            let ends = [(one, one.duration(), Side::Before), (other, 0.0, Side::After)].map(|(segment, time, side)| {
                let [u, rate, _] = segment.law.at(time, side);
                assert!(rate > 1e-6, "no stop at a fly-by point");
                let at = Follower::of(&arm, segment).at(u).expect("followed");
                (at.q, at.rates(rate), at.tcp)
            });
            assert!(ends[0].0.zip(&ends[1].0, |a, b| a - b).largest() < 1e-7, "{k}: values");
            let gap = ends[0].1.zip(&ends[1].1, |a, b| a - b).largest();
            assert!(gap < 1e-6 * (1.0 + ends[0].1.largest()), "{k}: rates {:?} {:?}", ends[0].1, ends[1].1);
            assert!((ends[0].2.at - ends[1].2.at).norm() < 1e-7);
        }
    }
    assert!(tcp > 15 && joints > 15, "{tcp} {joints}");
}

#[test]
fn derivatives_along_a_blend_agree_with_differences_and_their_bounds() {
    let mut draw = Draw(32);
    let mut count = 0;
    for k in 0..30 {
        let (arm, recipe) = program(FAMILIES[k % 2], false, &mut draw);
        for segment in &Plan::of(&arm, &recipe).segments {
            let Path::Blend(_) = segment.path else { continue };
            count += 1;
            let target = |u: f64| segment.path.target(u).expect("a blend of the TCP");
            let h = 1e-5;
            for u in [h, 0.21, 0.5, 0.83, 1.0 - h] {
                let [a, m, b] = [u - h, u, u + h].map(target);
                assert!(((b.pose.at - a.pose.at) / (2.0 * h) - m.velocity).norm() < 1e-8);
                assert!(((b.velocity - a.velocity) / (2.0 * h) - m.bend).norm() < 1e-8);
                assert!(((b.bend - a.bend) / (2.0 * h)).norm() <= m.third * (1.0 + 1e-6) + 1e-9);
                let (axis, angle) = elbowroom::geometry::turn_between(&a.pose.axes, &b.pose.axes);
                assert!((axis * (angle / (2.0 * h)) - m.turning).norm() < 1e-7);
                assert!(((b.turning - a.turning) / (2.0 * h) - m.swing).norm() < 1e-7);
                assert!(((b.swing - a.swing) / (2.0 * h)).norm() <= m.swing_change * (1.0 + 1e-6) + 1e-9);
            }
        }
    }
    assert!(count > 10, "{count}");
}

/// Looks along every segment of a judged program, stop versions too, and compares every proved check with what is there.
fn hammer(judged: &Judged, looks: usize) -> [usize; 3] {
    let (mut clear, mut all, mut spent) = (0, 0, 0);
    for index in 0..judged.plan.segments.len() {
        let survey = &judged.survey.segments[index];
        if judged.plan.segments[index].trouble.is_some() {
            continue;
        }
        all += 1;
        clear += usize::from(survey.verdict == Verdict::Clear);
        spent += survey
            .checks
            .iter()
            .filter(|result| result.judged && matches!(result.proof, Proof::Open(why) if why.is_of_proof_alone()))
            .count();
        for stop in [false, true] {
            let segment = judged.plan.version(index, stop);
            let meter = Meter::of(&judged.arm, segment, &judged.recipe.acceptance, judged.plan.gravity);
            let follower = Follower::of(&judged.arm, segment);
            for k in 0..=looks {
                let share = k as f64 / looks as f64;
                for time in [segment.law.time_of(share), segment.duration() * share] {
                    for side in [Side::Before, Side::After] {
                        let [u, rate, accel] = segment.law.at(time, side);
                        let at = follower.at(u).expect("a proved path can be followed");
                        let reading = meter.read(&at, rate, accel);
                        for check in Check::ALL {
                            let Proof::Proved(bound) = survey.check(check).proof else { continue };
                            for slot in meter.slots(check).filter(|slot| meter.channel(*slot).judged) {
                                let room = meter.channel(slot).within(&reading).room(reading[slot]).as_fraction();
                                assert!(
                                    room >= bound.as_fraction() - 1e-9,
                                    "{} {}: {check:?} slot {slot}: room {room} at u = {u}, proved {bound:?}",
                                    judged.arm.name(),
                                    segment.label()
                                );
                            }
                        }
                    }
                }
            }
        }
    }
    [clear, all, spent]
}

fn hammer_family(family: Family, seed: u64, count: usize) {
    let mut draw = Draw(seed);
    let mut sums = [0; 3];
    for k in 0..count {
        let (arm, recipe) = program(family, k % 2 == 0, &mut draw);
        let judged = random::judged(arm, recipe);
        for (sum, one) in sums.iter_mut().zip(hammer(&judged, 300)) {
            *sum += one;
        }
    }
    let [clear, all, spent] = sums;
    assert!(clear * 5 > all && all > 2 * count, "{family:?}: only {clear} of {all} clear, so little was hammered");
    assert!(spent * 10 < all, "{family:?}: {spent} checks of {all} segments unproven");
}

#[test]
fn nothing_lies_beyond_a_bound_of_a_blend_with_a_spherical_wrist() {
    hammer_family(Family::SphericalWrist, 41, 20);
}

#[test]
fn nothing_lies_beyond_a_bound_of_a_blend_with_an_offset_wrist() {
    hammer_family(Family::OffsetWrist, 42, 20);
}

#[test]
fn nothing_lies_beyond_a_bound_of_a_blend_with_seven_joints() {
    hammer_family(Family::Seven, 43, 24);
}

#[test]
fn nothing_lies_beyond_a_bound_of_a_blend_with_slides() {
    hammer_family(Family::FourSlide, 44, 20);
    hammer_family(Family::ThreeSlide, 45, 20);
}

#[test]
fn a_fly_by_point_with_a_short_neighbour_is_cut_and_doubted() {
    let mut draw = Draw(51);
    let (arm, mut recipe) = program(Family::SphericalWrist, false, &mut draw);
    recipe.waypoints[2].fly_by = Some(Length::m(1.0));
    let judged = random::judged(arm, recipe);
    assert!(judged.survey.doubts.iter().any(|doubt| matches!(doubt, Doubt::FlyByCut { waypoint: 2, .. })));
}

#[test]
fn the_stop_version_counts_as_well_as_the_cycle() {
    let mut draw = Draw(52);
    let (arm, recipe) = program(Family::SphericalWrist, false, &mut draw);
    let judged = random::judged(arm, recipe);
    let stops = judged.plan.stops.iter().filter(|stop| stop.is_some()).count();
    assert!(stops >= 1, "{stops}");
    for (index, stop) in judged.plan.stops.iter().enumerate() {
        let Some(stop) = stop else { continue };
        let segment = &judged.plan.segments[index];
        assert!(segment.duration() < stop.duration() && stop.part == [0.0, 1.0] && !segment.blend);
        assert_eq!(judged.plan.arriving(segment.to).map(|found| found.end), Some(stop.end));
    }
}

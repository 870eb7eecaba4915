//! Jogging against forward kinematics on random arms, and what is recorded of it.

mod random;

use elbowroom::arm::{Arm, JointKind, Joints};
use elbowroom::geometry::{Pose, V3, turn_about};
use elbowroom::kinematics::{Posture, pose_error};
use elbowroom::program::{Carried, Edit, Taught};
use elbowroom::review::jog::{
    Axes, DAMPED_BELOW, Direction, MOST_SLIDE, MOST_TURN, Readings, Refused, Stand, Step, Stop, cartesian_step, coordinates,
    joint_step, joint_to, pose_from, to_pose,
};
use elbowroom::review::record::{Form, Stood, insert_after, rounded, suggested_name, teach_again};
use random::{Draw, Family, arm, posture};

const FAMILIES: [Family; 5] = [Family::SphericalWrist, Family::OffsetWrist, Family::Seven, Family::FourSlide, Family::ThreeSlide];

/// What counts as landed, m and rad.
const LANDED: f64 = 1e-9;

fn carried(draw: &mut Draw) -> Carried {
    let axes = turn_about(&draw.direction(), draw.between(-1.0, 1.0));
    Carried { tcp: Pose { axes, at: draw.direction() * draw.between(0.0, 0.2) }, ..Carried::nothing() }
}

fn tcp(arm: &Arm, carried: &Carried, q: &Joints) -> Pose {
    Posture::at(arm.chain(), q).tcp(&carried.tcp)
}

/// Where the TCP was asked to be: along or about the axes of a system, told without the engine.
fn asked(from: &Pose, system: &Pose, direction: Direction, by: f64) -> Pose {
    let (Direction::Along(axis) | Direction::About(axis)) = direction;
    let axis: V3 = system.axes.column(axis).into_owned();
    if direction.turns() {
        Pose { axes: turn_about(&axis, by) * from.axes, at: from.at }
    } else {
        Pose { axes: from.axes, at: from.at + axis * by }
    }
}

/// What the arm's task still misses, base axes.
fn missing(arm: &Arm, now: &Pose, target: &Pose) -> [f64; 6] {
    let gap = pose_error(now, target);
    std::array::from_fn(|row| if arm.task().rows().contains(&row) { gap[row] } else { 0.0 })
}

fn largest(gap: &[f64; 6]) -> f64 {
    gap.iter().fold(0.0, |most: f64, v| if v.abs() <= most { most } else { v.abs() })
}

/// Holds of every step, however it ended.
fn holds(stand: &Stand, target: &Pose, step: &Step) {
    let Stand { arm, carried, q } = *stand;
    for (j, joint) in arm.joints().iter().enumerate() {
        assert!(step.q[j] >= joint.range.low.min(q[j]) && step.q[j] <= joint.range.high.max(q[j]), "joint {j} out of range");
        let most = if joint.kind == JointKind::Prismatic { MOST_SLIDE } else { MOST_TURN };
        assert!((step.q[j] - q[j]).abs() <= most, "joint {j} moved too far");
    }
    let told = missing(arm, &tcp(arm, carried, &step.q), target);
    for (row, gap) in told.iter().enumerate() {
        assert!((gap - step.missing[row]).abs() <= LANDED, "row {row}: {gap}, told {}", step.missing[row]);
    }
    if step.damping == 0.0 && step.stop.is_none() {
        assert!(largest(&told) <= LANDED, "missed by {told:?}");
        assert!((step.done - 1.0).abs() <= 1e-6, "{}", step.done);
    }
}

#[test]
fn every_step_lands_on_what_was_asked_or_tells_why_not() {
    let mut draw = Draw(11);
    let (mut landed, mut all) = (0, 0);
    for family in FAMILIES {
        for _ in 0..12 {
            let arm = arm(family, &mut draw);
            let carried = if arm.task().is_whole() { carried(&mut draw) } else { Carried::nothing() };
            for direction in Direction::ALL {
                for size in [1e-4, 1e-2, 5e-2] {
                    let stand = Stand { arm: &arm, carried: &carried, q: posture(&arm, &mut draw) };
                    let from = tcp(&arm, &carried, &stand.q);
                    let system = if draw.unit() < 0.5 { from } else { Pose::identity() };
                    let by = if draw.unit() < 0.5 { size } else { -size };
                    match cartesian_step(&stand, &direction.twist(&system), by) {
                        Ok(step) => {
                            all += 1;
                            landed += usize::from(step.damping == 0.0 && step.stop.is_none());
                            holds(&stand, &asked(&from, &system, direction, by), &step);
                        }
                        Err(refused) => {
                            assert_eq!(refused, Refused::NotInTask);
                            assert!(!arm.task().is_whole());
                        }
                    }
                }
            }
        }
    }
    assert!(all > 700 && landed * 2 > all, "{landed} of {all} landed");
}

#[test]
fn near_singular_postures_steps_are_damped_and_tell_truly_what_is_missing() {
    let mut draw = Draw(12);
    let (mut damped, mut short) = (0, 0);
    for _ in 0..30 {
        let arm = arm(Family::SphericalWrist, &mut draw);
        let carried = carried(&mut draw);
        for direction in Direction::ALL {
            let mut q = posture(&arm, &mut draw);
            // The wrist axes in line, or nearly.
            q[4] = draw.between(-0.02, 0.02);
            let stand = Stand { arm: &arm, carried: &carried, q };
            let from = tcp(&arm, &carried, &q);
            let by = draw.between(0.005, 0.05);
            let step = cartesian_step(&stand, &direction.twist(&from), by).expect("six joints");
            let target = asked(&from, &from, direction, by);
            holds(&stand, &target, &step);
            damped += usize::from(step.damping > 0.0);
            short += usize::from(largest(&step.missing) > LANDED);
            assert_eq!(step.damping > 0.0, step.smallest < DAMPED_BELOW);
        }
    }
    assert!(damped > 150 && short > 20, "{damped} damped, {short} fell short");
}

#[test]
fn a_stretched_arm_does_not_jump() {
    let mut draw = Draw(13);
    for _ in 0..20 {
        let arm = arm(Family::SphericalWrist, &mut draw);
        let carried = Carried::nothing();
        let mut q = posture(&arm, &mut draw);
        // Outwards until it goes no farther.
        for _ in 0..80 {
            let stand = Stand { arm: &arm, carried: &carried, q };
            let from = tcp(&arm, &carried, &q);
            let step = cartesian_step(&stand, &Direction::Along(0).twist(&Pose::identity()), 0.05).expect("six joints");
            holds(&stand, &asked(&from, &Pose::identity(), Direction::Along(0), 0.05), &step);
            let now = tcp(&arm, &carried, &step.q);
            assert!((now.at - from.at).norm() <= 0.1 + LANDED, "jumped {} m", (now.at - from.at).norm());
            q = step.q;
        }
    }
}

#[test]
fn of_a_redundant_arm_the_least_motion_is_taken() {
    let mut draw = Draw(14);
    let mut seen = 0;
    for _ in 0..20 {
        let arm = arm(Family::Seven, &mut draw);
        let carried = Carried::nothing();
        let q = posture(&arm, &mut draw);
        let stand = Stand { arm: &arm, carried: &carried, q };
        let readings = Readings::at(&stand, &V3::zeros());
        if readings.smallest < 2.0 * DAMPED_BELOW {
            continue;
        }
        let by = 1e-6;
        let step = cartesian_step(&stand, &Direction::Along(1).twist(&Pose::identity()), by).expect("seven joints");
        // Second route: of all motions with the same twist, the one square to the null space in the rates' measure.
        let null = elbowroom::kinematics::null_rows(&readings.jacobian, arm.task(), arm.joints());
        let motion = step.q.zip(&q, |a, b| a - b);
        let along: f64 = null[0].iter().zip(motion.iter()).map(|(a, b)| a * b).sum();
        assert!(along.abs() <= 1e-4 * motion.largest(), "{along} of {}", motion.largest());
        seen += 1;
    }
    assert!(seen > 5, "{seen}");
}

#[test]
fn a_joint_stops_exactly_at_its_range_end() {
    let mut draw = Draw(15);
    let arm = arm(Family::FourSlide, &mut draw);
    let q = posture(&arm, &mut draw);
    for (joint, data) in arm.joints().iter().enumerate() {
        let (up, stop) = joint_step(&arm, &q, joint, 100.0);
        assert_eq!((up[joint], stop), (data.range.high, Some(Stop::RangeEnd { joint, high: true })));
        let (down, stop) = joint_step(&arm, &up, joint, -100.0);
        assert_eq!((down[joint], stop), (data.range.low, Some(Stop::RangeEnd { joint, high: false })));
        let (back, stop) = joint_step(&arm, &down, joint, 0.01);
        assert_eq!((back[joint], stop), (data.range.low + 0.01, None));
        assert!(matches!(joint_to(&arm, &q, joint, data.range.high + 0.01), Err(Refused::BeyondRange { .. })));
        assert!(joint_to(&arm, &q, joint, f64::NAN).is_err());
        assert_eq!(joint_to(&arm, &q, joint, data.range.high).expect("in range")[joint], data.range.high);
    }
}

#[test]
fn a_range_end_stops_a_step_of_the_tcp_on_its_way() {
    let mut draw = Draw(16);
    let mut stopped = 0;
    for _ in 0..60 {
        let arm = arm(Family::OffsetWrist, &mut draw);
        let carried = carried(&mut draw);
        let mut q = posture(&arm, &mut draw);
        let joint = (draw.unit() * 6.0) as usize;
        q[joint] = arm.joints()[joint].range.high - 0.002;
        let stand = Stand { arm: &arm, carried: &carried, q };
        let from = tcp(&arm, &carried, &q);
        for by in [0.05, -0.05] {
            let step = cartesian_step(&stand, &Direction::Along(2).twist(&from), by).expect("six joints");
            holds(&stand, &asked(&from, &from, Direction::Along(2), by), &step);
            if let (Some(Stop::RangeEnd { joint: told, high: true }), true) = (step.stop, step.damping == 0.0) {
                assert_eq!(told, joint);
                assert!((step.q[joint] - arm.joints()[joint].range.high).abs() < LANDED, "not at the end");
                // It stands on the line that it was asked to follow.
                let on_line = asked(&from, &from, Direction::Along(2), by * step.done);
                assert!(largest(&missing(&arm, &tcp(&arm, &carried, &step.q), &on_line)) <= 1e-8);
                stopped += 1;
            }
        }
    }
    assert!(stopped > 15, "{stopped}");
}

#[test]
fn coordinates_typed_are_where_the_tcp_is_then() {
    let mut draw = Draw(17);
    for _ in 0..20 {
        let arm = arm(Family::SphericalWrist, &mut draw);
        let carried = carried(&mut draw);
        let stand = Stand { arm: &arm, carried: &carried, q: posture(&arm, &mut draw) };
        let system = Pose { axes: turn_about(&draw.direction(), 0.7), at: draw.direction() };
        let mut wanted = coordinates(&system, &tcp(&arm, &carried, &stand.q));
        wanted[0] += 0.01;
        let target = pose_from(&system, wanted);
        match to_pose(&stand, &target) {
            Ok(q) => {
                let now = coordinates(&system, &tcp(&arm, &carried, &q));
                assert!(now.iter().zip(&wanted).all(|(a, b)| (a - b).abs() < 1e-7), "{now:?} {wanted:?}");
            }
            Err(refused) => assert!(!matches!(refused, Refused::NotInTask)),
        }
        let far = pose_from(&system, [90.0, 0.0, 0.0, 0.0, 0.0, 0.0]);
        assert!(matches!(to_pose(&stand, &far), Err(Refused::OutOfReach { missing }) if missing > 10.0));
    }
}

/// A recipe of joint waypoints with what is known of them.
fn taught(arm: &Arm, draw: &mut Draw) -> (elbowroom::program::Recipe, Vec<Option<Joints>>) {
    let at: Vec<Joints> = (0..3).map(|_| rounded(arm, &posture(arm, draw))).collect();
    let share = Some(elbowroom::units::Share::fraction(0.5));
    let joint = elbowroom::program::Arrive::Joint { share, accel_share: None };
    let waypoints = at
        .iter()
        .enumerate()
        .map(|(i, q)| random::waypoint(&format!("p{i}"), Taught::Joints(*q), (i > 0).then(|| joint.clone())))
        .collect();
    (random::recipe(waypoints), at.into_iter().map(Some).collect())
}

#[test]
fn what_is_recorded_is_where_the_arm_stands() {
    let mut draw = Draw(18);
    let mut posed = 0;
    for family in FAMILIES {
        for _ in 0..8 {
            let arm = arm(family, &mut draw);
            let (recipe, known) = taught(&arm, &mut draw);
            let q = known[1].expect("known").zip(&posture(&arm, &mut draw), |a, b| a + 0.05 * b);
            let q = Joints::from_fn(arm.len(), |j| q[j].clamp(arm.joints()[j].range.low, arm.joints()[j].range.high));
            let stood = Stood { arm: &arm, recipe: &recipe, q: &q, known: &known };
            for form in [Form::Joints, Form::Pose(Axes::Base), Form::Pose(Axes::World)] {
                let Ok(record) = insert_after(&stood, 1, &suggested_name(&recipe, 1), &form) else {
                    assert!(form != Form::Joints);
                    continue;
                };
                posed += usize::from(form != Form::Joints);
                let mut after = recipe.clone();
                let back = record.edit.apply(&mut after).expect("there");
                assert_eq!(after.faults(&arm), []);
                let judged = random::judged(elbowroom::arm::Arm::build(arm.data().clone()).expect("sound"), after.clone());
                let segment = judged.plan.arriving(2).expect("planned");
                let there = segment.end;
                assert!(there.zip(&record.q, |a, b| a - b).largest() < 1e-6, "{family:?} {form:?}");
                assert!(there.zip(&q, |a, b| a - b).largest() < 0.09);
                let gap = pose_error(&tcp(&arm, &Carried::nothing(), &there), &tcp(&arm, &Carried::nothing(), &q));
                // Half of 0.01 mm and 0.01 degrees, times what joints and axes add up to.
                assert!(largest(&missing_only(&arm, &gap)) < 2e-3, "{family:?} {form:?}: {gap:?}");
                back.apply(&mut after).expect("there");
                assert_eq!(after, recipe);
            }
        }
    }
    assert!(posed > 30, "{posed}");
}

fn missing_only(arm: &Arm, gap: &[f64; 6]) -> [f64; 6] {
    std::array::from_fn(|row| if arm.task().rows().contains(&row) { gap[row] } else { 0.0 })
}

#[test]
fn taught_again_keeps_how_it_arrives_and_inserted_goes_by_joint_move() {
    let mut draw = Draw(19);
    let arm = arm(Family::SphericalWrist, &mut draw);
    let (mut recipe, known) = taught(&arm, &mut draw);
    recipe.waypoints[1].arrive = Some(elbowroom::program::Arrive::Line(elbowroom::program::PathSpeed::default()));
    let q = known[2].expect("known");
    let stood = Stood { arm: &arm, recipe: &recipe, q: &q, known: &known };
    let record = teach_again(&stood, 1, &Form::Joints).expect("records");
    let Edit::Change { index: 1, waypoint } = &record.edit else { panic!("{:?}", record.edit) };
    assert_eq!(waypoint.arrive, recipe.waypoints[1].arrive);
    assert_eq!(waypoint.taught, Taught::Joints(q));
    assert_eq!(record.words, "waypoint 2 \"p1\" taught again as joint values");
    assert_eq!(suggested_name(&recipe, 1), "after p1");
    recipe.waypoints[2].name = "after p1".to_owned();
    assert_eq!(suggested_name(&recipe, 1), "after p1 2");
    let stood = Stood { arm: &arm, recipe: &recipe, q: &q, known: &known };
    assert!(insert_after(&stood, 1, "after p1", &Form::Joints).expect_err("taken").contains("already"));
    assert!(insert_after(&stood, 1, "  ", &Form::Joints).is_err());
    let beyond = Joints::from_fn(6, |_| 9.0);
    let stood = Stood { q: &beyond, ..stood };
    assert!(teach_again(&stood, 1, &Form::Joints).expect_err("beyond").contains("beyond its range"));
}

#[test]
fn values_are_rounded_to_hundredths_and_inwards_at_range_ends() {
    let mut draw = Draw(20);
    let arm = arm(Family::FourSlide, &mut draw);
    let q = Joints::from_fn(4, |j| arm.joints()[j].range.high);
    let rounded = rounded(&arm, &q);
    for (j, joint) in arm.joints().iter().enumerate() {
        let shown = joint.value(rounded[j]).shown();
        assert!((shown * 100.0 - (shown * 100.0).round()).abs() < 1e-6, "{shown}");
        assert!(joint.range.to_end(rounded[j]) >= -1e-12 && (rounded[j] - q[j]).abs() < 2e-4);
    }
}

//! Forward kinematics, Jacobians, singular values and inverse kinematics against published values. "From memory" marks what was
//! recalled from the source and then worked out anew.

mod stand;

use elbowroom::arm::{JointKind, Joints, MAX_JOINTS, TaskRow};
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::{Lu, Reached, condition, invert, reach, singular_values, speed_left, stacked};
use stand::screws::ScrewArm;
use stand::{
    all_near, arm, arm_with_length, degrees, determinant, jacobian, manipulability, near, poses_near, research_arm, sliding,
    turning,
};

/// The package prints eight digits behind the point.
const PRINTED: f64 = 5e-9;

const PLANE: [TaskRow; 2] = [TaskRow::X, TaskRow::Y];
const POINT: [TaskRow; 3] = [TaskRow::X, TaskRow::Y, TaskRow::Z];
const TURNS: [TaskRow; 3] = [TaskRow::TurnX, TaskRow::TurnY, TaskRow::TurnZ];

/// Joint rates that yield what the task's rows ask for.
fn rates_for(arm: &elbowroom::arm::Arm, tcp: &Pose, q: &[f64], wanted: &[f64]) -> Vec<f64> {
    let lu = Lu::of(stacked(&jacobian(arm, tcp, q), arm.task(), &[]), arm.len());
    let mut b = [0.0; MAX_JOINTS];
    b[..wanted.len()].copy_from_slice(wanted);
    lu.solve(&b)[..arm.len()].to_vec()
}

fn singular(arm: &elbowroom::arm::Arm, q: &[f64]) -> [f64; 6] {
    singular_values(&jacobian(arm, &Pose::identity(), q).scaled_rows(arm.task(), arm.characteristic_length().m))
}

/// Docstring examples of the PyPI package `modern-robotics` 1.1.1, companion of Lynch & Park, *Modern Robotics*, CUP 2017. Its
/// screws have a pitch, which stands here as a sliding joint that moves with the turning one.
#[test]
fn jacobians_in_the_space_and_in_the_body_frame_are_those_printed_for_four_screws() {
    let values = [0.2, 1.1, 0.1, 1.2];
    let screws = [
        [0.0, 0.0, 1.0, 0.0, 0.2, 0.2],
        [1.0, 0.0, 0.0, 2.0, 0.0, 3.0],
        [0.0, 1.0, 0.0, 0.0, 2.0, 1.0],
        [1.0, 0.0, 0.0, 0.2, 0.3, 0.4],
    ];
    // `JacobianSpace`, rows as printed.
    let printed = [
        [0.0, 0.980_066_58, -0.090_115_64, 0.957_494_26],
        [0.0, 0.198_669_33, 0.444_554_4, 0.284_875_57],
        [1.0, 0.0, 0.891_207_36, -0.045_284_05],
        [0.0, 1.952_186_38, -2.216_352_16, -0.511_615_37],
        [0.2, 0.436_541_32, -2.437_125_73, 2.775_357_13],
        [0.2, 2.960_266_13, 3.235_730_65, 2.225_124_43],
    ];
    let chain = ScrewArm::of(&screws, &Pose::identity(), &[], &[]);
    let columns = chain.jacobian(&values, &V3::zeros());
    for (i, row) in printed.iter().enumerate() {
        let ours: Vec<f64> = columns.iter().map(|column| column[i]).collect();
        assert!(all_near(&ours, row, PRINTED), "space row {i}: {ours:?}");
    }
    // `JacobianBody`: the same screws in the frame of the end, which stands in the base at values 0.
    let printed = [
        [-0.045_284_05, 0.995_004_17, 0.0, 1.0],
        [0.743_593_13, 0.093_048_65, 0.362_357_75, 0.0],
        [-0.667_097_16, 0.036_175_41, -0.932_039_09, 0.0],
        [2.325_860_47, 1.668_09, 0.564_108_31, 0.2],
        [-1.443_211_67, 2.945_612_75, 1.433_065_21, 0.3],
        [-2.066_395_65, 1.828_817_22, -1.588_686_28, 0.4],
    ];
    let end = chain.end(&values);
    let columns = chain.jacobian(&values, &end.at);
    for (j, column) in columns.iter().enumerate() {
        let turn = end.axes.transpose() * V3::new(column[0], column[1], column[2]);
        let moving = end.axes.transpose() * V3::new(column[3], column[4], column[5]);
        let ours = [turn.x, turn.y, turn.z, moving.x, moving.y, moving.z];
        assert!(all_near(&ours, &printed.map(|row| row[j]), PRINTED), "body column {j}: {ours:?}");
    }
}

/// The arm of `FKinSpace`, `FKinBody`, `IKinSpace`: a turn, a slide and a screw of pitch 0.1.
fn turn_slide_screw() -> ScrewArm {
    let screws = [[0.0, 0.0, 1.0, 4.0, 0.0, 0.0], [0.0, 0.0, 0.0, 0.0, 1.0, 0.0], [0.0, 0.0, -1.0, -6.0, 0.0, -0.1]];
    let end = Pose { axes: M3::from_diagonal(&V3::new(-1.0, 1.0, -1.0)), at: V3::new(0.0, 6.0, 2.0) };
    ScrewArm::of(&screws, &end, &[], &[TaskRow::X, TaskRow::Y, TaskRow::Z, TaskRow::TurnZ])
}

/// Rotation of the end as those examples print it.
fn printed_axes() -> M3 {
    M3::new(0.0, 1.0, 0.0, 1.0, 0.0, 0.0, 0.0, 0.0, -1.0)
}

/// `FKinSpace` and `FKinBody` of the same package; they print one pose.
#[test]
fn the_end_of_a_turn_a_slide_and_a_screw_stands_where_the_package_prints_it() {
    let pi = std::f64::consts::PI;
    let end = turn_slide_screw().end(&[pi / 2.0, 3.0, pi]);
    assert!(poses_near(&end, &Pose { axes: printed_axes(), at: V3::new(-5.0, 4.0, 1.685_840_73) }, PRINTED), "{end:?}");
}

/// `IKinSpace` and `IKinBody` of the same package stop within 0.01 rad and 0.001 m of the pose, so their printed values may be
/// off by that. Ours is exact, its slide free of the screw.
#[test]
fn inverse_kinematics_finds_the_values_that_the_package_prints_within_its_own_tolerance() {
    let chain = turn_slide_screw();
    let target = Pose { axes: printed_axes(), at: V3::new(-5.0, 4.0, 1.6858) };
    let Reached::Yes { q, .. } = reach(&chain.arm, &chain.tcp, &target, &chain.q(&[1.5, 2.5, 3.0])) else { panic!("in reach") };
    for printed in [[1.570_737_83, 2.999_663_84, 3.141_534_2], [1.570_738_19, 2.999_667, 3.141_539_13]] {
        assert!(all_near(&q[..3], &printed, 1e-3), "{q:?}");
        assert!(near(q[3], 0.1 * printed[2], 1e-3), "{q:?}");
    }
    // By hand: z = 2 - slide.
    assert!(near(q[3], 2.0 - 1.6858, 1e-9) && near(q[1], 3.0, 1e-9), "{q:?}");
}

fn two_links(l1: f64, l2: f64) -> elbowroom::arm::Arm {
    arm(vec![turning(l1, 0.0, 0.0), turning(l2, 0.0, 0.0)], &PLANE)
}

/// Formula of Craig, *Introduction to Robotics*, 3rd ed., Ex. 5.5, from memory: q1' = c12 / (l1 s2), q2' = -c1 / (l2 s2) - c12 / (l1 s2).
#[test]
fn two_links_move_their_tip_along_x_at_the_rates_of_the_closed_form() {
    let rates = rates_for(&two_links(0.5, 0.5), &Pose::identity(), &degrees(&[10.0, 90.0]), &[1.0, 0.0]);
    assert!(all_near(&rates, &[-0.347_296, -1.622_319], 5e-7), "{rates:?}");
    let (c1, c12) = (10f64.to_radians().cos(), 100f64.to_radians().cos());
    assert!(all_near(&rates, &[c12 / 0.5, -c1 / 0.5 - c12 / 0.5], 1e-14), "{rates:?}");
}

/// Siciliano et al., *Robotics*, Springer 2009, and Spong et al., *Robot Modeling and Control*, ch. 4, from memory.
#[test]
fn determinants_of_the_textbook_arms_are_their_closed_forms() {
    let spherical = arm(vec![turning(0.0, -90.0, 0.0), turning(0.0, 90.0, 0.37), sliding(0.0, 0.0, 0.0)], &POINT);
    let cylindrical = arm(vec![turning(0.0, 0.0, 0.3), sliding(0.0, -90.0, 0.0), sliding(0.0, 0.0, 0.0)], &POINT);
    let selective = arm(
        vec![turning(0.4, 0.0, 0.0), turning(0.3, 180.0, 0.0), sliding(0.0, 0.0, 0.0), turning(0.0, 0.0, 0.1)],
        &[TaskRow::X, TaskRow::Y, TaskRow::Z, TaskRow::TurnZ],
    );
    let wrist = arm(vec![turning(0.0, -90.0, 0.0), turning(0.0, 90.0, 0.0), turning(0.0, 0.0, 0.1)], &TURNS);
    let elbow = arm(vec![turning(0.0, 90.0, 0.5), turning(0.7, 0.0, 0.0), turning(0.45, 0.0, 0.0)], &POINT);
    let mut sequence = stand::chance::Sequence(1);
    for _ in 0..200 {
        let q = [3.0, 3.0, 0.9, 3.0].map(|most| most * sequence.next());
        let turns = [3.0, 3.0, 3.0].map(|most| most * sequence.next());
        // Spherical arm with a shoulder offset: d3² |sin q2|.
        assert!(near(determinant(&spherical, &q[..3]).abs(), q[2] * q[2] * q[1].sin().abs(), 1e-14), "{q:?}");
        // Cylindrical arm: d3.
        assert!(near(determinant(&cylindrical, &q[..3]).abs(), q[2].abs(), 1e-14), "{q:?}");
        // Two parallel turns and a vertical slide: a1 a2 |sin q2|.
        assert!(near(determinant(&selective, &q).abs(), 0.4 * 0.3 * q[1].sin().abs(), 1e-14), "{q:?}");
        // Spherical wrist: |sin q5|.
        assert!(near(determinant(&wrist, &turns).abs(), turns[1].sin().abs(), 1e-14), "{turns:?}");
        // Elbow arm: a2 a3 |s3| |a2 c2 + a3 c23|.
        let reach = 0.7 * turns[1].cos() + 0.45 * (turns[1] + turns[2]).cos();
        let closed = 0.7 * 0.45 * turns[2].sin().abs() * reach.abs();
        assert!(near(determinant(&elbow, &turns).abs(), closed, 1e-14), "{turns:?}");
    }
}

/// Yoshikawa, IJRR 4(2), 1985, from memory: l1 l2 |sin q2|, most at 90 degrees.
#[test]
fn two_links_are_most_manipulable_at_a_right_angle() {
    let two = two_links(0.6, 0.4);
    for degree in -180..=180 {
        let q = degrees(&[33.0, f64::from(degree)]);
        assert!(near(manipulability(&two, &q, 0..2), 0.6 * 0.4 * q[1].sin().abs(), 1e-8), "{degree}");
        assert!(manipulability(&two, &q, 0..2) <= manipulability(&two, &degrees(&[33.0, 90.0]), 0..2), "{degree}");
    }
}

/// Salisbury & Craig, IJRR 1(1), 1982, from memory: l1 = sqrt2 l2, q2 = +-135 degrees make both singular values l2.
#[test]
fn two_links_are_isotropic_where_the_first_is_longer_by_the_root_of_two() {
    let two = two_links(0.3 * 2f64.sqrt(), 0.3);
    for elbow in [135.0, -135.0] {
        let values = singular(&two, &degrees(&[-71.0, elbow]));
        assert!(all_near(&values[..2], &[0.3, 0.3], 1e-14), "{values:?}");
        assert!(near(condition(&values, 2), 1.0, 1e-13));
    }
}

/// Angeles, *Fundamentals of Robotic Mechanical Systems*, from memory: a1 = a2 = a, a3 = a/sqrt3, q2 = 120, q3 = 150 degrees, and the
/// characteristic length sqrt6 a/6.
#[test]
fn three_planar_links_are_isotropic_with_their_own_characteristic_length() {
    let a = 0.8;
    let links = vec![turning(a, 0.0, 0.0), turning(a, 0.0, 0.0), turning(a / 3f64.sqrt(), 0.0, 0.0)];
    let rows = [TaskRow::X, TaskRow::Y, TaskRow::TurnZ];
    let q = degrees(&[17.0, 120.0, 150.0]);
    let own = singular(&arm_with_length(links.clone(), &rows, 6f64.sqrt() * a / 6.0), &q);
    assert!(near(condition(&own, 3), 1.0, 1e-13), "{own:?}");
    // With any other length it is not, so the length is really used.
    assert!(condition(&singular(&arm_with_length(links, &rows, a), &q), 3) > 2.0);
}

/// The demo arm's axes (classical parameters of `recipes/arms/six-axis-12kg.toml`), an arm of our own.
fn six_axes() -> elbowroom::arm::Arm {
    arm(
        vec![
            turning(0.155, -90.0, 0.43),
            turning(0.595, 0.0, 0.0),
            turning(0.115, -90.0, 0.0),
            turning(0.0, 90.0, 0.645),
            turning(0.0, -90.0, 0.0),
            turning(0.0, 0.0, 0.095),
        ],
        &[],
    )
}

/// The closed form of a spherical wrist: a turn w across the lost direction asks q4' = w / tan q5, q6' = -w / sin q5.
#[test]
fn a_turn_across_the_lost_direction_asks_the_wrist_what_its_closed_form_says() {
    let six = six_axes();
    let centre = Pose { axes: M3::identity(), at: V3::new(0.0, 0.0, -0.095) };
    let w = 0.5;
    for q5 in [2.0, 6.58, -6.58, 14.0, 60.0, -120.0f64] {
        let q = degrees(&[20.0, -50.0, 15.0, 40.0, q5, -25.0]);
        let posture = elbowroom::kinematics::Posture::at(six.chain(), &q);
        // The lost direction is square to the first two wrist axes; this sense of it makes the closed form's signs.
        let lost = posture.axis(3).cross(&posture.axis(4)) * w;
        let rates = rates_for(&six, &centre, &q, &[0.0, 0.0, 0.0, lost.x, lost.y, lost.z]);
        let q5 = q5.to_radians();
        let wanted = [0.0, 0.0, 0.0, w / q5.tan(), 0.0, -w / q5.sin()];
        assert!(all_near(&rates, &wanted, 1e-11 / q5.sin().abs()), "{rates:?} {wanted:?}");
    }
}

/// Least |q5| = asin(w / limit): 0.5 rad/s and 250 deg/s give 6.58 degrees (closed form).
#[test]
fn a_wrist_at_6_58_degrees_leaves_half_a_radian_per_second_at_250_degrees_per_second() {
    let limit = 250f64.to_radians();
    let least = (0.5 / limit).asin();
    assert!(near(least.to_degrees(), 6.58, 5e-3));
    let mut data = stand::arm_data(six_axes().joints().to_vec(), &[]);
    for joint in &mut data.joints {
        joint.rate = 100.0;
    }
    data.joints[5].rate = limit;
    let six = elbowroom::arm::Arm::build(data).expect("an arm");
    let centre = Pose { axes: M3::identity(), at: V3::new(0.0, 0.0, -0.095) };
    let q = Joints::from_slice(&[0.3, -0.9, 0.2, 0.7, least, -0.4]);
    let lu = Lu::of(stacked(&jacobian(&six, &centre, &q), six.task(), &[]), 6);
    let left = speed_left(&invert(&lu), six.task(), six.joints());
    assert!(near(left.turning, 0.5, 1e-12), "{left:?}");
}

/// Parameters of Corke & Armstrong-Helouvry, ICRA 1994, whose table the stand quotes; the figures follow from them and were worked out
/// by two routes (ours and 4 x 4 products).
#[test]
fn the_research_arm_has_the_manipulability_that_its_parameters_yield() {
    let six = research_arm();
    let q = degrees(&[0.0, 45.0, 180.0, 0.0, 45.0, 0.0]);
    assert!(six.joints().iter().all(|joint| joint.kind == JointKind::Revolute));
    assert!(near(manipulability(&six, &q, 0..6), 0.0786, 5e-5), "{}", manipulability(&six, &q, 0..6));
    assert!(near(manipulability(&six, &q, 0..3), 0.111_181, 5e-7), "{}", manipulability(&six, &q, 0..3));
    assert!(near(manipulability(&six, &q, 3..6), 2.449_49, 5e-6), "{}", manipulability(&six, &q, 3..6));
    // The same from determinant and singular values, where the arm has as many joints as rows.
    let product: f64 = singular(&six, &q).iter().product();
    assert!(near(product, determinant(&six, &q).abs(), 1e-14) && near(product, manipulability(&six, &q, 0..6), 1e-12));
}

//! Paths and speed laws against published values. "From memory" marks what was recalled from the source and then worked out anew.

mod stand;

use elbowroom::arm::{Arm, Joints, TaskRow};
use elbowroom::geometry::{M3, Pose, Rotation, V3};
use elbowroom::motion::{Law, Path, Plan, Side};
use elbowroom::program::{Acceptance, Arrive, Recipe, Taught, Usual, Waypoint};
use elbowroom::units::{Seconds, Share};
use stand::{all_near, arm_data, degrees, near, poses_near, turning};

/// Biagiotti & Melchiorri, *Trajectory Planning for Automatic Machines and Robots*, Springer 2008, ch. 3: h = 10, v = 5, a = 10 takes
/// 2.5 s; h = 2 never reaches v and takes 0.894427 s.
#[test]
fn trapezoids_last_as_long_as_the_handbook_says() {
    let long = Law::trapezoid(5.0 / 10.0, 10.0 / 10.0);
    assert!(near(long.duration(), 2.5, 1e-12) && near(long.top_rate() * 10.0, 5.0, 1e-12));
    let short = Law::trapezoid(5.0 / 2.0, 10.0 / 2.0);
    assert!(near(short.duration(), 0.894_427, 5e-7));
    // By hand: it tops at sqrt(a h).
    assert!(near(short.top_rate() * 2.0, 20f64.sqrt(), 1e-12));
}

/// Siciliano et al., *Robotics*, Springer 2009, ch. 4, from memory: 0 to pi in 1 s at 6 pi rad/s²: blends of .211325 s, cruise at 3.98338
/// rad/s.
#[test]
fn a_trapezoid_from_0_to_pi_in_one_second_has_the_textbook_blends() {
    let pi = std::f64::consts::PI;
    // By hand: tc = (1 - sqrt(1 - 4 h / a)) / 2.
    let blend = 0.5 * (1.0 - (1.0 - 4.0 / 6.0f64).sqrt());
    assert!(near(blend, 0.211_325, 5e-7));
    let law = Law::trapezoid(6.0 * blend, 6.0);
    assert!(near(law.pieces()[0].duration, 0.211_325, 5e-7));
    assert!(near(law.top_rate() * pi, 3.983_38, 5e-6));
    assert!(near(law.duration(), 1.0, 1e-12));
}

/// Three joints with the rates and accelerations of the synchronised move below.
fn three_joints() -> Arm {
    let mut data = arm_data(vec![turning(0.3, 0.0, 0.0); 3], &[TaskRow::X, TaskRow::Y, TaskRow::TurnZ]);
    for (joint, (rate, accel)) in data.joints.iter_mut().zip([(180f64, 360f64), (120.0, 300.0), (60.0, 120.0)]) {
        joint.rate = rate.to_radians();
        joint.accel = accel.to_radians();
    }
    Arm::build(data).expect("an arm")
}

fn at(joints: Joints, arrive: Option<Arrive>) -> Waypoint {
    Waypoint {
        name: if arrive.is_none() { "start" } else { "end" }.into(),
        taught: Taught::Joints(joints),
        shown: None,
        arrive,
        tool: None,
        fly_by: None,
        dwell: Seconds::s(0.0),
        then: None,
        push: None,
    }
}

fn joint_move(by: &[f64], share: f64, accel_share: f64) -> Law {
    let arrive = Arrive::Joint { share: Some(Share::percent(share)), accel_share: Some(Share::percent(accel_share)) };
    let recipe = Recipe {
        name: "one move".into(),
        arm: String::new(),
        mount: Pose::identity(),
        acceptance: Acceptance::default(),
        usual: Usual::default(),
        tools: vec![],
        loads: vec![],
        frames: vec![],
        carrying: None,
        repeat: elbowroom::program::Repeat::default(),
        waypoints: vec![at(degrees(&[5.0, 10.0, -20.0]), None), {
            let end = degrees(&[5.0, 10.0, -20.0]).zip(&degrees(by), |a, b| a + b);
            at(end, Some(arrive))
        }],
    };
    Plan::of(&three_joints(), &recipe).segments[0].law
}

/// Formula (T = h/v + v/a, or 2 sqrt(h/a) where v is not reached) for h = (90, -30, 10) degrees, v = (180, 120, 60), a = (360, 300, 120).
#[test]
fn joints_that_start_and_stop_together_take_as_long_as_the_slowest_alone() {
    for (by, seconds) in [
        ([90.0, 0.0, 0.0], 1.0),
        ([0.0, -30.0, 0.0], 0.632_456),
        ([0.0, 0.0, 10.0], 0.577_350),
        ([90.0, -30.0, 10.0], 1.0),
        ([0.0, -30.0, 10.0], 0.632_456),
    ] {
        assert!(near(joint_move(&by, 100.0, 100.0).duration(), seconds, 5e-7), "{by:?}");
    }
    // Half the rate and a quarter of the acceleration: the same motion in twice the time.
    assert!(near(joint_move(&[90.0, -30.0, 10.0], 50.0, 25.0).duration(), 2.0, 1e-12));
    // No way, no time.
    assert!(near(joint_move(&[0.0, 0.0, 0.0], 100.0, 100.0).duration(), 0.0, 0.0));
}

/// Law: of joints that move together, none leaves its rate or its acceleration, and one of them is at each.
#[test]
fn joints_that_move_together_keep_their_limits_and_use_them() {
    // Joint 1 leads in rate, joint 2 in acceleration.
    let by = [90.0, -80.0, 10.0];
    let law = joint_move(&by, 100.0, 100.0);
    let arm = three_joints();
    let (mut rate, mut accel) = (0.0f64, 0.0f64);
    for step in 0..=1000 {
        let now = law.at(law.duration() * f64::from(step) / 1000.0, Side::After);
        for (joint, by) in arm.joints().iter().zip(by.map(f64::to_radians)) {
            rate = rate.max((now[1] * by).abs() / joint.rate);
            accel = accel.max((now[2] * by).abs() / joint.accel);
        }
    }
    assert!(near(rate, 1.0, 1e-9) && near(accel, 1.0, 1e-9), "{rate} {accel}");
}

/// `CartesianTrajectory` of the PyPI package `modern-robotics` 1.1.1, companion of Lynch & Park, *Modern Robotics*, CUP 2017: a
/// straight line with the orientation decoupled, from (1, 0, 1) to (0.1, 0, 4.1) with 120 degrees about (1, 1, 1), by a fifth-order time
/// law that ours does not have, so its fractions at 0, 5/3, 10/3, 5 s are put in. The docstring prints three digits.
#[test]
fn a_line_turns_evenly_about_one_axis_as_the_package_prints_it() {
    let start = Pose { axes: M3::identity(), at: V3::new(1.0, 0.0, 1.0) };
    let end = Pose { axes: M3::new(0.0, 0.0, 1.0, 1.0, 0.0, 0.0, 0.0, 1.0, 0.0), at: V3::new(0.1, 0.0, 4.1) };
    let path = Path::line(start, &end);
    assert!(near(path.turn().to_degrees(), 120.0, 1e-12));
    // By hand: |(-0.9, 0, 3.1)|.
    assert!(near(path.length(), 10.42f64.sqrt(), 1e-12));
    let printed = [
        (0.0, start),
        (
            1.0 / 3.0,
            Pose {
                axes: M3::new(0.937, -0.214, 0.277, 0.277, 0.937, -0.214, -0.214, 0.277, 0.937),
                at: V3::new(0.811, 0.0, 1.651),
            },
        ),
        (
            2.0 / 3.0,
            Pose {
                axes: M3::new(0.277, -0.214, 0.937, 0.937, 0.277, -0.214, -0.214, 0.937, 0.277),
                at: V3::new(0.289, 0.0, 3.449),
            },
        ),
        (1.0, end),
    ];
    for (time, pose) in printed {
        // `QuinticTimeScaling`: 10 t³ - 15 t⁴ + 6 t⁵ of the share of time.
        let u = time * time * time * (10.0 - time * (15.0 - 6.0 * time));
        assert!(poses_near(&path.target(u).expect("a line").pose, &pose, 5e-4), "at {time} of the time");
    }
}

/// Shoemake, SIGGRAPH 1985: a third of the way to 90 degrees about z is w .965926, z .258819, whatever the quaternion's sign.
#[test]
fn a_third_of_a_quarter_turn_is_thirty_degrees_whatever_the_sign() {
    let half = 0.5f64.sqrt();
    for sign in [1.0, -1.0] {
        let end = Pose::new(V3::zeros(), Rotation::from_wxyz([sign * half, 0.0, 0.0, sign * half]).expect("unit"));
        let third = Path::line(Pose::identity(), &end).target(1.0 / 3.0).expect("a line");
        assert!(all_near(&third.pose.rotation().wxyz(), &[0.965_926, 0.0, 0.0, 0.258_819], 5e-7));
        assert!(all_near(third.turning.as_slice(), &[0.0, 0.0, std::f64::consts::FRAC_PI_2], 1e-12));
    }
}

/// Geometry: the circle through (1, 0, 0), (0, 1, 0), (0, 0, 1) m has radius .816497 m; the way over the second is 240 degrees, 3.420133 m.
#[test]
fn an_arc_through_the_unit_points_has_its_radius_sweep_and_length() {
    let still = |at: V3| Pose { axes: M3::identity(), at };
    let path = Path::arc(&still(V3::x()), &V3::y(), &still(V3::z()));
    let Path::Arc { arm, sweep, start, .. } = path else { panic!("an arc") };
    assert!(near(arm.norm(), 0.816_497, 5e-7) && near(sweep.to_degrees(), 240.0, 1e-10) && near(path.length(), 3.420_133, 5e-7));
    assert!(all_near(start.at.as_slice(), &[1.0 / 3.0; 3], 1e-14));
    // The short way back by the middle of the other side is 120 degrees.
    let middle = start.at + (start.at - V3::y());
    assert!(near(Path::arc(&still(V3::x()), &middle, &still(V3::z())).length(), 3.420_133 / 2.0, 5e-7));
    for step in 0..=100 {
        let target = path.target(f64::from(step) / 100.0).expect("an arc");
        assert!(near((target.pose.at - start.at).norm(), arm.norm(), 1e-14));
        assert!(near(target.pose.at.sum(), 1.0, 1e-14));
        assert!(near(target.velocity.norm(), path.length(), 1e-12));
    }
}

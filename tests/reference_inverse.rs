//! Inverse kinematics: how many branches there are, and how they belong together.

mod stand;

use elbowroom::arm::{Arm, Joints};
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::{Posture, every_branch, nearest_turn, pose_error};
use stand::{arm, near, research_arm, turning};

fn wrapped_deg(a: f64, b: f64) -> f64 {
    let gap = (a - b).to_degrees().rem_euclid(360.0);
    gap.min(360.0 - gap)
}

fn misses(arm: &Arm, target: &Pose, q: &Joints) -> f64 {
    pose_error(Posture::at(arm.chain(), q).flange(), target).iter().map(|e| e * e).sum::<f64>().sqrt()
}

/// The general six-joint arm of Manocha & Canny, "Efficient inverse kinematics for general 6R manipulators", IEEE T-RA 10(5), 1994,
/// Table III: a pose with 16 real solutions, the most that such an arm can have. The print has four digits; the pose here was worked
/// out to six.
#[test]
fn the_general_six_joint_arm_reaches_its_pose_in_sixteen_ways() {
    let a = [0.3, 1.0, 0.0, 1.5, 0.0, 0.0];
    let joints =
        (0..6).map(|j| turning(a[j], if j % 2 == 0 { 90.0 } else { 1.0 }, if j == 2 { 0.2 } else { 0.0 })).collect::<Vec<_>>();
    let six = arm(joints, &[]);
    let axes = M3::new(-0.760_117, -0.641_689, 0.102_262, 0.133_333, 0.0, 0.991_071, -0.635_959, 0.766_965, 0.085_558);
    // A matrix of six digits is no exact rotation: the nearest one stands for it.
    let svd = axes.svd(true, true);
    let axes = svd.u.expect("asked for") * svd.v_t.expect("asked for");
    let target = Pose { axes, at: V3::new(-1.140_175, 0.0, 0.0) };
    let branches = every_branch(&six, &Pose::identity(), &target, &Joints::zeros(6));
    assert!(branches.found.iter().all(|q| misses(&six, &target, q) <= 1e-9));
    assert_eq!(branches.found.len(), 16, "{:#?}", branches.found);
    let printed = [-96.28, -6.27, 179.96, 38.48, 52.55, -39.40f64].map(f64::to_radians);
    let nearest = branches
        .found
        .iter()
        .map(|q| q.iter().zip(printed).map(|(a, b)| wrapped_deg(*a, b)).fold(0.0, f64::max))
        .fold(f64::INFINITY, f64::min);
    assert!(near(nearest, 0.0, 0.02), "off by {nearest} degrees");
}

/// Craig, *Introduction to Robotics*, and Pieper: an arm with a spherical wrist reaches a pose in general in 8 ways, in pairs
/// (q4, q5, q6) and (q4 +- 180, -q5, q6 +- 180).
#[test]
fn an_arm_with_a_spherical_wrist_reaches_a_pose_in_eight_ways_and_in_pairs() {
    let six = research_arm();
    let mut sequence = stand::chance::Sequence(7);
    for round in 0..12 {
        // Postures away from the stretched arm and the straight wrist, where branches merge.
        let mut q = Joints::from_fn(6, |_| 2.5 * sequence.next());
        q[2] = 0.7 + 0.5 * sequence.next();
        q[4] = 1.2 + 0.5 * sequence.next();
        let target = *Posture::at(six.chain(), &q).flange();
        let branches = every_branch(&six, &Pose::identity(), &target, &Joints::zeros(6));
        assert!(branches.found.iter().all(|q| misses(&six, &target, q) <= 1e-9), "round {round}");
        assert_eq!(branches.found.len(), 8, "round {round}: {:#?}", branches.found);
        let turned = |a: &Joints, b: &Joints| {
            let over = [b[0], b[1], b[2], b[3] + std::f64::consts::PI, -b[4], b[5] + std::f64::consts::PI];
            a.iter().zip(over).all(|(a, b)| near(wrapped_deg(*a, b), 0.0, 1e-6))
        };
        let paired = branches.found.iter().all(|a| branches.found.iter().any(|b| turned(a, b)));
        assert!(paired, "round {round}: {:#?}", branches.found);
        let own = |b: &Joints| b.iter().zip(q.iter()).all(|(a, b)| near(wrapped_deg(*a, *b), 0.0, 1e-6));
        assert!(branches.found.iter().any(own), "round {round}: the posture itself is missing");
    }
}

/// Law: what is at the end of a range but for rounding stays there.
#[test]
fn a_joint_at_the_end_of_its_range_is_not_sent_a_turn_back_by_rounding() {
    let joint = turning(0.1, 0.0, 0.0);
    let pi = std::f64::consts::PI;
    for beyond in [0.0, 4.5e-16, 1e-12] {
        assert!(near(nearest_turn(&joint, pi + beyond, 3.0), pi, 1e-11));
        assert!(near(nearest_turn(&joint, -pi - beyond, 3.0), pi, 1e-11));
        assert!(near(nearest_turn(&joint, pi + beyond, -3.0), -pi, 1e-11));
    }
    // Farther beyond, the other end's side is right.
    assert!(near(nearest_turn(&joint, pi + 1e-3, 3.0), 1e-3 - pi, 1e-12));
}

/// A straight wrist makes endlessly many branches; the search still ends, with the nearest first.
#[test]
fn a_straight_wrist_comes_to_an_end() {
    let six = research_arm();
    let q = Joints::from_slice(&[0.3, 0.4, 0.9, 0.5, 0.0, -0.2]);
    let target = *Posture::at(six.chain(), &q).flange();
    let branches = every_branch(&six, &Pose::identity(), &target, &q);
    // The straight one as it stands, and three other postures of the first joints, each with its wrist either way.
    assert!((7..400).contains(&branches.found.len()), "{}", branches.found.len());
    assert!(branches.found[0].iter().zip(q.iter()).all(|(a, b)| near(*a, *b, 1e-12)));
}

//! Holding torque against published values. "From memory" marks what was recalled from the source and then worked out anew.

mod stand;

use elbowroom::arm::{Joints, TaskRow};
use elbowroom::dynamics::{Wrench, gravity_in_base, holding_torque};
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::Posture;
use elbowroom::program::Carried;
use elbowroom::units::STANDARD_GRAVITY;
use stand::screws::ScrewArm;
use stand::{all_near, arm, degrees, near, research_arm, turning, weighing};

/// The package prints eight digits behind the point.
const PRINTED: f64 = 5e-9;

fn moved(at: [f64; 3]) -> Pose {
    Pose { axes: M3::identity(), at: at.into() }
}

/// The three-link example of the PyPI package `modern-robotics` 1.1.1, companion of Lynch & Park, *Modern Robotics*, CUP 2017:
/// screws, link frames at joint values 0 (each with its centre of mass in its origin) and masses.
fn three_links() -> ScrewArm {
    let screws = [[1.0, 0.0, 1.0, 0.0, 1.0, 0.0], [0.0, 1.0, 0.0, -0.089, 0.0, 0.0], [0.0, 1.0, 0.0, -0.089, 0.0, 0.425]];
    let over = Pose { axes: M3::new(0.0, 0.0, 1.0, 0.0, 1.0, 0.0, -1.0, 0.0, 0.0), at: V3::new(0.28, 0.13585, 0.0) };
    let first = moved([0.0, 0.0, 0.089_159]);
    let second = first.then(&over);
    let third = second.then(&moved([0.0, -0.1197, 0.395]));
    let end = third.then(&moved([0.0, 0.0, 0.142_25]));
    ScrewArm::of(&screws, &end, &[(3.7, first.at), (8.393, second.at), (2.275, third.at)], &[TaskRow::X, TaskRow::Y, TaskRow::Z])
}

/// `GravityForces` and `EndEffectorForces` of that package. Its first screw has a direction of length sqrt2 and so belongs to no
/// joint of unit rate: the joint's value and torque are scaled.
#[test]
fn three_links_ask_the_forces_that_the_package_prints() {
    let chain = three_links();
    let (posture, tcp) = (chain.posture(&[0.1, 0.1, 0.1]), chain.end(&[0.1, 0.1, 0.1]));
    let carried = Carried { tcp: chain.tcp, ..Carried::nothing() };
    let gravity = V3::new(0.0, 0.0, -9.8);
    let weight = holding_torque(chain.arm.chain(), &posture, &carried, &gravity, None);
    let ours = chain.efforts(&weight);
    assert!(all_near(&ours, &[28.403_312_62, -37.640_948_17, -5.441_589_2], PRINTED), "{ours:?}");
    // Torque (1, 1, 1) and force (1, 1, 1) that the end exerts, in its own axes.
    let ones = tcp.axes * V3::new(1.0, 1.0, 1.0);
    let push = Wrench { force: ones, torque: ones };
    let pushed = holding_torque(chain.arm.chain(), &posture, &carried, &V3::zeros(), Some(&push));
    let ours = chain.efforts(&pushed);
    assert!(all_near(&ours, &[1.409_546_08, 1.857_714_97, 1.392_409], PRINTED), "{ours:?}");
}

/// Data of Siciliano et al., *Robotics*, Springer 2009, ch. 7, from memory: links of 1 m with centres in their middles, 50 kg each,
/// a motor of 5 kg at the elbow, g = 9.81 m/s².
#[test]
fn two_level_links_ask_what_the_textbook_data_yield() {
    // Link and motor together: 55 kg, centre (50 * 0.5 + 5 * 1) / 55 m from the shoulder, 1 m of which is the link's own length.
    let with_motor = (50.0 * 0.5 + 5.0) / 55.0 - 1.0;
    let two = arm(
        vec![
            weighing(turning(1.0, 0.0, 0.0), 55.0, [with_motor, 0.0, 0.0]),
            weighing(turning(1.0, 0.0, 0.0), 50.0, [-0.5, 0.0, 0.0]),
        ],
        &[TaskRow::X, TaskRow::Y],
    );
    let torque = |q: &[f64], gravity: V3| {
        holding_torque(two.chain(), &Posture::at(two.chain(), &degrees(q)), &Carried::nothing(), &gravity, None).to_vec()
    };
    let down = V3::new(0.0, -9.81, 0.0);
    assert!(all_near(&torque(&[0.0, 0.0], down), &[1030.05, 245.25], 1e-10));
    // By hand: upright nothing is asked; with the forearm folded back it relieves the shoulder.
    assert!(all_near(&torque(&[90.0, 0.0], down), &[0.0, 0.0], 1e-10));
    assert!(all_near(&torque(&[0.0, 180.0], down), &[9.81 * (30.0 + 50.0 * 0.5), -245.25], 1e-10));
    // On a level table nothing is asked either.
    assert!(all_near(&torque(&[20.0, 30.0], V3::new(0.0, 0.0, -9.81)), &[0.0, 0.0], 1e-10));
}

/// Parameters of Corke & Armstrong-Helouvry, ICRA 1994; the torques follow from them (also by 4 x 4 products and J_comᵀ m g, below).
#[test]
fn the_research_arm_asks_the_torques_that_its_parameters_yield() {
    let six = research_arm();
    let q = degrees(&[0.0, 45.0, 180.0, 0.0, 45.0, 0.0]);
    let torque = |q: &Joints, gravity: V3| {
        holding_torque(six.chain(), &Posture::at(six.chain(), q), &Carried::nothing(), &gravity, None).to_vec()
    };
    let ours = torque(&q, V3::new(0.0, 0.0, -9.81));
    assert!(all_near(&ours, &[0.0, 31.6399, 6.0351, 0.0, 0.0283, 0.0], 5e-5), "{ours:?}");
    // The other route: slope of the potential energy of the link masses whose places plain 4 x 4 products yield.
    let energy = |q: &Joints| -> f64 {
        let frames = stand::plain_frames(six.joints(), q);
        let height = |(frame, joint): (&nalgebra::Matrix4<f64>, &elbowroom::arm::Joint)| {
            let link = joint.link.expect("the stand gives masses");
            9.81 * link.mass * stand::pose_of(frame).point(&link.com).z
        };
        frames.iter().zip(six.joints()).map(height).sum()
    };
    for j in 0..6 {
        let shifted = |by: f64| {
            let mut q = q;
            q[j] += by;
            energy(&q)
        };
        let slope = (shifted(1e-5) - shifted(-1e-5)) / 2e-5;
        assert!(near(slope, ours[j], 1e-7), "joint {}: {slope} {}", j + 1, ours[j]);
    }
}

/// Standard gravity is 9.80665 m/s² by definition (3rd CGPM, 1901), and hangs along world -z whatever the mount.
#[test]
fn gravity_is_the_standard_one_and_turns_with_the_mount() {
    use elbowroom::geometry::Rotation;
    assert!(near(STANDARD_GRAVITY, 9.806_65, 0.0));
    let gravity = |rpy: [f64; 3]| gravity_in_base(&Pose::new(V3::new(1.0, 2.0, 3.0), Rotation::from_rpy_deg(rpy)));
    let g = STANDARD_GRAVITY;
    for (rpy, wanted) in [
        ([0.0, 0.0, 77.0], [0.0, 0.0, -g]),
        ([180.0, 0.0, 0.0], [0.0, 0.0, g]),
        // On a wall: the base's y points up after a roll of 90 degrees, its x down after a pitch of 90 degrees.
        ([90.0, 0.0, 0.0], [0.0, -g, 0.0]),
        ([0.0, 90.0, 0.0], [g, 0.0, 0.0]),
    ] {
        assert!(all_near(gravity(rpy).as_slice(), &wanted, 1e-14), "{rpy:?}");
    }
}

/// Law: a tool point 300 mm off an axis of 180 deg/s runs at 942.5 mm/s while the flange's origin stands still (geometry).
#[test]
fn a_tool_beside_the_axis_moves_where_the_flange_does_not() {
    let one = arm(vec![turning(0.0, 0.0, 0.1)], &[TaskRow::TurnZ]);
    let rate = [180f64.to_radians()];
    let speed = |tcp: [f64; 3]| {
        let [x, y, z, ..] = stand::jacobian(&one, &moved(tcp), &[0.4]).twist(&rate);
        V3::new(x, y, z).norm() * 1000.0
    };
    assert!(near(speed([0.3, 0.0, 0.2]), 942.5, 0.05));
    assert!(near(speed([0.0, 0.0, 0.0]), 0.0, 0.0));
}

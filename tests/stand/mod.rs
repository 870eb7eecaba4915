//! What the tests against the outside world stand on: arms made in few words, comparisons that no NaN passes, and forward
//! kinematics by plain 4 x 4 matrices, a second route that shares no code with the library.

#![allow(dead_code, reason = "every test target uses its own part of this module")]

pub mod chance;
pub mod screws;

use elbowroom::arm::{
    Arm, ArmData, Body, Convention, Flange, Grounds, Joint, JointKind, Joints, Placement, Range, Task, TaskRow, TorqueRating,
};
use elbowroom::geometry::{Pose, V3};
use elbowroom::kinematics::{Jacobian, Lu, Posture, stacked};
use nalgebra::{Matrix3, Matrix4};

/// Whether two numbers differ by at most `tolerance`; never where one of them is NaN.
pub fn near(a: f64, b: f64, tolerance: f64) -> bool {
    (a - b).abs() <= tolerance
}

/// Whether two lists have one length and are near in every place.
pub fn all_near(a: &[f64], b: &[f64], tolerance: f64) -> bool {
    a.len() == b.len() && a.iter().zip(b).all(|(a, b)| near(*a, *b, tolerance))
}

/// Whether two poses are near in every entry of axes (no unit) and origin (m).
pub fn poses_near(a: &Pose, b: &Pose, tolerance: f64) -> bool {
    all_near(a.axes.as_slice(), b.axes.as_slice(), tolerance) && all_near(a.at.as_slice(), b.at.as_slice(), tolerance)
}

/// A joint without masses or ratings: ±180 degrees or ±1 m, a unit rate and acceleration.
pub fn joint(kind: JointKind, placement: Placement) -> Joint {
    let most = if kind == JointKind::Revolute { std::f64::consts::PI } else { 1.0 };
    Joint {
        name: String::new(),
        kind,
        placement,
        range: Range { low: -most, high: most },
        rate: 1.0,
        accel: 1.0,
        jerk: None,
        torque: Some(TorqueRating { holding: 100.0, peak: None, grounds: Grounds::Sheet }),
        brake: None,
        drive: elbowroom::arm::Drive::default(),
        stop: None,
        link: None,
    }
}

/// A revolute joint by classical Denavit-Hartenberg parameters: a (m), alpha (degrees), d (m).
pub fn turning(a: f64, alpha_deg: f64, d: f64) -> Joint {
    joint(JointKind::Revolute, Placement::Dh { convention: Convention::Classical, a, alpha_deg, d, theta_deg: 0.0 })
}

/// A prismatic joint by classical parameters: a (m), alpha (degrees), theta (degrees).
pub fn sliding(a: f64, alpha_deg: f64, theta_deg: f64) -> Joint {
    joint(JointKind::Prismatic, Placement::Dh { convention: Convention::Classical, a, alpha_deg, d: 0.0, theta_deg })
}

/// The joint with a point mass of `mass` kg at `com` (m, link axes).
pub fn weighing(mut joint: Joint, mass: f64, com: [f64; 3]) -> Joint {
    joint.link = Some(Body { mass, com: com.into(), inertia: None, grounds: Grounds::Sheet });
    joint
}

/// The data of an arm that follows `rows` (all six if none are named).
pub fn arm_data(joints: Vec<Joint>, rows: &[TaskRow]) -> ArmData {
    let mut joints = joints;
    for (j, joint) in joints.iter_mut().enumerate() {
        joint.name = format!("J{}", j + 1);
    }
    ArmData { name: "test arm".into(), joints, flange: Flange::default(), characteristic_length: None, task: Task::of(rows) }
}

/// An arm that follows `rows` (all six if none are named), translations divided by 1 m.
pub fn arm(joints: Vec<Joint>, rows: &[TaskRow]) -> Arm {
    arm_with_length(joints, rows, 1.0)
}

/// The same with another stated characteristic length, m.
pub fn arm_with_length(joints: Vec<Joint>, rows: &[TaskRow], length: f64) -> Arm {
    Arm::build(ArmData { characteristic_length: Some(length), ..arm_data(joints, rows) }).expect("an arm without faults")
}

/// Joint values from degrees, for arms whose joints all turn.
pub fn degrees(values: &[f64]) -> Joints {
    Joints::from_fn(values.len(), |j| values[j].to_radians())
}

/// The Jacobian at the TCP, which stands at `tcp` on the flange.
pub fn jacobian(arm: &Arm, tcp: &Pose, q: &[f64]) -> Jacobian {
    let posture = Posture::at(arm.chain(), q);
    Jacobian::at(arm.chain(), &posture, &posture.tcp(tcp).at)
}

/// Determinant of the task's rows of the flange's Jacobian.
pub fn determinant(arm: &Arm, q: &[f64]) -> f64 {
    Lu::of(stacked(&jacobian(arm, &Pose::identity(), q), arm.task(), &[]), arm.len()).determinant()
}

/// `sqrt det(J Jᵀ)` of some of the six rows of the flange's Jacobian, by a library's determinant.
pub fn manipulability(arm: &Arm, q: &[f64], rows: std::ops::Range<usize>) -> f64 {
    let jacobian = jacobian(arm, &Pose::identity(), q);
    let j = nalgebra::DMatrix::from_fn(rows.len(), arm.len(), |i, k| jacobian.columns()[k][rows.start + i]);
    (&j * j.transpose()).determinant().sqrt()
}

/// The six-axis research arm: classical parameters, masses and centres as Corke & Armstrong-Helouvry, ICRA 1994, give them.
pub fn research_arm() -> Arm {
    let table = [
        (0.0, 90.0, 0.0, 0.0, [0.0; 3]),
        (0.4318, 0.0, 0.0, 17.4, [-0.3638, 0.006, 0.2275]),
        (0.0203, -90.0, 0.15005, 4.8, [-0.0203, -0.0141, 0.070]),
        (0.0, 90.0, 0.4318, 0.82, [0.0, 0.019, 0.0]),
        (0.0, -90.0, 0.0, 0.34, [0.0; 3]),
        (0.0, 0.0, 0.0, 0.09, [0.0, 0.0, 0.032]),
    ];
    arm(table.iter().map(|(a, alpha, d, mass, com)| weighing(turning(*a, *alpha, *d), *mass, *com)).collect(), &[])
}

/// The demo arm's axes (classical parameters of `recipes/arms/six-axis-12kg.toml`), an arm of our own.
pub fn six_axes() -> Arm {
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

/// The frames of all links and the flange's, by plain 4 x 4 products in the textbooks' order.
pub fn plain_frames(joints: &[Joint], q: &[f64]) -> Vec<Matrix4<f64>> {
    let mut frame = Matrix4::identity();
    let mut frames = Vec::new();
    for (joint, &value) in joints.iter().zip(q) {
        let turns = joint.kind == JointKind::Revolute;
        frame *= match joint.placement {
            Placement::Dh { convention, a, alpha_deg, d, theta_deg } => {
                let theta = theta_deg.to_radians() + if turns { value } else { 0.0 };
                let d = d + if turns { 0.0 } else { value };
                let z = Matrix4::new_rotation(V3::z() * theta) * Matrix4::new_translation(&(V3::z() * d));
                let x = Matrix4::new_translation(&(V3::x() * a)) * Matrix4::new_rotation(V3::x() * alpha_deg.to_radians());
                if convention == Convention::Classical { z * x } else { x * z }
            }
            Placement::Axis { place, axis } => {
                let mut placed = Matrix4::new_translation(&place.at);
                placed.fixed_view_mut::<3, 3>(0, 0).copy_from(&place.axes);
                placed * if turns { Matrix4::new_rotation(axis * value) } else { Matrix4::new_translation(&(axis * value)) }
            }
        };
        frames.push(frame);
    }
    frames
}

/// A plain 4 x 4 matrix as a pose.
pub fn pose_of(matrix: &Matrix4<f64>) -> Pose {
    let axes: Matrix3<f64> = matrix.fixed_view::<3, 3>(0, 0).into_owned();
    Pose { axes, at: V3::new(matrix[(0, 3)], matrix[(1, 3)], matrix[(2, 3)]) }
}

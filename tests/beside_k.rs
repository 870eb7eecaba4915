//! Forward kinematics and Jacobian beside those of the crate `k` 0.32, which shares no code with ours: the same random chains of
//! turning and sliding joints are built in both.

mod stand;

use elbowroom::arm::{Arm, Convention, Joint, JointKind, Placement};
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::Posture;
use k::nalgebra as na;
use k::{Isometry3, JointType, NodeBuilder, SerialChain, Translation3, UnitQuaternion, Vector3};
use proptest::prelude::*;
use stand::{all_near, chance};

fn about_z(deg: f64, along: f64) -> Isometry3<f64> {
    Isometry3::from_parts(Translation3::new(0.0, 0.0, along), UnitQuaternion::from_axis_angle(&Vector3::z_axis(), deg.to_radians()))
}

fn about_x(deg: f64, along: f64) -> Isometry3<f64> {
    Isometry3::from_parts(Translation3::new(along, 0.0, 0.0), UnitQuaternion::from_axis_angle(&Vector3::x_axis(), deg.to_radians()))
}

fn theirs_of(pose: &Pose) -> Isometry3<f64> {
    let axes = na::Matrix3::from_column_slice(pose.axes.as_slice());
    let rotation = na::Rotation3::from_matrix_unchecked(axes);
    Isometry3::from_parts(Translation3::new(pose.at.x, pose.at.y, pose.at.z), UnitQuaternion::from_rotation_matrix(&rotation))
}

/// What stands before a joint's motion, its axis there, and what stands behind it.
fn around(joint: &Joint) -> (Isometry3<f64>, na::Unit<Vector3<f64>>, Isometry3<f64>) {
    match joint.placement {
        // Classical: turn theta and slide d along z, then a along and alpha about x. Modified: x first.
        Placement::Dh { convention: Convention::Classical, a, alpha_deg, d, theta_deg } => {
            (Isometry3::identity(), Vector3::z_axis(), about_z(theta_deg, d) * about_x(alpha_deg, a))
        }
        Placement::Dh { convention: Convention::Modified, a, alpha_deg, d, theta_deg } => {
            (about_x(alpha_deg, a), Vector3::z_axis(), about_z(theta_deg, d))
        }
        Placement::Axis { place, axis } => {
            (theirs_of(&place), na::Unit::new_normalize(Vector3::new(axis.x, axis.y, axis.z)), Isometry3::identity())
        }
    }
}

/// The chain in `k`: a node a joint, and a fixed one for the TCP.
fn chain_in_k(arm: &Arm, tcp: &Pose) -> SerialChain<f64> {
    let mut behind = Isometry3::identity();
    // A node holds its parent weakly, so all are kept until the chain has them.
    let mut nodes: Vec<k::Node<f64>> = Vec::new();
    let mut hang = |node: k::Node<f64>| {
        if let Some(parent) = nodes.last() {
            node.set_parent(parent);
        }
        nodes.push(node);
    };
    for joint in arm.joints() {
        let (before, axis, after) = around(joint);
        let moves = if joint.kind == JointKind::Revolute { JointType::Rotational { axis } } else { JointType::Linear { axis } };
        hang(NodeBuilder::new().name(&joint.name).joint_type(moves).origin(behind * before).into_node());
        behind = after;
    }
    hang(NodeBuilder::new().name("tcp").joint_type(JointType::Fixed).origin(behind * theirs_of(tcp)).into_node());
    SerialChain::from_end(nodes.last().expect("the TCP's"))
}

proptest! {
    #![proptest_config(chance::config(200))]

    #[test]
    fn forward_kinematics_and_jacobian_are_those_of_another_library((arm, q) in chance::any_arm(), tcp in chance::pose()) {
        let chain = chain_in_k(&arm, &tcp);
        prop_assert_eq!(chain.dof(), arm.len());
        chain.set_joint_positions_unchecked(&q);
        let end = chain.end_transform();
        let theirs = Pose {
            axes: M3::from_column_slice(end.rotation.to_rotation_matrix().matrix().as_slice()),
            at: V3::new(end.translation.x, end.translation.y, end.translation.z),
        };
        let ours = Posture::at(arm.chain(), &q).tcp(&tcp);
        prop_assert!(stand::poses_near(&ours, &theirs, 1e-12), "{ours:?} {theirs:?}");
        let theirs = k::jacobian(&chain);
        let jacobian = stand::jacobian(&arm, &tcp, &q);
        for (j, column) in jacobian.columns().iter().enumerate() {
            let theirs: Vec<f64> = theirs.column(j).iter().copied().collect();
            prop_assert!(all_near(column, &theirs, 1e-12), "joint {}: {column:?} {theirs:?}", j + 1);
        }
    }
}

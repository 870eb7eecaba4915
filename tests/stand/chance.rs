//! Random arms and postures for the laws.

use elbowroom::arm::{Arm, Body, Convention, Grounds, Joint, JointKind, Joints, Placement, TaskRow};
use elbowroom::geometry::{Pose, Rotation, V3};
use elbowroom::program::Carried;
use proptest::collection::vec;
use proptest::prelude::*;

/// A pose within 0.5 m.
pub fn pose() -> impl Strategy<Value = Pose> {
    ([-0.5..0.5, -0.5..0.5, -0.5..0.5f64], [-3.1..3.1, -1.5..1.5, -3.1..3.1f64])
        .prop_map(|(at, [r, p, y])| Pose::new(at.into(), Rotation::from_rpy(r, p, y)))
}

/// A vector of which each part is at most `most`.
pub fn vector(most: f64) -> impl Strategy<Value = V3> {
    [-most..most, -most..most, -most..most].prop_map(V3::from)
}

/// A direction.
pub fn direction() -> impl Strategy<Value = V3> {
    vector(1.0).prop_filter_map("too short to have a direction", |v| (v.norm() > 0.05).then(|| v.normalize()))
}

fn placement() -> impl Strategy<Value = Placement> {
    let dh = (any::<bool>(), -0.6..0.6f64, twist(), -0.5..0.5f64, -180.0..180.0f64).prop_map(
        |(classical, a, alpha_deg, d, theta_deg)| {
            let convention = if classical { Convention::Classical } else { Convention::Modified };
            Placement::Dh { convention, a, alpha_deg, d, theta_deg }
        },
    );
    let axis = (pose(), direction()).prop_map(|(place, axis)| Placement::Axis { place, axis });
    prop_oneof![2 => dh, 1 => axis]
}

/// Square twists, as makers like them, and others.
fn twist() -> impl Strategy<Value = f64> {
    prop_oneof![Just(0.0), Just(90.0), Just(-90.0), Just(180.0), -180.0..180.0f64]
}

fn joint(sliding_share: f64) -> impl Strategy<Value = Joint> {
    let kind = prop::bool::weighted(sliding_share);
    (kind, placement(), 0.5..5.0f64, 0.0..20.0f64, vector(0.4)).prop_map(|(slides, placement, rate, mass, com)| {
        let mut joint = super::joint(if slides { JointKind::Prismatic } else { JointKind::Revolute }, placement);
        joint.rate = rate;
        joint.link = Some(Body { mass, com, inertia: None, grounds: Grounds::Sheet });
        joint
    })
}

/// An arm of `count` joints of both kinds whose task has as many rows as it has joints, at most six: which rows those are is
/// drawn too.
pub fn arm(count: impl Strategy<Value = usize>, sliding_share: f64) -> impl Strategy<Value = Arm> {
    let rows = Just(TaskRow::ALL.to_vec()).prop_shuffle();
    (count.prop_flat_map(move |n| vec(joint(sliding_share), n)), rows, 0.3..1.5f64)
        .prop_map(|(joints, rows, length)| super::arm_with_length(joints.clone(), &rows[..joints.len().min(6)], length))
}

/// An arm whose task is moving in all or some directions, or all six, so that what the task leaves out does not bear on the way: an
/// arm that follows only some turns while it misses others goes neither here nor there.
pub fn following_arm(count: impl Strategy<Value = usize>, sliding_share: f64) -> impl Strategy<Value = Arm> {
    let rows = Just(TaskRow::ALL[..3].to_vec()).prop_shuffle();
    (count.prop_flat_map(move |n| vec(joint(sliding_share), n)), rows, prop::bool::weighted(0.7), 0.3..1.5f64).prop_map(
        |(joints, rows, whole, length)| {
            let n = joints.len();
            let rows = if n >= 6 && whole { &TaskRow::ALL[..] } else { &rows[..n.min(3)] };
            super::arm_with_length(joints, rows, length)
        },
    )
}

/// An arm of 1 to 9 joints of both kinds with joint values.
pub fn any_arm() -> impl Strategy<Value = (Arm, Joints)> {
    with_posture(arm(1..=9usize, 0.25))
}

/// An arm with joint values.
pub fn with_posture(arm: impl Strategy<Value = Arm>) -> impl Strategy<Value = (Arm, Joints)> {
    (arm, vec(-1.0..1.0f64, 9)).prop_map(|(arm, shares)| {
        let q = Joints::from_fn(arm.len(), |j| shares[j] * arm.joints()[j].range.high);
        (arm, q)
    })
}

/// A tool and a load.
pub fn carried() -> impl Strategy<Value = Carried> {
    (pose(), 0.0..8.0f64, vector(0.3), 0.0..12.0f64, vector(0.3)).prop_map(|(tcp, tool_mass, tool_com, load_mass, load_com)| {
        Carried { tcp, tool_mass, tool_com, load_mass, load_com, ..Carried::nothing() }
    })
}

/// Numbers of a fixed sequence between -1 and 1, for brute force inside a test (the splitmix64 generator, Steele et al. 2014).
pub struct Sequence(pub u64);

impl Sequence {
    /// The next number, -1 to 1.
    pub fn next(&mut self) -> f64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        ((z ^ (z >> 31)) >> 11) as f64 / (1u64 << 52) as f64 - 1.0
    }

    /// A random direction, evenly over the ball.
    pub fn direction(&mut self) -> V3 {
        loop {
            let v = V3::new(self.next(), self.next(), self.next());
            if (0.1..1.0).contains(&v.norm()) {
                return v.normalize();
            }
        }
    }
}

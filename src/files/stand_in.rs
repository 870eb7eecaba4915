use crate::arm::{Arm, ArmData, Flange, Joint, JointKind, MAX_JOINTS, Placement, Range, Task, TaskRow};
use crate::geometry::{Pose, V3};
use crate::program::{Recipe, Taught};

/// An arm to judge a recipe with whose own arm can't be read: plain, asking for nothing, with as many joints as the recipe's
/// waypoints have values.
pub(super) fn arm_for(recipe: &Recipe) -> Option<Arm> {
    let values = recipe.waypoints.iter().find_map(|waypoint| match &waypoint.taught {
        Taught::Joints(values) => Some(values.len()),
        Taught::Pose { .. } => None,
    });
    let joint = |index: usize| Joint {
        name: format!("J{}", index + 1),
        kind: JointKind::Revolute,
        placement: Placement::Axis { place: Pose::identity(), axis: V3::z() },
        range: Range { low: -1.0, high: 1.0 },
        rate: 1.0,
        accel: 1.0,
        jerk: None,
        torque: None,
        brake: None,
        drive: crate::arm::Drive::default(),
        stop: None,
        link: None,
    };
    let data = ArmData {
        name: String::new(),
        joints: (0..values.unwrap_or(1).clamp(1, MAX_JOINTS)).map(joint).collect(),
        flange: Flange::default(),
        characteristic_length: Some(1.0),
        task: Task::of(&[TaskRow::X]),
    };
    Arm::build(data).ok()
}

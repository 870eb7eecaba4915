//! Jogging: the model of the arm moved by hand, joint by joint or along and about axes, and what its limits say wherever it stands.
//! Nothing here keeps a state: a posture goes in, a posture and what came of it come out.

mod axes;
mod joint;
mod pose;
mod readings;
mod sizes;
mod step;

pub use axes::{Axes, Direction};
pub use joint::{joint_step, joint_to};
pub use pose::{coordinates, pose_from, to_pose};
pub use readings::Readings;
pub use sizes::{Sizes, StepOf};
pub use step::{DAMPED_BELOW, GREATEST_DAMPING, MOST_SLIDE, MOST_TURN, Refused, Stand, Step, Stop, cartesian_step};

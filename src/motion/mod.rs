//! How the arm moves: the path of each segment, its speed law, the joint values along it, and the timeline of the cycle.

mod blend;
mod corner;
mod fly_by;
mod follow;
mod instant;
mod law;
mod leg;
mod path;
mod plan;
mod planner;
mod resolve;
mod segment;
mod track;

pub use blend::{Blend, JointBlend};
pub use fly_by::{FlyBy, Passed};
pub use follow::Follower;
pub use instant::Instant;
pub use law::{Law, Limits, Piece, Side};
pub use path::{Path, Target};
pub use plan::{Cursor, Plan};
pub use planner::Replanned;
pub use resolve::pose_in_base;
pub use segment::{NoPath, Push, Segment};
pub use track::{Lost, Node, Track};

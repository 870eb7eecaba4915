use crate::arm::{Arm, JointKind};
use crate::geometry::Pose;
use crate::motion::Plan;
use crate::program::{Arrive, Recipe};
use crate::units::Speed;

use super::Doubt;

/// A speed beyond what the arm has in any posture, on the segment that arrives at waypoint `index`.
pub(super) fn doubt(arm: &Arm, recipe: &Recipe, plan: &Plan, index: usize) -> Option<Doubt> {
    let segment = plan.arriving(index)?;
    let (Arrive::Line(path) | Arrive::Arc { speed: path, .. }) = recipe.waypoints[index].arrive.as_ref()? else { return None };
    let speed = path.speed.or(recipe.usual.speed).map(Speed::as_m_per_s)?;
    let most = fastest(arm, &segment.carried.tcp);
    (!(speed <= most)).then_some(Doubt::SpeedBeyondArm { waypoint: index, speed, most })
}

/// No posture moves the TCP faster than this, m/s: every joint at its full rate and as far from the TCP as the links between them
/// are long, all in one direction.
fn fastest(arm: &Arm, tcp: &Pose) -> f64 {
    let chain = arm.chain();
    let mut beyond = chain.flange.then(tcp).at.norm();
    let mut sum = 0.0;
    for (j, joint) in arm.joints().iter().enumerate().rev() {
        match joint.kind {
            JointKind::Revolute => sum += joint.rate * beyond,
            JointKind::Prismatic => {
                sum += joint.rate;
                beyond += joint.range.low.abs().max(joint.range.high.abs());
            }
        }
        beyond += chain.fixed[j].at.norm();
    }
    sum
}

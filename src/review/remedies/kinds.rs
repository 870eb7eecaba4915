use crate::checks::{Check, Finding, Kind, Unproved};
use crate::motion::NoPath;

use super::{Judged, RemedyKind};

/// Which kinds of remedy make sense for a finding, in the order in which they are tried: quick ones first.
pub fn kinds_for(judged: &Judged, finding: &Finding) -> Vec<RemedyKind> {
    use RemedyKind::{
        Acceleration, Centre, Dwell, FlyBy, Grip, JointMove, Load, MountHeight, MountTilt, Override, Posture, Shift, Slower, Tilt,
        Turn, Via,
    };
    let segment = judged.plan.version(finding.segment, finding.stop);
    if segment.trouble.is_some() && finding.check != Check::Reach {
        // What is found on the way to where a path ends may go or change with it.
        return Vec::new();
    }
    let mut kinds: Vec<RemedyKind> = match finding.check {
        Check::Rate => vec![Slower, FlyBy, JointMove, Posture, Via, Override, Turn, Tilt, Shift],
        Check::Accel => vec![Slower, Acceleration, FlyBy, JointMove, Posture, Via, Override, Turn, Tilt, Shift],
        Check::Moving => vec![Slower, Acceleration, FlyBy, Posture, Override, Load, Centre, Grip, Turn, Tilt, Shift],
        Check::Holding | Check::Brake => vec![Load, Centre, Grip, Posture, MountHeight, MountTilt, Turn, Tilt, Shift],
        Check::Flange => vec![Load, Centre, Grip],
        Check::Rms => vec![Dwell, Slower, Acceleration, Load],
        Check::Singular | Check::SpeedLeft => vec![JointMove, FlyBy, Posture, Via, Turn, Tilt, Shift],
        Check::TcpSpeed | Check::PointSpeed => vec![Slower, Override],
        Check::WindUp => vec![Posture, Turn],
        Check::Range => vec![Posture, JointMove, Turn, Tilt, Shift, Via],
        Check::Reach => match &finding.kind {
            Kind::NoPath(NoPath::OutOfReach { .. } | NoPath::Lost { .. }) => {
                vec![JointMove, Posture, Turn, Tilt, Shift, Via, MountHeight]
            }
            Kind::NoPath(NoPath::OtherPosture { .. }) => vec![JointMove, Posture],
            Kind::NoPath(NoPath::StraightArc) => vec![JointMove, Shift],
            // The pose itself asks what the arm has no joint for, or the segment before has no end.
            _ => Vec::new(),
        },
    };
    if let Kind::Unproved(why) = &finding.kind {
        // Data that is missing is no matter of the motion.
        if *why != Unproved::BudgetSpent {
            return Vec::new();
        }
    }
    let follows = segment.follows_path() && !segment.blend;
    kinds.retain(|kind| match kind {
        JointMove => follows && segment.push.is_none(),
        Via => follows && matches!(segment.path, crate::motion::Path::Line { .. }) && segment.push.is_none(),
        FlyBy => segment.blend,
        Turn => judged.recipe.hanging_at(segment.to).tool.is_some_and(|tool| tool.turns_freely) && !segment.blend,
        Tilt | Shift | Posture | Acceleration => !segment.blend,
        Load | Centre | Grip => judged.recipe.hanging_at(segment.to).before.is_some() || segment.carried_after.is_some(),
        _ => true,
    });
    kinds
}

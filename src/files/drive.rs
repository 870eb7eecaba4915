use crate::arm::{Curve, Drive, Friction, JointKind, Rotor};

use super::body::grounds;
use super::table::Table;

/// Reads rotor, friction and balancer of a joint.
pub(super) fn drive(table: &Table<'_>, kind: JointKind, effort: &str) -> Drive {
    let (inertia, rate, value) = match kind {
        JointKind::Revolute => ("kg·m²", "deg/s", "deg"),
        JointKind::Prismatic => ("kg", "mm/s", "mm"),
    };
    let rotor = table.table("rotor").map(|rotor| {
        rotor.only(&["inertia", "grounds"]);
        Rotor { inertia: rotor.number("inertia", inertia), grounds: grounds(&rotor) }
    });
    let friction = table.table("friction").map(|friction| {
        friction.only(&["steady", "viscous", "grounds"]);
        Friction {
            steady: friction.number("steady", effort),
            viscous: friction.number("viscous", &format!("{effort} per {rate}")) * kind.value().per_si(),
            grounds: grounds(&friction),
        }
    });
    Drive { rotor, friction, balancer: curve(table, "balancer", kind, &format!("[{value}, {effort}]")) }
}

/// Reads a curve: pairs of a joint value or rate and a torque, the first in rising order. `None` also where it can't be taken.
pub(super) fn curve(table: &Table<'_>, key: &str, kind: JointKind, pair: &str) -> Option<Curve> {
    let shown = table.pairs(key, pair)?;
    if shown.is_empty() || shown.len() > Curve::MOST {
        table.complain(key, format_args!("{key} has {} pairs; it must have 1 to {}", shown.len(), Curve::MOST));
        return None;
    }
    if let Some(two) = shown.windows(2).find(|two| two[1][0] <= two[0][0]) {
        table.complain(key, format_args!("{key} goes from {} to {}; its pairs must be in rising order", two[0][0], two[1][0]));
        return None;
    }
    let si: Vec<[f64; 2]> = shown.iter().map(|[x, y]| [x / kind.value().per_si(), *y]).collect();
    Curve::through(&si)
}

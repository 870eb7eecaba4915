use crate::arm::Flange;
use crate::dynamics::at_axis;
use crate::kinematics::Posture;
use crate::program::Carried;
use crate::units::Dimension;

use super::{Channel, Check, Scale};

/// What tool and load weigh together against the flange's rated load, then for each listed wrist axis their moment of weight and
/// their inertia against the load diagram. No reserve: the maker's sheet has it inside.
pub(super) fn channels(flange: &Flange) -> impl Iterator<Item = Channel> {
    let channel = |joint: Option<usize>, of: Dimension, limit: Option<f64>| Channel {
        check: Check::Flange,
        joint,
        of,
        scale: limit.map_or(Scale::Open, Scale::Ceiling),
        reserve: 0.0,
        judged: limit.is_some(),
    };
    std::iter::once(channel(None, Dimension::Mass, flange.rated_load)).chain(flange.wrist.iter().flat_map(move |limit| {
        [
            channel(Some(limit.joint), Dimension::Torque, Some(limit.moment)),
            channel(Some(limit.joint), Dimension::Inertia, limit.inertia),
        ]
    }))
}

/// The values of these channels at a posture, in the same order.
pub(super) fn read(flange: &Flange, posture: &Posture, carried: &Carried, values: &mut [f64]) {
    values[0] = carried.mass();
    for (limit, pair) in flange.wrist.iter().zip(values[1..].chunks_exact_mut(2)) {
        let there = at_axis(posture, carried, limit.joint);
        pair.copy_from_slice(&[there.moment, there.inertia]);
    }
}

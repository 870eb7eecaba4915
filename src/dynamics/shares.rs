use crate::arm::{Chain, Joints};
use crate::geometry::V3;
use crate::kinematics::Posture;
use crate::program::Carried;

use super::{Wrench, holding_torque};

/// Who asks how much of the holding torque: each share in N·m (N) a joint. Together they make the whole.
#[derive(Debug, Clone, PartialEq)]
pub struct Shares {
    /// One entry a link, from the base outwards.
    pub links: Vec<Joints>,
    /// The tool.
    pub tool: Joints,
    /// The load.
    pub load: Joints,
    /// The process force.
    pub push: Joints,
}

impl Shares {
    /// The sum of all shares.
    pub fn total(&self) -> Joints {
        let rest = self.tool.zip(&self.load, |a, b| a + b).zip(&self.push, |a, b| a + b);
        self.links.iter().fold(rest, |sum, link| sum.zip(link, |a, b| a + b))
    }
}

/// Splits the holding torque by mass: the same law as [`holding_torque`], applied to one mass at a time.
pub fn holding_shares(chain: &Chain, posture: &Posture, carried: &Carried, gravity: &V3, push: Option<&Wrench>) -> Shares {
    let mut bare = chain.clone();
    bare.mass = [0.0; crate::arm::MAX_JOINTS];
    let nothing = Carried { tool_mass: 0.0, load_mass: 0.0, ..*carried };
    let links = (0..chain.len)
        .map(|j| {
            let mut one = bare.clone();
            one.mass[j] = chain.mass[j];
            holding_torque(&one, posture, &nothing, gravity, None)
        })
        .collect();
    Shares {
        links,
        tool: holding_torque(&bare, posture, &Carried { load_mass: 0.0, ..*carried }, gravity, None),
        load: holding_torque(&bare, posture, &Carried { tool_mass: 0.0, ..*carried }, gravity, None),
        push: holding_torque(&bare, posture, &nothing, gravity, push),
    }
}

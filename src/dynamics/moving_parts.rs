use crate::arm::{Chain, Joint, Joints};
use crate::geometry::V3;
use crate::kinematics::Posture;
use crate::program::Carried;

use super::{Going, Wrench, holding_torque, moving_torque, with_friction};

/// What one joint's torque in motion is made of, N·m or N, each with its sign. All but friction add up to what the motor would
/// supply without friction.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MovingParts {
    /// Weight of links, tool and load.
    pub weight: f64,
    /// Speeding up links, tool and load.
    pub acceleration: f64,
    /// Coriolis and centrifugal forces.
    pub turning: f64,
    /// The work's push against the tool.
    pub push: f64,
    /// Speeding up the rotor.
    pub rotor: f64,
    /// What a balancer takes off.
    pub balancer: f64,
    /// Steady friction in the sense of the motion.
    pub steady: f64,
    /// Friction that grows with the rate, in the sense of the motion.
    pub viscous: f64,
}

impl MovingParts {
    /// Splits the torque in motion of joint `j` at a posture (joint values `q`); `direction` is which way it moves, -1, 0 or 1.
    #[expect(clippy::too_many_arguments, reason = "the arguments of the moving torque and what its split needs besides")]
    pub fn of(
        chain: &Chain,
        joint: &Joint,
        j: usize,
        q: f64,
        posture: &Posture,
        carried: &Carried,
        gravity: &V3,
        push: Option<&Wrench>,
        going: &Going,
        direction: f64,
    ) -> Self {
        let still = Joints::zeros(chain.len);
        let part = |going: &Going| moving_torque(chain, posture, carried, &V3::zeros(), None, going)[j];
        let nothing = Carried { tool_mass: 0.0, load_mass: 0.0, ..*carried };
        let weightless = holding_torque(chain, posture, &nothing, &V3::zeros(), push)[j];
        let friction = joint.drive.friction;
        Self {
            weight: holding_torque(chain, posture, carried, gravity, None)[j],
            acceleration: part(&Going { rates: still, ..*going }),
            turning: part(&Going { accelerations: still, ..*going }),
            push: weightless,
            rotor: joint.drive.rotor_inertia() * going.accelerations[j],
            balancer: -joint.drive.balance(q),
            steady: friction.map_or(0.0, |f| f.asks(direction, 0.0)),
            viscous: friction.map_or(0.0, |f| direction * f.viscous * going.rates[j].abs()),
        }
    }

    /// The demand if the motion ran at `k` times its rates: what depends on rates and accelerations by its square, viscous
    /// friction by itself, the rest as it is. With friction where that makes it larger.
    pub fn at_pace(&self, k: f64) -> f64 {
        let still = self.weight + self.push + self.balancer;
        let going = self.acceleration + self.turning + self.rotor;
        with_friction(still + k * k * going, self.steady + k * self.viscous)
    }

    /// What of the friction counts: all, or none where it would help.
    pub fn friction(&self) -> f64 {
        let rest = self.weight + self.push + self.balancer + self.acceleration + self.turning + self.rotor;
        self.at_pace(1.0) - rest
    }
}

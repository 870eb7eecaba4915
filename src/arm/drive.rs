use super::{Curve, Grounds};

/// A drive is what turns or slides with a joint besides its link, and what helps or hinders its motor. What an arm file leaves out
/// is unknown, not nothing.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Drive {
    /// What of motor and gear speeds up with the joint.
    pub rotor: Option<Rotor>,
    /// What motor and gear lose.
    pub friction: Option<Friction>,
    /// Torque (N·m; N for a slide) that a balancer exerts on the joint, positive in the sense of the joint's value, against that
    /// value (rad or m). No balancer where not given.
    pub balancer: Option<Curve>,
}

/// The inertia of motor and gear as it is felt at the joint.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rotor {
    /// Inertia felt at the joint, the gear's square included, kg·m²; kg for a slide.
    pub inertia: f64,
    /// Where the figure comes from.
    pub grounds: Grounds,
}

/// The friction of motor and gear as it is felt at the joint while it moves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Friction {
    /// The part that does not depend on the rate, N·m or N.
    pub steady: f64,
    /// The part that grows with the rate, N·m per rad/s or N per m/s.
    pub viscous: f64,
    /// Where the figures come from.
    pub grounds: Grounds,
}

impl Friction {
    /// What friction asks of the motor of a joint that moves at `rate` or is about to move in `direction` (-1, 0 or 1): it has the
    /// sense of the motion.
    #[inline]
    pub fn asks(&self, direction: f64, rate: f64) -> f64 {
        direction * (self.steady + self.viscous * rate.abs())
    }
}

impl Drive {
    /// Inertia of motor and gear, kg·m² or kg; 0 where not given.
    pub fn rotor_inertia(&self) -> f64 {
        self.rotor.map_or(0.0, |rotor| rotor.inertia)
    }

    /// What a balancer exerts on the joint at a value, N·m or N.
    #[inline]
    pub fn balance(&self, value: f64) -> f64 {
        self.balancer.map_or(0.0, |curve| curve.at(value))
    }

    /// Whether rotor and friction are given, so that a torque in motion is the whole of it.
    pub fn is_complete(&self) -> bool {
        self.rotor.is_some() && self.friction.is_some()
    }

    /// Whether one of its figures is a guess.
    pub fn is_guessed(&self) -> bool {
        self.rotor.is_some_and(|rotor| rotor.grounds == Grounds::Guess)
            || self.friction.is_some_and(|friction| friction.grounds == Grounds::Guess)
    }
}

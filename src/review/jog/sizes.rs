use crate::units::{Angle, Dimension, Length, Measure};

/// What a step is of; each kind has sizes of its own.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum StepOf {
    /// A turning joint.
    TurningJoint,
    /// A sliding joint.
    SlidingJoint,
    /// The TCP along an axis.
    Along,
    /// The TCP about an axis.
    About,
}

/// Degrees, of a turning joint.
const TURNING: [f64; 4] = [0.1, 1.0, 5.0, 10.0];
/// Millimetres, of a sliding joint.
const SLIDING: [f64; 3] = [0.1, 1.0, 10.0];
/// Millimetres along an axis.
const ALONG: [f64; 4] = [0.1, 1.0, 10.0, 50.0];
/// Degrees about an axis.
const ABOUT: [f64; 3] = [0.1, 1.0, 5.0];

impl StepOf {
    fn shown(self) -> &'static [f64] {
        match self {
            Self::TurningJoint => &TURNING,
            Self::SlidingJoint => &SLIDING,
            Self::Along => &ALONG,
            Self::About => &ABOUT,
        }
    }

    /// Whether it is an angle or a length.
    pub fn of(self) -> Dimension {
        match self {
            Self::TurningJoint | Self::About => Dimension::Angle,
            Self::SlidingJoint | Self::Along => Dimension::Length,
        }
    }
}

/// The chosen step sizes, one a kind.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Sizes {
    chosen: [usize; 4],
}

impl Default for Sizes {
    /// One degree, one millimetre; ten millimetres along an axis.
    fn default() -> Self {
        Self { chosen: [1, 1, 2, 1] }
    }
}

impl Sizes {
    /// The size of a step, rad or m.
    pub fn size(&self, of: StepOf) -> Measure {
        let shown = of.shown()[self.chosen[of as usize]];
        match of.of() {
            Dimension::Angle => Angle::deg(shown).measure(),
            _ => Length::mm(shown).measure(),
        }
    }

    /// The next larger size, from the largest on to the smallest.
    pub fn next(&mut self, of: StepOf) {
        let chosen = &mut self.chosen[of as usize];
        *chosen = (*chosen + 1) % of.shown().len();
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sizes_go_round_each_for_its_kind() {
        let mut sizes = Sizes::default();
        let mut seen = Vec::new();
        for _ in 0..4 {
            seen.push(sizes.size(StepOf::Along).text(1));
            sizes.next(StepOf::Along);
        }
        assert_eq!(seen, ["10.0 mm", "50.0 mm", "0.1 mm", "1.0 mm"]);
        assert_eq!(sizes.size(StepOf::TurningJoint).text(1), "1.0°");
    }
}

use super::slower::{accel_dial, turn_down};
use super::trial::Trial;
use super::{Outcome, size};

/// The segment's acceleration, turning acceleration or acceleration share, whichever leads, as low as it must be.
pub(super) fn acceleration(trial: &Trial) -> Outcome {
    if trial.segment().blend {
        return Outcome::nothing();
    }
    accel_dial(trial).map_or_else(Outcome::nothing, |dial| turn_down(trial, &dial, size::softened))
}

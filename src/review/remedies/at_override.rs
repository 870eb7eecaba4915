use crate::checks::Kind;
use crate::units::Share;

use super::greatest::{greatest, greatest_from_above};
use super::trial::{Nearest, Trial};
use super::{Outcome, size};

/// The highest override at which the segment is clear. It slows the whole program, so it is told and not applied.
pub(super) fn at_override(trial: &Trial) -> Outcome {
    let mut nearest = Nearest::default();
    let clear = |percent: u32| {
        let seen = trial.look_at_override(Share::percent(f64::from(percent)));
        nearest.note(seen)
    };
    let guess = match &trial.finding.kind {
        Kind::Excess(excess) => (100.0 * (1.0 - excess.reserve.as_fraction()) / (1.0 - excess.room.as_fraction())) as u32,
        _ => 50,
    };
    let found =
        if trial.finding.check.grows_with_speed() { greatest(100, guess, clear) } else { greatest_from_above(100, guess, clear) };
    let Some(percent) = found else { return Outcome::short(nearest.short()) };
    let share = Share::percent(f64::from(percent));
    Outcome::of(Ok(trial.told_of_override(share, size::slowed(share.as_fraction()))))
}

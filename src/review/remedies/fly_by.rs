use crate::program::Edit;
use crate::units::Length;

use super::outward::{Way, least_steps};
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome, size};

/// Radii are offered in steps of this, mm: what people type.
const STEP: f64 = 1.0;
/// A radius below this is told in tenths of a step, mm.
const FINE_BELOW: f64 = 10.0;
/// No radius is made larger than so many times itself.
const LARGEST: f64 = 3.0;
/// So many radii may turn out to be spoilt by what they do to the whole before the search ends.
const SPOILT: usize = 8;

/// The radius of the fly-by point that is nearest to what it is and clear, or a stop there.
pub(super) fn fly_by(trial: &Trial) -> Outcome {
    let waypoint = trial.to();
    let Some(from) = trial.recipe().waypoints[waypoint].fly_by else { return Outcome::nothing() };
    let step = if from.as_mm() < FINE_BELOW { STEP / 10.0 } else { STEP };
    let edit = |to: Option<Length>| Edit::change(trial.recipe(), waypoint, |point| point.fly_by = to);
    // Whole steps on both sides of the radius as it is; what people typed may lie between two.
    let down = (from.as_mm() / step - 1e-6).ceil().max(1.0);
    let up = (from.as_mm() / step + 1e-6).floor();
    let radius = |closer: bool, steps: u32| {
        let at = if closer { down - f64::from(steps) } else { up + f64::from(steps) };
        (at > 0.0).then(|| Length::mm(crate::units::tidy(at * step)))
    };
    let ways = [Way { which: true, most: down as u32 }, Way { which: false, most: ((LARGEST - 1.0) * down) as u32 }];
    let (mut nearest, mut spoilt, mut offered) = (Nearest::default(), 0, None);
    least_steps(&ways, |closer, steps| {
        if spoilt >= SPOILT || trial.watch.is_stopped() {
            return false;
        }
        let to = radius(closer, steps);
        // With a stop there the blend is gone, and with it what it asks; the whole recipe tells whether that settles it.
        if !nearest.note(trial.look(&edit(to), Aim::Check)) {
            return false;
        }
        let by = Length::m((from.as_m() - to.map_or(0.0, Length::as_m)).abs());
        let remedy = trial.offer(Change::FlyBy { waypoint, from, to }, edit(to), size::rounded(by), false);
        spoilt += usize::from(remedy.is_err());
        nearest.take(remedy, &mut offered)
    });
    Outcome::of(offered.ok_or(nearest.short()))
}

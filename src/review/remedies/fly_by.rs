use crate::program::Edit;
use crate::units::Length;

use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome, size};

/// Radii that are tried, as parts of the one given; none is a stop.
const PARTS: [f64; 8] = [0.8, 1.25, 0.6, 1.6, 0.4, 2.0, 0.2, 3.0];
/// Radii are offered in steps of this, mm.
const STEP: f64 = 1.0;

/// Another radius of the fly-by point, the nearest first, or a stop there.
pub(super) fn fly_by(trial: &Trial) -> Outcome {
    let waypoint = trial.to();
    let Some(from) = trial.recipe().waypoints[waypoint].fly_by else { return Outcome::nothing() };
    let edit = |to: Option<Length>| Edit::change(trial.recipe(), waypoint, |point| point.fly_by = to);
    let mut tried: Vec<f64> =
        PARTS.iter().map(|part| (from.as_mm() * part / STEP).round() * STEP).filter(|mm| *mm >= STEP).collect();
    tried.dedup();
    let radii = tried.into_iter().map(|mm| Some(Length::mm(mm))).chain([None]);
    let mut nearest = Nearest::default();
    for to in radii {
        // With a stop there the blend is gone, and with it what it asks; the whole recipe tells whether that settles it.
        let seen = trial.look(&edit(to), Aim::Check);
        nearest.note(seen);
        if !seen.clear {
            continue;
        }
        let by = Length::m((from.as_m() - to.map_or(0.0, Length::as_m)).abs());
        if let Ok(remedy) = trial.offer(Change::FlyBy { waypoint, from, to }, edit(to), size::rounded(by), false) {
            return Outcome::of(Ok(remedy));
        }
    }
    Outcome::short(nearest.short())
}

use crate::geometry::V3;
use crate::units::Angle;

use super::least::{Reach, shortest};
use super::moved::{Displacement, displaced, free_ends};
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Ends, Outcome, Short, size};

/// Turns that are tried, rad: one degree to half a turn, none more than three and a half degrees from the next.
const TURNS: Reach = Reach { first: 0.017_45, most: std::f64::consts::PI, widest: 0.061 };
/// Turns are offered in steps of a tenth of a degree, rounded away from 0.
const STEP: f64 = 0.1;

/// The least turn of the tool about its own axis, at one end or at both, that is clear. The work does not care for it, so it may
/// be turned where something is taken or pushed as well.
pub(super) fn turn(trial: &Trial) -> Outcome {
    let mut nearest = Nearest::default();
    let mut found: Vec<(Ends, f64)> = Vec::new();
    for aim in [Aim::All, Aim::Check] {
        for ends in [Ends::End, Ends::Start, Ends::Both] {
            let edit = |angle: f64| displaced(trial, ends, Displacement::Own(angle));
            // Along or against one axis: a search in one dimension.
            let least = shortest(&[V3::x(), -V3::x()], TURNS, |by| {
                let seen = edit(by.x).map(|edit| trial.look(&edit, aim).in_posture(by.x));
                seen.is_some_and(|seen| nearest.note(seen))
            });
            found.extend(least.map(|by| (ends, by.x)));
        }
        if !found.is_empty() {
            break;
        }
    }
    found.sort_by(|a, b| a.1.abs().total_cmp(&b.1.abs()));
    let mut short = if found.is_empty() && free_ends(trial).is_empty() { Short::Fixed } else { nearest.short() };
    for (ends, rad) in found {
        let degrees = Angle::rad(rad).as_deg();
        let angle = Angle::deg(crate::units::tidy((degrees.abs() / STEP).ceil() * STEP) * degrees.signum());
        let Some(edit) = displaced(trial, ends, Displacement::Own(angle.as_rad())) else { continue };
        match trial.offer(Change::Turn { ends, angle }, edit, size::turned(angle), false) {
            Ok(remedy) => return Outcome::of(Ok(remedy)),
            Err(why) => short = why,
        }
    }
    Outcome::short(short)
}

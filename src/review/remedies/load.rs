use crate::checks::Kind;
use crate::geometry::{V3, turn_about};
use crate::program::{Edit, Load};
use crate::units::{Angle, Mass};

use super::greatest::greatest;
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome};

/// Masses are told in steps of this, kg.
const STEP: f64 = 0.1;
/// Centres are told in steps of this, m.
const CENTRE_STEP: f64 = 1e-3;
/// Corrections of a centre until it is clear, or given up.
const CORRECTIONS: usize = 12;
/// What a centre is moved beyond what the worst instant asks, as a share of it.
const BEYOND: f64 = 0.02;
/// A change of the centre by this tells how much a demand follows it, m.
const PROBE: f64 = 1e-3;

/// The load that the finding is about: that in the tool on the segment, or after the stop at its end.
fn load<'a>(trial: &Trial<'a>) -> Option<&'a Load> {
    let hangs = trial.recipe().hanging_at(trial.to());
    let after = matches!(&trial.finding.kind, Kind::Excess(excess) if excess.after_stop);
    if after { hangs.after } else { hangs.before }
}

/// The edit that changes the load wherever it is carried.
fn changed(trial: &Trial, load: &Load, how: impl Fn(&mut Load)) -> Edit {
    let mut loads = trial.recipe().loads.clone();
    loads.iter_mut().filter(|other| other.name == load.name).for_each(how);
    Edit::Loads(loads)
}

/// A load of another mass, its inertia in step with it.
fn of_mass(trial: &Trial, load: &Load, mass: f64) -> Edit {
    changed(trial, load, |other| {
        let share = mass / load.body.mass;
        other.body.mass = mass;
        other.body.inertia = load.body.inertia.map(|tensor| tensor * share);
    })
}

/// The heaviest load at the same centre that is clear. Torques are linear in the mass at every instant, which yields a first guess
/// in closed form; what is told was judged and proved.
pub(super) fn heaviest(trial: &Trial) -> Outcome {
    let Some(load) = load(trial) else { return Outcome::nothing() };
    let now = load.body.mass;
    let above = (now / STEP - 1e-6).ceil().max(1.0) as u32;
    let mass = |steps: u32| crate::units::tidy(f64::from(steps) * STEP);
    let mut nearest = Nearest::default();
    let guess = guess(trial, load).map_or(above / 2, |kg| (kg / STEP).floor().max(0.0) as u32);
    let found = greatest(above, guess, |steps| {
        let seen = trial.look(&of_mass(trial, load, mass(steps)), Aim::Check);
        nearest.note(seen)
    });
    let Some(steps) = found else { return Outcome::short(nearest.short()) };
    let to = mass(steps);
    let change = Change::Load { from: Mass::kg(now), to: Mass::kg(to) };
    Outcome::of(trial.offer(change, of_mass(trial, load, to), (now - to) / now, true))
}

/// The mass at which the finding's worst instant asks just what the reserve leaves, by the line through two masses.
fn guess(trial: &Trial, load: &Load) -> Option<f64> {
    let Kind::Excess(excess) = &trial.finding.kind else { return None };
    let now = load.body.mass;
    let lighter = trial.look(&of_mass(trial, load, 0.9 * now), Aim::Check).room?;
    let gain = (lighter.as_fraction() - excess.room.as_fraction()) / (0.1 * now);
    let wanted = excess.reserve.as_fraction() - excess.room.as_fraction();
    (gain > 0.0).then(|| now - wanted / gain)
}

/// The least displacement of the load's centre of mass that is clear, found by correcting it along the direction in which the
/// demand falls fastest: torques are linear in the centre.
pub(super) fn nearest_centre(trial: &Trial) -> Outcome {
    let Some(load) = load(trial) else { return Outcome::nothing() };
    let moved = |by: &V3| {
        let by = *by;
        changed(trial, load, move |other| other.body.com = load.body.com + by)
    };
    let Kind::Excess(excess) = &trial.finding.kind else { return Outcome::nothing() };
    let reserve = excess.reserve.as_fraction();
    let (mut by, mut nearest) = (V3::zeros(), Nearest::default());
    for _ in 0..CORRECTIONS {
        let room = |by: &V3| trial.look(&moved(by), Aim::Check);
        let here = room(&by);
        nearest.note(here);
        if here.clear {
            return Outcome::of(trial.offer(Change::Centre { by }, moved(&by), by.norm(), true));
        }
        let Some(left) = (if by == V3::zeros() { Some(excess.room) } else { here.room }) else { break };
        let slope = V3::from_fn(|k, _| {
            let mut probe = by;
            probe[k] += PROBE;
            let there = room(&probe);
            nearest.note(there);
            there.room.map_or(0.0, |there| (there.as_fraction() - left.as_fraction()) / PROBE)
        });
        if !(slope.norm() > 1e-6) {
            break;
        }
        let step = slope * (((reserve - left.as_fraction()) * (1.0 + BEYOND)).max(1e-4) / slope.norm_squared());
        let next = by + step;
        by = next.map(|m| crate::units::tidy((m / CENTRE_STEP).round() * CENTRE_STEP));
        if by.norm() > load.body.com.norm() + 0.5 || trial.watch.is_stopped() {
            break;
        }
    }
    Outcome::short(nearest.short())
}

/// The load turned in the grip by quarter turns about the axes of the TCP, the least turn that is clear.
pub(super) fn grip(trial: &Trial) -> Outcome {
    let Some(load) = load(trial) else { return Outcome::nothing() };
    let mut nearest = Nearest::default();
    for degrees in [90.0, -90.0, 180.0] {
        for axis in [2, 0, 1] {
            let angle = Angle::deg(degrees);
            let turn = turn_about(&V3::from_fn(|k, _| f64::from(u8::from(k == axis))), angle.as_rad());
            if (turn * load.body.com - load.body.com).norm() < CENTRE_STEP {
                continue;
            }
            let edit = changed(trial, load, |other| {
                other.body.com = turn * load.body.com;
                other.body.inertia = load.body.inertia.map(|tensor| turn * tensor * turn.transpose());
            });
            let seen = trial.look(&edit, Aim::Check);
            nearest.note(seen);
            if seen.clear
                && let Ok(remedy) = trial.offer(Change::Grip { axis, angle }, edit, angle.as_rad().abs(), true)
            {
                return Outcome::of(Ok(remedy));
            }
        }
    }
    Outcome::short(nearest.short())
}

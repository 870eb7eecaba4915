use crate::geometry::V3;
use crate::kinematics::Svd;
use crate::motion::Follower;
use crate::program::Edit;
use crate::units::{Angle, Length};

use super::least::{Reach, shortest};
use super::moved::{Displacement, displaced, free_ends, tcp_at};
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Ends, Outcome, Short, size};

/// Displacements that are tried, m.
const SHIFTS: Reach = Reach { first: 0.002, most: 0.128, widest: 0.032 };
/// Tilts that are tried, rad: half a degree to 16 degrees.
const TILTS: Reach = Reach { first: 0.008_73, most: 0.28, widest: 0.07 };
/// Another choice of ends is taken only if it needs no more than this share of what the first needs: one point rather than two.
const FEWER: f64 = 0.992;
/// A found displacement grows by this share at a time where rounding it to what people type has spoilt it.
const ROUNDED_UP: f64 = 0.005;
/// How often it may grow.
const GROWS: usize = 12;

/// The smallest displacement of one end or of both that is clear.
pub(super) fn shift(trial: &Trial) -> Outcome {
    let directions = directions(trial, false);
    at_ends(trial, SHIFTS, &directions, Displacement::Along, |ends, by| {
        (Change::Shift { ends, by }, size::moved(Length::m(by.norm())))
    })
}

/// The smallest tilt of the tool about its TCP, at one end or at both, that is clear.
pub(super) fn tilt(trial: &Trial) -> Outcome {
    let directions = directions(trial, true);
    let about = |by: V3| by.try_normalize(0.0).map_or(Displacement::Along(by), |axis| Displacement::About(axis, by.norm()));
    at_ends(trial, TILTS, &directions, about, |ends, by| {
        let angle = Angle::rad(by.norm());
        (Change::Tilt { ends, axis: by.normalize(), angle }, size::tilted(angle))
    })
}

/// Tries each choice of ends and offers the smallest displacement of all.
fn at_ends(
    trial: &Trial,
    reach: Reach,
    directions: &[V3],
    displacement: impl Fn(V3) -> Displacement,
    told: impl Fn(Ends, V3) -> (Change, f64),
) -> Outcome {
    let ends = free_ends(trial);
    if ends.is_empty() {
        return Outcome::short(Short::Fixed);
    }
    let mut nearest = Nearest::default();
    let mut found: Vec<(Ends, V3)> = Vec::new();
    for aim in [Aim::All, Aim::Check] {
        let mut most = reach.most;
        for &ends in &ends {
            let edit = |by: &V3| displaced(trial, ends, displacement(*by));
            let least = shortest(directions, Reach { most, ..reach }, |by| {
                let seen = edit(by).map(|edit| trial.look(&edit, aim).in_posture(by.norm()));
                seen.is_some_and(|seen| nearest.note(seen))
            });
            if let Some(by) = least {
                most = FEWER * by.norm();
                found.push((ends, by));
            }
        }
        if !found.is_empty() {
            break;
        }
    }
    found.sort_by(|a, b| a.1.norm().total_cmp(&b.1.norm()));
    let mut short = nearest.short();
    for (ends, by) in found {
        match grown(trial, by, |by| displaced(trial, ends, displacement(*by)), |by| told(ends, by)) {
            Ok(remedy) => return Outcome::of(Ok(remedy)),
            Err(why) => short = why,
        }
    }
    Outcome::short(short)
}

/// Offers a displacement, a little longer if rounding it to what people type has spoilt it.
pub(super) fn grown(
    trial: &Trial,
    by: V3,
    edit: impl Fn(&V3) -> Option<Edit>,
    told: impl Fn(V3) -> (Change, f64),
) -> Result<super::Remedy, Short> {
    let mut short = Short::Nearest(None);
    // What is nothing grows to nothing.
    let grows = if by == V3::zeros() { 1 } else { GROWS };
    for k in 0..grows {
        let by = by * (1.0 + ROUNDED_UP * k as f64);
        let Some(edit) = edit(&by) else { continue };
        let (change, size) = told(by);
        match trial.offer(change, edit, size, false) {
            Ok(remedy) => return Ok(remedy),
            Err(why) => short = why,
        }
    }
    Err(short)
}

/// Unit vectors in base axes along which displacements are tried: the base's axes, the tool's, and the direction that is lost at
/// the worst instant; about which, if `turning`.
pub(super) fn directions(trial: &Trial, turning: bool) -> Vec<V3> {
    let mut found: Vec<V3> = vec![V3::x(), V3::y(), V3::z()];
    let segment = trial.segment();
    if let Some(instant) = Follower::of(&trial.judged.arm, segment).at(trial.finding.worst().u) {
        let length = trial.judged.arm.characteristic_length().m;
        let parts: Svd = crate::kinematics::svd(&instant.jacobian.scaled_rows(trial.judged.arm.task(), length));
        found.extend(lost(trial, &parts, turning));
        found.extend((0..3).map(|k| instant.tcp.axes.column(k).into_owned()));
    } else if let Some(tcp) = tcp_at(&trial.judged.plan, &trial.judged.arm, trial.to()) {
        found.extend((0..3).map(|k| tcp.axes.column(k).into_owned()));
    }
    let mut kept: Vec<V3> = Vec::new();
    for direction in found {
        // Either way along it is tried, so a reversed one is no other.
        if kept.iter().all(|known| known.dot(&direction).abs() < 0.98) {
            kept.push(direction);
        }
    }
    kept.into_iter().flat_map(|direction| [direction, -direction]).collect()
}

/// The direction in which the arm is nearest to losing its mobility, its translation or its turn, base axes.
fn lost(trial: &Trial, parts: &Svd, turning: bool) -> Option<V3> {
    let task = trial.judged.arm.task();
    let mut direction = V3::zeros();
    for (k, &row) in task.rows().iter().enumerate() {
        if (row >= 3) == turning {
            direction[row % 3] = parts.task[parts.count - 1][k];
        }
    }
    direction.try_normalize(1e-3)
}

use crate::geometry::{Pose, V3, turn_about};
use crate::program::Edit;
use crate::units::{Angle, Length};

use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome};

/// Heights that are tried, mm, the nearest first.
const HEIGHTS: [f64; 10] = [50.0, -50.0, 100.0, -100.0, 150.0, -150.0, 200.0, -200.0, 300.0, -300.0];
/// Leans that are tried, degrees, the least first.
const LEANS: [f64; 8] = [2.0, -2.0, 5.0, -5.0, 10.0, -10.0, 15.0, -15.0];

/// The least change of the base's height that is clear, where waypoints stand in the world and not with the base.
pub(super) fn height(trial: &Trial) -> Outcome {
    let mount = trial.recipe().mount;
    first_clear(trial, HEIGHTS.iter().map(|mm| Length::mm(*mm)), |by| {
        let pose = Pose { at: mount.at + V3::z() * by.as_m(), ..mount };
        (Change::MountHeight { by }, pose, by.as_m().abs())
    })
}

/// The least lean of the base that is clear.
pub(super) fn lean(trial: &Trial) -> Outcome {
    let mount = trial.recipe().mount;
    let leans = LEANS.iter().flat_map(|deg| [0, 1].map(|axis| (Angle::deg(*deg), axis)));
    first_clear(trial, leans, |(angle, axis)| {
        let about = if axis == 0 { V3::x() } else { V3::y() };
        let pose = Pose { axes: mount.axes * turn_about(&about, angle.as_rad()), ..mount };
        (Change::MountTilt { axis, angle }, pose, angle.as_rad().abs())
    })
}

fn first_clear<T: Copy>(trial: &Trial, tries: impl Iterator<Item = T>, told: impl Fn(T) -> (Change, Pose, f64)) -> Outcome {
    let mut nearest = Nearest::default();
    for one in tries {
        if trial.watch.is_stopped() {
            break;
        }
        let (change, mount, size) = told(one);
        let edit = Edit::Mount(mount);
        let seen = trial.look(&edit, Aim::Check);
        nearest.note(seen);
        if seen.clear
            && let Ok(remedy) = trial.offer(change, edit, size, true)
        {
            return Outcome::of(Ok(remedy));
        }
    }
    Outcome::short(nearest.short())
}

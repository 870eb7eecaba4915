use crate::geometry::{Pose, V3, turn_about};
use crate::program::Edit;
use crate::units::{Angle, Length};

use super::outward::{Way, least_steps};
use super::trial::{Aim, Nearest, Trial};
use super::{Change, Outcome};

/// Heights are told in steps of this, mm.
const HEIGHT_STEP: f64 = 1.0;
/// No height farther away than so many steps is tried (300 mm): beyond it is another cell.
const HEIGHTS: u32 = 300;
/// Leans are told in steps of this, degrees.
const LEAN_STEP: f64 = 0.1;
/// No lean of more than so many steps is tried (15 degrees).
const LEANS: u32 = 150;
/// So many mounts may turn out to be spoilt by what they do to the whole before the search ends.
const SPOILT: usize = 8;

/// The least change of the base's height that is clear, where waypoints stand in the world and not with the base.
pub(super) fn height(trial: &Trial) -> Outcome {
    let mount = trial.recipe().mount;
    let ways = [1.0, -1.0].map(|which| Way { which, most: HEIGHTS });
    least(trial, &ways, |sense, steps| {
        let by = Length::mm(crate::units::tidy(sense * f64::from(steps) * HEIGHT_STEP));
        let pose = Pose { at: mount.at + V3::z() * by.as_m(), ..mount };
        (Change::MountHeight { by }, pose, by.as_m().abs())
    })
}

/// The least lean of the base about its own x or y axis that is clear.
pub(super) fn lean(trial: &Trial) -> Outcome {
    let mount = trial.recipe().mount;
    let ways = [(0, 1.0), (0, -1.0), (1, 1.0), (1, -1.0)].map(|which| Way { which, most: LEANS });
    least(trial, &ways, |(axis, sense), steps| {
        let angle = Angle::deg(crate::units::tidy(sense * f64::from(steps) * LEAN_STEP));
        let about = if axis == 0 { V3::x() } else { V3::y() };
        let pose = Pose { axes: mount.axes * turn_about(&about, angle.as_rad()), ..mount };
        (Change::MountTilt { axis, angle }, pose, angle.as_rad().abs())
    })
}

/// The least change of the mount that is clear, each told as a change, a mount and a size.
fn least<W: Copy>(trial: &Trial, ways: &[Way<W>], told: impl Fn(W, u32) -> (Change, Pose, f64)) -> Outcome {
    let (mut nearest, mut spoilt, mut offered) = (Nearest::default(), 0, None);
    least_steps(ways, |which, steps| {
        if spoilt >= SPOILT || trial.watch.is_stopped() {
            return false;
        }
        let (change, mount, size) = told(which, steps);
        let edit = Edit::Mount(mount);
        if !nearest.note(trial.look(&edit, Aim::Check)) {
            return false;
        }
        let remedy = trial.offer(change, edit, size, true);
        spoilt += usize::from(remedy.is_err());
        nearest.take(remedy, &mut offered)
    });
    Outcome::of(offered.ok_or(nearest.short()))
}

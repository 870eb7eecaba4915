//! Remedies: what would settle a finding. Each is tried, judged and proved again with the whole recipe, and only then offered; the
//! words are made in `explain`.

mod acceleration;
mod at_override;
mod desk;
mod dwell;
mod fly_by;
mod glance;
mod greatest;
mod joint_move;
mod kinds;
mod least;
mod leaves;
mod load;
mod mount;
mod moved;
mod outward;
mod posture;
mod remedy;
mod shift;
mod size;
mod slower;
mod trial;
mod turn;
mod via;

pub use desk::{Desk, Errand, News};
pub use kinds::kinds_for;
pub use remedy::{Change, Effect, Ends, Remedy, RemedyKind, Short, Told, Tried};

use crate::checks::{Finding, Watch, in_order};

use super::Judged;
use trial::Trial;

/// What came of trying one kind.
struct Outcome {
    found: Vec<Remedy>,
    short: Short,
}

impl Outcome {
    fn nothing() -> Self {
        Self::short(Short::Nearest(None))
    }

    fn short(short: Short) -> Self {
        Self { found: Vec::new(), short }
    }

    fn of(offered: Result<Remedy, Short>) -> Self {
        match offered {
            Ok(remedy) => Self { found: vec![remedy], short: Short::Nearest(None) },
            Err(short) => Self::short(short),
        }
    }
}

/// Looks for remedies of a finding, kind by kind, and tells of each as soon as it is known; in an order that does not depend on the
/// number of cores. Ends early, with what was told so far, when the watch stops it.
pub fn search(judged: &Judged, finding: &Finding, watch: &Watch, mut tell: impl FnMut(Told)) {
    let trial = Trial { judged, finding, watch };
    let kinds = kinds_for(judged, finding);
    let tried = |kind: &RemedyKind| (!watch.is_stopped()).then(|| (*kind, try_kind(&trial, *kind)));
    in_order(&kinds, tried, |done| {
        let Some((kind, outcome)) = done.filter(|_| !watch.is_stopped()) else { return };
        if outcome.found.is_empty() {
            tell(Told::Tried(Tried { kind, short: outcome.short }));
        }
        for remedy in outcome.found {
            tell(Told::Found(Box::new(remedy)));
        }
    });
}

/// All remedies of a finding, the least change first, and what was tried without success.
pub fn found_by(judged: &Judged, finding: &Finding, watch: &Watch) -> (Vec<Remedy>, Vec<Tried>) {
    let (mut remedies, mut tried) = (Vec::new(), Vec::new());
    search(judged, finding, watch, |told| match told {
        Told::Found(remedy) => remedies.push(*remedy),
        Told::Tried(without) => tried.push(without),
    });
    remedies.sort_by(Remedy::order);
    (remedies, tried)
}

fn try_kind(trial: &Trial, kind: RemedyKind) -> Outcome {
    match kind {
        RemedyKind::Slower => slower::slower(trial),
        RemedyKind::Acceleration => acceleration::acceleration(trial),
        RemedyKind::FlyBy => fly_by::fly_by(trial),
        RemedyKind::Dwell => dwell::dwell(trial),
        RemedyKind::Turn => turn::turn(trial),
        RemedyKind::Tilt => shift::tilt(trial),
        RemedyKind::Shift => shift::shift(trial),
        RemedyKind::Via => via::via(trial),
        RemedyKind::JointMove => joint_move::joint_move(trial),
        RemedyKind::Posture => posture::posture(trial),
        RemedyKind::Override => at_override::at_override(trial),
        RemedyKind::Load => load::heaviest(trial),
        RemedyKind::Centre => load::nearest_centre(trial),
        RemedyKind::Grip => load::grip(trial),
        RemedyKind::MountHeight => mount::height(trial),
        RemedyKind::MountTilt => mount::lean(trial),
    }
}

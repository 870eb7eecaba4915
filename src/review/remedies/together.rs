use std::sync::Arc;

use crate::program::Edit;

use super::shift::but_for_speed;
use super::slower::slower;
use super::trial::Trial;
use super::{Judged, Remedy};

/// A shift together with a lower speed, where a shift settles the finding but asks too much at the speed given, and nothing does
/// alone. Of the shifts tried the one is offered that changes least together with its speed.
pub(super) fn shift_and_slower(trial: &Trial) -> Option<Remedy> {
    let offered = but_for_speed(trial).into_iter().filter_map(|(change, first, size)| {
        let mut recipe = trial.recipe().clone();
        first.apply(&mut recipe).ok()?;
        if !recipe.faults(&trial.judged.arm).is_empty() {
            return None;
        }
        let shifted = Judged::of(&trial.judged.arm, &Arc::new(recipe), Some(trial.judged), trial.watch)?;
        let spoilt = trial.too_fast(&shifted)?;
        let second = slower(&Trial { judged: &shifted, finding: &spoilt, watch: trial.watch }).found.pop()?;
        let both = Edit::Together(vec![first, second.edit?]);
        let remedy = trial.offer(change, both, size + second.size, false).ok()?;
        Some(Remedy { and: Some(second.change), ..remedy })
    });
    offered.min_by(Remedy::order)
}

use std::sync::Arc;

use crate::arm::Arm;
use crate::checks::{Before, Finding, Place, Survey, Watch, survey};
use crate::motion::Plan;
use crate::program::Recipe;

/// A recipe with what became of it: planned and surveyed. It never changes; an edit makes a new one.
#[derive(Debug, Clone)]
pub struct Judged {
    /// The arm.
    pub arm: Arc<Arm>,
    /// What was taught.
    pub recipe: Arc<Recipe>,
    /// Its motion.
    pub plan: Arc<Plan>,
    /// The result of checking it.
    pub survey: Arc<Survey>,
}

impl Judged {
    /// Where a place of a finding is on the cycle: itself, unless the finding is of the version that stops at fly-by points.
    pub fn on_cycle(&self, finding: &Finding, place: Place) -> Place {
        if !finding.stop {
            return place;
        }
        let u = self.plan.nearest_on_cycle(finding.segment, place.u);
        Place { time: self.plan.segments[finding.segment].law.time_of(u), u }
    }

    /// Plans and surveys a recipe, taking over what `before` judged alike. `None` if the watch stopped it.
    pub fn of(arm: &Arc<Arm>, recipe: &Arc<Recipe>, before: Option<&Self>, watch: &Watch) -> Option<Self> {
        let before = before.filter(|old| Arc::ptr_eq(&old.arm, arm));
        let go_on = || !watch.is_stopped();
        let replanned = Plan::again(arm, recipe, before.map(|old| (old.recipe.as_ref(), old.plan.as_ref())), &go_on)?;
        let before = before.map(|old| Before {
            acceptance: &old.recipe.acceptance,
            gravity: old.plan.gravity,
            survey: &old.survey,
            same: &replanned.same,
        });
        let survey = survey(arm, recipe, &replanned.plan, before, watch)?;
        let (arm, recipe) = (Arc::clone(arm), Arc::clone(recipe));
        Some(Self { arm, recipe, plan: Arc::new(replanned.plan), survey: Arc::new(survey) })
    }
}

use std::collections::HashMap;
use std::sync::Arc;

use crate::arm::{Arm, Joints};
use crate::dynamics::gravity_in_base;
use crate::geometry::V3;
use crate::program::{Carried, Hanging, Recipe, Taught};

use super::fly_by::{Earlier, Laid, Run, renumbered, rounded};
use super::leg::{Around, leg};
use super::resolve::{Place, resolve};
use super::{Plan, Segment};

/// What a plan was made from and how, for a later plan of an edited recipe to take over what is the same.
#[derive(Debug, Clone, Default)]
pub(super) struct Made {
    /// Where the first waypoint is.
    first: Option<Place>,
    /// One entry a waypoint but the first.
    legs: Vec<Leg>,
}

#[derive(Debug, Clone)]
struct Leg {
    around: Around,
    /// Where the waypoint is that it arrives at.
    place: Place,
    laid: Laid,
}

/// A plan, and what in it is as it was in an earlier one.
#[derive(Debug, Clone)]
pub struct Replanned {
    /// The plan.
    pub plan: Plan,
    /// For each of its segments the segment of the earlier plan that moves alike and is judged alike, whatever its number is.
    pub same: Vec<Option<usize>>,
}

impl Plan {
    /// Plans a recipe without faults.
    pub fn of(arm: &Arm, recipe: &Recipe) -> Self {
        let planned = Self::again(arm, recipe, None, &|| true);
        planned.expect("nothing stops it").plan
    }

    /// Plans a recipe without faults, taking over from an earlier plan for the same arm what the changes do not touch; `before` is
    /// that recipe and its plan. The result is that of [`Plan::of`]. `None` as soon as `go_on` says no.
    pub fn again(arm: &Arm, recipe: &Recipe, before: Option<(&Recipe, &Self)>, go_on: &dyn Fn() -> bool) -> Option<Replanned> {
        let tables = |recipe: &Recipe| (recipe.usual, recipe.mount);
        let before = before.filter(|(old, _)| tables(old) == tables(recipe) && old.frames == recipe.frames);
        let mut work = Work::of(arm, recipe, before);
        for to in 1..recipe.waypoints.len() {
            if !go_on() {
                return None;
            }
            work.plan_leg(to);
        }
        Some(work.laid_out())
    }
}

/// A recipe while it is planned.
struct Work<'a> {
    arm: &'a Arm,
    recipe: &'a Recipe,
    before: Option<(&'a Recipe, &'a Plan)>,
    /// Waypoints of the earlier recipe by name.
    named_before: HashMap<&'a str, usize>,
    /// Waypoints that were planned already, by name.
    named: HashMap<&'a str, usize>,
    around: Vec<Around>,
    places: Vec<Place>,
    segments: Vec<Arc<Segment>>,
    /// Which leg of the earlier plan each one is.
    same: Vec<Option<usize>>,
    /// Tool and load on arriving at and on leaving each waypoint, and the tool's named points.
    hung: Vec<([Carried; 2], Arc<[V3]>)>,
}

impl<'a> Work<'a> {
    fn of(arm: &'a Arm, recipe: &'a Recipe, before: Option<(&'a Recipe, &'a Plan)>) -> Self {
        let by_name = |recipe: &'a Recipe| recipe.waypoints.iter().enumerate().map(|(k, w)| (w.name.as_str(), k));
        let points =
            |hangs: &Hanging| hangs.tool.map_or_else(Arc::default, |tool| tool.points.iter().map(|point| point.at).collect());
        let hung: Vec<_> = recipe.hanging().map(|hangs| ([hangs.arriving(), hangs.leaving()], points(&hangs))).collect();
        let mut work = Self {
            arm,
            recipe,
            before,
            named_before: before.map_or_else(HashMap::new, |(old, _)| by_name(old).collect()),
            named: HashMap::new(),
            around: Vec::new(),
            places: Vec::new(),
            segments: Vec::new(),
            same: Vec::new(),
            hung,
        };
        if let Some(first) = recipe.waypoints.first() {
            let middle = Joints::from_fn(arm.len(), |j| arm.joints()[j].range.middle());
            let known = before.filter(|(old, _)| old.waypoints.first() == Some(first) && old.hanging_at(0) == recipe.hanging_at(0));
            let place = known.and_then(|(_, plan)| plan.made.first);
            work.places.push(place.unwrap_or_else(|| resolve(arm, recipe, 0, &work.hung[0].0[0], &middle)));
            work.named.insert(&first.name, 0);
        }
        work
    }

    fn plan_leg(&mut self, to: usize) {
        let waypoint = &self.recipe.waypoints[to];
        let near = match &waypoint.taught {
            Taught::Pose { near: Some(name), .. } => self.named.get(name.as_str()).map(|&index| self.places[index].q),
            _ => None,
        };
        let ([carried, leaving], points) = self.hung[to].clone();
        let around = Around { start: self.places[to - 1], near, carried, leaving, points };
        let known = self.known(to, &around);
        let (segment, place) = match known {
            Some((leg, segment, place)) => {
                self.same.push(Some(leg));
                (renumbered(segment, to), place)
            }
            None => {
                self.same.push(None);
                let (segment, place) = leg(self.arm, self.recipe, to, &around);
                (Arc::new(segment), place)
            }
        };
        self.named.insert(&waypoint.name, to);
        self.around.push(around);
        self.places.push(place);
        self.segments.push(segment);
    }

    /// The leg of the earlier plan that arrives at the same waypoint in the same way.
    fn known(&self, to: usize, around: &Around) -> Option<(usize, &'a Arc<Segment>, Place)> {
        let (recipe, plan) = self.before?;
        let waypoint = &self.recipe.waypoints[to];
        let index = *self.named_before.get(waypoint.name.as_str())?;
        let old = plan.made.legs.get(index.checked_sub(1)?)?;
        let same = recipe.waypoints[index] == *waypoint && old.around == *around;
        same.then(|| (index - 1, plan.version(old.laid.at, true), old.place))
    }

    fn laid_out(self) -> Replanned {
        let Self { arm, recipe, before, around, places, segments, same, .. } = self;
        let earlier =
            before.map(|(_, plan)| Earlier { plan, laid: plan.made.legs.iter().map(|leg| leg.laid).collect(), same: &same });
        let (runs, laid) = rounded(arm, recipe, &segments, earlier.as_ref());
        let first_dwell = recipe.waypoints.first().map_or(0.0, |w| w.dwell.as_s());
        let mut plan = Plan {
            segments: Vec::with_capacity(runs.len()),
            stops: Vec::with_capacity(runs.len()),
            fly_bys: laid.iter().enumerate().filter_map(|(k, laid)| laid.fly_by(k + 1)).collect(),
            starts: Vec::with_capacity(runs.len()),
            gravity: gravity_in_base(&recipe.mount),
            first_dwell,
            made: Made::default(),
        };
        let mut same = Vec::with_capacity(runs.len());
        let mut time = first_dwell;
        for Run { segment, stop, same: known } in runs {
            plan.starts.push(time);
            time += segment.duration() + segment.dwell;
            plan.segments.push(segment);
            plan.stops.push(stop);
            same.push(known);
        }
        let mut places = places.into_iter();
        plan.made.first = places.next();
        let legs = around.into_iter().zip(places).zip(laid);
        plan.made.legs = legs.map(|((around, place), laid)| Leg { around, place, laid }).collect();
        Replanned { plan, same }
    }
}

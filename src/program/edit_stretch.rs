//! Larger edits: whole stretches of waypoints duplicated, deleted, moved, turned round, given another tool or load. A stretch is a
//! range of waypoints, counted from 0, both ends in it. Each edit is one step for the person who made it.

use std::ops::RangeInclusive;

use crate::units::Share;

use super::rename::one_step;
use super::{Arrive, Edit, Recipe, Taught, Then, Waypoint};

/// The share of a joint move that is brought in where the recipe has no joint move to go by: slow, as a first run is. Common
/// practice, no source.
const SLOW: f64 = 0.25;

/// Waypoints `stretch` once more, behind it, under free names; those among them that are taught near one another stay so.
///
/// # Panics
/// If the stretch is not in the recipe.
pub fn duplicate(recipe: &Recipe, stretch: RangeInclusive<usize>) -> Edit {
    let (first, last) = stretch.into_inner();
    let mut taken: Vec<String> = recipe.waypoints.iter().map(|waypoint| waypoint.name.clone()).collect();
    let mut renamed: Vec<(String, String)> = Vec::new();
    let mut edits = Vec::new();
    for (offset, original) in recipe.waypoints[first..=last].iter().enumerate() {
        let mut copy = original.clone();
        copy.name = free_name(&original.name, &taken);
        taken.push(copy.name.clone());
        renamed.push((original.name.clone(), copy.name.clone()));
        if let Taught::Pose { near: Some(near), .. } = &mut copy.taught
            && let Some((_, new)) = renamed.iter().find(|(old, _)| old == near)
        {
            near.clone_from(new);
        }
        if copy.arrive.is_none() {
            copy.arrive = Some(plainest(recipe));
        }
        edits.push(Edit::Insert { index: last + 1 + offset, waypoint: Box::new(copy) });
    }
    one_step(edits)
}

/// A name that no waypoint has: the same with a number behind it, counted on from one that is there.
pub fn free_name(name: &str, taken: &[String]) -> String {
    let stem = name.trim_end_matches(|c: char| c.is_ascii_digit());
    let (stem, number) = match name[stem.len()..].parse::<u64>() {
        Ok(number) if stem.ends_with(' ') => (stem.trim_end(), number + 1),
        _ => (name, 2),
    };
    (number..).map(|number| format!("{stem} {number}")).find(|name| !taken.contains(name)).unwrap_or_else(|| name.to_owned())
}

/// How to arrive where nothing says so: by a joint move no faster than the slowest that is there.
fn plainest(recipe: &Recipe) -> Arrive {
    let shares = recipe.waypoints.iter().filter_map(|waypoint| match &waypoint.arrive {
        Some(Arrive::Joint { share, .. }) => share.or(recipe.usual.share),
        _ => None,
    });
    let slowest = shares.chain(recipe.usual.share).map(Share::as_fraction).fold(f64::INFINITY, f64::min);
    let share = if slowest.is_finite() { slowest } else { SLOW };
    Arrive::Joint { share: Some(Share::fraction(share)), accel_share: None }
}

/// Waypoints `stretch` gone. What they changed for those behind them, the tool, stays changed there.
///
/// # Errors
/// If a waypoint behind it is taught near one of them, or fewer than two would be left.
pub fn delete(recipe: &Recipe, stretch: RangeInclusive<usize>) -> Result<Edit, String> {
    let (first, last) = stretch.into_inner();
    let Some(gone) = recipe.waypoints.get(first..=last) else { return Err(outside(recipe)) };
    let left = recipe.waypoints.len() - gone.len();
    if left < 2 {
        return Err(format!("{left} of {} waypoints would be left; there must be at least 2", recipe.waypoints.len()));
    }
    for (index, waypoint) in recipe.waypoints.iter().enumerate().skip(last + 1) {
        if let Taught::Pose { near: Some(near), .. } = &waypoint.taught
            && let Some(needed) = gone.iter().find(|gone| gone.name == *near)
        {
            let (number, name) = (index + 1, &waypoint.name);
            return Err(format!(
                "waypoint {number} \"{name}\" is taught near \"{}\"; change that first, or delete it too",
                needed.name
            ));
        }
    }
    let mut after: Vec<Waypoint> = recipe.waypoints.clone();
    after.drain(first..=last);
    if let (Some(tool), Some(next)) = (gone.iter().rev().find_map(|waypoint| waypoint.tool.clone()), after.get_mut(first)) {
        next.tool.get_or_insert(tool);
    }
    settle_ends(recipe, &mut after);
    let mut edits: Vec<Edit> = (first..=last).rev().map(|index| Edit::Remove { index }).collect();
    let mut standing = recipe.waypoints.clone();
    standing.drain(first..=last);
    edits.extend(differences(&standing, &after));
    Ok(one_step(edits))
}

/// Waypoints `stretch` moved, so that the first of them stands at `to` among the others.
///
/// # Errors
/// If one would come to stand before a waypoint that it is taught near.
pub fn reorder(recipe: &Recipe, stretch: RangeInclusive<usize>, to: usize) -> Result<Edit, String> {
    let (first, last) = stretch.into_inner();
    if first > last || last >= recipe.waypoints.len() || to + (last - first) >= recipe.waypoints.len() {
        return Err(outside(recipe));
    }
    // One by one: down from the last of them, up from the first, so that each move leaves the others' places as they were.
    let moves: Vec<Edit> = if to > first {
        (first..=last).map(|_| Edit::Reorder { from: first, to: to + (last - first) }).collect()
    } else {
        (0..=last - first).map(|offset| Edit::Reorder { from: first + offset, to: to + offset }).collect()
    };
    let mut moved = recipe.clone();
    for step in &moves {
        step.apply(&mut moved).map_err(|fault| fault.to_string())?;
    }
    near_comes_before(&moved.waypoints)?;
    let mut after = moved.waypoints.clone();
    settle_ends(recipe, &mut after);
    Ok(one_step(moves.into_iter().chain(differences(&moved.waypoints, &after)).collect()))
}

/// Waypoints `stretch` in the opposite order. Between them the arm takes the same paths the other way; the first is arrived at as the
/// first was before.
///
/// # Errors
/// If the tool or the load changes within it, if one is taught near another of them, or if it holds the recipe's first waypoint.
pub fn reverse(recipe: &Recipe, stretch: RangeInclusive<usize>) -> Result<Edit, String> {
    let (first, last) = stretch.into_inner();
    let Some(old) = recipe.waypoints.get(first..=last) else { return Err(outside(recipe)) };
    if first == 0 {
        return Err("the first waypoint is where the cycle starts; leave it out of the stretch".to_owned());
    }
    for (offset, waypoint) in old.iter().enumerate() {
        let called = format!("waypoint {} \"{}\"", first + offset + 1, waypoint.name);
        if waypoint.then.is_some() {
            return Err(format!("{called} takes or releases a load; the stretch can't be turned round with it"));
        }
        if offset > 0 && waypoint.tool.is_some() {
            return Err(format!("the tool changes at {called}; the stretch can't be turned round with it"));
        }
    }
    let count = old.len();
    let new: Vec<Waypoint> = (0..count)
        .map(|place| {
            let mut waypoint = old[count - 1 - place].clone();
            // The segment between two of them now arrives at the other one.
            let of = if place == 0 { &old[0] } else { &old[count - place] };
            waypoint.arrive.clone_from(&of.arrive);
            waypoint.push.clone_from(&of.push);
            waypoint.tool = if place == 0 { old[0].tool.clone() } else { None };
            waypoint
        })
        .collect();
    let mut after = recipe.waypoints.clone();
    after.splice(first..=last, new);
    near_comes_before(&after)?;
    settle_ends(recipe, &mut after);
    Ok(one_step(differences(&recipe.waypoints, &after)))
}

/// Another tool on the segments that arrive at `stretch`; behind it, the one that was.
///
/// # Errors
/// If there is no such tool or stretch.
pub fn with_tool(recipe: &Recipe, stretch: RangeInclusive<usize>, tool: &str) -> Result<Edit, String> {
    let (first, last) = stretch.into_inner();
    if first > last || last >= recipe.waypoints.len() {
        return Err(outside(recipe));
    }
    if recipe.tools.iter().all(|known| known.name != tool) {
        return Err(format!("there is no tool \"{tool}\""));
    }
    let used = |index: usize| {
        let named = recipe.waypoints[..=index].iter().rev().find_map(|waypoint| waypoint.tool.clone());
        named.or_else(|| recipe.tools.first().map(|tool| tool.name.clone()))
    };
    let mut after = recipe.waypoints.clone();
    for waypoint in &mut after[first..=last] {
        waypoint.tool = None;
    }
    let on_before = if first > 0 { used(first - 1) } else { recipe.tools.first().map(|tool| tool.name.clone()) };
    if on_before.as_deref() != Some(tool) {
        after[first].tool = Some(tool.to_owned());
    }
    if let Some(next) = after.get_mut(last + 1)
        && next.tool.is_none()
        && used(last).as_deref() != Some(tool)
    {
        next.tool = used(last);
    }
    Ok(one_step(differences(&recipe.waypoints, &after)))
}

/// Another load (or none) in the tool on the segments that arrive at `stretch`: it is taken where the arm stands before, and what
/// was carried behind the stretch is taken again at its end.
///
/// # Errors
/// If there is no such load or stretch, or if it starts at the first waypoint, where nothing arrives.
pub fn with_load(recipe: &Recipe, stretch: RangeInclusive<usize>, load: Option<&str>) -> Result<Edit, String> {
    let (first, last) = stretch.into_inner();
    if first > last || last >= recipe.waypoints.len() {
        return Err(outside(recipe));
    }
    if first == 0 {
        return Err("no segment arrives at the first waypoint; what is carried there is the recipe's `carrying`".to_owned());
    }
    if let Some(name) = load.filter(|name| recipe.loads.iter().all(|known| known.name != *name)) {
        return Err(format!("there is no load \"{name}\""));
    }
    let carried_after = |index: usize| {
        recipe.waypoints[..=index].iter().rev().find_map(|waypoint| waypoint.then.as_ref()).map_or_else(
            || recipe.carrying.clone(),
            |then| match then {
                Then::Take(name) => Some(name.clone()),
                Then::Release => None,
            },
        )
    };
    let happening = |load: Option<String>| load.map_or(Then::Release, Then::Take);
    let mut after = recipe.waypoints.clone();
    after[first - 1].then = Some(happening(load.map(str::to_owned)));
    for waypoint in &mut after[first..last] {
        waypoint.then = None;
    }
    let behind = carried_after(last);
    after[last].then = (behind.as_deref() != load).then(|| happening(behind));
    Ok(one_step(differences(&recipe.waypoints, &after)))
}

/// Where waypoints come to stand first or last: none arrives at the first by a path, none passes by an end, all others say how they
/// are arrived at.
fn settle_ends(recipe: &Recipe, waypoints: &mut [Waypoint]) {
    let last = waypoints.len().saturating_sub(1);
    for (index, waypoint) in waypoints.iter_mut().enumerate() {
        if index == 0 && waypoint.arrive.as_ref().is_some_and(Arrive::follows_path) {
            waypoint.arrive = None;
        }
        if index > 0 && waypoint.arrive.is_none() {
            waypoint.arrive = Some(plainest(recipe));
        }
        if index == 0 || index == last {
            waypoint.fly_by = None;
        }
    }
}

/// Refuses an order in which a waypoint is taught near one that comes only later.
fn near_comes_before(waypoints: &[Waypoint]) -> Result<(), String> {
    let mut before = std::collections::HashSet::new();
    for (index, waypoint) in waypoints.iter().enumerate() {
        if let Taught::Pose { near: Some(near), .. } = &waypoint.taught
            && !before.contains(near.as_str())
        {
            let (number, name) = (index + 1, &waypoint.name);
            return Err(format!("\"{name}\", as waypoint {number}, would come before \"{near}\", which it is taught near"));
        }
        before.insert(waypoint.name.as_str());
    }
    Ok(())
}

/// A change for every waypoint that is not as it was; both lists are of one length.
fn differences(before: &[Waypoint], after: &[Waypoint]) -> Vec<Edit> {
    let changed = before.iter().zip(after).enumerate().filter(|(_, (before, after))| before != after);
    changed.map(|(index, (_, after))| Edit::Change { index, waypoint: Box::new(after.clone()) }).collect()
}

fn outside(recipe: &Recipe) -> String {
    format!("there is no such stretch; there are {} waypoints", recipe.waypoints.len())
}

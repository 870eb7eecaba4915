//! Renaming: what refers to a thing by its name follows, in one step.

use super::{Arrive, Edit, Given, PushAxes, Recipe, Taught, Then, Waypoint};

/// Waypoint `index` under another name; those that are taught near it follow.
///
/// # Panics
/// If there is no waypoint `index`.
pub fn waypoint(recipe: &Recipe, index: usize, name: &str) -> Edit {
    let old = recipe.waypoints[index].name.clone();
    let own = Edit::change(recipe, index, |waypoint| name.clone_into(&mut waypoint.name));
    // Of two waypoints of one name, the first is meant where the name is used.
    if recipe.waypoint_named(&old) != Some(index) {
        return own;
    }
    let mut edits = vec![own];
    edits.extend(changes(recipe, |waypoint| match &mut waypoint.taught {
        Taught::Pose { near: Some(near), .. } => follow(near, &old, name),
        _ => false,
    }));
    one_step(edits)
}

/// Tool `index` under another name; waypoints that use it follow.
///
/// # Panics
/// If there is no tool `index`.
pub fn tool(recipe: &Recipe, index: usize, name: &str) -> Edit {
    let mut tools = recipe.tools.clone();
    let old = std::mem::replace(&mut tools[index].name, name.to_owned());
    let mut edits = vec![Edit::Tools(tools)];
    edits.extend(changes(recipe, |waypoint| waypoint.tool.as_mut().is_some_and(|tool| follow(tool, &old, name))));
    one_step(edits)
}

/// Load `index` under another name; where it is taken, and what is carried at the start, follows.
///
/// # Panics
/// If there is no load `index`.
pub fn load(recipe: &Recipe, index: usize, name: &str) -> Edit {
    let mut loads = recipe.loads.clone();
    let old = std::mem::replace(&mut loads[index].name, name.to_owned());
    let mut edits = vec![Edit::Loads(loads)];
    if recipe.carrying.as_deref() == Some(&old) {
        edits.push(Edit::Carrying(Some(name.to_owned())));
    }
    edits.extend(changes(recipe, |waypoint| match &mut waypoint.then {
        Some(Then::Take(load)) => follow(load, &old, name),
        _ => false,
    }));
    one_step(edits)
}

/// Frame `index` under another name; frames that stand in it, and poses and pushes that are given in it, follow.
///
/// # Panics
/// If there is no frame `index`.
pub fn frame(recipe: &Recipe, index: usize, name: &str) -> Edit {
    let mut frames = recipe.frames.clone();
    let old = std::mem::replace(&mut frames[index].name, name.to_owned());
    for frame in &mut frames {
        follow(&mut frame.parent, &old, name);
    }
    let mut edits = vec![Edit::Frames(frames)];
    edits.extend(changes(recipe, |waypoint| {
        let mut any = false;
        for given in poses_of(waypoint) {
            any |= given.frame.as_mut().is_some_and(|frame| follow(frame, &old, name));
        }
        if let Some(push) = &mut waypoint.push
            && let PushAxes::Frame(frame) = &mut push.axes
        {
            any |= follow(frame, &old, name);
        }
        any
    }));
    one_step(edits)
}

/// Every pose and point that a waypoint gives in some frame.
pub(super) fn poses_of(waypoint: &mut Waypoint) -> impl Iterator<Item = &mut Given> {
    let taught = match &mut waypoint.taught {
        Taught::Pose { pose, .. } => Some(pose),
        Taught::Joints(_) => None,
    };
    let via = match &mut waypoint.arrive {
        Some(Arrive::Arc { via, .. }) => Some(via),
        _ => None,
    };
    taught.into_iter().chain(waypoint.shown.as_mut()).chain(via)
}

/// A change for every waypoint in which `how` changes something.
pub(super) fn changes(recipe: &Recipe, mut how: impl FnMut(&mut Waypoint) -> bool) -> Vec<Edit> {
    let mut edits = Vec::new();
    for (index, waypoint) in recipe.waypoints.iter().enumerate() {
        let mut changed = waypoint.clone();
        if how(&mut changed) {
            edits.push(Edit::Change { index, waypoint: Box::new(changed) });
        }
    }
    edits
}

/// Several edits as one step for the person who made them.
pub(super) fn one_step(mut edits: Vec<Edit>) -> Edit {
    match edits.len() {
        1 => edits.remove(0),
        _ => Edit::Together(edits),
    }
}

fn follow(reference: &mut String, old: &str, new: &str) -> bool {
    let follows = reference == old;
    if follows {
        new.clone_into(reference);
    }
    follows
}

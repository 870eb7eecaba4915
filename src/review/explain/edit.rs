use crate::arm::Arm;
use crate::program::{Datum, Edit, Part, Recipe, data_of};

/// How many changed data of one part are told one by one; with more, only how many.
const TOLD: usize = 3;

/// An edit in words, told of the recipe before it: `waypoint 4 "on housing": speed 250 mm/s -> 180 mm/s`.
pub fn edit_words(before: &Recipe, arm: &Arm, edit: &Edit) -> String {
    match edit {
        Edit::Insert { index, waypoint } => format!("waypoint {} \"{}\" inserted", index + 1, waypoint.name),
        Edit::Remove { index } => format!("{} deleted", waypoint_called(before, *index)),
        Edit::Reorder { from, to } => format!("{} moved to place {}", waypoint_called(before, *from), to + 1),
        _ => {
            let mut after = before.clone();
            match edit.apply(&mut after) {
                Ok(_) => summed_up(difference_words(before, &after, arm)),
                Err(fault) => fault.to_string(),
            }
        }
    }
}

fn waypoint_called(recipe: &Recipe, index: usize) -> String {
    match recipe.waypoints.get(index) {
        Some(waypoint) => format!("waypoint {} \"{}\"", index + 1, waypoint.name),
        None => format!("waypoint {}", index + 1),
    }
}

/// The first of several sentences, and how many more there are.
fn summed_up(mut all: Vec<String>) -> String {
    match all.len() {
        0 => "nothing changed".to_owned(),
        1 => all.remove(0),
        more => format!("{}, and {} more", all[0], more - 1),
    }
}

/// What is different between two recipes on one arm, a sentence each: tools, loads, frames and criteria, then waypoint by waypoint.
/// None if they are the same.
pub fn difference_words(before: &Recipe, after: &Recipe, arm: &Arm) -> Vec<String> {
    if before == after {
        return Vec::new();
    }
    let mut words = Vec::new();
    for (part, called) in
        [(Part::Recipe, "recipe"), (Part::Mount, "mount"), (Part::Acceptance, "acceptance"), (Part::Usual, "usual")]
    {
        words.extend(part_words(called, &data_of(before, arm, part), &data_of(after, arm, part)));
    }
    if before.arm != after.arm {
        words.push(format!("arm \"{}\" -> \"{}\"", before.arm, after.arm));
    }
    let names = |names: Vec<&str>| names.into_iter().map(str::to_owned).collect::<Vec<_>>();
    words.extend(named(
        "tool",
        &names(before.tools.iter().map(|t| t.name.as_str()).collect()),
        &names(after.tools.iter().map(|t| t.name.as_str()).collect()),
        |i, k| (data_of(before, arm, Part::Tool(i)), data_of(after, arm, Part::Tool(k))),
    ));
    words.extend(named(
        "load",
        &names(before.loads.iter().map(|l| l.name.as_str()).collect()),
        &names(after.loads.iter().map(|l| l.name.as_str()).collect()),
        |i, k| (data_of(before, arm, Part::Load(i)), data_of(after, arm, Part::Load(k))),
    ));
    words.extend(named(
        "frame",
        &names(before.frames.iter().map(|f| f.name.as_str()).collect()),
        &names(after.frames.iter().map(|f| f.name.as_str()).collect()),
        |i, k| (data_of(before, arm, Part::Frame(i)), data_of(after, arm, Part::Frame(k))),
    ));
    words.extend(waypoint_words(before, after, arm));
    if words.is_empty() {
        words.push("figures that read the same differ in their last digits".to_owned());
    }
    words
}

fn waypoint_words(before: &Recipe, after: &Recipe, arm: &Arm) -> Vec<String> {
    let olds: Vec<String> = before.waypoints.iter().map(|w| w.name.clone()).collect();
    let news: Vec<String> = after.waypoints.iter().map(|w| w.name.clone()).collect();
    // Compared first, so that of a long recipe only what changed is listed.
    let data = |recipe: &Recipe, index: usize| {
        let mut data = data_of(recipe, arm, Part::Waypoint(index));
        data.extend(data_of(recipe, arm, Part::Segment(index)));
        data
    };
    named("waypoint", &olds, &news, |i, k| {
        let (old, new) = (&before.waypoints[i], &after.waypoints[k]);
        if old == new { (Vec::new(), Vec::new()) } else { (data(before, i), data(after, k)) }
    })
}

/// The differences between two lists of named things: what stands in both under one name (or, where as many were renamed, at one
/// place) is compared; the rest came or went.
fn named(kind: &str, olds: &[String], news: &[String], data: impl Fn(usize, usize) -> (Vec<Datum>, Vec<Datum>)) -> Vec<String> {
    let mut old_of: Vec<Option<usize>> = Vec::with_capacity(news.len());
    let mut at: std::collections::HashMap<&str, usize> = std::collections::HashMap::new();
    for (index, name) in olds.iter().enumerate().rev() {
        at.insert(name, index);
    }
    for name in news {
        old_of.push(at.remove(name.as_str()));
    }
    if olds.len() == news.len() {
        for (k, old) in old_of.iter_mut().enumerate() {
            if old.is_none() && at.get(olds[k].as_str()) == Some(&k) {
                at.remove(olds[k].as_str());
                *old = Some(k);
            }
        }
    }
    let mut words = Vec::new();
    let mut gone: Vec<usize> = at.into_values().collect();
    gone.sort_unstable();
    words.extend(gone.into_iter().map(|i| format!("{kind} {} \"{}\" deleted", i + 1, olds[i])));
    let mut furthest = None;
    for (k, (name, old)) in news.iter().zip(&old_of).enumerate() {
        let Some(i) = *old else {
            words.push(format!("{kind} {} \"{name}\" inserted", k + 1));
            continue;
        };
        if furthest.is_some_and(|furthest| i < furthest) {
            words.push(format!("{kind} \"{name}\" moved from place {} to {}", i + 1, k + 1));
        } else {
            furthest = Some(i);
        }
        let (before, after) = data(i, k);
        words.extend(part_words(&format!("{kind} {} \"{}\"", k + 1, olds[i]), &before, &after));
    }
    words
}

/// What changed in one part, as one sentence; nothing if nothing did.
fn part_words(called: &str, before: &[Datum], after: &[Datum]) -> Option<String> {
    let mut changes = Vec::new();
    for new in after {
        match before.iter().find(|old| old.name == new.name) {
            Some(old) if old.text == new.text => {}
            Some(old) => changes.push(format!("{} {} -> {}", new.name, old.told(), new.told())),
            None if new.text.is_empty() => {}
            None => changes.push(format!("{} {}", new.name, new.told())),
        }
    }
    let goes = before.iter().filter(|old| !old.text.is_empty() && after.iter().all(|new| new.name != old.name));
    changes.extend(goes.map(|old| format!("without {}", old.name)));
    if changes.is_empty() {
        return None;
    }
    let more = changes.len().saturating_sub(TOLD);
    changes.truncate(TOLD);
    let rest = if more > 0 { format!(", and {more} more") } else { String::new() };
    Some(format!("{called}: {}{rest}", changes.join(", ")))
}

use crate::geometry::{M3, V3};
use crate::program::Recipe;

/// A part of a unit vector below this is left out of the words (12 degrees).
const SMALL: f64 = 0.2;
/// How far a mount may lean and still count as upright, cosine (2 degrees).
const UPRIGHT: f64 = 0.999_39;

/// Ways along the base's axes, and against them.
const WAYS: [[&str; 2]; 3] = [["forward", "back"], ["to the left", "to the right"], ["up", "down"]];

/// Whether the base stands upright, so that its z axis points up and words like "up" and "left" hold in its axes.
pub(super) fn stands_upright(recipe: &Recipe) -> bool {
    recipe.mount.axes[(2, 2)] > UPRIGHT
}

/// Where a vector in base axes points: `to the right (along base -y)`. Seen from the base looking along its x axis; where the
/// base does not stand upright only the axes are told.
pub(super) fn heading(recipe: &Recipe, vector: &V3) -> String {
    told(recipe, vector, |axis, negative| WAYS[axis][usize::from(negative)], false)
}

/// The same in words alone, `forward and up`; none where the base does not stand upright.
pub(super) fn way(recipe: &Recipe, vector: &V3) -> Option<String> {
    let words: Vec<&str> = parts(vector).iter().map(|&axis| WAYS[axis][usize::from(vector[axis] < 0.0)]).collect();
    (stands_upright(recipe) && !words.is_empty()).then(|| words.join(" and "))
}

/// Along which line a vector in base axes lies, either way: `left and right (along base y)`.
pub fn line(recipe: &Recipe, vector: &V3) -> String {
    const LINES: [&str; 3] = ["forward and back", "left and right", "up and down"];
    let turned = if largest(vector) < 0.0 { -vector } else { *vector };
    told(recipe, &turned, |axis, _| LINES[axis], true)
}

/// The axis of a turn in base axes, the right hand's way round: `base +z 0.84, +x 0.54`.
pub(super) fn axis(vector: &V3) -> String {
    format!("base {}", named(vector, false))
}

/// The same vector in the axes of the tool: `tool -y`.
pub(super) fn in_tool(axes: &M3, vector: &V3) -> String {
    format!("tool {}", named(&(axes.transpose() * vector), false))
}

/// How a vector in base axes lies to the tool axis, the z axis of the TCP: along it, sideways, or in between.
pub(super) fn beside_tool(axes: &M3, vector: &V3) -> &'static str {
    let along = vector.try_normalize(0.0).map_or(f64::NAN, |unit| unit.dot(&axes.column(2)).abs());
    // A part of the other kind of up to SMALL is left out of the words, as it is elsewhere.
    if along >= (1.0 - SMALL * SMALL).sqrt() {
        "along the tool axis"
    } else if along <= SMALL {
        "sideways to the tool axis"
    } else {
        "at an angle to the tool axis"
    }
}

fn told(recipe: &Recipe, vector: &V3, way: impl Fn(usize, bool) -> &'static str, either: bool) -> String {
    let axes = format!("along base {}", named(vector, either));
    let parts = parts(vector);
    if !stands_upright(recipe) || parts.is_empty() || (either && parts.len() > 1) {
        return axes;
    }
    let words: Vec<&str> = parts.iter().map(|&axis| way(axis, vector[axis] < 0.0)).collect();
    format!("{} ({axes})", words.join(" and "))
}

/// The axes of a vector by size: `-y`, or with shares where more than one counts: `+y 0.87, -z 0.50`.
fn named(vector: &V3, either: bool) -> String {
    let unit = vector.try_normalize(0.0).unwrap_or_else(V3::zeros);
    let name = |axis: usize| ["x", "y", "z"][axis];
    let sign = |axis: usize| if unit[axis] < 0.0 { "-" } else { "+" };
    match parts(&unit)[..] {
        [] => "none".to_owned(),
        [one] if either => name(one).to_owned(),
        [one] => format!("{}{}", sign(one), name(one)),
        ref several => {
            let share = |&axis: &usize| format!("{}{} {:.2}", sign(axis), name(axis), unit[axis].abs());
            several.iter().map(share).collect::<Vec<_>>().join(", ")
        }
    }
}

/// The axes that count in a vector, the largest first.
fn parts(vector: &V3) -> Vec<usize> {
    let size = vector.norm();
    let mut axes: Vec<usize> = (0..3).filter(|&axis| size > 0.0 && vector[axis].abs() > SMALL * size).collect();
    axes.sort_by(|&a, &b| vector[b].abs().total_cmp(&vector[a].abs()));
    axes
}

fn largest(vector: &V3) -> f64 {
    (0..3).map(|axis| vector[axis]).fold(0.0, |most: f64, v| if v.abs() > most.abs() { v } else { most })
}

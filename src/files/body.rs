use crate::arm::{Body, Grounds};
use crate::geometry::V3;

use super::placed::metres;
use super::table::Table;

/// The keys that give a body.
pub(super) const KEYS: [&str; 4] = ["mass", "com", "inertia", "grounds"];

/// The body that a table's keys `mass`, `com`, `inertia` and `grounds` give.
pub(super) fn body(table: &Table<'_>) -> Body {
    Body {
        mass: table.number("mass", "kg"),
        com: table.numbers("com", "mm").map_or_else(V3::zeros, metres),
        inertia: table.maybe_numbers("inertia").map(Body::tensor),
        grounds: grounds(table),
    }
}

/// The body of something that may do without: `None` if no mass is given. A centre without a mass is refused, since it would be
/// silently lost.
pub(super) fn maybe_body(table: &Table<'_>) -> Option<Body> {
    if table.has("mass") || table.is_bad("mass") {
        return Some(body(table));
    }
    for key in KEYS.into_iter().filter(|key| table.has(key)) {
        table.complain(key, format_args!("{key} is given without mass; give the mass (kg) too, or leave both out"));
    }
    None
}

/// Where a table's figures come from.
pub(super) fn grounds(table: &Table<'_>) -> Grounds {
    let words = [("sheet", Grounds::Sheet), ("weighed", Grounds::Weighed), ("guess", Grounds::Guess)];
    table.word("grounds", &words).unwrap_or_default()
}

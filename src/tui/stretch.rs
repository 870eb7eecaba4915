use std::ops::RangeInclusive;

use crate::geometry::V3;
use crate::program::edit_stretch::{delete, duplicate, reorder, reverse, with_load, with_tool};
use crate::program::{BASE, Edit};
use crate::review::{Session, shift};
use crate::units::Length;

use super::action::Action;
use super::app::{App, Asking, Item, Menu, Mode, Question};
use super::edits;
use super::filter;

/// An edit of a stretch of waypoints.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum OnStretch {
    /// The stretch begins (or ends) here; it goes on to the cursor.
    Mark,
    /// The same again behind it.
    Duplicate,
    /// Away with it.
    Delete,
    /// One place up.
    Earlier,
    /// One place down.
    Later,
    /// Run the other way round.
    Reverse,
    /// Ask by how much to shift it.
    AskShift,
    /// Shift it by these millimetres along the base axes, as typed.
    Shift(String),
    /// Run with this tool.
    Tool(String),
    /// Run with this load, or with none.
    Load(Option<String>),
}

/// The waypoints that an edit would be of: from the mark to the cursor, or the cursor's alone.
pub fn meant(app: &App) -> RangeInclusive<usize> {
    let here = app.session.as_ref().map_or(0, Session::waypoint);
    // Waypoints may have gone since it was marked.
    let from = app.mark.unwrap_or(here).min(app.taught().waypoints.len().saturating_sub(1));
    from.min(here)..=from.max(here)
}

/// How many waypoints of the stretch the filter hides. That of the cursor is always seen.
fn hidden(app: &App) -> usize {
    let here = app.session.as_ref().map_or(0, Session::waypoint);
    meant(app).filter(|waypoint| *waypoint != here && !filter::shows_waypoint(app, *waypoint)).count()
}

/// The menu of edits of the stretch.
pub(super) fn menu(app: &App) -> Menu {
    let stretch = meant(app);
    let title = match hidden(app) {
        _ if stretch.start() == stretch.end() => format!("Waypoint {}", stretch.start() + 1),
        0 => format!("Waypoints {} to {}", stretch.start() + 1, stretch.end() + 1),
        hidden => format!("Waypoints {} to {}, {hidden} of them hidden by the filter", stretch.start() + 1, stretch.end() + 1),
    };
    let mark = if app.mark.is_some() { "mark the stretch from here instead" } else { "mark a stretch from here to the cursor" };
    let mut items = vec![
        (mark.to_owned(), OnStretch::Mark),
        ("duplicate".to_owned(), OnStretch::Duplicate),
        ("move earlier".to_owned(), OnStretch::Earlier),
        ("move later".to_owned(), OnStretch::Later),
        ("run the other way round".to_owned(), OnStretch::Reverse),
        ("shift by mm along the base axes".to_owned(), OnStretch::AskShift),
    ];
    let recipe = app.taught();
    items.extend(recipe.tools.iter().map(|tool| (format!("with tool \"{}\"", tool.name), OnStretch::Tool(tool.name.clone()))));
    let loads = recipe.loads.iter().map(|load| (format!("with load \"{}\"", load.name), OnStretch::Load(Some(load.name.clone()))));
    items.extend(loads);
    items.push(("without a load".to_owned(), OnStretch::Load(None)));
    items.push(("delete".to_owned(), OnStretch::Delete));
    let item = |(name, what)| Item { name, key: String::new(), action: Action::OnStretch(what) };
    let mut items: Vec<Item> = items.into_iter().map(item).collect();
    if hidden(app) > 0 {
        items.insert(0, Item { name: "show all of them first".to_owned(), key: String::new(), action: Action::ShowAll });
    }
    Menu { title, items, chosen: 0 }
}

/// Does an edit of the stretch.
pub(super) fn act(app: &mut App, what: &OnStretch) {
    let stretch = meant(app);
    let (from, to) = (*stretch.start(), *stretch.end());
    let recipe = app.taught();
    let edit = match what {
        OnStretch::Mark => {
            app.mark = app.session.as_ref().map(Session::waypoint);
            app.message = Some(format!("stretch marked from waypoint {}; x edits it up to the cursor, Esc forgets it", from + 1));
            return;
        }
        OnStretch::AskShift => {
            app.mode = Mode::Asking(Asking { question: Question::ShiftBy, typed: String::new() });
            return;
        }
        OnStretch::Duplicate => Ok(duplicate(recipe, stretch)),
        OnStretch::Delete => delete(recipe, stretch),
        OnStretch::Earlier if from == 0 => Err("it is the first already".to_owned()),
        OnStretch::Earlier => reorder(recipe, stretch, from - 1),
        OnStretch::Later if to + 1 >= recipe.waypoints.len() => Err("it is the last already".to_owned()),
        OnStretch::Later => reorder(recipe, stretch, from + 1),
        OnStretch::Reverse => reverse(recipe, stretch),
        OnStretch::Shift(typed) => offset(typed).and_then(|by| shift(recipe, &app.arm, stretch, by, BASE)),
        OnStretch::Tool(tool) => with_tool(recipe, stretch, tool),
        OnStretch::Load(load) => with_load(recipe, stretch, load.as_deref()),
    };
    make(app, edit);
}

fn make(app: &mut App, edit: Result<Edit, String>) {
    let hidden = hidden(app);
    match edit {
        Ok(edit) => {
            edits::make(app, &edit);
            if let Some(told) = app.message.as_mut().filter(|_| hidden > 0) {
                *told += &format!("; {hidden} of them hidden by the filter");
            }
            app.mark = None;
        }
        Err(why) => app.message = Some(format!("not done: {why}")),
    }
}

/// Three lengths in mm, apart by blanks; a comma is a decimal mark.
fn offset(typed: &str) -> Result<V3, String> {
    let parts: Vec<f64> = typed.split_whitespace().filter_map(|part| part.replace(',', ".").parse().ok()).collect();
    match parts[..] {
        [x, y, z] if parts.iter().all(|part| part.is_finite()) && typed.split_whitespace().count() == 3 => {
            Ok(V3::new(x, y, z).map(|mm| Length::mm(mm).as_m()))
        }
        _ => Err(format!("\"{typed}\" is not three lengths in mm, such as 0 0 12.5")),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_offset_is_three_lengths() {
        assert_eq!(offset("1 -2,5 0"), Ok(V3::new(0.001, -0.0025, 0.0)));
        for typed in ["", "1 2", "1 2 3 4", "a b c", "1 2 inf", "1 x 2 3"] {
            assert!(offset(typed).is_err(), "{typed}");
        }
    }
}

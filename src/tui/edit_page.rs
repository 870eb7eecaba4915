use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use crate::program::{Part, Recipe};
use crate::review::{Judged, headline};

use super::app::App;
use super::editing::{Editing, Group};
use super::page::paragraph;
use super::phrases::nearest;
use super::sheet::{Sheet, fit};

/// Lines below the data for what is typed and what it would do.
const BELOW: usize = 6;
/// The widest column of names.
const WIDEST_NAME: usize = 22;

/// Draws the data that can be edited, and below them what is typed and what it would do.
pub fn draw(sheet: &mut Sheet, app: &App, editing: &Editing) {
    let theme = sheet.theme();
    let data = editing.data(app);
    let narrowed = app.scene.shown.as_ref().filter(|_| editing.group == Group::Waypoint);
    let narrowed = narrowed.map_or_else(String::new, |shown| format!(" ({}: {})", shown.told(), shown.text));
    sheet.rule(0, &format!("{}{narrowed}", title(app.taught(), editing)), true);
    if data.is_empty() {
        sheet.put(1, 1, "There are none yet. Tab goes on.", Style::new());
        return;
    }
    // A heading stands before the first datum of every part.
    let mut rows: Vec<(Option<Part>, usize)> = Vec::new();
    for (index, (part, _)) in data.iter().enumerate() {
        if index == 0 || data[index - 1].0 != *part {
            rows.push((Some(*part), index));
        }
        rows.push((None, index));
    }
    let name = data.iter().map(|(_, datum)| datum.name.width()).max().unwrap_or(0).min(WIDEST_NAME);
    let height = sheet.height().saturating_sub(1 + BELOW).max(1);
    let at = rows.iter().position(|row| *row == (None, editing.chosen)).unwrap_or(0);
    let first = (at + 2).saturating_sub(height).min(rows.len().saturating_sub(height));
    for (y, (heading, index)) in rows.iter().skip(first).take(height).enumerate() {
        let (part, datum) = &data[*index];
        if heading.is_some() {
            sheet.put(1, y + 1, &fit(&part_name(app.taught(), *part), sheet.width().saturating_sub(2), theme), theme.strong());
            continue;
        }
        let chosen = *index == editing.chosen;
        let typed = editing.typing.as_ref().filter(|_| chosen).map(|(typed, _)| typed.clone());
        sheet.put(1, y + 1, if chosen { theme.here() } else { " " }, theme.strong());
        sheet.put(3, y + 1, &fit(&datum.name, name, theme), Style::new());
        let x = name + 5;
        match typed {
            Some(typed) => {
                let end = sheet.put(x, y + 1, &theme.text(&typed), theme.strong());
                let unit = sheet.put(end, y + 1, " ", theme.selected());
                sheet.put(unit, y + 1, &theme.text(&format!(" {}", datum.unit)), Style::new());
            }
            None => {
                sheet.put(x, y + 1, &fit(&theme.text(&datum.told()), sheet.width().saturating_sub(x + 1), theme), Style::new());
                if chosen {
                    sheet.tint(1, y + 1, sheet.width().saturating_sub(2), theme.selected());
                }
            }
        }
    }
    below(sheet, app, editing, height + 1);
}

fn title(recipe: &Recipe, editing: &Editing) -> String {
    match editing.group {
        Group::Waypoint => {
            let name = recipe.waypoints.get(editing.waypoint).map_or("", |waypoint| waypoint.name.as_str());
            format!("Edit waypoint {} \"{name}\"", editing.waypoint + 1)
        }
        group => format!("Edit {}", group.name()),
    }
}

fn part_name(recipe: &Recipe, part: Part) -> String {
    match part {
        Part::Recipe => "Recipe".to_owned(),
        Part::Mount => "Mount: the base in the world".to_owned(),
        Part::Acceptance => "Acceptance: what it is judged by".to_owned(),
        Part::Usual => "Usual: where segments say nothing".to_owned(),
        Part::Tool(index) => format!("Tool \"{}\"", recipe.tools[index].name),
        Part::Load(index) => format!("Load \"{}\"", recipe.loads[index].name),
        Part::Frame(index) => format!("Frame \"{}\"", recipe.frames[index].name),
        Part::Waypoint(_) => "The point".to_owned(),
        Part::Segment(_) => "The segment that arrives there".to_owned(),
    }
}

/// What is typed and what it would do, or which keys there are.
fn below(sheet: &mut Sheet, app: &App, editing: &Editing, y: usize) {
    let theme = sheet.theme();
    let width = sheet.width().saturating_sub(2);
    let data = editing.data(app);
    let choices = data.get(editing.chosen).map_or(&[][..], |(_, datum)| &datum.choices);
    let lines = match &editing.typing {
        None => {
            let way = if editing.group == Group::Waypoint { "Left and Right go to other waypoints; " } else { "" };
            vec![(format!("{way}Tab goes to tools, loads, frames, cell. Enter edits the chosen datum."), Style::new())]
        }
        Some((_, Some(why))) => vec![(format!("not taken: {why}"), theme.strong())],
        Some((_, None)) => {
            let mut lines = vec![(effect(app), theme.strong())];
            if !choices.is_empty() {
                lines.push((format!("Up and Down choose: {}", choices.join(", ")), Style::new()));
            }
            lines
        }
    };
    let mut y = y + 1;
    for (text, style) in lines {
        for line in paragraph(&theme.text(&text), width, 0, style) {
            if y < sheet.height() {
                for (text, style) in &line {
                    sheet.put(1, y, text, *style);
                }
            }
            y += 1;
        }
    }
}

/// What the typed text would do to the verdicts.
fn effect(app: &App) -> String {
    let now = app.judged().map_or(String::new(), |judged| told(judged, app));
    match &app.preview {
        None => format!("now: {now}"),
        Some(preview) => match &preview.judged {
            Some(judged) => format!("then: {}  (now: {now})", told(judged, app)),
            None => format!("checking ...  (now: {now})"),
        },
    }
}

fn told(judged: &Judged, app: &App) -> String {
    let name = format!("{}: ", judged.recipe.name);
    let whole = headline(judged);
    let whole = whole.strip_prefix(&name).unwrap_or(&whole).to_owned();
    let segment = judged.survey.segments.get(app.segment());
    let of = segment.map_or(String::new(), |survey| {
        let label = judged.plan.segments[survey.segment].label();
        format!("; segment {label} {}, {}", survey.verdict.word(), nearest(judged, survey, false))
    });
    format!("{whole}{of}")
}

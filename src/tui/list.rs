use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use crate::review::{Judged, Session};

use super::app::{App, Pane};
use super::phrases::{events, how, nearest};
use super::rows::{Row, doubt_words};
use super::sheet::{Sheet, fit};

/// Where the list's columns begin.
#[derive(Debug, Clone, Copy)]
struct Columns {
    number: usize,
    name: usize,
    how: usize,
    verdict: usize,
    nearest: usize,
    end: usize,
    brief_how: bool,
    brief_nearest: bool,
}

/// "J4 holding asks 154 %" and the like fit into this, beside the joint's name.
const NEAREST: usize = 19;
/// The same without "asks".
const NEAREST_BRIEF: usize = 11;
/// The longest word for a kind of segment.
const KIND: usize = 5;

impl Columns {
    fn of(app: &App, width: usize) -> Self {
        let rows = &app.scene.rows;
        let digits = app.recipe().waypoints.len().to_string().len();
        let fixed = 2 + digits + 1 + 1 + 1 + rows.verdict + 2;
        let left = width.saturating_sub(fixed);
        let joint = app.arm.joints().iter().map(|joint| joint.name.chars().count()).max().unwrap_or(0);
        let (long, short) = (joint + NEAREST, joint + NEAREST_BRIEF);
        let (mut brief_how, mut brief_nearest, mut name) = (false, false, rows.name.clamp(8, 28));
        let how_wide = rows.how.max(KIND);
        if name + how_wide + long > left {
            brief_nearest = true;
        }
        if name + how_wide + short > left {
            brief_how = true;
        }
        // The narrowest list leaves out how a waypoint is arrived at.
        let how = match brief_how {
            true if name + KIND + short > left + 2 => 0,
            true => KIND,
            false => how_wide,
        };
        name = name.min(left.saturating_sub(how + short)).max(8);
        let at_name = 2 + digits + 1;
        let at_how = at_name + name + 1;
        let at_verdict = at_how + how + usize::from(how > 0);
        Self {
            number: 2 + digits,
            name: at_name,
            how: at_how,
            verdict: at_verdict,
            nearest: at_verdict + rows.verdict + 1,
            end: width,
            brief_how,
            brief_nearest,
        }
    }
}

/// Draws waypoints and segments: a row for each segment with the waypoint that it arrives at, and below it what happens there.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let theme = app.theme;
    let columns = Columns::of(app, sheet.width());
    let focused = app.pane == Pane::List;
    let title_end = sheet.rule(0, &title(app, sheet.width().saturating_sub(4)), focused);
    for (x, word) in [
        (columns.how, "how"),
        (columns.verdict, "is"),
        (columns.nearest, if columns.brief_nearest { "nearest" } else { "nearest to its limit" }),
    ] {
        let shown = x != columns.how || columns.how < columns.verdict;
        if shown && x > title_end && x + word.len() < sheet.width() {
            sheet.put(x - 1, 0, &format!(" {word} "), Style::new());
        }
    }
    let height = sheet.height().saturating_sub(1);
    let (_, rows) = app.scene.listed().around(app.segment(), height);
    if let Some(shown) = app.scene.shown.as_ref().filter(|shown| shown.count() == 0) {
        let told = fit(&format!("nothing fits \"{}\"; Esc shows all", shown.text), sheet.width().saturating_sub(2), theme);
        sheet.put(1, rows.len() + 1, &told, theme.strong());
    }
    for (y, row) in rows.iter().enumerate() {
        let y = y + 1;
        match row {
            Row::Start => {
                let selected = app.session.as_ref().is_some_and(Session::is_on_start);
                let plain = if selected { theme.strong() } else { Style::new() };
                sheet.put_before(columns.number, y, "1", plain);
                let name = fit(&app.recipe().waypoints[0].name, columns.how - columns.name - 1, theme);
                sheet.put(columns.name, y, &name, plain);
                if columns.how < columns.verdict {
                    sheet.put(columns.how, y, "start", plain);
                }
                if selected {
                    mark(sheet, app, y, columns);
                }
            }
            Row::Segment(segment) => draw_segment(sheet, app, *segment, y, columns),
            Row::Events(waypoint) => {
                let told = events(app.recipe(), *waypoint).join(", ");
                note(sheet, app, columns, y, &told);
            }
            Row::Doubt(doubt) => {
                let told = app.judged().map_or_else(String::new, |judged| doubt_words(judged, *doubt));
                note(sheet, app, columns, y, &format!("doubt: {told}"));
            }
            Row::Outside => note(sheet, app, columns, y, "does not fit the filter"),
        }
    }
}

/// What the list is called, what it is narrowed to, and where a marked stretch begins.
fn title(app: &App, width: usize) -> String {
    let marked = app.mark.map_or(String::new(), |mark| format!(", marked from {}", mark + 1));
    let Some(shown) = &app.scene.shown else { return format!("{}{marked}", Pane::List.name()) };
    let told = format!("{}: ", shown.told());
    let all = if marked.is_empty() { " (Esc: all)" } else { "" };
    let room = width.saturating_sub(told.width() + all.width() + marked.width());
    format!("{told}{}{all}{marked}", fit(&shown.text, room, app.theme))
}

fn note(sheet: &mut Sheet, app: &App, columns: Columns, y: usize, told: &str) {
    let theme = app.theme;
    let x = sheet.put(columns.name, y, theme.pick("└ ", "` "), Style::new());
    let told = fit(told, columns.end.saturating_sub(x), theme);
    sheet.put(x, y, &told, Style::new());
}

fn draw_segment(sheet: &mut Sheet, app: &App, segment: usize, y: usize, columns: Columns) {
    let theme = app.theme;
    let planned = app.judged().and_then(|judged| judged.plan.segments.get(segment));
    let (waypoint, blend) = planned.map_or((segment + 1, false), |planned| (planned.to, planned.blend));
    let selected = app.session.as_ref().is_some_and(|session| !session.is_on_start()) && segment == app.segment();
    let plain = if selected { theme.strong() } else { Style::new() };
    sheet.put_before(columns.number, y, &(waypoint + 1).to_string(), plain);
    let name = if blend { "  past it" } else { app.recipe().waypoints[waypoint].name.as_str() };
    let name = fit(name, columns.how - columns.name - 1, theme);
    sheet.put(columns.name, y, &name, plain);
    let asked = if blend { "fly-by".to_owned() } else { how(app.recipe(), waypoint) };
    let asked = if columns.brief_how { asked.split(' ').next().unwrap_or("").to_owned() } else { asked };
    if columns.how < columns.verdict {
        sheet.put(columns.how, y, &asked, plain);
    }
    if selected {
        mark(sheet, app, y, columns);
    }
    if let Some(judged) = app.judged() {
        draw_verdict(sheet, judged, segment, y, columns, plain);
    }
}

/// Marks the row that is meant.
fn mark(sheet: &mut Sheet, app: &App, y: usize, columns: Columns) {
    let theme = app.theme;
    sheet.put(0, y, theme.here(), theme.strong());
    let style = if app.pane == Pane::List { theme.selected() } else { theme.strong() };
    sheet.tint(1, y, columns.verdict.saturating_sub(2), style);
}

fn draw_verdict(sheet: &mut Sheet, judged: &Judged, segment: usize, y: usize, columns: Columns, plain: Style) {
    let Some(survey) = judged.survey.segments.get(segment) else { return };
    let theme = sheet.theme();
    sheet.put(columns.verdict, y, survey.verdict.word(), theme.verdict(survey.verdict));
    let told = nearest(judged, survey, columns.brief_nearest);
    let told = fit(&told, columns.end.saturating_sub(columns.nearest), theme);
    sheet.put(columns.nearest, y, &told, plain);
}

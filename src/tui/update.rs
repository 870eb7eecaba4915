use ratatui::layout::Rect;

use crate::checks::Check;
use crate::review::{Session, check_brief};

use super::action::Action;
use super::app::{App, Asking, Item, Menu, Mode, Page, Pane, Question, Wish};
use super::ask;
use super::editing::{self, Editing};
use super::keys::BINDINGS;
use super::layout::{Layout, Wants};
use super::scene::refresh;
use super::{click, edits, file, filter, jog, page, remedies, signing, stretch};

/// Changes the app by an action. The only place where it changes.
pub fn update(app: &mut App, action: Action) {
    let mut before = None;
    match action {
        Action::Resize(width, height) => {
            app.area.width = width;
            app.area.height = height;
        }
        Action::Checking(progress) => app.progress = Some(progress),
        Action::Judged(judged) => {
            app.progress = None;
            before = app.judged().map(|judged| std::sync::Arc::clone(&judged.recipe));
            match &mut app.session {
                Some(session) => session.renew(*judged),
                None => {
                    app.session = Some(Session::open(*judged));
                    follow_finding(app);
                }
            }
        }
        Action::Previewed(judged) => {
            if let Some(preview) = &mut app.preview
                && std::sync::Arc::ptr_eq(&preview.recipe, &judged.recipe)
            {
                preview.judged = Some(*judged);
            }
        }
        Action::Told(told, progress) => remedies::hear(app, told, progress),
        Action::Closer(survey, closer) => app.closer = Some((survey, closer)),
        Action::Planned(survey, run) => {
            app.first_run = Some((survey, run));
            // What it was made for goes on, unless the person has turned to something else.
            match app.planning.take() {
                Some(wish) if matches!(app.mode, Mode::Panes) && app.first_run().is_some() => app.wish = Wish::File(wish),
                Some(_) => app.message = Some("the plan of the first run is made; ask again".to_owned()),
                None => {}
            }
        }
        asked => {
            app.message = None;
            by_mode(app, asked);
        }
    }
    refresh(app);
    if let Some(before) = before {
        filter::tell_of_new(app, &before);
    }
    jog::follow(app);
    page::hold_scroll(app);
}

fn by_mode(app: &mut App, action: Action) {
    match (&mut app.mode, action) {
        (_, Action::Quit) if app.history.is_unsaved() => app.mode = Mode::Menu(file::unsaved(app)),
        (_, Action::Quit | Action::QuitAnyway) => app.wish = Wish::Quit,
        (Mode::Editing(_), action) => editing::handle(app, &action),
        (_, Action::SignOff) => signing::open(app),
        (_, Action::Decide(decision)) => signing::decide(app, &decision),
        (Mode::SignOff, Action::NotChecked) => app.mode = Mode::Page(Page::NotChecked, 0),
        (_, Action::File(wish)) => app.wish = Wish::File(wish),
        (_, Action::Changes) => app.mode = Mode::Page(Page::Changes, 0),
        (_, Action::LookOnly(why)) => app.look_only = Some(why),
        (_, Action::Stay) => app.mode = Mode::Panes,
        (_, Action::Suspend) => app.wish = Wish::Suspend,
        (Mode::Asking(_), action) => ask::answer(app, &action),
        (Mode::Jog, action) => jog::act(app, &action),
        (
            Mode::Remedies,
            action
            @ (Action::Up | Action::Down | Action::ToStart | Action::ToEnd | Action::Back | Action::Enter | Action::Remedies),
        ) => {
            remedies::choose(app, &action);
        }
        (Mode::Remedies, Action::Left | Action::Right | Action::LeapBack | Action::LeapOn | Action::Click(..)) => {}
        (Mode::Remedies, action @ (Action::Worst | Action::NextFinding | Action::PreviousFinding)) => {
            in_panes(app, &action);
            app.mode = Mode::Remedies;
        }
        (Mode::SignOff, action) => signing::handle(app, &action),
        (Mode::Menu(menu), Action::Up) => menu.chosen = menu.chosen.checked_sub(1).unwrap_or(menu.items.len() - 1),
        (Mode::Menu(menu), Action::Down) => menu.chosen = (menu.chosen + 1) % menu.items.len(),
        (Mode::Menu(menu), Action::Enter) => {
            let action = menu.items.get(menu.chosen).map(|item| item.action.clone());
            app.mode = if app.jog.is_some() { Mode::Jog } else { Mode::Panes };
            if let Some(action) = action {
                by_mode(app, action);
            }
        }
        (Mode::Page(_, scroll), Action::Up) => *scroll = scroll.saturating_sub(1),
        (Mode::Page(_, scroll), Action::Down) => *scroll += 1,
        (Mode::Page(_, scroll), Action::LeapBack) => *scroll = scroll.saturating_sub(10),
        (Mode::Page(_, scroll), Action::LeapOn) => *scroll += 10,
        (Mode::Page(_, scroll), Action::ToStart) => *scroll = 0,
        (Mode::Page(_, scroll), Action::ToEnd) => *scroll = usize::MAX / 2,
        (Mode::Page(..) | Mode::Menu(_), Action::Back) => app.mode = Mode::Panes,
        (Mode::Page(Page::Why, _), Action::ReadWhy)
        | (Mode::Page(Page::Bounds, _), Action::Bounds)
        | (Mode::Page(Page::Edits, _), Action::Edits)
        | (Mode::Page(Page::Help, _), Action::Help)
        | (Mode::Page(Page::NotChecked, _), Action::NotChecked)
        | (Mode::Page(..), Action::Enter) => app.mode = Mode::Panes,
        // The explanation follows from finding to finding.
        (Mode::Page(Page::Why, _), action @ (Action::Worst | Action::NextFinding | Action::PreviousFinding)) => {
            in_panes(app, &action);
            app.mode = Mode::Page(Page::Why, 0);
        }
        (Mode::Page(..) | Mode::Menu(_), Action::Left | Action::Right | Action::Click(..)) => {}
        (_, action) if app.jog.is_some() => {
            app.mode = Mode::Jog;
            jog::act(app, &action);
        }
        (_, action) => {
            app.mode = Mode::Panes;
            in_panes(app, &action);
        }
    }
}

fn in_panes(app: &mut App, action: &Action) {
    match action {
        Action::Up => by_rows(app, -1),
        Action::Down => by_rows(app, 1),
        Action::Left => step(app, -1),
        Action::Right => step(app, 1),
        Action::LeapBack => step(app, -10),
        Action::LeapOn => step(app, 10),
        Action::ToStart => to_end(app, false),
        Action::ToEnd => to_end(app, true),
        Action::NextPane => app.pane = app.pane.next(),
        Action::Back if app.pane == Pane::List && app.mark.take().is_some() => {
            app.message = Some("no stretch is marked any more".to_owned());
        }
        Action::Back if app.pane == Pane::List => filter::lift(app),
        Action::Back => app.pane = Pane::List,
        Action::Enter => app.mode = Mode::Menu(actions(app)),
        Action::Worst | Action::NextFinding | Action::PreviousFinding => find(app, action),
        Action::ReadWhy => app.mode = Mode::Page(Page::Why, 0),
        Action::Remedies => app.mode = Mode::Remedies,
        Action::Bounds => {
            app.tighten = Some(app.segment());
            app.mode = Mode::Page(Page::Bounds, 0);
        }
        Action::NotChecked => app.mode = Mode::Page(Page::NotChecked, 0),
        Action::Help => app.mode = Mode::Page(Page::Help, 0),
        Action::GoTo => app.mode = Mode::Asking(Asking { question: Question::GoTo, typed: String::new() }),
        Action::Find => filter::ask(app),
        Action::ShowAll => filter::lift(app),
        Action::Span => app.chart.cycle = !app.chart.cycle,
        Action::EveryJoint => app.chart.every_joint = !app.chart.every_joint,
        Action::Show(check) => app.chart.check = *check,
        Action::NextQuantity => turn_quantity(app, 1),
        Action::ChooseQuantity => app.mode = Mode::Menu(quantities(app)),
        Action::Jog => jog::open(app),
        Action::StepSize => app.message = Some("the step size is that of jogging; jog first".to_owned()),
        Action::Change(edit) => edits::make(app, edit),
        Action::Undo => edits::undo(app),
        Action::Redo => edits::redo(app),
        Action::Edit => edit(app),
        Action::EditStretch => app.mode = Mode::Menu(stretch::menu(app)),
        Action::OnStretch(what) => stretch::act(app, what),
        Action::Edits => app.mode = Mode::Page(Page::Edits, 0),
        Action::Save => file::save(app),
        Action::SaveAs => app.mode = Mode::Asking(Asking { question: Question::SaveAs, typed: String::new() }),
        Action::Copy => file::copy(app),
        Action::Click(column, row) => click::click(app, *column, *row),
        _ => {}
    }
}

fn edit(app: &mut App) {
    match &app.look_only {
        Some(why) => app.message = Some(format!("opened to look only: {why}")),
        None => app.mode = Mode::Editing(Editing::of(app.session.as_ref().map_or(0, Session::waypoint))),
    }
}

fn step(app: &mut App, steps: isize) {
    if let Some(session) = &mut app.session {
        session.step(steps);
    }
}

fn to_end(app: &mut App, last: bool) {
    let cycle = app.chart.cycle;
    if let Some(session) = &mut app.session {
        let time = if last { f64::INFINITY } else { 0.0 };
        if cycle { session.go_to_time(time) } else { session.go_to_time_in_segment(time) }
    }
}

fn by_rows(app: &mut App, rows: isize) {
    match app.pane {
        Pane::List => {
            let to = filter::by_rows(app, rows);
            let Some(session) = &mut app.session else { return };
            let first = session.cursor().segment;
            match to {
                // Above the first row that a segment has stands the waypoint that the program starts from.
                _ if rows < 0 && app.scene.shown.is_none() && first == 0 => session.go_to_start(),
                _ if rows > 0 && session.is_on_start() => session.go_to_segment(first.saturating_add_signed(rows - 1)),
                Some(segment) => session.go_to_segment(segment),
                None => return,
            }
            follow_finding(app);
        }
        Pane::Why => app.why_scroll = app.why_scroll.saturating_add_signed(rows),
        Pane::Joints => app.joint = app.joint.saturating_add_signed(rows).min(app.arm.len() - 1),
        Pane::Chart => turn_quantity(app, rows),
    }
}

fn turn_quantity(app: &mut App, by: isize) {
    let shown = charted(app);
    let now = shown.iter().position(|check| *check == app.chart.check).unwrap_or(0) as isize;
    app.chart.check = shown[(now + by).rem_euclid(shown.len() as isize) as usize];
}

/// The checks whose quantity the chart can draw.
fn charted(app: &App) -> Vec<Check> {
    let points = app.session.as_ref().is_some_and(|session| session.judged().recipe.acceptance.point_speed.is_some());
    Check::ALL.into_iter().filter(|check| quantity_of(*check) == *check && (points || *check != Check::PointSpeed)).collect()
}

/// The check whose quantity is behind another one that has none at an instant: what loses a path is closeness, the cycle's torque is
/// that of motion, and cables are wound by joint values.
fn quantity_of(check: Check) -> Check {
    match check {
        Check::Reach => Check::Singular,
        Check::Rms => Check::Moving,
        Check::WindUp => Check::Range,
        other => other,
    }
}

/// Goes from finding to finding among those that the list shows, and tells how many it hides.
fn find(app: &mut App, action: &Action) {
    let hidden = filter::hidden_findings(app);
    let shown = |segment| app.scene.shown.as_ref().is_none_or(|shown| shown.has(segment));
    let Some(session) = &mut app.session else { return };
    let found = match action {
        Action::Worst => session.go_to_worst_among(shown),
        Action::NextFinding => session.go_to_next_finding_among(shown),
        _ => session.go_to_previous_finding_among(shown),
    };
    if found {
        follow_finding(app);
    }
    let more = if hidden == 1 { "1 finding is hidden".to_owned() } else { format!("{hidden} findings are hidden") };
    match (found, hidden) {
        (true, 0) => {}
        (false, 0) => app.message = Some("no findings".to_owned()),
        (true, _) => app.message = Some(format!("{more} by the filter, Esc shows all")),
        (false, _) => app.message = Some(format!("no finding is shown; {more} by the filter, Esc shows all")),
    }
}

/// The joint and the chart show what the finding is about; without one, what is nearest to its reserve.
pub(super) fn follow_finding(app: &mut App) {
    let Some(session) = &app.session else { return };
    let nearest = session.judged().survey.segments.get(session.cursor().segment).and_then(|survey| survey.nearest());
    let (check, joint) = match session.finding() {
        Some(finding) => (finding.check, finding.joint),
        None => nearest.map_or((app.chart.check, None), |(result, peak)| (result.check, peak.joint)),
    };
    app.chart.check = quantity_of(check);
    app.joint = joint.unwrap_or(app.joint);
}

/// The actions for what is selected: those of the pane first, quitting last.
fn actions(app: &App) -> Menu {
    let choose = Item { name: "chart: choose quantity".to_owned(), key: String::new(), action: Action::ChooseQuantity };
    let mut items: Vec<Item> =
        BINDINGS.iter().filter(|binding| is_named(app, &binding.action)).map(|b| Item::of(b, &app.keymap, app.theme)).collect();
    items.push(choose);
    let charting = matches!(app.pane, Pane::Chart | Pane::Joints);
    items.sort_by_key(|item| match item.action {
        Action::ReadWhy => 1,
        Action::ChooseQuantity | Action::Span | Action::EveryJoint => {
            if charting {
                0
            } else {
                3
            }
        }
        Action::Help => 4,
        Action::Quit => 5,
        _ => 2,
    });
    let number = app.judged().and_then(|judged| judged.plan.segments.get(app.segment())).map(|segment| segment.number());
    let title = number.map_or_else(|| "Actions".to_owned(), |number| format!("Segment {number}"));
    Menu { title, items, chosen: 0 }
}

/// Whether an action stands in the menu; the others are what arrows, Enter and Backspace do anyway.
fn is_named(app: &App, action: &Action) -> bool {
    if matches!(action, Action::ShowAll) {
        return !app.filter.is_empty();
    }
    matches!(
        action,
        Action::NextPane
            | Action::Worst
            | Action::NextFinding
            | Action::PreviousFinding
            | Action::ReadWhy
            | Action::Remedies
            | Action::Bounds
            | Action::NotChecked
            | Action::GoTo
            | Action::Find
            | Action::Span
            | Action::EveryJoint
            | Action::Jog
            | Action::Edit
            | Action::EditStretch
            | Action::Undo
            | Action::Redo
            | Action::SignOff
            | Action::File(_)
            | Action::Edits
            | Action::Save
            | Action::SaveAs
            | Action::Copy
            | Action::Help
            | Action::Quit
    )
}

fn quantities(app: &App) -> Menu {
    let checks = charted(app);
    let item = |check: &Check| Item { name: check_brief(*check).to_owned(), key: String::new(), action: Action::Show(*check) };
    Menu {
        title: "The chart shows".to_owned(),
        items: checks.iter().map(item).collect(),
        chosen: checks.iter().position(|check| *check == app.chart.check).unwrap_or(0),
    }
}

/// The layout of the screen as it is now.
pub(super) fn layout(app: &App) -> Layout {
    layout_in(app, app.area)
}

/// The layout that the app has in an area.
pub(super) fn layout_in(app: &App, area: Rect) -> Layout {
    let bands = &app.scene.bands;
    let wants = Wants { joints: app.arm.len(), bands: bands.rows.len(), flagged: bands.flagged(), rows: app.scene.rows.len() };
    Layout::of(area, app.pane, wants)
}

//! Editing on the screen: typed data with their effect, stretches, undo and redo.

use std::sync::Arc;

use elbowroom::checks::{Verdict, Watch};
use elbowroom::files::{Opened, demo};
use elbowroom::program::Arrive;
use elbowroom::review::Judged;
use elbowroom::tui::{Action, App, Mode, OnStretch, Theme, Wish, draw, update};
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;

fn check(app: &mut App) {
    let before = app.judged().cloned();
    app.unchecked = false;
    let judged = Judged::of(&app.arm, app.taught(), before.as_ref(), &Watch::default()).expect("nobody stops it");
    update(app, Action::Judged(Box::new(judged)));
}

/// Does what the worker does for a text that is being typed.
fn check_preview(app: &mut App) {
    let recipe = Arc::clone(&app.preview.as_ref().expect("something is typed").recipe);
    let judged = Judged::of(&app.arm, &recipe, app.judged(), &Watch::default()).expect("nobody stops it");
    update(app, Action::Previewed(Box::new(judged)));
}

fn opened(width: u16, height: u16) -> App {
    let Opened { arm, recipe, .. } = demo();
    let mut app = App::new(Arc::new(arm), recipe, Theme::default(), Rect::new(0, 0, width, height));
    check(&mut app);
    app
}

fn shown(app: &App) -> String {
    let mut buffer = Buffer::empty(app.area);
    draw(&mut buffer, app.area, app);
    let row = |y| (0..app.area.width).map(|x| buffer[(x, y)].symbol()).collect::<String>().trim_end().to_owned();
    (0..app.area.height).map(row).collect::<Vec<_>>().join("\n")
}

fn type_in(app: &mut App, text: &str) {
    for _ in 0..20 {
        update(app, Action::Erase);
    }
    for sign in text.chars() {
        update(app, Action::Type(sign));
    }
}

fn speed(app: &App, waypoint: usize) -> Option<f64> {
    match app.taught().waypoints[waypoint].arrive.as_ref()? {
        Arrive::Line(speed) => speed.speed.map(elbowroom::units::Speed::as_m_per_s),
        _ => None,
    }
}

#[test]
fn a_typed_speed_shows_its_effect_and_is_taken_by_enter() {
    for (width, height) in [(80, 24), (120, 40)] {
        let mut app = opened(width, height);
        for action in [Action::Edit, Action::Down, Action::Enter] {
            update(&mut app, action);
        }
        type_in(&mut app, "0,21 m/s");
        check_preview(&mut app);
        insta::assert_snapshot!(format!("typed_{width}x{height}"), shown(&app));
        assert_eq!(speed(&app, 9), Some(0.4), "nothing is changed before it is taken");
        update(&mut app, Action::Enter);
        assert_eq!(speed(&app, 9), Some(0.21));
        check(&mut app);
        assert_ne!(app.judged().expect("checked").survey.verdict(), Verdict::Over);
        assert!(shown(&app).contains("not saved"));
        update(&mut app, Action::Undo);
        assert_eq!(speed(&app, 9), Some(0.4));
        assert!(!app.history.is_unsaved());
        update(&mut app, Action::Redo);
        assert_eq!(speed(&app, 9), Some(0.21));
    }
}

#[test]
fn what_cannot_be_is_refused_with_its_reason() {
    let mut app = opened(80, 24);
    for action in [Action::Edit, Action::Down, Action::Enter] {
        update(&mut app, action);
    }
    type_in(&mut app, "-5");
    assert!(shown(&app).contains("not taken"), "{}", shown(&app));
    update(&mut app, Action::Enter);
    assert!(matches!(&app.mode, Mode::Editing(editing) if editing.typing.is_some()));
    assert_eq!(speed(&app, 9), Some(0.4));
    update(&mut app, Action::Back);
    assert!(app.preview.is_none());
}

#[test]
fn every_group_can_be_edited_without_a_mouse() {
    let mut app = opened(80, 24);
    update(&mut app, Action::Edit);
    for group in ["Edit waypoint 10", "Edit tools", "Edit loads", "Edit frames", "Edit cell", "Edit waypoint 10"] {
        assert!(shown(&app).contains(group), "{group}\n{}", shown(&app));
        update(&mut app, Action::NextPane);
    }
    update(&mut app, Action::Back);
    assert!(matches!(app.mode, Mode::Panes));
}

#[test]
fn stretches_are_edited_and_taken_back() {
    let mut app = opened(80, 24);
    let taught = Arc::clone(app.taught());
    for (what, names) in [
        (OnStretch::Duplicate, 15),
        (OnStretch::Delete, 13),
        (OnStretch::Earlier, 14),
        (OnStretch::Later, 14),
        (OnStretch::Shift("0 0 12,5".to_owned()), 14),
    ] {
        update(&mut app, Action::OnStretch(what.clone()));
        assert_eq!(app.taught().waypoints.len(), names, "{what:?}: {:?}", app.message);
        assert_ne!(**app.taught(), *taught, "{what:?}: {:?}", app.message);
        check(&mut app);
        update(&mut app, Action::Undo);
        assert_eq!(**app.taught(), *taught, "{what:?}");
        check(&mut app);
        update(&mut app, Action::Worst);
    }
}

#[test]
fn quitting_with_edits_asks_and_without_does_not() {
    let mut app = opened(80, 24);
    update(&mut app, Action::OnStretch(OnStretch::Duplicate));
    update(&mut app, Action::Quit);
    assert!(matches!(&app.mode, Mode::Menu(menu) if menu.items.len() == 3), "{:?}", app.mode);
    assert_eq!(app.wish, Wish::GoOn);
    insta::assert_snapshot!("quitting_80x24", shown(&app));
    update(&mut app, Action::Back);
    update(&mut app, Action::Undo);
    update(&mut app, Action::Quit);
    assert_eq!(app.wish, Wish::Quit);
}

#[test]
fn the_history_says_what_each_step_was() {
    let mut app = opened(80, 24);
    for action in [
        Action::OnStretch(OnStretch::Duplicate),
        Action::OnStretch(OnStretch::Shift("0 0 5".to_owned())),
        Action::Undo,
        Action::Edits,
    ] {
        update(&mut app, action);
    }
    insta::assert_snapshot!("edits_80x24", shown(&app));
}

#[test]
fn what_is_only_looked_at_is_not_edited() {
    let mut app = opened(80, 24);
    let taught = Arc::clone(app.taught());
    update(&mut app, Action::LookOnly("somebody has it open".to_owned()));
    for action in [Action::Edit, Action::OnStretch(OnStretch::Delete), Action::OnStretch(OnStretch::Duplicate)] {
        update(&mut app, action);
        assert!(matches!(app.mode, Mode::Panes));
        assert!(app.message.as_ref().is_some_and(|told| told.contains("somebody")), "{:?}", app.message);
    }
    assert_eq!(**app.taught(), *taught);
}

#[test]
fn an_edit_that_changes_nothing_is_no_step() {
    let mut app = opened(80, 24);
    let index = 9;
    let same = Box::new(app.taught().waypoints[index].clone());
    update(&mut app, Action::Change(Box::new(elbowroom::program::Edit::Change { index, waypoint: same })));
    assert_eq!(app.message.as_deref(), Some("nothing is changed by that"));
    assert!(app.history.done().is_empty() && app.made.is_empty());
}

#[test]
fn that_something_is_not_saved_is_told_however_long_the_name() {
    let mut app = opened(80, 24);
    let name = "Housing transfer with the wide gripper on the second line".to_owned();
    update(&mut app, Action::Change(Box::new(elbowroom::program::Edit::Name(name))));
    check(&mut app);
    let first = shown(&app).lines().next().expect("a headline").to_owned();
    assert!(first.contains("NOT READY: 1 over, 1 tight, 11 clear; not saved") && first.starts_with("Housing"), "{first}");
}

#[test]
fn a_mark_is_forgotten_by_escape_and_never_leads_out_of_the_recipe() {
    let mut app = opened(80, 24);
    update(&mut app, Action::OnStretch(OnStretch::Duplicate));
    check(&mut app);
    for _ in 0..20 {
        update(&mut app, Action::Down);
    }
    update(&mut app, Action::OnStretch(OnStretch::Mark));
    assert!(shown(&app).contains("marked from 15"));
    update(&mut app, Action::Undo);
    check(&mut app);
    update(&mut app, Action::OnStretch(OnStretch::Duplicate));
    assert!(app.message.as_ref().is_some_and(|told| told.contains("u undoes it")), "{:?}", app.message);
    update(&mut app, Action::OnStretch(OnStretch::Mark));
    update(&mut app, Action::Back);
    assert_eq!(app.mark, None);
}

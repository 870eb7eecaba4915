//! Remedies on the screen: sought for the finding that is looked at, told, made and taken back.

use std::sync::Arc;

use elbowroom::checks::Watch;
use elbowroom::files::{Opened, demo};
use elbowroom::review::{Judged, search};
use elbowroom::tui::{Action, App, Mode, Theme, draw, remedies_are_to_stop, remedies_wanted, update};
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;

fn check(app: &mut App) {
    let before = app.judged().cloned();
    app.unchecked = false;
    let judged = Judged::of(&app.arm, app.taught(), before.as_ref(), &Watch::default()).expect("nobody stops it");
    update(app, Action::Judged(Box::new(judged)));
}

fn opened(width: u16, height: u16) -> App {
    let Opened { arm, recipe, .. } = demo();
    let mut app = App::new(Arc::new(arm), recipe, Theme::default(), Rect::new(0, 0, width, height));
    check(&mut app);
    app
}

/// Does what the search away from the screen does.
fn seek(app: &mut App) {
    let (judged, finding) = remedies_wanted(app).expect("a finding is looked at");
    search(&judged, &finding, &Watch::default(), |told| update(app, Action::Told(Some(told), Some([1, 9]))));
    update(app, Action::Told(None, None));
}

fn shown(app: &App) -> String {
    let mut buffer = Buffer::empty(app.area);
    draw(&mut buffer, app.area, app);
    let row = |y| (0..app.area.width).map(|x| buffer[(x, y)].symbol()).collect::<String>().trim_end().to_owned();
    (0..app.area.height).map(row).collect::<Vec<_>>().join("\n")
}

#[test]
fn the_list_of_remedies_tells_rooms_and_costs() {
    for (width, height) in [(80, 24), (120, 40)] {
        let mut app = opened(width, height);
        seek(&mut app);
        update(&mut app, Action::Remedies);
        insta::assert_snapshot!(format!("remedies_{width}x{height}"), shown(&app));
    }
}

#[test]
fn the_explanation_names_remedies_in_brief() {
    let mut app = opened(120, 40);
    assert!(!shown(&app).contains("Remedies:"));
    seek(&mut app);
    assert!(shown(&app).contains("Remedies:"), "{}", shown(&app));
}

#[test]
fn a_remedy_is_made_by_enter_and_taken_back_by_undo() {
    let mut app = opened(80, 24);
    seek(&mut app);
    let taught = Arc::clone(app.taught());
    let findings = app.judged().expect("checked").survey.findings.len();
    update(&mut app, Action::Remedies);
    update(&mut app, Action::Enter);
    assert!(matches!(app.mode, Mode::Panes) && app.unchecked && *app.taught() != taught, "{:?}", app.message);
    assert!(remedies_wanted(&mut app).is_none(), "what is not checked has no remedies yet");
    check(&mut app);
    assert!(app.judged().expect("checked").survey.findings.len() < findings);
    update(&mut app, Action::Undo);
    assert_eq!(**app.taught(), *taught);
    check(&mut app);
    assert_eq!(app.judged().expect("checked").survey.findings.len(), findings);
    update(&mut app, Action::Redo);
    assert_ne!(**app.taught(), *taught);
}

#[test]
fn what_is_for_information_changes_nothing() {
    let mut app = opened(80, 24);
    update(&mut app, Action::PreviousFinding);
    seek(&mut app);
    let taught = Arc::clone(app.taught());
    update(&mut app, Action::Remedies);
    update(&mut app, Action::Enter);
    assert_eq!(**app.taught(), *taught);
    assert!(app.message.as_ref().is_some_and(|told| told.contains("information")), "{:?}", app.message);
}

#[test]
fn a_search_is_asked_for_once_a_finding() {
    let mut app = opened(80, 24);
    assert!(remedies_wanted(&mut app).is_some());
    assert!(remedies_wanted(&mut app).is_none());
    update(&mut app, Action::NextFinding);
    assert!(remedies_wanted(&mut app).is_some());
}

#[test]
fn esc_stops_a_search_that_runs_and_keeps_what_it_found() {
    let mut app = opened(80, 24);
    let (judged, finding) = remedies_wanted(&mut app).expect("a finding is looked at");
    let mut news = Vec::new();
    search(&judged, &finding, &Watch::default(), |told| news.push(told));
    let of = elbowroom::review::kinds_for(&judged, &finding).len();
    assert!(news.len() > 3);
    let mut news = news.into_iter();
    for (tried, told) in news.by_ref().take(2).enumerate() {
        update(&mut app, Action::Told(Some(told), Some([tried + 1, of])));
    }
    update(&mut app, Action::Remedies);
    assert!(shown(&app).contains("Esc stop"), "{}", shown(&app));
    assert!(!remedies_are_to_stop(&mut app));
    update(&mut app, Action::Back);
    assert!(remedies_are_to_stop(&mut app) && !remedies_are_to_stop(&mut app), "asked for once");
    assert!(matches!(app.mode, Mode::Remedies), "the list stays");
    // What was found before the search took notice counts; nothing makes it run again by itself.
    update(&mut app, Action::Told(news.next(), None));
    update(&mut app, Action::Told(None, None));
    assert!(remedies_wanted(&mut app).is_none());
    insta::assert_snapshot!("remedies_stopped_80x24", shown(&app));
    update(&mut app, Action::Back);
    assert!(matches!(app.mode, Mode::Panes));
    // The list's own key goes on.
    update(&mut app, Action::Remedies);
    update(&mut app, Action::Remedies);
    assert!(matches!(app.mode, Mode::Remedies));
    seek(&mut app);
    assert!(!shown(&app).contains("stopped"), "{}", shown(&app));
}

#[test]
fn a_search_stopped_at_its_end_is_no_partial_one() {
    let mut app = opened(80, 24);
    let (judged, finding) = remedies_wanted(&mut app).expect("a finding is looked at");
    let of = elbowroom::review::kinds_for(&judged, &finding).len();
    let mut tried = 0;
    search(&judged, &finding, &Watch::default(), |told| {
        tried += 1;
        update(&mut app, Action::Told(Some(told), Some([tried.min(of), of])));
    });
    update(&mut app, Action::Remedies);
    update(&mut app, Action::Back);
    assert!(!shown(&app).contains("stopped"), "{}", shown(&app));
}

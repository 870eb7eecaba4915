//! Jogging on the screen: rulers, limits, records, and that every step is shown where the model stands.

use std::sync::Arc;

use elbowroom::checks::Watch;
use elbowroom::files::{Opened, demo};
use elbowroom::program::Taught;
use elbowroom::review::Judged;
use elbowroom::tui::{Action, App, Deed, Mode, Theme, draw, update};
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;

fn opened_with(width: u16, height: u16, theme: Theme) -> App {
    let Opened { arm, recipe, .. } = demo();
    let mut app = App::new(Arc::new(arm), recipe, theme, Rect::new(0, 0, width, height));
    let judged = Judged::of(&app.arm, app.taught(), None, &Watch::default()).expect("nobody stops it");
    update(&mut app, Action::Judged(Box::new(judged)));
    app
}

fn jogging(width: u16, height: u16) -> App {
    let mut app = opened_with(width, height, Theme::default());
    update(&mut app, Action::Jog);
    app
}

fn buffer(app: &App) -> Buffer {
    let mut buffer = Buffer::empty(app.area);
    draw(&mut buffer, app.area, app);
    buffer
}

fn shown(app: &App) -> String {
    let buffer = buffer(app);
    let row = |y| (0..app.area.width).map(|x| buffer[(x, y)].symbol()).collect::<String>().trim_end().to_owned();
    (0..app.area.height).map(row).collect::<Vec<_>>().join("\n")
}

fn keys(app: &mut App, actions: impl IntoIterator<Item = Action>) {
    for action in actions {
        update(app, action);
    }
}

fn typed(text: &str) -> impl Iterator<Item = Action> {
    text.chars().map(Action::Type).chain([Action::Enter])
}

#[test]
fn rulers_and_limits_are_shown_joint_by_joint_and_along_axes() {
    for (width, height) in [(80, 24), (120, 40)] {
        let mut app = jogging(width, height);
        keys(&mut app, [Action::Right, Action::Right]);
        insta::assert_snapshot!(format!("jog_joints_{width}x{height}"), shown(&app));
        keys(&mut app, [Action::NextPane, Action::Down, Action::Down, Action::LeapOn]);
        insta::assert_snapshot!(format!("jog_base_{width}x{height}"), shown(&app));
        update(&mut app, Action::Enter);
        insta::assert_snapshot!(format!("jog_menu_{width}x{height}"), shown(&app));
    }
}

#[test]
fn in_ascii_and_without_colours_nothing_is_lost() {
    let mut app = opened_with(80, 24, Theme { ascii: true, mono: true, light: false });
    keys(&mut app, [Action::Jog, Action::LeapOn]);
    let text = shown(&app);
    assert!(text.is_ascii(), "{text}");
    insta::assert_snapshot!("jog_ascii_80x24", text);
}

#[test]
fn no_size_and_no_key_makes_it_fail() {
    for (width, height) in [(1, 1), (20, 5), (40, 12), (60, 20), (76, 24), (200, 60)] {
        let mut app = jogging(width, height);
        for _ in 0..5 {
            for action in [
                Action::Down,
                Action::LeapOn,
                Action::LeapBack,
                Action::Right,
                Action::StepSize,
                Action::NextPane,
                Action::Up,
                Action::Click(3, 3),
                Action::Worst,
                Action::Undo,
                Action::Redo,
                Action::Help,
                Action::Back,
            ] {
                update(&mut app, action);
                shown(&app);
                assert!(app.jog.is_some() && !matches!(app.mode, Mode::Panes));
            }
        }
    }
}

#[test]
fn the_figure_follows_and_goes_back_when_jogging_ends() {
    let before = shown(&opened_with(120, 40, Theme::default()));
    let mut app = opened_with(120, 40, Theme::default());
    let at_cursor = app.scene.gauges.as_ref().expect("checked").q;
    update(&mut app, Action::Jog);
    update(&mut app, Action::LeapOn);
    let gauges = app.scene.gauges.as_ref().expect("jogged");
    let jog = app.jog.as_ref().expect("jogging");
    assert_eq!(gauges.q, jog.q);
    assert_ne!(gauges.q, at_cursor);
    update(&mut app, Action::Back);
    assert_eq!(app.scene.gauges.as_ref().expect("checked").q, at_cursor);
    assert_eq!(shown(&app), before);
}

#[test]
fn a_range_end_is_told_with_joint_and_end() {
    let mut app = jogging(80, 24);
    keys(&mut app, [Action::StepSize, Action::StepSize]);
    for _ in 0..10 {
        update(&mut app, Action::LeapOn);
    }
    let told = app.message.clone().expect("told");
    let (row, q) = app.jog.as_ref().map(|jog| (jog.row, jog.q)).expect("jogging");
    let joint = &app.arm.joints()[row];
    assert!(told.contains(&joint.name) && told.contains("high end"), "{told}");
    assert_eq!(q[row], joint.range.high);
}

#[test]
fn values_are_typed_with_comma_and_unit_and_refused_with_the_bound() {
    let mut app = jogging(80, 24);
    let row = app.jog.as_ref().expect("jogging").row;
    update(&mut app, Action::Deed(Deed::Value));
    keys(&mut app, typed("12,5 deg"));
    assert!((app.jog.as_ref().expect("jogging").q[row].to_degrees() - 12.5).abs() < 1e-12);
    update(&mut app, Action::Deed(Deed::Value));
    keys(&mut app, typed("4000"));
    assert!(app.message.as_ref().is_some_and(|told| told.contains("its range is")), "{:?}", app.message);
    assert!(matches!(app.mode, Mode::Jog));
}

#[test]
fn a_waypoint_is_recorded_under_the_suggested_name_and_undone() {
    let mut app = jogging(80, 24);
    let before = Arc::clone(app.taught());
    let at = app.jog.as_ref().expect("jogging").waypoint;
    // By arrows and Enter alone: the first entry of the menu, the name as suggested.
    keys(&mut app, [Action::Right, Action::Enter, Action::Enter, Action::Enter]);
    let jog = app.jog.as_ref().expect("jogging");
    assert_eq!((app.taught().waypoints.len(), jog.waypoint), (before.waypoints.len() + 1, at + 1), "{:?}", app.message);
    let new = &app.taught().waypoints[at + 1];
    assert_eq!(new.name, format!("after {}", before.waypoints[at].name));
    assert_eq!(new.taught, Taught::Joints(jog.q));
    assert!(app.unchecked);
    update(&mut app, Action::Undo);
    assert_eq!(**app.taught(), *before);
    assert!(matches!(app.mode, Mode::Jog));
    update(&mut app, Action::Redo);
    assert_eq!(app.taught().waypoints.len(), before.waypoints.len() + 1);
}

#[test]
fn a_waypoint_is_taught_again_as_a_pose() {
    let mut app = jogging(80, 24);
    let before = Arc::clone(app.taught());
    keys(&mut app, [Action::Deed(Deed::GoTo)]);
    keys(&mut app, typed("4"));
    keys(&mut app, [Action::NextPane, Action::Down, Action::Down, Action::Right]);
    update(&mut app, Action::Deed(Deed::TeachAgain { as_pose: true }));
    let (old, new) = (&before.waypoints[3], &app.taught().waypoints[3]);
    assert!(matches!(new.taught, Taught::Pose { .. }), "{:?}", app.message);
    assert_ne!(old.taught, new.taught);
    assert_eq!((&old.name, &old.arrive), (&new.name, &new.arrive));
}

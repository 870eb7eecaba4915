//! What the screen shows, and that no size and no key makes it fail.

use std::sync::Arc;

use elbowroom::arm::Arm;
use elbowroom::checks::Watch;
use elbowroom::files::{Opened, demo};
use elbowroom::geometry::{Pose, Rotation, V3};
use elbowroom::program::Taught;
use elbowroom::review::{Judged, Progress};
use elbowroom::tui::{Action, App, BINDINGS, Mode, Pane, Theme, Wish, draw, update};
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;

fn unchecked(width: u16, height: u16, theme: Theme) -> App {
    let Opened { arm, recipe, .. } = demo();
    let mut app = App::new(Arc::new(arm), recipe, theme, Rect::new(0, 0, width, height));
    update(&mut app, Action::Resize(width, height));
    app
}

fn opened_with(width: u16, height: u16, theme: Theme) -> App {
    let mut app = unchecked(width, height, theme);
    let judged = Judged::of(&app.arm, app.taught(), None, &Watch::default()).expect("nobody stops it");
    update(&mut app, Action::Judged(Box::new(judged)));
    app
}

fn opened(width: u16, height: u16) -> App {
    opened_with(width, height, Theme::default())
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

#[test]
fn opens_on_the_worst_finding() {
    insta::assert_snapshot!("opened_80x24", shown(&opened(80, 24)));
    insta::assert_snapshot!("opened_120x40", shown(&opened(120, 40)));
    insta::assert_snapshot!("opened_40x12", shown(&opened(40, 12)));
}

#[test]
fn shows_the_recipe_before_it_is_checked() {
    let mut app = unchecked(80, 24, Theme::default());
    update(&mut app, Action::Checking(Progress { done: 7, of: 13 }));
    insta::assert_snapshot!("unchecked_80x24", shown(&app));
}

#[test]
fn all_panes_follow_the_cursor() {
    let mut app = opened(120, 40);
    keys(&mut app, [Action::Down, Action::Down, Action::Left, Action::Left]);
    insta::assert_snapshot!("moved_120x40", shown(&app));
    let mut app = opened(80, 24);
    keys(&mut app, [Action::NextFinding, Action::Span, Action::EveryJoint]);
    insta::assert_snapshot!("next_finding_80x24", shown(&app));
}

#[test]
fn pages_fill_the_screen() {
    for (name, action) in [("help", Action::Help), ("not_checked", Action::NotChecked), ("why", Action::ReadWhy)] {
        for (width, height) in [(80, 24), (120, 40)] {
            let mut app = opened(width, height);
            update(&mut app, action.clone());
            insta::assert_snapshot!(format!("{name}_{width}x{height}"), shown(&app));
            update(&mut app, Action::Back);
            assert_eq!(shown(&app), shown(&opened(width, height)), "{name}");
        }
    }
}

#[test]
fn a_menu_offers_all_by_name() {
    let mut app = opened(80, 24);
    update(&mut app, Action::Enter);
    insta::assert_snapshot!("menu_80x24", shown(&app));
}

/// A hanging arm without ratings, whose program has a waypoint out of reach.
fn hanging(width: u16, height: u16) -> App {
    let Opened { arm, mut recipe, .. } = demo();
    let mut data = arm.data().clone();
    data.joints.iter_mut().for_each(|joint| joint.torque = None);
    recipe.mount = Pose::new(V3::new(0.0, 0.0, 2.5), Rotation::from_rpy(std::f64::consts::PI, 0.0, 0.0));
    if let Taught::Pose { pose, .. } = &mut recipe.waypoints[11].taught {
        pose.at.x += 0.3;
    }
    let (arm, recipe) = (Arc::new(Arm::build(data).expect("still an arm")), Arc::new(recipe));
    let judged = Judged::of(&arm, &recipe, None, &Watch::default()).expect("nobody stops it");
    let mut app = App::new(arm, (*recipe).clone(), Theme::default(), Rect::new(0, 0, width, height));
    update(&mut app, Action::Judged(Box::new(judged)));
    app
}

#[test]
fn what_cannot_run_or_is_not_known_is_shown_too() {
    let mut app = hanging(120, 40);
    insta::assert_snapshot!("hanging_120x40", shown(&app));
    for _ in 0..60 {
        keys(&mut app, [Action::NextFinding, Action::Right, Action::NextQuantity]);
        shown(&app);
    }
    for _ in 0..13 {
        update(&mut app, Action::Down);
        let session = app.session.as_ref().expect("judged");
        assert!(session.time().is_finite());
        shown(&app);
    }
    keys(&mut app, [Action::Span, Action::Resize(80, 24)]);
    shown(&app);
}

#[test]
fn plain_ascii_is_enough() {
    let mut app = opened_with(100, 34, Theme { ascii: true, ..Theme::default() });
    let screen = shown(&app);
    insta::assert_snapshot!("ascii_100x34", screen);
    for action in [Action::Help, Action::NotChecked, Action::ReadWhy, Action::Back, Action::Enter] {
        assert!(shown(&app).is_ascii(), "{}", shown(&app));
        update(&mut app, action);
    }
}

#[test]
fn nothing_is_coloured_where_no_colours_are_wanted() {
    let mono = opened_with(120, 40, Theme { mono: true, ..Theme::default() });
    for cell in buffer(&mono).content() {
        assert_eq!((cell.fg, cell.bg), (ratatui::style::Color::Reset, ratatui::style::Color::Reset));
    }
    assert_eq!(shown(&mono), shown(&opened(120, 40)));
}

#[test]
fn green_grey_and_white_text_stand_for_nothing() {
    use ratatui::style::Color;
    for light in [false, true] {
        let app = opened_with(120, 40, Theme { light, ..Theme::default() });
        for cell in buffer(&app).content() {
            assert!(!matches!(cell.fg, Color::Green | Color::Gray | Color::DarkGray | Color::Rgb(..) | Color::Indexed(_)));
            assert!(cell.fg != Color::White || cell.bg != Color::Reset);
        }
    }
}

#[test]
fn no_size_makes_drawing_fail() {
    for theme in [Theme::default(), Theme { ascii: true, mono: true, ..Theme::default() }] {
        let mut app = opened_with(80, 24, theme);
        for width in (1..=200).filter(|w| w % 13 == 1 || *w < 6 || (74..80).contains(w)) {
            for height in (1..=60).filter(|h| h % 6 == 1 || *h < 8) {
                update(&mut app, Action::Resize(width, height));
                for _ in 0..4 {
                    shown(&app);
                    update(&mut app, Action::NextPane);
                }
                for action in [Action::Enter, Action::Help, Action::ReadWhy, Action::NotChecked, Action::GoTo] {
                    update(&mut app, action);
                    shown(&app);
                    update(&mut app, Action::Back);
                }
            }
        }
    }
}

#[test]
fn the_cursor_can_be_anywhere() {
    let mut app = opened(120, 40);
    update(&mut app, Action::Span);
    update(&mut app, Action::ToStart);
    let first = shown(&app);
    for _ in 0..1000 {
        update(&mut app, Action::Right);
    }
    let last = shown(&app);
    assert_ne!(first, last);
    update(&mut app, Action::ToEnd);
    assert_eq!(last, shown(&app));
    for _ in 0..1000 {
        update(&mut app, Action::Left);
    }
    assert_eq!(first, shown(&app));
}

#[test]
fn every_binding_stands_in_the_help() {
    let mut app = opened(120, 40);
    update(&mut app, Action::Help);
    let help = shown(&app);
    for binding in BINDINGS {
        assert!(help.contains(binding.hint), "{}", binding.hint);
    }
}

#[test]
fn arrows_enter_and_back_reach_everything() {
    let mut app = opened(80, 24);
    update(&mut app, Action::Enter);
    let Mode::Menu(menu) = app.mode.clone() else { panic!("a menu") };
    for (index, item) in menu.items.iter().enumerate() {
        let mut app = opened(80, 24);
        keys(&mut app, std::iter::once(Action::Enter).chain((0..index).map(|_| Action::Down)).chain([Action::Enter]));
        assert!(!matches!(&app.mode, Mode::Menu(open) if open.title == menu.title), "{}", item.name);
        assert_eq!(app.wish == Wish::Quit, item.name == "quit");
    }
    for what in ["why", "worst", "next finding", "not checked", "go to", "find", "quantity", "cycle", "help", "quit", "pane"] {
        assert!(menu.items.iter().any(|item| item.name.contains(what)), "{what}");
    }
    assert!(matches!(menu.items.last().map(|item| &item.action), Some(Action::Quit)));
}

#[test]
fn a_number_or_a_time_is_gone_to() {
    let mut app = opened(80, 24);
    let answer = |app: &mut App, question: Action, text: &str| {
        keys(app, std::iter::once(question).chain(text.chars().map(Action::Type)).chain([Action::Enter]));
        app.session.as_ref().map(|session| (session.cursor().segment + 2, session.time())).expect("judged")
    };
    assert_eq!(answer(&mut app, Action::GoTo, "12").0, 12);
    assert!((answer(&mut app, Action::GoTo, "9,9 s").1 - 9.9).abs() < 1e-9);
    assert_eq!(answer(&mut app, Action::GoTo, "1").1, 0.0);
    assert_eq!(answer(&mut app, Action::GoTo, "8").0, 8);
    assert_eq!(answer(&mut app, Action::GoTo, "99").0, 8);
    assert_eq!(app.message.as_deref(), Some("there is no waypoint 99; there are 14"));
    assert_eq!(answer(&mut app, Action::GoTo, "nans").0, 8);
    update(&mut app, Action::Left);
    assert_eq!(app.message, None);
}

#[test]
fn a_click_selects_what_stands_there() {
    let mut app = opened(120, 40);
    let screen = shown(&app);
    let row = screen.lines().position(|line| line.contains("before wheel")).expect("in the list");
    update(&mut app, Action::Click(10, row as u16));
    assert_eq!(app.segment(), 3);
    let chart = screen.lines().position(|line| line.contains("J4 rate: asks")).expect("a chart");
    update(&mut app, Action::Click(5, chart as u16 + 1));
    assert_eq!(app.pane, Pane::Chart);
    update(&mut app, Action::Click(119, 3));
    assert_eq!(app.segment(), 12);
    for x in 0..130 {
        for y in 0..45 {
            update(&mut app, Action::Click(x, y));
        }
    }
}

#[test]
fn only_quitting_ends() {
    for binding in BINDINGS {
        let mut app = opened(80, 24);
        update(&mut app, binding.action.clone());
        assert_eq!(app.wish == Wish::Quit, matches!(binding.action, Action::Quit), "{}", binding.hint);
    }
}

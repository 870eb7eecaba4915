//! The list narrowed to what fits a text: what is shown, what is walked over, and that nothing is done to what is hidden unsaid.

use std::sync::Arc;

use elbowroom::checks::Watch;
use elbowroom::files::{Opened, demo};
use elbowroom::review::Judged;
use elbowroom::tui::{Action, App, Mode, OnStretch, Theme, draw, update};
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

fn shown(app: &App) -> String {
    let mut buffer = Buffer::empty(app.area);
    draw(&mut buffer, app.area, app);
    let row = |y| (0..app.area.width).map(|x| buffer[(x, y)].symbol()).collect::<String>().trim_end().to_owned();
    (0..app.area.height).map(row).collect::<Vec<_>>().join("\n")
}

fn keys(app: &mut App, actions: impl IntoIterator<Item = Action>) {
    for action in actions {
        update(app, action);
    }
}

/// Types a text in place of what is asked about, and takes it.
fn answer(app: &mut App, question: Action, text: &str) {
    type_in(app, question, text);
    update(app, Action::Enter);
}

fn type_in(app: &mut App, question: Action, text: &str) {
    update(app, question);
    while matches!(&app.mode, Mode::Asking(asking) if !asking.typed.is_empty()) {
        update(app, Action::Erase);
    }
    keys(app, text.chars().map(Action::Type));
}

/// The waypoint that the cursor's segment arrives at, counted from 1.
fn at(app: &App) -> usize {
    app.session.as_ref().expect("judged").waypoint() + 1
}

fn told(app: &App) -> &str {
    app.message.as_deref().unwrap_or_default()
}

#[test]
fn rows_that_do_not_fit_are_hidden_and_the_heading_says_so() {
    for (width, height) in [(80, 24), (120, 40)] {
        let mut app = opened(width, height);
        answer(&mut app, Action::Find, "WHEEL");
        assert_eq!(at(&app), 5);
        insta::assert_snapshot!(format!("filtered_{width}x{height}"), shown(&app));
        for name in ["above rack", "pass end", "window in", "on shelf"] {
            assert!(!shown(&app).contains(name), "{name}\n{}", shown(&app));
        }
        update(&mut app, Action::Back);
        assert!(shown(&app).contains("rack free") && shown(&app).contains(" Segments "), "{}", shown(&app));
    }
}

#[test]
fn a_filter_is_a_name_a_verdict_a_check_or_a_joint() {
    let fits = |text: &str| {
        let mut app = opened(80, 24);
        answer(&mut app, Action::Find, text);
        let mut all = Vec::new();
        keys(&mut app, (0..14).map(|_| Action::Up));
        while all.last() != Some(&at(&app)) {
            all.push(at(&app));
            update(&mut app, Action::Down);
        }
        all
    };
    assert_eq!(fits("wheel"), [5, 8]);
    assert_eq!(fits("rack"), [2, 4]);
    assert_eq!(fits("over"), [10]);
    assert_eq!(fits("tight"), [12]);
    assert_eq!(fits("clear"), [2, 3, 4, 5, 6, 7, 8, 9, 11, 13, 14]);
    assert_eq!(fits("rate"), [10]);
    assert!(fits("j4").contains(&10) && !fits("j4").contains(&12));
}

#[test]
fn what_is_typed_narrows_the_list_at_once_and_escape_takes_it_back() {
    let mut app = opened(80, 24);
    let before = shown(&app);
    type_in(&mut app, Action::Find, "shelf");
    // The cursor's row stays in sight though it does not fit.
    insta::assert_snapshot!("filter_typed_80x24", shown(&app));
    update(&mut app, Action::Back);
    assert_eq!(shown(&app), before);
    // One that stands is what comes back.
    answer(&mut app, Action::Find, "wheel");
    type_in(&mut app, Action::Find, "shelf");
    update(&mut app, Action::Back);
    assert!(shown(&app).contains("2 of 14 shown: wheel"), "{}", shown(&app));
    answer(&mut app, Action::Find, "");
    assert!(shown(&app).contains(" Segments "), "{}", shown(&app));
}

#[test]
fn an_empty_result_is_told_and_never_stands() {
    let mut app = opened(80, 24);
    answer(&mut app, Action::Find, "wheel");
    type_in(&mut app, Action::Find, "qqq");
    insta::assert_snapshot!("filter_nothing_80x24", shown(&app));
    update(&mut app, Action::Enter);
    assert!(told(&app).starts_with("nothing fits \"qqq\""), "{}", told(&app));
    assert!(shown(&app).contains("2 of 14 shown: wheel"), "{}", shown(&app));
    // An edit can make it empty all the same: the cursor's row stays, and it is told.
    answer(&mut app, Action::Find, "over");
    let remedy = demo_slower(&app);
    update(&mut app, remedy);
    check(&mut app);
    assert!(shown(&app).contains("0 of 14 shown: over") && shown(&app).contains("nothing fits \"over\""), "{}", shown(&app));
    assert!(shown(&app).contains("window out") && shown(&app).contains("does not fit the filter"), "{}", shown(&app));
    let before = at(&app);
    keys(&mut app, [Action::Up, Action::Down, Action::Down]);
    assert_eq!(at(&app), before);
}

/// The line that is over, at a third of its speed.
fn demo_slower(app: &App) -> Action {
    use elbowroom::program::{Arrive, Edit};
    use elbowroom::units::Speed;
    let index = at(app) - 1;
    let mut waypoint = app.taught().waypoints[index].clone();
    let Some(Arrive::Line(speed)) = &mut waypoint.arrive else { panic!("a line") };
    speed.speed = Some(Speed::mm_per_s(130.0));
    Action::Change(Box::new(Edit::Change { index, waypoint: Box::new(waypoint) }))
}

#[test]
fn findings_that_are_hidden_are_told_and_not_gone_to() {
    let mut app = opened(80, 24);
    answer(&mut app, Action::Find, "shelf");
    let worst = |app: &App| app.session.as_ref().and_then(elbowroom::review::Session::finding_number);
    for action in [Action::Worst, Action::NextFinding, Action::PreviousFinding, Action::NextFinding] {
        update(&mut app, action);
        assert_eq!(at(&app), 12);
        assert!(worst(&app).is_some());
        assert!(told(&app).contains("hidden by the filter, Esc shows all"), "{}", told(&app));
    }
    answer(&mut app, Action::Find, "rack");
    let before = at(&app);
    update(&mut app, Action::NextFinding);
    assert!(told(&app).starts_with("no finding is shown; "), "{}", told(&app));
    assert_eq!(at(&app), before);
    keys(&mut app, [Action::Back, Action::Worst]);
    assert_eq!((at(&app), worst(&app), told(&app)), (10, Some(1), ""));
}

#[test]
fn numbers_and_times_are_gone_to_all_the_same_and_the_row_is_seen() {
    let mut app = opened(80, 24);
    answer(&mut app, Action::Find, "wheel");
    answer(&mut app, Action::GoTo, "12");
    assert_eq!(at(&app), 12);
    assert!(shown(&app).contains("on shelf") && shown(&app).contains("does not fit the filter"), "{}", shown(&app));
    answer(&mut app, Action::GoTo, "9.9s");
    assert!(shown(&app).contains("2 of 14 shown: wheel") && shown(&app).contains("does not fit the filter"), "{}", shown(&app));
    // From there the arrows lead back to what is shown.
    update(&mut app, Action::Up);
    assert_eq!(at(&app), 8);
    assert!(!shown(&app).contains("does not fit the filter"));
}

#[test]
fn only_the_selected_row_is_edited_and_arrows_walk_over_what_is_shown() {
    let mut app = opened(80, 24);
    let taught = Arc::clone(app.taught());
    answer(&mut app, Action::Find, "wheel");
    update(&mut app, Action::Edit);
    assert!(shown(&app).contains("Edit waypoint 5 \"before wheel\" (2 of 14 shown: wheel)"), "{}", shown(&app));
    update(&mut app, Action::Right);
    assert!(shown(&app).contains("Edit waypoint 8"), "{}", shown(&app));
    keys(&mut app, [Action::Back, Action::OnStretch(OnStretch::Delete)]);
    let names = |recipe: &elbowroom::program::Recipe| recipe.waypoints.iter().map(|w| w.name.clone()).collect::<Vec<_>>();
    let mut left = names(&taught);
    left.remove(4);
    assert_eq!(names(app.taught()), left);
}

#[test]
fn a_stretch_over_hidden_rows_is_told_before_and_after() {
    let mut app = opened(80, 24);
    answer(&mut app, Action::Find, "wheel");
    keys(&mut app, [Action::OnStretch(OnStretch::Mark), Action::EditStretch]);
    let Mode::Menu(menu) = &app.mode else { panic!("a menu") };
    assert_eq!(menu.title, "Waypoint 5");
    keys(&mut app, [Action::Back, Action::Down, Action::EditStretch]);
    let Mode::Menu(menu) = &app.mode else { panic!("a menu") };
    assert_eq!((menu.title.as_str(), menu.chosen), ("Waypoints 5 to 8, 2 of them hidden by the filter", 0));
    insta::assert_snapshot!("filtered_stretch_80x24", shown(&app));
    // What stands first only shows them.
    let taught = Arc::clone(app.taught());
    update(&mut app, Action::Enter);
    assert!(shown(&app).contains("pass end") && Arc::ptr_eq(&taught, app.taught()), "{}", shown(&app));
    answer(&mut app, Action::Find, "wheel");
    update(&mut app, Action::OnStretch(OnStretch::Shift("0 0 5".to_owned())));
    assert!(told(&app).ends_with("; 2 of them hidden by the filter"), "{}", told(&app));
}

#[test]
fn a_new_waypoint_that_the_filter_hides_is_told() {
    let mut app = opened(80, 24);
    answer(&mut app, Action::Find, "over");
    update(&mut app, Action::OnStretch(OnStretch::Duplicate));
    let mut quiet = opened(80, 24);
    answer(&mut quiet, Action::Find, "window");
    update(&mut quiet, Action::OnStretch(OnStretch::Duplicate));
    check(&mut app);
    check(&mut quiet);
    let is_told = |app: &App| told(app).contains("hidden by the filter");
    assert!(!is_told(&quiet), "{}", told(&quiet));
    let new_is_over = shown(&app).contains("2 of 15 shown");
    assert_ne!(is_told(&app), new_is_over, "{}\n{}", told(&app), shown(&app));
}

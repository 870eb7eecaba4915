use std::sync::Arc;

use crate::arm::Joints;
use crate::review::jog::{Axes, Stand, coordinates, joint_to, pose_from, to_pose};
use crate::review::record::{Form, Record, Stood, insert_after, suggested_name, teach_again};
use crate::units::typed;

use super::{Jogging, known, next_axes, next_size, step_of, system, tcp, words};
use crate::tui::action::Action;
use crate::tui::app::{App, Asking, Item, Menu, Mode, Question};
use crate::tui::edits;
use crate::tui::keys::BINDINGS;

/// A deed is what can be done where the model stands, besides moving it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Deed {
    /// Insert a waypoint here after the selected one.
    Insert {
        /// As a pose rather than as joint values.
        as_pose: bool,
    },
    /// Teach the selected waypoint again.
    TeachAgain {
        /// As a pose rather than as joint values.
        as_pose: bool,
    },
    /// Type the chosen row's value.
    Value,
    /// Go to a waypoint.
    GoTo,
    /// The next step size.
    StepSize,
    /// The next axes.
    Axes,
    /// End jogging.
    Leave,
}

/// The deeds by name.
pub(super) fn menu(app: &App) -> Menu {
    let Some(jog) = &app.jog else { return Menu { title: String::new(), items: Vec::new(), chosen: 0 } };
    let name = &app.taught().waypoints[jog.waypoint].name;
    let frame = words::posed_in(jog);
    let item = |name: String, key: &str, deed: Deed| Item { name, key: key.to_owned(), action: Action::Deed(deed) };
    let key = |wanted: fn(&Action) -> bool| {
        let binding = BINDINGS.iter().find(|binding| wanted(&binding.action));
        binding.map(|binding| Item::of(binding, &app.keymap, app.theme).key).unwrap_or_default()
    };
    let [size, axes, end] = [
        key(|action| matches!(action, Action::StepSize)),
        key(|action| matches!(action, Action::NextPane)),
        key(|action| matches!(action, Action::Jog)),
    ];
    let items = vec![
        item("insert a waypoint after it, as joint values".to_owned(), "", Deed::Insert { as_pose: false }),
        item(format!("insert a waypoint after it, as a pose in {frame}"), "", Deed::Insert { as_pose: true }),
        item("teach it again here, as joint values".to_owned(), "", Deed::TeachAgain { as_pose: false }),
        item(format!("teach it again here, as a pose in {frame}"), "", Deed::TeachAgain { as_pose: true }),
        item(format!("type a value for {}", words::row(app, jog)), "", Deed::Value),
        item("go to a waypoint".to_owned(), "", Deed::GoTo),
        item("next step size".to_owned(), &size, Deed::StepSize),
        item("next axes".to_owned(), &axes, Deed::Axes),
        item("end jogging".to_owned(), &end, Deed::Leave),
    ];
    Menu { title: format!("Waypoint {} \"{name}\"", jog.waypoint + 1), items, chosen: 0 }
}

/// Does a deed, or asks what it needs to know.
pub(super) fn act(app: &mut App, deed: Deed) {
    let suggested = app.jog.as_ref().map(|jog| suggested_name(app.taught(), jog.waypoint)).unwrap_or_default();
    let mut ask = |question: Question, typed: String| app.mode = Mode::Asking(Asking { question, typed });
    match deed {
        Deed::Insert { as_pose } => {
            ask(Question::RecordName { as_pose }, suggested);
        }
        Deed::TeachAgain { as_pose } => app.message = teach(app, as_pose).err().or(app.message.take()),
        Deed::Value => ask(Question::JogValue, String::new()),
        Deed::GoTo => ask(Question::JogWaypoint, String::new()),
        Deed::StepSize => next_size(app),
        Deed::Axes => next_axes(app),
        Deed::Leave => super::leave(app),
    }
}

fn form(jog: &Jogging, as_pose: bool) -> Form {
    if as_pose { Form::Pose(jog.axes.clone().unwrap_or(Axes::Base)) } else { Form::Joints }
}

fn stood<'a>(app: &'a App, jog: &'a Jogging, known: &'a [Option<Joints>]) -> Stood<'a> {
    Stood { arm: &app.arm, recipe: app.taught(), q: &jog.q, known }
}

fn teach(app: &mut App, as_pose: bool) -> Result<(), String> {
    let Some(jog) = &app.jog else { return Ok(()) };
    let record = teach_again(&stood(app, jog, &known(app)), jog.waypoint, &form(jog, as_pose))?;
    let waypoint = jog.waypoint;
    keep(app, &record, waypoint);
    Ok(())
}

/// Records the waypoint that a name was given for.
///
/// # Errors
/// Why not, as a sentence.
pub fn record(app: &mut App, name: &str, as_pose: bool) -> Result<(), String> {
    let Some(jog) = &app.jog else { return Ok(()) };
    let record = insert_after(&stood(app, jog, &known(app)), jog.waypoint, name, &form(jog, as_pose))?;
    let waypoint = jog.waypoint + 1;
    keep(app, &record, waypoint);
    Ok(())
}

/// Makes the edit; if it was made, the model stands where the recipe now says, with that waypoint selected.
fn keep(app: &mut App, record: &Record, waypoint: usize) {
    let before = Arc::clone(app.taught());
    edits::make(app, &record.edit);
    let made = !Arc::ptr_eq(&before, app.taught());
    if let (Some(jog), true) = (&mut app.jog, made) {
        jog.q = record.q;
        jog.waypoint = waypoint;
    }
}

/// Goes where a typed value of the chosen row says.
///
/// # Errors
/// Why not, as a sentence.
pub fn settle_value(app: &mut App, text: &str) -> Result<(), String> {
    let Some(jog) = &app.jog else { return Ok(()) };
    let value = typed(text, step_of(app, jog).of())?;
    let q = match jog.direction() {
        None => joint_to(&app.arm, &jog.q, jog.row, value),
        Some(direction) => {
            if !app.arm.task().is_whole() && direction.turns() && direction.slot() != 5 {
                return Err("this arm's task leaves that turn out".to_owned());
            }
            let system = system(app, jog);
            let mut wanted = coordinates(&system, &tcp(app, jog, &jog.q));
            wanted[direction.slot()] = value;
            to_pose(&Stand { arm: &app.arm, carried: &jog.carried, q: jog.q }, &pose_from(&system, wanted))
        }
    };
    let q = q.map_err(|refused| words::refused(&app.arm, &refused))?;
    if let Some(jog) = &mut app.jog {
        jog.q = q;
    }
    Ok(())
}

/// Goes to the waypoint of that number or name.
///
/// # Errors
/// Why not, as a sentence.
pub fn settle_waypoint(app: &mut App, text: &str) -> Result<(), String> {
    let count = app.taught().waypoints.len();
    let index = match text.parse::<usize>() {
        Ok(number) if (1..=count).contains(&number) => number - 1,
        Ok(number) => return Err(format!("there is no waypoint {number}; there are {count}")),
        Err(_) => app.taught().waypoint_named(text).ok_or_else(|| format!("there is no waypoint \"{text}\""))?,
    };
    let q = known(app)[index].ok_or("that waypoint is not checked yet")?;
    let carried = app.taught().hanging_at(index).arriving();
    if let Some(jog) = &mut app.jog {
        (jog.q, jog.carried, jog.waypoint) = (q, carried, index);
    }
    Ok(())
}

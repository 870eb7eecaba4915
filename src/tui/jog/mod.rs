//! The model of the arm moved by hand.

mod deeds;
mod draw;
mod rulers;
mod words;

use crate::arm::{JointKind, Joints};
use crate::geometry::Pose;
use crate::kinematics::Posture;
use crate::program::{Carried, Recipe, Taught};
use crate::review::drawn::Gauges;
use crate::review::jog::{Axes, Direction, Sizes, Stand, StepOf, cartesian_step, joint_step};
use crate::units::Measure;

use super::action::Action;
use super::app::{App, Mode};
use super::{edits, file};

pub use deeds::Deed;
pub(super) use deeds::{record, settle_value, settle_waypoint};
pub use draw::draw;
pub use words::headline;

/// Jogging is where the model stands and how the next step moves it.
#[derive(Debug, Clone)]
pub struct Jogging {
    /// Joint values.
    pub q: Joints,
    /// Joint values where jogging began.
    pub began: Joints,
    /// Tool and load.
    pub carried: Carried,
    /// The axes that steps follow; none for joint by joint.
    pub axes: Option<Axes>,
    /// The chosen row: a joint, or a direction.
    pub row: usize,
    /// Step sizes.
    pub sizes: Sizes,
    /// The waypoint after which is inserted, and which is taught again, counted from 0.
    pub waypoint: usize,
}

impl Jogging {
    /// How many rows there are.
    fn rows(&self) -> usize {
        if self.axes.is_some() { Direction::ALL.len() } else { self.q.len() }
    }

    /// The direction of the chosen row; none for joint by joint.
    fn direction(&self) -> Option<Direction> {
        self.axes.as_ref().and(Direction::ALL.get(self.row).copied())
    }
}

/// What the chosen row's step is of.
fn step_of(app: &App, jog: &Jogging) -> StepOf {
    match jog.direction() {
        Some(direction) if direction.turns() => StepOf::About,
        Some(_) => StepOf::Along,
        None if app.arm.joints()[jog.row].kind == JointKind::Revolute => StepOf::TurningJoint,
        None => StepOf::SlidingJoint,
    }
}

/// The size of the next step.
fn size(app: &App, jog: &Jogging) -> Measure {
    jog.sizes.size(step_of(app, jog))
}

/// Where the model's TCP stands, base.
fn tcp(app: &App, jog: &Jogging, q: &Joints) -> Pose {
    Posture::at(app.arm.chain(), q).tcp(&jog.carried.tcp)
}

/// The system that coordinates are told in, base: for the tool's axes the TCP as it stood where jogging began.
fn system(app: &App, jog: &Jogging) -> Pose {
    let axes = jog.axes.as_ref().unwrap_or(&Axes::Base);
    axes.in_base(app.taught(), &tcp(app, jog, &jog.began)).unwrap_or_else(Pose::identity)
}

/// Opens jogging where the cursor is.
pub(super) fn open(app: &mut App) {
    let (Some(session), Some(gauges)) = (&app.session, &app.scene.gauges) else {
        app.message = Some("not checked yet".to_owned());
        return;
    };
    let segment = &session.judged().plan.segments[session.cursor().segment];
    let last = app.taught().waypoints.len() - 1;
    app.jog = Some(Jogging {
        q: gauges.q,
        began: gauges.q,
        carried: segment.carried,
        axes: None,
        row: app.joint,
        sizes: Sizes::default(),
        waypoint: session.waypoint().min(last),
    });
    app.mode = Mode::Jog;
}

fn leave(app: &mut App) {
    app.jog = None;
    app.mode = Mode::Panes;
}

/// Handles an action while jogging.
pub(super) fn act(app: &mut App, action: &Action) {
    let Some(jog) = &mut app.jog else { return };
    let rows = jog.rows();
    match action {
        Action::Up => jog.row = (jog.row + rows - 1) % rows,
        Action::Down => jog.row = (jog.row + 1) % rows,
        Action::Left => step(app, -1.0, 1),
        Action::Right => step(app, 1.0, 1),
        Action::LeapBack => step(app, -1.0, 10),
        Action::LeapOn => step(app, 1.0, 10),
        Action::NextPane => next_axes(app),
        Action::StepSize => next_size(app),
        Action::Enter => app.mode = Mode::Menu(deeds::menu(app)),
        Action::Deed(deed) => deeds::act(app, *deed),
        Action::Undo => edits::undo(app),
        Action::Redo => edits::redo(app),
        Action::Save => file::save(app),
        Action::Help => app.mode = Mode::Page(super::app::Page::Help, 0),
        Action::Back | Action::Jog => leave(app),
        _ => {}
    }
    let last = app.taught().waypoints.len() - 1;
    if let Some(jog) = &mut app.jog {
        jog.waypoint = jog.waypoint.min(last);
    }
}

fn next_axes(app: &mut App) {
    let all = Axes::of(app.taught());
    let Some(jog) = &mut app.jog else { return };
    let next = jog.axes.as_ref().map_or(0, |now| all.iter().position(|axes| axes == now).map_or(all.len(), |at| at + 1));
    jog.axes = all.get(next).cloned();
    jog.row = 0;
}

fn next_size(app: &mut App) {
    let Some(of) = app.jog.as_ref().map(|jog| step_of(app, jog)) else { return };
    if let Some(jog) = &mut app.jog {
        jog.sizes.next(of);
    }
}

/// Makes some steps one after the other, until something stops one.
fn step(app: &mut App, sign: f64, count: usize) {
    for _ in 0..count {
        let Some(jog) = &app.jog else { return };
        let by = sign * size(app, jog).si;
        let (q, told, stopped) = match (&jog.axes, jog.direction()) {
            (Some(axes), Some(direction)) => {
                let stand = Stand { arm: &app.arm, carried: &jog.carried, q: jog.q };
                let Some(system) = axes.in_base(app.taught(), &tcp(app, jog, &jog.q)) else {
                    app.message = Some(format!("there is no frame \"{}\" any more; Tab goes on", axes.name()));
                    return;
                };
                match cartesian_step(&stand, &direction.twist(&system), by) {
                    Ok(step) => (step.q, words::step(&app.arm, &step), step.stop.is_some()),
                    Err(refused) => (jog.q, Some(words::refused(&app.arm, &refused)), true),
                }
            }
            _ => {
                let (q, stop) = joint_step(&app.arm, &jog.q, jog.row, by);
                (q, stop.map(|stop| words::stop(&app.arm, stop)), stop.is_some())
            }
        };
        if let Some(jog) = &mut app.jog {
            jog.q = q;
        }
        // What the last of several steps said stays, and of those before it what was not as asked.
        app.message = told.or(app.message.take());
        if stopped {
            return;
        }
    }
}

/// Joint values at the waypoints of what is taught, as far as they are known.
fn known(app: &App) -> Vec<Option<Joints>> {
    let judged = app.judged();
    let planned = |recipe: &Recipe, name: &str| {
        let index = recipe.waypoint_named(name)?;
        let plan = &judged?.plan;
        if index == 0 { plan.segments.first().map(|first| first.start) } else { plan.arriving(index).map(|segment| segment.end) }
    };
    app.taught()
        .waypoints
        .iter()
        .map(|waypoint| match &waypoint.taught {
            Taught::Joints(q) => Some(*q),
            Taught::Pose { .. } => planned(&judged?.recipe, &waypoint.name),
        })
        .collect()
}

/// Makes the drawings show the model where it was jogged to.
pub(super) fn follow(app: &mut App) {
    let (Some(jog), Some(session)) = (&app.jog, &app.session) else { return };
    if matches!(app.mode, Mode::Panes) {
        app.mode = Mode::Jog;
    }
    let (judged, segment) = (session.judged(), session.cursor().segment);
    app.scene.stand_at(Gauges::jogged(judged, segment, &jog.q, &jog.carried));
}

use std::sync::Arc;

use crate::program::{Datum, Edit, Part, Recipe, data_of};
use crate::review::Judged;

use super::action::Action;
use super::app::{App, Mode};
use super::edits;
use super::filter::next_waypoint;

/// Which parts of the recipe are edited together.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Group {
    /// A waypoint and the segment that arrives there.
    Waypoint,
    /// Tools.
    Tools,
    /// Loads.
    Loads,
    /// Frames.
    Frames,
    /// The recipe itself, the mount, the criteria, and what is usual.
    Cell,
}

impl Group {
    const ALL: [Self; 5] = [Self::Waypoint, Self::Tools, Self::Loads, Self::Frames, Self::Cell];

    fn next(self) -> Self {
        let at = Self::ALL.iter().position(|group| *group == self).unwrap_or(0);
        Self::ALL[(at + 1) % Self::ALL.len()]
    }

    /// Its name.
    pub fn name(self) -> &'static str {
        match self {
            Self::Waypoint => "waypoint",
            Self::Tools => "tools",
            Self::Loads => "loads",
            Self::Frames => "frames",
            Self::Cell => "cell",
        }
    }
}

/// What is being edited.
#[derive(Debug, Clone)]
pub struct Editing {
    /// Which parts.
    pub group: Group,
    /// Which waypoint, counted from 0.
    pub waypoint: usize,
    /// Which datum, counted from 0 over all parts of the group.
    pub chosen: usize,
    /// What is typed for it, and why it is not taken, if so.
    pub typing: Option<(String, Option<String>)>,
}

/// What a typed text would make of the recipe.
#[derive(Debug)]
pub struct Preview {
    /// The recipe with it.
    pub recipe: Arc<Recipe>,
    /// The same judged, once that is done.
    pub judged: Option<Judged>,
    /// Whether it was asked for.
    pub asked: bool,
}

impl Editing {
    /// Begins with a waypoint.
    pub fn of(waypoint: usize) -> Self {
        Self { group: Group::Waypoint, waypoint, chosen: 0, typing: None }
    }

    /// The parts that are shown.
    fn parts(&self, recipe: &Recipe) -> Vec<Part> {
        let waypoint = self.waypoint.min(recipe.waypoints.len().saturating_sub(1));
        match self.group {
            Group::Waypoint if waypoint == 0 => vec![Part::Waypoint(0)],
            Group::Waypoint => vec![Part::Segment(waypoint), Part::Waypoint(waypoint)],
            Group::Tools => (0..recipe.tools.len()).map(Part::Tool).collect(),
            Group::Loads => (0..recipe.loads.len()).map(Part::Load).collect(),
            Group::Frames => (0..recipe.frames.len()).map(Part::Frame).collect(),
            Group::Cell => vec![Part::Acceptance, Part::Usual, Part::Mount, Part::Recipe],
        }
    }

    /// The data that are shown, each with its part.
    pub fn data(&self, app: &App) -> Vec<(Part, Datum)> {
        let recipe = app.taught();
        let of = |part: Part| data_of(recipe, &app.arm, part).into_iter().map(move |datum| (part, datum));
        self.parts(recipe).into_iter().flat_map(of).collect()
    }
}

/// Handles an action while data are edited.
pub(super) fn handle(app: &mut App, action: &Action) {
    let Mode::Editing(mut editing) = std::mem::replace(&mut app.mode, Mode::Panes) else { return };
    let data = editing.data(app);
    let last = data.len().saturating_sub(1);
    editing.chosen = editing.chosen.min(last);
    if editing.typing.is_some() {
        if let Some((_, datum)) = data.get(editing.chosen) {
            type_in(app, &mut editing, datum, action);
        }
        app.mode = Mode::Editing(editing);
        return;
    }
    match action {
        Action::Back | Action::Edit => return,
        Action::Up => editing.chosen = editing.chosen.saturating_sub(1),
        Action::Down => editing.chosen = (editing.chosen + 1).min(last),
        Action::LeapBack => editing.chosen = editing.chosen.saturating_sub(10),
        Action::LeapOn => editing.chosen = (editing.chosen + 10).min(last),
        Action::ToStart => editing.chosen = 0,
        Action::ToEnd => editing.chosen = last,
        Action::Left | Action::Right if editing.group == Group::Waypoint => {
            let (count, back) = (app.taught().waypoints.len(), matches!(action, Action::Left));
            editing.waypoint = next_waypoint(app, editing.waypoint, count, back);
        }
        Action::NextPane => (editing.group, editing.chosen) = (editing.group.next(), 0),
        Action::Enter => {
            if let Some((_, datum)) = data.get(editing.chosen) {
                editing.typing = Some((datum.text.clone(), None));
            }
        }
        Action::Undo => edits::undo(app),
        Action::Redo => edits::redo(app),
        _ => {}
    }
    app.mode = Mode::Editing(editing);
}

fn type_in(app: &mut App, editing: &mut Editing, datum: &Datum, action: &Action) {
    let Some((typed, refused)) = &mut editing.typing else { return };
    match action {
        Action::Type(sign) if !sign.is_control() => typed.push(*sign),
        Action::Erase => {
            typed.pop();
        }
        Action::Up | Action::Down if !datum.choices.is_empty() => {
            let count = datum.choices.len();
            let at = datum.choices.iter().position(|choice| choice == typed);
            let step = if matches!(action, Action::Down) { 1 } else { count - 1 };
            typed.clone_from(&datum.choices[at.map_or(0, |at| (at + step) % count)]);
        }
        Action::Back => {
            editing.typing = None;
            app.preview = None;
            return;
        }
        Action::Enter => {
            match datum.apply(app.taught(), &app.arm, typed) {
                Ok(edit) => {
                    if *typed != datum.text {
                        edits::make(app, &edit);
                    }
                    editing.typing = None;
                    app.preview = None;
                }
                Err(why) => *refused = Some(why),
            }
            return;
        }
        _ => return,
    }
    let outcome = datum.apply(app.taught(), &app.arm, typed);
    app.preview = outcome.as_ref().ok().filter(|_| *typed != datum.text).and_then(|edit| preview(app, edit));
    *refused = outcome.err();
}

fn preview(app: &App, edit: &Edit) -> Option<Preview> {
    let mut recipe = (**app.taught()).clone();
    edit.apply(&mut recipe).ok()?;
    Some(Preview { recipe: Arc::new(recipe), judged: None, asked: false })
}

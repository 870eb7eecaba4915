use crate::geometry::Pose;

use super::{Acceptance, Frame, Load, Recipe, Repeat, Tool, Usual, Waypoint};

/// An edit is one change of a recipe, told by what it leaves behind. Applying it yields the edit that takes it back.
#[derive(Debug, Clone, PartialEq)]
pub enum Edit {
    /// Waypoint `index` (counted from 0) becomes this one.
    Change {
        /// Which one.
        index: usize,
        /// What it becomes.
        waypoint: Box<Waypoint>,
    },
    /// This waypoint stands at `index` from now on; those from there on move one down.
    Insert {
        /// Where.
        index: usize,
        /// The new one.
        waypoint: Box<Waypoint>,
    },
    /// Waypoint `index` goes.
    Remove {
        /// Which one.
        index: usize,
    },
    /// Waypoint `from` is taken out and stands at `to` among the others.
    Reorder {
        /// Where it stood.
        from: usize,
        /// Where it stands.
        to: usize,
    },
    /// The recipe's name.
    Name(String),
    /// Where the base stands in the world.
    Mount(Pose),
    /// What it is judged by.
    Acceptance(Box<Acceptance>),
    /// What segments use where they say nothing.
    Usual(Box<Usual>),
    /// All tools.
    Tools(Vec<Tool>),
    /// All loads.
    Loads(Vec<Load>),
    /// All frames.
    Frames(Vec<Frame>),
    /// How the cycle goes on.
    Repeat(Repeat),
    /// The load in the tool at the first waypoint.
    Carrying(Option<String>),
    /// Several at once, in this order: one step for the person who made them.
    Together(Vec<Self>),
}

/// An edit names a waypoint that is not there.
#[derive(Debug, Clone, Copy, PartialEq, Eq, thiserror::Error)]
#[error("there is no waypoint {}; there are {count}", index + 1)]
pub struct NoSuchWaypoint {
    /// Which one, counted from 0.
    pub index: usize,
    /// How many there are.
    pub count: usize,
}

impl Edit {
    /// Waypoint `index` with something about it changed.
    pub fn change(recipe: &Recipe, index: usize, how: impl FnOnce(&mut Waypoint)) -> Self {
        let mut waypoint = recipe.waypoints[index].clone();
        how(&mut waypoint);
        Self::Change { index, waypoint: Box::new(waypoint) }
    }

    /// Changes a recipe and yields the edit that takes the change back. Whether the result can be planned is told by
    /// [`Recipe::faults`].
    ///
    /// # Errors
    /// [`NoSuchWaypoint`]; the recipe is then as it was.
    pub fn apply(&self, recipe: &mut Recipe) -> Result<Self, NoSuchWaypoint> {
        let count = recipe.waypoints.len();
        let there = |index: usize, most: usize| if index < most { Ok(()) } else { Err(NoSuchWaypoint { index, count }) };
        Ok(match self {
            Self::Change { index, waypoint } => {
                there(*index, count)?;
                let before = std::mem::replace(&mut recipe.waypoints[*index], (**waypoint).clone());
                Self::Change { index: *index, waypoint: Box::new(before) }
            }
            Self::Insert { index, waypoint } => {
                there(*index, count + 1)?;
                recipe.waypoints.insert(*index, (**waypoint).clone());
                Self::Remove { index: *index }
            }
            Self::Remove { index } => {
                there(*index, count)?;
                let waypoint = Box::new(recipe.waypoints.remove(*index));
                Self::Insert { index: *index, waypoint }
            }
            Self::Reorder { from, to } => {
                there(*from, count)?;
                there(*to, count)?;
                let waypoint = recipe.waypoints.remove(*from);
                recipe.waypoints.insert(*to, waypoint);
                Self::Reorder { from: *to, to: *from }
            }
            Self::Name(name) => Self::Name(std::mem::replace(&mut recipe.name, name.clone())),
            Self::Mount(mount) => Self::Mount(std::mem::replace(&mut recipe.mount, *mount)),
            Self::Acceptance(acceptance) => Self::Acceptance(Box::new(std::mem::replace(&mut recipe.acceptance, **acceptance))),
            Self::Usual(usual) => Self::Usual(Box::new(std::mem::replace(&mut recipe.usual, **usual))),
            Self::Tools(tools) => Self::Tools(std::mem::replace(&mut recipe.tools, tools.clone())),
            Self::Loads(loads) => Self::Loads(std::mem::replace(&mut recipe.loads, loads.clone())),
            Self::Frames(frames) => Self::Frames(std::mem::replace(&mut recipe.frames, frames.clone())),
            Self::Repeat(repeat) => Self::Repeat(std::mem::replace(&mut recipe.repeat, *repeat)),
            Self::Carrying(load) => Self::Carrying(std::mem::replace(&mut recipe.carrying, load.clone())),
            Self::Together(edits) => Self::Together(together(edits, recipe)?),
        })
    }
}

/// Applies edits one after the other; all of them or none. Yields those that take them back.
fn together(edits: &[Edit], recipe: &mut Recipe) -> Result<Vec<Edit>, NoSuchWaypoint> {
    let mut undo: Vec<Edit> = Vec::with_capacity(edits.len());
    for edit in edits {
        match edit.apply(recipe) {
            Ok(back) => undo.push(back),
            Err(fault) => {
                for back in undo.iter().rev() {
                    back.apply(recipe)?;
                }
                return Err(fault);
            }
        }
    }
    undo.reverse();
    Ok(undo)
}

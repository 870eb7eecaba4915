use std::sync::Arc;

use crate::arm::Arm;
use crate::program::{Edit, NoSuchWaypoint, Recipe};

use super::edit_words;

/// A step is one edit in words, with the edits that make it and take it back.
#[derive(Debug, Clone, PartialEq)]
pub struct Step {
    /// What it was: `waypoint 4 "on housing": speed 250 mm/s -> 180 mm/s`.
    pub words: String,
    forth: Edit,
    back: Edit,
}

/// A history is a recipe with every edit since it was opened: steps to take back, steps to make again, and where it was saved.
/// Saving ends nothing; what came before can still be taken back.
#[derive(Debug, Clone)]
pub struct History {
    recipe: Arc<Recipe>,
    done: Vec<Step>,
    undone: Vec<Step>,
    saved: Arc<Recipe>,
    /// After how many steps it was saved, while that place can still be reached.
    saved_after: Option<usize>,
    unsaved: bool,
}

impl History {
    /// A history that begins with a recipe as it stands in its file.
    pub fn of(recipe: Recipe) -> Self {
        let recipe = Arc::new(recipe);
        Self { saved: Arc::clone(&recipe), recipe, done: Vec::new(), undone: Vec::new(), saved_after: Some(0), unsaved: false }
    }

    /// The recipe as it is now.
    pub fn recipe(&self) -> &Arc<Recipe> {
        &self.recipe
    }

    /// Makes an edit; what had been taken back can no longer be made again. Yields what it was in words. Whether the result can be
    /// planned is the caller's to judge before.
    ///
    /// # Errors
    /// [`NoSuchWaypoint`]; nothing has changed then.
    pub fn make(&mut self, arm: &Arm, edit: Edit) -> Result<&str, NoSuchWaypoint> {
        let mut recipe = (*self.recipe).clone();
        let back = edit.apply(&mut recipe)?;
        let words = edit_words(&self.recipe, arm, &edit);
        if self.saved_after.is_some_and(|after| after > self.done.len()) {
            self.saved_after = None;
        }
        self.undone.clear();
        self.done.push(Step { words, forth: edit, back });
        self.now(recipe);
        Ok(self.done.last().map_or("", |step| &step.words))
    }

    /// Takes the last step back. Yields it with the edit that this was; `None` if there is none to take back.
    pub fn undo(&mut self) -> Option<(&str, &Edit)> {
        let mut recipe = (*self.recipe).clone();
        self.done.last()?.back.apply(&mut recipe).ok()?;
        let step = self.done.pop()?;
        self.undone.push(step);
        self.now(recipe);
        self.undone.last().map(|step| (step.words.as_str(), &step.back))
    }

    /// Makes the last step that was taken back again. Yields it with the edit that this was; `None` if there is none.
    pub fn redo(&mut self) -> Option<(&str, &Edit)> {
        let mut recipe = (*self.recipe).clone();
        self.undone.last()?.forth.apply(&mut recipe).ok()?;
        let step = self.undone.pop()?;
        self.done.push(step);
        self.now(recipe);
        self.done.last().map(|step| (step.words.as_str(), &step.forth))
    }

    /// Notes that the recipe as it is now stands in its file.
    pub fn mark_saved(&mut self) {
        self.saved = Arc::clone(&self.recipe);
        self.saved_after = Some(self.done.len());
        self.unsaved = false;
    }

    /// The recipe as it was saved (or opened) last.
    pub fn saved(&self) -> &Arc<Recipe> {
        &self.saved
    }

    /// Whether the recipe is another than the one that was saved (or opened) last.
    pub fn is_unsaved(&self) -> bool {
        self.unsaved
    }

    /// The steps made, the oldest first.
    pub fn done(&self) -> &[Step] {
        &self.done
    }

    /// The steps taken back, the next to be made again last.
    pub fn undone(&self) -> &[Step] {
        &self.undone
    }

    /// After how many of the steps made the recipe was saved; `None` if that can no longer be reached. It may be more than there
    /// are now, if steps were taken back since.
    pub fn saved_after(&self) -> Option<usize> {
        self.saved_after
    }

    fn now(&mut self, recipe: Recipe) {
        self.recipe = Arc::new(recipe);
        self.unsaved = self.saved_after != Some(self.done.len()) && self.recipe != self.saved;
    }
}

use std::sync::Arc;

use crate::arm::Arm;
use crate::program::Recipe;

use super::comments::{comments, gone};
use super::{NewText, text_of_edited};

/// The texts of a recipe's file over a session: what it was opened with, what was saved, and every version from which a save took
/// comments away, so that they come back when what was deleted does.
#[derive(Debug, Clone)]
pub struct Texts {
    text: String,
    recipe: Arc<Recipe>,
    /// The text that it was opened with, then those of which the next one lacked comments, and what they hold.
    earlier: Vec<(String, Arc<Recipe>)>,
}

impl Texts {
    /// A session that begins with a text which gives a recipe.
    pub fn of(text: String, recipe: Arc<Recipe>) -> Self {
        Self { text, recipe, earlier: Vec::new() }
    }

    /// The text that stands in the file, as far as is known.
    pub fn text(&self) -> &str {
        &self.text
    }

    /// The recipe that it gives.
    pub fn recipe(&self) -> &Arc<Recipe> {
        &self.recipe
    }

    /// The text in which the file is to hold another recipe: an earlier text byte for byte if that held the very same, else the one
    /// that keeps the most comments.
    pub fn next(&self, now: &Recipe, arm: &Arm) -> NewText {
        let newest_first = || std::iter::once((&self.text, &self.recipe)).chain(self.earlier.iter().rev().map(|(t, r)| (t, r)));
        if let Some((text, _)) = newest_first().find(|(_, recipe)| ***recipe == *now) {
            return NewText { text: text.clone(), kept: true };
        }
        let newest = text_of_edited(&self.text, &self.recipe, now, arm);
        let mut best = (newest.kept, comments(&newest.text).len(), newest);
        for (text, recipe) in self.earlier.iter().rev() {
            let new = text_of_edited(text, recipe, now, arm);
            let worth = (new.kept, comments(&new.text).len());
            if worth > (best.0, best.1) {
                best = (worth.0, worth.1, new);
            }
        }
        best.2
    }

    /// How many comments of the text that stands in the file a new one has no more.
    pub fn gone_in(&self, new: &str) -> usize {
        gone(&self.text, new)
    }

    /// Notes that this text, which gives that recipe, stands in the file now.
    pub fn saved(&mut self, text: String, recipe: Arc<Recipe>) {
        let before = std::mem::replace(&mut self.text, text);
        let held = std::mem::replace(&mut self.recipe, recipe);
        if self.earlier.is_empty() || gone(&before, &self.text) > 0 {
            self.earlier.push((before, held));
        }
    }
}

//! Saving a recipe: the text in which everything that was not edited keeps its bytes, and its way onto the disk.
//!
//! The recipe as it was opened and as it is now are both put as an outline of what a file would hold; where those differ, the text
//! is changed at just that place. A new text is read again before it is given out.

mod comma_list;
mod comments;
mod content;
mod disk;
mod elements;
mod figure;
mod fresh;
mod layout;
mod lines;
mod order;
mod outline;
mod rework;
mod splice;
mod texts;

use crate::arm::Arm;
use crate::program::Recipe;
use crate::review::difference_words;

use super::heading::RECIPE;
use super::page::without_mark;
use super::recipe_file::{read_recipe, walked};

pub use content::Content;
pub(super) use disk::beside;
pub use disk::{NotSaved, Saved, make_folder, write, write_anyway};
pub use texts::Texts;

/// How far a number may be off, as a share of itself, after it was written and read again: one last digit of a double, and for the
/// elements of an orientation a few. See [`figure`].
const READS_SAME: f64 = 4e-15;

/// A text that a recipe was written into.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct NewText {
    /// The text.
    pub text: String,
    /// Whether everything that was not edited kept its bytes. `false` if the old text could not be changed at the place, so that all
    /// was written afresh; the caller should tell, and the previous version is kept as a backup when it is saved.
    pub kept: bool,
}

/// The text of a file that was opened as `before`, changed to hold `now`: comments, order, style of numbers, line ends and all else
/// that was not edited stay as they are. Byte-identical if the two are the same. Numbers are written with the fewest digits that read
/// as the same value, to within the last digit of a double.
pub fn text_of_edited(opened: &str, before: &Recipe, now: &Recipe, arm: &Arm) -> NewText {
    if before == now {
        return NewText { text: opened.to_owned(), kept: true };
    }
    let text = without_mark(opened);
    let mark = &opened[..opened.len() - text.len()];
    let eol = if text.contains("\r\n") { "\r\n" } else { "\n" };
    let (old, new) = (outline::recipe(before, arm), outline::recipe(now, arm));
    let reworked = rework::rework(text, eol, &old, &new).filter(|text| reads_as(text, now, arm));
    let kept = reworked.is_some();
    let text = reworked.unwrap_or_else(|| fresh::text(&new, RECIPE.key, eol));
    NewText { text: format!("{mark}{text}"), kept }
}

/// The text of a recipe that has none yet.
pub fn text_of_new(recipe: &Recipe, arm: &Arm) -> String {
    fresh::text(&outline::recipe(recipe, arm), RECIPE.key, "\n")
}

/// Whether a text reads as a recipe, to within last digits.
fn reads_as(text: &str, recipe: &Recipe, arm: &Arm) -> bool {
    walked(text, arm).is_some_and(|read| {
        read == *recipe || outline::same(&outline::recipe(&read, arm), &outline::recipe(recipe, arm), READS_SAME)
    })
}

/// What somebody changed in a recipe's file since it was opened as `before`, a sentence each, waypoint by waypoint. Where their text
/// can't be taken as a recipe, what is wrong with it. `text` is what [`NotSaved::Changed`] tells.
pub fn changes_on_disk(text: Option<&str>, source: &str, before: &Recipe, arm: &Arm) -> Vec<String> {
    let Some(text) = text else { return vec!["the file is gone".to_owned()] };
    match read_recipe(text, source, arm) {
        Ok(theirs) if theirs == *before => vec!["only what stands around the figures: comments, blanks or order".to_owned()],
        Ok(theirs) => difference_words(before, &theirs, arm),
        Err(rejected) => rejected.complaints.iter().map(ToString::to_string).collect(),
    }
}

use std::path::Path;
use std::sync::Arc;

use crate::checks::Watch;
use crate::files::{Opened, Rejected, demo, open};
use crate::review::Judged;

/// A recipe that was chosen on the command line, judged.
pub(super) struct Chosen {
    /// What became of it.
    pub judged: Judged,
    /// Where the recipe came from, as shown to a person.
    pub recipe_file: String,
    /// Where its arm came from.
    pub arm_file: String,
}

/// Opens a recipe; the built-in demonstration cell for none.
///
/// # Errors
/// All that is wrong with the file or its arm file.
pub(super) fn opened(recipe: Option<&Path>) -> Result<Opened, Rejected> {
    recipe.map_or_else(|| Ok(demo()), open)
}

/// Opens and judges a recipe; the built-in demonstration cell for none.
///
/// # Errors
/// All that is wrong with the file or its arm file.
pub(super) fn chosen(recipe: Option<&Path>) -> Result<Chosen, Rejected> {
    let opened = opened(recipe)?;
    let (arm, recipe) = (Arc::new(opened.arm), Arc::new(opened.recipe));
    let judged = Judged::of(&arm, &recipe, None, &Watch::default()).expect("nobody stops this watch");
    Ok(Chosen { judged, recipe_file: opened.recipe_source.path, arm_file: opened.arm_source.path })
}

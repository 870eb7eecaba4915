use std::path::Path;

use crate::arm::Arm;
use crate::program::Recipe;

use super::recipe_file::{arm_named, complaint_at_arm, read_with};
use super::{Rejected, Source, raw, read_arm};

/// What a person opened: the recipe, its arm, and where they came from.
#[derive(Debug, Clone)]
pub struct Opened {
    /// The recipe.
    pub recipe: Recipe,
    /// The arm that it names.
    pub arm: Arm,
    /// Where the recipe came from.
    pub recipe_source: Source,
    /// Where the arm came from.
    pub arm_source: Source,
}

/// Reads a recipe and, relative to it, its arm file.
///
/// # Errors
/// Everything that is wrong with either of them: first the recipe's complaints, then the arm file's.
pub fn open(path: &Path) -> Result<Opened, Rejected> {
    let recipe_source = raw::read(path)?;
    let (arm_source, arm) = match arm_of(path, &recipe_source) {
        Ok(Some((source, arm))) => (Some(source), Some(arm)),
        Ok(None) => (None, None),
        Err(rejected) => return Err(both(read_with(&recipe_source.text, &recipe_source.path, None), rejected)),
    };
    let recipe = read_with(&recipe_source.text, &recipe_source.path, arm.as_ref())?;
    match (arm, arm_source) {
        (Some(arm), Some(arm_source)) => Ok(Opened { recipe, arm, recipe_source, arm_source }),
        // A recipe that names no arm file has been rejected above, unless its text is only blanks.
        _ => Err(complaint_at_arm(
            &recipe_source.text,
            &recipe_source.path,
            "recipe: arm is empty; it must be the path of an arm file",
        )),
    }
}

/// Reads an arm file by itself.
///
/// # Errors
/// Everything that is wrong with it.
pub fn open_arm(path: &Path) -> Result<Arm, Rejected> {
    let source = raw::read(path)?;
    read_arm(&source.text, &source.path)
}

/// The arm that a recipe names; `None` if it names none.
fn arm_of(recipe_path: &Path, recipe: &Source) -> Result<Option<(Source, Arm)>, Rejected> {
    let Some(named) = arm_named(&recipe.text) else { return Ok(None) };
    let path = recipe_path.parent().unwrap_or(Path::new("")).join(&named);
    let source = raw::read(&path).map_err(|rejected| match rejected.complaints.as_slice() {
        // The file as a whole can't be had: that is told where the recipe names it.
        [whole] if whole.line == 0 => {
            complaint_at_arm(&recipe.text, &recipe.path, &format!("recipe: arm is \"{named}\"; {} ({})", whole.says, whole.source))
        }
        _ => rejected,
    })?;
    let arm = read_arm(&source.text, &source.path)?;
    Ok(Some((source, arm)))
}

/// Two files' complaints: those of the recipe first, in order, then those of the arm file.
fn both(recipe: Result<Recipe, Rejected>, of_arm: Rejected) -> Rejected {
    let mut complaints = recipe.err().map(|rejected| rejected.complaints).unwrap_or_default();
    for complaint in of_arm.complaints {
        if !complaints.contains(&complaint) {
            complaints.push(complaint);
        }
    }
    if let Some(first) = complaints.first().map(|complaint| complaint.source.clone()) {
        complaints.sort_by_key(|complaint| (complaint.source != first, complaint.line, complaint.column));
    }
    Rejected { complaints }
}

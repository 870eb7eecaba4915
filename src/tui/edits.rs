use std::sync::Arc;

use crate::program::Edit;

use super::app::App;

/// Edits made on this screen, the newest last, and those taken back.
#[derive(Debug, Default)]
pub struct Edits {
    done: Vec<Step>,
    undone: Vec<Step>,
}

/// One step: what it was in words, and the edit that takes it back (or makes it again).
#[derive(Debug)]
struct Step {
    words: String,
    other_way: Edit,
}

/// Changes what is taught, unless the result could not be planned; then the first reason is told and nothing changes.
pub(super) fn make(app: &mut App, edit: &Edit, words: &str) {
    let words = words.to_owned();
    match change(app, edit) {
        Ok(other_way) => {
            app.message = Some(format!("{words}; u undoes it"));
            app.edits.done.push(Step { words, other_way });
            app.edits.undone.clear();
        }
        Err(why) => app.message = Some(format!("not done: {why}")),
    }
}

/// Takes the last edit back.
pub(super) fn undo(app: &mut App) {
    let Some(step) = app.edits.done.pop() else {
        app.message = Some("nothing to undo".to_owned());
        return;
    };
    match change(app, &step.other_way) {
        Ok(other_way) => {
            app.message = Some(format!("undone: {}", step.words));
            app.edits.undone.push(Step { words: step.words, other_way });
        }
        Err(why) => app.message = Some(format!("not undone: {why}")),
    }
}

/// Makes the last edit that was taken back again.
pub(super) fn redo(app: &mut App) {
    let Some(step) = app.edits.undone.pop() else {
        app.message = Some("nothing to redo".to_owned());
        return;
    };
    match change(app, &step.other_way) {
        Ok(other_way) => {
            app.message = Some(format!("done again: {}", step.words));
            app.edits.done.push(Step { words: step.words, other_way });
        }
        Err(why) => app.message = Some(format!("not done again: {why}")),
    }
}

/// Applies an edit and asks for a check; yields the edit that goes the other way.
fn change(app: &mut App, edit: &Edit) -> Result<Edit, String> {
    let mut recipe = (*app.taught).clone();
    let other_way = edit.apply(&mut recipe).map_err(|fault| fault.to_string())?;
    if let Some(fault) = recipe.faults(&app.arm).first() {
        return Err(fault.to_string());
    }
    app.taught = Arc::new(recipe);
    app.unchecked = true;
    Ok(other_way)
}

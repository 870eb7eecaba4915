use crate::program::{Edit, refuse_new_faults};

use super::app::App;

/// Changes what is taught, unless the result could not be planned; then the first reason is told and nothing changes.
pub(super) fn make(app: &mut App, edit: &Edit) {
    if let Some(why) = &app.look_only {
        app.message = Some(format!("not done: {why}"));
        return;
    }
    let mut after = (**app.taught()).clone();
    if edit.apply(&mut after).is_ok() && after == **app.taught() {
        app.message = Some("nothing is changed by that".to_owned());
        return;
    }
    let made = refuse_new_faults(app.taught(), &app.arm, edit)
        .and_then(|()| app.history.make(&app.arm, edit.clone()).map(str::to_owned).map_err(|fault| fault.to_string()));
    match made {
        Ok(words) => {
            app.message = Some(format!("{words}; u undoes it"));
            changed(app, edit.clone());
        }
        Err(why) => app.message = Some(format!("not done: {why}")),
    }
}

/// Takes the last edit back.
pub(super) fn undo(app: &mut App) {
    let undone = app.history.undo().map(|(words, edit)| (words.to_owned(), edit.clone()));
    match undone {
        Some((words, edit)) => {
            app.message = Some(format!("undone: {words}"));
            changed(app, edit);
        }
        None => app.message = Some("nothing to undo".to_owned()),
    }
}

/// Makes the last edit that was taken back again.
pub(super) fn redo(app: &mut App) {
    let done = app.history.redo().map(|(words, edit)| (words.to_owned(), edit.clone()));
    match done {
        Some((words, edit)) => {
            app.message = Some(format!("done again: {words}"));
            changed(app, edit);
        }
        None => app.message = Some("nothing to redo".to_owned()),
    }
}

/// What is taught now is to be checked, and the edit to be noted down.
fn changed(app: &mut App, edit: Edit) {
    app.unchecked = true;
    // Answers belong to what was shown when they were given.
    app.signing = None;
    app.made.push(edit);
}

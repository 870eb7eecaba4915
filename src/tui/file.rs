use super::action::Action;
use super::app::{App, FileWish, Item, Menu, Wish};

/// A menu of answers, each by name; no key stands beside them, so that none is given by accident.
pub(super) fn question(title: String, answers: Vec<(String, Action)>) -> Menu {
    let items = answers.into_iter().map(|(name, action)| Item { name, key: String::new(), action }).collect();
    Menu { title, items, chosen: 0 }
}

/// Saves, unless there is nothing to save.
pub(super) fn save(app: &mut App) {
    if app.history.is_unsaved() {
        app.wish = Wish::File(FileWish::Save { then_quit: false });
    } else {
        app.message = Some("nothing to save: the file holds what is taught".to_owned());
    }
}

/// Asks what is to become of edits when somebody wants to end.
pub(super) fn unsaved(app: &App) -> Menu {
    let count = app.history.done().len().abs_diff(app.history.saved_after().unwrap_or(0)).max(1);
    let edits = if count == 1 { "1 edit is".to_owned() } else { format!("{count} edits are") };
    question(
        format!("{edits} not saved"),
        vec![
            ("save and quit".to_owned(), Action::File(FileWish::Save { then_quit: true })),
            ("stay".to_owned(), Action::Stay),
            ("discard the edits and quit".to_owned(), Action::QuitAnyway),
        ],
    )
}

/// Copies what the explanation tells.
pub(super) fn copy(app: &mut App) {
    let Some(why) = &app.scene.why else {
        app.message = Some("nothing to copy yet".to_owned());
        return;
    };
    let paragraphs = why.paragraphs.iter().map(|told| format!("{}: {}", told.label.words(), told.text));
    let text = std::iter::once(why.title.clone()).chain(paragraphs).collect::<Vec<_>>().join("\n");
    app.message = Some("copied, if this terminal takes it".to_owned());
    app.wish = Wish::Copy(text);
}

use ratatui::style::Style;

use super::action::Action;
use super::app::{App, FileWish, Item, Menu, Wish};
use super::page::{Line, paragraph};

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

/// Every step that was made, the newest last, where it was saved, and what was taken back.
pub fn edits(app: &App, width: usize) -> Vec<Line> {
    let history = &app.history;
    let mut lines = Vec::new();
    let saved = |after: usize| (history.saved_after() == Some(after)).then_some("saved here");
    let mark = |after: usize, lines: &mut Vec<Line>| {
        lines.extend(saved(after).map(|told| vec![(format!("    {told}"), app.theme.strong())]));
    };
    mark(0, &mut lines);
    for (index, step) in history.done().iter().enumerate() {
        lines.extend(paragraph(&app.theme.text(&format!("{:>3} {}", index + 1, step.words)), width, 0, Style::new()));
        mark(index + 1, &mut lines);
    }
    if history.done().is_empty() {
        lines.extend(paragraph("Nothing was edited yet.", width, 0, Style::new()));
    }
    for (index, step) in history.undone().iter().rev().enumerate() {
        if index == 0 {
            lines.push(Vec::new());
            lines.extend(paragraph("Taken back; r makes them again:", width, 0, app.theme.strong()));
        }
        lines.extend(paragraph(&app.theme.text(&step.words), width, 4, Style::new()));
        mark(history.done().len() + index + 1, &mut lines);
    }
    lines
}

/// What is different from something else, a sentence each.
pub fn changes(app: &App, width: usize) -> Vec<Line> {
    let mut lines: Vec<Line> =
        app.changes.1.iter().flat_map(|told| paragraph(&app.theme.text(told), width, 0, Style::new())).collect();
    if app.history.is_unsaved() {
        lines.push(Vec::new());
        lines.extend(paragraph("Your edits are kept and not saved.", width, 0, app.theme.strong()));
    }
    lines
}

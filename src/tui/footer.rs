use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use super::action::Action;
use super::app::{App, Mode, Page, Question};
use super::ask;
use super::editing::Group;
use super::keys::{BINDINGS, Binding};
use super::sheet::{Sheet, fit, wrap};

/// A message takes at most this many rows.
const MESSAGE_ROWS: usize = 4;

/// Draws the message, if there is one, over the lowest rows of the whole screen: as many as its words need.
pub fn draw_message(sheet: &mut Sheet, app: &App) {
    let Some(message) = app.message.as_ref().filter(|_| !matches!(app.mode, Mode::Asking(_)) && sheet.height() >= 3) else {
        return;
    };
    let (theme, width) = (app.theme, sheet.width());
    let mut lines = wrap(&theme.text(message), width);
    let most = MESSAGE_ROWS.min(sheet.height() - 2);
    if lines.len() > most {
        let rest = lines.split_off(most - 1).join(" ");
        lines.push(fit(&rest, width, theme));
    }
    let first = sheet.height() - lines.len();
    sheet.part(0, first, width, lines.len()).wipe();
    for (row, line) in lines.iter().enumerate() {
        sheet.put(0, first + row, line, theme.strong());
    }
}

/// Draws the lowest row: a question or the keys.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let theme = app.theme;
    if let Mode::Asking(asking) = &app.mode {
        let prompt = ask::prompt(asking.question);
        let x = sheet.put(0, 0, prompt, theme.strong());
        // The end of what is typed stays in view.
        let room = sheet.width().saturating_sub(x + 1);
        let typed = if asking.question == Question::Passphrase { "" } else { &asking.typed };
        let skipped = typed.chars().count().saturating_sub(room);
        let shown: String = typed.chars().skip(skipped).collect();
        let x = sheet.put(x, 0, &shown, Style::new());
        sheet.put(x, 0, " ", theme.selected());
        return;
    }
    if app.message.is_some() {
        return;
    }
    let mut x = 0;
    for (key, word) in hints(app, sheet.width()) {
        x = sheet.put(x, 0, &key, theme.strong());
        x = sheet.put(x, 0, &format!(" {word}"), Style::new()) + 2;
    }
}

/// The keys that fit, with their words; those that lead to all others always.
fn hints(app: &App, width: usize) -> Vec<(String, String)> {
    let ascii = app.theme.ascii;
    let told = |binding: &Binding| {
        let key = match binding.action {
            Action::Left => if ascii { "Left/Right" } else { "←→" }.to_owned(),
            Action::Up => if ascii { "Up/Down" } else { "↑↓" }.to_owned(),
            _ => app.keymap.names(binding, ascii).into_iter().next().unwrap_or_default(),
        };
        (key, binding.short.to_owned())
    };
    let wanted = |action: &Action| match (&app.mode, action) {
        (Mode::Editing(editing), Action::Help | Action::Quit) => editing.typing.is_none(),
        (_, Action::Help | Action::Quit) => true,
        (Mode::Jog, action) => {
            matches!(action, Action::Up | Action::Left | Action::Enter | Action::NextPane | Action::StepSize)
        }
        (_, Action::StepSize) => false,
        (Mode::Menu(_), action) => matches!(action, Action::Up | Action::Enter),
        (Mode::Editing(editing), _) if editing.typing.is_some() => false,
        (Mode::Editing(editing), Action::Left) => editing.group == Group::Waypoint,
        (Mode::Editing(_), action) => matches!(action, Action::Up | Action::Enter | Action::NextPane | Action::Undo),
        (Mode::SignOff, action) => matches!(action, Action::Up | Action::Enter | Action::NotChecked),
        (Mode::Remedies, Action::Remedies) => app.remedies.stopped().is_some(),
        (Mode::Remedies, action) => matches!(action, Action::Up | Action::Enter | Action::NextFinding | Action::Undo),
        (Mode::Page(Page::Why, _), action) => matches!(action, Action::Up | Action::Worst | Action::NextFinding),
        (Mode::Page(..), action) => matches!(action, Action::Up),
        _ => true,
    };
    let mut hints: Vec<(bool, (String, String))> = BINDINGS
        .iter()
        .filter(|binding| !binding.short.is_empty() && wanted(&binding.action))
        .map(|binding| (matches!(binding.action, Action::Enter | Action::Help | Action::Quit), told(binding)))
        .collect();
    if !matches!(app.mode, Mode::Panes) {
        for (_, (key, word)) in &mut hints {
            if let Mode::Editing(_) = app.mode {
                match word.as_str() {
                    "time" => "waypoint".clone_into(word),
                    "pane" => "group".clone_into(word),
                    _ => {}
                }
            }
            if word == "select" && matches!(app.mode, Mode::Page(..)) {
                "scroll".clone_into(word);
            }
            if matches!(app.mode, Mode::Jog) {
                match word.as_str() {
                    "time" => "step".clone_into(word),
                    "pane" => "axes".clone_into(word),
                    _ => {}
                }
            } else if key == "Enter" {
                let does = match app.mode {
                    Mode::Remedies => "make this change",
                    Mode::Editing(_) => "edit",
                    _ => "choose",
                };
                does.clone_into(word);
            }
        }
        if let Mode::Editing(editing) = &app.mode
            && editing.typing.is_some()
        {
            hints.insert(0, (true, ("Enter".to_owned(), "take it".to_owned())));
        }
        if matches!(app.mode, Mode::Remedies)
            && let Some((_, (_, word))) = hints.iter_mut().find(|(_, (_, word))| word == "remedies")
        {
            "go on".clone_into(word);
        }
        let stops = matches!(app.mode, Mode::Remedies) && app.remedies.is_running();
        hints.insert(0, (stops, ("Esc".to_owned(), if stops { "stop" } else { "back" }.to_owned())));
    }
    let total = |hints: &[(bool, (String, String))]| {
        hints.iter().map(|(_, (key, word))| key.width() + word.width() + 3).sum::<usize>().saturating_sub(2)
    };
    while total(&hints) > width {
        let Some(last) = hints.iter().rposition(|(kept, _)| !kept) else { break };
        hints.remove(last);
    }
    hints.into_iter().map(|(_, hint)| hint).collect()
}

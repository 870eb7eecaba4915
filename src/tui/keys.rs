use ratatui::crossterm::event::{KeyCode, KeyEvent, KeyModifiers};

use super::action::Action;
use super::app::{FileWish, Mode};
use super::keymap::Keymap;

/// A binding says which keys ask for which action, and how the footer and the help tell it. A key that is in no binding does
/// nothing.
#[derive(Debug)]
pub struct Binding {
    /// The keys; the first is the one that is told.
    pub keys: &'static [KeyCode],
    /// What they ask for.
    pub action: Action,
    /// What that does, for the help and the menu.
    pub hint: &'static str,
    /// One word for the footer; the empty one keeps it out.
    pub short: &'static str,
}

const fn binding(keys: &'static [KeyCode], action: Action, hint: &'static str, short: &'static str) -> Binding {
    Binding { keys, action, hint, short }
}

/// All bindings, in the order of the help.
pub static BINDINGS: &[Binding] = &[
    binding(&[KeyCode::Left], Action::Left, "step back in time", "time"),
    binding(&[KeyCode::Right], Action::Right, "step on in time", ""),
    binding(&[KeyCode::Up], Action::Up, "segment before, scroll", "select"),
    binding(&[KeyCode::Down], Action::Down, "next segment, scroll", ""),
    binding(&[KeyCode::PageUp], Action::LeapBack, "ten steps back", ""),
    binding(&[KeyCode::PageDown], Action::LeapOn, "ten steps on", ""),
    binding(&[KeyCode::Home], Action::ToStart, "start of segment, cycle", ""),
    binding(&[KeyCode::End], Action::ToEnd, "end of segment, cycle", ""),
    binding(&[KeyCode::Enter], Action::Enter, "actions by name", "actions"),
    binding(&[KeyCode::Tab], Action::NextPane, "next pane", "pane"),
    binding(&[KeyCode::Esc, KeyCode::Backspace], Action::Back, "back", ""),
    binding(&[KeyCode::Char('w')], Action::Worst, "worst finding", "worst"),
    binding(&[KeyCode::Char('n')], Action::NextFinding, "next finding", "next"),
    binding(&[KeyCode::Char('p')], Action::PreviousFinding, "previous finding", ""),
    binding(&[KeyCode::Char('y')], Action::ReadWhy, "why, on a whole page", "why"),
    binding(&[KeyCode::Char('o')], Action::Remedies, "remedies that were tried", "remedies"),
    binding(&[KeyCode::Char('b')], Action::Bounds, "what is proved, closer", ""),
    binding(&[KeyCode::Char('c')], Action::NotChecked, "not checked, and doubts", "not checked"),
    binding(&[KeyCode::Char('g')], Action::GoTo, "go to waypoint or time", "go to"),
    binding(&[KeyCode::Char('f'), KeyCode::Char('/')], Action::Find, "filter the list", "filter"),
    binding(&[], Action::ShowAll, "show the whole list again", ""),
    binding(&[KeyCode::Char('z')], Action::Span, "chart: segment or cycle", ""),
    binding(&[KeyCode::Char('t')], Action::NextQuantity, "chart: next quantity", "chart"),
    binding(&[KeyCode::Char('a')], Action::EveryJoint, "chart: all joints, one", ""),
    binding(&[KeyCode::Char('e')], Action::Edit, "edit the data", "edit"),
    binding(&[KeyCode::Char('x')], Action::EditStretch, "edit a stretch of waypoints", ""),
    binding(&[KeyCode::Char('j')], Action::Jog, "jog the model, end that", "jog"),
    binding(&[KeyCode::Char('i')], Action::StepSize, "jog: next step size", "size"),
    binding(&[KeyCode::Char('u')], Action::Undo, "undo the last edit", ""),
    binding(&[KeyCode::Char('r')], Action::Redo, "redo it", ""),
    binding(&[KeyCode::Char('v')], Action::Edits, "edits made and undone", ""),
    binding(&[KeyCode::Char('d')], Action::SignOff, "sign off", ""),
    binding(&[], Action::File(FileWish::SinceRecord), "changed since the record", ""),
    binding(&[KeyCode::Char('s')], Action::Save, "save", ""),
    binding(&[], Action::SaveAs, "save elsewhere", ""),
    binding(&[KeyCode::Char('k')], Action::Copy, "copy what is told", ""),
    binding(&[KeyCode::Char('h'), KeyCode::Char('?')], Action::Help, "help", "help"),
    binding(&[KeyCode::Char('q')], Action::Quit, "quit", "quit"),
];

/// The action that a key asks for.
pub fn action_of(key: KeyEvent, mode: &Mode, keymap: &Keymap) -> Option<Action> {
    let control = key.modifiers.contains(KeyModifiers::CONTROL);
    match key.code {
        KeyCode::Char('c') if control => return Some(Action::Quit),
        KeyCode::Char('z') if control => return Some(Action::Suspend),
        KeyCode::Char(sign) if is_typing(mode) => {
            let held = key.modifiers.intersects(KeyModifiers::CONTROL | KeyModifiers::ALT);
            return (!held).then_some(Action::Type(sign));
        }
        KeyCode::Backspace if is_typing(mode) => return Some(Action::Erase),
        _ => {}
    }
    keymap.action(key)
}

/// Whether signs are text now and no keys.
fn is_typing(mode: &Mode) -> bool {
    match mode {
        Mode::Asking(_) => true,
        Mode::Editing(editing) => editing.typing.is_some(),
        _ => false,
    }
}

/// A key's name as the footer and the help write it.
pub fn name(key: KeyCode, ascii: bool) -> String {
    let pick = |wide: &str, plain: &str| (if ascii { plain } else { wide }).to_owned();
    match key {
        KeyCode::Left => pick("←", "Left"),
        KeyCode::Right => pick("→", "Right"),
        KeyCode::Up => pick("↑", "Up"),
        KeyCode::Down => pick("↓", "Down"),
        KeyCode::PageUp => "PageUp".to_owned(),
        KeyCode::PageDown => "PageDown".to_owned(),
        KeyCode::Home => "Home".to_owned(),
        KeyCode::End => "End".to_owned(),
        KeyCode::Enter => "Enter".to_owned(),
        KeyCode::Tab => "Tab".to_owned(),
        KeyCode::Esc => "Esc".to_owned(),
        KeyCode::Backspace => "Backspace".to_owned(),
        KeyCode::Char(sign) => sign.to_string(),
        KeyCode::F(number) => format!("F{number}"),
        other => format!("{other:?}"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_key_stands_twice_in_the_table() {
        let keys: Vec<_> = BINDINGS.iter().flat_map(|binding| binding.keys).collect();
        for (i, key) in keys.iter().enumerate() {
            assert!(!keys[..i].contains(key), "{key:?}");
        }
    }

    #[test]
    fn capitals_count_as_small_letters_and_control_does_not_count() {
        let of = |code, modifiers| action_of(KeyEvent::new(code, modifiers), &Mode::Panes, &Keymap::default());
        assert!(matches!(of(KeyCode::Char('W'), KeyModifiers::SHIFT), Some(Action::Worst)));
        assert!(of(KeyCode::Char('w'), KeyModifiers::CONTROL).is_none());
        assert!(of(KeyCode::F(1), KeyModifiers::NONE).is_none());
    }
}

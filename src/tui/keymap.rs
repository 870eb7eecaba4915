use ratatui::crossterm::event::{KeyCode, KeyEvent, KeyModifiers};

use crate::files::{ChosenKeys, KeyName, NamedKey, PlainKey};

use super::action::Action;
use super::keys::{BINDINGS, Binding, name};

/// A keymap says which keys ask for which binding: the table's own, or those that a person chose.
#[derive(Debug, Clone)]
pub struct Keymap {
    /// For each binding of the table its keys.
    keys: Vec<Vec<KeyName>>,
}

impl Default for Keymap {
    fn default() -> Self {
        let of = |binding: &Binding| binding.keys.iter().filter_map(|code| plain(*code)).map(unheld).collect();
        Self { keys: BINDINGS.iter().map(of).collect() }
    }
}

impl Keymap {
    /// The table's keys with those of some actions replaced. A chosen key is taken from the action that had it.
    pub fn with(chosen: &ChosenKeys) -> Self {
        let mut keymap = Self::default();
        let taken: Vec<KeyName> = chosen.iter().flat_map(|(_, keys)| keys.iter().copied()).collect();
        for (binding, keys) in BINDINGS.iter().zip(&mut keymap.keys) {
            match chosen.iter().find(|(action, _)| *action == action_name(binding)) {
                Some((_, own)) => keys.clone_from(own),
                None => keys.retain(|key| !taken.contains(key)),
            }
        }
        keymap
    }

    /// What a key asks for.
    pub fn action(&self, key: KeyEvent) -> Option<Action> {
        let pressed = pressed(key)?;
        let at = self.keys.iter().position(|keys| keys.contains(&pressed))?;
        Some(BINDINGS[at].action.clone())
    }

    /// The names of a binding's keys as footer, menu and help write them.
    pub fn names(&self, binding: &Binding, ascii: bool) -> Vec<String> {
        let at = BINDINGS.iter().position(|other| std::ptr::eq(other, binding));
        at.map_or_else(Vec::new, |at| self.keys[at].iter().map(|key| told(*key, ascii)).collect())
    }
}

/// The name by which a keys file means a binding: its hint in one word.
pub fn action_name(binding: &Binding) -> String {
    let words = binding.hint.split(|sign: char| !sign.is_ascii_alphanumeric()).filter(|word| !word.is_empty());
    words.collect::<Vec<_>>().join("-")
}

/// The bindings that a person may give other keys: all but those that must always work.
pub fn changeable() -> impl Iterator<Item = &'static Binding> {
    BINDINGS.iter().filter(|binding| !binding.keys.iter().any(|code| ALWAYS.contains(code)))
}

/// Keys that always mean the same, so that nobody locks themselves out.
const ALWAYS: [KeyCode; 8] =
    [KeyCode::Left, KeyCode::Right, KeyCode::Up, KeyCode::Down, KeyCode::Enter, KeyCode::Esc, KeyCode::Backspace, KeyCode::Tab];

/// The same as a keys file names them, with the two that the terminal gives a meaning.
pub fn kept() -> Vec<KeyName> {
    let held = |sign: char| KeyName { control: true, alt: false, key: PlainKey::Sign(sign) };
    ALWAYS.iter().filter_map(|code| plain(*code)).map(unheld).chain([held('c'), held('z')]).collect()
}

fn unheld(key: PlainKey) -> KeyName {
    KeyName { control: false, alt: false, key }
}

fn pressed(key: KeyEvent) -> Option<KeyName> {
    let held = |modifier| key.modifiers.contains(modifier);
    Some(KeyName { control: held(KeyModifiers::CONTROL), alt: held(KeyModifiers::ALT), key: plain(key.code)? })
}

const NAMED: [(KeyCode, NamedKey); 14] = [
    (KeyCode::Left, NamedKey::Left),
    (KeyCode::Right, NamedKey::Right),
    (KeyCode::Up, NamedKey::Up),
    (KeyCode::Down, NamedKey::Down),
    (KeyCode::PageUp, NamedKey::PageUp),
    (KeyCode::PageDown, NamedKey::PageDown),
    (KeyCode::Home, NamedKey::Home),
    (KeyCode::End, NamedKey::End),
    (KeyCode::Enter, NamedKey::Enter),
    (KeyCode::Tab, NamedKey::Tab),
    (KeyCode::Esc, NamedKey::Esc),
    (KeyCode::Backspace, NamedKey::Backspace),
    (KeyCode::Insert, NamedKey::Insert),
    (KeyCode::Delete, NamedKey::Delete),
];

fn plain(code: KeyCode) -> Option<PlainKey> {
    match code {
        KeyCode::Char(sign) => Some(PlainKey::Sign(sign.to_ascii_lowercase())),
        KeyCode::F(number) => Some(PlainKey::Function(number)),
        code => NAMED.iter().find(|(known, _)| *known == code).map(|(_, named)| PlainKey::Named(*named)),
    }
}

fn told(key: KeyName, ascii: bool) -> String {
    let code = match key.key {
        PlainKey::Sign(sign) => KeyCode::Char(sign),
        PlainKey::Function(number) => KeyCode::F(number),
        PlainKey::Named(named) => NAMED.iter().find(|(_, known)| *known == named).map_or(KeyCode::Null, |(code, _)| *code),
    };
    let held = [(key.control, "Ctrl+"), (key.alt, "Alt+")];
    held.iter().filter(|(held, _)| *held).map(|(_, word)| *word).collect::<String>() + &name(code, ascii)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::files::read_keys;

    fn press(keymap: &Keymap, sign: char, modifiers: KeyModifiers) -> Option<Action> {
        keymap.action(KeyEvent::new(KeyCode::Char(sign), modifiers))
    }

    #[test]
    fn a_chosen_key_replaces_the_table_and_is_taken_from_others() {
        let actions: Vec<String> = changeable().map(action_name).collect();
        let actions: Vec<&'static str> = actions.into_iter().map(|name| &*name.leak()).collect();
        let text = "next-finding = \"q\"\nquit = [\"ctrl+q\", \"f10\"]\n";
        let keymap = Keymap::with(&read_keys(text, "keys.toml", &actions, &kept()).expect("it reads"));
        let none = KeyModifiers::NONE;
        assert!(matches!(press(&keymap, 'q', none), Some(Action::NextFinding)));
        assert!(press(&keymap, 'n', none).is_none());
        assert!(matches!(press(&keymap, 'q', KeyModifiers::CONTROL), Some(Action::Quit)));
        assert!(matches!(press(&keymap, 'W', KeyModifiers::SHIFT), Some(Action::Worst)));
        let quit = BINDINGS.iter().find(|binding| matches!(binding.action, Action::Quit)).expect("there");
        assert_eq!(keymap.names(quit, true), ["Ctrl+q", "F(10)"].map(|name| name.replace("F(10)", "F10")));
    }

    #[test]
    fn every_changeable_binding_has_a_name_of_its_own() {
        let names: Vec<String> = changeable().map(action_name).collect();
        for (index, name) in names.iter().enumerate() {
            assert!(!name.is_empty() && !names[..index].contains(name), "{name}");
        }
    }
}

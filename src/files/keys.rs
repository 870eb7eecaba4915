use std::collections::HashMap;
use std::path::{Path, PathBuf};

use super::page::{Page, parse, without_mark};
use super::{Rejected, raw};

/// The words of keys that are no single sign.
const NAMED: [(&str, NamedKey); 14] = [
    ("left", NamedKey::Left),
    ("right", NamedKey::Right),
    ("up", NamedKey::Up),
    ("down", NamedKey::Down),
    ("pageup", NamedKey::PageUp),
    ("pagedown", NamedKey::PageDown),
    ("home", NamedKey::Home),
    ("end", NamedKey::End),
    ("enter", NamedKey::Enter),
    ("tab", NamedKey::Tab),
    ("esc", NamedKey::Esc),
    ("backspace", NamedKey::Backspace),
    ("insert", NamedKey::Insert),
    ("delete", NamedKey::Delete),
];

/// The most keys of one action.
const MOST_KEYS: usize = 8;

/// A key that has a name.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[expect(missing_docs, reason = "they are what stands on the keys")]
pub enum NamedKey {
    Left,
    Right,
    Up,
    Down,
    PageUp,
    PageDown,
    Home,
    End,
    Enter,
    Tab,
    Esc,
    Backspace,
    Insert,
    Delete,
}

/// A key as a keys file names it: `s`, `/`, `pageup`, `f5`, `ctrl+s`, `alt+x`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct KeyName {
    /// Whether Ctrl is held.
    pub control: bool,
    /// Whether Alt is held.
    pub alt: bool,
    /// Which key.
    pub key: PlainKey,
}

/// A key without what is held with it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum PlainKey {
    /// One that has a name.
    Named(NamedKey),
    /// A sign, letters as small ones.
    Sign(char),
    /// F1 to F12.
    Function(u8),
}

/// Keys that a person chose: for each action named, all of its keys.
pub type ChosenKeys = Vec<(&'static str, Vec<KeyName>)>;

impl KeyName {
    /// From its text; `None` if it is no key.
    pub fn parse(text: &str) -> Option<Self> {
        let (mut control, mut alt) = (false, false);
        let mut rest = text.trim();
        loop {
            // The sign + itself may stand last.
            match rest.split_once('+') {
                Some((held, after)) if !after.is_empty() && held.eq_ignore_ascii_case("ctrl") && !control => {
                    (control, rest) = (true, after);
                }
                Some((held, after)) if !after.is_empty() && held.eq_ignore_ascii_case("alt") && !alt => {
                    (alt, rest) = (true, after);
                }
                _ => break,
            }
        }
        let low = rest.to_lowercase();
        let mut signs = low.chars();
        let key = match (signs.next(), signs.next()) {
            (Some(sign), None) if !sign.is_control() && !sign.is_whitespace() => PlainKey::Sign(sign),
            _ if low == "space" => PlainKey::Sign(' '),
            _ => match NAMED.iter().find(|(name, _)| *name == low) {
                Some((_, key)) => PlainKey::Named(*key),
                None => {
                    let number: u8 = low.strip_prefix('f')?.parse().ok()?;
                    (1..=12).contains(&number).then_some(PlainKey::Function(number))?
                }
            },
        };
        Some(Self { control, alt, key })
    }
}

/// Where a person's keys file is: `$XDG_CONFIG_HOME/elbowroom/keys.toml`, else `~/.config/elbowroom/keys.toml`.
pub fn keys_file() -> Option<PathBuf> {
    let set = |name: &str| std::env::var_os(name).filter(|value| !value.is_empty()).map(PathBuf::from);
    let config = set("XDG_CONFIG_HOME").filter(|path| path.is_absolute()).or_else(|| Some(set("HOME")?.join(".config")))?;
    Some(config.join("elbowroom").join("keys.toml"))
}

/// Reads a person's keys file; nothing is chosen where there is none. `actions` are the names that may be bound, `kept` the keys that
/// always mean the same.
///
/// # Errors
/// Everything that is wrong with it, in order.
pub fn open_keys(path: &Path, actions: &[&'static str], kept: &[KeyName]) -> Result<ChosenKeys, Rejected> {
    if !path.exists() {
        return Ok(Vec::new());
    }
    let source = raw::read(path)?;
    read_keys(&source.text, &source.path, actions, kept)
}

/// Reads the text of a keys file: a line for each action, `undo = "u"` or `save = ["s", "ctrl+s"]`.
///
/// # Errors
/// Everything that is wrong with it, in order.
pub fn read_keys(text: &str, source: &str, actions: &[&'static str], kept: &[KeyName]) -> Result<ChosenKeys, Rejected> {
    let text = without_mark(text);
    let root = parse(text, source)?;
    let page = Page::new(text, source, root.get_ref());
    let top = page.top("keys");
    top.only(actions);
    let mut taken: HashMap<KeyName, &str> = HashMap::new();
    let mut chosen = Vec::new();
    for action in actions.iter().copied().filter(|action| top.has(action)) {
        let mut keys = Vec::new();
        for (at, name) in top.texts(action, MOST_KEYS, "a key such as \"s\", \"ctrl+s\" or \"pageup\", or an array of such") {
            match KeyName::parse(name) {
                None => page.complain(at, format!("keys: {action}: {} is no key", super::value::quoted(name))),
                Some(key) if kept.contains(&key) => {
                    page.complain(
                        at,
                        format!("keys: {action}: {} always means the same; choose another", super::value::quoted(name)),
                    );
                }
                Some(key) => match taken.insert(key, action) {
                    Some(other) if other != action => {
                        page.complain(at, format!("keys: {} is given to both {other} and {action}", super::value::quoted(name)));
                    }
                    _ => keys.push(key),
                },
            }
        }
        chosen.push((action, keys));
    }
    match page.rejection() {
        Some(rejected) => Err(rejected),
        None => Ok(chosen),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const ACTIONS: [&str; 3] = ["undo", "save", "next-finding"];

    fn read(text: &str) -> Result<ChosenKeys, String> {
        let kept = [KeyName::parse("ctrl+c").expect("a key")];
        read_keys(text, "keys.toml", &ACTIONS, &kept).map_err(|why| why.to_string())
    }

    #[test]
    fn keys_are_read_by_name() {
        let key = |text| KeyName::parse(text).expect("a key");
        assert_eq!(
            read("undo = \"U\"\nsave = [\"ctrl+s\", \"f2\", \"+\"]\n").expect("it reads"),
            [("undo", vec![key("u")]), ("save", vec![key("Ctrl+S"), key("F2"), key("+")])]
        );
        assert_eq!(key("ctrl++"), KeyName { control: true, alt: false, key: PlainKey::Sign('+') });
        assert_eq!(key("alt+PageUp"), KeyName { control: false, alt: true, key: PlainKey::Named(NamedKey::PageUp) });
        for text in ["", "ctrl+", "f13", "f0", "shift+a", "word", "ctrl+ctrl+a", "\n"] {
            assert_eq!(KeyName::parse(text), None, "{text:?}");
        }
        assert_eq!(read(""), Ok(Vec::new()));
    }

    #[test]
    fn faults_are_told_with_their_place() {
        for (text, says) in [
            ("undoo = \"u\"", "keys: unknown key \"undoo\"; did you mean \"undo\"? (keys.toml:1:1)"),
            (
                "undo = 3",
                "keys: undo is the number 3; it must be a key such as \"s\", \"ctrl+s\" or \"pageup\", or an array of such (keys.toml:1:8)",
            ),
            ("undo = \"word\"", "keys: undo: \"word\" is no key (keys.toml:1:8)"),
            ("save = \"ctrl+c\"", "keys: save: \"ctrl+c\" always means the same; choose another (keys.toml:1:8)"),
            ("save = \"u\"\nundo = [\"z\", \"U\"]", "keys: \"u\" is given to both undo and save (keys.toml:1:8)"),
        ] {
            assert_eq!(read(text), Err(says.to_owned()), "{text}");
        }
    }
}

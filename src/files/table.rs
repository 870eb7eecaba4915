use toml::Spanned;
use toml::de::{DeTable, DeValue};

use crate::units::{Field, nearest_word};

use super::page::Page;
use super::value::{describe, is_unseen, number, quoted};

/// What stands in for a number that could not be taken: it passes every bound that a lone number may have.
pub(super) const STAND_IN: f64 = 1.0;

/// Longest name or path, in characters.
const LONGEST_TEXT: usize = 300;

/// Longest key that is compared with the known ones; a longer one is no slip of the keys.
const LONGEST_SLIP: usize = 40;

/// A table of a file, with the name it goes by in complaints. Every reading method complains about what it can't take.
pub(super) struct Table<'a> {
    page: &'a Page<'a>,
    entries: &'a DeTable<'a>,
    /// Byte offset of the table itself.
    at: usize,
    field: Field,
    thing: String,
}

impl<'a> Table<'a> {
    pub(super) fn new(page: &'a Page<'a>, entries: &'a DeTable<'a>, at: usize, field: Field, thing: String) -> Self {
        Self { page, entries, at, field, thing }
    }

    /// The page that it stands on.
    pub(super) fn page(&self) -> &'a Page<'a> {
        self.page
    }

    /// What it is called in complaints.
    pub(super) fn thing(&self) -> &str {
        &self.thing
    }

    /// The same table under another name.
    pub(super) fn called(mut self, thing: String) -> Self {
        self.thing = thing;
        self
    }

    /// The table's `name`, if it can serve as one; nothing is complained about.
    pub(super) fn peek_name(&self) -> Option<&'a str> {
        let name = self.get("name")?.get_ref().as_str()?;
        let seemly = !name.trim().is_empty() && name.chars().count() <= LONGEST_TEXT && !name.chars().any(is_unseen);
        seemly.then_some(name)
    }

    /// Complains about every key but the known ones. A key that looks like a slip stands for the one it was meant to be, so that
    /// this one is not called missing as well.
    pub(super) fn only(&self, known: &[&'static str]) {
        for (key, _) in self.entries {
            let given = key.get_ref().as_ref();
            if known.contains(&given) {
                continue;
            }
            let hint = match self.meant(given, known) {
                Some(near) => {
                    // Where tables of that key are there too, only their names are in doubt.
                    let meant = self.field.key(near);
                    self.page.mark_bad(if self.has(near) { meant.item(usize::MAX) } else { meant });
                    format!("did you mean \"{near}\"?")
                }
                None => format!("the keys here are {}", listed(known, "and", |key| (*key).to_owned())),
            };
            self.page.complain(key.span().start, format!("{}: unknown key {}; {hint}", self.thing, quoted(given)));
        }
    }

    /// The known key that was meant by `given`: one that is not there yet, or one that there may be several tables of.
    fn meant(&self, given: &str, known: &[&'static str]) -> Option<&'static str> {
        if given.chars().count() > LONGEST_SLIP {
            return None;
        }
        let several = |key: &str| self.get(key).is_some_and(|value| value.get_ref().is_array());
        let nearest = |wanted: &dyn Fn(&str) -> bool| nearest_word(given, known.iter().copied().filter(|key| wanted(key)));
        nearest(&|key| !self.has(key)).or_else(|| nearest(&several))
    }

    /// Whether the key is there.
    pub(super) fn has(&self, key: &str) -> bool {
        self.entries.contains_key(key)
    }

    /// Whether the key was there, or meant to be, and could not be taken.
    pub(super) fn is_bad(&self, key: &str) -> bool {
        self.page.is_bad(&self.field.key(key))
    }

    /// Complains about a key's value, or about the table if the key is absent: `says` follows on "thing: ".
    pub(super) fn complain(&self, key: &str, says: impl std::fmt::Display) {
        let at = self.get(key).map_or(self.at, |value| value.span().start);
        self.page.complain(at, format!("{}: {says}", self.thing));
        self.page.mark_bad(self.field.key(key));
    }

    /// Complains that a key is missing, unless a slip stands for it.
    pub(super) fn missing(&self, key: &str, expected: &str) {
        if !self.is_bad(key) {
            self.complain(key, format_args!("{key} is missing; {expected}"));
        }
    }

    /// A number that must be there, in `unit`; [`STAND_IN`] where it can't be taken.
    pub(super) fn number(&self, key: &str, unit: &str) -> f64 {
        self.maybe_number(key).unwrap_or_else(|| {
            self.missing(key, &format!("it must be a number ({unit})"));
            STAND_IN
        })
    }

    /// A number that may be there; [`STAND_IN`] where it is there and can't be taken.
    pub(super) fn maybe_number(&self, key: &str) -> Option<f64> {
        let value = self.get(key)?;
        Some(number(value.get_ref()).unwrap_or_else(|says| {
            self.complain(key, format_args!("{key} {says}"));
            STAND_IN
        }))
    }

    /// An array of `N` numbers that must be there, in `unit`.
    pub(super) fn numbers<const N: usize>(&self, key: &str, unit: &str) -> Option<[f64; N]> {
        if !self.has(key) {
            self.missing(key, &format!("it must be an array of {N} numbers ({unit})"));
        }
        self.maybe_numbers(key)
    }

    /// An array of `N` numbers that may be there; `None` also where it can't be taken.
    pub(super) fn maybe_numbers<const N: usize>(&self, key: &str) -> Option<[f64; N]> {
        let wanted = format!("an array of {N} numbers");
        let list = self.list(key, &wanted)?;
        let count = list.len();
        let taken = list.try_into().ok();
        if taken.is_none() {
            self.complain(key, format_args!("{key} has {count} values; it must be {wanted}"));
        }
        taken
    }

    /// An array of numbers that may be there; `None` also where it can't be taken. `wanted` says what it must be.
    pub(super) fn list(&self, key: &str, wanted: &str) -> Option<Vec<f64>> {
        let value = self.get(key)?;
        let DeValue::Array(items) = value.get_ref() else {
            self.complain(key, format_args!("{key} is {}; it must be {wanted}", describe(value.get_ref())));
            return None;
        };
        let mut list = Vec::with_capacity(items.len());
        for (index, item) in items.iter().enumerate() {
            match number(item.get_ref()) {
                Ok(number) => list.push(number),
                Err(says) => {
                    self.page.complain(item.span().start, format!("{}: {key}[{}] {says}", self.thing, index + 1));
                    self.page.mark_bad(self.field.key(key));
                }
            }
        }
        (list.len() == items.len()).then_some(list)
    }

    /// Whether an array stands under the key.
    pub(super) fn is_array(&self, key: &str) -> bool {
        self.get(key).is_some_and(|value| value.get_ref().is_array())
    }

    /// An array of pairs of numbers that may be there; `None` also where it can't be taken. `pair` says what a pair is.
    pub(super) fn pairs(&self, key: &str, pair: &str) -> Option<Vec<[f64; 2]>> {
        let value = self.get(key)?;
        let DeValue::Array(items) = value.get_ref() else {
            self.complain(key, format_args!("{key} is {}; it must be an array of pairs {pair}", describe(value.get_ref())));
            return None;
        };
        let mut pairs = Vec::with_capacity(items.len());
        for (index, item) in items.iter().enumerate() {
            let numbers: Option<Vec<_>> =
                item.get_ref().as_array().map(|item| item.iter().map(|part| number(part.get_ref())).collect());
            let says = match numbers.as_deref() {
                Some([Ok(x), Ok(y)]) => {
                    pairs.push([*x, *y]);
                    continue;
                }
                Some([Err(says), _] | [_, Err(says)]) => says.clone(),
                Some(other) => format!("has {} values; it must be a pair {pair}", other.len()),
                None => format!("is {}; it must be a pair {pair}", describe(item.get_ref())),
            };
            self.page.complain(item.span().start, format!("{}: {key}[{}] {says}", self.thing, index + 1));
            self.page.mark_bad(self.field.key(key));
        }
        (pairs.len() == items.len()).then_some(pairs)
    }

    /// Text that must be there and not empty; `what` says what it must be.
    pub(super) fn text(&self, key: &str, what: &str) -> Option<&'a str> {
        if !self.has(key) {
            self.missing(key, &format!("it must be {what}"));
        }
        let text = self.maybe_text(key)?;
        if text.trim().is_empty() {
            self.complain(key, format_args!("{key} is empty; it must be {what}"));
            return None;
        }
        Some(text)
    }

    /// Text of a seemly length, without characters that can't be seen, that may be there; `None` also where it can't be taken.
    pub(super) fn maybe_text(&self, key: &str) -> Option<&'a str> {
        let value = self.get(key)?;
        let DeValue::String(text) = value.get_ref() else {
            self.complain(key, format_args!("{key} is {}; it must be text in quotes", describe(value.get_ref())));
            return None;
        };
        let length = text.chars().count();
        if length > LONGEST_TEXT {
            self.complain(key, format_args!("{key} has {length} characters; it must have at most {LONGEST_TEXT}"));
            return None;
        }
        if text.chars().any(is_unseen) {
            self.complain(key, format_args!("{key} is {}; it must hold only characters that can be seen", quoted(text)));
            return None;
        }
        Some(text.as_ref())
    }

    /// A text, or an array of at most `most`, each with its byte offset; none where it can't be taken. `wanted` says what it must be.
    pub(super) fn texts(&self, key: &str, most: usize, wanted: &str) -> Vec<(usize, &'a str)> {
        let Some(value) = self.get(key) else { return Vec::new() };
        let texts: Option<Vec<(usize, &str)>> = match value.get_ref() {
            DeValue::String(text) => Some(vec![(value.span().start, text.as_ref())]),
            DeValue::Array(items) if items.len() <= most => {
                items.iter().map(|item| Some((item.span().start, item.get_ref().as_str()?))).collect()
            }
            _ => None,
        };
        texts.unwrap_or_else(|| {
            self.complain(key, format_args!("{key} is {}; it must be {wanted}", describe(value.get_ref())));
            Vec::new()
        })
    }

    /// One of a few words that may be there; `None` also where it can't be taken.
    pub(super) fn word<T: Copy>(&self, key: &str, words: &[(&str, T)]) -> Option<T> {
        let value = self.get(key)?;
        let found = value.get_ref().as_str().and_then(|given| words.iter().find(|(word, _)| *word == given));
        if found.is_none() {
            let shown = match value.get_ref() {
                DeValue::String(text) => quoted(text),
                other => describe(other),
            };
            let known = listed(words, "or", |(word, _)| (*word).to_owned());
            self.complain(key, format_args!("{key} is {shown}; it must be {known}"));
        }
        found.map(|(_, meaning)| *meaning)
    }

    /// Whether `key = true` stands there; anything else under the key is refused.
    pub(super) fn is_true(&self, key: &str) -> bool {
        let Some(value) = self.get(key) else { return false };
        let yes = value.get_ref().as_bool() == Some(true);
        if !yes {
            self.complain(key, format_args!("{key} is {}; it must be true, or not be there", describe(value.get_ref())));
        }
        yes
    }

    /// A table that may be there, called "thing: key".
    pub(super) fn table(&self, key: &str) -> Option<Self> {
        let value = self.get(key)?;
        let DeValue::Table(entries) = value.get_ref() else {
            self.complain(key, format_args!("{key} is {}; it must be a table, {{ ... }}", describe(value.get_ref())));
            return None;
        };
        Some(Self::new(self.page, entries, value.span().start, self.field.key(key), format!("{}: {key}", self.thing)))
    }

    /// The tables of an array, each called "thing: key n"; none if the key is absent. If one is no table at all, later checks
    /// leave out the whole array.
    pub(super) fn tables(&self, key: &str) -> Vec<Self> {
        let Some(value) = self.get(key) else { return Vec::new() };
        let DeValue::Array(items) = value.get_ref() else {
            let says = format!("{key} is {}; it must be an array of tables, [[{key}]]", describe(value.get_ref()));
            self.complain(key, says);
            return Vec::new();
        };
        items.iter().enumerate().filter_map(|(index, item)| self.item(key, index, item)).collect()
    }

    fn item(&self, key: &str, index: usize, item: &'a Spanned<DeValue<'a>>) -> Option<Self> {
        let at = item.span().start;
        let DeValue::Table(entries) = item.get_ref() else {
            let says = format!("{}: {key} {} is {}; it must be a table", self.thing, index + 1, describe(item.get_ref()));
            self.page.complain(at, says);
            self.page.mark_bad(self.field.key(key));
            return None;
        };
        let thing = format!("{}: {key} {}", self.thing, index + 1);
        Some(Self::new(self.page, entries, at, self.field.key(key).item(index), thing))
    }

    pub(super) fn get(&self, key: &str) -> Option<&'a Spanned<DeValue<'a>>> {
        self.entries.get(key)
    }
}

/// Words in quotes, with `last` before the last one.
fn listed<T>(words: &[T], last: &str, word: impl Fn(&T) -> String) -> String {
    let quoted: Vec<_> = words.iter().map(|w| format!("\"{}\"", word(w))).collect();
    match quoted.split_last() {
        Some((only, [])) => only.clone(),
        Some((end, rest)) => format!("{} {last} {end}", rest.join(", ")),
        None => String::new(),
    }
}

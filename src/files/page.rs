use std::cell::RefCell;
use std::collections::HashSet;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use crate::units::{Fault, Field, Step};

use super::position::Lines;
use super::table::Table;
use super::{Complaint, Rejected};

/// A page is a parsed file while it is being read: it gathers the complaints about it.
pub(super) struct Page<'a> {
    source: &'a str,
    lines: Lines<'a>,
    root: &'a DeTable<'a>,
    /// Byte offset and text of each complaint so far. A set, since a file of a hundred thousand waypoints can have as many faults.
    complaints: RefCell<HashSet<(usize, String)>>,
    /// What has been complained about: later checks have a stand-in there, and nothing to say about it.
    bad: RefCell<HashSet<Field>>,
    /// The arrays of tables of which not every name is known.
    nameless: RefCell<HashSet<String>>,
}

/// The text without a byte order mark, which some editors put at its start.
pub(super) fn without_mark(text: &str) -> &str {
    text.strip_prefix('\u{feff}').unwrap_or(text)
}

/// Parses a text without mark; the first breach of TOML's grammar stops.
pub(super) fn parse<'a>(text: &'a str, source: &str) -> Result<Spanned<DeTable<'a>>, Rejected> {
    DeTable::parse(text).map_err(|error| {
        let (line, column) = Lines::of(text).position(error.span().map_or(0, |span| span.start));
        let says = error.message().lines().collect::<Vec<_>>().join("; ");
        Rejected::one(Complaint { source: source.to_owned(), line, column, says: format!("this is not TOML: {says}") })
    })
}

impl<'a> Page<'a> {
    pub(super) fn new(text: &'a str, source: &'a str, root: &'a DeTable<'a>) -> Self {
        Self {
            source,
            lines: Lines::of(text),
            root,
            complaints: RefCell::default(),
            bad: RefCell::default(),
            nameless: RefCell::default(),
        }
    }

    /// The whole file as a table, called `thing` in complaints.
    pub(super) fn top(&'a self, thing: &str) -> Table<'a> {
        Table::new(self, self.root, 0, Field::top(), thing.to_owned())
    }

    /// Notes a complaint at a byte offset.
    pub(super) fn complain(&self, offset: usize, says: String) {
        self.complaints.borrow_mut().insert((offset, says));
    }

    /// Notes that a stand-in is used for this field.
    pub(super) fn mark_bad(&self, field: Field) {
        let section = match field.0.as_slice() {
            [Step::Key(section)] | [Step::Key(section), Step::Item(_)] => Some(section),
            [Step::Key(section), Step::Item(_), Step::Key(name)] if name == "name" => Some(section),
            _ => None,
        };
        if let Some(section) = section {
            self.nameless.borrow_mut().insert(section.clone());
        }
        self.bad.borrow_mut().insert(field);
    }

    /// Whether a field, or something that it is a part of, has been complained about.
    pub(super) fn is_bad(&self, field: &Field) -> bool {
        let bad = self.bad.borrow();
        !bad.is_empty() && (0..=field.0.len()).any(|steps| bad.contains(&Field(field.0[..steps].to_vec())))
    }

    /// Whether any name in the tables under `key` is unknown, so that a reference to one can't be judged.
    pub(super) fn lacks_names(&self, key: &str) -> bool {
        self.nameless.borrow().contains(key)
    }

    /// Adds a fault that a check found in the data, unless it speaks of a stand-in.
    pub(super) fn add(&self, fault: Fault) {
        if !self.is_bad(&fault.field) {
            self.complain(self.offset_of(&fault.field), fault.says);
        }
    }

    /// Where a field's value stands; where it is absent, the nearest table around it.
    fn offset_of(&self, field: &Field) -> usize {
        let mut offset = 0;
        let mut steps = field.0.iter();
        let mut here = match steps.next() {
            Some(Step::Key(key)) => self.root.get(key.as_str()),
            _ => None,
        };
        while let Some(value) = here {
            offset = value.span().start;
            here = match (value.get_ref(), steps.next()) {
                (DeValue::Table(table), Some(Step::Key(key))) => table.get(key.as_str()),
                (DeValue::Array(items), Some(Step::Item(index))) => items.get(*index),
                _ => None,
            };
        }
        offset
    }

    /// The complaints in the order in which they stand in the file, if there are any.
    pub(super) fn rejection(&self) -> Option<Rejected> {
        let mut complaints: Vec<_> = self.complaints.borrow().iter().cloned().collect();
        complaints.sort();
        let complaints: Vec<_> = complaints
            .into_iter()
            .map(|(offset, says)| {
                let (line, column) = self.lines.position(offset);
                Complaint { source: self.source.to_owned(), line, column, says }
            })
            .collect();
        (!complaints.is_empty()).then_some(Rejected { complaints })
    }
}

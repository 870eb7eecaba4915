use std::ops::Range;

use super::layout::{Leaf, line_end, line_start};
use super::rework::behind;

/// What a new line comes under.
pub(super) struct Under<'d> {
    /// The leaves of its table.
    pub leaves: Vec<Leaf<'d>>,
    /// Whether the table is one of dotted keys.
    pub dotted: bool,
    /// Where the heading starts under which the table stands.
    pub heading: usize,
}

/// The lines of a text on which keys stand.
pub(super) struct Lines<'t>(pub &'t str);

impl Lines<'_> {
    /// All lines that a key and its value stand on, a comment behind them included.
    pub fn around(&self, leaf: &Range<usize>) -> Range<usize> {
        line_start(self.0, leaf.start)..line_end(self.0, leaf.end)
    }

    /// A new line for a table, as the others are written: where it goes and how it reads.
    pub fn new_line(&self, under: &Under<'_>, (key, value): (&str, &str), eol: &str) -> (usize, String) {
        let Under { leaves, dotted, heading } = under;
        let last = leaves.iter().map(|leaf| leaf.range.end).max();
        let at = last.map_or_else(|| behind(self.0, *heading), |end| line_end(self.0, end));
        let prefix = leaves.last().map_or("", |leaf| {
            let before = &self.0[line_start(self.0, leaf.range.start)..leaf.range.start];
            let indent = before.len() - before.trim_start().len();
            if *dotted { before } else { &before[..indent] }
        });
        let line = format!("{prefix}{key}{}{value}", self.equals(leaves, prefix.chars().count() + key.len()));
        // The last line of the text may lack its end.
        let before = &self.0[..at];
        if before.is_empty() || before.ends_with('\n') { (at, line + eol) } else { (at, format!("{eol}{line}")) }
    }

    /// The sign of equality with the blanks around it: in line with the others where they are in line.
    fn equals(&self, leaves: &[Leaf<'_>], width: usize) -> String {
        let columns: Vec<usize> = leaves
            .iter()
            .filter_map(|leaf| {
                let start = line_start(self.0, leaf.range.start);
                let key_end = leaf.key.span()?.end;
                let at = key_end + self.0[key_end..leaf.range.end].find('=')?;
                Some(self.0[start..at].chars().count())
            })
            .collect();
        let tight = leaves.first().is_some_and(|leaf| leaf.key.span().is_some_and(|span| self.0[span.end..].starts_with('=')));
        match columns.first() {
            Some(_) if tight => "=".to_owned(),
            Some(column) if columns.iter().all(|other| other == column) && *column > width => {
                format!("{}= ", " ".repeat(column - width))
            }
            _ => " = ".to_owned(),
        }
    }

    /// What stands before the last part of the keys of a dotted table between braces.
    pub fn prefix_in_braces(&self, leaves: &[Leaf<'_>], dotted: bool) -> String {
        let Some(leaf) = leaves.first().filter(|_| dotted) else { return String::new() };
        let before = &self.0[..leaf.range.start];
        let from = before.rfind(['{', ',', '\n']).map_or(0, |at| at + 1);
        before[from..].trim_start().to_owned()
    }
}

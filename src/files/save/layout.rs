use std::ops::Range;

use toml_edit::{Item, Key, Table, TableLike, Value};

use super::comments::is_ruled;

/// The way to a table: keys, and which item where the key names an array.
pub(super) type Way = Vec<(String, usize)>;

/// A section is a heading with the lines under it, the comments that stand directly above it, and blank lines behind.
#[derive(Debug, Clone)]
pub(super) struct Section {
    /// The way to its table; empty for what stands before the first heading, and for comments that stand alone between sections.
    pub way: Way,
    /// Where its heading starts; `None` for comments that stand alone.
    pub heading: Option<usize>,
    /// Its bytes.
    pub range: Range<usize>,
}

/// The sections of a text in order; together they are all of it.
pub(super) fn sections(text: &str, root: &Table) -> Vec<Section> {
    let mut headings: Vec<(usize, usize, Way)> = Vec::new();
    gather(root, &mut Vec::new(), &mut headings);
    headings.sort_by_key(|(start, ..)| *start);
    // Where what stands under each heading ends, comments not counted.
    let root_end = leaves(root).into_iter().map(|leaf| leaf.range.end).max().map_or(0, |end| line_end(text, end));
    let mut sections = vec![Section { way: Vec::new(), heading: Some(0), range: 0..0 }];
    let mut content_end = root_end;
    for (start, end, way) in headings {
        let above = comments_above(text, content_end, line_start(text, start));
        close(text, &mut sections, content_end, above);
        sections.push(Section { way, heading: Some(start), range: above..above });
        content_end = line_end(text, end.max(start));
    }
    close(text, &mut sections, content_end, text.len());
    sections
}

/// Ends the last section before `end`: comments behind a blank line, or from a ruled one on, are a section of their own, so that they
/// stay where they are.
fn close(text: &str, sections: &mut Vec<Section>, content_end: usize, end: usize) {
    let mut at = content_end.min(end);
    let mut blank = false;
    let mut alone = end;
    while at < end {
        let next = line_end(text, at).min(end);
        let line = text[at..next].trim();
        if line.is_empty() {
            blank = true;
        } else if blank || is_ruled(line) {
            alone = at;
            break;
        }
        at = next;
    }
    if let Some(last) = sections.last_mut() {
        last.range.end = alone;
    }
    if alone < end {
        sections.push(Section { way: Vec::new(), heading: None, range: alone..end });
    }
}

/// Where the comment lines start that stand directly above the line `from`, not above `least` and below any that is ruled.
fn comments_above(text: &str, least: usize, from: usize) -> usize {
    let mut at = from;
    while at > least {
        let above = line_start(text, at - 1);
        let line = &text[above..at];
        if above < least || !line.trim_start().starts_with('#') || is_ruled(line) {
            break;
        }
        at = above;
    }
    at
}

/// Every table with a heading: where that starts, where the last line under it ends, the way to the table.
fn gather(table: &Table, way: &mut Way, headings: &mut Vec<(usize, usize, Way)>) {
    for (key, item) in table {
        match item {
            Item::Table(table) if !table.is_dotted() => {
                way.push((key.to_owned(), 0));
                note(table, way, headings);
                gather(table, way, headings);
                way.pop();
            }
            Item::Table(table) => gather(table, way, headings),
            Item::ArrayOfTables(array) => {
                for (index, table) in array.iter().enumerate() {
                    way.push((key.to_owned(), index));
                    note(table, way, headings);
                    gather(table, way, headings);
                    way.pop();
                }
            }
            _ => {}
        }
    }
}

fn note(table: &Table, way: &Way, headings: &mut Vec<(usize, usize, Way)>) {
    if let Some(span) = table.span().filter(|_| !table.is_implicit()) {
        let end = leaves(table).into_iter().map(|leaf| leaf.range.end).max().unwrap_or(span.end);
        headings.push((span.start, end, way.clone()));
    }
}

/// A leaf is a key with a value behind it, the last of its dotted parts.
pub(super) struct Leaf<'d> {
    /// The last part of the key.
    pub key: &'d Key,
    /// From the start of that part to the end of the value.
    pub range: Range<usize>,
}

/// The leaves that stand in a table's own lines (or braces), those under dotted keys included, in the order of the text.
pub(super) fn leaves<'d>(table: &'d dyn TableLike) -> Vec<Leaf<'d>> {
    let mut all = Vec::new();
    gather_leaves(table, &mut all);
    all.sort_by_key(|leaf| leaf.range.start);
    all
}

fn gather_leaves<'d>(table: &'d dyn TableLike, all: &mut Vec<Leaf<'d>>) {
    for (name, item) in table.iter() {
        match item {
            Item::Table(inner) if inner.is_dotted() => gather_leaves(inner, all),
            Item::Value(Value::InlineTable(inner)) if inner.is_dotted() => gather_leaves(inner, all),
            Item::Value(value) => {
                if let (Some((key, _)), Some(value)) = (table.get_key_value(name), value.span())
                    && let Some(start) = key.span()
                {
                    all.push(Leaf { key, range: start.start..value.end });
                }
            }
            _ => {}
        }
    }
}

/// The start of the line in which `at` stands.
pub(super) fn line_start(text: &str, at: usize) -> usize {
    text[..at].rfind('\n').map_or(0, |end| end + 1)
}

/// The start of the line behind the one in which `at` stands; the end of the text for the last one. A place at a line's start is at
/// its end already only if it is the end of the text.
pub(super) fn line_end(text: &str, at: usize) -> usize {
    text[at..].find('\n').map_or(text.len(), |end| at + end + 1)
}

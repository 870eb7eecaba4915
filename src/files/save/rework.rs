use std::collections::BTreeMap;
use std::ops::Range;

use toml_edit::{Array, ArrayOfTables, Document, InlineTable, Item, TableLike, Value as Node};

use super::comma_list::{CommaList, Piece as Part, next_item};
use super::elements::{matched, staying};
use super::figure::{Written, literal};
use super::fresh;
use super::layout::{Way, leaves, line_end, sections};
use super::lines::{Lines, Under};
use super::order::Order;
use super::outline::{Outline, Value};
use super::splice::Splices;

/// Where a table's keys stand: on lines of their own, or between braces. Dotted keys stand where their table does.
#[derive(Clone, Copy)]
enum Home {
    /// Under a heading that starts there.
    Lines { heading: usize },
    /// Between braces, of which the first stands there.
    Braces { open: usize },
}

/// What is to change in a table between braces, until all of it is known.
#[derive(Default)]
struct Pending {
    /// Ends of the values that go.
    gone: Vec<usize>,
    /// New pairs of key and value.
    new: Vec<String>,
}

/// A text on its way to another recipe.
pub(super) struct Rework<'t> {
    text: &'t str,
    eol: &'static str,
    splices: Splices,
    order: Order,
    pending: BTreeMap<usize, Pending>,
}

/// The text in which what differs between two outlines is changed, and everything else keeps its bytes. `text` has no mark and reads
/// as `before`. `None` if it is no TOML.
pub(super) fn rework(text: &str, eol: &'static str, before: &Outline, now: &Outline) -> Option<String> {
    let document = Document::parse(text).ok()?;
    let order = Order::of(sections(text, document.as_table()));
    let mut rework = Rework { text, eol, splices: Splices::default(), order, pending: BTreeMap::new() };
    rework.table(Home::Lines { heading: 0 }, document.as_table(), before, now, &Vec::new());
    Some(rework.order.assemble(text, eol, &rework.splices))
}

impl Rework<'_> {
    fn table(&mut self, home: Home, table: &dyn TableLike, before: &Outline, now: &Outline, way: &Way) {
        for (key, value) in now {
            let old = before.iter().find(|(other, _)| other == key).and_then(|(_, old)| old.as_ref());
            if old == value.as_ref() {
                continue;
            }
            let key = match value {
                Some(Value::Turn(_)) | None if *key == "rpy" && table.contains_key("quaternion") => "quaternion",
                _ => key,
            };
            match (table.get(key), value) {
                (None, None) => {}
                (None, Some(value)) => self.add(home, table, key, value, way),
                (Some(_), None) => self.remove(home, table, key, way),
                (Some(item), Some(value)) => self.change(home, table, (key, item), (old, value), way),
            }
        }
    }

    fn change(
        &mut self,
        home: Home,
        table: &dyn TableLike,
        (key, item): (&'static str, &Item),
        (old, value): (Option<&Value>, &Value),
        way: &Way,
    ) {
        let nothing = Vec::new();
        match (item, value) {
            (Item::Table(inner), Value::Table(now)) => {
                let old = if let Some(Value::Table(old)) = old { old } else { &nothing };
                if inner.is_dotted() {
                    self.table(home, inner, old, now, way);
                } else {
                    let below = [way.as_slice(), &[(key.to_owned(), 0)]].concat();
                    self.table(Home::Lines { heading: inner.span().map_or(0, |span| span.start) }, inner, old, now, &below);
                }
            }
            (Item::Value(Node::InlineTable(inner)), Value::Table(now)) => {
                let old = if let Some(Value::Table(old)) = old { old } else { &nothing };
                if inner.is_dotted() {
                    self.table(home, inner, old, now, way);
                } else {
                    self.braces(inner, old, now);
                }
            }
            (Item::ArrayOfTables(array), Value::Tables(now)) => {
                let old = if let Some(Value::Tables(old)) = old { old.as_slice() } else { &[] };
                self.headed(key, array, old, now, way);
            }
            (Item::Value(Node::Array(array)), Value::Tables(now)) => {
                let old = if let Some(Value::Tables(old)) = old { old.as_slice() } else { &[] };
                self.array_of_tables(array, old, now);
            }
            (Item::Value(Node::Array(array)), Value::Numbers(figures)) => {
                let numbers: Vec<f64> = figures.iter().map(|figure| figure.written()).collect();
                self.numbers(array, &numbers, |index, literal| figures[index].is_written_as(literal));
            }
            (Item::Value(Node::Array(array)), Value::Turn(turn)) => {
                let numbers = match (key, turn.written()) {
                    ("quaternion", _) => turn.quaternion().to_vec(),
                    (_, Written::Rpy(angles)) => angles.to_vec(),
                    (_, Written::Quaternion(_)) => {
                        self.remove(home, table, key, way);
                        return self.add(home, table, key, value, way);
                    }
                };
                self.numbers(array, &numbers, |index, literal| literal.parse() == Ok(numbers[index]));
            }
            (Item::Value(node), value) => {
                let Some(span) = node.span() else { return };
                let stood = &self.text[span.clone()];
                let instead = match value {
                    Value::Number(figure) => literal(figure.written(), Some(stood)),
                    Value::Text(text) if stood.starts_with('\'') && !text.contains('\'') && !text.contains(char::is_control) => {
                        format!("'{text}'")
                    }
                    other => fresh::inline(other),
                };
                self.splices.put(span, instead);
            }
            _ => {}
        }
    }

    fn remove(&mut self, home: Home, table: &dyn TableLike, key: &str, way: &Way) {
        match table.get(key) {
            Some(Item::Table(inner)) if inner.is_dotted() => {
                self.remove_leaves(home, leaves(inner).iter().map(|leaf| leaf.range.clone()));
            }
            Some(Item::Value(Node::InlineTable(inner))) if inner.is_dotted() => {
                self.remove_leaves(home, leaves(inner).iter().map(|leaf| leaf.range.clone()));
            }
            Some(Item::Table(_) | Item::ArrayOfTables(_)) => self.order.remove(way, key),
            Some(Item::Value(value)) => {
                let start = table.get_key_value(key).and_then(|(key, _)| key.span()).map(|span| span.start);
                if let (Some(start), Some(span)) = (start, value.span()) {
                    self.remove_leaves(home, std::iter::once(start..span.end));
                }
            }
            _ => {}
        }
    }

    fn remove_leaves(&mut self, home: Home, ranges: impl Iterator<Item = Range<usize>>) {
        for range in ranges {
            match home {
                Home::Lines { .. } => self.splices.put(Lines(self.text).around(&range), String::new()),
                Home::Braces { open } => self.pending.entry(open).or_default().gone.push(range.end),
            }
        }
    }

    fn add(&mut self, home: Home, table: &dyn TableLike, key: &'static str, value: &Value, way: &Way) {
        match (home, value) {
            (Home::Lines { .. }, Value::Table(outline)) if way.is_empty() && fresh::is_section(key) => {
                self.order.add(key, vec![fresh::block(&format!("[{key}]"), outline, self.eol)]);
            }
            (Home::Lines { .. }, Value::Tables(tables)) if way.is_empty() => {
                let heading = format!("[[{key}]]");
                self.order.add(key, tables.iter().map(|table| fresh::block(&heading, table, self.eol)).collect());
            }
            (Home::Lines { heading }, value) => {
                let (key, value) = fresh::pair(key, value);
                let under = Under { leaves: leaves(table), dotted: table.is_dotted(), heading };
                let (at, line) = Lines(self.text).new_line(&under, (key, &value), self.eol);
                self.splices.put(at..at, line);
            }
            (Home::Braces { open }, value) => {
                let (key, value) = fresh::pair(key, value);
                let prefix = Lines(self.text).prefix_in_braces(&leaves(table), table.is_dotted());
                self.pending.entry(open).or_default().new.push(format!("{prefix}{key} = {value}"));
            }
        }
    }

    fn braces(&mut self, inner: &InlineTable, old: &Outline, now: &Outline) {
        let Some(span) = inner.span() else { return };
        self.table(Home::Braces { open: span.start }, inner, old, now, &vec![(String::new(), 0)]);
        let Some(pending) = self.pending.remove(&span.start) else { return };
        let mut items = Vec::new();
        let mut plan = Vec::new();
        let mut at = span.start + 1;
        for leaf in leaves(inner) {
            let start = next_item(self.text, at);
            at = leaf.range.end;
            if !pending.gone.contains(&at) {
                plan.push(Part::Keep(items.len()));
            }
            items.push(start..at);
        }
        plan.extend(pending.new.into_iter().map(Part::New));
        self.list(&span, items, &plan);
    }

    /// Puts a list between brackets or braces together anew.
    fn list(&mut self, span: &Range<usize>, items: Vec<Range<usize>>, plan: &[Part]) {
        let inside = span.start + 1..span.end - 1;
        let none_before = items.is_empty() && inside.is_empty();
        let list = CommaList { text: self.text, eol: self.eol, inside: inside.clone(), items };
        let mut instead = list.put_together(&self.splices, plan);
        if none_before && self.text[span.clone()].starts_with('{') {
            instead = format!(" {instead} ");
        }
        self.splices.forget(span);
        self.splices.put(inside, instead);
    }

    /// A list of numbers: only those that read otherwise are written.
    fn numbers(&mut self, array: &Array, numbers: &[f64], same: impl Fn(usize, &str) -> bool) {
        let Some(span) = array.span() else { return };
        let items: Vec<Range<usize>> = array.iter().filter_map(Node::span).collect();
        let style = items.first().map(|item| &self.text[item.clone()]);
        for (index, (item, number)) in items.iter().zip(numbers).enumerate() {
            let stood = &self.text[item.clone()];
            if !same(index, stood) {
                self.splices.put(item.clone(), literal(*number, Some(stood)));
            }
        }
        if items.len() != numbers.len() {
            let kept = items.len().min(numbers.len());
            let new = numbers[kept..].iter().map(|number| Part::New(literal(*number, style)));
            let plan: Vec<Part> = (0..kept).map(Part::Keep).chain(new).collect();
            self.list(&span, items, &plan);
        }
    }

    /// An array of tables between brackets.
    fn array_of_tables(&mut self, array: &Array, old: &[Outline], now: &[Outline]) {
        let Some(span) = array.span() else { return };
        let items: Vec<Range<usize>> = array.iter().filter_map(Node::span).collect();
        let of = matched(old, now);
        for (outline, old_index) in now.iter().zip(&of) {
            if let Some(index) = *old_index
                && let Some(Node::InlineTable(inner)) = array.get(index)
                && old[index] != *outline
            {
                self.braces(inner, &old[index], outline);
            }
        }
        if !(of.len() == old.len() && of.iter().enumerate().all(|(k, of)| *of == Some(k))) {
            let plan: Vec<Part> = now
                .iter()
                .zip(&of)
                .map(|(outline, of)| of.map_or_else(|| Part::New(fresh::inline_table(outline)), Part::Keep))
                .collect();
            self.list(&span, items, &plan);
        }
    }

    /// An array of tables under headings.
    fn headed(&mut self, key: &'static str, array: &ArrayOfTables, old: &[Outline], now: &[Outline], way: &Way) {
        let of = matched(old, now);
        for (outline, old_index) in now.iter().zip(&of) {
            if let Some(index) = *old_index
                && let Some(inner) = array.get(index)
                && old[index] != *outline
            {
                let below = [way.as_slice(), &[(key.to_owned(), index)]].concat();
                self.table(Home::Lines { heading: inner.span().map_or(0, |span| span.start) }, inner, &old[index], outline, &below);
            }
        }
        if of.len() == old.len() && of.iter().enumerate().all(|(k, of)| *of == Some(k)) {
            return;
        }
        let path: Vec<&str> = way.iter().map(|(key, _)| key.as_str()).chain([key]).collect();
        let heading = format!("[[{}]]", path.join("."));
        let new = now.iter().zip(&of).map(|(outline, of)| match of {
            Some(_) => String::new(),
            None => fresh::block(&heading, outline, self.eol),
        });
        self.order.rearrange(way, key, &of, &staying(&of), &new.collect::<Vec<_>>());
    }
}

/// Where a line behind a heading starts.
pub(super) fn behind(text: &str, heading: usize) -> usize {
    if heading == 0 && !text.starts_with('[') { 0 } else { line_end(text, heading) }
}

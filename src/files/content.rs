use toml::de::{DeTable, DeValue};

use crate::seal::Item;

use super::Source;
use super::page::{parse, without_mark};
use super::position::Lines;
use super::value::number;

/// The content of a recipe or arm file, freed of layout: comments, blanks, the order of keys and how a number is written (`1`, `1.0`)
/// do not show in it; everything else does. `prefix` stands before every owner's name, to tell files apart. A file that can't be
/// parsed has no content.
pub fn content(source: &Source, prefix: &str) -> Vec<Item> {
    let text = without_mark(&source.text);
    let Ok(root) = parse(text, &source.path) else { return Vec::new() };
    let mut walk = Walk { lines: Lines::of(text), items: Vec::new() };
    walk.table(&format!("{prefix}file"), "", root.get_ref(), prefix);
    walk.items
}

struct Walk<'a> {
    lines: Lines<'a>,
    items: Vec<Item>,
}

impl Walk<'_> {
    fn line(&self, offset: usize) -> usize {
        self.lines.position(offset).0
    }

    /// The items of a table: `of` is what it is called, `before` the keys that lead to it from there.
    fn table(&mut self, of: &str, before: &str, table: &DeTable<'_>, prefix: &str) {
        let mut keys: Vec<_> = table.iter().collect();
        keys.sort_by(|(a, _), (b, _)| a.get_ref().cmp(b.get_ref()));
        for (key, value) in keys {
            let key = if before.is_empty() { key.get_ref().to_string() } else { format!("{before}.{}", key.get_ref()) };
            match value.get_ref() {
                DeValue::Table(inner) => self.table(of, &key, inner, prefix),
                DeValue::Array(items) if items.iter().any(|item| matches!(item.get_ref(), DeValue::Table(_))) => {
                    let mut order = Vec::new();
                    for (index, item) in items.iter().enumerate() {
                        let DeValue::Table(inner) = item.get_ref() else { continue };
                        let name = inner.get("name").and_then(|name| name.get_ref().as_str());
                        let name = name.map_or_else(|| (index + 1).to_string(), quoted);
                        // Tables of the file's top are called by their own name, others by that of their owner as well.
                        let called = if of == format!("{prefix}file") {
                            format!("{prefix}{key} {name}")
                        } else {
                            format!("{of}, {key} {name}")
                        };
                        self.table(&called, "", inner, prefix);
                        order.push(name);
                    }
                    let line = self.line(value.span().start);
                    self.items.push(Item { of: of.to_owned(), key: format!("order of {key}"), value: order.join(", "), line });
                }
                other => {
                    let line = self.line(value.span().start);
                    self.items.push(Item { of: of.to_owned(), key, value: written(other), line });
                }
            }
        }
    }
}

/// A value in the one way of writing that contents have.
fn written(value: &DeValue<'_>) -> String {
    match value {
        DeValue::String(text) => quoted(text),
        DeValue::Boolean(yes) => yes.to_string(),
        DeValue::Datetime(when) => when.to_string(),
        DeValue::Array(items) => {
            format!("[{}]", items.iter().map(|item| written(item.get_ref())).collect::<Vec<_>>().join(", "))
        }
        DeValue::Table(table) => {
            let mut keys: Vec<_> =
                table.iter().map(|(key, value)| format!("{} = {}", key.get_ref(), written(value.get_ref()))).collect();
            keys.sort();
            format!("{{ {} }}", keys.join(", "))
        }
        DeValue::Integer(_) | DeValue::Float(_) => number(value).map_or_else(|says| says, |number| number.to_string()),
    }
}

/// Text in quotes, quotes and strokes in it escaped.
pub(super) fn quoted(text: &str) -> String {
    format!("\"{}\"", text.replace('\\', "\\\\").replace('"', "\\\""))
}

#[cfg(test)]
mod tests {
    use crate::files::demo;
    use crate::seal::content_digest;

    use super::*;

    fn of(text: &str) -> Vec<Item> {
        content(&Source { path: "x.toml".into(), text: text.into() }, "")
    }

    #[test]
    fn layout_and_comments_do_not_show_and_values_do() {
        let plain = of("a = 1\nb = { x = [1.50, 2], y = true }\n[[joint]]\nname = \"J1\"\nrate = 10\n");
        let same = of("# who\nb.y = true # so\nb.x = [ 1.5,\n 2.0 ]\na = +1.0\n\n[[joint]]\nrate = 1e1\n name = 'J1'\n");
        assert_eq!(content_digest(&plain), content_digest(&same), "{plain:?}\n{same:?}");
        assert_eq!(
            plain.iter().map(|i| format!("{}|{}|{}|{}", i.of, i.key, i.value, i.line)).collect::<Vec<_>>(),
            [
                "file|a|1|1",
                "file|b.x|[1.5, 2]|2",
                "file|b.y|true|2",
                "joint \"J1\"|name|\"J1\"|4",
                "joint \"J1\"|rate|10|5",
                "file|order of joint|\"J1\"|3",
            ]
        );
        for other in ["a = 1.0000000000000002\n", "a = \"1\"\n", "a = -1\n", "b = 1\n", "a = 1\nc = 0\n"] {
            assert_ne!(content_digest(&of("a = 1\n")), content_digest(&of(other)), "{other}");
        }
    }

    #[test]
    fn every_line_of_the_demonstration_with_a_value_shows() {
        let source = demo().recipe_source;
        let items = content(&source, "");
        let told: std::collections::HashSet<usize> = items.iter().map(|item| item.line).collect();
        for (index, line) in source.text.lines().enumerate() {
            let line = line.trim();
            assert!(line.is_empty() || line.starts_with(['#', '[']) || told.contains(&(index + 1)), "line {}: {line}", index + 1);
        }
    }
}

use super::figure::{Written, literal};
use super::outline::{Outline, Value};

/// Keys of a recipe's top that stand under a heading of their own.
const SECTIONS: [&str; 3] = ["mount", "acceptance", "usual"];

/// A whole recipe, written afresh.
pub(super) fn text(outline: &Outline, heading: &str, eol: &str) -> String {
    let mut out = format!("{heading} = 1{eol}");
    for (key, value) in outline {
        match value {
            Some(Value::Table(table)) => {
                out += eol;
                out += &block(&format!("[{key}]"), table, eol);
            }
            Some(Value::Tables(tables)) => {
                for table in tables {
                    out += eol;
                    out += &block(&format!("[[{key}]]"), table, eol);
                }
            }
            Some(value) => {
                let (key, value) = pair(key, value);
                out += &format!("{key} = {value}{eol}");
            }
            None => {}
        }
    }
    out
}

/// Whether a key of a recipe's top stands under a heading `[key]` when it is new.
pub(super) fn is_section(key: &str) -> bool {
    SECTIONS.contains(&key)
}

/// A table under its heading, the signs of equality in line.
pub(super) fn block(heading: &str, outline: &Outline, eol: &str) -> String {
    let pairs: Vec<(&str, String)> =
        outline.iter().filter_map(|(key, value)| value.as_ref().map(|value| pair(key, value))).collect();
    let width = pairs.iter().map(|(key, _)| key.len()).max().unwrap_or(0);
    let mut out = format!("{heading}{eol}");
    for (key, value) in pairs {
        out += &format!("{key:width$} = {value}{eol}");
    }
    out
}

/// A key and what stands behind it: an orientation may be written under another key.
pub(super) fn pair(key: &'static str, value: &Value) -> (&'static str, String) {
    match value {
        Value::Turn(turn) => match turn.written() {
            Written::Rpy(angles) => ("rpy", list(&angles)),
            Written::Quaternion(elements) => ("quaternion", list(&elements)),
        },
        other => (key, inline(other)),
    }
}

fn list(numbers: &[f64]) -> String {
    let all: Vec<String> = numbers.iter().map(|number| literal(*number, None)).collect();
    format!("[{}]", all.join(", "))
}

/// What stands behind a key, on one line.
pub(super) fn inline(value: &Value) -> String {
    match value {
        Value::Text(text) => quoted(text),
        Value::True => "true".to_owned(),
        Value::Number(figure) => literal(figure.written(), None),
        Value::Numbers(figures) => list(&figures.iter().map(|figure| figure.written()).collect::<Vec<_>>()),
        Value::Turn(_) => pair("rpy", value).1,
        Value::Table(outline) => inline_table(outline),
        Value::Tables(tables) => format!("[{}]", tables.iter().map(inline_table).collect::<Vec<_>>().join(", ")),
    }
}

/// A table in braces.
pub(super) fn inline_table(outline: &Outline) -> String {
    let pairs: Vec<String> = outline
        .iter()
        .filter_map(|(key, value)| {
            let (key, value) = pair(key, value.as_ref()?);
            Some(format!("{key} = {value}"))
        })
        .collect();
    if pairs.is_empty() { "{}".to_owned() } else { format!("{{ {} }}", pairs.join(", ")) }
}

/// Text in the quotes of TOML's basic strings.
pub(super) fn quoted(text: &str) -> String {
    let mut out = String::from("\"");
    for c in text.chars() {
        match c {
            '"' => out += "\\\"",
            '\\' => out += "\\\\",
            '\n' => out += "\\n",
            '\r' => out += "\\r",
            '\t' => out += "\\t",
            c if c.is_control() => out += &format!("\\u{:04X}", u32::from(c)),
            c => out.push(c),
        }
    }
    out + "\""
}

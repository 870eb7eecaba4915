//! A reader of HTML that takes no more than a report may have: every element closed where it was opened, every value in quotes.

use std::collections::HashSet;

/// An element as it begins, or text.
#[derive(Debug, Clone, PartialEq)]
pub enum Piece {
    /// An element begins: its name and attributes.
    Begins(String, Vec<(String, String)>),
    /// It ends.
    Ends(String),
    /// Text, unescaped.
    Text(String),
}

const VOID: [&str; 1] = ["meta"];

/// The pieces of a document, in order.
///
/// # Panics
/// Where it is not what a report may be.
pub fn pieces(html: &str) -> Vec<Piece> {
    let mut rest = html.strip_prefix("<!DOCTYPE html>\n<!-- elbowroom-report/1 -->\n").expect("it begins as a report does");
    let (mut found, mut open) = (Vec::new(), Vec::<String>::new());
    while let Some(at) = rest.find('<') {
        found.push(Piece::Text(unescaped(&rest[..at])));
        let end = at + rest[at..].find('>').expect("every tag ends");
        let tag = &rest[at + 1..end];
        rest = &rest[end + 1..];
        if let Some(name) = tag.strip_prefix('/') {
            assert_eq!(open.pop().as_deref(), Some(name), "closed where it was opened");
            found.push(Piece::Ends(name.to_owned()));
            continue;
        }
        let (tag, alone) = tag.strip_suffix('/').map_or((tag, false), |tag| (tag, true));
        let (name, attributes) = tag.split_once(' ').unwrap_or((tag, ""));
        assert!(name.chars().all(|sign| sign.is_ascii_alphanumeric()), "{name}");
        found.push(Piece::Begins(name.to_owned(), values(attributes)));
        if name == "style" {
            // A style sheet is no text.
            rest = &rest[rest.find("</style>").expect("it ends")..];
        }
        if alone || VOID.contains(&name) {
            found.push(Piece::Ends(name.to_owned()));
        } else {
            open.push(name.to_owned());
        }
    }
    assert_eq!(open, [""; 0], "something is left open");
    assert_eq!(rest, "\n");
    found
}

fn values(mut text: &str) -> Vec<(String, String)> {
    let mut found: Vec<(String, String)> = Vec::new();
    while !text.is_empty() {
        let (key, rest) = text.split_once("=\"").expect("a value in quotes");
        let (value, rest) = rest.split_once('"').expect("quotes that close");
        assert!(found.iter().all(|(known, _)| known != key), "{key} stands twice");
        found.push((key.trim().to_owned(), unescaped(value)));
        text = rest;
    }
    found
}

fn unescaped(text: &str) -> String {
    let bare = ["&lt;", "&gt;", "&quot;", "&#39;", "&amp;"].iter().fold(text.to_owned(), |text, mark| text.replace(mark, ""));
    assert!(!bare.contains(['&', '>']), "{bare}");
    let marks = [("&lt;", "<"), ("&gt;", ">"), ("&quot;", "\""), ("&#39;", "'"), ("\u{a0}", " "), ("&amp;", "&")];
    marks.iter().fold(text.to_owned(), |text, (mark, sign)| text.replace(mark, sign))
}

/// The text in every element of a name, in order; what is in elements within it too.
pub fn texts(pieces: &[Piece], wanted: &str) -> Vec<String> {
    let mut found = Vec::new();
    let mut inside: Option<(usize, String)> = None;
    for piece in pieces {
        match (piece, &mut inside) {
            (Piece::Begins(name, _), None) if name == wanted => inside = Some((0, String::new())),
            (Piece::Begins(name, _), Some((depth, _))) if name == wanted => *depth += 1,
            (Piece::Ends(name), Some((depth, text))) if name == wanted => {
                if *depth == 0 {
                    found.push(std::mem::take(text));
                    inside = None;
                } else {
                    *depth -= 1;
                }
            }
            (Piece::Text(more), Some((_, text))) => text.push_str(more),
            _ => {}
        }
    }
    found
}

/// The rows of the table with a caption, heading included; the letters that stand before verdicts are left out.
pub fn table(pieces: &[Piece], caption: &str) -> Vec<Vec<String>> {
    let start = pieces
        .windows(2)
        .position(|pair| {
            matches!(&pair[0], Piece::Begins(name, _) if name == "caption") && pair[1] == Piece::Text(caption.to_owned())
        })
        .unwrap_or_else(|| panic!("there is no table {caption}"));
    let mut rows: Vec<Vec<String>> = Vec::new();
    let mut sign = false;
    for piece in &pieces[start..] {
        match piece {
            Piece::Ends(name) if name == "table" => break,
            Piece::Begins(name, _) if name == "tr" => rows.push(Vec::new()),
            Piece::Begins(name, _) if name == "th" || name == "td" => rows.last_mut().expect("a row").push(String::new()),
            Piece::Begins(name, _) if name == "span" => sign = true,
            Piece::Ends(name) if name == "span" => sign = false,
            Piece::Text(text) if !sign && !text.trim().is_empty() => {
                if let Some(cell) = rows.last_mut().and_then(|row| row.last_mut()) {
                    cell.push_str(text.trim_end_matches('\n'));
                }
            }
            _ => {}
        }
    }
    rows
}

/// What every report must be: no script, nothing from elsewhere, names that are unique and links that lead to them, tables and
/// drawings that tell what they are.
pub fn assert_sound(html: &str) {
    let pieces = pieces(html);
    let (mut ids, mut links) = (HashSet::new(), Vec::new());
    let known = [
        "html",
        "head",
        "meta",
        "title",
        "style",
        "body",
        "header",
        "main",
        "nav",
        "section",
        "h1",
        "h2",
        "h3",
        "p",
        "ul",
        "ol",
        "li",
        "dl",
        "dt",
        "dd",
        "div",
        "table",
        "caption",
        "thead",
        "tbody",
        "tr",
        "th",
        "td",
        "span",
        "a",
        "code",
        "figure",
        "figcaption",
        "svg",
        "defs",
        "g",
        "path",
        "polyline",
        "rect",
        "circle",
        "text",
        "use",
    ];
    for (index, piece) in pieces.iter().enumerate() {
        let Piece::Begins(name, attributes) = piece else { continue };
        assert!(known.contains(&name.as_str()), "{name}");
        let value = |wanted: &str| attributes.iter().find(|(key, _)| key == wanted).map(|(_, value)| value.as_str());
        for (key, value) in attributes {
            assert!(!key.starts_with("on") && key != "src" && key != "style", "{name} has {key}");
            match key.as_str() {
                "id" => assert!(ids.insert(value.clone()), "{value} stands twice"),
                "href" => links.push(value.strip_prefix('#').expect("no link leads out").to_owned()),
                "aria-labelledby" => links.push(value.clone()),
                _ => assert!(!value.contains("NaN") && !value.contains("inf"), "{name} {key}: {value}"),
            }
        }
        match name.as_str() {
            "table" => assert!(matches!(&pieces[index + 2], Piece::Begins(next, _) if next == "caption"), "a caption comes first"),
            "th" => assert!(matches!(value("scope"), Some("row" | "col")), "a heading says of what"),
            "svg" => assert!(value("aria-hidden") == Some("true") || value("aria-label").is_some_and(|says| says.len() > 20)),
            _ => {}
        }
    }
    for link in links {
        assert!(ids.contains(&link), "{link} leads nowhere");
    }
}

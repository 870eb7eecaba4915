use std::fmt::{Display, Write};

use crate::review::glued;

use super::visible::visible;

/// Markup is a growing text of HTML with SVG in it. Names of elements and attributes are part of the program; text and values come in
/// through escaping alone, and whatever was opened is closed.
#[derive(Debug, Default)]
pub(super) struct Markup {
    text: String,
}

/// An attribute: its name and its value.
pub(super) type Attribute<'a> = (&'static str, &'a dyn Display);

/// Elements before which a line begins, so that two reports can be told apart line by line.
const BEGINS_LINE: [&str; 27] = [
    "head", "meta", "title", "style", "body", "header", "main", "nav", "section", "h1", "h2", "h3", "p", "ul", "ol", "li", "dl",
    "dt", "dd", "table", "caption", "thead", "tbody", "tr", "figure", "div", "svg",
];

impl Markup {
    /// An element with what is in it.
    pub fn within(&mut self, name: &'static str, attributes: &[Attribute], inner: impl FnOnce(&mut Self)) {
        self.begin(name, attributes);
        self.text.push('>');
        inner(self);
        let _ = write!(self.text, "</{name}>");
    }

    /// An element with text in it.
    pub fn says(&mut self, name: &'static str, attributes: &[Attribute], text: &str) {
        self.within(name, attributes, |markup| markup.words(text));
    }

    /// An element of HTML that never has anything in it.
    pub fn void(&mut self, name: &'static str, attributes: &[Attribute]) {
        self.begin(name, attributes);
        self.text.push('>');
    }

    /// An element of SVG without anything in it.
    pub fn shape(&mut self, name: &'static str, attributes: &[Attribute]) {
        self.begin(name, attributes);
        self.text.push_str("/>");
    }

    /// Plain text.
    pub fn words(&mut self, text: &str) {
        self.text.push_str(&escaped(&glued(&visible(text))));
    }

    /// The style sheet and what stands before the first element: text of the program's own, as it is.
    pub fn own(&mut self, text: &'static str) {
        self.text.push_str(text);
    }

    /// The whole text.
    pub fn finished(self) -> String {
        self.text
    }

    fn begin(&mut self, name: &'static str, attributes: &[Attribute]) {
        if BEGINS_LINE.contains(&name) {
            self.text.push('\n');
        }
        let _ = write!(self.text, "<{name}");
        for (key, value) in attributes {
            let _ = write!(self.text, " {key}=\"{}\"", escaped(&visible(&value.to_string())));
        }
    }
}

fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for sign in text.chars() {
        match sign {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            _ => out.push(sign),
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn text_and_values_can_not_leave_their_place() {
        let mut markup = Markup::default();
        markup.within("td", &[("title", &"\"><script>")], |markup| markup.words("</td><script>'x' & \u{202e}"));
        assert_eq!(
            markup.finished(),
            "<td title=\"&quot;&gt;&lt;script&gt;\">&lt;/td&gt;&lt;script&gt;&#39;x&#39; &amp; ⟨U+202E⟩</td>"
        );
    }
}

use super::visible::visible;

/// Plain text as Markdown that reads as just that text, in a paragraph, a list or a cell of a table: nothing in it becomes a heading, a
/// link, a picture, a formula, markup, a mention of a person or of another ticket.
pub(super) fn escaped(text: &str) -> String {
    let shown = visible(text);
    let text = shown.trim();
    let mut out = String::with_capacity(text.len() + 8);
    for (at, sign) in text.char_indices() {
        let next = text[at + sign.len_utf8()..].chars().next();
        match sign {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            // Formulas are looked for before anything else, so a stroke in front is not enough.
            '$' => out.push_str("&#36;"),
            '\\' | '`' | '*' | '_' | '[' | ']' | '|' | '~' => out.extend(['\\', sign]),
            // An address becomes a link by itself where its colon or point is plain.
            ':' if text[at..].starts_with("://") => out.push_str("\\:"),
            '.' if is_www(&text[..at]) => out.push_str("\\."),
            // Whoever is named like this would be called, and a ticket linked; a comment between keeps both from being seen.
            '@' | '#' if next.is_some_and(char::is_alphanumeric) => {
                out.extend((at == 0 && sign == '#').then_some('\\'));
                out.push(sign);
                out.push_str("<!-- -->");
            }
            '#' | '-' | '+' | '=' if at == 0 && next.is_none_or(|next| next.is_whitespace() || next == sign) => {
                out.extend(['\\', sign]);
            }
            '.' | ')' if is_number(&text[..at]) && next.is_none_or(char::is_whitespace) => {
                out.extend(['\\', sign]);
            }
            _ => out.push(sign),
        }
    }
    out
}

/// Whether what stands before a point would number an entry of a list.
fn is_number(before: &str) -> bool {
    !before.is_empty() && before.chars().all(|sign| sign.is_ascii_digit())
}

/// Whether what stands before a point is the beginning of an address without a scheme.
fn is_www(before: &str) -> bool {
    let mut last = before.chars().rev();
    last.by_ref().take(3).filter(|sign| sign.eq_ignore_ascii_case(&'w')).count() == 3
}

/// Plain text as it stands in code; where that can't be, as plain text.
pub(super) fn code(text: &str) -> String {
    let shown = visible(text);
    let text = shown.trim();
    let is_plain = !text.is_empty() && !text.contains(['`', '|', '\\', '$']);
    if is_plain { format!("`{text}`") } else { escaped(text) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn plain_words_and_figures_stay_readable() {
        for text in ["over: J4 rate, asks 154 %", "-54 % of +330 °/s", "0.4 s, then \"on shelf\" (line 12)", "3 - 4 = -1"] {
            assert_eq!(escaped(text), text);
        }
        assert_eq!(code("cell.toml:12"), "`cell.toml:12`");
    }

    #[test]
    fn marks_of_markdown_lose_their_meaning() {
        for (text, written) in [
            ("a|b", "a\\|b"),
            ("`x`", "\\`x\\`"),
            ("<b>&amp;", "&lt;b&gt;&amp;amp;"),
            ("# big", "\\# big"),
            ("1. one", "1\\. one"),
            ("1) one", "1\\) one"),
            ("+ one", "\\+ one"),
            ("---", "\\---"),
            ("==", "\\=="),
            ("[a](b)", "\\[a\\](b)"),
            ("$x$", "&#36;x&#36;"),
            ("see ftp://x and www.x", "see ftp\\://x and www\\.x"),
            ("@anna #12", "@<!-- -->anna #<!-- -->12"),
            ("two\nlines", "two⟨U+000A⟩lines"),
        ] {
            assert_eq!(escaped(text), written);
        }
        assert_eq!(code("a|b"), "a\\|b");
    }
}

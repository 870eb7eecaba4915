use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use crate::checks::Verdict;

use super::keymap::Keymap;
use super::keys::BINDINGS;
use super::page::{Line, paragraph};
use super::theme::Theme;

/// Keys and signs in lines of at most `width` columns.
pub fn lines(theme: Theme, keymap: &Keymap, width: usize) -> Vec<Line> {
    let entries: Vec<(String, &str)> = BINDINGS
        .iter()
        .map(|binding| {
            let names = keymap.names(binding, theme.ascii);
            (names.join(" "), binding.hint)
        })
        .collect();
    let keys = entries.iter().map(|(key, _)| key.width()).max().unwrap_or(0);
    let entry = |(key, hint): &(String, &str)| {
        let pad = " ".repeat(keys - key.width());
        [(format!("{key}{pad}"), theme.strong()), (format!("  {hint}"), Style::new())]
    };
    let mut lines = Vec::new();
    let column = keys + 2 + entries.iter().map(|(_, hint)| hint.width()).max().unwrap_or(0) + 2;
    if width >= 2 * column - 2 {
        let half = entries.len().div_ceil(2);
        for (row, left) in entries[..half].iter().enumerate() {
            let mut line: Line = entry(left).to_vec();
            if let Some(right) = entries.get(half + row) {
                line.push((" ".repeat(column - keys - 2 - left.1.width()), Style::new()));
                line.extend(entry(right));
            }
            lines.push(line);
        }
    } else {
        lines.extend(entries.iter().map(|one| entry(one).to_vec()));
    }
    lines.push(Vec::new());
    for verdict in Verdict::ALL {
        let word = format!(" {:<9}", verdict.word());
        let sign = (format!(" {} ", verdict.letter()), theme.verdict(verdict));
        lines.push(vec![sign, (word, theme.strong()), (meaning(verdict).to_owned(), Style::new())]);
    }
    lines.push(Vec::new());
    let words = "Room is what is left of a limit; what asks 154 % asks 54 % more than there is. The reserve is the room that \
                 must be left.";
    lines.extend(paragraph(words, width, 0, Style::new()));
    lines
}

fn meaning(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::NoPath => "no motion exists",
        Verdict::Over => "more is asked than there is",
        Verdict::Unproven => "nothing bad was seen, but it is not known",
        Verdict::Tight => "room is left, but less than the reserve",
        Verdict::Clear => "the reserve is left everywhere",
    }
}

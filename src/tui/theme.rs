use ratatui::style::{Color, Modifier, Style};

use crate::checks::Verdict;

/// A theme says how roles look: every meaning has a letter, a word or a shape; colour only adds to it.
///
/// Only the 16 colours, and never a colour of text alone that would vanish on a light or a dark background.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Theme {
    /// No colours at all: bold, underline and reverse only.
    pub mono: bool,
    /// Colours that read well on a light background.
    pub light: bool,
    /// No signs beyond ASCII.
    pub ascii: bool,
}

impl Theme {
    /// A verdict's letter or word.
    pub fn verdict(self, verdict: Verdict) -> Style {
        let plain = Style::new();
        if self.mono {
            return match verdict {
                Verdict::Clear => plain,
                Verdict::Tight => plain.add_modifier(Modifier::BOLD | Modifier::UNDERLINED),
                Verdict::Unproven => plain.add_modifier(Modifier::UNDERLINED),
                Verdict::Over | Verdict::NoPath => plain.add_modifier(Modifier::BOLD | Modifier::REVERSED),
            };
        }
        match verdict {
            Verdict::Clear => plain,
            Verdict::Tight => plain.fg(Color::Black).bg(Color::Yellow),
            Verdict::Unproven => plain.fg(Color::Black).bg(Color::Cyan),
            Verdict::Over => plain.fg(Color::White).bg(Color::Red).add_modifier(Modifier::BOLD),
            Verdict::NoPath => plain.fg(Color::White).bg(Color::Magenta).add_modifier(Modifier::BOLD),
        }
    }

    /// A line of a drawing on a stretch with that verdict.
    pub fn stroke(self, verdict: Verdict) -> Style {
        let bold = Style::new().add_modifier(Modifier::BOLD);
        match verdict {
            Verdict::Clear => Style::new(),
            _ if self.mono => bold,
            Verdict::Tight | Verdict::Unproven => bold.fg(Color::Magenta),
            Verdict::Over | Verdict::NoPath => bold.fg(Color::Red),
        }
    }

    /// The title of a pane.
    pub fn title(self, focused: bool) -> Style {
        let bold = Style::new().add_modifier(Modifier::BOLD);
        if focused { bold.add_modifier(Modifier::REVERSED) } else { bold }
    }

    /// What is to be read first.
    pub fn strong(self) -> Style {
        Style::new().add_modifier(Modifier::BOLD)
    }

    /// What is selected, and the place of the cursor.
    pub fn selected(self) -> Style {
        Style::new().add_modifier(Modifier::REVERSED)
    }

    /// The arm in its drawings.
    pub fn arm(self) -> Style {
        match self {
            Self { mono: true, .. } => self.strong(),
            Self { light: true, .. } => self.strong().fg(Color::Blue),
            _ => self.strong().fg(Color::Cyan),
        }
    }

    /// The horizontal line of a title.
    pub fn rule(self) -> &'static str {
        self.pick("─", "-")
    }

    /// The vertical line between panes.
    pub fn post(self) -> &'static str {
        self.pick("│", "|")
    }

    /// What stands for words left out.
    pub fn ellipsis(self) -> &'static str {
        self.pick("…", "~")
    }

    /// Points at the cursor's column.
    pub fn pointer(self) -> &'static str {
        self.pick("▼", "v")
    }

    /// Marks the selected row.
    pub fn here(self) -> &'static str {
        self.pick("▸", ">")
    }

    /// A piece of a bar.
    pub fn bar(self) -> &'static str {
        self.pick("━", "=")
    }

    /// One of two texts: the first where the terminal shows more than ASCII.
    pub fn pick(self, wide: &'static str, ascii: &'static str) -> &'static str {
        if self.ascii { ascii } else { wide }
    }

    /// A text with the signs that units use, in ASCII where need be.
    pub fn text(self, text: &str) -> String {
        if !self.ascii || text.is_ascii() {
            return text.to_owned();
        }
        let mut plain = String::with_capacity(text.len());
        for sign in text.chars() {
            match sign {
                '°' if plain.is_empty() || plain.ends_with(' ') => plain.push_str("deg"),
                '°' => plain.push_str(" deg"),
                '·' => plain.push('.'),
                '²' => plain.push('2'),
                '³' => plain.push('3'),
                '±' => plain.push_str("+-"),
                '×' => plain.push('x'),
                '–' | '—' | '−' => plain.push('-'),
                '→' => plain.push_str("->"),
                '“' | '”' => plain.push('"'),
                '’' | '‘' => plain.push('\''),
                '…' => plain.push('~'),
                sign if sign.is_ascii() => plain.push(sign),
                _ => plain.push('?'),
            }
        }
        plain
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_theme_without_colours_has_none() {
        let theme = Theme { mono: true, ..Theme::default() };
        for verdict in Verdict::ALL {
            for style in [theme.verdict(verdict), theme.stroke(verdict), theme.title(true), theme.selected(), theme.arm()] {
                assert_eq!((style.fg, style.bg), (None, None));
            }
        }
    }

    #[test]
    fn every_verdict_looks_its_own_in_both_themes() {
        for mono in [false, true] {
            let theme = Theme { mono, ..Theme::default() };
            let looks: Vec<_> = Verdict::ALL.iter().map(|v| (theme.verdict(*v), v.letter())).collect();
            for (i, look) in looks.iter().enumerate() {
                assert!(looks[..i].iter().all(|other| other.1 != look.1));
            }
        }
    }

    #[test]
    fn ascii_text_keeps_its_meaning() {
        let theme = Theme { ascii: true, ..Theme::default() };
        assert_eq!(theme.text("508 °/s² of 3.5 N·m"), "508 deg/s2 of 3.5 N.m");
    }
}

use super::theme::Theme;

/// Options say how the screen looks and what it listens to.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
#[expect(clippy::struct_excessive_bools, reason = "each is a switch of its own on the command line")]
pub struct Options {
    /// No signs beyond ASCII.
    pub ascii: bool,
    /// No colours.
    pub mono: bool,
    /// Colours for a light background.
    pub light: bool,
    /// Clicks select. Off by default, so that the terminal's own selecting of text works.
    pub mouse: bool,
}

impl Options {
    /// What the environment asks for: no colours by `NO_COLOR` or a terminal that has few, ASCII where the locale is not UTF-8.
    pub fn of_environment(variable: impl Fn(&str) -> Option<String>) -> Self {
        let set = |name: &str| variable(name).filter(|value| !value.is_empty());
        let locale = set("LC_ALL").or_else(|| set("LC_CTYPE")).or_else(|| set("LANG")).unwrap_or_default().to_lowercase();
        let terminal = set("TERM").unwrap_or_default();
        let few = ["dumb", "vt", "ansi", "xterm-mono"].iter().any(|kind| terminal.starts_with(kind));
        Self {
            // Windows has no such variables; its terminals show what is needed.
            ascii: cfg!(unix) && !(locale.contains("utf-8") || locale.contains("utf8")),
            mono: set("NO_COLOR").is_some() || few,
            light: false,
            mouse: false,
        }
    }

    /// The theme that follows.
    pub fn theme(self) -> Theme {
        Theme { mono: self.mono, light: self.light, ascii: self.ascii }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn with(pairs: &[(&str, &str)]) -> Options {
        Options::of_environment(|name| pairs.iter().find(|(key, _)| *key == name).map(|(_, value)| (*value).to_owned()))
    }

    #[test]
    fn the_first_locale_variable_that_is_set_counts() {
        assert!(!with(&[("LANG", "de_DE.UTF-8")]).ascii);
        assert!(with(&[("LANG", "de_DE.UTF-8"), ("LC_ALL", "C")]).ascii);
        assert!(with(&[]).ascii);
    }

    #[test]
    fn no_color_counts_only_when_it_says_something() {
        assert!(with(&[("NO_COLOR", "1")]).mono);
        assert!(!with(&[("NO_COLOR", ""), ("TERM", "xterm-256color")]).mono);
        assert!(with(&[("TERM", "vt100")]).mono);
    }
}

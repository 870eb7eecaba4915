use unicode_width::UnicodeWidthStr;

/// Units that are not parted from the figure before them.
const UNITS: [&str; 12] = ["kg·m²", "%", "°", "°/s", "°/s²", "mm", "mm/s", "mm/s²", "N·m", "N", "kg", "s"];

/// Text in lines of at most `width` columns, broken between words; a figure keeps its unit. Only a word longer than a line is
/// longer than that.
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    let mut lines = Vec::new();
    let mut line = String::new();
    for word in words(text) {
        if !line.is_empty() && line.width() + 1 + word.width() > width {
            lines.push(std::mem::take(&mut line));
        }
        if !line.is_empty() {
            line.push(' ');
        }
        line.push_str(&word);
    }
    if !line.is_empty() {
        lines.push(line);
    }
    lines
}

/// Text in which no figure can be parted from its unit: the space between them is one at which no line breaks.
pub fn glued(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut after_figure = false;
    for (at, sign) in text.char_indices() {
        let word = text[at..].strip_prefix(' ').and_then(|rest| rest.split(' ').next()).unwrap_or_default();
        let unit = word.trim_end_matches(['.', ',', ':', ';', ')']);
        out.push(if sign == ' ' && after_figure && UNITS.contains(&unit) { '\u{a0}' } else { sign });
        after_figure = sign.is_ascii_digit();
    }
    out
}

/// Words, units glued to their figures.
fn words(text: &str) -> Vec<String> {
    let mut words: Vec<String> = Vec::new();
    for word in text.split_whitespace() {
        let bare = word.trim_end_matches(['.', ',', ':', ';', ')']);
        match words.last_mut().filter(|last| last.ends_with(|c: char| c.is_ascii_digit()) && UNITS.contains(&bare)) {
            Some(figure) => {
                figure.push(' ');
                figure.push_str(word);
            }
            None => words.push(word.to_owned()),
        }
    }
    words
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_figure_keeps_its_unit() {
        assert_eq!(wrap("it is asked for 509 °/s", 19), ["it is asked for", "509 °/s"]);
        assert_eq!(wrap("asked for 509 °/s of 330 °/s, much", 17), ["asked for 509 °/s", "of 330 °/s, much"]);
    }

    #[test]
    fn nothing_but_the_space_before_a_unit_changes() {
        assert_eq!(glued("at  509 °/s, 12 % (3 kg) of 4 parts"), "at  509\u{a0}°/s, 12\u{a0}% (3\u{a0}kg) of 4 parts");
        assert_eq!(glued("mm 5 "), "mm 5 ");
    }

    #[test]
    fn lines_keep_within_the_width() {
        let text = "J2 must supply -578 N·m so that the arm stands still with tool and load.";
        for width in 12..80 {
            assert!(wrap(text, width).iter().all(|line| line.width() <= width), "{width}");
            assert_eq!(wrap(text, width).join(" "), text);
        }
    }
}

use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use super::theme::Theme;

/// A sheet is one pane's part of the screen. What does not fit is left out, so that no size can make drawing fail.
#[derive(Debug)]
pub struct Sheet<'a> {
    buffer: &'a mut Buffer,
    area: Rect,
    theme: Theme,
}

impl<'a> Sheet<'a> {
    /// A sheet for an area of a buffer.
    pub fn new(buffer: &'a mut Buffer, area: Rect, theme: Theme) -> Self {
        let area = area.intersection(buffer.area);
        Self { buffer, area, theme }
    }

    /// Columns.
    pub fn width(&self) -> usize {
        usize::from(self.area.width)
    }

    /// Rows.
    pub fn height(&self) -> usize {
        usize::from(self.area.height)
    }

    /// How things look.
    pub fn theme(&self) -> Theme {
        self.theme
    }

    /// A part of this sheet, `below` rows lower and `right` columns to the right, `width` columns wide.
    pub fn part(&mut self, right: usize, below: usize, width: usize, height: usize) -> Sheet<'_> {
        let (right, below) = (right.min(self.width()), below.min(self.height()));
        let area = Rect {
            x: self.area.x + right as u16,
            y: self.area.y + below as u16,
            width: width.min(self.width() - right) as u16,
            height: height.min(self.height() - below) as u16,
        };
        Sheet { buffer: self.buffer, area, theme: self.theme }
    }

    /// Writes a text and tells the column behind it.
    pub fn put(&mut self, x: usize, y: usize, text: &str, style: Style) -> usize {
        if x >= self.width() || y >= self.height() {
            return x;
        }
        let text = self.theme.text(text);
        let left = self.width() - x;
        let (end, _) = self.buffer.set_stringn(self.area.x + x as u16, self.area.y + y as u16, text, left, style);
        usize::from(end - self.area.x)
    }

    /// Writes a text that ends in front of column `end`.
    pub fn put_before(&mut self, end: usize, y: usize, text: &str, style: Style) {
        let width = self.theme.text(text).width();
        if width <= end {
            self.put(end - width, y, text, style);
        }
    }

    /// Changes the style of some columns without changing what stands there.
    pub fn tint(&mut self, x: usize, y: usize, width: usize, style: Style) {
        if x >= self.width() || y >= self.height() {
            return;
        }
        let width = width.min(self.width() - x) as u16;
        self.buffer.set_style(Rect { x: self.area.x + x as u16, y: self.area.y + y as u16, width, height: 1 }, style);
    }

    /// The sign that stands in a cell, as a text.
    pub fn sign(&self, x: usize, y: usize) -> &str {
        if x >= self.width() || y >= self.height() {
            return "";
        }
        self.buffer.cell((self.area.x + x as u16, self.area.y + y as u16)).map_or("", |cell| cell.symbol())
    }

    /// Empties the sheet.
    pub fn wipe(&mut self) {
        for y in 0..self.height() {
            for x in 0..self.width() {
                if let Some(cell) = self.buffer.cell_mut((self.area.x + x as u16, self.area.y + y as u16)) {
                    cell.reset();
                }
            }
        }
    }

    /// A line across the sheet that carries a title.
    pub fn rule(&mut self, y: usize, title: &str, focused: bool) -> usize {
        for x in 0..self.width() {
            self.put(x, y, self.theme.rule(), Style::new());
        }
        if title.is_empty() {
            return 0;
        }
        let title = fit(title, self.width().saturating_sub(4), self.theme);
        self.put(1, y, &format!(" {title} "), self.theme.title(focused))
    }
}

/// A text that fits into `width` columns, cut between words where it can be.
pub fn fit(text: &str, width: usize, theme: Theme) -> String {
    let text = theme.text(text);
    if text.width() <= width {
        return text;
    }
    let mark = theme.ellipsis();
    let mut kept = String::new();
    for sign in text.chars() {
        if kept.width() + unicode_width::UnicodeWidthChar::width(sign).unwrap_or(0) + mark.width() > width {
            break;
        }
        kept.push(sign);
    }
    if let Some(space) = kept.rfind(' ').filter(|space| *space > 0) {
        kept.truncate(space);
    }
    if width >= mark.width() { kept.trim_end().to_owned() + mark } else { String::new() }
}

/// A text in lines of at most `width` columns, broken between words; a word that is longer is broken inside.
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    let width = width.max(1);
    let mut lines = Vec::new();
    let mut line = String::new();
    for word in text.split_whitespace() {
        let mut word = word.to_owned();
        if !line.is_empty() && line.width() + 1 + word.width() > width {
            lines.push(std::mem::take(&mut line));
        }
        while word.width() > width {
            let cut = word.char_indices().take_while(|(at, sign)| word[..*at + sign.len_utf8()].width() <= width).last();
            let cut = cut.map_or(word.len(), |(at, sign)| at + sign.len_utf8());
            let rest = word.split_off(cut);
            lines.push(std::mem::replace(&mut word, rest));
        }
        if !line.is_empty() {
            line.push(' ');
        }
        line.push_str(&word);
    }
    if !line.is_empty() || lines.is_empty() {
        lines.push(line);
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_text_is_cut_between_words() {
        let theme = Theme::default();
        assert_eq!(fit("above rack", 10, theme), "above rack");
        assert_eq!(fit("above the long rack", 12, theme), "above the…");
        assert_eq!(fit("housing", 0, theme), "");
    }

    #[test]
    fn lines_are_never_wider_than_asked() {
        for width in 0..30 {
            for line in wrap("J4 asks 508 °/s of 330 °/s, halfway along the straightforwardly-named segment", width) {
                assert!(line.width() <= width.max(1), "{width}: {line}");
            }
        }
    }
}

use ratatui::style::Style;

use super::sheet::Sheet;

/// A raster is a drawing in dots, 2 across and 4 down in every cell. Dots of lines that cross in one cell are kept together.
#[derive(Debug, Clone)]
pub struct Raster {
    width: usize,
    height: usize,
    cells: Vec<Cell>,
}

#[derive(Debug, Clone, Copy, Default)]
struct Cell {
    dots: u8,
    ink: Ink,
}

/// An ink is what a line of a drawing stands for. Where several meet in one cell the greatest shows.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Default)]
pub enum Ink {
    /// A line to compare with, such as a limit.
    #[default]
    Guide,
    /// A curve or a path.
    Line,
    /// The arm.
    Body,
    /// A stretch that is flagged, but not over.
    Flagged,
    /// A stretch that is over its limit.
    Over,
}

impl Ink {
    /// What a cell shows where there are no dots in the terminal's signs.
    fn ascii(self) -> &'static str {
        match self {
            Self::Guide => ".",
            Self::Line => "+",
            Self::Body => "#",
            Self::Flagged => "t",
            Self::Over => "O",
        }
    }
}

/// A place on a raster in dots, from its upper left corner.
pub type Dot = (f64, f64);

impl Raster {
    /// An empty raster for that many columns and rows.
    pub fn new(columns: usize, rows: usize) -> Self {
        Self { width: columns, height: rows, cells: vec![Cell::default(); columns * rows] }
    }

    /// Dots across.
    pub fn across(&self) -> f64 {
        self.width as f64 * 2.0
    }

    /// Dots down.
    pub fn down(&self) -> f64 {
        self.height as f64 * 4.0
    }

    /// One dot; nothing outside.
    pub fn dot(&mut self, x: i64, y: i64, ink: Ink) {
        let (Ok(x), Ok(y)) = (usize::try_from(x), usize::try_from(y)) else { return };
        if x >= self.width * 2 || y >= self.height * 4 {
            return;
        }
        // Braille dots are numbered down the columns, the lowest row last.
        const BIT: [[u8; 4]; 2] = [[0x01, 0x02, 0x04, 0x40], [0x08, 0x10, 0x20, 0x80]];
        let cell = &mut self.cells[y / 4 * self.width + x / 2];
        cell.dots |= BIT[x % 2][y % 4];
        cell.ink = cell.ink.max(ink);
    }

    /// A line one dot wide.
    pub fn line(&mut self, from: Dot, to: Dot, ink: Ink) {
        let Some(((x0, y0), (x1, y1))) = self.clip(from, to) else { return };
        let count = (x1 - x0).abs().max((y1 - y0).abs()).ceil().max(1.0);
        for k in 0..=count as usize {
            let t = k as f64 / count;
            self.dot((x0 + t * (x1 - x0)).floor() as i64, (y0 + t * (y1 - y0)).floor() as i64, ink);
        }
    }

    /// A line two dots wide.
    pub fn thick(&mut self, from: Dot, to: Dot, ink: Ink) {
        let (dx, dy) = if (to.0 - from.0).abs() > (to.1 - from.1).abs() { (0.0, 1.0) } else { (1.0, 0.0) };
        self.line(from, to, ink);
        self.line((from.0 + dx, from.1 + dy), (to.0 + dx, to.1 + dy), ink);
    }

    /// A filled square around a place, `reach` dots to every side.
    pub fn blot(&mut self, at: Dot, reach: i64, ink: Ink) {
        if !(at.0.is_finite() && at.1.is_finite()) {
            return;
        }
        for dy in -reach..=reach {
            for dx in -reach..=reach {
                self.dot(at.0.floor() as i64 + dx, at.1.floor() as i64 + dy, ink);
            }
        }
    }

    /// The part of a line that is on the raster.
    fn clip(&self, a: Dot, b: Dot) -> Option<(Dot, Dot)> {
        let (mut first, mut last) = (0.0f64, 1.0f64);
        for (from, to, end) in [(a.0, b.0, self.across()), (a.1, b.1, self.down())] {
            if !(from.is_finite() && to.is_finite()) {
                return None;
            }
            let way = to - from;
            if way == 0.0 {
                if from < 0.0 || from >= end {
                    return None;
                }
                continue;
            }
            let (p, q) = (-from / way, (end - from) / way);
            first = first.max(p.min(q));
            last = last.min(p.max(q));
        }
        let at = |t: f64| (a.0 + t * (b.0 - a.0), a.1 + t * (b.1 - a.1));
        (first <= last).then(|| (at(first), at(last)))
    }

    /// Draws on a sheet; cells without dots are left as they are.
    pub fn draw(&self, sheet: &mut Sheet, style: impl Fn(Ink) -> Style) {
        let ascii = sheet.theme().ascii;
        for (index, cell) in self.cells.iter().enumerate().filter(|(_, cell)| cell.dots != 0) {
            let (x, y) = (index % self.width, index / self.width);
            if ascii {
                sheet.put(x, y, cell.ink.ascii(), style(cell.ink));
            } else {
                let sign = char::from_u32(0x2800 + u32::from(cell.dots)).unwrap_or(' ');
                sheet.put(x, y, sign.encode_utf8(&mut [0; 4]), style(cell.ink));
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::tui::theme::Theme;
    use ratatui::buffer::Buffer;
    use ratatui::layout::Rect;

    fn drawn(raster: &Raster, ascii: bool) -> String {
        let area = Rect::new(0, 0, raster.width as u16, raster.height as u16);
        let mut buffer = Buffer::empty(area);
        raster.draw(&mut Sheet::new(&mut buffer, area, Theme { mono: true, ascii, ..Theme::default() }), |_| Style::new());
        buffer.content().iter().map(ratatui::buffer::Cell::symbol).collect()
    }

    #[test]
    fn lines_that_cross_in_a_cell_keep_all_their_dots() {
        let mut raster = Raster::new(1, 1);
        raster.line((0.0, 0.0), (0.0, 3.9), Ink::Line);
        raster.line((1.0, 0.0), (1.0, 3.9), Ink::Over);
        assert_eq!(drawn(&raster, false), "⣿");
        assert_eq!(drawn(&raster, true), "O");
    }

    #[test]
    fn what_is_outside_is_left_out() {
        let mut raster = Raster::new(2, 1);
        raster.line((-1e9, -1e9), (1e9, 1e9), Ink::Line);
        raster.line((f64::NAN, 0.0), (1.0, 1.0), Ink::Over);
        raster.blot((f64::INFINITY, 0.0), 1, Ink::Over);
        assert_eq!(drawn(&raster, true).trim_end(), "++");
    }
}

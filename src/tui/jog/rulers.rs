use ratatui::style::Style;

use crate::tui::sheet::{Sheet, fit};

/// A ruler is one row: a name, a value, and a scale with a mark at the value.
#[derive(Debug)]
pub(super) struct Ruler {
    /// What it measures.
    pub name: String,
    /// Its value in words.
    pub value: String,
    /// Where the value is, 0 to 1 from one end of the scale to the other.
    pub at: f64,
    /// Where it was when jogging began.
    pub began: f64,
    /// What stands behind the scale: text and whether it is to be noticed.
    pub behind: String,
    /// How what stands behind looks.
    pub behind_style: Style,
}

/// Columns of the names and of the values.
const NAME: usize = 9;
/// Room for `-1234.56 mm`, or `-123.45 deg` in ASCII.
const VALUE: usize = 12;

/// Draws a ruler in row `y`; `behind` columns are kept for what stands behind it.
pub(super) fn draw(sheet: &mut Sheet, y: usize, ruler: &Ruler, chosen: bool, behind: usize) {
    let theme = sheet.theme();
    let plain = if chosen { theme.strong() } else { Style::new() };
    if chosen {
        sheet.put(0, y, theme.here(), plain);
    }
    sheet.put(2, y, &fit(&ruler.name, NAME, theme), plain);
    if chosen {
        sheet.tint(2, y, NAME, theme.selected());
    }
    sheet.put_before(2 + NAME + VALUE, y, &ruler.value, plain);
    let left = 2 + NAME + VALUE + 1;
    let width = sheet.width().saturating_sub(left + behind + 1);
    if width >= 5 {
        for x in 0..width {
            let sign = match x {
                0 => theme.pick("├", "["),
                x if x == width - 1 => theme.pick("┤", "]"),
                x if x == (width - 1) / 2 => theme.pick("┼", "+"),
                _ => theme.pick("─", "-"),
            };
            sheet.put(left + x, y, sign, Style::new());
        }
        let mut mark = |share: f64, sign: &str, style: Style| {
            if share.is_finite() {
                sheet.put(left + (share.clamp(0.0, 1.0) * (width - 1) as f64).round() as usize, y, sign, style);
            }
        };
        mark(ruler.began, theme.pick("○", "o"), Style::new());
        mark(ruler.at, theme.pick("●", "O"), theme.strong());
    }
    sheet.put_before(sheet.width().saturating_sub(1), y, &ruler.behind, ruler.behind_style);
}

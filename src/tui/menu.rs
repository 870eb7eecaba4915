use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use super::app::Menu;
use super::sheet::{Sheet, fit};

/// Draws a menu over what is there, in the middle of the sheet.
pub fn draw(sheet: &mut Sheet, menu: &Menu) {
    let theme = sheet.theme();
    let widest =
        menu.items.iter().map(|item| item.name.width() + 2 + item.key.width()).chain([menu.title.width() + 2]).max().unwrap_or(0);
    let (width, height) = ((widest + 6).min(sheet.width()), (menu.items.len() + 2).min(sheet.height()));
    let (x, y) = ((sheet.width() - width) / 2, (sheet.height() - height) / 2);
    let mut sheet = sheet.part(x, y, width, height);
    sheet.wipe();
    sheet.rule(height.saturating_sub(1), "", false);
    sheet.rule(0, &menu.title, false);
    for y in 1..height.saturating_sub(1) {
        sheet.put(0, y, theme.post(), Style::new());
        sheet.put(width - 1, y, theme.post(), Style::new());
    }
    for (x, y, sign) in [
        (0, 0, theme.pick("┌", "+")),
        (width.saturating_sub(1), 0, theme.pick("┐", "+")),
        (0, height.saturating_sub(1), theme.pick("└", "+")),
        (width.saturating_sub(1), height.saturating_sub(1), theme.pick("┘", "+")),
    ] {
        sheet.put(x, y, sign, Style::new());
    }
    let rows = height.saturating_sub(2);
    let first = (menu.chosen + 1).saturating_sub(rows);
    if menu.items.len() > rows && rows > 0 {
        let told = format!(" {}-{} of {} ", first + 1, first + rows, menu.items.len());
        sheet.put_before(width.saturating_sub(1), height.saturating_sub(1), &told, Style::new());
    }
    for (row, item) in menu.items.iter().enumerate().skip(first).take(rows) {
        let y = row - first + 1;
        sheet.put(3, y, &fit(&item.name, width.saturating_sub(5), theme), Style::new());
        sheet.put_before(width.saturating_sub(3), y, &item.key, Style::new());
        if row == menu.chosen {
            sheet.put(1, y, theme.here(), theme.strong());
            sheet.tint(1, y, width.saturating_sub(2), theme.selected());
        }
    }
}

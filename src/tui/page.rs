use ratatui::style::Style;

use super::app::{App, Mode, Page};
use super::layout::Layout;
use super::sheet::{Sheet, wrap};
use super::update::layout;
use super::why::Spacing;
use super::{bounds, file, help, not_checked, why};

/// A line of a text: pieces, each with its style.
pub type Line = Vec<(String, Style)>;

/// Lines are read easily up to this width.
const WIDEST: usize = 100;

/// A text in one style, wrapped, every line `indent` columns in.
pub fn paragraph(text: &str, width: usize, indent: usize, style: Style) -> Vec<Line> {
    let space = " ".repeat(indent);
    wrap(text, width.saturating_sub(indent)).into_iter().map(|line| vec![(format!("{space}{line}"), style)]).collect()
}

/// A page's title and lines.
fn text(app: &App, page: Page, width: usize) -> (String, Vec<Line>) {
    let width = width.saturating_sub(2).clamp(1, WIDEST);
    match page {
        Page::Why => (why::title(app, width), why::lines(app, width, Spacing::Airy)),
        Page::Bounds => (bounds::title(app), bounds::lines(app, width)),
        Page::Edits => ("Edits".to_owned(), file::edits(app, width)),
        Page::Changes => (app.changes.0.clone(), file::changes(app, width)),
        Page::NotChecked => ("Not checked".to_owned(), not_checked::lines(app, width)),
        Page::Help => ("Help".to_owned(), help::lines(app.theme, &app.keymap, width)),
    }
}

/// Draws a page between headline and footer.
pub fn draw(sheet: &mut Sheet, app: &App, page: Page, scroll: usize) {
    let (title, lines) = text(app, page, sheet.width());
    draw_lines(sheet, &title, &lines, scroll, true);
}

/// Draws a titled text that may be longer than its sheet.
pub fn draw_lines(sheet: &mut Sheet, title: &str, lines: &[Line], scroll: usize, focused: bool) {
    sheet.rule(0, title, focused);
    let height = sheet.height().saturating_sub(1);
    let scroll = scroll.min(lines.len().saturating_sub(height));
    for (y, line) in lines.iter().skip(scroll).take(height).enumerate() {
        let mut x = 1;
        for (text, style) in line {
            x = sheet.put(x, y + 1, text, *style);
        }
    }
    if lines.len() > height && height > 0 {
        let told = format!(" {}-{} of {} ", scroll + 1, scroll + height, lines.len());
        sheet.put_before(sheet.width().saturating_sub(1), 0, &told, Style::new());
    }
}

/// Keeps what is scrolled within its text, so that one key back is seen at once.
pub(super) fn hold_scroll(app: &mut App) {
    let Layout { why: pane, .. } = layout(app);
    let (width, height) = (usize::from(pane.width), usize::from(pane.height));
    if height > 0 {
        let count = why::lines(app, width.saturating_sub(2).max(1), Spacing::Tight).len();
        app.why_scroll = app.why_scroll.min(count.saturating_sub(height - 1));
    }
    if let Mode::Page(page, scroll) = app.mode {
        let count = text(app, page, usize::from(app.area.width)).1.len();
        let height = page_height(app);
        app.mode = Mode::Page(page, scroll.min(count.saturating_sub(height.saturating_sub(1))));
    }
}

fn page_height(app: &App) -> usize {
    let layout = layout(app);
    usize::from(app.area.height - layout.headline.height - layout.footer.height)
}

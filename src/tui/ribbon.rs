use ratatui::style::Style;

use crate::review::drawn::cell_of;
use crate::units::{Dimension, Measure};

use super::app::App;
use super::layout::label_width;
use super::sheet::Sheet;

/// Draws the verdicts along the cycle: a row a check, the segments' numbers above, the cursor's column marked.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let Some(session) = &app.session else { return };
    let (theme, bands) = (app.theme, &app.scene.bands);
    let label = usize::from(label_width(sheet.width() as u16));
    let cells = sheet.width() - label;
    let cursor = cell_of(session.judged(), session.time(), cells);
    if label > 0 {
        let time = Measure::si(session.time(), Dimension::Time).text(2);
        sheet.put_before(label - 1, 0, &time, theme.strong());
    }
    numbers(&mut sheet.part(label, 0, cells, 1), app, cursor);
    let height = sheet.height().saturating_sub(1);
    for (y, (word, cells_of_row)) in bands.in_rows(height).into_iter().enumerate() {
        if label > 0 {
            sheet.put_before(label - 1, y + 1, word, Style::new());
        }
        for (x, cell) in cells_of_row.iter().enumerate().take(cells) {
            if let Some(verdict) = cell {
                sheet.put(label + x, y + 1, verdict.letter().encode_utf8(&mut [0; 4]), theme.verdict(*verdict));
            }
        }
        if sheet.sign(label + cursor, y + 1) == " " {
            sheet.put(label + cursor, y + 1, theme.post(), Style::new());
        } else if sheet.sign(label + cursor, y + 1) == "." {
            sheet.tint(label + cursor, y + 1, 1, theme.selected());
        }
    }
}

/// The numbers of the segments over their time, borders between them, and the pointer.
fn numbers(sheet: &mut Sheet, app: &App, cursor: usize) {
    let (theme, bands) = (app.theme, &app.scene.bands);
    let Some(judged) = app.judged() else { return };
    for (index, [first, end]) in bands.segments.iter().enumerate() {
        if end == first {
            continue;
        }
        let selected = index == app.segment();
        if *first > 0 {
            sheet.put(*first, 0, theme.pick("╷", "|"), Style::new());
        }
        let number = judged.plan.segments[index].number().to_string();
        // A border stands in the first cell of all but the first segment.
        let from = first + usize::from(*first > 0);
        if number.len() <= end.saturating_sub(from) {
            let style = if selected { theme.selected() } else { Style::new() };
            sheet.put(from + (end - from - number.len()) / 2, 0, &number, style);
        }
    }
    if sheet.sign(cursor, 0).chars().all(|sign| !sign.is_ascii_digit()) {
        sheet.put(cursor, 0, theme.pointer(), theme.strong());
    }
}

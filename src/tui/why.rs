use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use crate::review::{Bar, Explanation};

use super::app::{App, Pane};
use super::page::{Line, draw_lines, paragraph};
use super::sheet::{Sheet, fit};
use super::theme::Theme;

/// Draws the explanation of what is selected.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let lines = lines(app, sheet.width().saturating_sub(2).max(1));
    let number = app.session.as_ref().and_then(|session| session.finding_number());
    let count = app.judged().map_or(0, |judged| judged.survey.findings.len());
    let title = match number {
        Some(number) if sheet.width() >= 50 => format!("Why: finding {number} of {count}, the worst first"),
        Some(number) => format!("Why: {number} of {count}"),
        None => "Why".to_owned(),
    };
    draw_lines(sheet, &title, &lines, app.why_scroll, app.pane == Pane::Why);
}

/// The explanation in lines of at most `width` columns.
pub fn lines(app: &App, width: usize) -> Vec<Line> {
    app.scene.why.as_ref().map_or_else(Vec::new, |why| told(why, width, app.theme))
}

fn told(why: &Explanation, width: usize, theme: Theme) -> Vec<Line> {
    let mut lines = paragraph(&why.title, width, 0, theme.strong());
    for part in &why.paragraphs {
        // The label leads the paragraph's first line.
        let label = part.label.words();
        let mut text = paragraph(&format!("{}  {}", "x".repeat(label.width()), part.text), width, 0, Style::new());
        if let Some(first) = text.first_mut() {
            let rest = first.first().map_or("", |(line, _)| line.get(label.width()..).unwrap_or("")).to_owned();
            *first = vec![(label.to_owned(), theme.strong()), (rest, Style::new())];
        }
        lines.append(&mut text);
        lines.extend(bars(&part.bars, width, theme));
    }
    lines
}

/// Shares of a sum as bars around a common zero: those that relieve point to the left.
fn bars(bars: &[Bar], width: usize, theme: Theme) -> Vec<Line> {
    let name = bars.iter().map(|bar| bar.name.width()).max().unwrap_or(0).min(width / 3);
    let figure = bars.iter().map(|bar| bar.figure.width()).max().unwrap_or(0);
    let left = width.saturating_sub(name + figure + 4);
    let most = bars.iter().map(|bar| bar.share.abs()).fold(0.0, f64::max);
    let relief = bars.iter().map(|bar| -bar.share).fold(0.0, f64::max);
    let whole = (most + relief).max(1e-9);
    let zero = (relief / whole * left as f64).ceil() as usize;
    bars.iter()
        .map(|bar| {
            let length = (bar.share.abs() / whole * left as f64).round() as usize;
            let (space, length) = if bar.share < 0.0 {
                (zero.saturating_sub(length), length.min(zero))
            } else {
                (zero, length.min(left.saturating_sub(zero)))
            };
            let drawn = " ".repeat(space) + &theme.full().repeat(length);
            let name_text = fit(&bar.name, name, theme);
            let pad = " ".repeat(name.saturating_sub(name_text.width()));
            let figure_pad = " ".repeat(figure.saturating_sub(bar.figure.width()));
            vec![(format!(" {name_text}{pad} {figure_pad}{} ", bar.figure), Style::new()), (drawn, theme.strong())]
        })
        .collect()
}

use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use crate::review::{Bar, Explanation, Session};

use super::app::{App, Pane};
use super::page::{Line, draw_lines, paragraph};
use super::sheet::{Sheet, fit};
use super::theme::Theme;

/// Draws the explanation of what is selected.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let lines = lines(app, sheet.width().saturating_sub(2).max(1), Spacing::Tight);
    let title = title(app, sheet.width());
    draw_lines(sheet, &title, &lines, app.why_scroll, app.pane == Pane::Why);
}

/// Which finding is told.
pub fn title(app: &App, width: usize) -> String {
    let number = app.session.as_ref().and_then(Session::finding_number);
    let count = app.judged().map_or(0, |judged| judged.survey.findings.len());
    match number {
        Some(number) if width >= 50 => format!("Why: finding {number} of {count}, the worst first"),
        Some(number) => format!("Why: {number} of {count}"),
        None => "Why".to_owned(),
    }
}

/// Whether paragraphs stand apart.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Spacing {
    /// No empty lines.
    Tight,
    /// An empty line before each paragraph.
    Airy,
}

/// The explanation in lines of at most `width` columns.
pub fn lines(app: &App, width: usize, spacing: Spacing) -> Vec<Line> {
    app.scene.why.as_ref().map_or_else(Vec::new, |why| told(why, width, spacing, app.theme))
}

fn told(why: &Explanation, width: usize, spacing: Spacing, theme: Theme) -> Vec<Line> {
    let mut lines = paragraph(&theme.text(&why.title), width, 0, theme.strong());
    for part in &why.paragraphs {
        if spacing == Spacing::Airy {
            lines.push(Vec::new());
        }
        // The label leads the paragraph's first line.
        let label = format!("{}:", part.label.words());
        let mut text = paragraph(&format!("{label} {}", theme.text(&part.text)), width, 0, Style::new());
        if let Some(first) = text.first_mut() {
            let rest = first.first().map_or("", |(line, _)| line.get(label.width()..).unwrap_or("")).to_owned();
            *first = vec![(label, theme.strong()), (rest, Style::new())];
        }
        lines.append(&mut text);
        lines.extend(bars(&part.bars, width, theme));
    }
    lines
}

/// Shares of a sum as bars around a common zero.
fn bars(bars: &[Bar], width: usize, theme: Theme) -> Vec<Line> {
    let name = bars.iter().map(|bar| bar.name.width()).max().unwrap_or(0).min(width / 3);
    let figure = bars.iter().map(|bar| theme.text(&bar.figure).width()).max().unwrap_or(0);
    let left = width.saturating_sub(name + figure + 4);
    // To the right goes what adds to the largest of them, to the left what relieves it.
    let largest =
        bars.iter().map(|bar| bar.share).fold(0.0, |most: f64, share| if share.abs() > most.abs() { share } else { most });
    let along = |bar: &Bar| if largest < 0.0 { -bar.share } else { bar.share };
    let most = largest.abs();
    let relief = bars.iter().map(|bar| -along(bar)).fold(0.0, f64::max);
    let whole = (most + relief).max(1e-9);
    let zero = (relief / whole * left as f64).ceil() as usize;
    bars.iter()
        .map(|bar| {
            let length = (along(bar).abs() / whole * left as f64).round() as usize;
            let (space, length) = if along(bar) < 0.0 {
                (zero.saturating_sub(length), length.min(zero))
            } else {
                (zero, length.min(left.saturating_sub(zero)))
            };
            let drawn = " ".repeat(space) + &theme.bar().repeat(length);
            let name_text = fit(&bar.name, name, theme);
            let pad = " ".repeat(name.saturating_sub(name_text.width()));
            let figure_text = theme.text(&bar.figure);
            let figure_pad = " ".repeat(figure.saturating_sub(figure_text.width()));
            vec![(format!(" {name_text}{pad} {figure_pad}{figure_text} "), Style::new()), (drawn, theme.strong())]
        })
        .collect()
}

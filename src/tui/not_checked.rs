use ratatui::style::Style;

use super::app::App;
use super::page::{Line, paragraph};
use super::rows::doubt_words;

/// The doubts, and what was not checked, in lines of at most `width` columns.
pub fn lines(app: &App, width: usize) -> Vec<Line> {
    let theme = app.theme;
    let mut lines = Vec::new();
    if let Some(judged) = app.judged() {
        let doubts = judged.survey.doubts.len();
        if doubts > 0 {
            lines.push(vec![("Doubts: data that is probably a mistake. They change no verdict.".to_owned(), theme.strong())]);
            for doubt in 0..doubts {
                lines.extend(item(&theme.text(&doubt_words(judged, doubt)), width));
            }
            lines.push(Vec::new());
        }
        lines.extend(paragraph("Not judged by this program, whatever the verdicts say:", width, 0, theme.strong()));
        for sentence in &app.scene.not_checked {
            lines.extend(item(&theme.text(sentence), width));
        }
        lines.push(Vec::new());
    }
    let caution = "All of it is computed from data that people typed. It replaces no risk assessment, no safeguard, no trial at \
                   reduced speed and no judgement of a qualified person; local codes and the arm maker's documents come first.";
    lines.extend(paragraph(caution, width, 0, Style::new()));
    lines
}

fn item(text: &str, width: usize) -> Vec<Line> {
    let mut lines = paragraph(text, width, 2, Style::new());
    if let Some((first, _)) = lines.first_mut().and_then(|line| line.first_mut()) {
        first.replace_range(0..1, "-");
    }
    lines
}

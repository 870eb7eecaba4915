use unicode_width::UnicodeWidthStr;

use crate::review::{Bar, Explanation, Judged, Label, explain, wrap};

/// Columns of a paragraph's label with the gap behind it.
const LABEL: usize = 12;
/// Columns of a full bar.
const BAR: f64 = 24.0;

/// All findings in words, the worst first; empty for none.
pub(super) fn findings_text(judged: &Judged, width: usize) -> String {
    let told: Vec<String> =
        judged.survey.findings.iter().map(|finding| explanation_text(&explain(judged, finding), width)).collect();
    told.join("\n")
}

/// An explanation: its title, then its paragraphs with their labels hanging out.
pub(super) fn explanation_text(told: &Explanation, width: usize) -> String {
    let mut lines = wrap(&told.title, width);
    for paragraph in &told.paragraphs {
        // On the narrowest terminals a hanging label would leave too little beside it.
        if width < 60 {
            lines.push(paragraph.label.words().to_owned());
            lines.extend(wrap(&paragraph.text, width - 2).into_iter().map(|line| format!("  {line}")));
            lines.extend(bars(&paragraph.bars, width - 2).into_iter().map(|line| format!("  {line}")));
            continue;
        }
        let label = |first: bool, label: Label| if first { label.words() } else { "" };
        let text = wrap(&paragraph.text, width - LABEL).into_iter().chain(bars(&paragraph.bars, width - LABEL));
        lines.extend(text.enumerate().map(|(k, line)| format!("{:LABEL$}{line}", label(k == 0, paragraph.label))));
    }
    lines.join("\n") + "\n"
}

/// Shares of a sum, a line each: name, figure, and a bar where there is room for one.
fn bars(bars: &[Bar], width: usize) -> Vec<String> {
    let names = bars.iter().map(|bar| bar.name.width()).max().unwrap_or(0);
    let figures = bars.iter().map(|bar| bar.figure.width()).max().unwrap_or(0);
    bars.iter()
        .map(|bar| {
            let pad = |text: &str, columns: usize| " ".repeat(columns.saturating_sub(text.width()));
            let drawn = "#".repeat((bar.share.abs() * BAR).round().min(2.0 * BAR) as usize);
            let line = format!("{}{}  {}{}", bar.name, pad(&bar.name, names), pad(&bar.figure, figures), bar.figure);
            let whole = format!("{line}  {drawn}");
            if whole.width() <= width { whole.trim_end().to_owned() } else { line }
        })
        .collect()
}

use unicode_width::UnicodeWidthStr;

use super::app::App;
use super::jog;
use super::sheet::{Sheet, fit, wrap};
use crate::checks::Verdict;

/// Stands wherever a verdict stands: the program moves nothing.
const NO_ARM: &str = "no arm connected";

/// A recipe's name is not cut shorter than this.
const SHORTEST_NAME: usize = 6;

/// Draws the sentence on the whole recipe, and that no arm is connected.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let theme = app.theme;
    if let Some(jog) = &app.jog {
        for (y, line) in wrap(&jog::headline(app, jog), sheet.width()).iter().enumerate() {
            sheet.put(0, y, line, theme.strong());
        }
        return;
    }
    let mut sentence = match (&app.scene.headline, app.progress) {
        (Some((told, _)), None) => told.clone(),
        (Some((told, _)), Some(progress)) => format!("OLD, checking {} of {}: {told}", progress.done, progress.of),
        (None, Some(progress)) => format!("{}: checking {} of {}", app.recipe().name, progress.done, progress.of),
        (None, None) => app.recipe().name.clone(),
    };
    let two_rows = sheet.height() > 1;
    let told_beside = !two_rows && sheet.width() > NO_ARM.width() + 24;
    let left = if told_beside { sheet.width() - NO_ARM.width() - 1 } else { sheet.width() };
    // The doubts stand in the list too, so the verdicts go before them where both don't fit.
    let doubts = match app.judged().map_or(0, |judged| judged.survey.doubts.len()) {
        0 => String::new(),
        1 => "; 1 doubt".to_owned(),
        count => format!("; {count} doubts"),
    };
    // What is not saved goes before the doubts, which stand in the list too.
    let unsaved = if app.history.is_unsaved() { "; not saved" } else { "" };
    let whole = format!("{doubts}{unsaved}");
    if let Some(more) = [whole.as_str(), unsaved].into_iter().find(|more| two_rows || sentence.width() + more.width() <= left) {
        sentence += more;
    } else if let Some((name, rest)) = sentence.split_once(": NOT READY").or_else(|| sentence.split_once(": READY")) {
        // That something is not saved is never left out: a long name is cut before.
        let rest = &sentence[sentence.len() - rest.len()..];
        let head = sentence[name.len()..sentence.len() - rest.len()].to_owned();
        let room = left.saturating_sub(head.width() + rest.width() + unsaved.width());
        sentence = format!("{}{head}{rest}{unsaved}", fit(name, room.max(SHORTEST_NAME), theme));
    }
    let (sentence, more) = if two_rows {
        let mut lines = wrap(&sentence, left).into_iter();
        (lines.next().unwrap_or_default(), lines.collect::<Vec<_>>().join(" "))
    } else {
        (fit(&sentence, left, theme), String::new())
    };
    sheet.put(0, 0, &sentence, theme.strong());
    // The mark in the sentence: reversed, never coloured alone, and green for nothing.
    if let Some(at) = sentence.find("NOT READY") {
        let worst = app.scene.headline.as_ref().map_or(Verdict::Unproven, |(_, worst)| *worst);
        sheet.tint(sentence[..at].width(), 0, "NOT READY".width(), theme.verdict(worst));
    }
    if told_beside {
        sheet.put_before(sheet.width(), 0, NO_ARM, theme.strong());
    } else {
        sheet.put(0, 1, &fit(&more, sheet.width().saturating_sub(NO_ARM.width() + 1), theme), theme.strong());
        sheet.put_before(sheet.width(), 1, NO_ARM, theme.strong());
    }
}

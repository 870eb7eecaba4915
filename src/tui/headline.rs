use unicode_width::UnicodeWidthStr;

use crate::checks::Verdict;
use crate::review::headline;

use super::app::App;
use super::sheet::{Sheet, fit};

/// Stands wherever a verdict stands: the program moves nothing.
const NO_ARM: &str = "no arm connected";

/// Draws the sentence on the whole recipe, and that no arm is connected.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let theme = app.theme;
    let mut sentence = match (app.judged(), app.progress) {
        (Some(judged), None) => headline(judged),
        (Some(judged), Some(progress)) => {
            format!("{} - OLD, checking {} of {}", headline(judged), progress.done, progress.of)
        }
        (None, Some(progress)) => format!("{}: checking {} of {}", app.recipe.name, progress.done, progress.of),
        (None, None) => app.recipe.name.clone(),
    };
    if let Some(judged) = app.judged() {
        sentence += &match judged.survey.doubts.len() {
            0 => String::new(),
            1 => ", 1 doubt".to_owned(),
            count => format!(", {count} doubts"),
        };
    }
    let two_rows = sheet.height() > 1;
    let told_beside = !two_rows && sheet.width() > NO_ARM.width() + 24;
    let left = if told_beside { sheet.width() - NO_ARM.width() - 2 } else { sheet.width() };
    let sentence = fit(&sentence, left, theme);
    sheet.put(0, 0, &sentence, theme.strong());
    // The mark in the sentence: reversed, never coloured alone, and green for nothing.
    if let Some(at) = sentence.find("NOT READY") {
        let worst = app.judged().map_or(Verdict::Unproven, |judged| judged.survey.verdict());
        sheet.tint(sentence[..at].width(), 0, "NOT READY".width(), theme.verdict(worst));
    }
    if told_beside {
        sheet.put_before(sheet.width(), 0, NO_ARM, theme.strong());
    } else {
        sheet.put(0, 1, NO_ARM, theme.strong());
    }
}

use ratatui::style::Style;

use crate::checks::SegmentSurvey;
use crate::review::bounds_text;

use super::app::App;
use super::page::{Line, paragraph};

/// The title of the page.
pub fn title(app: &App) -> String {
    let label = app.judged().and_then(|judged| judged.plan.segments.get(app.segment())).map(|segment| segment.label());
    format!("Proved of segment {}", label.unwrap_or_default())
}

/// What was seen and what is proved of the cursor's segment, in lines of at most `width` columns.
pub fn lines(app: &App, width: usize) -> Vec<Line> {
    let Some(judged) = app.judged() else { return Vec::new() };
    let Some(known) = judged.survey.segments.get(app.segment()) else { return Vec::new() };
    let closer = closer(app);
    let survey = closer.unwrap_or(known);
    let how = match closer {
        Some(survey) => format!("Proved closer, by {} postures:", survey.tally.postures),
        None => format!("Proved by {} postures; closer bounds are being sought:", known.tally.postures),
    };
    let mut lines = paragraph(&how, width, 0, app.theme.strong());
    for told in bounds_text(judged, survey) {
        lines.extend(paragraph(&app.theme.text(&told), width, 2, Style::new()));
    }
    lines
}

/// The cursor's segment with its bounds proved closer, if that is of the survey shown.
fn closer(app: &App) -> Option<&SegmentSurvey> {
    let (survey, closer) = app.closer.as_ref()?;
    let shown = &app.judged()?.survey;
    (std::sync::Arc::ptr_eq(survey, shown) && closer.segment == app.segment()).then_some(closer)
}

use std::sync::Arc;

use crate::checks::{Survey, Verdict};
use crate::motion::Cursor;
use crate::review::drawn::{Bands, Curve, Gauges, Sketch, Subject};
use crate::review::{Explanation, Label, Paragraph, explain, headline, no_finding, not_checked};

use super::app::App;
use super::filter::{Shown, wanted};
use super::layout::Layout;
use super::remedies;
use super::rows::Rows;

/// A scene is what the panes draw, kept until what it was computed from changes. Drawing itself computes nothing.
#[derive(Debug, Default)]
pub struct Scene {
    /// One sentence on the whole, and the worst verdict.
    pub headline: Option<(String, Verdict)>,
    /// Rows of the list, all of them.
    pub rows: Rows,
    /// What the filter leaves of them, if one stands.
    pub shown: Option<Shown>,
    narrowed: Option<(Rows, usize)>,
    /// Cells of the ribbon.
    pub bands: Bands,
    /// The path of the TCP.
    pub sketch: Sketch,
    /// The arm at the cursor.
    pub gauges: Option<Gauges>,
    /// The chart's curve.
    pub curve: Curve,
    /// The explanation of what is selected.
    pub why: Option<Explanation>,
    /// What was not checked.
    pub not_checked: Vec<String>,
    survey: Option<Arc<Survey>>,
    width: Option<usize>,
    cursor: Option<Cursor>,
    subject: Option<Subject>,
    told: Option<(usize, Option<usize>, usize)>,
}

impl Scene {
    /// The rows that stand in the list: all, or those that the filter leaves.
    pub fn listed(&self) -> &Rows {
        self.narrowed.as_ref().map_or(&self.rows, |(rows, _)| rows)
    }

    /// Shows the arm elsewhere than at the cursor, until the next refresh.
    pub(super) fn stand_at(&mut self, gauges: Option<Gauges>) {
        self.gauges = gauges;
        self.cursor = None;
    }
}

/// Brings the scene up to what the app shows.
pub fn refresh(app: &mut App) {
    if app.scene.rows.is_empty() {
        app.scene.rows = Rows::of(app.taught(), None);
    }
    let Some(session) = &app.session else { return };
    let judged = session.judged();
    let subject = app.subject();
    let scene = &mut app.scene;
    if scene.survey.as_ref().is_none_or(|known| !Arc::ptr_eq(known, &judged.survey)) {
        *scene = Scene {
            headline: Some((headline(judged), judged.survey.verdict())),
            rows: Rows::of(&judged.recipe, Some(judged)),
            sketch: Sketch::of(judged),
            not_checked: not_checked(judged),
            survey: Some(Arc::clone(&judged.survey)),
            ..Scene::default()
        };
    }
    narrow(app);
    let Some(session) = &app.session else { return };
    let judged = session.judged();
    let scene = &mut app.scene;
    let width = Layout::ribbon_cells(app.area);
    if scene.width != Some(width) {
        scene.bands = Bands::of(judged, width);
        scene.width = Some(width);
    }
    if scene.cursor != Some(session.cursor()) {
        scene.gauges = Gauges::at(judged, session.cursor());
        scene.cursor = Some(session.cursor());
    }
    if scene.subject != Some(subject) {
        scene.curve = Curve::of(judged, subject);
        scene.subject = Some(subject);
    }
    let told = (session.cursor().segment, session.finding_number(), app.remedies.count());
    if scene.told == Some(told) {
        return;
    }
    let mut why = match session.finding() {
        Some(finding) => Some(explain(judged, finding)),
        None if told.0 < session.segments() => Some(no_finding(judged, told.0)),
        None => None,
    };
    if let Some(why) = &mut why {
        // In brief where it is seen at once, in full at the end.
        let brief = remedies::in_brief(app).map(|text| Paragraph { label: Label::Remedies, text, bars: Vec::new() });
        let after_what = why.paragraphs.len().min(1);
        why.paragraphs.splice(after_what..after_what, brief);
        why.paragraphs.extend(remedies::in_full(app));
    }
    let scene = &mut app.scene;
    scene.why = why;
    if scene.told.is_none_or(|(segment, finding, _)| (segment, finding) != (told.0, told.1)) {
        app.why_scroll = 0;
    }
    scene.told = Some(told);
}

/// Brings what the filter leaves of the list up to date.
fn narrow(app: &mut App) {
    let text = wanted(app).to_owned();
    let Some(session) = app.session.as_ref().filter(|_| !text.is_empty()) else {
        (app.scene.shown, app.scene.narrowed) = (None, None);
        return;
    };
    let (judged, here) = (session.judged(), session.cursor().segment);
    let is_known = app.scene.shown.as_ref().is_some_and(|shown| shown.text == text);
    if is_known && app.scene.narrowed.as_ref().is_some_and(|(_, segment)| *segment == here) {
        return;
    }
    let shown = app.scene.shown.take().filter(|_| is_known).unwrap_or_else(|| Shown::of(judged, &text));
    app.scene.narrowed = Some((app.scene.rows.narrowed(judged, &shown, here), here));
    app.scene.shown = Some(shown);
}

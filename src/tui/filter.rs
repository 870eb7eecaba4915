use std::collections::HashSet;

use crate::checks::Check;
use crate::program::Recipe;
use crate::review::{Judged, check_words};

use super::app::{App, Asking, Mode, Question};
use super::phrases::joint_word;
use super::update::follow_finding;

/// What a filter leaves of the list: the waypoints and segments that fit a text.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Shown {
    /// The text.
    pub text: String,
    segments: Vec<bool>,
    waypoints: Vec<bool>,
}

impl Shown {
    /// What fits a text: the part of a waypoint's name, the beginning of a segment's verdict, or the part of the name of a check or a
    /// joint that it has a finding of or is nearest to its limit in. Big and small letters count the same.
    pub fn of(judged: &Judged, text: &str) -> Self {
        let wanted = text.to_lowercase();
        let has = |name: &str| name.to_lowercase().contains(&wanted);
        let named: Vec<bool> = judged.recipe.waypoints.iter().map(|waypoint| has(&waypoint.name)).collect();
        let is_meant = |check: Check, joint: Option<usize>| has(check_words(check)) || has(joint_word(judged, joint));
        let mut waypoints = named.clone();
        let mut segments = Vec::with_capacity(judged.plan.segments.len());
        for (segment, survey) in judged.plan.segments.iter().zip(&judged.survey.segments) {
            let fits = named[segment.to]
                || survey.verdict.word().starts_with(&wanted)
                || survey.findings.iter().any(|finding| is_meant(finding.check, finding.joint))
                || survey.nearest().is_some_and(|(result, peak)| is_meant(result.check, peak.joint));
            waypoints[segment.to] |= fits;
            segments.push(fits);
        }
        Self { text: text.to_owned(), segments, waypoints }
    }

    /// Whether a segment (counted from 0) is shown.
    pub fn has(&self, segment: usize) -> bool {
        self.segments.get(segment).copied().unwrap_or(false)
    }

    /// Whether a waypoint (counted from 0) is shown.
    pub fn has_waypoint(&self, waypoint: usize) -> bool {
        self.waypoints.get(waypoint).copied().unwrap_or(false)
    }

    /// How many waypoints are shown.
    pub fn count(&self) -> usize {
        self.waypoints.iter().filter(|shown| **shown).count()
    }

    /// How many waypoints are shown of how many: "3 of 14 shown".
    pub fn told(&self) -> String {
        format!("{} of {} shown", self.count(), self.waypoints.len())
    }
}

/// The text that the list is narrowed to now: the one that is being typed, else the one that stands. Empty for none.
pub fn wanted(app: &App) -> &str {
    match &app.mode {
        Mode::Asking(Asking { question: Question::Find, typed }) => typed.trim(),
        _ => &app.filter,
    }
}

/// Whether a segment (counted from 0) stands in the list.
pub(super) fn shows(app: &App, segment: usize) -> bool {
    app.scene.shown.as_ref().is_none_or(|shown| shown.has(segment))
}

/// Whether a waypoint (counted from 0) stands in the list.
pub(super) fn shows_waypoint(app: &App, waypoint: usize) -> bool {
    app.scene.shown.as_ref().is_none_or(|shown| shown.has_waypoint(waypoint))
}

/// How many findings are on segments that the filter hides.
pub(super) fn hidden_findings(app: &App) -> usize {
    let Some(judged) = app.judged() else { return 0 };
    judged.survey.findings.iter().filter(|finding| !shows(app, finding.segment)).count()
}

/// Asks what to narrow the list to; what stands can be changed.
pub(super) fn ask(app: &mut App) {
    app.mode = Mode::Asking(Asking { question: Question::Find, typed: app.filter.clone() });
}

/// Narrows the list to what fits a text, and goes to the next segment that does. An empty text shows all.
///
/// # Errors
/// Where nothing fits; then the filter stays as it was.
pub(super) fn take(app: &mut App, text: &str) -> Result<(), String> {
    if text.is_empty() {
        lift(app);
        return Ok(());
    }
    let session = app.session.as_mut().ok_or("not checked yet")?;
    let shown = Shown::of(session.judged(), text);
    if shown.count() == 0 {
        return Err(format!("nothing fits \"{text}\": no waypoint's name, verdict, check or joint"));
    }
    let (here, count) = (session.cursor().segment, session.segments());
    if !shown.has(here) {
        match (0..count).map(|on| (here + on) % count).find(|&segment| shown.has(segment)) {
            Some(segment) => session.go_to_segment(segment),
            None => session.go_to_time(0.0),
        }
        follow_finding(app);
    }
    text.clone_into(&mut app.filter);
    app.message = Some(format!("{}; Esc shows all again", shown.told()));
    Ok(())
}

/// Shows all rows again.
pub(super) fn lift(app: &mut App) {
    if !app.filter.is_empty() {
        app.filter.clear();
        app.message = Some("all are shown again".to_owned());
    }
}

/// The next segment that is shown, some rows on (or back) from the cursor's; none if there is none in that direction.
pub(super) fn by_rows(app: &App, rows: isize) -> Option<usize> {
    let session = app.session.as_ref()?;
    let here = session.cursor().segment;
    let steps = rows.unsigned_abs().saturating_sub(1);
    if rows < 0 {
        (0..here).rev().filter(|&segment| shows(app, segment)).nth(steps)
    } else {
        (here + 1..session.segments()).filter(|&segment| shows(app, segment)).nth(steps)
    }
}

/// The next waypoint that is shown on from one of them, or back; that one itself if there is none. `count` is how many there are.
pub(super) fn next_waypoint(app: &App, from: usize, count: usize, back: bool) -> usize {
    let shown = |index: &usize| shows_waypoint(app, *index);
    let next = if back { (0..from).rev().find(shown) } else { (from + 1..count).find(shown) };
    next.unwrap_or(from)
}

/// Tells of waypoints that came in since `before` and that the filter hides.
pub(super) fn tell_of_new(app: &mut App, before: &Recipe) {
    let (Some(shown), Some(judged)) = (&app.scene.shown, app.judged()) else { return };
    let known: HashSet<&str> = before.waypoints.iter().map(|waypoint| waypoint.name.as_str()).collect();
    let is_new = |index: &usize| !known.contains(judged.recipe.waypoints[*index].name.as_str());
    let hidden = (0..judged.recipe.waypoints.len()).filter(is_new).filter(|index| !shown.has_waypoint(*index)).count();
    if hidden > 0 {
        let told = app.message.take().map_or_else(String::new, |told| format!("{told}; "));
        app.message = Some(format!("{told}hidden by the filter, Esc shows all"));
    }
}

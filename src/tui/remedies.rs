use std::sync::Arc;

use ratatui::style::Style;

use crate::checks::{Finding, Survey};
use crate::review::{Judged, Remedy, RemedyKind, Told, Tried, kinds_for, remedies_text, remedy_text, remedy_title, stopped_text};
use crate::units::Seconds;

use super::action::Action;
use super::app::{App, Mode};
use super::edits;
use super::page::{Line, paragraph};
use super::sheet::{Sheet, fit};

/// What is known of the remedies of the finding that is looked at.
#[derive(Debug, Default)]
pub struct Remedies {
    /// Of which survey and finding.
    of: Option<(Arc<Survey>, Finding)>,
    /// Those found, the least change first.
    found: Vec<Remedy>,
    /// What was tried without success.
    tried: Vec<Tried>,
    /// Kinds tried, and of how many; none when the search is done.
    progress: Option<[usize; 2]>,
    /// Of how many kinds the search was when somebody stopped it.
    stopped: Option<usize>,
    /// Whether the search is to be stopped, which the screen can't do by itself.
    halt: bool,
    /// Which one is chosen, counted from 0.
    chosen: usize,
}

impl Remedies {
    /// Whether they are of this finding of this survey.
    fn are_of(&self, judged: &Judged, finding: &Finding) -> bool {
        self.of.as_ref().is_some_and(|(survey, of)| Arc::ptr_eq(survey, &judged.survey) && of == finding)
    }

    /// How much is known, for whoever must notice a change.
    pub fn count(&self) -> usize {
        self.found.len() + self.tried.len() + usize::from(self.progress.is_none()) + usize::from(self.stopped.is_some())
    }

    /// Whether a search runs.
    pub fn is_running(&self) -> bool {
        self.progress.is_some()
    }

    /// Kinds tried and of how many, where the search was stopped before the last.
    pub fn stopped(&self) -> Option<[usize; 2]> {
        let mut kinds: Vec<RemedyKind> =
            self.found.iter().map(Remedy::kind).chain(self.tried.iter().map(|tried| tried.kind)).collect();
        kinds.sort_unstable();
        kinds.dedup();
        self.stopped.map(|of| [kinds.len(), of]).filter(|[tried, of]| tried < of)
    }

    /// Stops the search; what was found stays.
    fn stop(&mut self) {
        if let Some([_, of]) = self.progress.take() {
            self.stopped = Some(of);
            self.halt = true;
        }
    }
}

/// Whether somebody asked since the last time that the search be stopped.
pub fn is_to_stop(app: &mut App) -> bool {
    std::mem::take(&mut app.remedies.halt)
}

/// The finding whose remedies are to be sought next, if the known ones are of another. Only what is checked to the end is worth it.
pub fn wanted(app: &mut App) -> Option<(Judged, Finding)> {
    if app.unchecked || app.progress.is_some() {
        return None;
    }
    let session = app.session.as_ref()?;
    let (judged, finding) = (session.judged(), session.finding()?);
    if app.remedies.are_of(judged, finding) {
        return None;
    }
    let (judged, finding) = (judged.clone(), *finding);
    let progress = Some([0, kinds_for(&judged, &finding).len()]);
    app.remedies = Remedies { of: Some((Arc::clone(&judged.survey), finding)), progress, ..Remedies::default() };
    Some((judged, finding))
}

/// Takes in what a search tells; none when it has ended.
pub(super) fn hear(app: &mut App, told: Option<Told>, progress: Option<[usize; 2]>) {
    let known = &mut app.remedies;
    // What was found before the search took notice of being stopped counts as well.
    known.progress = progress.filter(|_| known.stopped.is_none());
    match told {
        Some(Told::Found(remedy)) => {
            let at = known.found.partition_point(|other| other.order(&remedy).is_lt());
            // The chosen one stays chosen.
            known.chosen +=
                usize::from(at <= known.chosen && known.chosen < known.found.len() && !known.found.is_empty() && at > 0);
            known.found.insert(at, *remedy);
        }
        Some(Told::Tried(tried)) => known.tried.push(tried),
        None => {}
    }
}

/// Handles an action while the list of remedies is open.
pub(super) fn choose(app: &mut App, action: &Action) {
    let last = app.remedies.found.len().saturating_sub(1);
    let chosen = &mut app.remedies.chosen;
    match action {
        Action::Up => *chosen = chosen.saturating_sub(1),
        Action::Down => *chosen = (*chosen + 1).min(last),
        Action::ToStart => *chosen = 0,
        Action::ToEnd => *chosen = last,
        Action::Back if app.remedies.is_running() => app.remedies.stop(),
        // Nothing known any more, so all is sought again.
        Action::Remedies if app.remedies.stopped().is_some() => app.remedies = Remedies::default(),
        Action::Back | Action::Remedies => app.mode = Mode::Panes,
        Action::Enter => apply(app),
        _ => {}
    }
}

fn apply(app: &mut App) {
    let Some(remedy) = app.remedies.found.get(app.remedies.chosen) else {
        app.mode = Mode::Panes;
        return;
    };
    let Some(edit) = remedy.edit.clone() else {
        app.message = Some("that one is for information: it can't be made in the program".to_owned());
        return;
    };
    app.mode = Mode::Panes;
    edits::make(app, &edit);
}

/// The titles of the remedies that the program can make, for the explanation; none while nothing is known.
pub fn in_brief(app: &App) -> Option<String> {
    let session = app.session.as_ref()?;
    let (judged, finding) = (session.judged(), session.finding()?);
    if !app.remedies.are_of(judged, finding) {
        return None;
    }
    let titles: Vec<String> =
        app.remedies.found.iter().filter(|remedy| remedy.edit.is_some()).map(|remedy| remedy_title(judged, remedy)).collect();
    let trying = match (app.remedies.is_running(), app.remedies.stopped()) {
        (true, _) => " Others are being tried.".to_owned(),
        (false, Some(part)) => format!(" {}", stopped_text(part)),
        (false, None) => String::new(),
    };
    Some(match titles.len() {
        0 if app.remedies.is_running() => "being tried ...".to_owned(),
        0 if app.remedies.stopped().is_some() => format!("none found so far.{trying}"),
        0 => "no change of the program that was tried settles it; o tells how near each came.".to_owned(),
        _ => format!("{}. o shows them.{trying}", titles.join("; ")),
    })
}

/// All that is known of them, a paragraph each.
pub fn in_full(app: &App) -> Vec<crate::review::Paragraph> {
    let Some(session) = &app.session else { return Vec::new() };
    let (judged, Some(finding)) = (session.judged(), session.finding()) else { return Vec::new() };
    if !app.remedies.are_of(judged, finding) || app.remedies.progress.is_some() {
        return Vec::new();
    }
    told(app, judged, finding)
}

/// What is known of them so far, and whether that is all.
fn told(app: &App, judged: &Judged, finding: &Finding) -> Vec<crate::review::Paragraph> {
    let known = &app.remedies;
    let part = known.stopped().map(|part| crate::review::Paragraph {
        label: crate::review::Label::Remedies,
        text: stopped_text(part),
        bars: Vec::new(),
    });
    let nothing_yet = part.is_some() && known.found.is_empty() && known.tried.is_empty();
    let mut told = if nothing_yet { Vec::new() } else { remedies_text(judged, finding, &known.found, &known.tried) };
    told.extend(part);
    told
}

/// Draws the list of remedies with the chosen one told below it.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let theme = app.theme;
    let Some(session) = &app.session else { return };
    let (judged, Some(finding)) = (session.judged(), session.finding()) else {
        sheet.rule(0, "Remedies: no finding is selected", true);
        return;
    };
    let known = &app.remedies;
    let number = judged.plan.segments[finding.segment].label();
    let progress = match (known.progress, known.stopped()) {
        (Some([done, of]), _) => format!(", trying {} of {of}", (done + 1).min(of.max(1))),
        (None, Some([tried, of])) => format!(", stopped after {tried} of {of}"),
        (None, None) => String::new(),
    };
    sheet.rule(0, &format!("Remedies for segment {number}{progress}"), true);
    let mut y = 1;
    let title = app.scene.why.as_ref().map_or(String::new(), |why| why.title.clone());
    sheet.put(1, y, &fit(&theme.text(&title), sheet.width().saturating_sub(2), theme), theme.strong());
    y += 1;
    let rows = known.found.len().min((sheet.height().saturating_sub(y + 8)).max(3));
    let first = (known.chosen + 1).saturating_sub(rows);
    for (index, remedy) in known.found.iter().enumerate().skip(first).take(rows) {
        row(sheet, y, judged, remedy, index == known.chosen);
        y += 1;
    }
    y += 1;
    for line in detail(app, judged, finding, sheet.width().saturating_sub(2).min(WIDEST)) {
        let mut x = 1;
        for (text, style) in &line {
            x = sheet.put(x, y, text, *style);
        }
        y += 1;
    }
}

/// Lines are read easily up to this width.
const WIDEST: usize = 100;
/// Columns for rooms before and after and for what it costs.
const FIGURES: usize = 32;

fn row(sheet: &mut Sheet, y: usize, judged: &Judged, remedy: &Remedy, chosen: bool) {
    let theme = sheet.theme();
    let figures = sheet.width() > FIGURES + 30;
    let end = if figures { sheet.width() - FIGURES } else { sheet.width() };
    let title = theme.text(&remedy_title(judged, remedy));
    sheet.put(1, y, if chosen { theme.here() } else { " " }, theme.strong());
    sheet.put(3, y, &fit(&title, end.saturating_sub(4), theme), Style::new());
    if figures {
        let rooms = match remedy.room {
            [Some(before), Some(after)] => format!("room {before} {} {after}", theme.pick("→", "to")),
            _ => String::new(),
        };
        sheet.put(end, y, &rooms, Style::new());
        let costs = if remedy.edit.is_none() { "information".to_owned() } else { costs(remedy.costs) };
        sheet.put_before(sheet.width() - 1, y, &costs, Style::new());
    }
    if chosen {
        sheet.tint(1, y, sheet.width().saturating_sub(2), theme.selected());
    }
}

/// What it costs on the cycle: `+0.73 s`.
fn costs(by: Seconds) -> String {
    // Costs are rounded up and savings down, as the words do.
    let size = Seconds::s(by.as_s().abs()).measure();
    if by.as_s() < -0.005 { format!("-{}", size.text_down(2)) } else { format!("+{}", size.text_up(2)) }
}

fn detail(app: &App, judged: &Judged, finding: &Finding, width: usize) -> Vec<Line> {
    let theme = app.theme;
    let known = &app.remedies;
    let mut lines = Vec::new();
    if let Some(remedy) = known.found.get(known.chosen) {
        lines.extend(paragraph(&theme.text(&remedy_text(judged, finding, remedy)), width, 0, Style::new()));
        let hint = if remedy.edit.is_some() {
            "Enter makes this change; u undoes it. Each was judged and proved again with the whole program."
        } else {
            "For information: not a change of the program."
        };
        lines.extend(paragraph(hint, width, 0, theme.strong()));
    }
    if known.progress.is_none() {
        for last in told(app, judged, finding).iter().skip(known.found.len()) {
            lines.push(Vec::new());
            lines.extend(paragraph(&theme.text(&last.text), width, 0, Style::new()));
        }
    }
    if lines.is_empty() {
        lines.extend(paragraph("Changes are being tried.", width, 0, Style::new()));
    }
    lines
}

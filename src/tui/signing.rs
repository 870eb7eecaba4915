use ratatui::style::Style;

use std::sync::Arc;

use crate::review::{Answer, Around, Date, FirstRun, Person, Question, Reason, Role, SignOff, Sources, explain};

use super::action::Action;
use super::app::{App, Asking, FileWish, Mode, Question as Asked, Wish};
use super::file::question;
use super::page::paragraph;
use super::sheet::{Sheet, fit};

/// A sign-off while it is worked on.
#[derive(Debug, Clone)]
pub struct Signing {
    /// What is to be answered.
    pub sign_off: SignOff,
    /// What was read for it.
    pub sources: Sources,
    /// The plan of the first run.
    pub run: Arc<FirstRun>,
    /// The same in words, a sentence each.
    pub plan: Vec<String>,
    /// Who answers.
    pub name: String,
    /// The fingerprint of the key that signs; none for a name only.
    pub key: Option<String>,
    /// As what.
    pub role: Role,
    /// What they want to say.
    pub note: String,
    /// Today.
    pub date: Date,
    /// Which row is chosen.
    pub chosen: usize,
}

/// What a row is about.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Row {
    /// A doubt.
    Doubt(usize),
    /// A finding.
    Finding(usize),
    /// A datum.
    Datum(usize),
    /// The plan of the first run.
    Plan,
    /// Who signs.
    Name,
    /// With which key.
    Key,
    /// As what.
    Role,
    /// A note.
    Note,
    /// Signing itself.
    Sign,
}

/// What a person does with a row.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Decision {
    /// Ask for the reason to accept a finding.
    Accept(usize),
    /// Ask for the reason to refuse it.
    Refuse(usize),
}

impl Signing {
    /// Its rows: doubts on top.
    pub fn rows(&self) -> Vec<Row> {
        let doubts = (0..self.sign_off.doubts().len()).map(Row::Doubt);
        let findings = (0..self.sign_off.questions().len()).map(Row::Finding);
        let data = (0..self.sign_off.data().len()).map(Row::Datum);
        doubts.chain(findings).chain(data).chain([Row::Plan, Row::Name, Row::Key, Row::Role, Row::Note, Row::Sign]).collect()
    }

    /// The person as they would stand under the record.
    pub fn person(&self) -> Person {
        Person { name: self.name.clone(), role: self.role, date: self.date, note: self.note.clone(), key: self.key.clone() }
    }

    fn reason(&self, words: &str) -> Reason {
        Reason { words: words.to_owned(), by: self.name.clone(), on: self.date }
    }
}

/// Whether it may be signed as things stand on the screen.
pub fn hindrances(app: &App, signing: &Signing) -> Vec<String> {
    let around =
        Around { unsaved: app.history.is_unsaved(), checking: app.unchecked || app.progress.is_some(), data_one_by_one: true };
    let mut told: Vec<String> =
        signing.sign_off.can_sign(around).err().unwrap_or_default().iter().map(ToString::to_string).collect();
    if signing.name.trim().is_empty() {
        told.push("nobody stands for it yet: the name is missing".to_owned());
    }
    told
}

/// Handles an action while a sign-off is open.
pub(super) fn handle(app: &mut App, action: &Action) {
    let Some(signing) = &mut app.signing else {
        app.mode = Mode::Panes;
        return;
    };
    let rows = signing.rows();
    let last = rows.len() - 1;
    match action {
        Action::Back => {
            app.mode = Mode::Panes;
        }
        Action::Up => signing.chosen = signing.chosen.saturating_sub(1),
        Action::Down => signing.chosen = (signing.chosen + 1).min(last),
        Action::LeapBack => signing.chosen = signing.chosen.saturating_sub(10),
        Action::LeapOn => signing.chosen = (signing.chosen + 10).min(last),
        Action::ToStart => signing.chosen = 0,
        Action::ToEnd => signing.chosen = last,
        Action::Enter => enter(app, rows[app.signing.as_ref().map_or(0, |signing| signing.chosen).min(last)]),
        _ => {}
    }
}

fn enter(app: &mut App, row: Row) {
    let Some(signing) = &mut app.signing else { return };
    let ask = |app: &mut App, asked: Asked, typed: String| app.mode = Mode::Asking(Asking { question: asked, typed });
    let unnamed = signing.name.trim().is_empty();
    match row {
        // A reason belongs to somebody.
        Row::Doubt(_) | Row::Finding(_) if unnamed => {
            app.message = Some("type your name first: an answer belongs to somebody".to_owned());
            ask(app, Asked::SignName, String::new());
        }
        Row::Doubt(index) => ask(app, Asked::Settle(index), String::new()),
        Row::Finding(index) => {
            let says = signing.sign_off.questions()[index].says.clone();
            app.mode = Mode::Menu(question(
                says,
                vec![
                    ("accept it with a reason".to_owned(), Action::Decide(Decision::Accept(index))),
                    ("refuse it with a reason".to_owned(), Action::Decide(Decision::Refuse(index))),
                    ("back".to_owned(), Action::SignOff),
                ],
            ));
        }
        Row::Datum(index) => {
            let confirmed = signing.sign_off.data()[index].confirmed;
            // The index is that of a row; it is there.
            let _ = signing.sign_off.confirm(index, !confirmed);
        }
        Row::Name => {
            let typed = signing.name.clone();
            ask(app, Asked::SignName, typed);
        }
        Row::Plan => {}
        Row::Key => ask(app, Asked::KeyFile, String::new()),
        Row::Role => signing.role = if signing.role == Role::Prepared { Role::Checked } else { Role::Prepared },
        Row::Note => {
            let typed = signing.note.clone();
            ask(app, Asked::SignNote, typed);
        }
        Row::Sign => {
            let signing = signing.clone();
            match hindrances(app, &signing).as_slice() {
                [] => {
                    app.mode = Mode::Menu(question(
                        format!("{} {} on {}", signing.role.words(), signing.name, signing.date),
                        vec![
                            ("not yet".to_owned(), Action::SignOff),
                            ("write the record".to_owned(), Action::File(FileWish::WriteRecord)),
                        ],
                    ));
                }
                [first, more @ ..] => {
                    let more = if more.is_empty() { String::new() } else { format!(" (and {} more)", more.len()) };
                    app.message = Some(format!("not signed: {first}{more}"));
                }
            }
        }
    }
}

/// Asks for the reason of a decision.
pub(super) fn decide(app: &mut App, decision: &Decision) {
    let asked = match decision {
        Decision::Accept(index) => Asked::AcceptBecause(*index),
        Decision::Refuse(index) => Asked::RefuseBecause(*index),
    };
    app.mode = Mode::Asking(Asking { question: asked, typed: String::new() });
}

/// Takes what was typed in answer to a question of a sign-off.
///
/// # Errors
/// Why it is not taken.
pub(super) fn answered(app: &mut App, asked: Asked, typed: &str) -> Result<(), String> {
    app.mode = Mode::SignOff;
    let Some(signing) = &mut app.signing else { return Ok(()) };
    let reason = signing.reason(typed);
    let taken = match asked {
        Asked::SignName => {
            typed.clone_into(&mut signing.name);
            Ok(())
        }
        Asked::SignNote => {
            typed.clone_into(&mut signing.note);
            Ok(())
        }
        Asked::Settle(index) => signing.sign_off.settle(index, reason),
        Asked::AcceptBecause(index) => signing.sign_off.accept(index, reason),
        Asked::RefuseBecause(index) => signing.sign_off.refuse(index, reason),
        _ => Ok(()),
    };
    taken.map_err(|why| why.to_string())
}

/// Opens the sign-off, or goes back to it.
pub(super) fn open(app: &mut App) {
    if app.signing.is_some() {
        app.mode = Mode::SignOff;
    } else if app.history.is_unsaved() {
        app.message = Some("save first: what is signed stands in a file".to_owned());
    } else if app.unchecked || app.progress.is_some() || app.session.is_none() {
        app.message = Some("wait until the check is done".to_owned());
    } else {
        app.wish = Wish::File(FileWish::SignOff);
    }
}

/// Lines below the rows for what is chosen.
const BELOW: usize = 8;

/// Draws what has to be answered, and below it what is chosen.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let Some(signing) = &app.signing else { return };
    let theme = sheet.theme();
    let rows = signing.rows();
    let left = hindrances(app, signing).len();
    let title = if left == 0 { "Sign-off: nothing stands in the way".to_owned() } else { format!("Sign-off: {left} to answer") };
    sheet.rule(0, &title, true);
    let height = sheet.height().saturating_sub(1 + BELOW).max(1);
    let first = (signing.chosen + 2).saturating_sub(height).min(rows.len().saturating_sub(height));
    for (y, (index, row)) in rows.iter().enumerate().skip(first).take(height).enumerate() {
        let (mark, text) = told(signing, *row);
        let chosen = index == signing.chosen;
        sheet.put(1, y + 1, if chosen { theme.here() } else { " " }, theme.strong());
        sheet.put(3, y + 1, mark, theme.strong());
        sheet.put(7, y + 1, &fit(&theme.text(&text), sheet.width().saturating_sub(8), theme), Style::new());
        if chosen {
            sheet.tint(1, y + 1, sheet.width().saturating_sub(2), theme.selected());
        }
    }
    let told = detail(app, signing, rows[signing.chosen.min(rows.len() - 1)], sheet.width().saturating_sub(2));
    for (y, line) in (height + 2..sheet.height()).zip(told) {
        sheet.put(1, y, &line, Style::new());
    }
}

/// A row's mark and text.
fn told(signing: &Signing, row: Row) -> (&'static str, String) {
    let done = |done: bool| if done { "[x]" } else { "[ ]" };
    match row {
        Row::Doubt(index) => {
            let doubt = &signing.sign_off.doubts()[index];
            (done(doubt.settled.is_some()), format!("doubt: {}", doubt.says))
        }
        Row::Finding(index) => {
            let asked = &signing.sign_off.questions()[index];
            let mark = match asked.answer {
                Answer::Open => "[ ]",
                Answer::Accepted(_) => "[x]",
                Answer::Refused(_) => "[-]",
            };
            (mark, format!("to \"{}\": {}", asked.matter.to, asked.says))
        }
        Row::Datum(index) => {
            let datum = &signing.sign_off.data()[index];
            (done(datum.confirmed), format!("{}: {}", datum.of, datum.value))
        }
        Row::Plan => {
            ("   ", format!("first run: clear up to {}", signing.run.highest.map_or("no override".to_owned(), |at| at.to_string())))
        }
        Row::Name => ("   ", format!("name: {}", if signing.name.is_empty() { "-" } else { &signing.name })),
        Row::Key => ("   ", format!("key: {}", signing.key.as_deref().unwrap_or("none, a name only"))),
        Row::Role => ("   ", format!("as: {}", signing.role.words())),
        Row::Note => ("   ", format!("note: {}", if signing.note.is_empty() { "-" } else { &signing.note })),
        Row::Sign => ("   ", "sign: write the record".to_owned()),
    }
}

fn detail(app: &App, signing: &Signing, row: Row, width: usize) -> Vec<String> {
    let answer = |asked: &Question| match &asked.answer {
        Answer::Open if !asked.may_be_accepted() => "No reason is enough for this: it must be changed or proved.".to_owned(),
        Answer::Open => "Enter accepts or refuses it, with a reason.".to_owned(),
        Answer::Accepted(reason) => format!("Accepted by {} on {}: {}", reason.by, reason.on, reason.words),
        Answer::Refused(reason) => format!("Refused by {} on {}: {}", reason.by, reason.on, reason.words),
    };
    let text = match row {
        Row::Doubt(index) => {
            let doubt = &signing.sign_off.doubts()[index];
            let found = doubt.settled.as_ref().map_or("Enter says what you found.".to_owned(), |reason| {
                format!("Looked into by {} on {}: {}", reason.by, reason.on, reason.words)
            });
            format!("{} {found}", doubt.says)
        }
        Row::Finding(index) => {
            let asked = &signing.sign_off.questions()[index];
            let told = app.judged().and_then(|judged| Some(explain(judged, judged.survey.findings.get(asked.finding)?)));
            let what = told.and_then(|told| told.paragraphs.first().map(|first| first.text.clone())).unwrap_or_default();
            format!("{} {what}", answer(asked))
        }
        Row::Datum(index) => {
            let datum = &signing.sign_off.data()[index];
            let by_itself =
                if datum.confirmed { "Confirmed." } else { "Enter confirms this one; there is no way to confirm several." };
            format!("{} {} ({}). {by_itself}", datum.of, datum.value, datum.at)
        }
        Row::Plan => signing.plan.join(" "),
        Row::Name => "Who stands for it.".to_owned(),
        Row::Key => {
            "Enter names your own SSH key file. Ed25519 and ECDSA P-256 sign here, others and public keys of agents through \
                     ssh-keygen. Without a key the record holds your name only, which anybody can type."
                .to_owned()
        }
        Row::Role => "Enter changes between prepared by and checked by.".to_owned(),
        Row::Note => "What is to be said with the name; may be empty.".to_owned(),
        Row::Sign => {
            let hindrances = hindrances(app, signing);
            let not_checked = app.scene.not_checked.len();
            if hindrances.is_empty() {
                format!(
                    "The record says what was judged and what was not ({not_checked} matters, c lists them); it replaces no risk \
                     assessment, no safeguard and no trial at reduced speed, and is no leave to run an arm. Local codes come first."
                )
            } else {
                format!("Still in the way: {}.", hindrances.join("; "))
            }
        }
    };
    paragraph(&app.theme.text(&text), width.min(100), 0, Style::new())
        .into_iter()
        .map(|line| line.into_iter().map(|(text, _)| text).collect())
        .collect()
}

//! The only place that knows threads, the terminal and its signals.

mod keeper;
mod news;
mod record;
mod screen;

use std::path::PathBuf;
use std::sync::Arc;
use std::time::Duration;

use anyhow::Context;
use crossbeam_channel::{Receiver, never, select};
use ratatui::crossterm::event::{Event, KeyEventKind, MouseButton, MouseEventKind};
use ratatui::layout::Rect;

use crate::arm::Arm;
use crate::program::Recipe;
use crate::review::{Desk, Done, Recheck, Reply};

use crate::tui::action::Action;
use crate::tui::app::{App, FileWish, Wish};
use crate::tui::keymap::Keymap;
use crate::tui::keys::action_of;
use crate::tui::options::Options;
use crate::tui::remedies::{is_to_stop, wanted};
use crate::tui::update::update;

use keeper::Keeper;
use news::{News, listen};

pub use screen::{Screen, restore};

/// What the screen is started with.
#[derive(Debug, Clone)]
pub struct Started {
    /// The arm.
    pub arm: Arc<Arm>,
    /// What was taught.
    pub recipe: Arc<Recipe>,
    /// The recipe's file; none for the built-in demonstration.
    pub path: Option<PathBuf>,
    /// Where the recipe came from, as it is told.
    pub recipe_path: String,
    /// Its text.
    pub recipe_text: String,
    /// The text of the arm file.
    pub arm_text: String,
    /// The keys that the person chose.
    pub keymap: Keymap,
}

/// A running check is looked at this often: four times a second.
const LOOK: Duration = Duration::from_millis(250);

/// Runs the review screen until somebody quits or a signal ends it.
///
/// # Errors
/// Where there is no terminal, it is gone, or the check came to an unexpected end.
pub fn run(started: &Started, options: Options) -> anyhow::Result<()> {
    let ended = watched(started, options)?;
    if let Some(signal) = ended {
        end_by(signal)?;
    }
    Ok(())
}

/// Runs the screen; tells the signal that ended it, if one did. The terminal is given back when this returns.
fn watched(started: &Started, options: Options) -> anyhow::Result<Option<i32>> {
    let mut screen = Screen::take(options.mouse)?;
    let news = listen().context("can't listen to the terminal")?;
    let (width, height) = screen.size()?;
    let area = Rect::new(0, 0, width, height);
    let mut app = App::new(Arc::clone(&started.arm), (*started.recipe).clone(), options.theme(), area);
    app.keymap = started.keymap.clone();
    let mut keeper = Keeper::of(started, &mut app);
    let mut recheck = Recheck::start().context("can't start the check")?;
    let mut desk = Desk::start().context("can't start the search for remedies")?;
    let mut patience = FIRST;
    loop {
        keeper.note(&mut app);
        if std::mem::take(&mut app.unchecked) {
            recheck.submit(&app.arm, app.taught(), app.judged().cloned());
            // What is done before anybody could read that it is being checked is shown at once.
            if let Ok(reply) = recheck.replies().recv_timeout(std::mem::replace(&mut patience, SOON)) {
                accept(&mut app, &mut recheck, reply);
            } else if let Some(progress) = recheck.progress() {
                update(&mut app, Action::Checking(progress));
            }
        }
        let idle = app.progress.is_none();
        if let (Some(preview), Some(judged)) = (app.preview.as_mut().filter(|preview| idle && !preview.asked), app.session.as_ref())
        {
            preview.asked = true;
            recheck.submit(&app.arm, &preview.recipe, Some(judged.judged().clone()));
            if let Ok(reply) = recheck.replies().recv_timeout(SOON) {
                accept(&mut app, &mut recheck, reply);
            }
        }
        if let (Some(segment), Some(judged)) = (app.tighten.take(), app.judged()) {
            recheck.tighten(judged, segment);
        }
        if is_to_stop(&mut app) {
            desk.stop();
        }
        if let Some((judged, finding)) = wanted(&mut app) {
            desk.submit(&judged, &finding);
        }
        screen.show(&app)?;
        match wait(&mut app, &mut recheck, &mut desk, &news)? {
            Turn::Draw => {}
            Turn::File(wish) => {
                keeper.note(&mut app);
                keeper.act(&mut app, &wish);
                if let Some(judged) = app.planning.as_ref().and(app.judged()) {
                    recheck.plan(judged);
                }
                // Saving may end in quitting.
                if std::mem::replace(&mut app.wish, Wish::GoOn) == Wish::Quit {
                    keeper.end();
                    return Ok(None);
                }
            }
            Turn::Copy(text) => screen.copy(&text)?,
            Turn::Quit => {
                keeper.end();
                return Ok(None);
            }
            Turn::End(signal) => return Ok(Some(signal)),
            Turn::Suspend => suspend(&mut screen, &mut app)?,
        }
    }
}

/// The first frame waits this long for the check.
const FIRST: Duration = Duration::from_millis(50);
/// A frame after an edit waits this long for the check.
const SOON: Duration = Duration::from_millis(12);

/// What is to be done next.
#[derive(Debug, PartialEq, Eq)]
enum Turn {
    Draw,
    Quit,
    End(i32),
    Suspend,
    File(FileWish),
    Copy(String),
}

/// Waits for something to happen, then takes all that waits, so that many keys make one frame.
fn wait(app: &mut App, recheck: &mut Recheck, desk: &mut Desk, news: &Receiver<News>) -> anyhow::Result<Turn> {
    let timer = if app.progress.is_some() { crossbeam_channel::after(LOOK) } else { never() };
    let replies = recheck.replies().clone();
    let remedies = desk.news().clone();
    select! {
        recv(news) -> told => {
            let mut told = Some(told.context("the terminal can't be listened to any more")?);
            while let Some(one) = told {
                let turn = hear(app, &one)?;
                if turn != Turn::Draw {
                    return Ok(turn);
                }
                told = news.try_recv().ok();
            }
        }
        recv(replies) -> reply => {
            accept(app, recheck, reply.context("the check came to an unexpected end")?);
            return Ok(wished(app));
        }
        recv(remedies) -> told => {
            let told = told.context("the search for remedies came to an unexpected end")?;
            if let Some(told) = desk.accept(told) {
                update(app, Action::Told(Some(told), desk.progress().or(Some([0, 0]))));
            } else if desk.progress().is_none() {
                update(app, Action::Told(None, None));
            }
        }
        recv(timer) -> _ => {
            if let Some(progress) = recheck.progress() {
                update(app, Action::Checking(progress));
            }
        }
    }
    Ok(Turn::Draw)
}

fn accept(app: &mut App, recheck: &mut Recheck, reply: Reply) {
    match recheck.accept(reply) {
        // What answers a preview is not what is taught.
        Some(Done::Judged(judged)) if Arc::ptr_eq(&judged.recipe, app.taught()) => {
            update(app, Action::Judged(Box::new(judged)));
        }
        Some(Done::Judged(judged)) => update(app, Action::Previewed(Box::new(judged))),
        Some(Done::Closer(survey, closer)) => update(app, Action::Closer(survey, closer)),
        Some(Done::Planned(survey, run)) => update(app, Action::Planned(survey, run)),
        None => {}
    }
}

fn hear(app: &mut App, news: &News) -> anyhow::Result<Turn> {
    let action = match news {
        News::End(signal) => return Ok(Turn::End(*signal)),
        News::Suspend => return Ok(Turn::Suspend),
        News::Gone => anyhow::bail!("the terminal is gone"),
        News::Terminal(Event::Key(key)) if key.kind != KeyEventKind::Release => action_of(*key, &app.mode, &app.keymap),
        News::Terminal(Event::Resize(width, height)) => Some(Action::Resize(*width, *height)),
        News::Terminal(Event::Mouse(mouse)) => match mouse.kind {
            MouseEventKind::Down(MouseButton::Left) => Some(Action::Click(mouse.column, mouse.row)),
            MouseEventKind::ScrollUp => Some(Action::Up),
            MouseEventKind::ScrollDown => Some(Action::Down),
            _ => None,
        },
        News::Terminal(_) => None,
    };
    if let Some(action) = action {
        update(app, action);
    }
    Ok(wished(app))
}

/// What the app wishes to be done.
fn wished(app: &mut App) -> Turn {
    match std::mem::replace(&mut app.wish, Wish::GoOn) {
        Wish::GoOn => Turn::Draw,
        Wish::Quit => Turn::Quit,
        Wish::Suspend => Turn::Suspend,
        Wish::File(wish) => Turn::File(wish),
        Wish::Copy(text) => Turn::Copy(text),
    }
}

/// Lets the shell have the terminal until it sends this program on.
#[cfg(unix)]
fn suspend(screen: &mut Screen, app: &mut App) -> anyhow::Result<()> {
    restore();
    signal_hook::low_level::emulate_default_handler(signal_hook::consts::SIGTSTP)?;
    screen.enter()?;
    let (width, height) = screen.size()?;
    update(app, Action::Resize(width, height));
    Ok(())
}

#[cfg(not(unix))]
fn suspend(_: &mut Screen, _: &mut App) -> anyhow::Result<()> {
    Ok(())
}

/// Ends as the signal would have ended the program, so that whoever sent it sees so.
#[cfg(unix)]
fn end_by(signal: i32) -> anyhow::Result<()> {
    Ok(signal_hook::low_level::emulate_default_handler(signal)?)
}

#[cfg(not(unix))]
fn end_by(_: i32) -> anyhow::Result<()> {
    Ok(())
}

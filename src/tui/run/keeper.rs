use std::path::{Path, PathBuf};
use std::sync::Arc;
use std::time::SystemTime;

use crate::arm::Arm;
use crate::files::{
    Aside, Content, Journal, Lock, NotLocked, NotSaved, OwnKey, Recovered, Texts, changes_on_disk, left_behind, open, read_recipe,
    text_of_edited, write, write_anyway,
};
use crate::review::History;
use crate::tui::action::Action;
use crate::tui::app::{App, FileWish, Menu, Mode, Wish};
use crate::tui::file::question;

use super::Started;

/// A keeper sees to it that nothing a person made is lost: it notes every edit down, saves, and knows what others do to the file.
#[derive(Debug)]
pub(super) struct Keeper {
    /// The recipe's file; none for the built-in demonstration.
    pub(super) path: Option<PathBuf>,
    /// Where the recipe and its arm came from, as they are told.
    source: String,
    /// The texts of the file, and what they give.
    pub(super) texts: Texts,
    pub(super) arm_text: String,
    aside: Aside,
    journal: Option<Journal>,
    lock: Option<Lock>,
    left_behind: Option<Recovered>,
    /// The key that a sign-off is signed with.
    pub(super) key: Option<OwnKey>,
    /// The name of a key file whose passphrase is asked for.
    pub(super) locked: Option<String>,
    /// Whether somebody was told already that edits can't be noted down.
    complained: bool,
}

impl Keeper {
    /// Takes charge of what was opened. Where something must be decided first, the app asks.
    pub(super) fn of(started: &Started, app: &mut App) -> Self {
        let aside = Aside::of_process();
        let path = started.path.clone();
        let mut keeper = Self {
            journal: path.as_ref().map(|path| Journal::of(path, &aside, &started.recipe_text)),
            path,
            source: started.recipe_path.clone(),
            texts: Texts::of(started.recipe_text.clone(), Arc::clone(&started.recipe)),
            arm_text: started.arm_text.clone(),
            aside,
            lock: None,
            left_behind: None,
            key: None,
            locked: None,
            complained: false,
        };
        keeper.take_lock(app, false);
        keeper
    }

    fn take_lock(&mut self, app: &mut App, by_force: bool) {
        let Some(path) = &self.path else { return };
        let now = SystemTime::now();
        let taken = if by_force { Lock::take_over(path, &self.aside, now) } else { Lock::take(path, &self.aside, now) };
        match taken {
            Ok(lock) => {
                self.lock = Some(lock);
                app.look_only = None;
                self.left_behind = left_behind(path, &self.aside).and_then(|found| self.unless_saved(found, &app.arm));
                if let Some(found) = &self.left_behind {
                    app.mode = Mode::Menu(recovery(found, found.fits(self.texts.text())));
                }
            }
            Err(held @ (NotLocked::Held { .. } | NotLocked::Unreadable { .. })) => {
                app.look_only = Some(held.to_string());
                app.mode = Mode::Menu(held_by(&held));
            }
            // Edited without: nobody can be told, and nothing is lost.
            Err(nowhere @ NotLocked::NoPlace { .. }) => app.message = Some(nowhere.to_string()),
        }
    }

    /// What was left behind, unless it stands in the file: then the run ended after it had saved, and nothing is lost.
    fn unless_saved(&self, found: Recovered, arm: &Arm) -> Option<Recovered> {
        let is_saved = read_recipe(&found.text, &self.source, arm).is_ok_and(|before| {
            let mut now = before.clone();
            let all = found.lost == 0 && found.edits.iter().all(|edit| edit.apply(&mut now).is_ok());
            all && text_of_edited(&found.text, &before, &now, arm).text == self.texts.text()
        });
        if !is_saved {
            return Some(found);
        }
        // What can't be thrown away is looked at again at the next start.
        let _ = found.forget();
        None
    }

    /// Notes down the edits that were made since.
    pub(super) fn note(&mut self, app: &mut App) {
        for edit in std::mem::take(&mut app.made) {
            let Some(journal) = &mut self.journal else { continue };
            if let Err(error) = journal.append(&edit, SystemTime::now())
                && !self.complained
            {
                self.complained = true;
                app.message = Some(format!("edits can't be noted down against a crash: {error}; save soon"));
            }
        }
    }

    /// Does what is wished with the file.
    pub(super) fn act(&mut self, app: &mut App, wish: &FileWish) {
        match wish {
            FileWish::Save { then_quit } => self.save(app, *then_quit, false),
            FileWish::SaveOver => self.save(app, false, true),
            FileWish::SaveAs(name) => self.save_as(app, name),
            FileWish::Reload => self.reload(app),
            FileWish::TakeUp => self.take_up(app),
            FileWish::Forget => {
                if let Some(Err(error)) = self.left_behind.take().map(Recovered::forget) {
                    app.message = Some(format!("can't be thrown away: {error}"));
                }
            }
            FileWish::SignOff => self.open_sign_off(app),
            FileWish::SinceRecord => self.since_record(app),
            FileWish::WriteRecord => self.write_record(app),
            FileWish::TakeKey(name) => self.take_key(app, name, None),
            FileWish::Unlock(passphrase) => self.unlock(app, &passphrase.0),
            FileWish::OpenAllTheSame => self.take_lock(app, true),
        }
    }

    fn save(&mut self, app: &mut App, then_quit: bool, over: bool) {
        let Some(path) = self.path.clone() else {
            app.message = Some("the built-in demonstration has no file of its own".to_owned());
            app.mode = Mode::Menu(question(
                "The demonstration has no file of its own".to_owned(),
                vec![("save elsewhere".to_owned(), Action::SaveAs), ("stay".to_owned(), Action::Stay)],
            ));
            return;
        };
        let new = self.texts.next(app.taught(), &app.arm);
        let known = Content::of(self.texts.text().as_bytes());
        let written = if over { write_anyway(&path, &new.text) } else { write(&path, &new.text, Some(&known)) };
        match written {
            Ok(saved) => {
                let kept = if new.kept { "" } else { "; its layout could not be kept and was made anew" };
                let before = saved.backup.map_or(String::new(), |backup| format!("; the version before is {}", backup.display()));
                let gone = match self.texts.gone_in(&new.text) {
                    0 => "",
                    1 => "; a comment went with what it stood at, and comes back with it by undo",
                    _ => "; comments went with what they stood at, and come back with it by undo",
                };
                app.message = Some(format!("saved to {}{gone}{before}{kept}", saved.path.display()));
                self.is_saved(app, new.text);
                if then_quit {
                    app.wish = Wish::Quit;
                }
            }
            Err(NotSaved::Changed { text, .. }) => {
                let menu = self.changed(app, text.as_deref());
                app.mode = Mode::Menu(menu);
            }
            Err(why) => app.message = Some(format!("not saved, the edits are kept: {why}")),
        }
    }

    fn is_saved(&mut self, app: &mut App, text: String) {
        app.history.mark_saved();
        if let Some(Err(error)) = self.journal.as_mut().map(|journal| journal.saved(&text)) {
            app.message = Some(format!("saved; the notes against a crash can't be removed: {error}"));
        }
        self.texts.saved(text, Arc::clone(app.taught()));
    }

    /// What to do about a file that somebody else has written.
    fn changed(&self, app: &mut App, text: Option<&str>) -> Menu {
        let told = changes_on_disk(text, &self.source, self.texts.recipe(), &app.arm);
        app.changes = ("Changed on the disk meanwhile".to_owned(), told.clone());
        let first = told.first().map_or(String::new(), |first| format!(": {first}"));
        let more = if told.len() > 1 { format!(" and {} more", told.len() - 1) } else { String::new() };
        question(
            format!("Changed on the disk meanwhile{first}{more}"),
            vec![
                ("stay and keep my edits unsaved".to_owned(), Action::Stay),
                ("show what was changed".to_owned(), Action::Changes),
                ("save mine elsewhere".to_owned(), Action::SaveAs),
                ("save mine over it; theirs is kept as a backup".to_owned(), Action::File(FileWish::SaveOver)),
                ("take theirs and give my edits up".to_owned(), Action::File(FileWish::Reload)),
            ],
        )
    }

    fn save_as(&mut self, app: &mut App, name: &str) {
        let typed = Path::new(name);
        let target = match &self.path {
            // The arm file is named relative to the recipe.
            Some(_) if typed.components().count() != 1 => {
                app.message = Some("type a name for the same folder: the arm file is named relative to it".to_owned());
                return;
            }
            Some(path) => path.with_file_name(typed),
            None => typed.to_owned(),
        };
        let new = self.texts.next(app.taught(), &app.arm);
        let with_arm = if self.path.is_none() { write_arm(&target, &app.taught().arm, &self.arm_text) } else { Ok(()) };
        match with_arm.and_then(|()| write(&target, &new.text, None)) {
            Ok(saved) => {
                app.message = Some(format!("saved to {}", saved.path.display()));
                self.lock = None;
                if let Some(journal) = self.journal.take() {
                    let _ = journal.end();
                }
                self.journal = Some(Journal::of(&target, &self.aside, &new.text));
                self.source = target.display().to_string();
                self.path = Some(target);
                self.is_saved(app, new.text);
                self.take_lock(app, false);
            }
            Err(why) => app.message = Some(format!("not saved, the edits are kept: {why}")),
        }
    }

    fn reload(&mut self, app: &mut App) {
        let Some(path) = &self.path else { return };
        match open(path) {
            Ok(opened) => {
                app.arm = Arc::new(opened.arm);
                app.history = History::of(opened.recipe);
                self.texts = Texts::of(opened.recipe_source.text, Arc::clone(app.taught()));
                if let Some(Err(error)) = self.journal.as_mut().map(|journal| journal.saved(self.texts.text())) {
                    app.message = Some(error.to_string());
                }
                app.unchecked = true;
                app.message = Some("read again from the disk".to_owned());
            }
            Err(rejected) => {
                let first = rejected.to_string().lines().next().unwrap_or_default().to_owned();
                app.message = Some(format!("not read again, the edits are kept: {first}"));
            }
        }
    }

    /// Makes the edits again that an earlier run left behind, from the text that they start from.
    fn take_up(&mut self, app: &mut App) {
        let Some(found) = self.left_behind.take() else { return };
        let base = match read_recipe(&found.text, &self.source, &app.arm) {
            Ok(base) => base,
            Err(rejected) => {
                app.message = Some(format!("can't be taken up: {rejected}"));
                self.left_behind = Some(found);
                return;
            }
        };
        app.history = History::of(base);
        self.texts = Texts::of(found.text.clone(), Arc::clone(app.taught()));
        let (count, lost) = (found.edits.len(), found.lost);
        for edit in &found.edits {
            if app.history.make(&app.arm, edit.clone()).is_err() {
                break;
            }
        }
        app.unchecked = true;
        let torn = if lost > 0 { "; the last one was torn and is lost" } else { "" };
        app.message = Some(format!("{count} edits taken up again, not saved{torn}"));
        if let Some(journal) = &mut self.journal
            && let Err(error) = journal.go_on(found, SystemTime::now())
        {
            app.message = Some(format!("taken up, but not noted down: {error}; save soon"));
        }
    }

    /// A clean end: nothing is left behind.
    pub(super) fn end(self) {
        if let Some(journal) = self.journal {
            // What stays behind is offered at the next start.
            let _ = journal.end();
        }
    }
}

fn write_arm(recipe: &Path, named: &str, text: &str) -> Result<(), NotSaved> {
    let folder = recipe.parent().unwrap_or(Path::new(""));
    let target = folder.join(named);
    if target.exists() {
        return Ok(());
    }
    crate::files::make_folder(&target)?;
    write(&target, text, None).map(|_| ())
}

fn recovery(found: &Recovered, fits: bool) -> Menu {
    let edits = if found.edits.len() == 1 { "1 edit".to_owned() } else { format!("{} edits", found.edits.len()) };
    let changed = if fits { "" } else { "; the file was changed since" };
    question(
        format!("{edits} of {} never saved{changed}", found.holder),
        vec![
            ("take them up again".to_owned(), Action::File(FileWish::TakeUp)),
            ("leave them for later".to_owned(), Action::Stay),
            ("throw them away".to_owned(), Action::File(FileWish::Forget)),
        ],
    )
}

fn held_by(held: &NotLocked) -> Menu {
    question(
        held.to_string(),
        vec![
            ("look only".to_owned(), Action::LookOnly(held.to_string())),
            ("quit".to_owned(), Action::QuitAnyway),
            ("open all the same".to_owned(), Action::File(FileWish::OpenAllTheSame)),
        ],
    )
}

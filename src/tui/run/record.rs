use std::path::PathBuf;
use std::sync::Arc;
use std::time::{SystemTime, UNIX_EPOCH};

use crate::files::{Asks, NotKept, OwnKey, earlier_record, keep_record, open, open_itself, record_path, signed_part, sources};
use crate::review::{
    Date, Earlier, FirstRun, Outcome, Record, Role, SegmentChange, SignOff, compare_record, first_run_text, segment_changes,
    stage_words,
};
use crate::tui::app::{App, Asking, FileWish, Mode, Page, Question};
use crate::tui::signing::{Signing, hindrances};

use super::keeper::Keeper;

/// The plan of the first run, if it is made; otherwise it is asked for, and what was wished goes on with it.
fn planned(app: &mut App, wish: &FileWish) -> Option<Arc<FirstRun>> {
    let made = app.first_run().cloned();
    if made.is_none() {
        app.message = Some("the plan of the first run is being made".to_owned());
        app.planning = Some(wish.clone());
    }
    made
}

impl Keeper {
    /// Reads a key file to sign with; a locked one asks for its passphrase. No name is no key.
    pub(super) fn take_key(&mut self, app: &mut App, name: &str, passphrase: Option<&str>) {
        app.mode = Mode::SignOff;
        self.key = None;
        let Some(signing) = &mut app.signing else { return };
        signing.key = None;
        if name.is_empty() {
            return;
        }
        let file = self.named(name);
        match OwnKey::read(&file, passphrase) {
            Ok(key) => {
                signing.key = Some(key.fingerprint());
                self.key = Some(key);
            }
            Err(no_key) if no_key.is_locked() => {
                self.locked = Some(name.to_owned());
                app.mode = Mode::Asking(Asking { question: Question::Passphrase, typed: String::new() });
            }
            Err(no_key) => app.message = Some(no_key.to_string().replace('\n', " ")),
        }
    }

    /// Unlocks the key that asked for its passphrase.
    pub(super) fn unlock(&mut self, app: &mut App, passphrase: &str) {
        if let Some(name) = self.locked.take() {
            self.take_key(app, &name, Some(passphrase));
        }
    }

    /// The file that a typed name means: `~/` is the person's own folder.
    fn named(&self, name: &str) -> PathBuf {
        match (name.strip_prefix("~/"), std::env::var_os("HOME")) {
            (Some(rest), Some(home)) => PathBuf::from(home).join(rest),
            _ => PathBuf::from(name),
        }
    }

    /// Opens a sign-off of what stands in the files, with what an earlier record answered already.
    pub(super) fn open_sign_off(&self, app: &mut App) {
        let Some((path, judged)) = self.path.as_ref().zip(app.judged().cloned()) else {
            app.message = Some("the built-in demonstration has no file to sign; save it elsewhere first".to_owned());
            return;
        };
        let Some(run) = planned(app, &FileWish::SignOff) else { return };
        let opened = match open_itself(path) {
            Ok(opened) => opened,
            Err(rejected) => {
                app.message = rejected.to_string().lines().next().map(|first| format!("can't be signed: {first}"));
                return;
            }
        };
        if opened.recipe != *judged.recipe
            || opened.recipe_source.text != self.texts.text()
            || opened.arm_source.text != self.arm_text
        {
            app.message = Some("the files are not what is shown here any more; quit and open the recipe again".to_owned());
            return;
        }
        let sources = sources(&opened);
        let mut sign_off = SignOff::of(&judged, &sources);
        match earlier_record(&record_path(path)) {
            Ok(Some(earlier)) => {
                let taken = sign_off.take_over(&earlier);
                app.message = Some(format!("{taken} answers of the earlier record still hold"));
            }
            Ok(None) => {}
            Err(rejected) => {
                app.message = Some(format!("the record that is there can't be read; move it away first: {rejected}"));
                return;
            }
        }
        let seconds = SystemTime::now().duration_since(UNIX_EPOCH).map_or(0, |since| since.as_secs());
        let date = Date::after_1970(seconds);
        let (name, note) = (String::new(), String::new());
        let stages = run.stages.iter().map(|stage| stage_words(&judged, stage));
        let plan = stages.chain(first_run_text(&judged, &run)).collect();
        app.signing = Some(Signing { sign_off, sources, run, plan, name, role: Role::Prepared, note, date, chosen: 0, key: None });
        app.mode = Mode::SignOff;
    }

    /// Tells what is different since the record was made: data, and segments with verdict and room before and after.
    pub(super) fn since_record(&self, app: &mut App) {
        let Some((path, judged)) = self.path.as_ref().zip(app.judged().cloned()) else {
            app.message = Some("the built-in demonstration has no record".to_owned());
            return;
        };
        let Some(run) = planned(app, &FileWish::SinceRecord) else { return };
        let (record, opened) = match (earlier_record(&record_path(path)), open(path)) {
            (Ok(Some(record)), Ok(opened)) => (record, opened),
            (Ok(None), _) => {
                app.message = Some("there is no record of this recipe yet".to_owned());
                return;
            }
            (Err(rejected), _) | (_, Err(rejected)) => {
                app.message = rejected.to_string().lines().next().map(str::to_owned);
                return;
            }
        };
        let sources = sources(&opened);
        let now = Record::of(&judged, &sources, &run, &Earlier::default(), Date::after_1970(0));
        let value = |value: Option<String>| value.unwrap_or_else(|| "nothing".to_owned());
        let data = crate::seal::changes(&record.content, &now.content).into_iter();
        let mut told: Vec<String> = data
            .map(|change| format!("{}, {}: {} -> {}", change.of, change.key, value(change.before), value(change.after)))
            .collect();
        let (segments, standing) = segment_changes(&record.segments, &now.segments);
        told.extend(segments.iter().map(SegmentChange::words));
        told.push(format!("{} segments stand as they were signed.", standing.len()));
        app.changes = ("Changed since the record".to_owned(), told);
        app.mode = Mode::Page(Page::Changes, 0);
    }

    /// Writes the record of a sign-off that nothing stands in the way of, or puts one more name under the one that stands.
    pub(super) fn write_record(&self, app: &mut App) {
        app.mode = Mode::SignOff;
        let Some(((path, judged), signing)) = self.path.as_ref().zip(app.judged().cloned()).zip(app.signing.clone()) else {
            return;
        };
        if let Some(first) = hindrances(app, &signing).first() {
            app.message = Some(format!("not signed: {first}"));
            return;
        }
        // The files may have changed while answers were given.
        let unchanged = open(path).is_ok_and(|opened| sources(&opened) == signing.sources);
        if !unchanged {
            app.message = Some("not signed: the files were changed meanwhile; quit and open the recipe again".to_owned());
            return;
        }
        let place = record_path(path);
        let run = signing.run.clone();
        let written = earlier_record(&place).map_err(NotKept::from).and_then(|earlier| {
            let stands = earlier.as_ref().filter(|earlier| {
                let compared = compare_record(earlier, &judged, &signing.sources, &run);
                compared.outcome == Outcome::Stands && compared.other_bytes.is_empty()
            });
            let mut record = match stands {
                Some(stands) => stands.clone(),
                None => {
                    let known = earlier.as_ref().map_or_else(Earlier::default, Earlier::of);
                    signing.sign_off.decided(Record::of(&judged, &signing.sources, &run, &known, signing.date))
                }
            };
            record.people.push(signing.person());
            // Signed before anything is written, so that a key that fails leaves everything as it was.
            let part = signed_part(&record, record.people.len() - 1);
            let signature = self.key.as_ref().map(|key| key.sign(&part, Asks::Never)).transpose()?;
            keep_record(&place, &record, stands.is_none(), signature.as_deref())
        });
        app.message = Some(match written {
            Ok(kept) => {
                app.signing = None;
                app.mode = Mode::Panes;
                format!("record {}, seal {}; no signature: a name only", place.display(), kept.seal.code())
            }
            Err(why) => format!("not signed: {why}"),
        });
    }
}

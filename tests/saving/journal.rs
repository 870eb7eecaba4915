use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};
use std::time::{Duration, SystemTime};

use elbowroom::files::{Aside, Journal, demo, left_behind, read_recipe, text_of_edited};
use elbowroom::program::{Edit, Recipe};

use super::drawn::{Draw, edit};

const WRITER: &str = "ELBOWROOM_TEST_WRITER";

/// The edits of the scripted session: the same in the child that is killed and in the test that judges.
fn script() -> Vec<Edit> {
    let mut recipe = demo().recipe;
    let (mut draw, mut fresh) = (Draw::seeded(42), 0);
    (0..400)
        .map(|_| {
            let next = edit(&recipe, &mut draw, &mut fresh);
            next.apply(&mut recipe).expect("it fits");
            next
        })
        .collect()
}

/// Not a test by itself: the child that is killed. It tells each edit before it makes it and once it is made.
#[test]
fn writer() {
    use std::io::Write;
    let Some(path) = std::env::var_os(WRITER).map(PathBuf::from) else { return };
    let text = fs::read_to_string(&path).expect("the recipe");
    let mut journal = Journal::of(&path, &Aside::with(None), &text);
    let mut out = std::io::stdout();
    for next in script() {
        journal.append(&next, SystemTime::now()).expect("written down");
        writeln!(out, "made").and_then(|()| out.flush()).expect("told");
    }
    // It is killed while it waits here, if not before.
    std::thread::sleep(Duration::from_secs(60));
}

fn after(edits: &[Edit]) -> Recipe {
    let mut recipe = demo().recipe;
    for edit in edits {
        edit.apply(&mut recipe).expect("it fits");
    }
    recipe
}

#[cfg(unix)]
#[test]
fn a_kill_at_any_of_two_hundred_moments_loses_at_most_the_last_edit() {
    use std::io::Read;
    let script = script();
    let text = demo().recipe_source.text;
    let arm = demo().arm;
    let mut draw = Draw::seeded(9);
    let mut counts = Vec::new();
    for round in 0..200 {
        let folder = tempfile::tempdir().expect("a folder");
        let path = folder.path().join("a.toml");
        fs::write(&path, &text).expect("written");
        let mut child = Command::new(std::env::current_exe().expect("this test"))
            .args(["--exact", "journal::writer", "--nocapture"])
            .env(WRITER, &path)
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .expect("it starts");
        std::thread::sleep(Duration::from_micros(draw.below(60_000) as u64));
        // SIGKILL, which can't be caught.
        child.kill().expect("killed");
        child.wait().expect("it ends");
        let mut told = String::new();
        child.stdout.take().expect("piped").read_to_string(&mut told).expect("UTF-8");
        let made = told.matches("made").count();
        assert_eq!(fs::read_to_string(&path).expect("read"), text, "the recipe itself is untouched");
        let found = left_behind(&path, &Aside::with(None));
        let count = found.as_ref().map_or(0, |found| found.edits.len());
        // What was told as made is there; one more may be, which was made but not told.
        assert!(count == made || count == made + 1, "round {round}: {made} were made, {count} found");
        if let Some(found) = found {
            assert!(found.lost <= 1 && found.fits(&text));
            assert_eq!(found.edits, script[..count], "round {round}");
            let (before, recovered) = found.recipes("a.toml", &arm).expect("it reads");
            assert_eq!((before, recovered), (demo().recipe, after(&script[..count])));
        }
        counts.push(count);
    }
    counts.sort_unstable();
    assert!(counts[0] < counts[199], "all were killed at the same edit: {counts:?}");
}

fn opened() -> (tempfile::TempDir, PathBuf, String) {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("a.toml");
    let text = demo().recipe_source.text;
    fs::write(&path, &text).expect("written");
    (folder, path, text)
}

/// Makes what is in a journal look as if its process had ended, and yields the journal's place.
fn orphan(folder: &Path) -> PathBuf {
    let place = fs::read_dir(folder)
        .expect("it lists")
        .map(|entry| entry.expect("an entry").path())
        .find(|path| path.to_string_lossy().ends_with(".journal"))
        .expect("a journal");
    let written = fs::read_to_string(&place).expect("read");
    let (head, rest) = written.split_once('\n').expect("a first line");
    let mut head: serde_json::Value = serde_json::from_str(head).expect("JSON");
    head["holder"]["started"] = "1".into();
    fs::write(&place, format!("{head}\n{rest}")).expect("written");
    place
}

#[test]
fn every_edit_comes_back_as_the_very_same() {
    let (folder, path, text) = opened();
    let aside = Aside::with(None);
    let mut journal = Journal::of(&path, &aside, &text);
    assert_eq!(fs::read_dir(folder.path()).expect("it lists").count(), 1, "no file without an edit");
    let script = script();
    for edit in &script {
        journal.append(edit, SystemTime::now()).expect("written down");
    }
    assert!(left_behind(&path, &aside).is_none(), "this process still runs");
    orphan(folder.path());
    let found = left_behind(&path, &aside).expect("left behind");
    assert_eq!((&found.edits, found.lost), (&script, 0));
    assert!(found.fits(&text) && !found.fits(&text[1..]));
}

#[test]
fn a_torn_last_line_costs_only_that_edit() {
    let (folder, path, text) = opened();
    let aside = Aside::with(None);
    let script = &script()[..5];
    let mut journal = Journal::of(&path, &aside, &text);
    for edit in script {
        journal.append(edit, SystemTime::now()).expect("written down");
    }
    let place = orphan(folder.path());
    let whole = fs::read(&place).expect("read");
    let last = whole[..whole.len() - 1].iter().rposition(|byte| *byte == b'\n').expect("lines") + 1;
    for end in last + 1..whole.len() - 1 {
        fs::write(&place, &whole[..end]).expect("written");
        let found = left_behind(&path, &aside).expect("left behind");
        assert_eq!((found.edits.len(), found.lost), (4, 1), "cut at {end}");
    }
    // Zeros, as a disk may leave them when the power fails.
    fs::write(&place, [&whole[..last], &[0; 100][..]].concat()).expect("written");
    assert_eq!(left_behind(&path, &aside).expect("left behind").edits, script[..4]);
}

#[test]
fn a_save_and_a_clean_end_leave_no_journal() {
    let (folder, path, text) = opened();
    let aside = Aside::with(None);
    let script = script();
    let mut journal = Journal::of(&path, &aside, &text);
    journal.append(&script[0], SystemTime::now()).expect("written down");
    let opened = demo();
    let saved = text_of_edited(&text, &opened.recipe, &after(&script[..1]), &opened.arm).text;
    journal.saved(&saved).expect("removed");
    assert_eq!(fs::read_dir(folder.path()).expect("it lists").count(), 1);
    journal.append(&script[1], SystemTime::now()).expect("written down");
    orphan(folder.path());
    let found = left_behind(&path, &aside).expect("left behind");
    assert_eq!((found.edits.as_slice(), found.text.as_str()), (&script[1..2], saved.as_str()));
    journal.end().expect("removed");
    assert!(left_behind(&path, &aside).is_none());
}

#[test]
fn what_was_left_behind_is_kept_until_it_is_gone_on_with_or_forgotten() {
    let (folder, path, text) = opened();
    let aside = Aside::with(None);
    let script = script();
    let mut first = Journal::of(&path, &aside, &text);
    for edit in &script[..3] {
        first.append(edit, SystemTime::now()).expect("written down");
    }
    drop(first);
    orphan(folder.path());
    // Edits that were made without asking do not replace it.
    let mut second = Journal::of(&path, &aside, &text);
    second.append(&script[5], SystemTime::now()).expect("written down");
    let found = left_behind(&path, &aside).expect("still there");
    assert_eq!(found.edits, script[..3]);
    second.end().expect("removed");
    let mut third = Journal::of(&path, &aside, &text);
    third.go_on(found, SystemTime::now()).expect("gone on with");
    third.append(&script[3], SystemTime::now()).expect("written down");
    drop(third);
    let place = fs::read_dir(folder.path())
        .expect("it lists")
        .map(|e| e.expect("an entry").path())
        .find(|p| p.to_string_lossy().contains(".journal"));
    let place = place.expect("a journal");
    fs::rename(&place, folder.path().join(".a.toml.journal")).expect("renamed");
    orphan(folder.path());
    let found = left_behind(&path, &aside).expect("left behind");
    assert_eq!(found.edits, script[..4]);
    found.forget().expect("forgotten");
    assert!(left_behind(&path, &aside).is_none());
}

#[test]
fn edits_can_be_had_again_even_if_the_file_changed_meanwhile() {
    let (folder, path, text) = opened();
    let aside = Aside::with(None);
    let mut journal = Journal::of(&path, &aside, &text);
    journal.append(&Edit::Name("mine".to_owned()), SystemTime::now()).expect("written down");
    orphan(folder.path());
    let theirs = text.replace("Housing transfer\"", "Theirs\"");
    fs::write(&path, &theirs).expect("written");
    let found = left_behind(&path, &aside).expect("left behind");
    assert!(!found.fits(&theirs));
    let (_, mine) = found.recipes("a.toml", &demo().arm).expect("it reads");
    assert_eq!(mine.name, "mine");
    assert_eq!(read_recipe(&theirs, "a.toml", &demo().arm).expect("it reads").name, "Theirs");
}

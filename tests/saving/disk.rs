use std::fs;
use std::path::{Path, PathBuf};
use std::time::SystemTime;

use elbowroom::files::{Aside, Content, Lock, NotLocked, NotSaved, changes_on_disk, demo, write, write_anyway};

fn folder() -> tempfile::TempDir {
    tempfile::tempdir().expect("a folder")
}

fn names(folder: &Path) -> Vec<String> {
    let mut names: Vec<String> = fs::read_dir(folder)
        .expect("it lists")
        .map(|entry| entry.expect("an entry").file_name().into_string().expect("UTF-8"))
        .collect();
    names.sort();
    names
}

fn root() -> bool {
    // Root may write everywhere, so that nothing is read-only to it but what is marked.
    fs::metadata("/proc/self").is_ok_and(|own| std::os::unix::fs::MetadataExt::uid(&own) == 0)
}

#[test]
fn a_save_leaves_the_new_text_the_old_as_backup_and_nothing_else() {
    let folder = folder();
    let path = folder.path().join("a.toml");
    fs::write(&path, "one").expect("written");
    let saved = write(&path, "two", Some(&Content::of(b"one"))).expect("saved");
    assert_eq!(fs::read_to_string(&path).expect("read"), "two");
    assert_eq!(fs::read_to_string(saved.backup.expect("a backup")).expect("read"), "one");
    write(&path, "three", Some(&Content::of(b"two"))).expect("saved");
    assert_eq!(fs::read_to_string(folder.path().join("a.toml~")).expect("read"), "two");
    assert_eq!(names(folder.path()), ["a.toml", "a.toml~"]);
    // The same text again: the backup must not become the text itself.
    write(&path, "three", Some(&Content::of(b"three"))).expect("saved");
    fs::write(&path, "four").expect("written");
    assert_eq!(fs::read_to_string(folder.path().join("a.toml~")).expect("read"), "three");
}

#[test]
fn a_file_that_changed_meanwhile_is_not_written_over() {
    let folder = folder();
    let path = folder.path().join("a.toml");
    fs::write(&path, "theirs").expect("written");
    match write(&path, "ours", Some(&Content::of(b"opened"))) {
        Err(NotSaved::Changed { text: Some(text), .. }) => assert_eq!(text, "theirs"),
        other => panic!("{other:?}"),
    }
    assert_eq!(fs::read_to_string(&path).expect("read"), "theirs");
    assert!(matches!(write(&path, "ours", None), Err(NotSaved::Exists { .. })));
    write_anyway(&path, "ours").expect("saved");
    assert_eq!(fs::read_to_string(folder.path().join("a.toml~")).expect("read"), "theirs", "not lost");
}

#[test]
fn what_somebody_else_changed_is_told_waypoint_by_waypoint() {
    let opened = demo();
    let told = |text: Option<&str>| changes_on_disk(text, "a.toml", &opened.recipe, &opened.arm);
    let text = &opened.recipe_source.text;
    let theirs =
        text.replace("share  = 70", "share  = 75").replace("\"off wheel\"", "\"wheel free\"").replace("mass    = 6.5", "mass = 7");
    assert_eq!(
        told(Some(&theirs)),
        [
            "load 1 \"housing\": mass 6.5 kg -> 7 kg",
            "waypoint 2 \"above rack\": share 70 % -> 75 %",
            "waypoint 8 \"off wheel\": name off wheel -> wheel free",
        ]
    );
    assert_eq!(told(Some(&text.replace("# slow", "#"))).len(), 1);
    assert_eq!(told(None), ["the file is gone"]);
    assert!(told(Some("elbowroom-recipe = 1")).iter().any(|line| line.contains("name is missing")));
}

#[test]
fn a_file_that_is_gone_comes_back_and_a_folder_that_is_gone_is_told() {
    let folder = folder();
    let inner = folder.path().join("inner");
    fs::create_dir(&inner).expect("made");
    let path = inner.join("a.toml");
    assert_eq!(write(&path, "ours", Some(&Content::of(b"opened"))).expect("saved").backup, None);
    fs::remove_dir_all(&inner).expect("removed");
    assert!(matches!(write(&path, "ours", Some(&Content::of(b"ours"))), Err(NotSaved::NoFolder { .. })));
}

#[cfg(unix)]
#[test]
fn permissions_stay_and_a_link_stays_a_link() {
    use std::os::unix::fs::{PermissionsExt, symlink};
    let folder = folder();
    let real = folder.path().join("real.toml");
    let link = folder.path().join("link.toml");
    fs::write(&real, "one").expect("written");
    fs::set_permissions(&real, fs::Permissions::from_mode(0o640)).expect("set");
    symlink("real.toml", &link).expect("linked");
    let saved = write(&link, "two", Some(&Content::of(b"one"))).expect("saved");
    assert_eq!(saved.path.file_name(), real.file_name());
    assert!(fs::symlink_metadata(&link).expect("there").file_type().is_symlink());
    assert_eq!(fs::read_to_string(&real).expect("read"), "two");
    assert_eq!(fs::metadata(&real).expect("there").permissions().mode() & 0o777, 0o640);
    let nowhere = folder.path().join("nowhere.toml");
    symlink("later.toml", &nowhere).expect("linked");
    write(&nowhere, "new", None).expect("saved");
    assert_eq!(fs::read_to_string(folder.path().join("later.toml")).expect("read"), "new");
}

#[cfg(unix)]
#[test]
fn a_read_only_file_or_folder_is_told_and_left() {
    use std::os::unix::fs::PermissionsExt;
    let folder = folder();
    let path = folder.path().join("a.toml");
    fs::write(&path, "one").expect("written");
    fs::set_permissions(&path, fs::Permissions::from_mode(0o444)).expect("set");
    assert!(matches!(write(&path, "two", Some(&Content::of(b"one"))), Err(NotSaved::ReadOnly { .. })));
    assert_eq!((fs::read_to_string(&path).expect("read").as_str(), names(folder.path()).len()), ("one", 1));
    fs::set_permissions(&path, fs::Permissions::from_mode(0o644)).expect("set");
    if !root() {
        fs::set_permissions(folder.path(), fs::Permissions::from_mode(0o555)).expect("set");
        assert!(matches!(write(&path, "two", Some(&Content::of(b"one"))), Err(NotSaved::ReadOnly { .. })));
        fs::set_permissions(folder.path(), fs::Permissions::from_mode(0o755)).expect("set");
        assert_eq!((fs::read_to_string(&path).expect("read").as_str(), names(folder.path()).len()), ("one", 1));
    }
}

/// A full disk by a limit on the size of files, which the child sets on itself before it saves.
#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_is_told_and_nothing_is_lost() {
    let folder = folder();
    let path = folder.path().join("a.toml");
    if std::env::var_os(FULL).is_some() {
        return;
    }
    fs::write(&path, "one").expect("written");
    let exe = std::env::current_exe().expect("this test");
    // Signals of the limit are ignored by the shell and what it starts, so that the write fails as on a full disk.
    let script = "trap '' XFSZ; ulimit -f 8; exec \"$0\" --exact disk::saves_much --nocapture";
    let output = std::process::Command::new("bash").args(["-c", script]).arg(exe).env(FULL, &path).output().expect("it runs");
    let told = String::from_utf8_lossy(&output.stdout).into_owned();
    assert!(told.contains("FULL: there is no room left on the disk"), "{told}");
    assert_eq!((fs::read_to_string(&path).expect("read").as_str(), names(folder.path())), ("one", vec!["a.toml".to_owned()]));
}

const FULL: &str = "ELBOWROOM_TEST_FULL";

#[test]
fn saves_much() {
    let Some(path) = std::env::var_os(FULL).map(PathBuf::from) else { return };
    let much = "x".repeat(1 << 20);
    println!("FULL: {}", write(&path, &much, Some(&Content::of(b"one"))).expect_err("no room"));
}

#[test]
fn a_second_one_is_told_who_has_the_recipe_open() {
    let folder = folder();
    let path = folder.path().join("a.toml");
    fs::write(&path, "one").expect("written");
    let aside = Aside::with(None);
    let now = SystemTime::now();
    let lock = Lock::take(&path, &aside, now).expect("free");
    match Lock::take(&path, &aside, now) {
        Err(NotLocked::Held { holder, sure: true }) => {
            assert_eq!(holder.pid, std::process::id());
            assert!(now.duration_since(holder.since()).expect("before").as_secs() < 2);
            assert!(holder.to_string().contains(&holder.host));
        }
        other => panic!("{other:?}"),
    }
    // Through a link it is the same recipe.
    let link = folder.path().join("b.toml");
    std::os::unix::fs::symlink(&path, &link).expect("linked");
    assert!(matches!(Lock::take(&link, &aside, now), Err(NotLocked::Held { .. })));
    drop(lock);
    let lock = Lock::take(&path, &aside, now).expect("free again");
    let second = Lock::take_over(&path, &aside, now + std::time::Duration::from_secs(5)).expect("by force");
    drop(lock);
    assert!(matches!(Lock::take(&path, &aside, now), Err(NotLocked::Held { .. })), "the first must not take the second's away");
    drop(second);
    assert_eq!(names(folder.path()), ["a.toml", "b.toml"]);
}

#[test]
fn a_lock_of_a_dead_process_is_swept_away_and_one_of_another_machine_is_not() {
    let folder = folder();
    let path = folder.path().join("a.toml");
    fs::write(&path, "one").expect("written");
    let aside = Aside::with(None);
    let lock = Lock::take(&path, &aside, SystemTime::now()).expect("free");
    let place = lock.place().to_owned();
    let line = fs::read_to_string(&place).expect("read");
    drop(lock);
    let own: serde_json::Value = serde_json::from_str(&line).expect("JSON");
    let with = |key: &str, value: serde_json::Value| {
        let mut other = own.clone();
        other[key] = value;
        fs::write(&place, other.to_string()).expect("written");
    };
    with("started", "1".into());
    drop(Lock::take(&path, &aside, SystemTime::now()).expect("swept away"));
    with("host", "elsewhere".into());
    assert!(matches!(Lock::take(&path, &aside, SystemTime::now()), Err(NotLocked::Held { sure: false, .. })));
    fs::write(&place, "{").expect("written");
    assert!(matches!(Lock::take(&path, &aside, SystemTime::now()), Err(NotLocked::Unreadable { .. })));
    drop(Lock::take_over(&path, &aside, SystemTime::now()).expect("by force"));
}

#[test]
fn where_the_folder_can_not_be_written_the_state_folder_is_taken() {
    let folder = folder();
    let state = folder.path().join("state").join("elbowroom");
    // A folder that is not there can't be written, not even by root.
    let path = folder.path().join("gone").join("a.toml");
    let lock = Lock::take(&path, &Aside::with(Some(state.clone())), SystemTime::now()).expect("elsewhere");
    assert!(lock.place().starts_with(&state));
    assert!(matches!(Lock::take(&path, &Aside::with(None), SystemTime::now()), Err(NotLocked::NoPlace { .. })));
}

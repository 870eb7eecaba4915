use std::fs;
use std::path::Path;
use std::process::{Command, Output};

fn elbowroom(folder: &Path, arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_elbowroom")).args(arguments).current_dir(folder).output().expect("the program starts")
}

#[test]
fn a_new_arm_and_a_new_recipe_for_it_pass_the_check() {
    let folder = tempfile::tempdir().expect("a folder");
    let run = |arguments: &[&str]| elbowroom(folder.path(), arguments);
    fs::create_dir(folder.path().join("arms")).expect("made");
    fs::create_dir(folder.path().join("programs")).expect("made");
    assert!(run(&["new", "arm", "arms/a.toml"]).status.success());
    assert!(run(&["new", "recipe", "--arm", "arms/a.toml", "programs/r.toml"]).status.success());
    let text = fs::read_to_string(folder.path().join("programs/r.toml")).expect("written");
    assert!(text.contains("arm    = \"../arms/a.toml\""), "{text}");
    let checked = run(&["check", "programs/r.toml"]);
    assert!(checked.status.success(), "{}{}", String::from_utf8_lossy(&checked.stdout), String::from_utf8_lossy(&checked.stderr));
}

#[test]
fn a_new_recipe_for_every_arm_of_the_tree_is_clear() {
    let folder = tempfile::tempdir().expect("a folder");
    for entry in fs::read_dir(concat!(env!("CARGO_MANIFEST_DIR"), "/recipes/arms")).expect("arms") {
        let arm = entry.expect("an arm").path();
        let name = format!("{}.toml", arm.file_stem().expect("a name").to_string_lossy());
        let made = elbowroom(folder.path(), &["new", "recipe", "--arm", arm.to_str().expect("UTF-8"), &name]);
        assert!(made.status.success(), "{}", String::from_utf8_lossy(&made.stderr));
        let checked = elbowroom(folder.path(), &["check", &name]);
        assert!(checked.status.success(), "{name}: {}", String::from_utf8_lossy(&checked.stdout));
    }
}

#[test]
fn without_a_file_it_is_printed_and_a_file_that_is_there_is_left() {
    let folder = tempfile::tempdir().expect("a folder");
    let printed = elbowroom(folder.path(), &["new", "arm"]);
    assert!(printed.status.success() && String::from_utf8_lossy(&printed.stdout).contains("elbowroom-arm = 1"));
    fs::write(folder.path().join("a.toml"), "mine").expect("written");
    let refused = elbowroom(folder.path(), &["new", "arm", "a.toml"]);
    assert_eq!(refused.status.code(), Some(2));
    assert!(String::from_utf8_lossy(&refused.stderr).contains("a.toml is there already; choose another name"));
    assert_eq!(fs::read_to_string(folder.path().join("a.toml")).expect("read"), "mine");
    let missing = elbowroom(folder.path(), &["new", "recipe", "--arm", "none.toml"]);
    assert_eq!(missing.status.code(), Some(2));
    assert!(String::from_utf8_lossy(&missing.stderr).contains("there is no such file (none.toml)"));
}

//! Opening files from a folder.

use std::path::Path;

use elbowroom::files::{demo, open};

use super::{ARM, RECIPE, told};

#[test]
fn files_that_cannot_be_read_say_why() {
    let folder = tempfile::tempdir().expect("a folder");
    let said = |name: &str, bytes: Option<&[u8]>| {
        let path = folder.path().join(name);
        if let Some(bytes) = bytes {
            std::fs::write(&path, bytes).expect("written");
        }
        told(open(&path).map(|_| ())).replace(&folder.path().display().to_string(), "F")
    };
    assert_eq!(said("none.toml", None), "there is no such file (F/none.toml)");
    assert_eq!(said("", None), "this is a folder; give a file (F/)");
    assert_eq!(said("a.toml", Some(b"a = 1\nb = \"\xe9\"")), "byte 0xe9 is not UTF-8 text; save the file as UTF-8 (F/a.toml:2:6)");
    assert_eq!(said("b.toml", Some(b"\xff\xfea\0")), "the file is UTF-16 text; save it as UTF-8 (F/b.toml)");
    assert_eq!(said("c.toml", Some(&vec![b'#'; 65 << 20])), "the file is larger than 64 MiB; no recipe or arm file is (F/c.toml)");
    assert_eq!(
        said("d.toml", Some(RECIPE.replace("share = 60", "share = 0").as_bytes())),
        "recipe: arm is \"arm.toml\"; there is no such file (F/arm.toml) (F/d.toml:3:7)\n\
         waypoint 2 \"above\": share is 0 %; it must be above 0 and at most 100 (F/d.toml:39:9)"
    );
    assert_eq!(
        said("e.toml", Some(RECIPE.replace("arm.toml", " ").as_bytes())),
        "recipe: arm is empty; it must be the path of an arm file, seen from the recipe (F/e.toml:3:7)"
    );
    assert_eq!(
        said("d.toml", Some(RECIPE.replace("arm = \"arm.toml\"", "arm = \"d.toml\"").as_bytes())),
        "this is a recipe, but an arm file is needed here; an arm file has the line \"elbowroom-arm = 1\" (F/d.toml:1:1)"
    );
}

#[test]
fn faults_of_a_recipe_and_of_its_arm_file_are_told_together() {
    let folder = tempfile::tempdir().expect("a folder");
    std::fs::create_dir(folder.path().join("arms")).expect("made");
    let arm = ARM.replace("rate = 900", "rate = 0").replace("[0, 0, 0] }\naxis", "[0, 0, inf] }\naxis");
    let recipe = RECIPE
        .replace("arm.toml", "arms/a.toml")
        .replace("joints = [0, 10, 200]", "joints = [0, 10]")
        .replace("-by = 20", "-by = -20");
    std::fs::write(folder.path().join("arms/a.toml"), arm).expect("written");
    std::fs::write(folder.path().join("r.toml"), recipe).expect("written");
    let said = told(open(&folder.path().join("r.toml")).map(|_| ()));
    assert_eq!(
        said.replace(&folder.path().display().to_string(), "F"),
        "waypoint 2 \"above\": fly-by is -20; it must be above 0 (F/r.toml:40:10)\n\
         joint J2: place: xyz[3] is inf; it must be a finite number (F/arms/a.toml:20:24)\n\
         joint J3: rate is 0 mm/s; it must be above 0 (F/arms/a.toml:32:8)",
        "how many joint values there must be is not known while the arm is not"
    );
}

#[test]
fn every_recipe_of_the_project_opens() {
    let mut opened = 0;
    for entry in std::fs::read_dir("recipes").expect("the folder is there") {
        let path = entry.expect("listed").path();
        if path.extension().is_some_and(|end| end == "toml") {
            let read = open(&path).unwrap_or_else(|rejected| panic!("{rejected}"));
            assert_eq!(Path::new(&read.recipe_source.path), path);
            assert_eq!(Path::new(&read.arm_source.path), Path::new("recipes").join(&read.recipe.arm));
            opened += 1;
        }
    }
    assert!(opened >= 4);
}

#[test]
fn what_is_built_in_is_what_the_folder_holds() {
    let (inside, outside) = (demo(), open(Path::new("recipes/housing-transfer.toml")).expect("it opens"));
    assert_eq!(inside.recipe, outside.recipe);
    assert_eq!(inside.arm.data(), outside.arm.data());
    assert_eq!(inside.recipe_source.text, outside.recipe_source.text);
}

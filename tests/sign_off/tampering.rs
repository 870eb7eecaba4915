//! A table of what somebody might do to a record or to what it is of. Each is noticed, with the right words.

use elbowroom::checks::Verdict;
use elbowroom::files::{read_record, record_text};
use elbowroom::review::Record;

use super::cell::{Cell, assert_code};

const RECIPE: &str = "lid-placing.toml";
const ARM: &str = "arms/four-axis-rrpr.toml";
const RECORD: &str = "lid-placing.signoff.toml";

/// Edits of one text in a file, once signed: the file, what stands there, what is put there, and what must be told of it.
const EDITS: [(&str, &str, &str, &str); 30] = [
    (RECIPE, "[-30, 70, 40, 0]  ", "[-30, 70.001, 40, 0]  ", "waypoint \"rest\", joints: [-30, 70, 40, 0] -> [-30, 70.001, 40, 0]"),
    (RECIPE, "speed  = 200", "speed  = 201", "waypoint \"on lid\", speed: 200 -> 201"),
    (RECIPE, "dwell  = 0.2", "dwell  = 0.25", "waypoint \"on lid\", dwell: 0.2 -> 0.25"),
    (RECIPE, "share  = 35", "", "waypoint \"above box\", share: 35 -> nothing"),
    (RECIPE, "fly-by = 20", "fly-by = 21", "waypoint \"chute free\", fly-by: 20 -> 21"),
    (RECIPE, "force = [0, 0, 15]", "force = [0, 0, 25]", "waypoint \"on box\", push.force: [0, 0, 15] -> [0, 0, 25]"),
    (RECIPE, "then   = { take = \"lid\" }", "", "waypoint \"on lid\", then.take: \"lid\" -> nothing"),
    (RECIPE, "xyz = [0, 0, 90], q", "xyz = [0, 0, 91], q", "waypoint \"above box\", pose.xyz: [0, 0, 90] -> [0, 0, 91]"),
    (RECIPE, "name   = \"chute free\"", "name   = \"Chute free\"", "waypoint \"Chute free\", name: nothing -> \"Chute free\""),
    (RECIPE, "mass    = 0.8", "mass    = 0.9", "tool \"suction plate\", mass: 0.8 -> 0.9"),
    (RECIPE, "xyz = [0, 0, 120]", "xyz = [0, 0, 121]", "tool \"suction plate\", tcp.xyz: [0, 0, 120] -> [0, 0, 121]"),
    (RECIPE, "com     = [0, 0, 50]", "com     = [0, 1, 50]", "tool \"suction plate\", com: [0, 0, 50] -> [0, 1, 50]"),
    (RECIPE, "mass    = 1.2", "mass    = 1.1", "load \"lid\", mass: 1.2 -> 1.1"),
    (RECIPE, "xyz  = [400, 250, 60]", "xyz  = [400, 250, 61]", "frame \"belt\", xyz: [400, 250, 60] -> [400, 250, 61]"),
    (RECIPE, "accel       = 2500", "accel       = 2400", "file, usual.accel: 2500 -> 2400"),
    (RECIPE, "[usual]", "[acceptance]\nrate-reserve = 5\n[usual]", "file, acceptance.rate-reserve: nothing -> 5"),
    (RECIPE, "[usual]", "[mount]\nxyz = [0, 0, 0]\nrpy = [1, 0, 0]\n[usual]", "file, mount.rpy: nothing -> [1, 0, 0]"),
    (RECIPE, "[usual]", "repeat = \"never\"\n[usual]", "file, repeat: nothing -> \"never\""),
    (
        RECIPE,
        "name = \"Lid placing\"",
        "name = \"Lid placing, checked\"",
        "file, name: \"Lid placing\" -> \"Lid placing, checked\"",
    ),
    (RECIPE, ARM, "arms/copy.toml", "file, arm: \"arms/four-axis-rrpr.toml\" -> \"arms/copy.toml\""),
    (ARM, "range  = [-130, 130]", "range  = [-131, 130]", "arm: joint \"J1\", range: [-130, 130] -> [-131, 130]"),
    (ARM, "rate   = 600", "rate   = 601", "arm: joint \"J2\", rate: 600 -> 601"),
    (ARM, "holding = 120, peak = 320", "holding = 130, peak = 320", "arm: joint \"J3\", torque.holding: 120 -> 130"),
    (ARM, "brake  = 160", "brake  = 190", "arm: joint \"J3\", brake: 160 -> 190"),
    (ARM, "a = 325", "a = 326", "arm: joint \"J2\", dh.a: 325 -> 326"),
    (ARM, "mass = 2.5", "mass = 2.4", "arm: joint \"J3\", link.mass: 2.5 -> 2.4"),
    (ARM, "rated-load = 3", "rated-load = 4", "arm: flange.rated-load: 3 -> 4"),
    (RECORD, "elbowroom-signoff = 1", "elbowroom-signoff = 2", "elbowroom-signoff is 2; this program reads version 1"),
    (RECORD, "clear-to = ", "clear-too = ", "unknown key \"clear-too\""),
    (RECORD, "name = \"Anna\"", "name = \"Anne\"", "the record was changed after it was written"),
];

#[test]
fn every_edit_of_a_signed_file_is_told_for_what_it_is() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    cell.write("arms/copy.toml", &cell.text(ARM));
    for (file, there, put, says) in EDITS {
        let before = cell.text(file);
        let after = before.replacen(there, put, 1);
        assert_ne!(before, after, "{there}");
        cell.write(file, &after);
        // What belongs to the arm file as a whole is told as its own.
        let says = says.replace("arm: flange", "arm: file, flange");
        assert_code(&cell.verify(&[]), if file == RECORD { 2 } else { 1 }, &says);
        cell.write(file, &before);
    }
    assert_code(&cell.verify(&[]), 0, "the record stands");
}

/// Changes to what a record says, by somebody who knows how to seal it again; and what must be told.
type Forgery = (fn(&mut Record), &'static str);
const FORGERIES: [Forgery; 13] = [
    (|record| record.verdict = Verdict::Tight, "verdict: the record says tight, found is clear"),
    (|record| record.segments[1].verdict = Verdict::Over, "the record says over, found is clear"),
    (|record| record.segments[1].checks[0].verdict = Verdict::Tight, "segment to \"on lid\""),
    (|record| record.segments[2].checks[1].room = "99.9 %".to_owned(), "room 99.9 %"),
    (|record| record.segments[2].checks[1].proved = "99.9 %".to_owned(), "(99.9 %)"),
    (|record| drop(record.segments.remove(0)), "number of segments"),
    (|record| "7 %".clone_into(&mut record.segments[0].clear_to), "clear up to: the record says 7 %"),
    (|record| "7 %".clone_into(&mut record.first_run.highest), "clear up to: the record says 7 %"),
    (|record| drop(record.not_checked.remove(0)), "not checked: the record says"),
    (|record| drop(record.cautions.pop()), "cautions: the record says"),
    (|record| record.data[0].value.push('0'), "data: the record says"),
    (|record| record.tightest[0].room = "99.9 %".to_owned(), "tightest: the record says"),
    (|record| record.content[0].value.push('0'), "content changed"),
];

#[test]
fn a_record_sealed_again_with_other_words_is_told_from_what_is_found() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    let source = elbowroom::files::read_text(&cell.path(RECORD)).expect("a record");
    let record = read_record(&source).expect("a record");
    assert_eq!(record_text(&record), source.text);
    for (forge, says) in FORGERIES {
        let mut forged = record.clone();
        forge(&mut forged);
        cell.write(RECORD, &record_text(&forged));
        assert_code(&cell.verify(&[]), 1, says);
        // By its own account made by another version, it is told as that.
        "9.9.9".clone_into(&mut forged.program);
        cell.write(RECORD, &record_text(&forged));
        let says = if says == "content changed" { says } else { "made by another version whose results differ" };
        assert_code(&cell.verify(&[]), 1, says);
    }
    // Another version that finds the same takes nothing from a record.
    cell.write(RECORD, &record_text(&Record { program: "9.9.9".to_owned(), ..record }));
    assert_code(&cell.verify(&[]), 0, "the record stands");
}

#[test]
fn swapped_lost_and_mangled_files_are_told() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    let (record, recipe, arm) = (cell.text(RECORD), cell.text(RECIPE), cell.text(ARM));
    for (mangled, says) in [
        (record.replace('\n', "\r\n"), "changed after it was written"),
        (format!("\u{feff}{record}"), "changed after it was written"),
        (format!("{record}\n"), "changed after it was written"),
        (format!("# so\n{record}"), "changed after it was written"),
        (record.trim_end().to_owned(), "changed after it was written"),
        (record[..record.len() / 2].to_owned(), "this is not TOML"),
        (record[..record.find("[[person]]").expect("a person")].to_owned(), "at least one [[person]]"),
        (String::new(), "the file holds nothing"),
        (recipe.clone(), "this is a recipe, but a sign-off record is needed here"),
    ] {
        cell.write(RECORD, &mangled);
        assert_code(&cell.verify(&[]), 2, says);
    }
    cell.write(RECORD, &record);
    // Two waypoints in another order.
    let parts: Vec<&str> = recipe.split("[[waypoint]]").collect();
    let mut swapped = parts.clone();
    swapped.swap(4, 7);
    cell.write(RECIPE, &swapped.join("[[waypoint]]"));
    assert_code(&cell.verify(&[]), 1, "order of waypoint");
    cell.write(RECIPE, &[&parts[..7], &parts[8..]].concat().join("[[waypoint]]"));
    assert_code(&cell.verify(&[]), 1, "to \"box free\": gone, clear before");
    // Another recipe under this one's name, another arm under this one's, and neither.
    cell.write(RECIPE, &cell.text("housing-transfer.toml"));
    assert_code(&cell.verify(&[]), 1, "content changed");
    cell.write(RECIPE, &recipe);
    cell.write(ARM, &cell.text("arms/six-axis-12kg.toml"));
    assert_code(&cell.verify(&[]), 2, "joints");
    cell.write(ARM, &arm);
    std::fs::remove_file(cell.path(ARM)).expect("removed");
    assert_code(&cell.verify(&[]), 2, "there is no such file");
    cell.write(ARM, &arm);
    std::fs::remove_file(cell.path(RECIPE)).expect("removed");
    assert_code(&cell.verify(&[]), 2, "there is no such file");
}

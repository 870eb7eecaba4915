//! What stands of a record made by another version, or run at another override.

use crate::cell::{Cell, assert_code, told};

#[test]
fn a_record_of_another_version_with_other_results_is_told_as_such() {
    let cell = Cell::new();
    assert_code(&cell.sign(&["--name", "Anna"]), 0, "seal");
    let place = cell.path("lid-placing.signoff.toml");
    let record = elbowroom::files::read_record(&elbowroom::files::read_text(&place).expect("there")).expect("a record");
    let with = |change: fn(&mut elbowroom::review::Record)| {
        let mut changed = record.clone();
        changed.program = "0.0.7".to_owned();
        change(&mut changed);
        cell.write("lid-placing.signoff.toml", &elbowroom::files::record_text(&changed));
        cell.verify(&[])
    };
    // Another version alone is no difference; that it finds something else is.
    assert_code(&with(|_| {}), 0, "the record stands");
    let other = with(|changed| changed.first_run.highest = "90 %".to_owned());
    assert_code(&other, 1, "90 %");
    assert!(told(&other).contains("version"), "{}", told(&other));
    let same = {
        let mut changed = record.clone();
        changed.first_run.highest = "90 %".to_owned();
        cell.write("lid-placing.signoff.toml", &elbowroom::files::record_text(&changed));
        cell.verify(&[])
    };
    assert_code(&same, 1, "90 %");
    assert_ne!(told(&same).lines().next(), told(&other).lines().next(), "the same version is told apart");
}

#[test]
fn the_cells_override_passes_where_all_is_clear_or_accepted() {
    let cell = Cell::new();
    cell.write("answers.toml", &cell.answers("housing-transfer.toml"));
    let signed = cell.run(&["sign", "housing-transfer.toml", "--name", "Anna", "--reasons", "answers.toml"]);
    assert_code(&signed, 0, "seal");
    let verify = |percent: &str| cell.run(&["verify", "housing-transfer.signoff.toml", "--override", percent]);
    // At 100 % two findings are left, and both were accepted.
    assert_code(&verify("100"), 0, "agrees in override");
    assert_code(&verify("50"), 0, "agrees in override");
    for bad in ["0", "101", "nan"] {
        assert_code(&verify(bad), 2, "above 0 and at most 100 %");
    }
    // Without the acceptance of a finding it does not pass, but at an override at which that is clear.
    let place = cell.path("housing-transfer.signoff.toml");
    let mut record = elbowroom::files::read_record(&elbowroom::files::read_text(&place).expect("there")).expect("a record");
    record.accepted.retain(|known| known.matter.check != elbowroom::checks::Check::Rate);
    cell.write("housing-transfer.signoff.toml", &elbowroom::files::record_text(&record));
    assert_code(&verify("100"), 1, "rate of J4, and nobody accepted it");
    assert!(!told(&verify("50")).contains("and nobody accepted it"));
}

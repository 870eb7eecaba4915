use elbowroom::checks::{Check, Finding, Watch};
use elbowroom::review::{Explanation, Judged, Remedy, Tried, explain, found_by, remedies_text, remedy_text, remedy_title};

use crate::cases::{FOUR, FULL, READY, SIX, STRETCH, figure, found, judged, past_a_straight_wrist, shown};

fn all(judged: &Judged, finding: &Finding) -> (Vec<Remedy>, Vec<Tried>) {
    found_by(judged, finding, &Watch::default())
}

fn snapshot(name: &str, judged: &Judged, check: Check) {
    let finding = found(judged, check);
    let (remedies, tried) = all(judged, &finding);
    let titles: Vec<String> = remedies.iter().map(|remedy| remedy_title(judged, remedy)).collect();
    let told =
        Explanation { title: explain(judged, &finding).title, paragraphs: remedies_text(judged, &finding, &remedies, &tried) };
    insta::assert_snapshot!(name, format!("{}\n{}", titles.join("\n"), shown(&told)));
}

#[test]
fn remedies_of_rates_and_accelerations_are_told() {
    snapshot("remedies_rate", &past_a_straight_wrist(400.0), Check::Rate);
    let line = r#"
    [[waypoint]]
    name = "down"
    pose = { xyz = [760, -60, 520], rpy = [180, 0, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "touch"
    pose = { xyz = [760, -60, 320], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 300
    accel = 15000
    "#;
    snapshot("remedies_accel", &judged(SIX, "", &format!("{READY}{line}")), Check::Accel);
    let turn = r#"
    [[waypoint]]
    name = "here"
    pose = { xyz = [760, -60, 520], rpy = [180, 0, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "turned"
    pose = { xyz = [760, -60, 520], rpy = [180, 0, 150] }
    arrive = "line"
    speed = 200
    turn-speed = 500
    turn-accel = 2000
    "#;
    snapshot("remedies_turning", &judged(SIX, "", &format!("{READY}{turn}")), Check::Rate);
}

#[test]
fn remedies_of_torques_and_loads_are_told() {
    snapshot("remedies_holding", &judged(SIX, "", STRETCH), Check::Holding);
    snapshot("remedies_flange", &judged(&FULL.replace("\"J5\", moment = 30", "\"J5\", moment = 18"), "", STRETCH), Check::Flange);
    let dip = r#"
    carrying = "housing"
    [[waypoint]]
    name = "above"
    joints = [-22, 28, -33, 0, 55, 0]
    [[waypoint]]
    name = "below"
    joints = [-22, 68, -58, 0, 55, 0]
    arrive = "joint"
    share = 100
    "#;
    snapshot("remedies_moving", &judged(FULL, "[acceptance]\nmoving-reserve = 45", dip), Check::Moving);
    let back = "[[waypoint]]\nname = \"back\"\njoints = [-22, 28, -33, 0, 55, 0]\narrive = \"joint\"\nshare = 90\n";
    let closed = judged(FULL, "[acceptance]\nholding-reserve = 5\nrms-reserve = 12", &format!("{STRETCH}dwell = 2\n{back}"));
    snapshot("remedies_rms", &closed, Check::Rms);
}

#[test]
fn remedies_of_places_are_told() {
    let end = "[[waypoint]]\nname = \"end\"\njoints = [0, -20, 74, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    snapshot("remedies_range", &judged(SIX, "", &format!("{READY}{end}")), Check::Range);
    let flipped = "[[waypoint]]\nname = \"flipped\"\njoints = [0, -20, -20, 180, -60, 180]\narrive = \"line\"\nspeed = 100\n";
    snapshot("remedies_other_posture", &judged(SIX, "", &format!("{READY}{flipped}")), Check::Reach);
    let far = r#"
    [[waypoint]]
    name = "near"
    pose = { xyz = [900, 0, 600], rpy = [180, 0, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "just too far"
    pose = { xyz = [1350, 0, 600], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 250
    "#;
    snapshot("remedies_reach", &judged(SIX, "", &format!("{READY}{far}")), Check::Reach);
}

#[test]
fn a_tool_that_the_work_lets_turn_is_turned() {
    let end = "[[waypoint]]\nname = \"end\"\njoints = [0, -20, -20, 0, 60, 349]\narrive = \"joint\"\nshare = 40\n";
    let judged = crate::cases::judged_freely(SIX, &format!("{READY}{end}"));
    snapshot("remedies_turn", &judged, Check::Range);
}

#[test]
fn remedies_at_a_fly_by_point_are_told() {
    let corner = r#"
    [[waypoint]]
    name = "from"
    pose = { xyz = [800, -200, 500], rpy = [180, 0, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "corner"
    pose = { xyz = [800, 200, 500], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 900
    accel = 4000
    fly-by = 20
    [[waypoint]]
    name = "to"
    pose = { xyz = [1000, 200, 500], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 900
    accel = 4000
    "#;
    let judged = judged(SIX, "", &format!("{READY}{corner}"));
    let of_blend = |finding: &&Finding| judged.plan.segments[finding.segment].blend;
    let finding = judged.survey.findings.iter().find(of_blend).unwrap_or_else(|| panic!("{:?}", judged.survey.findings));
    let (remedies, tried) = all(&judged, finding);
    let told = remedies_text(&judged, finding, &remedies, &tried);
    insta::assert_snapshot!("remedies_fly_by", shown(&Explanation { title: explain(&judged, finding).title, paragraphs: told }));
}

#[test]
fn a_wider_fly_by_is_told_with_both_radii() {
    let corner = r#"
    [[waypoint]]
    name = "from"
    pose = { xyz = [800, -200, 500], rpy = [180, 0, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "corner"
    pose = { xyz = [800, 200, 500], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 800
    accel = 5000
    fly-by = 30
    [[waypoint]]
    name = "to"
    pose = { xyz = [1000, 200, 500], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 800
    accel = 5000
    "#;
    snapshot("remedies_wider_fly_by", &judged(SIX, "", &format!("{READY}{corner}")), Check::Accel);
}

#[test]
fn another_height_and_another_grip_are_told_for_information() {
    let world = "[mount]\nxyz = [0, 0, 600]\n[[frame]]\nname = \"floor\"\nin = \"world\"\nxyz = [0, 0, 0]";
    let far = r#"
    [[waypoint]]
    name = "near"
    pose = { xyz = [900, 0, 900], rpy = [180, 0, 0], frame = "floor" }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "low and far"
    pose = { xyz = [1380, 0, 480], rpy = [180, 0, 0], frame = "floor" }
    arrive = "line"
    speed = 250
    "#;
    snapshot("remedies_height", &judged(SIX, world, &format!("{READY}{far}")), Check::Reach);
    let bar = "[[load]]\nname = \"bar\"\nmass = 6.5\ncom = [180, 0, 60]";
    let on = "[[waypoint]]\nname = \"on\"\njoints = [10, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    snapshot("remedies_grip", &judged(FULL, bar, &format!("carrying = \"bar\"{READY}{on}")), Check::Holding);
}

#[test]
fn remedies_of_the_cells_criteria_are_told() {
    snapshot("remedies_singular", &past_a_straight_wrist(100.0), Check::Singular);
    let aside = "[[waypoint]]\nname = \"aside\"\njoints = [90, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 80\n";
    snapshot("remedies_tcp_speed", &judged(SIX, "[acceptance]\ntcp-speed = 1000", &format!("{READY}{aside}")), Check::TcpSpeed);
}

#[test]
fn where_data_is_missing_no_remedy_is_promised() {
    let without: Vec<&str> = SIX.lines().filter(|line| !line.starts_with("torque")).collect();
    let on = "[[waypoint]]\nname = \"on\"\njoints = [10, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    snapshot("remedies_unproved", &judged(&without.join("\n"), "", &format!("{READY}{on}")), Check::Holding);
    let tilted = r#"
    [[waypoint]]
    name = "rest"
    joints = [-30, 70, 40, 0]
    [[waypoint]]
    name = "tilted"
    pose = { xyz = [400, 100, 60], rpy = [170, 0, 0] }
    arrive = "joint"
    share = 40
    "#;
    snapshot("remedies_orientation", &judged(FOUR, "", tilted), Check::Reach);
}

/// The figures of the words, put into the recipe by hand: the segment is clear at the speed told and not one faster, and the cycle
/// is as much longer as told.
#[test]
fn the_speed_and_the_time_told_can_be_worked_out_again() {
    let before = past_a_straight_wrist(400.0);
    let finding = found(&before, Check::Rate);
    let (remedies, _) = all(&before, &finding);
    let told = remedies.iter().map(|remedy| remedy_text(&before, &finding, remedy)).find(|text| text.starts_with("Run "));
    let told = told.expect("slower");
    let speed = figure(&told, " at ", "mm/s");
    let slower = past_a_straight_wrist(speed);
    let flagged =
        |judged: &Judged| judged.survey.findings.iter().any(|finding| finding.segment == 1 && !finding.check.is_of_posture_alone());
    assert!(!flagged(&slower) && flagged(&past_a_straight_wrist(speed + 1.0)), "{told}");
    let costs = figure(&told, "It costs ", "s");
    let by_hand = slower.plan.duration() - before.plan.duration();
    assert!(costs >= by_hand && costs < by_hand + 0.01, "{costs} {by_hand}");
    // A line of 0.5 m from rest to rest at 1 m/s² lasts v + 0.5 / v (elementary kinematics).
    let lasts = |mm_s: f64| mm_s / 1000.0 + 500.0 / mm_s;
    assert!((lasts(speed) - lasts(400.0) - by_hand).abs() < 1e-6);
}

/// The parts of a shift are told along the base's axes: their length is the length told.
#[test]
fn the_parts_of_a_shift_make_up_its_length() {
    let before = past_a_straight_wrist(400.0);
    let finding = found(&before, Check::Rate);
    let (remedies, _) = all(&before, &finding);
    let texts: Vec<String> = remedies.iter().map(|remedy| remedy_text(&before, &finding, remedy)).collect();
    let told = texts.iter().find(|text| text.starts_with("Shift ")).unwrap_or_else(|| panic!("{texts:?}"));
    let length = figure(told, " by ", "mm");
    let part = |axis: &str| {
        told.split_once(axis).map_or(0.0, |(_, rest)| rest.split(' ').next().expect("a figure").parse().expect("a number"))
    };
    let parts: [f64; 3] = ["base x ", "base y ", "base z "].map(part);
    let made_up = parts.iter().map(|p: &f64| p * p).sum::<f64>().sqrt();
    assert!(made_up > 0.0 && (made_up - length).abs() < 0.2, "{parts:?} {length}: {told}");
}

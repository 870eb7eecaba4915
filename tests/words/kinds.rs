use elbowroom::checks::{Check, Doubt, Kind};
use elbowroom::review::{Judged, doubt_text, explain, headline, no_finding, not_checked};

use crate::cases::{FOUR, FULL, READY, SIX, STRETCH, found, judged, past_a_straight_wrist, shown};

fn snapshot(name: &str, judged: &Judged, check: Check) {
    insta::assert_snapshot!(name, shown(&explain(judged, &found(judged, check))));
}

#[test]
fn a_rate_past_a_straight_wrist_is_told_by_its_mechanics() {
    snapshot("rate_wrist", &past_a_straight_wrist(400.0), Check::Rate);
    snapshot("accel_bend", &past_a_straight_wrist(400.0), Check::Accel);
}

#[test]
fn a_rate_near_other_singular_postures_names_them() {
    let line = |from: &str, to: &str, speed: u32| {
        format!(
            r#"{READY}
            [[waypoint]]
            name = "from"
            pose = {{ {from}, rpy = [180, 0, 0] }}
            arrive = "joint"
            share = 40
            [[waypoint]]
            name = "to"
            pose = {{ {to}, rpy = [180, 0, 0] }}
            arrive = "line"
            speed = {speed}
            accel = 40000
            "#
        )
    };
    let stretched = line("xyz = [1100, 0, 600]", "xyz = [1328, 0, 600]", 700);
    snapshot("rate_elbow", &judged(SIX, "", &stretched), Check::Rate);
    let over_the_base = line("xyz = [70, 250, 1000]", "xyz = [70, -250, 1000]", 600);
    snapshot("rate_shoulder", &judged(SIX, "", &over_the_base), Check::Rate);
    let four = line("xyz = [450, 0, 60]", "xyz = [599, 0, 60]", 1300)
        .replace(READY, "[[waypoint]]\nname = \"rest\"\njoints = [-30, 70, 40, 0]\n");
    snapshot("rate_without_wrist", &judged(FOUR, "", &four), Check::Rate);
}

#[test]
fn a_rate_without_a_singular_posture_is_told_by_lever_and_speed() {
    let line = r#"
    [[waypoint]]
    name = "to"
    pose = { xyz = [500, 500, 600], rpy = [180, 0, 90] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "across"
    pose = { xyz = [500, -500, 600], rpy = [180, 0, -90] }
    arrive = "line"
    speed = 2500
    accel = 9000
    turn-speed = 400
    turn-accel = 1500
    "#;
    snapshot("rate_plain", &judged(SIX, "", &format!("{READY}{line}")), Check::Rate);
}

#[test]
fn an_acceleration_from_the_ramp_is_told_as_such() {
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
    snapshot("accel_ramp", &judged(SIX, "", &format!("{READY}{line}")), Check::Accel);
}

#[test]
fn holding_is_told_by_who_asks_how_much() {
    snapshot("holding", &judged(SIX, "", STRETCH), Check::Holding);
    let pushing = STRETCH.to_owned() + "push = { force = [0, 0, -400], frame = \"base\" }\n";
    snapshot("holding_push", &judged(SIX, "", &pushing), Check::Holding);
}

#[test]
fn holding_after_something_is_taken_is_told_at_the_stop() {
    let taking = STRETCH.replace("carrying = \"housing\"", "") + "then = { take = \"housing\" }\ndwell = 0.5\n";
    let judged = judged(SIX, "[acceptance]\nholding-reserve = 19", &taking);
    let finding = judged.survey.findings.iter().find(|finding| matches!(finding.kind, Kind::Excess(excess) if excess.after_stop));
    insta::assert_snapshot!("holding_after", shown(&explain(&judged, finding.expect("there is one"))));
}

/// The recipe's closing leg: back to where [`STRETCH`] began.
const BACK: &str = "[[waypoint]]\nname = \"back\"\njoints = [-22, 28, -33, 0, 55, 0]\narrive = \"joint\"\nshare = 90\n";

#[test]
fn torque_in_motion_is_told_by_its_parts_and_by_what_helps() {
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
    let falling = FULL.replace("peak = 1500 }", "peak = [[0, 1000], [40, 1000], [165, 500]] }");
    snapshot("moving", &judged(&falling, "", dip), Check::Moving);
    snapshot("moving_tight", &judged(FULL, "[acceptance]\nmoving-reserve = 45", dip), Check::Moving);
    // Without rotor and friction it is told only where links, tool and load are over by themselves.
    let weak = SIX.replace("peak = 1500", "peak = 700");
    let in_part = judged(&weak, "", dip);
    snapshot("moving_in_part", &in_part, Check::Moving);
    assert!(not_checked(&in_part).iter().any(|told| told.starts_with("Torque in motion of J1")), "{:?}", not_checked(&in_part));
    assert!(!not_checked(&judged(FULL, "", dip)).iter().any(|told| told.starts_with("Torque in motion")));
    let strong = judged(SIX, "", dip);
    assert!(!strong.survey.segments[0].check(Check::Moving).judged && strong.survey.doubts.contains(&Doubt::MotionInPart));
}

#[test]
fn a_push_is_a_part_of_torque_in_motion() {
    let pressing = r#"
    carrying = "housing"
    [[waypoint]]
    name = "above"
    joints = [-22, 28, -33, 0, 55, 0]
    [[waypoint]]
    name = "below"
    joints = [-22, 48, -43, 0, 55, 0]
    arrive = "joint"
    share = 40
    push = { force = [0, 0, 300], frame = "base" }
    "#;
    snapshot("moving_push", &judged(FULL, "[acceptance]\nmoving-reserve = 60", pressing), Check::Moving);
}

#[test]
fn a_brake_is_told_by_what_it_holds_when_the_power_fails() {
    snapshot("brake", &judged(&FULL.replace("brake  = 950", "brake  = 560"), "", STRETCH), Check::Brake);
    snapshot("brake_tight", &judged(FULL, "[acceptance]\nbrake-reserve = 45", STRETCH), Check::Brake);
}

#[test]
fn the_load_at_the_flange_is_told_by_weight_lever_and_inertia() {
    let rated = |from: &str, to: &str| judged(&FULL.replace(from, to), "", STRETCH);
    snapshot("flange_mass", &rated("rated-load = 12", "rated-load = 9"), Check::Flange);
    snapshot("flange_moment", &rated("\"J5\", moment = 30", "\"J5\", moment = 18"), Check::Flange);
    snapshot("flange_inertia", &rated("\"J5\", moment = 30, inertia = 1.2", "\"J5\", moment = 30, inertia = 0.4"), Check::Flange);
}

#[test]
fn the_cycle_is_told_by_its_segments_and_by_the_pause_that_helps() {
    let closed = judged(FULL, "[acceptance]\nholding-reserve = 5\nrms-reserve = 45", &format!("{STRETCH}dwell = 2\n{BACK}"));
    snapshot("rms", &closed, Check::Rms);
    assert_eq!(headline(&closed), "Test: NOT READY: 2 clear, the cycle as a whole tight");
    let open = judged(FULL, "", STRETCH);
    assert!(not_checked(&open).iter().any(|told| told.contains("way back is missing")), "{:?}", not_checked(&open));
}

#[test]
fn closeness_is_told_with_the_posture_and_the_speed_left() {
    let line = r#"
    [[waypoint]]
    name = "out"
    pose = { xyz = [1400, 0, 700], rpy = [180, -50, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "farther"
    pose = { xyz = [1490, 0, 640], rpy = [180, -50, 0] }
    arrive = "line"
    speed = 60
    "#;
    let judged = judged(SIX, "[acceptance]\nsingular-least = 0.3\ntool-speed-left = 700", &format!("{READY}{line}"));
    snapshot("singular", &judged, Check::Singular);
    snapshot("speed_left", &judged, Check::SpeedLeft);
    snapshot("singular_wrist", &past_a_straight_wrist(100.0), Check::Singular);
}

#[test]
fn a_range_is_told_in_degrees_to_its_end() {
    let end = "[[waypoint]]\nname = \"end\"\njoints = [0, -20, 74, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    snapshot("range_tight", &judged(SIX, "", &format!("{READY}{end}")), Check::Range);
}

#[test]
fn the_tcp_speed_of_a_joint_move_is_told_by_its_joints() {
    let turn = "[[waypoint]]\nname = \"aside\"\njoints = [90, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 80\n";
    snapshot("tcp_speed", &judged(SIX, "[acceptance]\ntcp-speed = 1000", &format!("{READY}{turn}")), Check::TcpSpeed);
}

#[test]
fn the_speed_of_points_is_told_by_the_fastest() {
    let turn = "[[waypoint]]\nname = \"aside\"\njoints = [90, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 80\n";
    snapshot("point_speed_flange", &judged(SIX, "[acceptance]\npoint-speed = 700", &format!("{READY}{turn}")), Check::PointSpeed);
    let tool = "[[tool]]\nname = \"rake\"\nmass = 2\ncom = [0, 0, 60]\ntcp = { xyz = [0, 0, 100] }\n\
                points = [{ name = \"far tine\", xyz = [200, 0, 150] }]\n[acceptance]\npoint-speed = 700";
    let with_rake = turn.replace("arrive", "tool = \"rake\"\narrive");
    snapshot("point_speed_named", &judged(SIX, tool, &format!("{READY}{with_rake}")), Check::PointSpeed);
}

#[test]
fn cables_that_wind_are_told_by_both_ends() {
    let at = |name: &str, j6: f64| {
        format!("[[waypoint]]\nname = \"{name}\"\njoints = [0, -20, -20, 0, 60, {j6}]\narrive = \"joint\"\nshare = 40\n")
    };
    let turns = format!("{READY}{}{}{}", at("one way", 170.0), at("other way", -100.0), at("home", 0.0));
    let winding = judged(SIX, "[acceptance]\nwind-up = 200", &turns);
    snapshot("wind_up", &winding, Check::WindUp);
    assert!(headline(&winding).contains("the cycle as a whole over"), "{}", headline(&winding));
    for allowed in ["[acceptance]\nwind-up = 270", ""] {
        let result = judged(SIX, allowed, &turns);
        assert!(!result.survey.findings.iter().any(|finding| finding.check == Check::WindUp), "{allowed}");
        assert_eq!(result.survey.cycle.wind_up.judged, !allowed.is_empty());
    }
}

#[test]
fn a_sliding_joint_is_told_in_millimetres_and_newtons() {
    let down = r#"
    [[waypoint]]
    name = "rest"
    joints = [-30, 70, 10, 0]
    [[waypoint]]
    name = "down"
    joints = [-30, 70, 196, 0]
    arrive = "line"
    speed = 1400
    accel = 20000
    push = { force = [0, 0, -160], frame = "base" }
    "#;
    let judged = judged(FOUR, "", down);
    for check in [Check::Rate, Check::Accel, Check::Holding, Check::Range] {
        snapshot(&format!("sliding_{}", check.key()), &judged, check);
    }
}

#[test]
fn a_turn_on_the_spot_is_told_in_degrees() {
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
    snapshot("rate_turning", &judged(SIX, "", &format!("{READY}{turn}")), Check::Rate);
}

#[test]
fn words_of_direction_are_left_out_where_the_mount_makes_them_false() {
    let turn = "[[waypoint]]\nname = \"aside\"\njoints = [90, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 80\n";
    let hung = "[mount]\nxyz = [0, 0, 2400]\nrpy = [180, 0, 0]\n[acceptance]\ntcp-speed = 1000";
    let judged = judged(SIX, hung, &format!("{READY}{turn}"));
    let told = shown(&explain(&judged, &found(&judged, Check::TcpSpeed)));
    assert!(told.contains("along base"), "{told}");
    for word in [" left ", " right ", " up ", " down ", "forward"] {
        assert!(!told.contains(word), "{word}: {told}");
    }
}

#[test]
fn every_way_of_not_arriving_is_told() {
    let far = r#"
    [[waypoint]]
    name = "near"
    pose = { xyz = [900, 0, 600], rpy = [180, 0, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "too far"
    pose = { xyz = [2400, 0, 600], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 250
    [[waypoint]]
    name = "after"
    pose = { xyz = [900, 0, 600], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 250
    "#;
    let judged_far = judged(SIX, "", &format!("{READY}{far}"));
    let reach: Vec<_> = judged_far.survey.findings.iter().filter(|finding| finding.check == Check::Reach).collect();
    for finding in reach {
        insta::assert_snapshot!(format!("reach_segment_{}", finding.segment + 2), shown(&explain(&judged_far, finding)));
    }
    let flipped = "[[waypoint]]\nname = \"flipped\"\njoints = [0, -20, -20, 180, -60, 180]\narrive = \"line\"\nspeed = 100\n";
    snapshot("reach_other_posture", &judged(SIX, "", &format!("{READY}{flipped}")), Check::Reach);
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
    snapshot("reach_orientation", &judged(FOUR, "", tilted), Check::Reach);
}

#[test]
fn what_is_not_known_is_told_with_its_reason() {
    let without = |what: &str| {
        let lines: Vec<String> = SIX.lines().filter(|line| !line.starts_with(what)).map(str::to_owned).collect();
        lines.join("\n")
    };
    let still = "[[waypoint]]\nname = \"on\"\njoints = [10, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    let points = format!("{READY}{still}");
    snapshot("unproved_rating", &judged(&without("torque"), "", &points), Check::Holding);
    snapshot("unproved_masses", &judged(&without("link"), "", &points), Check::Holding);
    let guessed = SIX.replacen("peak = 1500 }", "peak = 1500, grounds = \"guess\" }", 1);
    snapshot("unproved_guess", &judged(&guessed, "", &points), Check::Holding);
}

#[test]
fn a_segment_without_findings_says_what_is_nearest() {
    let still = "[[waypoint]]\nname = \"on\"\njoints = [10, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    let judged = judged(SIX, "", &format!("{READY}{still}"));
    insta::assert_snapshot!("no_finding", shown(&no_finding(&judged, 0)));
    assert_eq!(headline(&judged), "Test: READY TO SIGN: 1 clear");
}

#[test]
fn what_was_not_checked_follows_the_recipe() {
    let still = "[[waypoint]]\nname = \"on\"\njoints = [10, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    let told = |arm: &str, criteria: &str| not_checked(&judged(arm, criteria, &format!("{READY}{still}"))).join("\n");
    assert!(told(SIX, "").contains("TCP speed: the recipe sets no limit"));
    assert!(!told(SIX, "[acceptance]\ntcp-speed = 900").contains("TCP speed"));
    assert!(told(SIX, "").contains("Clearance"));
    let no_masses: Vec<&str> = SIX.lines().filter(|line| !line.starts_with("link")).collect();
    assert!(told(&no_masses.join("\n"), "").contains("every link's mass"));
}

#[test]
fn doubts_name_what_is_probably_wrong() {
    let same = r#"
    [[waypoint]]
    name = "again"
    joints = [0, -20, -20, 0, 60, 0]
    arrive = "joint"
    share = 40
    then = { release = true }
    "#;
    let judged = judged(SIX, "", &format!("{READY}{same}"));
    let told: Vec<String> = judged.survey.doubts.iter().map(|doubt| doubt_text(&judged, doubt)).collect();
    insta::assert_snapshot!("doubts", told.join("\n"));
    let shown = doubt_text(&judged, &Doubt::Shown { waypoint: 1, gap: 0.012, turn: 0.05 });
    assert!(shown.starts_with("Waypoint 2 \"again\": the pose that the cell showed there is 12.0 mm and 2.9° from"), "{shown}");
}

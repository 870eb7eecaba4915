//! First-run plan, reduced speed and the speeds of points: hand-worked figures, scaling laws, and the demonstration cell.

use std::process::Command;
use std::sync::Arc;

use elbowroom::checks::{Check, Meter, Proof, Spot, Verdict, Watch, judge_at, spot_peaks, stopping};
use elbowroom::files::{demo, read_arm, read_recipe};
use elbowroom::motion::{Follower, Segment, Side};
use elbowroom::program::ToolPoint;
use elbowroom::review::{Judged, REDUCED_SPEED, first_run, first_run_text, reduced_speed};
use elbowroom::units::Share;
use serde_json::Value;

/// An arm of one joint that turns about upright z at 180 deg/s; its flange stands on the axis.
const TURNTABLE: &str = r#"
elbowroom-arm = 1
name = "Turntable"
task = "turn-z"
characteristic-length = 500
[[joint]]
name = "J1"
kind = "revolute"
place = { xyz = [0, 0, 300] }
axis = [0, 0, 1]
range = [-170, 170]
rate = 180
accel = 900
torque = { holding = 100 }
link = { mass = 5, com = [0, 0, 0] }
"#;

/// A turn of 120 degrees at full rate; `more` goes into the tool's table, `top` above the waypoints.
fn turntable(more: &str, top: &str) -> Judged {
    let text = format!(
        r#"
elbowroom-recipe = 1
name = "Turn"
arm = "arm.toml"
{top}
[[tool]]
name = "rod"
tcp = {{ xyz = [300, 0, 0] }}
mass = 1
com = [150, 0, 0]
{more}
[[waypoint]]
name = "one"
joints = [-60]
[[waypoint]]
name = "two"
joints = [60]
arrive = "joint"
share = 100
"#
    );
    let arm = Arc::new(read_arm(TURNTABLE, "arm.toml").unwrap_or_else(|wrong| panic!("{wrong}")));
    let recipe = Arc::new(read_recipe(&text, "turn.toml", &arm).unwrap_or_else(|wrong| panic!("{wrong}")));
    Judged::of(&arm, &recipe, None, &Watch::default()).expect("nobody stops it")
}

fn demo_judged() -> Judged {
    let opened = demo();
    Judged::of(&Arc::new(opened.arm), &Arc::new(opened.recipe), None, &Watch::default()).expect("nobody stops it")
}

#[test]
fn a_tcp_off_the_axis_moves_while_the_flange_origin_stands_still() {
    // By hand: 300 mm * 180 deg/s = 942.5 mm/s; a point at [300, 400, 220] is 500 mm off the axis: half as many metres
    // a second as pi.
    let judged = turntable("points = [{ name = \"grip end\", xyz = [300, 400, 220] }]", "");
    let points = &judged.recipe.tools[0].points;
    let peaks = spot_peaks(&judged.arm, &judged.plan.segments[0], points);
    let speed = |spot: &Spot| peaks.iter().find(|peak| peak.spot == *spot).expect("it is told").speed;
    assert!((speed(&Spot::Tcp) - 0.942_477_796).abs() < 1e-8);
    assert_eq!(speed(&Spot::Flange), 0.0);
    assert!((speed(&Spot::Tool("grip end".to_owned())) - 0.5 * std::f64::consts::PI).abs() < 1e-8);
    assert_eq!(peaks.len(), 3, "an arm of one joint has no elbow and no wrist centre");
}

#[test]
fn reduced_speed_asks_for_the_override_that_brings_the_tcp_down_to_it() {
    // By hand: 250 of 942.5 mm/s is 26.5 %, so 26 %.
    let reduced = reduced_speed(&turntable("", ""), &Watch::default()).expect("nobody stops it");
    assert_eq!(reduced[0].run_at, Share::percent(26.0));
    assert!(reduced[0].needs_override());
    let tcp = reduced[0].survey.check(Check::TcpSpeed);
    assert!(matches!(tcp.proof, Proof::Proved(_)), "{:?}", tcp.proof);
    let peak = tcp.worst().expect("judged");
    assert!((peak.limit.si - REDUCED_SPEED).abs() < 1e-15 && (peak.demand.si - 0.26 * 0.942_477_796).abs() < 1e-8);
}

#[test]
fn points_move_as_fast_as_differences_of_their_places_say() {
    let judged = demo_judged();
    let point = ToolPoint { name: "corner".to_owned(), at: elbowroom::geometry::V3::new(0.08, -0.05, 0.2) };
    for segment in &judged.plan.segments {
        let follower = Follower::of(&judged.arm, segment);
        let peaks = spot_peaks(&judged.arm, segment, std::slice::from_ref(&point));
        assert_eq!(peaks.len(), 5);
        for peak in &peaks {
            let place = |time: f64| {
                let posture = follower.at(segment.law.at(time, Side::Before)[0]).expect("followed").posture;
                match &peak.spot {
                    Spot::Tcp => posture.tcp(&segment.carried.tcp).at,
                    Spot::Flange => posture.flange().at,
                    Spot::Tool(_) => posture.flange().point(&point.at),
                    Spot::Elbow => posture.origin(2),
                    Spot::WristCentre => posture.origin(4),
                }
            };
            let h = 1e-5;
            let speed = |time: f64| (place(time + h) - place(time - h)).norm() / (2.0 * h);
            let time = peak.at.time.clamp(h, segment.duration() - h);
            assert!((speed(time) - peak.speed).abs() < 1e-3, "{:?}: {} {}", peak.spot, speed(time), peak.speed);
            for k in 1..400 {
                let there = speed(segment.duration() * f64::from(k) / 400.0);
                assert!(there <= peak.speed + 1e-3, "{:?}: {there} beyond {}", peak.spot, peak.speed);
            }
        }
    }
}

#[test]
fn an_override_scales_rates_by_itself_and_accelerations_by_its_square() {
    let judged = demo_judged();
    let segment: &Segment = &judged.plan.segments[8];
    let full = &judged.survey.segments[8];
    for k in [0.1, 0.3, 0.58] {
        let gravity = judged.plan.gravity;
        let slow = judge_at(&judged.arm, 8, segment, &judged.recipe.acceptance, gravity, Share::fraction(k));
        for (check, power) in [(Check::Rate, k), (Check::Accel, k * k), (Check::Holding, 1.0), (Check::Range, 1.0)] {
            for (a, b) in full.check(check).peaks.iter().zip(&slow.check(check).peaks) {
                let off = (a.demand.si * power).abs() - b.demand.si.abs();
                // Peaks are found by looking, to about a thousandth of the limit.
                assert!(off.abs() < 2e-3 * (1.0 + b.limit.si.abs()), "{check:?} {k}: {:?} {:?}", a.demand, b.demand);
            }
        }
    }
}

#[test]
fn the_demonstration_cell_is_planned_as_designed() {
    let judged = demo_judged();
    let plan = first_run(&judged, &Watch::default()).expect("nobody stops it");
    let run = |number: usize| plan.segments.iter().find(|run| judged.plan.segments[run.segment].number() == number).expect("there");
    // 58 % of 400 mm/s is 232 mm/s.
    assert_eq!(run(10).highest, Some(Share::percent(58.0)));
    assert_eq!(run(10).held_back, Some((Check::Rate, Some(3))));
    assert_eq!(run(12).highest, None);
    assert_eq!(run(12).held_back, Some((Check::Holding, Some(1))));
    assert!((2..=14).filter(|n| ![10, 12].contains(n)).all(|n| run(n).highest == Some(Share::WHOLE) && run(n).held_back.is_none()));
    assert!(plan.segments.iter().all(|run| run.gaps.is_empty()));
    assert_eq!(plan.highest, None, "segment 12 is tight at every override");
    let verdicts: Vec<Verdict> = plan.stages.iter().map(elbowroom::review::Stage::verdict).collect();
    assert_eq!(verdicts, [Verdict::Tight, Verdict::Tight, Verdict::Tight, Verdict::Over, Verdict::Over]);
    // Every override that is told is proved at that override, by every check that is judged.
    for run in &plan.segments {
        let Some(share) = run.highest else { continue };
        let segment = &judged.plan.segments[run.segment];
        let criteria = &judged.recipe.acceptance;
        let survey = judge_at(&judged.arm, run.segment, segment, criteria, judged.plan.gravity, share);
        assert_eq!(survey.verdict, Verdict::Clear);
        assert!(survey.checks.iter().filter(|result| result.judged).all(|result| matches!(result.proof, Proof::Proved(_))));
    }
    let told = first_run_text(&judged, &plan).join(" ");
    assert!(told.contains("Held back, which no override changes: segment 12 by holding of J2."), "{told}");
    assert!(!told.contains("may run") && !told.contains("safe"), "{told}");
}

#[test]
fn a_whole_program_is_planned_to_the_override_of_its_slowest_segment() {
    // By hand: the TCP at 942.5 mm/s keeps a limit of 500 mm/s up to 53 %.
    let judged = turntable("", "[acceptance]\ntcp-speed = 500\nstages = [10, 53, 54]");
    let plan = first_run(&judged, &Watch::default()).expect("nobody stops it");
    assert_eq!(plan.highest, Some(Share::percent(53.0)));
    assert_eq!(plan.segments[0].held_back, Some((Check::TcpSpeed, None)));
    let verdicts: Vec<Verdict> = plan.stages.iter().map(elbowroom::review::Stage::verdict).collect();
    assert_eq!(verdicts, [Verdict::Clear, Verdict::Clear, Verdict::Over]);
}

fn elbowroom(arguments: &[&str]) -> String {
    let run = Command::new(env!("CARGO_BIN_EXE_elbowroom"))
        .args(arguments)
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("the program starts");
    assert_eq!(run.status.code(), Some(0), "{}", String::from_utf8_lossy(&run.stderr));
    String::from_utf8(run.stdout).expect("it prints UTF-8")
}

#[test]
fn the_plan_is_printed_for_people_and_for_programs() {
    insta::assert_snapshot!("plan_80", elbowroom(&["plan", "--demo", "--width", "80"]));
    insta::assert_snapshot!("plan_40", elbowroom(&["plan", "--demo", "--width", "40"]));
    let plan: Value = serde_json::from_str(&elbowroom(&["plan", "--demo", "--json"])).expect("it prints JSON");
    assert_eq!(plan["format"], "elbowroom-plan/1");
    assert_eq!(plan["highest_override"], Value::Null);
    assert_eq!(plan["segments"][8]["highest_override"], 58.0);
    assert_eq!(plan["segments"][8]["held_back_by"], "rate");
    assert_eq!(plan["reduced_speed"]["segments"][8]["override"], 62.0);
    assert_eq!(plan["stages"].as_array().expect("stages").len(), 5);
}

#[test]
fn what_is_wrong_with_stages_and_points_is_told() {
    let told = |more: &str, top: &str| {
        let text = format!(
            "elbowroom-recipe = 1\nname = \"n\"\narm = \"a\"\n{top}\n[[tool]]\nname = \"rod\"\ntcp = {{ xyz = [300, 0, 0] }}\n{more}\n\
             [[waypoint]]\nname = \"a\"\njoints = [0]\n[[waypoint]]\nname = \"b\"\njoints = [9]\narrive = \"joint\"\nshare = 9\n"
        );
        let arm = read_arm(TURNTABLE, "arm.toml").expect("it reads");
        read_recipe(&text, "r.toml", &arm).expect_err("it is wrong").to_string()
    };
    assert!(
        told("", "[acceptance]\nstages = [50, 25]")
            .contains("acceptance: stages is [50, 25]; it must be 1 to 12 overrides in %, rising"),
        "{}",
        told("", "[acceptance]\nstages = [50, 25]")
    );
    let twice = "points = [{ name = \"a\", xyz = [0, 0, 1] }, { name = \"a\", xyz = [0, 0, 2] }]";
    assert!(told(twice, "").contains("tool \"rod\": point 2: name \"a\" is taken already"), "{}", told(twice, ""));
    let keyed = "points = [{ name = \"a\", xy = [0, 0, 1] }]";
    assert!(told(keyed, "").contains("unknown key \"xy\""), "{}", told(keyed, ""));
    assert!(told("", "[acceptance]\nwind-up = 0").contains("wind-up is 0; it must be above 0"));
}

#[test]
fn a_stop_lets_the_tcp_and_the_joint_run_on_as_even_braking_does() {
    // By hand: from 180 deg/s at 900 deg/s² a joint takes 0.2 s and 18 degrees, and 0.1 s and 18 degrees of reaction before; on
    // a radius of 300 mm the TCP runs 300 mm * 36 degrees = 188.5 mm.
    let stop = |data: &str| {
        let arm = TURNTABLE.replace("accel = 900\n", &format!("accel = 900\n{data}\n"));
        let judged = turntable("", "");
        let arm = read_arm(&arm, "arm.toml").unwrap_or_else(|wrong| panic!("{wrong}"));
        stopping(&arm, &judged.plan.segments[0])
    };
    for data in ["stop = { decel = 900, reaction = 0.1 }", "stop = { time = 0.2, reaction = 0.1 }"] {
        let stop = stop(data).expect("it has data");
        assert!((stop.joints[0].run_on.to_degrees() - 36.0).abs() < 1e-9);
        assert!((stop.joints[0].time - 0.3).abs() < 1e-12 && (stop.time - 0.3).abs() < 1e-12);
        assert!((stop.tcp - 0.3 * 36f64.to_radians()).abs() < 1e-12);
    }
    assert!(stop("").is_none(), "without data nothing is told");
    for (data, told) in [
        ("stop = { decel = 0 }", "joint J1: decel is 0 deg/s²; it must be above 0"),
        ("stop = { time = -1 }", "joint J1: time is -1 s; it must be above 0"),
        ("stop = { decel = 9, reaction = -1 }", "joint J1: reaction is -1 s; it must be 0 or more"),
        ("stop = { decel = 9, time = 1 }", "decel and time both say how it brakes"),
        ("stop = {}", "stop needs decel"),
    ] {
        let arm = TURNTABLE.replace("accel = 900\n", &format!("accel = 900\n{data}\n"));
        let wrong = read_arm(&arm, "arm.toml").expect_err("it is wrong").to_string();
        assert!(wrong.contains(told), "{wrong}");
    }
}

#[test]
fn stopping_is_shown_where_the_arm_file_has_data() {
    insta::assert_snapshot!("plan_with_stops", elbowroom(&["plan", "recipes/tray-feed.toml", "--width", "80"]));
    let plan: Value = serde_json::from_str(&elbowroom(&["plan", "recipes/tray-feed.toml", "--json"])).expect("it prints JSON");
    let stops = plan["stopping"].as_array().expect("stops");
    assert_eq!(stops.len(), 7);
    assert_eq!(stops[0]["joints"][2]["unit"], "mm");
}

#[test]
fn lower_overrides_that_are_not_clear_are_told() {
    let judged = demo_judged();
    let mut plan = first_run(&judged, &Watch::default()).expect("nobody stops it");
    plan.segments[0].gaps = vec![Share::percent(45.0), Share::percent(40.0)];
    plan.segments[0].highest = Some(Share::percent(80.0));
    plan.segments[0].held_back = Some((Check::TcpSpeed, None));
    let told = first_run_text(&judged, &plan).join(" ");
    assert!(told.contains("Segment 2 is clear up to 80 %, but not at 45 % and 40 %: not every demand falls with speed."), "{told}");
    assert!(told.contains("segment 2 up to 80 %, held back by TCP speed and segment 10 up to 58 %"), "{told}");
}

#[test]
fn nothing_lies_beyond_what_was_proved_at_an_override() {
    let judged = demo_judged();
    let criteria = &judged.recipe.acceptance;
    for (index, segment) in judged.plan.segments.iter().enumerate() {
        for k in [0.1, 0.33, 0.58] {
            let survey = judge_at(&judged.arm, index, segment, criteria, judged.plan.gravity, Share::fraction(k));
            let slow = segment.at_override(k);
            let meter = Meter::of(&judged.arm, &slow, criteria, judged.plan.gravity);
            let follower = Follower::of(&judged.arm, &slow);
            for step in 0..=500 {
                let [u, rate, accel] = slow.law.at(slow.duration() * f64::from(step) / 500.0, Side::Before);
                let reading = meter.read(&follower.at(u).expect("followed"), rate, accel);
                for result in &survey.checks {
                    let Proof::Proved(bound) = result.proof else { continue };
                    for slot in meter.slots(result.check).filter(|slot| meter.channel(*slot).judged) {
                        let room = meter.channel(slot).room(reading[slot]).as_fraction();
                        assert!(room >= bound.as_fraction() - 1e-9, "segment {index} at {k}: {:?} {room} {bound:?}", result.check);
                    }
                }
            }
        }
    }
}

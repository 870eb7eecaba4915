use elbowroom::checks::{Check, Finding, Kind};
use elbowroom::geometry::V3;
use elbowroom::kinematics::Posture;
use elbowroom::motion::{Follower, Side};
use elbowroom::review::{Bar, Judged, Label, explain};
use elbowroom::units::STANDARD_GRAVITY;

use crate::cases::{READY, SIX, STRETCH, figure, found, judged, past_a_straight_wrist, says};

fn flagged(judged: &Judged, check: Check, segment: usize) -> bool {
    judged.survey.findings.iter().any(|finding| finding.check == check && finding.segment == segment)
}

fn bars(judged: &Judged, finding: &Finding) -> Vec<Bar> {
    explain(judged, finding).paragraphs.into_iter().flat_map(|paragraph| paragraph.bars).collect()
}

fn number(text: &str) -> f64 {
    text.split(' ').next().and_then(|number| number.parse().ok()).expect("a figure with its unit")
}

#[test]
fn the_rate_told_is_the_slope_of_the_joints_values_over_time() {
    let judged = past_a_straight_wrist(400.0);
    let finding = found(&judged, Check::Rate);
    let joint = finding.joint.expect("a joint's rate");
    let told = figure(&says(&judged, &finding, Label::What), "asked for ", "°/s");
    let segment = &judged.plan.segments[finding.segment];
    let at = |time: f64| {
        let u = segment.law.at(time, Side::Before)[0];
        Follower::of(&judged.arm, segment).at(u).expect("followed").q[joint]
    };
    let (time, step) = (finding.worst().time, 1e-4);
    let slope = ((at(time + step) - at(time - step)) / (2.0 * step)).to_degrees();
    assert!((told - slope).abs() < 0.6, "{told} {slope}");
}

#[test]
fn the_wrist_law_told_yields_the_rates_told() {
    let judged = past_a_straight_wrist(400.0);
    let finding = found(&judged, Check::Rate);
    let why = says(&judged, &finding, Label::Why);
    let apart = figure(&why, "J5 stands ", "°").to_radians();
    let across = figure(&why, "turn: ", "°/s");
    let told = figure(&why, "J6 at ", "°/s");
    // q6' = w / sin, with angle and rate told to a tenth.
    assert!((across / apart.sin() - told.abs()).abs() < 0.05 * told.abs(), "{across} {apart} {told}");
}

#[test]
fn the_speed_told_as_an_estimate_meets_rate_and_acceleration() {
    let judged = past_a_straight_wrist(400.0);
    for check in [Check::Rate, Check::Accel] {
        let rule = says(&judged, &found(&judged, check), Label::Why);
        let after = if check == Check::Rate { "here at " } else { "by that rule " };
        let told = figure(&rule, after, "mm/s");
        assert!(told < 400.0 && told > 100.0, "{rule}");
        let joint = found(&judged, check).joint;
        let mended = past_a_straight_wrist(told);
        let still =
            mended.survey.findings.iter().any(|finding| finding.check == check && finding.joint == joint && finding.segment == 1);
        assert!(!still, "{check:?} at {told} mm/s: {:?}", mended.survey.findings);
        // One step of the last digit faster is too fast, or the advice would be needlessly slow.
        let faster = past_a_straight_wrist(told + 2.0);
        assert!(flagged(&faster, check, 1), "{check:?} at {} mm/s", told + 2.0);
    }
}

#[test]
fn the_share_told_as_an_estimate_meets_the_tcp_speed() {
    let turn = |share: f64| {
        let points = format!(
            "{READY}[[waypoint]]\nname = \"aside\"\njoints = [90, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = {share}\n"
        );
        judged(SIX, "[acceptance]\ntcp-speed = 1000", &points)
    };
    let fast = turn(80.0);
    let told = figure(&says(&fast, &found(&fast, Check::TcpSpeed), Label::Why), "a share of ", "%");
    assert!(!flagged(&turn(told), Check::TcpSpeed, 0), "{told}");
    assert!(flagged(&turn(told + 1.0), Check::TcpSpeed, 0), "{told}");
}

#[test]
fn the_shares_of_holding_add_up_and_are_the_slope_of_the_potential_energy() {
    let judged = judged(SIX, "", STRETCH);
    let finding = found(&judged, Check::Holding);
    let bars = bars(&judged, &finding);
    let (total, shares) = bars.split_last().expect("bars");
    assert_eq!(shares.iter().map(|bar| number(&bar.figure)).sum::<f64>(), number(&total.figure));
    let joint = finding.joint.expect("a joint's");
    let segment = &judged.plan.segments[finding.segment];
    let q = Follower::of(&judged.arm, segment).at(finding.worst().u).expect("followed").q;
    let energy = |step: f64| {
        let mut q = q;
        q[joint] += step;
        let chain = judged.arm.chain();
        let posture = Posture::at(chain, &q);
        let links: f64 = (0..chain.len).map(|j| chain.mass[j] * posture.frame(j).point(&chain.com[j]).z).sum();
        let carried = &segment.carried;
        let hangs = |mass: f64, com: &V3| mass * posture.flange().point(com).z;
        STANDARD_GRAVITY * (links + hangs(carried.tool_mass, &carried.tool_com) + hangs(carried.load_mass, &carried.load_com))
    };
    let slope = (energy(1e-5) - energy(-1e-5)) / 2e-5;
    assert!((slope - number(&total.figure)).abs() < 0.6, "{slope} {}", total.figure);
}

#[test]
fn lever_times_weight_is_what_tool_and_load_ask() {
    let judged = judged(SIX, "", STRETCH);
    let finding = found(&judged, Check::Holding);
    let why = says(&judged, &finding, Label::Why);
    let kg = figure(&why, "together weigh ", "kg");
    let mm = figure(&why, "centre of that is ", "mm");
    let asked: f64 = bars(&judged, &finding)
        .iter()
        .filter(|bar| ["gripper", "housing"].contains(&bar.name.as_str()))
        .map(|bar| number(&bar.figure))
        .sum();
    assert!((kg * STANDARD_GRAVITY * mm / 1000.0 - asked.abs()).abs() < 1.5, "{kg} {mm} {asked}");
}

#[test]
fn a_push_is_told_with_its_sign_turned() {
    let pushing = STRETCH.to_owned() + "push = { force = [0, 0, 40], frame = \"base\" }\n";
    let (with, without) = (judged(SIX, "", &pushing), judged(SIX, "", STRETCH));
    let finding = found(&with, Check::Holding);
    let why = says(&with, &finding, Label::Why);
    // The tool presses the work upwards, so the work presses the tool down: that comes on top of the weight.
    assert!(why.contains("pushes the work with 40.0 N up"), "{why}");
    let told = figure(&why, "comes on top: without it the motor would supply ", "N·m");
    let plain = found(&without, Check::Holding);
    let Kind::Excess(excess) = plain.kind else { panic!("an excess") };
    assert!((told - excess.demand.si).abs() < 0.6, "{told} {excess:?}");
}

#[test]
fn a_range_is_told_from_its_end() {
    let end = "[[waypoint]]\nname = \"end\"\njoints = [0, -20, 73.6, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    let judged = judged(SIX, "", &format!("{READY}{end}"));
    let what = says(&judged, &found(&judged, Check::Range), Label::What);
    assert!(what.starts_with("J3 stands at +73.6°, 1.4° to its end, the upper one at +75.0°."), "{what}");
}

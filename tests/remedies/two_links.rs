//! Two turning links of equal length in a plane, near the stretched elbow: everything in closed form (any textbook on the planar 2R
//! arm). With r the distance from the base, r = 2 l cos(q2/2), so q2' = -r' / (l sin(q2/2)), and q1 = atan2(y, x) - q2/2.

use elbowroom::checks::Check;
use elbowroom::review::{Change, RemedyKind};

use crate::cases::{found, judged, remedy};

const TWO: &str = r#"
elbowroom-arm = 1
name = "Two links"
convention = "classical"
characteristic-length = 500
task = "x y"
[[joint]]
name = "J1"
kind = "revolute"
dh = { a = 500, alpha = 0, d = 0, theta = 0 }
range = [-170, 170]
rate = 120
accel = 90000
[[joint]]
name = "J2"
kind = "revolute"
dh = { a = 500, alpha = 0, d = 0, theta = 0 }
range = [-170, 170]
rate = 120
accel = 90000
[flange]
rated-load = 5
"#;

/// Length of each link, m.
const LINK: f64 = 0.5;
/// The line's distance from the base, m.
const AWAY: f64 = 0.9;
/// Half the line's length, m: at its ends the arm is stretched to 0.9985 of its reach.
const HALF: f64 = 0.425;
/// Acceleration along the line, m/s².
const ACCEL: f64 = 4.0;

/// The greatest rate of each joint on the line at a speed of `v` m/s, rad/s, from the closed form alone.
fn closed_form(v: f64) -> [f64; 2] {
    let mut most = [0.0f64; 2];
    for k in 0..=400_000 {
        let x = HALF * f64::from(k) / 400_000.0;
        // The ramp down: v² = 2 a (way left).
        let speed = v.min((2.0 * ACCEL * (HALF - x)).sqrt());
        let r = AWAY.hypot(x);
        let radial = speed * x / r;
        let q2 = radial / (LINK * (1.0 - (r / (2.0 * LINK)).powi(2)).sqrt());
        let around = speed * AWAY / (r * r);
        for sense in [-1.0, 1.0] {
            most[0] = most[0].max((around + sense * 0.5 * q2).abs());
        }
        most[1] = most[1].max(q2);
    }
    most
}

/// Joint values of the line's start, by the law of cosines.
fn start() -> [f64; 2] {
    let r = AWAY.hypot(HALF);
    let q2 = 2.0 * (r / (2.0 * LINK)).acos();
    [(-HALF).atan2(AWAY).to_degrees() - 0.5 * q2.to_degrees(), q2.to_degrees()]
}

#[test]
fn the_fastest_speed_near_the_stretched_elbow_is_that_of_the_closed_form() {
    let [q1, q2] = start();
    let judged = judged(
        TWO,
        "[usual]\naccel = 4000\n[acceptance]\nsingular-least = 0.001\ntool-speed-left = 1",
        &format!(
            r#"
            [[waypoint]]
            name = "right"
            joints = [{q1}, {q2}]
            [[waypoint]]
            name = "left"
            pose = {{ xyz = [900, 425, 0] }}
            arrive = "line"
            speed = 900
            "#
        ),
    );
    let finding = found(&judged, Check::Rate);
    let Change::Speed { from, to } = remedy(&judged, &finding, RemedyKind::Slower).change else { panic!("a speed") };
    assert_eq!(from.as_mm_per_s(), 900.0);
    let allowed = 0.9 * 120f64.to_radians();
    let fits = |mm_s: u32| closed_form(f64::from(mm_s) / 1000.0).iter().all(|rate| *rate <= allowed);
    assert!(!fits(900));
    let to = to.as_mm_per_s().round() as u32;
    assert!(fits(to) && !fits(to + 1), "{to}: {:?} of {allowed}", closed_form(f64::from(to) / 1000.0));
}

#[test]
fn the_joint_rates_near_the_stretched_elbow_are_those_of_the_closed_form() {
    let [q1, q2] = start();
    let judged = judged(
        TWO,
        "[usual]\naccel = 4000\n[acceptance]\nsingular-least = 0.001\ntool-speed-left = 1",
        &format!(
            r#"
            [[waypoint]]
            name = "right"
            joints = [{q1}, {q2}]
            [[waypoint]]
            name = "left"
            pose = {{ xyz = [900, 425, 0] }}
            arrive = "line"
            speed = 300
            "#
        ),
    );
    let peaks = &judged.survey.segments[0].check(Check::Rate).peaks;
    for (peak, by_hand) in peaks.iter().zip(closed_form(0.3)) {
        // The sweep stops when a closer look could move no peak by a two-thousandth of its limit.
        assert!((peak.demand.si.abs() - by_hand).abs() <= 5e-4 * 120f64.to_radians(), "{peak:?} {by_hand}");
    }
}

//! `trace` as a person or a script runs it, and its figures by a second route.

use std::process::{Command, Output};

use elbowroom::arm::Joints;
use elbowroom::files::{Opened, demo};
use elbowroom::geometry::Rotation;
use elbowroom::kinematics::Posture;

fn trace(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_elbowroom"))
        .arg("trace")
        .args(arguments)
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("the program starts")
}

/// A trace by columns.
struct Table {
    headings: Vec<String>,
    rows: Vec<Vec<Option<f64>>>,
}

impl Table {
    fn of(bytes: &[u8]) -> Self {
        let text = std::str::from_utf8(bytes).expect("UTF-8");
        let mut lines = text.lines();
        let headings: Vec<String> = lines.next().expect("headings").split(',').map(str::to_owned).collect();
        let cell = |cell: &str| (!cell.is_empty()).then(|| cell.parse().unwrap_or_else(|_| panic!("\"{cell}\" is no number")));
        let rows: Vec<Vec<Option<f64>>> = lines.map(|line| line.split(',').map(cell).collect()).collect();
        assert!(rows.iter().all(|row| row.len() == headings.len()));
        Self { headings, rows }
    }

    fn column(&self, name: &str) -> Vec<f64> {
        let index = self.headings.iter().position(|heading| heading == name).unwrap_or_else(|| panic!("no {name}"));
        self.rows.iter().map(|row| row[index].unwrap_or(f64::NAN)).collect()
    }
}

fn demo_trace(every: &str) -> Table {
    let told = trace(&["--demo", "--every", every]);
    assert_eq!(told.status.code(), Some(0), "{told:?}");
    Table::of(&told.stdout)
}

#[test]
fn columns_name_their_units_and_time_never_runs_back() {
    let table = demo_trace("10ms");
    assert_eq!(table.headings[..7], ["time_s", "segment", "fraction", "J1_deg", "J1_deg_s", "J1_deg_s2", "J1_hold_nm"]);
    for name in ["sigma_min", "condition", "tool_speed_left_mm_s", "tcp_x_mm", "tcp_yaw_deg", "tcp_speed_mm_s"] {
        assert!(table.headings.contains(&name.to_owned()), "{name}");
    }
    let times = table.column("time_s");
    assert_eq!(times[0], 0.0);
    assert!(times.windows(2).all(|pair| pair[0] <= pair[1]));
    // The even grid has no gap, and no row but both sides of an instant stands twice.
    assert!(times.windows(2).all(|pair| pair[1] - pair[0] < 0.01 + 1e-8));
    let rows: Vec<String> = table.rows.iter().map(|row| format!("{row:?}")).collect();
    assert!(rows.windows(2).all(|pair| pair[0] != pair[1]));
}

#[test]
fn every_waypoint_has_a_row_where_the_recipe_puts_it() {
    let table = demo_trace("7ms");
    let Opened { recipe, .. } = demo();
    let [segments, fractions] = ["segment", "fraction"].map(|name| table.column(name));
    let [x, y, z] = ["tcp_x_mm", "tcp_y_mm", "tcp_z_mm"].map(|name| table.column(name));
    for (index, waypoint) in recipe.waypoints.iter().enumerate().skip(1) {
        let number = (index + 1) as f64;
        let row = (0..segments.len()).find(|&k| segments[k] == number && fractions[k] == 1.0);
        let row = row.unwrap_or_else(|| panic!("no row at the end of segment {number}"));
        assert!((0..segments.len()).any(|k| segments[k] == number && fractions[k] == 0.0));
        if let elbowroom::program::Taught::Pose { pose, .. } = &waypoint.taught {
            for (told, taught) in [x[row], y[row], z[row]].into_iter().zip(pose.at.iter()) {
                assert!((told - taught * 1000.0).abs() < 1e-5, "waypoint {number}: {told} {taught}");
            }
        }
    }
}

#[test]
fn rates_and_accelerations_are_the_slopes_of_the_columns_before_them() {
    let table = demo_trace("1ms");
    let (times, fractions, segments) = (table.column("time_s"), table.column("fraction"), table.column("segment"));
    let mut compared = 0;
    for joint in ["J1", "J2", "J3", "J4", "J5", "J6"] {
        let [value, rate, accel] = ["deg", "deg_s", "deg_s2"].map(|unit| table.column(&format!("{joint}_{unit}")));
        for k in 1..times.len() - 1 {
            let (before, after) = (times[k] - times[k - 1], times[k + 1] - times[k]);
            let even = (before - after).abs() < 1e-8 && before > 5e-4 && segments[k - 1] == segments[k + 1];
            // Across a corner of the speed law the acceleration jumps, and a difference means nothing.
            let moving = fractions[k - 1] < fractions[k] && fractions[k] < fractions[k + 1];
            if even && moving {
                let slope = |column: &[f64]| (column[k + 1] - column[k - 1]) / (before + after);
                assert!(
                    (slope(&value) - rate[k]).abs() < 0.02 + 2e-4 * rate[k].abs(),
                    "{joint} at {}: {} {}",
                    times[k],
                    slope(&value),
                    rate[k]
                );
                assert!(
                    (slope(&rate) - accel[k]).abs() < 1.0 + 2e-3 * accel[k].abs(),
                    "{joint} at {}: {} {}",
                    times[k],
                    slope(&rate),
                    accel[k]
                );
                compared += 1;
            }
        }
    }
    assert!(compared > 50_000, "{compared}");
}

#[test]
fn the_tcp_is_where_forward_kinematics_puts_the_joints() {
    let table = demo_trace("50ms");
    let Opened { arm, recipe, .. } = demo();
    let joints: Vec<Vec<f64>> = (1..=6).map(|j| table.column(&format!("J{j}_deg"))).collect();
    let [x, y, z] = ["tcp_x_mm", "tcp_y_mm", "tcp_z_mm"].map(|name| table.column(name));
    let angles = ["tcp_roll_deg", "tcp_pitch_deg", "tcp_yaw_deg"].map(|name| table.column(name));
    for k in 0..x.len() {
        let q = Joints::from_fn(6, |j| joints[j][k].to_radians());
        let tcp = Posture::at(arm.chain(), &q).tcp(&recipe.tools[0].tcp);
        let told = elbowroom::geometry::V3::new(x[k], y[k], z[k]) / 1000.0;
        assert!((told - tcp.at).norm() < 1e-7, "row {k}");
        let axes = Rotation::from_rpy_deg([angles[0][k], angles[1][k], angles[2][k]]).matrix();
        assert!((axes - tcp.axes).norm() < 1e-6, "row {k}");
    }
}

#[test]
fn standing_rows_stand_still_and_show_what_is_taken() {
    let table = demo_trace("10ms");
    let (times, segments) = (table.column("time_s"), table.column("segment"));
    let [rate, hold, speed] = ["J2_deg_s", "J2_hold_nm", "tcp_speed_mm_s"].map(|name| table.column(name));
    let fractions = table.column("fraction");
    let stands: Vec<usize> = (0..times.len()).filter(|&k| segments[k] == 3.0 && fractions[k] == 1.0).collect();
    let (first, last) = (stands[0], stands[stands.len() - 1]);
    assert!((times[last] - times[first] - 0.4).abs() < 1e-6);
    assert!(stands[1..].iter().all(|&k| rate[k] == 0.0 && speed[k] == 0.0));
    // The last of them already carries the housing, at the same instant as the one before.
    assert_eq!(times[last], times[last - 1]);
    assert!((hold[last] - hold[last - 1]).abs() > 10.0);
}

#[test]
fn steps_that_cannot_be_are_told_and_files_are_written_whole() {
    for (every, says) in [("0ms", "above 0"), ("10", "ms or s"), ("1e-9s", "1000000 are written"), ("-1s", "above 0")] {
        let told = trace(&["--demo", &format!("--every={every}")]);
        assert_eq!(told.status.code(), Some(2), "{every}");
        assert!(told.stdout.is_empty());
        assert!(String::from_utf8_lossy(&told.stderr).contains(says), "{told:?}");
    }
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("cycle.csv");
    let name = path.to_str().expect("UTF-8");
    assert_eq!(trace(&["--demo", "--output", name]).status.code(), Some(0));
    assert_eq!(std::fs::read(&path).expect("written"), trace(&["--demo"]).stdout);
    assert_eq!(std::fs::read_dir(folder.path()).expect("read").count(), 1);
    let nowhere = trace(&["--demo", "--output", folder.path().join("no/such/cycle.csv").to_str().expect("UTF-8")]);
    assert_eq!(nowhere.status.code(), Some(2));
    assert!(String::from_utf8_lossy(&nowhere.stderr).contains("can't be written"), "{nowhere:?}");
}

#[test]
fn a_trace_begins_with_the_wait_at_the_first_waypoint() {
    let folder = tempfile::tempdir().expect("a folder");
    std::fs::write(folder.path().join("arm.toml"), include_str!("../recipes/arms/four-axis-rrpr.toml")).expect("written");
    let recipe = r#"
elbowroom-recipe = 1
name = "Waits"
arm = "arm.toml"
[[waypoint]]
name = "rest"
joints = [-30, 70, 40, 0]
dwell = 0.105
[[waypoint]]
name = "same"
joints = [-30, 70, 40, 0]
arrive = "joint"
share = 50
[[waypoint]]
name = "aside"
joints = [30, 70, 40, 0]
arrive = "joint"
share = 50
"#;
    let path = folder.path().join("waits.toml");
    std::fs::write(&path, recipe).expect("written");
    let table = Table::of(&trace(&[path.to_str().expect("UTF-8"), "--every", "20 ms"]).stdout);
    let (times, segments, fractions) = (table.column("time_s"), table.column("segment"), table.column("fraction"));
    assert_eq!(times[..7], [0.0, 0.02, 0.04, 0.06, 0.08, 0.1, 0.105]);
    assert!(segments[..7].iter().all(|&number| number == 1.0) && fractions[..7].iter().all(|&u| u == 0.0));
    // The segment without motion has its one row, where it starts and ends.
    assert_eq!((times[7], segments[7], fractions[7]), (0.105, 2.0, 1.0));
    assert_eq!((times[8], segments[8], fractions[8]), (0.105, 3.0, 0.0));
}

#[test]
fn sliding_joints_and_awkward_names_and_lost_paths_are_written_as_they_should() {
    let folder = tempfile::tempdir().expect("a folder");
    let arm = include_str!("../recipes/arms/four-axis-rrpr.toml").replacen("\"J3\"", "'slide, \"long\"'", 1);
    let recipe = r#"
elbowroom-recipe = 1
name = "Lost"
arm = "arm.toml"
[[waypoint]]
name = "rest"
joints = [-30, 70, 40, 0]
[[waypoint]]
name = "too far"
pose = { xyz = [1400, 100, 300], rpy = [180, 0, 0] }
arrive = "line"
speed = 300
"#;
    std::fs::write(folder.path().join("arm.toml"), arm).expect("written");
    let path = folder.path().join("lost.toml");
    std::fs::write(&path, recipe).expect("written");
    let told = trace(&[path.to_str().expect("UTF-8")]);
    assert_eq!(told.status.code(), Some(0), "{told:?}");
    let text = String::from_utf8(told.stdout).expect("UTF-8");
    let headings = text.lines().next().expect("headings");
    assert!(
        headings.contains(
            "\"slide, \"\"long\"\"_mm\",\"slide, \"\"long\"\"_mm_s\",\"slide, \"\"long\"\"_mm_s2\",\"slide, \"\"long\"\"_hold_n\""
        ),
        "{headings}"
    );
    let last = text.lines().last().expect("rows");
    // Five columns for each of four joints and ten for the TCP are empty.
    assert!(last.ends_with(&format!(",1.000000000{}", ",".repeat(5 * 4 + 10))), "{last}");
    assert!(!text.lines().nth(1).expect("rows").contains(",,"));
}

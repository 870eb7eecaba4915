//! `check` and `explain` as a person or a script runs them.

use std::io::Read;
use std::path::PathBuf;
use std::process::{Command, Output, Stdio};

use serde_json::Value;

fn elbowroom(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_elbowroom"))
        .args(arguments)
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("the program starts")
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).expect("it prints UTF-8")
}

fn json(arguments: &[&str]) -> Value {
    serde_json::from_slice(&elbowroom(arguments).stdout).expect("it prints JSON")
}

fn segment(report: &Value, number: u64) -> &Value {
    let segments = report["segments"].as_array().expect("segments");
    segments.iter().find(|segment| segment["index"] == number).expect("there is that segment")
}

fn joint<'a>(check: &'a Value, name: &str) -> &'a Value {
    check["joints"].as_array().expect("joints").iter().find(|peak| peak["joint"] == name).expect("there is that joint")
}

/// A recipe of two waypoints that turns one joint, on the six-axis arm of the demonstration cell.
fn recipe(folder: &tempfile::TempDir, name: &str, end: f64) -> PathBuf {
    let arm = concat!(env!("CARGO_MANIFEST_DIR"), "/recipes/arms/six-axis-12kg.toml");
    std::fs::copy(arm, folder.path().join("arm.toml")).expect("copied");
    let text = format!(
        r#"
elbowroom-recipe = 1
name = "{name}"
arm = "arm.toml"
[[waypoint]]
name = "one"
joints = [0, -20, -20, 0, 60, 0]
[[waypoint]]
name = "two"
joints = [{end}, -20, -20, 0, 60, 0]
arrive = "joint"
share = 50
"#
    );
    let path = folder.path().join(format!("{name}.toml"));
    std::fs::write(&path, text).expect("written");
    path
}

fn named(paths: &[&PathBuf]) -> Vec<String> {
    paths.iter().map(|path| path.to_str().expect("UTF-8").to_owned()).collect()
}

#[test]
fn exit_codes_tell_clear_not_clear_and_not_judged() {
    let folder = tempfile::tempdir().expect("a folder");
    let (clear, tight, bad) = (recipe(&folder, "clear", 30.0), recipe(&folder, "tight", 164.0), folder.path().join("none.toml"));
    let code = |paths: &[&PathBuf]| {
        let names = named(paths);
        let mut arguments = vec!["check", "--quiet"];
        arguments.extend(names.iter().map(String::as_str));
        elbowroom(&arguments)
    };
    assert_eq!(code(&[&clear]).status.code(), Some(0));
    assert_eq!(code(&[&clear, &tight]).status.code(), Some(1));
    let all = code(&[&bad, &clear, &tight]);
    assert_eq!(all.status.code(), Some(2));
    assert_eq!(text(&all.stdout), "clear: READY TO SIGN: 1 clear\ntight: NOT READY: 1 tight\n");
    assert!(text(&all.stderr).contains("none.toml"), "{all:?}");
    for wrong in [&["check"][..], &["check", "--demo", "--nonsense"], &["check", "x.toml", "--demo"], &["nonsense", "more"]] {
        let told = elbowroom(wrong);
        assert_eq!(told.status.code(), Some(2), "{wrong:?}");
        assert!(told.stdout.is_empty() && !told.stderr.is_empty(), "{wrong:?}");
    }
    assert_eq!(elbowroom(&["--help"]).status.code(), Some(0));
    assert_eq!(elbowroom(&["--version"]).status.code(), Some(0));
}

#[test]
fn a_closed_pipe_ends_quietly() {
    for arguments in
        [&["check", "--demo"][..], &["check", "--demo", "--json"], &["trace", "--demo", "--every", "1ms"], &["explain", "--demo"]]
    {
        let mut child = Command::new(env!("CARGO_BIN_EXE_elbowroom"))
            .args(arguments)
            .stdout(Stdio::piped())
            .stderr(Stdio::piped())
            .spawn()
            .expect("it starts");
        // Closed before a single byte is read.
        drop(child.stdout.take());
        let mut complaints = String::new();
        child.stderr.take().expect("piped").read_to_string(&mut complaints).expect("read");
        let status = child.wait().expect("it ends");
        assert_eq!(complaints, "", "{arguments:?}");
        let expected = i32::from(arguments[0] == "check");
        assert_eq!(status.code(), Some(expected), "{arguments:?}");
    }
}

#[test]
fn the_demonstration_cell_teaches_what_it_should() {
    let report = json(&["check", "--demo", "--json"]);
    assert_eq!(report["format"], "elbowroom-check/1");
    assert_eq!(report["verdict"], "over");
    assert_eq!(report["segments"].as_array().map(Vec::len), Some(13));
    let asks = |peak: &Value| 100.0 - peak["room"].as_f64().expect("a room");
    let window = segment(&report, 10);
    assert_eq!(window["verdict"], "over");
    let rate = &window["checks"]["rate"];
    assert_eq!((&rate["joint"], &rate["unit"], &rate["limit"]), (&"J4".into(), &"deg_s".into(), &330.0.into()));
    assert!((asks(joint(rate, "J4")) - 154.0).abs() < 1.0, "{rate}");
    assert!((asks(joint(rate, "J6")) - 116.0).abs() < 1.0, "{rate}");
    assert!((rate["at"]["mm"].as_f64().expect("mm") - 250.0).abs() < 1.0);
    let shelf = &segment(&report, 12)["checks"]["holding"];
    assert_eq!((&shelf["verdict"], &shelf["joint"], &shelf["unit"]), (&"tight".into(), &"J2".into(), &"nm".into()));
    assert!((asks(shelf) - 84.0).abs() < 1.0, "{shelf}");
    assert_eq!(segment(&report, 12)["verdict"], "tight");
    for number in (2..=14).filter(|number| ![10, 12].contains(number)) {
        assert_eq!(segment(&report, number)["verdict"], "clear", "segment {number}");
        for (name, check) in segment(&report, number)["checks"].as_object().expect("checks") {
            assert!(check["proved"] == true || check["judged"] == false, "segment {number}, {name}: {check}");
        }
    }
    let cycle = &report["cycle"];
    assert_eq!((&cycle["verdict"], &cycle["closed"]), (&"clear".into(), &true.into()));
    let rms = &cycle["checks"]["rms"];
    assert_eq!((&rms["judged"], &rms["proof"], rms["joints"].as_array().map(Vec::len)), (&true.into(), &"settled".into(), Some(6)));
    let doubts = report["doubts"].as_array().expect("doubts");
    assert_eq!(doubts.len(), 1, "{doubts:?}");
    assert_eq!(doubts[0]["waypoint"], 7);
    assert!(doubts[0]["text"].as_str().is_some_and(|text| text.contains("12.0 mm")), "{doubts:?}");
    assert!(report["not_checked"].as_array().is_some_and(|told| told.len() > 5));
}

#[test]
fn json_has_its_keys_and_only_finite_figures() {
    let report = json(&["check", "--demo", "--json"]);
    for key in ["format", "version", "recipe", "arm", "verdict", "segments", "findings", "doubts", "not_checked"] {
        assert!(!report[key].is_null(), "{key}");
    }
    for segment in report["segments"].as_array().expect("segments") {
        for key in ["index", "from", "to", "arrive", "duration_s", "verdict", "room", "checks"] {
            assert!(!segment[key].is_null(), "{key} of {segment}");
        }
        for key in [
            "reach",
            "range",
            "rate",
            "accel",
            "holding",
            "moving",
            "brake",
            "flange",
            "rms",
            "singular",
            "speed_left",
            "tcp_speed",
        ] {
            let check = segment["checks"][key].as_object().unwrap_or_else(|| panic!("no {key}"));
            for key in ["room", "verdict", "proved", "joint", "at", "demand", "limit", "unit", "joints"] {
                assert!(check.contains_key(key), "{key} of {check:?}");
            }
        }
        let rate = &segment["checks"]["rate"];
        assert_eq!(rate["joints"].as_array().map(Vec::len), Some(6));
        // Room, demand and limit belong together.
        let [room, demand, limit] = ["room", "demand", "limit"].map(|key| rate[key].as_f64().expect("a figure"));
        assert!((room - 100.0 * (1.0 - demand.abs() / limit)).abs() < 1e-4, "{rate}");
    }
    let findings = report["findings"].as_array().expect("findings");
    assert!(findings.iter().any(|finding| finding["segment"] == 10 && finding["check"] == "rate" && finding["joint"] == "J4"));
    assert!(findings.iter().all(|finding| finding["paragraphs"].as_array().is_some_and(|told| told.len() >= 3)));
}

#[test]
fn the_same_recipe_yields_the_same_bytes() {
    let once = elbowroom(&["check", "--json", "recipes/tray-feed.toml", "recipes/lid-placing.toml"]);
    let again = elbowroom(&["check", "--json", "recipes/tray-feed.toml", "recipes/lid-placing.toml"]);
    assert_eq!(once.stdout, again.stdout);
    let lines = text(&once.stdout);
    assert_eq!(lines.lines().count(), 2);
    let names: Vec<Value> =
        lines.lines().map(|line| serde_json::from_str::<Value>(line).expect("JSON a line")["recipe"].clone()).collect();
    assert_eq!(names, ["Tray feed", "Lid placing"]);
}

#[test]
fn the_table_has_a_line_a_segment_within_80_columns() {
    let told = text(&elbowroom(&["check", "--demo"]).stdout);
    let table: Vec<&str> = told
        .lines()
        .skip_while(|line| !line.contains("nearest to its reserve"))
        .skip(1)
        .take_while(|line| !line.is_empty())
        .collect();
    assert_eq!(table.len(), 13, "{told}");
    for (line, number) in table.iter().zip(2..) {
        assert!(line.trim_start().starts_with(&format!("{number} ")), "{line}");
        assert!(line.chars().count() <= 80, "{line}");
    }
    assert!(told.starts_with("Housing transfer: NOT READY: 1 over, 1 tight, 11 clear\n"), "{told}");
    assert!(told.contains("no arm connected"));
    assert!(told.contains("J4 is asked for +508 °/s of 330 °/s: 154 %."), "{told}");
    assert!(told.contains("not checked: ") && told.contains("replaces no risk assessment"));
    assert!(told.lines().all(|line| line.chars().count() <= 100));
    let narrow = text(&elbowroom(&["check", "--demo", "--width", "40"]).stdout);
    let words = narrow.lines().skip_while(|line| !line.starts_with("over: ")).collect::<Vec<_>>();
    assert!(words.iter().all(|line| line.chars().count() <= 40), "{narrow}");
}

#[test]
fn explain_tells_one_segment_or_all_findings() {
    let one = text(&elbowroom(&["explain", "--demo", "--segment", "10"]).stdout);
    assert!(one.contains("Segment 10, the line from \"window in\" to \"window out\"") && !one.contains("J2 must hold"), "{one}");
    let clear = text(&elbowroom(&["explain", "--demo", "--segment", "8"]).stdout);
    assert!(clear.contains("clear: segment 8"), "{clear}");
    let all = elbowroom(&["explain", "--demo"]);
    assert_eq!(all.status.code(), Some(0));
    assert!(text(&all.stdout).contains("J2 must hold"));
    let none = elbowroom(&["explain", "--demo", "--segment", "99"]);
    assert_eq!(none.status.code(), Some(2));
    assert_eq!(text(&none.stderr), "there is no segment 99; they are numbered from 2 to 14\n");
}

/// Remedies as data: what they say is what their words say, and their edits are complete.
#[test]
fn explain_as_json_carries_remedies_with_figures_and_edits() {
    let report = json(&["explain", "--demo", "--json", "--segment", "10"]);
    assert_eq!(report["format"], "elbowroom-explain/1");
    let findings = report["findings"].as_array().expect("findings");
    assert!(!findings.is_empty());
    for finding in findings {
        assert_eq!(finding["segment"], 10);
        let remedies = finding["remedies"].as_array().expect("remedies");
        let of = |kind: &str| remedies.iter().find(|remedy| remedy["kind"] == kind).unwrap_or_else(|| panic!("no {kind}"));
        let slower = of("slower");
        assert_eq!((&slower["size"]["before"], &slower["size"]["unit"]), (&400.0.into(), &"mm_s".into()));
        let after = slower["size"]["after"].as_f64().expect("a speed");
        assert_eq!(slower["title"], format!("slower: 400 mm/s to {after} mm/s"));
        let edit = &slower["edits"][0];
        assert_eq!((&edit["waypoint"], &edit["name"], &edit["inserted"]), (&10.into(), &"window out".into(), &false.into()));
        let data = edit["data"].as_array().expect("data");
        assert_eq!(data.len(), 1, "{data:?}");
        assert_eq!((&data[0]["datum"], &data[0]["unit"]), (&"speed".into(), &"mm/s".into()));
        assert_eq!(data[0]["after"].as_str().and_then(|text| text.parse().ok()), Some(after));
        assert!(of("via")["edits"][0]["inserted"] == true);
        for remedy in remedies {
            let room = |when: &str| remedy[when].as_f64().expect("a room");
            assert!(room("room_after") > room("room_before"), "{remedy}");
            assert_eq!(remedy["information"] == true, remedy["edits"].as_array().is_some_and(Vec::is_empty), "{remedy}");
            assert!(remedy["costs_s"].is_f64() && remedy["weight"].is_f64(), "{remedy}");
        }
        let applicable = remedies.iter().filter(|remedy| remedy["information"] == false);
        let bad = |remedy: &Value| ["worsens", "doubts"].map(|key| remedy[key].as_array().is_some_and(|all| !all.is_empty()));
        let weights: Vec<([bool; 2], f64)> =
            applicable.map(|remedy| (bad(remedy), remedy["weight"].as_f64().expect("a weight"))).collect();
        assert!(weights.windows(2).all(|pair| pair[0] <= pair[1]), "{weights:?}");
        let all = remedies.len() + finding["tried"].as_array().expect("tried").len();
        assert!(all >= 7, "{all}");
    }
    let quick = json(&["explain", "--demo", "--json", "--no-remedies"]);
    assert!(quick["findings"].as_array().is_some_and(|all| all.len() == 3 && all.iter().all(|one| one["remedies"].is_null())));
    let both = elbowroom(&["explain", "--demo", "--json", "--segment", "10", "--tighten"]);
    assert_eq!(both.status.code(), Some(2));
}

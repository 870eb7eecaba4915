//! Figures of a report are those that `check --json` prints.

use std::process::Command;

use serde_json::Value;

use super::tags::{pieces, table, texts};
use super::written;
use elbowroom::files;

fn json() -> Value {
    let program = env!("CARGO_BIN_EXE_elbowroom");
    let output = Command::new(program).args(["check", "--demo", "--json"]).output().expect("it starts");
    serde_json::from_slice(&output.stdout).expect("it prints JSON")
}

/// The figure at the start of a text, and to how many digits behind the point it was rounded.
fn figure(text: &str) -> (f64, i32) {
    let number: String = text.chars().take_while(|sign| sign.is_ascii_digit() || "+-.".contains(*sign)).collect();
    let digits = number.split_once('.').map_or(0, |(_, behind)| behind.len());
    (number.parse().unwrap_or_else(|_| panic!("no figure: {text}")), digits as i32)
}

/// Whether a text shows a number, rounded either way.
fn shows(text: &str, value: &Value) -> bool {
    let (shown, digits) = figure(text);
    (shown - value.as_f64().expect("a number")).abs() < 10f64.powi(-digits)
}

#[test]
fn every_figure_of_the_findings_stands_in_the_json_too() {
    let (written, json) = (written(&files::demo(), false), json());
    let rows = table(&pieces(&written.html), "All findings, the worst first");
    let findings = json["findings"].as_array().expect("findings");
    assert_eq!((rows.len(), findings.len()), (4, 3));
    for (row, finding) in rows[1..].iter().zip(findings) {
        let [_, verdict, segment, _, joint, value, limit, room, reserve, at] = &row[..] else { panic!("{row:?}") };
        assert_eq!((finding["verdict"].as_str(), finding["joint"].as_str()), (Some(verdict.as_str()), Some(joint.as_str())));
        assert!(shows(segment, &finding["segment"]), "{segment}");
        for (text, key) in [(value, "demand"), (limit, "limit"), (room, "room"), (reserve, "reserve")] {
            assert!(shows(text, &finding[key]), "{key}: {text} {}", finding[key]);
        }
        let segments = json["segments"].as_array().expect("segments");
        let start = segments.iter().find(|known| known["index"] == finding["segment"]).expect("it is there")["start_s"].as_f64();
        let worst = start.expect("a start") + finding["worst"]["time_s"].as_f64().expect("a time");
        assert!((figure(at).0 - worst).abs() < 0.006, "{at} {worst}");
        let title = finding["title"].as_str().expect("a title");
        assert!(
            written.markdown.contains(title) && texts(&pieces(&written.html), "h3").iter().any(|told| told.ends_with(title)),
            "{title}"
        );
    }
}

#[test]
fn every_proved_room_stands_in_the_json_too() {
    let (written, json) = (written(&files::demo(), false), json());
    let rows = table(&pieces(&written.html), "Proved room of every check, segment by segment");
    let keys = ["reach", "range", "rate", "accel", "holding", "moving", "brake", "flange", "singular", "speed_left", "tcp_speed"];
    assert_eq!(rows[0].len(), keys.len() + 1);
    let segments = json["segments"].as_array().expect("segments");
    assert_eq!(rows.len(), segments.len() + 1);
    let mut proved = 0;
    for (row, segment) in rows[1..].iter().zip(segments) {
        assert!(shows(&row[0], &segment["index"]));
        for (cell, key) in row[1..].iter().zip(keys) {
            let check = &segment["checks"][key];
            match cell.as_str() {
                "–" => assert_eq!(check["judged"], false, "{key}"),
                "proved" => assert_eq!(check["proved"], true, "{key}"),
                flagged if flagged.starts_with(|sign: char| sign.is_ascii_alphabetic()) => {
                    let (verdict, room) = flagged.split_once(' ').expect("a verdict and a room");
                    assert!(check["verdict"] == verdict && shows(room, &check["room"]), "{key}: {flagged}");
                }
                room => {
                    // Rounded down to a tenth, so never more than what is proved.
                    let known = check["proved_room"].as_f64().expect("a proved room");
                    let (shown, _) = figure(room);
                    assert!(shown <= known + 1e-6 && shown > known - 0.1 - 1e-6, "{key}: {room} {known}");
                    proved += 1;
                }
            }
        }
    }
    assert!(proved > 90, "{proved}");
}

#[test]
fn both_formats_have_the_same_tables() {
    let written = written(&files::demo(), false);
    let pieces = pieces(&written.html);
    let tables: Vec<&str> = written.markdown.split("\n\n").filter(|part| part.starts_with("| ")).collect();
    let captions: Vec<&str> = written
        .markdown
        .split("\n\n")
        .zip(written.markdown.split("\n\n").skip(1))
        .filter(|(_, next)| next.starts_with("| "))
        .map(|(caption, _)| caption)
        .collect();
    assert!(tables.len() >= 10, "{}", tables.len());
    let mut compared = 0;
    for (caption, table_text) in captions.iter().zip(&tables) {
        // Shares of a sum stand under a paragraph.
        let Some(caption) = caption.strip_suffix(':').filter(|caption| !caption.contains('.')) else { continue };
        let rows = table(&pieces, caption);
        let lines: Vec<&str> = table_text.lines().collect();
        assert_eq!(rows.len(), lines.len() - 1, "{caption}");
        for (row, line) in rows.iter().zip(std::iter::once(lines[0]).chain(lines[2..].iter().copied())) {
            let plain = |text: &str| text.replace(['*', '`', '\\'], "");
            let cells: Vec<String> = line.trim_matches('|').split(" | ").map(|cell| plain(cell.trim())).collect();
            assert_eq!(cells, row.iter().map(|cell| plain(cell)).collect::<Vec<_>>(), "{caption}");
        }
        compared += 1;
    }
    assert!(compared >= 10, "{compared}");
}

use crate::review::SignOff;

use super::Report;
use super::block::{Block, Cell, Column, Table, table};

/// The data that was judged, each with file and line.
pub(super) fn blocks(report: &Report) -> Vec<Block> {
    let (judged, sources) = (report.judged, report.sources);
    let (arm, recipe) = (&judged.arm, &judged.recipe);
    let names = |names: Vec<&str>| if names.is_empty() { "none".to_owned() } else { names.join(", ") };
    let of_file = |line: usize| if line > 0 { format!(", line {line}") } else { String::new() };
    let line = |of: &str, key: &str| {
        sources.content.iter().find(|item| item.of == of && item.key == key).map_or_else(String::new, |item| of_file(item.line))
    };
    let joints: Vec<&str> = arm.joints().iter().map(|joint| joint.name.as_str()).collect();
    let rows = [
        ("recipe", format!("{} ({}{})", recipe.name, sources.recipe.path, line("file", "name"))),
        ("arm", format!("{} ({}{}), joints {}", arm.name(), sources.arm.path, line("arm: file", "name"), names(joints))),
        ("tools", names(recipe.tools.iter().map(|tool| tool.name.as_str()).collect())),
        ("loads", names(recipe.loads.iter().map(|load| load.name.as_str()).collect())),
        ("waypoints", recipe.waypoints.len().to_string()),
        (
            "units",
            "mm, degrees, kg, N, N·m, s as the files have them; angles are roll, pitch, yaw about the fixed x, then y, then z"
                .to_owned(),
        ),
    ];
    let brief = table("What was judged", ["what", "which"], [false; 2], None, rows.map(|(what, which)| [what.to_owned(), which]));
    let sign_off = SignOff::of(judged, sources);
    let data = sign_off.data().iter();
    let rows = data.map(|datum| {
        let cells = [datum.of.clone(), datum.value.clone()].map(Cell::Text);
        cells.into_iter().chain([Cell::Code(datum.at.clone())]).collect()
    });
    let columns = ["datum", "as the file has it", "file and line"].map(|words| Column { words, figures: false });
    let rests = Table { caption: "What the judgement rests on".to_owned(), columns: columns.into(), rows: rows.collect() };
    vec![Block::Section("data", "The data judged"), Block::Table(brief), Block::Table(rests)]
}

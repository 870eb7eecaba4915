use crate::program::Acceptance;
use crate::review::Judged;
use crate::review::sealed::{Datum, Sources};
use crate::seal::Item;

/// Beginnings of the names of what a judgement rests on, besides the waypoints: in the recipe, and in the arm file.
const RESTS_ON: [&str; 5] = ["tool ", "load ", "frame ", "arm: joint ", "arm: file"];

/// The data that a judgement rests on, each with its figures as the file has them and where they stand: criteria, mount with
/// gravity, tools, loads, frames, then the arm.
pub(super) fn data(judged: &Judged, sources: &Sources) -> Vec<Datum> {
    let content = &sources.content;
    let file = |items: &[&Item], otherwise: &str| match items.iter().map(|item| item.line).filter(|line| *line > 0).min() {
        Some(line) => {
            let of_arm = items.iter().any(|item| item.of.starts_with("arm: "));
            format!("{}:{line}", if of_arm { &sources.arm.path } else { &sources.recipe.path })
        }
        None => format!("{} ({otherwise})", sources.recipe.path),
    };
    let under = |key: &str| -> Vec<&Item> {
        let dotted = format!("{key}.");
        content.iter().filter(|item| item.of == "file" && (item.key == key || item.key.starts_with(&dotted))).collect()
    };
    let mut data = Vec::new();
    let (criteria, mount, usual) = (under("acceptance"), under("mount"), under("usual"));
    data.push(Datum {
        of: "acceptance criteria".to_owned(),
        value: criteria_text(&judged.recipe.acceptance),
        at: file(&criteria, "says nothing; the usual ones"),
        confirmed: false,
    });
    let g = judged.plan.gravity;
    let gravity = format!("gravity in base axes [{:.3}, {:.3}, {:.3}] m/s²", plain(g.x), plain(g.y), plain(g.z));
    let mount_value = if mount.is_empty() { gravity } else { format!("{}; {gravity}", figures(&mount)) };
    data.push(Datum {
        of: "mount and gravity".to_owned(),
        value: mount_value,
        at: file(&mount, "says nothing; upright at the world's origin"),
        confirmed: false,
    });
    if !usual.is_empty() {
        data.push(Datum { of: "usual speeds".to_owned(), value: figures(&usual), at: file(&usual, ""), confirmed: false });
    }
    let mut seen: Vec<&str> = Vec::new();
    for item in content.iter().filter(|item| RESTS_ON.iter().any(|start| item.of.starts_with(start))) {
        // What belongs to a named thing, such as a point of a tool, is told with it.
        let owner = item.of.split("\", ").next().map_or(item.of.as_str(), |head| &item.of[..(head.len() + 1).min(item.of.len())]);
        if seen.contains(&owner) {
            continue;
        }
        seen.push(owner);
        let part = format!("{owner}, ");
        let items: Vec<&Item> =
            content.iter().filter(|item| (item.of == owner || item.of.starts_with(&part)) && item.key != "name").collect();
        data.push(Datum { of: owner.to_owned(), value: figures(&items), at: file(&items, ""), confirmed: false });
    }
    data
}

/// Never `-0`.
fn plain(value: f64) -> f64 {
    if value.abs() < 5e-4 { 0.0 } else { value }
}

/// Keys and values in a row.
fn figures(items: &[&Item]) -> String {
    let rows = items.iter().map(|item| format!("{} {}", item.key, item.value));
    rows.collect::<Vec<_>>().join(", ")
}

/// The criteria in force, those that the recipe leaves to their usual values included.
fn criteria_text(criteria: &Acceptance) -> String {
    let Acceptance {
        rate_reserve,
        accel_reserve,
        holding_reserve,
        moving_reserve,
        brake_reserve,
        rms_reserve,
        range_least,
        slide_least,
        singular_least,
        tool_speed_left,
        tcp_speed,
        point_speed,
        wind_up,
        stages,
    } = criteria;
    let mut told = vec![
        format!("reserves: rate {rate_reserve}, acceleration {accel_reserve}, holding {holding_reserve}"),
        format!("moving {moving_reserve}, brake {brake_reserve}, cycle {rms_reserve}"),
        format!("ends of range {range_least} or {slide_least}"),
        format!("singular value {singular_least}"),
        format!("tool speed left {tool_speed_left}"),
        tcp_speed.map_or("no limit of TCP speed".to_owned(), |speed| format!("TCP speed {speed}")),
    ];
    told.extend(point_speed.map(|speed| format!("speed of flange, elbow and named points {speed}")));
    told.extend(wind_up.map(|angle| format!("wind-up {angle}")));
    told.push(format!("stages {}", stages.shares().iter().map(ToString::to_string).collect::<Vec<_>>().join(", ")));
    told.join(", ")
}

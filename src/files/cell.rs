use crate::geometry::{Pose, V3};
use crate::program::{Acceptance, BASE, Frame, Load, Stages, Tool, ToolPoint, Usual};
use crate::units::{Acceleration, Angle, Jerk, Length, Share, Speed, TurnAcceleration, TurnJerk, TurnRate};

use super::body::{body, maybe_body};
use super::placed::{metres, own_pose, pose};
use super::table::Table;

/// Where the base stands in the world: the table `mount`.
pub(super) fn mount(top: &Table<'_>) -> Pose {
    top.table("mount").map_or_else(Pose::identity, |table| own_pose(&table.called("mount".to_owned())))
}

/// What the recipe is judged by: the table `acceptance`.
pub(super) fn acceptance(top: &Table<'_>) -> Acceptance {
    let usual = Acceptance::default();
    let Some(table) = top.table("acceptance") else { return usual };
    let table = table.called("acceptance".to_owned());
    table.only(&[
        "rate-reserve",
        "accel-reserve",
        "holding-reserve",
        "moving-reserve",
        "brake-reserve",
        "rms-reserve",
        "range-least",
        "slide-least",
        "singular-least",
        "tool-speed-left",
        "tcp-speed",
        "point-speed",
        "wind-up",
        "stages",
    ]);
    let percent = |key: &str, otherwise: Share| table.maybe_number(key).map_or(otherwise, Share::percent);
    Acceptance {
        rate_reserve: percent("rate-reserve", usual.rate_reserve),
        accel_reserve: percent("accel-reserve", usual.accel_reserve),
        holding_reserve: percent("holding-reserve", usual.holding_reserve),
        moving_reserve: percent("moving-reserve", usual.moving_reserve),
        brake_reserve: percent("brake-reserve", usual.brake_reserve),
        rms_reserve: percent("rms-reserve", usual.rms_reserve),
        range_least: table.maybe_number("range-least").map_or(usual.range_least, Angle::deg),
        slide_least: table.maybe_number("slide-least").map_or(usual.slide_least, Length::mm),
        singular_least: table.maybe_number("singular-least").unwrap_or(usual.singular_least),
        tool_speed_left: table.maybe_number("tool-speed-left").map_or(usual.tool_speed_left, Speed::mm_per_s),
        tcp_speed: table.maybe_number("tcp-speed").map(Speed::mm_per_s),
        point_speed: table.maybe_number("point-speed").map(Speed::mm_per_s),
        stages: stages(&table),
        wind_up: table.maybe_number("wind-up").map(Angle::deg),
    }
}

/// Overrides of the first run, in percent.
fn stages(table: &Table<'_>) -> Stages {
    let wanted = format!("1 to {} overrides in %, rising, above 0 and at most 100", Stages::MOST);
    let Some(given) = table.list("stages", &wanted) else { return Stages::default() };
    Stages::of(&given.iter().map(|percent| Share::percent(*percent)).collect::<Vec<_>>()).unwrap_or_else(|| {
        let shown: Vec<String> = given.iter().map(f64::to_string).collect();
        table.complain("stages", format_args!("stages is [{}]; it must be {wanted}", shown.join(", ")));
        Stages::default()
    })
}

/// What segments use where they say nothing: the table `usual`.
pub(super) fn usual(top: &Table<'_>) -> Usual {
    let plain = Usual::default();
    let Some(table) = top.table("usual") else { return plain };
    let table = table.called("usual".to_owned());
    table.only(&["speed", "accel", "turn-speed", "turn-accel", "jerk", "turn-jerk", "share", "accel-share"]);
    Usual {
        speed: table.maybe_number("speed").map(Speed::mm_per_s),
        accel: table.maybe_number("accel").map_or(plain.accel, Acceleration::mm_per_s2),
        turn_speed: table.maybe_number("turn-speed").map_or(plain.turn_speed, TurnRate::deg_per_s),
        turn_accel: table.maybe_number("turn-accel").map_or(plain.turn_accel, TurnAcceleration::deg_per_s2),
        jerk: table.maybe_number("jerk").map(Jerk::mm_per_s3),
        turn_jerk: table.maybe_number("turn-jerk").map(TurnJerk::deg_per_s3),
        share: table.maybe_number("share").map(Share::percent),
        accel_share: table.maybe_number("accel-share").map_or(plain.accel_share, Share::percent),
    }
}

/// The tables `tool`.
pub(super) fn tools(top: &Table<'_>) -> Vec<Tool> {
    each(top, "tool", |table| {
        table.only(&["name", "tcp", "mass", "com", "inertia", "grounds", "points", "turns-freely"]);
        let name = name(table);
        if !table.has("tcp") {
            table.missing("tcp", "it must be a table { xyz, rpy }: where the TCP stands on the flange");
        }
        let tcp = table.table("tcp").map_or_else(Pose::identity, |tcp| own_pose(&tcp));
        Tool { name, tcp, body: maybe_body(table), points: points(table), turns_freely: table.is_true("turns-freely") }
    })
}

/// The named points of a tool, in flange axes.
fn points(table: &Table<'_>) -> Vec<ToolPoint> {
    each(table, "points", |table| {
        table.only(&["name", "xyz"]);
        ToolPoint { name: name(table), at: table.numbers("xyz", "mm").map_or_else(V3::zeros, metres) }
    })
}

/// The tables `load`.
pub(super) fn loads(top: &Table<'_>) -> Vec<Load> {
    each(top, "load", |table| {
        table.only(&["name", "mass", "com", "inertia", "grounds"]);
        Load { name: name(table), body: body(table) }
    })
}

/// The tables `frame`.
pub(super) fn frames(top: &Table<'_>) -> Vec<Frame> {
    each(top, "frame", |table| {
        table.only(&["name", "xyz", "rpy", "quaternion", "in"]);
        let name = name(table);
        if name == TOOL_AXES {
            table.complain("name", format_args!("\"{TOOL_AXES}\" always names the axes of the tool; choose another name"));
        }
        Frame { name, pose: pose(table), parent: table.maybe_text("in").unwrap_or(BASE).to_owned() }
    })
}

/// The word for the tool's own axes, which a process force may be given in.
pub(super) const TOOL_AXES: &str = "tool";

/// The name that a table must have; a stand-in where it can't be taken.
pub(super) fn name(table: &Table<'_>) -> String {
    table.text("name", "text").unwrap_or("(no name)").to_owned()
}

/// Reads each table of an array, called by kind and name in complaints.
fn each<T>(top: &Table<'_>, key: &str, read: impl Fn(&Table<'_>) -> T) -> Vec<T> {
    top.tables(key)
        .into_iter()
        .enumerate()
        .map(|(index, table)| {
            let thing = match table.peek_name() {
                Some(name) => format!("{key} \"{name}\""),
                None => format!("{key} {}", index + 1),
            };
            read(&table.called(thing))
        })
        .collect()
}

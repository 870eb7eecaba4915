use crate::arm::{Arm, Joints, MAX_JOINTS};
use crate::geometry::{Rotation, V3};
use crate::program::{Arrive, Given, PathSpeed, Push, PushAxes, Taught, Then, Waypoint};
use crate::units::{Acceleration, Dimension, Jerk, Length, Seconds, Share, Speed, TurnAcceleration, TurnJerk, TurnRate};

use super::cell::{TOOL_AXES, name};
use super::placed::{given, via};
use super::table::Table;

/// Keys that say how fast a joint move runs.
const OF_JOINT: [&str; 2] = ["share", "accel-share"];

/// Keys that say how fast a line or an arc is followed.
const OF_PATH: [&str; 6] = ["speed", "accel", "turn-speed", "turn-accel", "jerk", "turn-jerk"];

/// The kinds of segment, before their figures are read.
#[derive(Clone, Copy, PartialEq)]
enum Kind {
    Joint,
    Line,
    Arc,
}

/// Reads the tables `waypoint`. Without an arm, joint values are taken for degrees.
pub(super) fn waypoints(top: &Table<'_>, arm: Option<&Arm>) -> Vec<Waypoint> {
    top.tables("waypoint")
        .into_iter()
        .enumerate()
        .map(|(index, table)| {
            let thing = match table.peek_name() {
                Some(name) => format!("waypoint {} \"{name}\"", index + 1),
                None => format!("waypoint {}", index + 1),
            };
            waypoint(&table.called(thing), arm)
        })
        .collect()
}

fn waypoint(table: &Table<'_>, arm: Option<&Arm>) -> Waypoint {
    table.only(&[
        "name",
        "joints",
        "pose",
        "near",
        "shown",
        "tool",
        "arrive",
        "share",
        "accel-share",
        "speed",
        "accel",
        "turn-speed",
        "turn-accel",
        "jerk",
        "turn-jerk",
        "via",
        "fly-by",
        "dwell",
        "then",
        "push",
    ]);
    Waypoint {
        name: name(table),
        taught: taught(table, arm),
        shown: table.table("shown").map(|shown| given(&shown)),
        arrive: arrive(table),
        tool: table.maybe_text("tool").map(str::to_owned),
        fly_by: table.maybe_number("fly-by").map(Length::mm),
        dwell: Seconds::s(table.maybe_number("dwell").unwrap_or(0.0)),
        then: table.table("then").and_then(|then| happening(&then)),
        push: table.table("push").map(|table| push(&table)),
    }
}

fn taught(table: &Table<'_>, arm: Option<&Arm>) -> Taught {
    let joints = table.list("joints", "an array of joint values (deg or mm)");
    let pose = table.table("pose").map(|pose| given(&pose));
    let near = table.maybe_text("near").map(str::to_owned);
    match (table.has("joints"), table.has("pose")) {
        (true, true) => {
            table.complain("pose", "joints and pose are both given; keep one, and put a pose that the cell displayed under shown");
        }
        (false, false) if !table.is_bad("joints") && !table.is_bad("pose") => {
            table.missing("joints", "a waypoint needs joints = [...] or pose = { xyz, rpy }");
        }
        (true, false) if near.is_some() => {
            table.complain("near", "near goes with pose; joint values already say the posture");
        }
        _ => {}
    }
    if table.has("pose") && !table.has("joints") {
        return Taught::Pose { pose: pose.unwrap_or_else(anywhere), near };
    }
    Taught::Joints(joints.map_or_else(|| Joints::zeros(arm.map_or(0, Arm::len)), |values| in_si(table, &values, arm)))
}

/// A pose that no check finds fault with.
fn anywhere() -> Given {
    Given { at: V3::zeros(), rotation: Some(Rotation::identity()), frame: None }
}

fn in_si(table: &Table<'_>, values: &[f64], arm: Option<&Arm>) -> Joints {
    if values.len() > MAX_JOINTS {
        let bound = match arm {
            Some(arm) => format!("the arm \"{}\" has {} joints", arm.name(), arm.len()),
            None => format!("an arm has at most {MAX_JOINTS} joints"),
        };
        table.complain("joints", format_args!("joints has {} values; {bound}", values.len()));
        return Joints::zeros(arm.map_or(0, Arm::len));
    }
    let of = |j: usize| arm.and_then(|arm| arm.joints().get(j)).map_or(Dimension::Angle, |joint| joint.kind.value());
    Joints::from_fn(values.len(), |j| values[j] / of(j).per_si())
}

fn arrive(table: &Table<'_>) -> Option<Arrive> {
    let kind = table.word("arrive", &[("joint", Kind::Joint), ("line", Kind::Line), ("arc", Kind::Arc)]);
    let share = table.maybe_number("share").map(Share::percent);
    let accel_share = table.maybe_number("accel-share").map(Share::percent);
    let speed = PathSpeed {
        speed: table.maybe_number("speed").map(Speed::mm_per_s),
        accel: table.maybe_number("accel").map(Acceleration::mm_per_s2),
        turn_speed: table.maybe_number("turn-speed").map(TurnRate::deg_per_s),
        turn_accel: table.maybe_number("turn-accel").map(TurnAcceleration::deg_per_s2),
        jerk: table.maybe_number("jerk").map(Jerk::mm_per_s3),
        turn_jerk: table.maybe_number("turn-jerk").map(TurnJerk::deg_per_s3),
    };
    let via = table.table("via").map(|point| via(&point));
    let Some(kind) = kind else {
        // A stand-in that needs nothing more, where the word is there but wrong.
        return table.is_bad("arrive").then_some(Arrive::Joint { share: Some(Share::WHOLE), accel_share: None });
    };
    misplaced(table, kind);
    Some(match kind {
        Kind::Joint => Arrive::Joint { share, accel_share },
        Kind::Line => Arrive::Line(speed),
        Kind::Arc => {
            if !table.has("via") {
                table.missing("via", "an arc needs a point on its way, via = { xyz }");
            }
            Arrive::Arc { via: via.unwrap_or_else(anywhere), speed }
        }
    })
}

/// Complains about figures that this kind of segment has no use for.
fn misplaced(table: &Table<'_>, kind: Kind) {
    if kind == Kind::Joint {
        for key in OF_PATH.into_iter().filter(|key| table.has(key)) {
            table.complain(
                key,
                format_args!(
                    "{key} goes with a line or an arc; a joint move has a share and an accel-share (of the joints' limits, %), \
                     for its TCP follows no given path"
                ),
            );
        }
    } else {
        for key in OF_JOINT.into_iter().filter(|key| table.has(key)) {
            table.complain(
                key,
                format_args!("{key} goes with a joint move; a line or an arc has a speed (mm/s) and an accel (mm/s²) of its TCP"),
            );
        }
    }
    if kind != Kind::Arc && table.has("via") {
        table.complain("via", "via goes with an arc; a line or a joint move has no point on its way");
    }
}

fn happening(then: &Table<'_>) -> Option<Then> {
    then.only(&["take", "release"]);
    let take = then.maybe_text("take").map(|name| Then::Take(name.to_owned()));
    let release = then.is_true("release").then_some(Then::Release);
    match (then.has("take"), then.has("release")) {
        (true, true) => then.complain("release", "take and release are both given; keep one"),
        (false, false) if !then.is_bad("release") => {
            then.missing("take", "it must be take = \"a load\" or release = true");
        }
        _ => {}
    }
    take.or(release)
}

fn push(table: &Table<'_>) -> Push {
    table.only(&["force", "torque", "frame"]);
    Push {
        force: table.numbers("force", "N").map_or_else(V3::zeros, V3::from),
        torque: table.maybe_numbers("torque").map_or_else(V3::zeros, V3::from),
        axes: match table.maybe_text("frame") {
            None | Some(TOOL_AXES) => PushAxes::Tool,
            Some(name) => PushAxes::Frame(name.to_owned()),
        },
    }
}

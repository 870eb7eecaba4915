use crate::arm::{Body, Braking, Convention, Curve, Joint, JointKind, Placement, Range, Stop, TorqueRating};
use crate::geometry::{Pose, V3};

use super::body::{body, grounds};
use super::drive::{curve, drive};
use super::placed::{own_pose, unit};
use super::table::{STAND_IN, Table};

/// Reads one joint. `convention` is what the arm file says at its top.
pub(super) fn joint(table: &Table<'_>, index: usize, convention: Option<Convention>) -> Joint {
    table.only(&[
        "name", "kind", "dh", "place", "axis", "range", "rate", "accel", "jerk", "torque", "brake", "rotor", "friction",
        "balancer", "stop", "link",
    ]);
    let name = table.text("name", "text, such as \"J1\"").map_or_else(|| format!("{} (no name)", index + 1), str::to_owned);
    let kind = kind(table);
    let [value_unit, rate_unit, accel_unit, effort_unit] = match kind {
        JointKind::Revolute => ["deg", "deg/s", "deg/s²", "N·m"],
        JointKind::Prismatic => ["mm", "mm/s", "mm/s²", "N"],
    };
    let si = |number: f64| number / kind.value().per_si();
    let range = table
        .numbers("range", value_unit)
        .map_or(Range { low: 0.0, high: 1.0 }, |[low, high]| Range { low: si(low), high: si(high) });
    Joint {
        name,
        kind,
        placement: placement(table, convention),
        range,
        rate: si(table.number("rate", rate_unit)),
        accel: si(table.number("accel", accel_unit)),
        jerk: table.maybe_number("jerk").map(si),
        torque: table.table("torque").map(|torque| rating(&torque.called(table.thing().to_owned()), kind, effort_unit)),
        brake: table.maybe_number("brake"),
        drive: drive(table, kind, effort_unit),
        stop: table.table("stop").and_then(|stop| stop_data(&stop.called(table.thing().to_owned()), kind)),
        link: link(table),
    }
}

/// The name that a joint goes by in complaints.
pub(super) fn called(table: &Table<'_>, index: usize) -> String {
    match table.peek_name() {
        Some(name) => format!("joint {name}"),
        None => format!("joint {}", index + 1),
    }
}

fn kind(table: &Table<'_>) -> JointKind {
    if !table.has("kind") {
        table.missing("kind", "it must be \"revolute\" or \"prismatic\"");
    }
    table.word("kind", &[("revolute", JointKind::Revolute), ("prismatic", JointKind::Prismatic)]).unwrap_or(JointKind::Revolute)
}

fn placement(table: &Table<'_>, convention: Option<Convention>) -> Placement {
    let by_axis = table.has("place") || table.has("axis");
    let dh = table.table("dh");
    let place = table.table("place").map_or_else(Pose::identity, |place| own_pose(&place));
    let axis = table.maybe_numbers("axis").map(V3::from);
    if table.has("dh") {
        if by_axis {
            table.complain("dh", "dh and place with axis both place the joint; keep one of them");
        }
        if let Some(dh) = dh {
            return by_dh(&dh, convention);
        }
    } else if !by_axis {
        table.missing("dh", "a joint needs dh = { a, alpha, d, theta }, or place = { xyz, rpy } and axis");
    } else {
        for (key, expected) in [("place", "it must be a table { xyz, rpy }"), ("axis", "it must be a unit vector [x, y, z]")] {
            if !table.has(key) {
                table.missing(key, expected);
            }
        }
    }
    // An axis far from unit length stays as it is, for the arm's own checks to tell.
    Placement::Axis { place, axis: axis.map_or_else(V3::z, |axis| unit(axis).unwrap_or(axis)) }
}

fn by_dh(dh: &Table<'_>, convention: Option<Convention>) -> Placement {
    dh.only(&["a", "alpha", "d", "theta"]);
    Placement::Dh {
        convention: convention.unwrap_or(Convention::Classical),
        a: dh.number("a", "mm") / 1000.0,
        alpha_deg: dh.number("alpha", "deg"),
        d: dh.number("d", "mm") / 1000.0,
        theta_deg: dh.number("theta", "deg"),
    }
}

fn rating(torque: &Table<'_>, kind: JointKind, unit: &str) -> TorqueRating {
    torque.only(&["holding", "peak", "grounds"]);
    let holding = torque.number("holding", unit);
    let peak = if torque.is_array("peak") {
        curve(torque, "peak", kind, &format!("[rate, {unit}]"))
    } else {
        torque.maybe_number("peak").map(Curve::level)
    };
    // A stand-in says nothing about the other figure.
    let doubtful = torque.is_bad("holding") || torque.is_bad("peak");
    TorqueRating {
        holding: if torque.is_bad("holding") { STAND_IN } else { holding },
        peak: if doubtful { None } else { peak },
        grounds: grounds(torque),
    }
}

/// Stopping data: a deceleration or the time from full rate to rest, and the time until it brakes.
fn stop_data(stop: &Table<'_>, kind: JointKind) -> Option<Stop> {
    stop.only(&["decel", "time", "reaction"]);
    let decel = stop.maybe_number("decel").map(|decel| Braking::Decel(decel / kind.acceleration().per_si()));
    let time = stop.maybe_number("time").map(Braking::FromFullRate);
    if decel.is_some() && time.is_some() {
        stop.complain("time", "decel and time both say how it brakes; keep one of them");
    }
    let Some(braking) = decel.or(time) else {
        stop.missing("decel", "stop needs decel (deg/s² or mm/s²), or time (s, from full rate to rest)");
        return None;
    };
    Some(Stop { braking, reaction: stop.maybe_number("reaction").unwrap_or(0.0) })
}

fn link(table: &Table<'_>) -> Option<Body> {
    let link = table.table("link")?;
    link.only(&super::body::KEYS);
    Some(body(&link))
}

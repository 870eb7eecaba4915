use crate::geometry::V3;
use crate::program::{Arrive, BASE, Edit, PathSpeed, Push, PushAxes, Recipe, WORLD, Waypoint};
use crate::units::{Acceleration, Dimension, Jerk, Share, Speed, TurnAcceleration, TurnJerk, TurnRate};

use super::Datum;
use super::sheet::{AXES, Sheet, or_nothing};
use super::waypoint::list_given;

/// The word for the tool's own axes.
const TOOL_AXES: &str = "tool";

pub(super) fn segment(recipe: &Recipe, index: usize) -> Vec<Datum> {
    let Some(waypoint) = recipe.waypoints.get(index) else { return Vec::new() };
    let mut sheet = Sheet::of(waypoint, move |waypoint: Waypoint| Edit::Change { index, waypoint: Box::new(waypoint) });
    let word = waypoint.arrive.as_ref().map_or("", Arrive::word).to_owned();
    let kinds = ["joint", "line", "arc"].map(str::to_owned).to_vec();
    sheet.choice("arrive", word, kinds, |waypoint, text| {
        waypoint.arrive = arriving(text, waypoint.arrive.as_ref())?;
        Ok(())
    });
    match &waypoint.arrive {
        Some(Arrive::Joint { share, accel_share }) => {
            sheet.maybe_share("share", *share, |waypoint, v| {
                if let Some((share, _)) = shares(waypoint) {
                    *share = v;
                }
            });
            sheet.maybe_share("accel-share", *accel_share, |waypoint, v| {
                if let Some((_, accel_share)) = shares(waypoint) {
                    *accel_share = v;
                }
            });
        }
        Some(Arrive::Line(speed)) => path_speed(&mut sheet, speed),
        Some(Arrive::Arc { via, speed }) => {
            path_speed(&mut sheet, speed);
            list_given(&mut sheet, "via ", via, recipe, |waypoint: &mut Waypoint| match &mut waypoint.arrive {
                Some(Arrive::Arc { via, .. }) => Some(via),
                _ => None,
            });
        }
        None => {}
    }
    let tools = recipe.tools.iter().map(|tool| tool.name.clone()).collect();
    sheet.choice("tool", waypoint.tool.clone().unwrap_or_default(), tools, |waypoint, text| {
        waypoint.tool = or_nothing(text);
        Ok(())
    });
    push(&mut sheet, recipe, waypoint);
    sheet.listed()
}

/// The way of arriving that a word names, with the figures of the one before that it has a use for.
fn arriving(word: &str, before: Option<&Arrive>) -> Result<Option<Arrive>, String> {
    let speed = match before {
        Some(Arrive::Line(speed) | Arrive::Arc { speed, .. }) => *speed,
        _ => PathSpeed::default(),
    };
    match (word, before) {
        ("", _) => Ok(None),
        ("joint", Some(joint @ Arrive::Joint { .. })) => Ok(Some(joint.clone())),
        ("joint", _) => Ok(Some(Arrive::Joint { share: None, accel_share: None })),
        ("line", _) => Ok(Some(Arrive::Line(speed))),
        ("arc", Some(arc @ Arrive::Arc { .. })) => Ok(Some(arc.clone())),
        ("arc", _) => Err("an arc needs a point on its way; record that first".to_owned()),
        _ => Err("it must be \"joint\", \"line\" or \"arc\"".to_owned()),
    }
}

fn shares(waypoint: &mut Waypoint) -> Option<(&mut Option<Share>, &mut Option<Share>)> {
    match &mut waypoint.arrive {
        Some(Arrive::Joint { share, accel_share }) => Some((share, accel_share)),
        _ => None,
    }
}

fn path_speed(sheet: &mut Sheet<Waypoint>, now: &PathSpeed) {
    let mut list = |name: &str, of: Dimension, now: Option<f64>, set: fn(&mut PathSpeed, Option<f64>)| {
        sheet.maybe(name, (of, now), move |waypoint, si| {
            if let Some(Arrive::Line(speed) | Arrive::Arc { speed, .. }) = &mut waypoint.arrive {
                set(speed, si);
            }
        });
    };
    list("speed", Dimension::Speed, now.speed.map(Speed::as_m_per_s), |s, si| s.speed = si.map(Speed::m_per_s));
    list("accel", Dimension::Acceleration, now.accel.map(Acceleration::as_m_per_s2), |s, si| {
        s.accel = si.map(Acceleration::m_per_s2);
    });
    list("turn-speed", Dimension::TurnRate, now.turn_speed.map(TurnRate::as_rad_per_s), |s, si| {
        s.turn_speed = si.map(TurnRate::rad_per_s);
    });
    list("turn-accel", Dimension::TurnAcceleration, now.turn_accel.map(TurnAcceleration::as_rad_per_s2), |s, si| {
        s.turn_accel = si.map(TurnAcceleration::rad_per_s2);
    });
    list("jerk", Dimension::Jerk, now.jerk.map(Jerk::as_m_per_s3), |s, si| s.jerk = si.map(Jerk::m_per_s3));
    list("turn-jerk", Dimension::TurnJerk, now.turn_jerk.map(TurnJerk::as_rad_per_s3), |s, si| {
        s.turn_jerk = si.map(TurnJerk::rad_per_s3);
    });
}

/// What pushes: the six figures are always listed, so that a push can be brought in; six times 0 takes it away.
fn push(sheet: &mut Sheet<Waypoint>, recipe: &Recipe, waypoint: &Waypoint) {
    let now = waypoint.push.clone().unwrap_or_else(no_push);
    for (axis, name) in AXES.into_iter().enumerate() {
        let (force, torque) =
            (waypoint.push.as_ref().map(|push| push.force[axis]), waypoint.push.as_ref().map(|push| push.torque[axis]));
        sheet.maybe(format!("push {name}"), (Dimension::Force, force), move |waypoint, si| {
            pushed(waypoint, |push| push.force[axis] = si.unwrap_or(0.0));
        });
        sheet.maybe(format!("push turn {name}"), (Dimension::Torque, torque), move |waypoint, si| {
            pushed(waypoint, |push| push.torque[axis] = si.unwrap_or(0.0));
        });
    }
    let axes = match &now.axes {
        PushAxes::Tool => TOOL_AXES.to_owned(),
        PushAxes::Frame(name) => name.clone(),
    };
    if waypoint.push.is_some() {
        let frames = recipe.frames.iter().map(|frame| frame.name.as_str());
        let choices = [TOOL_AXES, BASE, WORLD].into_iter().chain(frames).map(str::to_owned).collect();
        sheet.choice("push frame", axes, choices, |waypoint, text| {
            let axes = match text {
                "" | TOOL_AXES => PushAxes::Tool,
                name => PushAxes::Frame(name.to_owned()),
            };
            if let Some(push) = &mut waypoint.push {
                push.axes = axes;
            }
            Ok(())
        });
    }
}

fn no_push() -> Push {
    Push { force: V3::zeros(), torque: V3::zeros(), axes: PushAxes::Tool }
}

fn pushed(waypoint: &mut Waypoint, set: impl FnOnce(&mut Push)) {
    let mut push = waypoint.push.take().unwrap_or_else(no_push);
    set(&mut push);
    waypoint.push = (push.force.norm() != 0.0 || push.torque.norm() != 0.0).then_some(push);
}

use crate::arm::{Arm, Body, Grounds};
use crate::geometry::{Pose, V3};
use crate::program::{
    Acceptance, Arrive, BASE, Given, Load, PathSpeed, Push, PushAxes, Recipe, Repeat, Taught, Then, Tool, Usual, Waypoint,
};
use crate::units::{Dimension, Measure, Share};

use super::figure::{Figure, Scale, Turn};

/// What stands under a key.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Value {
    Text(String),
    True,
    Number(Figure),
    Numbers(Vec<Figure>),
    /// An orientation, under `rpy` or `quaternion`.
    Turn(Turn),
    Table(Outline),
    Tables(Vec<Outline>),
}

/// The keys of a table in the order in which they are written afresh, with what stands under them; `None` where the recipe says
/// nothing. A key that a file leaves out because its value is the usual one is there all the same: only differences matter.
pub(super) type Outline = Vec<(&'static str, Option<Value>)>;

/// A recipe as its file has it.
pub(super) fn recipe(recipe: &Recipe, arm: &Arm) -> Outline {
    // Every field is named here and below, so that the compiler points here when there is a new one.
    let Recipe {
        name: _,
        arm: _,
        mount: _,
        acceptance: _,
        usual: _,
        tools: _,
        loads: _,
        frames: _,
        repeat: _,
        carrying: _,
        waypoints: _,
    } = recipe;
    let tables = |all: Vec<Outline>| Some(Value::Tables(all));
    vec![
        ("name", text(&recipe.name)),
        ("arm", text(&recipe.arm)),
        ("repeat", text(if recipe.repeat == Repeat::Start { "start" } else { "never" })),
        ("carrying", recipe.carrying.as_deref().and_then(text)),
        ("mount", Some(Value::Table(pose(&recipe.mount)))),
        ("acceptance", Some(Value::Table(acceptance(&recipe.acceptance)))),
        ("usual", Some(Value::Table(usual(&recipe.usual)))),
        ("tool", tables(recipe.tools.iter().map(tool).collect())),
        ("load", tables(recipe.loads.iter().map(load).collect())),
        (
            "frame",
            tables(
                recipe
                    .frames
                    .iter()
                    .map(|frame| [vec![("name", text(&frame.name)), ("in", text(&frame.parent))], pose(&frame.pose)].concat())
                    .collect(),
            ),
        ),
        ("waypoint", tables(recipe.waypoints.iter().map(|waypoint| self::waypoint(waypoint, arm)).collect())),
    ]
}

fn text(text: &str) -> Option<Value> {
    Some(Value::Text(text.to_owned()))
}

fn measure(measure: Measure) -> Option<Value> {
    Some(Value::Number(Figure { si: measure.si, scale: Scale::Of(measure.of) }))
}

fn share(share: Share) -> Option<Value> {
    Some(Value::Number(Figure { si: share.as_fraction(), scale: Scale::Percent }))
}

fn plain(si: f64) -> Option<Value> {
    Some(Value::Number(Figure { si, scale: Scale::Plain }))
}

fn numbers(all: &[f64], scale: Scale) -> Option<Value> {
    Some(Value::Numbers(all.iter().map(|si| Figure { si: *si, scale }).collect()))
}

fn point(at: &V3) -> Option<Value> {
    numbers(at.as_slice(), Scale::Of(Dimension::Length))
}

fn pose(pose: &Pose) -> Outline {
    vec![("xyz", point(&pose.at)), ("rpy", Some(Value::Turn(Turn::Axes(pose.axes))))]
}

fn acceptance(a: &Acceptance) -> Outline {
    let Acceptance {
        rate_reserve: _,
        accel_reserve: _,
        holding_reserve: _,
        moving_reserve: _,
        brake_reserve: _,
        rms_reserve: _,
        range_least: _,
        slide_least: _,
        singular_least: _,
        tool_speed_left: _,
        tcp_speed: _,
        point_speed: _,
        wind_up: _,
        stages: _,
    } = a;
    let stages: Vec<f64> = a.stages.shares().iter().map(|share| share.as_fraction()).collect();
    vec![
        ("rate-reserve", share(a.rate_reserve)),
        ("accel-reserve", share(a.accel_reserve)),
        ("holding-reserve", share(a.holding_reserve)),
        ("moving-reserve", share(a.moving_reserve)),
        ("brake-reserve", share(a.brake_reserve)),
        ("rms-reserve", share(a.rms_reserve)),
        ("range-least", measure(a.range_least.measure())),
        ("slide-least", measure(a.slide_least.measure())),
        ("singular-least", plain(a.singular_least)),
        ("tool-speed-left", measure(a.tool_speed_left.measure())),
        ("tcp-speed", a.tcp_speed.and_then(|v| measure(v.measure()))),
        ("point-speed", a.point_speed.and_then(|v| measure(v.measure()))),
        ("wind-up", a.wind_up.and_then(|v| measure(v.measure()))),
        ("stages", numbers(&stages, Scale::Percent)),
    ]
}

fn usual(u: &Usual) -> Outline {
    let Usual { speed: _, accel: _, turn_speed: _, turn_accel: _, jerk: _, turn_jerk: _, share: _, accel_share: _ } = u;
    vec![
        ("speed", u.speed.and_then(|v| measure(v.measure()))),
        ("accel", measure(u.accel.measure())),
        ("turn-speed", measure(u.turn_speed.measure())),
        ("turn-accel", measure(u.turn_accel.measure())),
        ("jerk", u.jerk.and_then(|v| measure(v.measure()))),
        ("turn-jerk", u.turn_jerk.and_then(|v| measure(v.measure()))),
        ("share", u.share.and_then(share)),
        ("accel-share", share(u.accel_share)),
    ]
}

/// The keys of a body; none of them where there is none.
fn body(body: Option<&Body>) -> Outline {
    let grounds = |grounds| match grounds {
        Grounds::Sheet => "sheet",
        Grounds::Weighed => "weighed",
        Grounds::Guess => "guess",
    };
    let elements = |body: &Body| {
        body.inertia.and_then(|m| numbers(&[m[(0, 0)], m[(1, 1)], m[(2, 2)], m[(0, 1)], m[(0, 2)], m[(1, 2)]], Scale::Plain))
    };
    vec![
        ("mass", body.and_then(|body| plain(body.mass))),
        ("com", body.and_then(|body| point(&body.com))),
        ("inertia", body.and_then(elements)),
        ("grounds", body.and_then(|body| text(grounds(body.grounds)))),
    ]
}

fn tool(tool: &Tool) -> Outline {
    let Tool { name: _, tcp: _, body: _, points: _, turns_freely: _ } = tool;
    let points: Vec<Outline> =
        tool.points.iter().map(|point| vec![("name", text(&point.name)), ("xyz", self::point(&point.at))]).collect();
    let mut outline = vec![("name", text(&tool.name)), ("tcp", Some(Value::Table(pose(&tool.tcp))))];
    outline.extend(body(tool.body.as_ref()));
    outline.push(("points", (!points.is_empty()).then_some(Value::Tables(points))));
    outline.push(("turns-freely", tool.turns_freely.then_some(Value::True)));
    outline
}

fn load(load: &Load) -> Outline {
    let Load { name: _, body: _ } = load;
    let mut outline = vec![("name", text(&load.name))];
    outline.extend(body(Some(&load.body)));
    outline
}

fn given(given: &Given) -> Outline {
    let Given { at: _, rotation: _, frame: _ } = given;
    vec![
        ("xyz", point(&given.at)),
        ("rpy", given.rotation.map(|rotation| Value::Turn(Turn::Rotation(rotation)))),
        ("frame", given.frame.as_deref().filter(|name| *name != BASE).and_then(text)),
    ]
}

fn waypoint(waypoint: &Waypoint, arm: &Arm) -> Outline {
    let Waypoint { name: _, taught: _, shown: _, arrive: _, tool: _, fly_by: _, dwell: _, then: _, push: _ } = waypoint;
    let (joints, pose, near) = match &waypoint.taught {
        Taught::Joints(values) => {
            let of = |j: usize| arm.joints().get(j).map_or(Dimension::Angle, |joint| joint.kind.value());
            let all = values.iter().enumerate().map(|(j, si)| Figure { si: *si, scale: Scale::Of(of(j)) }).collect();
            (Some(Value::Numbers(all)), None, None)
        }
        Taught::Pose { pose, near } => (None, Some(Value::Table(given(pose))), near.as_deref().and_then(text)),
    };
    let none = PathSpeed::default();
    let PathSpeed { speed: _, accel: _, turn_speed: _, turn_accel: _, jerk: _, turn_jerk: _ } = none;
    let (joint, path, via) = match &waypoint.arrive {
        Some(Arrive::Joint { share, accel_share }) => ((*share, *accel_share), &none, None),
        Some(Arrive::Line(speed)) => ((None, None), speed, None),
        Some(Arrive::Arc { via, speed }) => ((None, None), speed, Some(Value::Table(given(via)))),
        None => ((None, None), &none, None),
    };
    let dwell = waypoint.dwell.as_s();
    vec![
        ("name", text(&waypoint.name)),
        ("joints", joints),
        ("pose", pose),
        ("near", near),
        ("shown", waypoint.shown.as_ref().map(|shown| Value::Table(given(shown)))),
        ("tool", waypoint.tool.as_deref().and_then(text)),
        ("arrive", waypoint.arrive.as_ref().and_then(|arrive| text(arrive.word()))),
        ("share", joint.0.and_then(share)),
        ("accel-share", joint.1.and_then(share)),
        ("via", via),
        ("speed", path.speed.and_then(|v| measure(v.measure()))),
        ("accel", path.accel.and_then(|v| measure(v.measure()))),
        ("turn-speed", path.turn_speed.and_then(|v| measure(v.measure()))),
        ("turn-accel", path.turn_accel.and_then(|v| measure(v.measure()))),
        ("jerk", path.jerk.and_then(|v| measure(v.measure()))),
        ("turn-jerk", path.turn_jerk.and_then(|v| measure(v.measure()))),
        ("fly-by", waypoint.fly_by.and_then(|v| measure(v.measure()))),
        ("dwell", if dwell == 0.0 { None } else { plain(dwell) }),
        ("then", waypoint.then.as_ref().map(|then| Value::Table(happening(then)))),
        ("push", waypoint.push.as_ref().map(|push| Value::Table(self::push(push)))),
    ]
}

fn happening(then: &Then) -> Outline {
    match then {
        Then::Take(load) => vec![("take", text(load)), ("release", None)],
        Then::Release => vec![("take", None), ("release", Some(Value::True))],
    }
}

fn push(push: &Push) -> Outline {
    let torque = if push.torque.norm() == 0.0 { None } else { numbers(push.torque.as_slice(), Scale::Plain) };
    let axes = match &push.axes {
        PushAxes::Tool => None,
        PushAxes::Frame(name) => text(name),
    };
    vec![("force", numbers(push.force.as_slice(), Scale::Plain)), ("torque", torque), ("frame", axes)]
}

/// Whether two outlines are the same to within a share of each number.
pub(super) fn same(a: &Outline, b: &Outline, share: f64) -> bool {
    let near = |a: &Figure, b: &Figure| a.si == b.si || (a.si - b.si).abs() <= share * b.si.abs();
    a.len() == b.len()
        && a.iter().zip(b).all(|((key, a), (other, b))| {
            key == other
                && match (a, b) {
                    (None, None) => true,
                    (Some(Value::Number(a)), Some(Value::Number(b))) => near(a, b),
                    (Some(Value::Numbers(a)), Some(Value::Numbers(b))) => {
                        a.len() == b.len() && a.iter().zip(b).all(|(a, b)| near(a, b))
                    }
                    (Some(Value::Turn(a)), Some(Value::Turn(b))) => a.is_near(*b, share),
                    (Some(Value::Table(a)), Some(Value::Table(b))) => same(a, b, share),
                    (Some(Value::Tables(a)), Some(Value::Tables(b))) => {
                        a.len() == b.len() && a.iter().zip(b).all(|(a, b)| same(a, b, share))
                    }
                    (a, b) => a == b,
                }
        })
}

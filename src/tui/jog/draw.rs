use ratatui::style::Style;

use crate::checks::{Check, Verdict};
use crate::geometry::V3;
use crate::review::drawn::{Gauge, Gauges};
use crate::review::jog::{DAMPED_BELOW, Direction, Readings, Stand, coordinates};
use crate::tui::app::App;
use crate::tui::arm;
use crate::tui::sheet::{Sheet, fit};
use crate::units::{Angle, Dimension, Length, Measure};

use super::rulers::{self, Ruler};
use super::{Jogging, system, tcp, words};

/// From this width on the arm can stand beside the rulers.
const BESIDE: usize = 100;
/// From this height on it stands below them, where it is larger.
const TALL: usize = 30;
/// Columns behind the rulers of joints, for the way to the range's end and what holding asks.
const BEHIND: usize = 27;

/// Draws rulers, limits and the arm.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let (Some(jog), Some(gauges)) = (&app.jog, &app.scene.gauges) else { return };
    let (width, height) = (sheet.width(), sheet.height());
    if width >= BESIDE && height < TALL {
        let left = width * 6 / 11;
        rows(&mut sheet.part(0, 0, left, height), app, jog, gauges);
        arm::draw(&mut sheet.part(left + 1, 0, width - left - 1, height), app);
    } else {
        let used = rows(&mut sheet.part(0, 0, width, height), app, jog, gauges);
        if height > used + 4 {
            arm::draw(&mut sheet.part(0, used, width, height - used), app);
        }
    }
}

/// Draws rulers and limits; tells how many rows they took.
fn rows(sheet: &mut Sheet, app: &App, jog: &Jogging, gauges: &Gauges) -> usize {
    let theme = app.theme;
    let name = &app.taught().waypoints[jog.waypoint].name;
    let way = jog.axes.as_ref().map_or("Joints".to_owned(), |axes| format!("TCP in {} axes", axes.name()));
    sheet.rule(0, &format!("{way}; selected: waypoint {} \"{name}\"", jog.waypoint + 1), true);
    let all = if jog.axes.is_some() { directions(app, jog) } else { joints(app, jog, gauges) };
    let behind = if jog.axes.is_some() { 0 } else { BEHIND };
    // On a low screen the chosen row stays among those shown.
    let shown = all.len().min(sheet.height().saturating_sub(3)).max(1);
    let first = (jog.row + 1).saturating_sub(shown);
    for (y, (row, ruler)) in all.iter().enumerate().skip(first).take(shown).enumerate() {
        rulers::draw(sheet, y + 1, ruler, row == jog.row, behind);
    }
    let mut y = shown + 1;
    sheet.rule(y, "Limits here", false);
    y += 1;
    let wide = sheet.width().saturating_sub(2);
    for (label, text, noticed) in limits(app, jog, gauges) {
        let mut text = text.as_str();
        let lines = crate::tui::sheet::wrap(text, wide.saturating_sub(LABEL));
        for (index, line) in lines.iter().enumerate() {
            text = line;
            if index == 0 {
                sheet.put(1, y, label, theme.strong());
            }
            let style = if noticed { theme.verdict(Verdict::Tight) } else { Style::new() };
            sheet.put(1 + LABEL, y, &fit(text, wide, theme), style);
            y += 1;
        }
    }
    y
}

/// Columns of the limits' names.
const LABEL: usize = 11;

fn joints(app: &App, jog: &Jogging, gauges: &Gauges) -> Vec<Ruler> {
    let theme = app.theme;
    let ruler = |(j, joint): (usize, &crate::arm::Joint)| {
        let share = |value: f64| (value - joint.range.low) / (joint.range.high - joint.range.low);
        let holding = gauges.get(Check::Holding, Some(j));
        let held = holding.map_or(String::new(), asks);
        let to_end = joint.value(joint.range.to_end(jog.q[j])).text(1);
        let verdict = holding.map_or(Verdict::Clear, |gauge| gauge.verdict);
        Ruler {
            name: joint.name.clone(),
            value: joint.value(jog.q[j]).text(2),
            at: share(jog.q[j]),
            began: share(jog.began[j]),
            behind: format!("{to_end} to end {held:>8}"),
            behind_style: if verdict == Verdict::Clear { Style::new() } else { theme.verdict(verdict) },
        }
    };
    app.arm.joints().iter().enumerate().map(ruler).collect()
}

/// What a gauge asks of its limit, with the letter of its verdict; the value itself where there is no limit.
fn asks(gauge: &Gauge) -> String {
    if !gauge.limit.is_finite() {
        return gauge.value.text(0);
    }
    let letter = if gauge.verdict == Verdict::Clear { String::new() } else { format!(" {}", gauge.verdict.letter()) };
    format!("{:.0} %{letter}", gauge.room.asked_percent())
}

fn directions(app: &App, jog: &Jogging) -> Vec<Ruler> {
    let system = system(app, jog);
    let now = coordinates(&system, &tcp(app, jog, &jog.q));
    let began = coordinates(&system, &tcp(app, jog, &jog.began));
    let base = system.inverse().at;
    let reach = farthest(app, jog);
    let ruler = |direction: Direction| {
        let slot = direction.slot();
        let (share, value): (Box<dyn Fn(f64) -> f64>, Measure) = if direction.turns() {
            let half = if slot == 4 { 0.5 } else { 1.0 } * std::f64::consts::PI;
            (Box::new(move |v: f64| 0.5 + 0.5 * v / half), Angle::rad(now[slot]).measure())
        } else {
            let middle = base[slot];
            (Box::new(move |v: f64| 0.5 + 0.5 * (v - middle) / reach), Length::m(now[slot]).measure())
        };
        Ruler {
            name: direction.name().to_owned(),
            value: value.text(2),
            at: share(now[slot]),
            began: share(began[slot]),
            behind: String::new(),
            behind_style: Style::new(),
        }
    };
    Direction::ALL.into_iter().map(ruler).collect()
}

/// No farther from the base can the TCP be, m: all links and slides in one line.
fn farthest(app: &App, jog: &Jogging) -> f64 {
    let chain = app.arm.chain();
    let links: f64 = chain.fixed[..chain.len].iter().map(|link| link.at.norm()).sum();
    let slides: f64 = (0..chain.len)
        .filter(|j| !chain.turns[*j])
        .map(|j| app.arm.joints()[j].range.low.abs().max(app.arm.joints()[j].range.high.abs()))
        .sum();
    links + slides + chain.flange.at.norm() + jog.carried.tcp.at.norm()
}

/// What the limits say: name, words, and whether they are to be noticed.
fn limits(app: &App, jog: &Jogging, gauges: &Gauges) -> Vec<(&'static str, String, bool)> {
    let gravity = app.judged().map_or_else(V3::zeros, |judged| judged.plan.gravity);
    let readings = Readings::at(&Stand { arm: &app.arm, carried: &jog.carried, q: jog.q }, &gravity);
    let joint = |gauge: &Gauge| gauge.joint.map_or("", |j| app.arm.joints()[j].name.as_str());
    let mass = Measure::si(jog.carried.mass(), Dimension::Mass).text(1);
    let holding = gauges.worst(Check::Holding).map(|gauge| {
        let (value, name) = (gauge.value, joint(gauge));
        let of = Measure::si(gauge.limit, gauge.value.of);
        let told = if gauge.limit.is_finite() {
            format!("{name} holds {} of {}: {}; tool and load {mass}", value.text(0), of.text(0), asks(gauge))
        } else {
            format!("{name} holds {}, no rating; tool and load {mass}", value.text(0))
        };
        ("holding", told, gauge.verdict != Verdict::Clear)
    });
    let below = |check: Check| gauges.get(check, None).map(|gauge| (gauge.limit, !(gauge.value.si >= gauge.limit)));
    let least = |(limit, low): (f64, bool), of: Dimension| {
        let limit = Measure::si(limit, of).to_string();
        (if low { format!(", below the least of {limit}") } else { format!(" (least {limit})") }, low)
    };
    let (singular, near) = below(Check::Singular).map_or((String::new(), false), |it| least(it, Dimension::Ratio));
    let (left, slow) = below(Check::SpeedLeft).map_or((String::new(), false), |it| least(it, Dimension::Speed));
    let damped = if readings.smallest < DAMPED_BELOW { "; steps of the TCP are damped" } else { "" };
    let smallest = Measure::si(readings.smallest, Dimension::Ratio);
    let place = coordinates(&system(app, jog), &readings.tcp);
    let figure = |slot: usize| {
        let of = if slot < 3 { Dimension::Length } else { Dimension::Angle };
        Measure::si(place[slot], of).number(if slot < 3 { 1 } else { 2 })
    };
    let within = match &jog.axes {
        Some(crate::review::jog::Axes::Tool) => "from where it began".to_owned(),
        axes => format!("in {}", axes.as_ref().map_or("base", |axes| axes.name())),
    };
    let range = gauges.worst(Check::Range).and_then(|gauge| gauge.joint).map(|j| {
        let joint = &app.arm.joints()[j];
        let left = joint.value(readings.to_end[j]);
        ("range", format!("{} {} to its end", joint.name, left.text(1)), left.si <= 0.0)
    });
    let mut lines = Vec::new();
    lines.extend(holding);
    lines.push(("singular", format!("smallest value {smallest}{singular}{damped}"), near));
    lines.push(("speed left", format!("{}{left}", words::speed_left(app, &readings.left)), slow));
    lines.extend(range);
    let [x, y, z, roll, pitch, yaw] = [0, 1, 2, 3, 4, 5].map(figure);
    let pose = format!("{x} {y} {z} mm, roll pitch yaw {roll} {pitch} {yaw} deg {within}");
    lines.push(("TCP", pose, false));
    lines
}

use ratatui::style::Style;
use unicode_width::UnicodeWidthStr;

use crate::checks::{Check, Verdict};
use crate::review::check_brief;
use crate::review::drawn::{Curve, Point};
use crate::units::{Dimension, Measure};

use super::app::{App, Pane};
use super::phrases::joint_word;
use super::raster::{Ink, Raster};
use super::sheet::{Sheet, fit};

/// Columns for the figures at the left.
const AXIS: usize = 6;
/// Nothing above this share of a limit is drawn to scale.
const HIGHEST: f64 = 4.0;
/// A chart shows at least up to this share of a limit.
const LOWEST_TOP: f64 = 1.15;

/// Draws one quantity over the segment or the cycle, with its limit and its reserve.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let (theme, focused) = (app.theme, app.pane == Pane::Chart);
    let Some(session) = &app.session else {
        sheet.rule(0, Pane::Chart.name(), focused);
        return;
    };
    let curve = &app.scene.curve;
    sheet.rule(0, &title(app, curve, sheet.width().saturating_sub(4)), focused);
    let (width, height) = (sheet.width().saturating_sub(AXIS), sheet.height().saturating_sub(2));
    if width < 4 || height < 2 {
        return;
    }
    if curve.points.iter().all(|point| point.asked.is_nan()) {
        sheet.put(AXIS, 1, &fit("not judged here", width, theme), Style::new());
        return;
    }
    let scale = Scale::of(curve, width, height);
    let mut raster = Raster::new(width, height);
    guides(&mut raster, curve, &scale);
    for pair in curve.points.windows(2) {
        if pair.iter().all(|point| point.asked.is_finite()) {
            let ink = match pair[0].verdict.max(pair[1].verdict) {
                Verdict::Clear => Ink::Line,
                Verdict::Tight | Verdict::Unproven => Ink::Flagged,
                Verdict::Over | Verdict::NoPath => Ink::Over,
            };
            let [from, to] = [pair[0], pair[1]].map(|point| (scale.x(point.time), scale.y(point.asked)));
            raster.line(from, to, ink);
        }
    }
    let cursor = (scale.x(session.time()) / 2.0).clamp(0.0, (width - 1) as f64) as usize;
    let mut plot = sheet.part(AXIS, 1, width, height);
    for y in 0..height {
        plot.put(cursor, y, theme.post(), Style::new());
    }
    raster.draw(&mut plot, |ink| match ink {
        Ink::Guide | Ink::Line | Ink::Body => Style::new(),
        Ink::Flagged => theme.stroke(Verdict::Tight),
        Ink::Over => theme.stroke(Verdict::Over),
    });
    for y in 0..height {
        if plot.sign(cursor, y) != theme.post() {
            plot.tint(cursor, y, 1, theme.selected());
        }
    }
    labels(sheet, curve, &scale, width, height);
}

/// What is drawn, and its value at the cursor.
fn title(app: &App, curve: &Curve, width: usize) -> String {
    let subject = app.subject();
    let Some(judged) = app.judged() else { return String::new() };
    let joint = subject.joint.filter(|_| !curve.worst_joint);
    let what = match (joint, subject.check.is_per_joint()) {
        (None, true) => format!("{} of all joints", check_brief(subject.check)),
        _ => format!("{} {}", joint_word(judged, joint), check_brief(subject.check)).trim_start().to_owned(),
    };
    let gauge = app.scene.gauges.as_ref().and_then(|gauges| match joint {
        Some(_) => gauges.get(subject.check, joint),
        None => gauges.worst(subject.check),
    });
    let Some(gauge) = gauge else { return what };
    let limit = Measure::si(gauge.limit, gauge.value.of);
    let value = Measure::si(gauge.value.si.abs(), gauge.value.of);
    let of = match subject.check {
        Check::Singular | Check::SpeedLeft => format!("{} (least {limit})", gauge.value),
        Check::Range => format!("{} (end {limit})", gauge.value),
        _ if gauge.limit.is_finite() => format!("{value} of {limit}"),
        _ => value.to_string(),
    };
    let asks = format!("{:.0} %", gauge.room.asked_percent());
    let over = if subject.segment.is_some() { "" } else { ", cycle" };
    let mut told = vec![what.clone() + over];
    if gauge.limit.is_finite() {
        told.insert(0, format!("{what}{over}: asks {asks}"));
        told.insert(0, format!("{what}{over}: asks {asks}, {of}"));
    } else {
        told.insert(0, format!("{what}{over}: {of}"));
    }
    told.iter().find(|text| text.width() <= width).cloned().unwrap_or(what)
}

/// A scale turns time and what is asked into dots.
#[derive(Debug)]
struct Scale {
    from: f64,
    per_second: f64,
    top: f64,
    down: f64,
}

impl Scale {
    fn of(curve: &Curve, width: usize, height: usize) -> Self {
        let [from, to] = curve.span;
        let most = curve.most();
        let top = if curve.unlimited.is_some() { (1.1 * most).max(1e-9) } else { (1.08 * most).clamp(LOWEST_TOP, HIGHEST) };
        let per_second = if to > from { (2.0 * width as f64 - 1.0) / (to - from) } else { 0.0 };
        Self { from, per_second, top, down: 4.0 * height as f64 }
    }

    fn x(&self, time: f64) -> f64 {
        (time - self.from) * self.per_second
    }

    fn y(&self, asked: f64) -> f64 {
        // What is higher than the chart runs along its upper edge, so that it never vanishes.
        ((1.0 - asked.clamp(0.0, self.top) / self.top) * (self.down - 1.0)).max(0.0)
    }
}

/// The limit as a dotted line, the reserve as a sparser one.
fn guides(raster: &mut Raster, curve: &Curve, scale: &Scale) {
    if curve.unlimited.is_some() {
        return;
    }
    let across = raster.across() as i64;
    let limit = scale.y(1.0).floor() as i64;
    for x in (0..across).step_by(2) {
        raster.dot(x, limit, Ink::Guide);
    }
    let mut next: Option<&Point> = None;
    let mut points = curve.points.iter().peekable();
    for x in (0..across).step_by(4) {
        while let Some(point) = points.next_if(|point| scale.x(point.time) <= x as f64) {
            next = Some(point);
        }
        if let Some(point) = next
            && point.allowed < 1.0 - 1e-6
        {
            raster.dot(x, scale.y(point.allowed).floor() as i64, Ink::Guide);
        }
    }
}

/// Figures at the left and times below.
fn labels(sheet: &mut Sheet, curve: &Curve, scale: &Scale, width: usize, height: usize) {
    let plain = Style::new();
    let row = |asked: f64| (scale.y(asked) / 4.0) as usize + 1;
    let mut taken = Vec::new();
    let mut label = |sheet: &mut Sheet, y: usize, text: &str| {
        if !taken.contains(&y) {
            sheet.put_before(AXIS - 1, y, text, plain);
            taken.push(y);
        }
    };
    if let Some(unit) = curve.unlimited {
        label(sheet, 1, &format!("{:.0}", scale.top));
        label(sheet, height, unit.sign());
    } else {
        label(sheet, row(1.0), "100 %");
        let allowed =
            curve.points.iter().map(|point| point.allowed).filter(|allowed| *allowed < 1.0 - 1e-6).fold(f64::NAN, f64::min);
        if allowed.is_finite() {
            label(sheet, row(allowed), &format!("{:.0} %", 100.0 * allowed));
        }
        if scale.top > 1.3 {
            label(sheet, 1, &format!("{:.0} %", 100.0 * scale.top));
        }
        label(sheet, height, "0");
    }
    let time = |seconds: f64| Measure::si(seconds, Dimension::Time).text(2);
    let [from, to] = curve.span;
    sheet.put(AXIS, height + 1, &time(from), plain);
    let (first, last) = (time(from).width(), time(to).width());
    if first + last + 2 <= width {
        sheet.put_before(AXIS + width, height + 1, &time(to), plain);
    }
}

use ratatui::style::Style;

use crate::arm::{Arm, JointKind};
use crate::checks::{Check, Verdict};
use crate::review::drawn::{Gauge, Gauges};
use crate::units::Measure;

use super::app::{App, Pane};
use super::phrases::how;
use super::sheet::{Sheet, fit};
use super::theme::Theme;

/// Columns of the numbers: value, to the range's end, rate, acceleration, holding. Each is named by where it ends.
#[derive(Debug, Clone, Copy)]
struct Columns {
    name: usize,
    value: usize,
    ruler: usize,
    ruler_width: usize,
    to_end: usize,
    rate: usize,
    accel: Option<usize>,
    holding: usize,
    share: usize,
}

/// From this width on accelerations are shown, and everything stands less close.
const WIDE: usize = 57;
/// A value in the middle between two columns stands in the right one, whatever its last digits are.
const STEADY: f64 = 1e-9;
/// A ruler with fewer columns says nothing.
const LEAST_RULER: usize = 5;

impl Columns {
    fn of(width: usize, arm: &Arm, theme: Theme) -> Self {
        let spread = Self::spread(width, arm, theme, true);
        // Long names take the room of the accelerations rather than that of the rulers.
        if width >= WIDE && spread.ruler_width >= LEAST_RULER { spread } else { Self::spread(width, arm, theme, false) }
    }

    fn spread(width: usize, arm: &Arm, theme: Theme, wide: bool) -> Self {
        let longest = arm.joints().iter().map(|joint| joint.name.chars().count()).max().unwrap_or(2);
        let name = longest.min(if width >= WIDE { 10 } else { 8 });
        let slides = arm.joints().iter().any(|joint| joint.kind == JointKind::Prismatic);
        // Room for "-123.4°" or "1234.5 mm", and a letter behind; a degree takes more in ASCII.
        let number = if theme.ascii { 11 } else { 9 + usize::from(slides) };
        // Room for "1099 %O" or "595 N·m".
        let share = if wide { 9 } else { 8 };
        let shares = if wide { 3 } else { 2 };
        let fixed = 1 + name + number + 1 + number + shares * share;
        let ruler_width = width.saturating_sub(fixed + 1).min(41);
        let value = 1 + name + number;
        let to_end = value + 1 + ruler_width + number;
        Self {
            name,
            value,
            ruler: value + 1,
            ruler_width,
            to_end,
            rate: to_end + share,
            accel: wide.then_some(to_end + 2 * share),
            holding: to_end + shares * share,
            share,
        }
    }
}

/// Draws a line a joint at the cursor, and one for closeness and the TCP.
pub fn draw(sheet: &mut Sheet, app: &App) {
    let (theme, focused) = (app.theme, app.pane == Pane::Joints);
    let (Some(judged), Some(gauges)) = (app.judged(), &app.scene.gauges) else {
        sheet.rule(0, Pane::Joints.name(), focused);
        return;
    };
    let joints = app.arm.joints();
    let columns = Columns::of(sheet.width(), &app.arm, theme);
    let title_end = sheet.rule(0, Pane::Joints.name(), focused);
    let mut word = |end: usize, word: &str| {
        if end > word.len() + title_end + 1 {
            sheet.put(end - word.len() - 1, 0, &format!(" {word} "), Style::new());
        }
    };
    word(columns.to_end - 1, "to end");
    word(columns.rate - 1, "rate");
    columns.accel.into_iter().for_each(|end| word(end - 1, "accel"));
    word(columns.holding - 1, "holding");
    // With few rows the selected joint stays among those shown.
    let rows = sheet.height().saturating_sub(2).min(joints.len());
    let first = (app.joint + 1).saturating_sub(rows);
    for (row, index) in (first..joints.len()).take(rows).enumerate() {
        draw_joint(sheet, app, gauges, index, row + 1, columns);
    }
    let told =
        if gauges.all.is_empty() { format!("no motion from {:.0} % on", 100.0 * gauges.fraction) } else { closeness(gauges) };
    let y = rows + 1;
    let x = sheet.put(1, y, &fit(&told, sheet.width().saturating_sub(1), theme), Style::new());
    let waypoint = judged.plan.segments.get(app.segment()).map_or(0, |segment| segment.to);
    let where_at = format!("{}, at {:.0} %", how(app.recipe(), waypoint), 100.0 * gauges.fraction);
    if x + where_at.chars().count() + 3 <= sheet.width() {
        sheet.put_before(sheet.width() - 1, y, &where_at, Style::new());
    }
}

fn draw_joint(sheet: &mut Sheet, app: &App, gauges: &Gauges, index: usize, y: usize, columns: Columns) {
    let (theme, joint) = (app.theme, &app.arm.joints()[index]);
    let selected = index == app.joint;
    let plain = if selected { theme.strong() } else { Style::new() };
    if selected {
        sheet.put(0, y, theme.here(), plain);
    }
    sheet.put(1, y, &fit(&joint.name, columns.name, theme), plain);
    if selected && app.pane == Pane::Joints {
        sheet.tint(1, y, joint.name.chars().count(), theme.selected());
    }
    let q = gauges.q[index];
    sheet.put_before(columns.value, y, &joint.value(q).text(1), plain);
    ruler(sheet, columns, y, (q - joint.range.low) / (2.0 * joint.range.half()));
    let to_end = joint.value(joint.range.to_end(q));
    let range = gauges.get(Check::Range, Some(index)).map_or(Verdict::Clear, |gauge| gauge.verdict);
    mark(sheet, columns.to_end, y, &to_end.text(1), range, plain);
    let mut share = |end: usize, check: Check| {
        let Some(gauge) = gauges.get(check, Some(index)) else { return };
        mark(sheet, end, y, &asks(gauge, columns.share - 2), gauge.verdict, plain);
    };
    share(columns.rate, Check::Rate);
    columns.accel.into_iter().for_each(|end| share(end, Check::Accel));
    share(columns.holding, Check::Holding);
}

/// What a gauge asks of its limit; the value itself where there is none, without its unit where that does not fit.
fn asks(gauge: &Gauge, width: usize) -> String {
    if gauge.limit.is_finite() {
        return format!("{:.0} %", gauge.room.asked_percent());
    }
    let told = gauge.value.text(0);
    if told.chars().count() > width { told.split(' ').next().unwrap_or("").to_owned() } else { told }
}

/// A number that ends one column before `end`, and the letter of a verdict that is not clear in that column.
fn mark(sheet: &mut Sheet, end: usize, y: usize, text: &str, verdict: Verdict, plain: Style) {
    let style = if verdict == Verdict::Clear { plain } else { sheet.theme().verdict(verdict) };
    sheet.put_before(end - 1, y, text, style);
    if verdict != Verdict::Clear {
        sheet.put(end - 1, y, verdict.letter().encode_utf8(&mut [0; 4]), style);
    }
}

/// A ruler from the range's low end to its high end, with a mark where the joint is.
fn ruler(sheet: &mut Sheet, columns: Columns, y: usize, share: f64) {
    let theme = sheet.theme();
    let width = columns.ruler_width;
    if width < LEAST_RULER {
        return;
    }
    for x in 0..width {
        let sign = match x {
            0 => theme.pick("├", "["),
            x if x == width - 1 => theme.pick("┤", "]"),
            x if x == (width - 1) / 2 => theme.pick("┼", "+"),
            _ => theme.pick("─", "-"),
        };
        sheet.put(columns.ruler + x, y, sign, Style::new());
    }
    if share.is_finite() {
        let at = (share.clamp(0.0, 1.0) * (width - 1) as f64 + STEADY).round() as usize;
        sheet.put(columns.ruler + at, y, theme.pick("●", "O"), theme.strong());
    }
}

fn closeness(gauges: &Gauges) -> String {
    let told = |check: Check, word: &str, digits: Option<usize>| {
        gauges.get(check, None).map(|gauge| {
            let Measure { si, .. } = gauge.value;
            let value = match digits {
                _ if !si.is_finite() => "any".to_owned(),
                Some(digits) => gauge.value.text(digits),
                None => gauge.value.to_string(),
            };
            let letter = if gauge.verdict == Verdict::Clear { String::new() } else { format!(" {}", gauge.verdict.letter()) };
            format!("{word} {value}{letter}")
        })
    };
    let parts = [
        told(Check::Singular, "singular", None),
        told(Check::SpeedLeft, "left", Some(0)),
        told(Check::TcpSpeed, "TCP", Some(0)),
        told(Check::PointSpeed, "points", Some(0)),
    ];
    parts.into_iter().flatten().collect::<Vec<_>>().join("  ")
}

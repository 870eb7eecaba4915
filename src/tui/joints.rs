use ratatui::style::Style;

use crate::checks::{Check, Verdict};
use crate::units::Measure;

use super::app::{App, Pane};
use super::gauges::{Gauge, Gauges};
use super::phrases::how;
use super::sheet::{Sheet, fit};
use super::theme::Theme;

/// Columns of the numbers: value, to the range's end, rate, acceleration, holding.
#[derive(Debug, Clone, Copy)]
struct Columns {
    value: usize,
    ruler: usize,
    ruler_width: usize,
    to_end: usize,
    rate: usize,
    accel: Option<usize>,
    holding: usize,
}

/// A share such as "1103 %O" with its letter.
const SHARE: usize = 8;
/// A value such as "-1234.5 mm"; in ASCII a degree takes more.
const VALUE: usize = 9;
const VALUE_ASCII: usize = 11;

impl Columns {
    /// Each number's column is named by where it ends.
    fn of(width: usize, name: usize, theme: Theme) -> Self {
        let wide = if theme.ascii { VALUE_ASCII } else { VALUE };
        let with_accel = width >= 54;
        let shares = if with_accel { 3 } else { 2 };
        let fixed = 1 + name + wide + 1 + wide + shares * SHARE;
        let ruler_width = width.saturating_sub(fixed + 1).min(41);
        let value = 1 + name + wide;
        let to_end = value + 1 + ruler_width + wide;
        Self {
            value,
            ruler: value + 1,
            ruler_width,
            to_end,
            rate: to_end + SHARE,
            accel: with_accel.then_some(to_end + 2 * SHARE),
            holding: to_end + shares * SHARE,
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
    let name = joints.iter().map(|joint| joint.name.chars().count()).max().unwrap_or(2).min(8);
    let columns = Columns::of(sheet.width(), name, theme);
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
    let where_at = format!("{}, at {:.0} %", how(&app.recipe, waypoint), 100.0 * gauges.fraction);
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
    sheet.put(1, y, &fit(&joint.name, 8, theme), plain);
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
        mark(sheet, end, y, &asks(gauge), gauge.verdict, plain);
    };
    share(columns.rate, Check::Rate);
    columns.accel.into_iter().for_each(|end| share(end, Check::Accel));
    share(columns.holding, Check::Holding);
}

/// What a gauge asks of its limit; the value itself where there is none.
fn asks(gauge: &Gauge) -> String {
    if gauge.limit.is_finite() { format!("{:.0} %", gauge.room.asked_percent()) } else { gauge.value.text(0) }
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
    if width < 5 {
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
        let at = (share.clamp(0.0, 1.0) * (width - 1) as f64).round() as usize;
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
    let parts =
        [told(Check::Singular, "singular", None), told(Check::SpeedLeft, "left", Some(0)), told(Check::TcpSpeed, "TCP", Some(0))];
    parts.into_iter().flatten().collect::<Vec<_>>().join("  ")
}

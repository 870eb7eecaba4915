use crate::checks::Verdict;
use crate::review::drawn::{Curve, Point};
use crate::units::Room;

use super::html::class;
use super::markup::Markup;

/// Size of the drawing, in its own units: about a pixel each on a screen.
const WIDTH: f64 = 340.0;
const HEIGHT: f64 = 200.0;
/// Room for the words around the plot: left, right, top, bottom.
const AROUND: [f64; 4] = [44.0, 10.0, 16.0, 34.0];
/// Nothing above this share of a limit is drawn to scale.
const HIGHEST: f64 = 4.0;
/// A chart shows at least up to this share of a limit.
const LOWEST_TOP: f64 = 1.15;
/// Height that a line of words takes.
const LINE: f64 = 12.0;

/// Draws one quantity over time, with its limit, its reserve and its worst instant.
pub(super) fn draw(page: &mut Markup, curve: &Curve, says: &str) {
    let view = format!("0 0 {WIDTH} {HEIGHT}");
    let worst = worst(curve);
    page.within("svg", &[("viewBox", &view), ("role", &"img"), ("aria-label", &says)], |page| {
        let scale = Scale::of(curve);
        let [left, right, top, bottom] = AROUND;
        let (end, base) = (WIDTH - right, HEIGHT - bottom);
        page.shape("path", &[("class", &"axis"), ("d", &format!("M{left} {top}V{base}H{end}"))]);
        guides(page, curve, &scale, worst.map_or(0.0, |point| scale.x(point.time)));
        for run in curve.points.chunk_by(|a, b| a.asked.is_finite() == b.asked.is_finite()) {
            if run[0].asked.is_finite() {
                line(page, run.iter().map(|point| scale.dot(point.time, point.asked)), "curve");
            }
        }
        flagged(page, curve, &scale);
        if let Some(point) = worst {
            mark(page, point, &scale);
        }
        let [from, to] = curve.span;
        text(page, [left, base + LINE + 2.0], "start", &format!("{from:.2} s"));
        text(page, [end, base + LINE + 2.0], "end", &format!("{to:.2} s"));
        text(page, [0.5 * (left + end), base + 2.0 * LINE + 4.0], "middle", "asked of the limit, over time");
    });
}

/// A scale turns time and what is asked into places of the drawing.
struct Scale {
    from: f64,
    per_second: f64,
    top: f64,
}

impl Scale {
    fn of(curve: &Curve) -> Self {
        let [from, to] = curve.span;
        let most = curve.most();
        let top = if curve.unlimited.is_some() { (1.1 * most).max(1e-9) } else { (1.08 * most).clamp(LOWEST_TOP, HIGHEST) };
        let per_second = if to > from { (WIDTH - AROUND[0] - AROUND[1]) / (to - from) } else { 0.0 };
        Self { from, per_second, top }
    }

    fn x(&self, time: f64) -> f64 {
        AROUND[0] + (time - self.from) * self.per_second
    }

    fn y(&self, asked: f64) -> f64 {
        // What is higher than the chart runs along its upper edge, so that it never vanishes.
        let high = HEIGHT - AROUND[2] - AROUND[3];
        AROUND[2] + high * (1.0 - asked.clamp(0.0, self.top) / self.top)
    }

    fn dot(&self, time: f64, asked: f64) -> [f64; 2] {
        [self.x(time), self.y(asked)]
    }
}

/// The limit as a line, the reserve as a dashed one, with their figures; their words at the side away from the mark at `marked`.
fn guides(page: &mut Markup, curve: &Curve, scale: &Scale, marked: f64) {
    let (words_at, stands) = if marked < 0.5 * WIDTH { (WIDTH - AROUND[1] - 4.0, "end") } else { (AROUND[0] + 4.0, "start") };
    let left = AROUND[0] - 5.0;
    let figure =
        |page: &mut Markup, asked: f64| text(page, [left, scale.y(asked) + 4.0], "end", &format!("{:.0} %", 100.0 * asked));
    text(page, [left, scale.y(0.0) + 4.0], "end", "0");
    if curve.unlimited.is_some() {
        return;
    }
    let y = scale.y(1.0);
    page.shape("path", &[("class", &"limit"), ("d", &format!("M{} {y:.1}H{}", AROUND[0], WIDTH - AROUND[1]))]);
    text(page, [words_at, y - 3.0], stands, "limit");
    figure(page, 1.0);
    let kept: Vec<&Point> = curve.points.iter().filter(|point| point.allowed < 1.0 - 1e-6).collect();
    let (Some(first), Some(last)) = (kept.first(), kept.last()) else { return };
    line(page, kept.iter().map(|point| scale.dot(point.time, point.allowed)), "reserve");
    let y = scale.y(first.allowed);
    text(page, [words_at, y + LINE - 2.0], stands, "reserve");
    if (scale.y(first.allowed) - scale.y(1.0)).abs() >= LINE && (first.allowed - last.allowed).abs() < 1e-6 {
        figure(page, first.allowed);
    }
}

/// What is not clear, drawn over the curve: heavier, and over the limit heavier still.
fn flagged(page: &mut Markup, curve: &Curve, scale: &Scale) {
    let pairs: Vec<(Verdict, [&Point; 2])> = curve
        .points
        .windows(2)
        .filter(|pair| pair.iter().all(|point| point.asked.is_finite()))
        .map(|pair| (pair[0].verdict.max(pair[1].verdict), [&pair[0], &pair[1]]))
        .collect();
    let follow = |a: &(Verdict, [&Point; 2]), b: &(Verdict, [&Point; 2])| a.0 == b.0 && std::ptr::eq(a.1[1], b.1[0]);
    for run in pairs.chunk_by(follow).filter(|run| run[0].0 != Verdict::Clear) {
        let points = std::iter::once(run[0].1[0]).chain(run.iter().map(|pair| pair.1[1]));
        line(page, points.map(|point| scale.dot(point.time, point.asked)), &format!("flagged {}", class(run[0].0)));
    }
}

/// The instant that asks most beyond what is allowed.
fn worst(curve: &Curve) -> Option<&Point> {
    let beyond = |point: &Point| point.asked - point.allowed;
    let mut most: Option<&Point> = None;
    for point in curve.points.iter().filter(|point| point.asked.is_finite() && curve.unlimited.is_none()) {
        if most.is_none_or(|known| beyond(point) > beyond(known)) {
            most = Some(point);
        }
    }
    most
}

/// A mark at an instant: a circle where it is clear, a square where it is tight, a triangle where it is over.
fn mark(page: &mut Markup, point: &Point, scale: &Scale) {
    let [x, y] = scale.dot(point.time, point.asked);
    let shape = match point.verdict {
        Verdict::Clear => format!("M{:.1} {y:.1}a4 4 0 1 0 8 0a4 4 0 1 0 -8 0", x - 4.0),
        Verdict::Tight | Verdict::Unproven => format!("M{:.1} {:.1}h8v8h-8z", x - 4.0, y - 4.0),
        Verdict::Over | Verdict::NoPath => format!("M{x:.1} {:.1}l6 10h-12z", y - 6.0),
    };
    page.shape("path", &[("class", &format!("mark {}", class(point.verdict))), ("d", &shape)]);
    let stands = if x > 0.8 * WIDTH {
        "end"
    } else if x < 0.3 * WIDTH {
        "start"
    } else {
        "middle"
    };
    // Rounded as its finding is told.
    text(page, [x, y - 9.0], stands, &Room::fraction(1.0 - point.asked).asks());
}

fn line(page: &mut Markup, points: impl Iterator<Item = [f64; 2]>, name: &str) {
    let dots: Vec<String> = points.map(|[x, y]| format!("{x:.1},{y:.1}")).collect();
    page.shape("polyline", &[("class", &name), ("points", &dots.join(" "))]);
}

fn text(page: &mut Markup, [x, y]: [f64; 2], stands: &str, words: &str) {
    let [x, y] = [x, y].map(|value| format!("{value:.1}"));
    page.says("text", &[("x", &x), ("y", &y), ("text-anchor", &stands)], words);
}

use crate::checks::Verdict;

use super::block::Ribbon;
use super::html::{class, sign};
use super::markup::Markup;

/// Width of the drawing, in its own units: about a pixel each on a screen, and what an A4 page takes.
const WIDTH: f64 = 720.0;
/// Room for the words at the left.
const LABEL: f64 = 78.0;
/// Height of a row.
const ROW: f64 = 20.0;
/// Height of the bars of a row.
const BAR: f64 = 14.0;
/// Width that a digit takes.
const DIGIT: f64 = 6.5;

/// Draws the verdicts along the cycle: a row for the segments, one a check. How bad it is shows in how tall a bar is, in its letter,
/// and last in its colour.
pub(super) fn draw(page: &mut Markup, ribbon: &Ribbon) {
    let rows = ribbon.fine.in_rows(usize::MAX);
    let height = ROW * (rows.len() as f64 + 3.0);
    page.within("figure", &[("class", &"ribbon")], |page| {
        let about = [
            ("class", &"wide" as &dyn std::fmt::Display),
            ("tabindex", &0),
            ("role", &"group"),
            ("aria-label", &"Verdicts along the cycle"),
        ];
        page.within("div", &about, |page| {
            let view = format!("0 0 {WIDTH} {height}");
            let says = "Verdicts along the cycle, a row a check; the tables of segments and findings say the same";
            page.within("svg", &[("viewBox", &view), ("role", &"img"), ("aria-label", &says)], |page| {
                numbers(page, ribbon, height);
                segments(page, ribbon);
                for (index, (word, cells)) in rows.iter().enumerate() {
                    let top = ROW * (index as f64 + 2.0);
                    label(page, top, word);
                    let per_cell = (WIDTH - LABEL) / cells.len().max(1) as f64;
                    let mut at = 0;
                    for run in cells.chunk_by(|a, b| a == b) {
                        if let Some(verdict) = run[0] {
                            bar(page, top, LABEL + per_cell * at as f64, per_cell * run.len() as f64, verdict);
                        }
                        at += run.len();
                    }
                }
                let bottom = height - 5.0;
                text(page, LABEL, bottom, "start", "0 s");
                text(page, WIDTH - 2.0, bottom, "end", &format!("{:.2} s", ribbon.lasts));
            });
        });
        page.within("figcaption", &[], |page| {
            page.words("The worst verdict of every check along the cycle. ");
            for verdict in Verdict::ALL.into_iter().rev() {
                page.says("span", &[("class", &format!("sign {}", class(verdict)))], &sign(verdict));
                page.words(&format!("{} ", verdict.word()));
            }
        });
    });
}

/// The segments' numbers over their time, with borders between them.
fn numbers(page: &mut Markup, ribbon: &Ribbon, height: f64) {
    label(page, 0.0, "segment");
    for (number, _, span) in &ribbon.segments {
        let [from, to] = span.map(|time| x(ribbon, time));
        let border = format!("M{from:.1} 4V{:.1}", height - ROW);
        page.shape("path", &[("class", &"border"), ("d", &border)]);
        if DIGIT * number.len() as f64 + 2.0 <= to - from {
            text(page, 0.5 * (from + to), 0.7 * ROW, "middle", number);
        }
    }
}

/// Every segment's own verdict.
fn segments(page: &mut Markup, ribbon: &Ribbon) {
    label(page, ROW, "all checks");
    for (_, verdict, span) in &ribbon.segments {
        let [from, to] = span.map(|time| x(ribbon, time));
        bar(page, ROW, from, to - from, *verdict);
    }
}

fn x(ribbon: &Ribbon, time: f64) -> f64 {
    LABEL + (WIDTH - LABEL) * (time / ribbon.lasts.max(1e-9)).clamp(0.0, 1.0)
}

fn bar(page: &mut Markup, top: f64, from: f64, width: f64, verdict: Verdict) {
    let tall = match verdict {
        Verdict::Clear => 0.2,
        Verdict::Tight | Verdict::Unproven => 0.6,
        Verdict::Over | Verdict::NoPath => 1.0,
    };
    let (width, height) = ((width - 0.6).max(1.0), BAR * tall);
    let y = top + 3.0 + BAR - height;
    let [x, y, wide, high] = [from + 0.3, y, width, height].map(|value| format!("{value:.1}"));
    let name = format!("bar {}", class(verdict));
    page.shape("rect", &[("class", &name), ("x", &x), ("y", &y), ("width", &wide), ("height", &high)]);
    if verdict != Verdict::Clear {
        let fits = width >= DIGIT + 3.0;
        let (at, stands) = if fits { (from + 0.5 * width + 0.3, "middle") } else { (from + width + 1.5, "start") };
        let name = if fits { format!("on {}", class(verdict)) } else { "beside".to_owned() };
        let [at, base] = [at, top + 3.0 + BAR - 2.5].map(|value| format!("{value:.1}"));
        page.says("text", &[("class", &name), ("x", &at), ("y", &base), ("text-anchor", &stands)], &sign(verdict));
    }
}

fn label(page: &mut Markup, top: f64, word: &str) {
    text(page, LABEL - 6.0, top + 0.7 * ROW, "end", word);
}

fn text(page: &mut Markup, x: f64, y: f64, stands: &str, words: &str) {
    let [x, y] = [x, y].map(|value| format!("{value:.1}"));
    page.says("text", &[("x", &x), ("y", &y), ("text-anchor", &stands)], words);
}

use std::fmt::Write;

use crate::checks::Verdict;
use crate::geometry::{Pose, V3};
use crate::review::drawn::Sketch;

use super::block::{Block, Paper, Shows, Stance};
use super::html::{class, sign};
use super::markup::Markup;

/// Size of a drawing of the arm, in its own units: two views beside each other.
const WIDTH: f64 = 340.0;
const HEIGHT: f64 = 200.0;
/// Height that the words above the views take.
const HEAD: f64 = 18.0;
/// Free space around what is drawn.
const EDGE: f64 = 16.0;
/// Half the width of the drawn foot, m.
const FOOT: f64 = 0.12;

/// A view says which world axes are drawn: across and up.
#[derive(Debug, Clone, Copy)]
enum View {
    Side,
    Above,
}

impl View {
    const BOTH: [Self; 2] = [Self::Side, Self::Above];

    fn flat(self, p: &V3) -> [f64; 2] {
        match self {
            Self::Side => [p.x, p.z],
            Self::Above => [p.x, p.y],
        }
    }

    fn words(self) -> &'static str {
        match self {
            Self::Side => "side: x, z",
            Self::Above => "above: x, y",
        }
    }

    /// The name of the path that all drawings share.
    fn id(self) -> &'static str {
        match self {
            Self::Side => "path-side",
            Self::Above => "path-above",
        }
    }
}

/// All drawings of the arm in a report, in one scale, with the path that they share.
pub(super) struct Arms<'a> {
    sketch: &'a Sketch,
    any: bool,
    scale: f64,
    low: V3,
    high: V3,
}

impl<'a> Arms<'a> {
    /// The drawings that a report has.
    pub fn of(paper: &'a Paper) -> Self {
        let drawings = paper.blocks.iter().filter_map(|block| if let Block::Drawings(_, all) = block { Some(all) } else { None });
        let stances: Vec<&Stance> = drawings
            .flatten()
            .filter_map(|drawing| if let Shows::Arm(stance) = &drawing.shows { Some(stance.as_ref()) } else { None })
            .collect();
        let (mut low, mut high) = (paper.sketch.low, paper.sketch.high);
        for stance in &stances {
            let foot = V3::new(FOOT, FOOT, FOOT);
            let ends = [stance.mount.at - foot, stance.mount.at + foot, stance.tcp];
            for point in stance.stick.iter().chain(&ends).filter(|point| point.iter().all(|v| v.is_finite())) {
                low = low.inf(point);
                high = high.sup(point);
            }
        }
        let size = high - low;
        let across = (0.5 * WIDTH - 2.0 * EDGE) / size.x.max(1e-3);
        let up = (HEIGHT - HEAD - 2.0 * EDGE) / size.y.max(size.z).max(1e-3);
        Self { sketch: &paper.sketch, any: !stances.is_empty(), scale: across.min(up), low, high }
    }

    /// The path of the TCP in both views, once.
    pub fn shared(&self, page: &mut Markup) {
        if !self.any {
            return;
        }
        page.within("svg", &[("class", &"shared"), ("aria-hidden", &"true"), ("width", &0), ("height", &0)], |page| {
            page.within("defs", &[], |page| {
                for view in View::BOTH {
                    page.within("g", &[("id", &view.id())], |page| self.path(page, view));
                }
            });
        });
    }

    fn path(&self, page: &mut Markup, view: View) {
        for run in self.sketch.strokes.chunk_by(|a, b| a.verdict == b.verdict) {
            let mut d = String::new();
            let mut last: Option<V3> = None;
            for stroke in run {
                let [from, to] = stroke.ends;
                if last != Some(from) {
                    let [x, y] = self.dot(view, &from);
                    let _ = write!(d, "M{x:.1} {y:.1}");
                }
                let [x, y] = self.dot(view, &to);
                let _ = write!(d, "L{x:.1} {y:.1}");
                last = Some(to);
            }
            page.shape("path", &[("class", &format!("way {}", class(run[0].verdict))), ("d", &d)]);
        }
    }

    /// Draws the arm at an instant, from the side and from above.
    pub fn draw(&self, page: &mut Markup, stance: &Stance, says: &str) {
        let view = format!("0 0 {WIDTH} {HEIGHT}");
        page.within("svg", &[("viewBox", &view), ("role", &"img"), ("aria-label", &says)], |page| {
            for view in View::BOTH {
                self.view(page, stance, view);
            }
        });
    }

    fn view(&self, page: &mut Markup, stance: &Stance, view: View) {
        let left = if matches!(view, View::Side) { 0.0 } else { 0.5 * WIDTH } + EDGE;
        page.says("text", &[("x", &left), ("y", &11)], view.words());
        page.shape("use", &[("href", &format!("#{}", view.id()))]);
        for half in foot(&stance.mount) {
            self.line(page, view, &[stance.mount.at - half, stance.mount.at + half], "foot");
        }
        self.line(page, view, &stance.stick, "body");
        let flange = stance.stick.last().copied().unwrap_or(stance.mount.at);
        self.line(page, view, &[flange, stance.tcp], "tool");
        for joint in &stance.stick {
            self.circle(page, view, joint, 2.5, "joint");
        }
        if stance.loaded {
            self.circle(page, view, &stance.tcp, 5.0, "load");
        }
        let [x, y] = self.dot(view, &stance.tcp);
        if stance.verdict != Verdict::Clear {
            // The letter stands beside the TCP, on the side away from the base.
            let base = self.dot(view, &stance.mount.at)[0];
            let (x, stands) = if x < base { (x - 7.0, "end") } else { (x + 7.0, "start") };
            let name = format!("letter {}", class(stance.verdict));
            let [x, y] = [x, y + 4.0].map(|value| format!("{value:.1}"));
            page.says("text", &[("class", &name), ("x", &x), ("y", &y), ("text-anchor", &stands)], &sign(stance.verdict));
        }
        if matches!(view, View::Side) {
            let x = 0.5 * WIDTH - EDGE - 3.0;
            page.shape("path", &[("class", &"gravity"), ("d", &format!("M{x} 16v14m-3 -5l3 5l3 -5"))]);
            page.says("text", &[("x", &(x - 7.0)), ("y", &25), ("text-anchor", &"end")], "gravity");
        }
    }

    fn line(&self, page: &mut Markup, view: View, points: &[V3], name: &str) {
        let dots: Vec<String> = points
            .iter()
            .map(|point| {
                let [x, y] = self.dot(view, point);
                format!("{x:.1},{y:.1}")
            })
            .collect();
        page.shape("polyline", &[("class", &name), ("points", &dots.join(" "))]);
    }

    fn circle(&self, page: &mut Markup, view: View, at: &V3, radius: f64, name: &str) {
        let [x, y] = self.dot(view, at).map(|value| format!("{value:.1}"));
        page.shape("circle", &[("class", &name), ("cx", &x), ("cy", &y), ("r", &radius)]);
    }

    /// Where a place of the world is in the drawing. Both views share one scale, so that what is below each other belongs together.
    fn dot(&self, view: View, place: &V3) -> [f64; 2] {
        let [x, y] = view.flat(place);
        let [middle_x, middle_y] = view.flat(&(0.5 * (self.low + self.high)));
        let across = if matches!(view, View::Side) { 0.25 * WIDTH } else { 0.75 * WIDTH };
        [across + self.scale * (x - middle_x), HEAD + 0.5 * (HEIGHT - HEAD) - self.scale * (y - middle_y)]
    }
}

/// The foot that the arm stands on: lines square to the base's z axis.
fn foot(mount: &Pose) -> [V3; 2] {
    [0, 1].map(|axis| mount.axes.column(axis) * FOOT)
}

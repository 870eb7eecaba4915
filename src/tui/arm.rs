use ratatui::style::Style;

use crate::checks::Verdict;
use crate::geometry::{Pose, V3};
use crate::review::drawn::Gauges;

use super::app::App;
use super::raster::{Dot, Ink, Raster};
use super::sheet::Sheet;

/// A view says which world axes a drawing shows: across and up.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum View {
    Side,
    Above,
}

impl View {
    fn flat(self, p: &V3) -> Dot {
        match self {
            Self::Side => (p.x, p.z),
            Self::Above => (p.x, p.y),
        }
    }

    fn words(self) -> &'static str {
        match self {
            Self::Side => "from the side (x, z)",
            Self::Above => "from above (x, y)",
        }
    }

    fn axes(self) -> &'static str {
        match self {
            Self::Side => "side: x z",
            Self::Above => "above: x y",
        }
    }
}

/// A mount counts as upright when its z axis is this close to the world's (half a degree).
const UPRIGHT: f64 = 0.999_96;
/// Half the width of the drawn foot, m.
const FOOT: f64 = 0.12;
/// Two views stand beside each other from this width on.
const BESIDE: usize = 44;

/// Draws the arm at the cursor, from the side and from above, in the world, with the path of its TCP.
pub fn draw(sheet: &mut Sheet, app: &App) {
    sheet.rule(0, "Arm", false);
    let Some(gauges) = &app.scene.gauges else { return };
    let (width, height) = (sheet.width(), sheet.height().saturating_sub(1));
    let (parts, size) = if width >= BESIDE {
        let half = (width - 2) / 2;
        ([(0, 1), (half + 2, 1)], (half, height))
    } else {
        ([(0, 1), (0, 1 + height / 2)], (width, height / 2))
    };
    for (view, (x, y)) in [View::Side, View::Above].into_iter().zip(parts) {
        draw_view(&mut sheet.part(x, y, size.0, size.1), app, gauges, view);
    }
}

fn draw_view(sheet: &mut Sheet, app: &App, gauges: &Gauges, view: View) {
    let (width, height) = (sheet.width(), sheet.height().saturating_sub(1));
    let words = if width >= view.words().len() { view.words() } else { view.axes() };
    sheet.put(0, 0, words, Style::new());
    if width < 4 || height < 2 {
        return;
    }
    let mut raster = Raster::new(width, height);
    let paper = Paper::of(app, gauges, view, &raster);
    for stroke in &app.scene.sketch.strokes {
        let [from, to] = stroke.ends.map(|end| paper.dot(&end));
        match stroke.verdict {
            Verdict::Clear => raster.line(from, to, Ink::Line),
            Verdict::Tight | Verdict::Unproven => raster.thick(from, to, Ink::Flagged),
            Verdict::Over | Verdict::NoPath => raster.thick(from, to, Ink::Over),
        }
    }
    foot(&mut raster, &paper, &app.recipe().mount);
    let mount = &app.recipe().mount;
    let points: Vec<Dot> = gauges.posture.stick().iter().map(|point| paper.dot(&mount.point(point))).collect();
    for ends in points.windows(2) {
        raster.thick(ends[0], ends[1], Ink::Body);
    }
    for joint in &points {
        raster.blot(*joint, 1, Ink::Body);
    }
    let tcp = paper.dot(&mount.point(&gauges.tcp.at));
    if let Some(flange) = points.last() {
        raster.line(*flange, tcp, Ink::Body);
    }
    if gauges.load > 0.0 {
        raster.blot(tcp, 2, Ink::Body);
    }
    let theme = app.theme;
    let mut drawing = sheet.part(0, 1, width, height);
    raster.draw(&mut drawing, |ink| match ink {
        Ink::Guide | Ink::Line => Style::new(),
        Ink::Body => theme.arm(),
        Ink::Flagged => theme.stroke(Verdict::Tight),
        Ink::Over => theme.stroke(Verdict::Over),
    });
    marks(&mut drawing, app, &paper);
    if gauges.load > 0.0 && width >= 20 {
        let (x, y) = (tcp.0 / 2.0 + 2.0, tcp.1 / 4.0);
        if x >= 0.0 && y >= 0.0 && x as usize + 4 <= width && drawing.sign(x as usize, y as usize) == " " {
            drawing.put(x as usize, y as usize, "load", Style::new());
        }
    }
    let upright = mount.axes[(2, 2)] > UPRIGHT;
    if view == View::Side && !upright {
        drawing.put_before(width, 0, theme.pick("gravity ↓", "gravity v"), theme.strong());
    }
}

/// The letters of findings at their worst places.
fn marks(drawing: &mut Sheet, app: &App, paper: &Paper) {
    for (place, verdict) in &app.scene.sketch.marks {
        let (x, y) = paper.dot(place);
        if x >= 0.0 && y >= 0.0 {
            let letter = verdict.letter();
            drawing.put((x / 2.0) as usize, (y / 4.0) as usize, letter.encode_utf8(&mut [0; 4]), app.theme.verdict(*verdict));
        }
    }
}

/// The foot that the arm stands on: a line square to the base's z axis, seen from the side.
fn foot(raster: &mut Raster, paper: &Paper, mount: &Pose) {
    let across = mount.axes.column(0) * FOOT;
    let side = mount.axes.column(1) * FOOT;
    for half in [across, side] {
        raster.thick(paper.dot(&(mount.at - half)), paper.dot(&(mount.at + half)), Ink::Body);
    }
}

/// Paper turns world coordinates of one view into dots, one scale for both directions.
#[derive(Debug, Clone, Copy)]
struct Paper {
    view: View,
    scale: f64,
    left: f64,
    top: f64,
}

impl Paper {
    fn of(app: &App, gauges: &Gauges, view: View, raster: &Raster) -> Self {
        let sketch = &app.scene.sketch;
        let (mut low, mut high) = (sketch.low, sketch.high);
        let foot = V3::new(FOOT, FOOT, 0.0);
        let mount = &app.recipe().mount;
        let mut all = vec![mount.point(&gauges.tcp.at), mount.at - foot, mount.at + foot];
        all.extend(gauges.posture.stick().iter().map(|point| mount.point(point)));
        for point in all {
            low = low.inf(&point);
            high = high.sup(&point);
        }
        // Both views share one scale, so that what is below each other belongs together.
        let size = high - low;
        let (across, down) = (raster.across() - 6.0, raster.down() - 6.0);
        let scale = (across / size.x.max(1e-3)).min(down / size.y.max(size.z).max(1e-3)).max(0.0);
        let (x0, y0) = view.flat(&low);
        let (x1, y1) = view.flat(&high);
        let left = 0.5 * raster.across() - scale * 0.5 * (x0 + x1);
        let top = 0.5 * raster.down() + scale * 0.5 * (y0 + y1);
        Self { view, scale, left, top }
    }

    fn dot(&self, place: &V3) -> Dot {
        let (x, y) = self.view.flat(place);
        (self.left + self.scale * x, self.top - self.scale * y)
    }
}

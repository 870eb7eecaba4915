use std::collections::HashSet;

use crate::checks::{Finding, Kind, Verdict};
use crate::geometry::V3;
use crate::kinematics::Posture;
use crate::motion::{Path, Segment};
use crate::review::Judged;

/// A sketch is what stays the same in the drawings of the arm: the path of the TCP over the cycle, in the world, m.
#[derive(Debug, Clone, Default)]
pub struct Sketch {
    /// Pieces of the path with the worst verdict on each, the flagged ones last.
    pub strokes: Vec<Stroke>,
    /// The worst places of findings, the worst last.
    pub marks: Vec<(V3, Verdict)>,
    /// Least coordinates of all that is drawn.
    pub low: V3,
    /// Greatest coordinates of all that is drawn.
    pub high: V3,
}

/// A stroke is one straight piece of the drawn path.
#[derive(Debug, Clone, Copy)]
pub struct Stroke {
    /// Its ends.
    pub ends: [V3; 2],
    /// The worst verdict on it.
    pub verdict: Verdict,
}

/// Two places count as alike within this part of the drawing.
const CELLS: f64 = 300.0;
/// Places of all segments together that the path is drawn through.
const PLACES: usize = 4000;

impl Sketch {
    /// The sketch of a judged recipe.
    pub fn of(judged: &Judged) -> Self {
        let mut sketch = Self { strokes: Vec::new(), marks: Vec::new(), low: V3::zeros(), high: V3::zeros() };
        let mount = &judged.recipe.mount;
        sketch.low = mount.at;
        sketch.high = mount.at;
        let places = (PLACES / judged.plan.segments.len().max(1)).clamp(2, 24);
        for (index, segment) in judged.plan.segments.iter().enumerate() {
            let findings = &judged.survey.segments[index].findings;
            sketch.add(judged, segment, findings, places);
            let arm = Posture::at(judged.arm.chain(), &segment.start).stick();
            arm.iter().for_each(|point| sketch.reach(&mount.point(point)));
        }
        sketch.thin();
        sketch.marks.sort_by_key(|(_, verdict)| *verdict);
        sketch.strokes.sort_by_key(|stroke| stroke.verdict);
        sketch
    }

    fn add(&mut self, judged: &Judged, segment: &Segment, findings: &[Finding], places: usize) {
        let until = segment.followed_to();
        let mut us: Vec<f64> = (0..=places).map(|k| until * k as f64 / places as f64).collect();
        for finding in findings {
            us.extend([finding.from, finding.worst(), finding.to].map(|place| judged.on_cycle(finding, place).u));
            if let Kind::Excess(excess) = &finding.kind {
                us.extend(excess.over.iter().flatten().map(|place| place.u));
            }
        }
        us.retain(|u| (0.0..=until).contains(u));
        us.sort_by(f64::total_cmp);
        us.dedup();
        for finding in findings {
            // What is not known is often not known anywhere; marks would hide the path.
            if finding.verdict != Verdict::Unproven {
                let at = judged.recipe.mount.point(&tcp_at(judged, segment, judged.on_cycle(finding, finding.worst()).u));
                self.marks.push((at, finding.verdict));
            }
        }
        let points: Vec<V3> = us.iter().map(|u| judged.recipe.mount.point(&tcp_at(judged, segment, *u))).collect();
        points.iter().for_each(|point| self.reach(point));
        for (ends, u) in points.windows(2).zip(us.windows(2)) {
            let verdict = verdict_at(judged, findings, 0.5 * (u[0] + u[1]));
            self.strokes.push(Stroke { ends: [ends[0], ends[1]], verdict });
        }
    }

    /// Leaves out what would be drawn over something alike: long programs go the same ways many times.
    fn thin(&mut self) {
        let size = (self.high - self.low).max().max(1e-6);
        let cell = |point: &V3| (point * (CELLS / size)).map(|v| v.round() as i32);
        let mut seen = HashSet::new();
        self.strokes.retain(|stroke| {
            let [a, b] = [cell(&stroke.ends[0]), cell(&stroke.ends[1])];
            seen.insert((a.x, a.y, a.z, b.x, b.y, b.z, stroke.verdict))
        });
        let mut marked = HashSet::new();
        self.marks.retain(|(at, verdict)| {
            let at = cell(at);
            marked.insert((at.x, at.y, at.z, *verdict))
        });
    }

    fn reach(&mut self, point: &V3) {
        if point.iter().all(|v| v.is_finite()) {
            self.low = self.low.inf(point);
            self.high = self.high.sup(point);
        }
    }
}

/// Where the TCP is at a fraction of a segment, base, m.
fn tcp_at(judged: &Judged, segment: &Segment, u: f64) -> V3 {
    match (&segment.path, segment.path.target(u)) {
        (_, Some(target)) => target.pose.at,
        (Path::Joint { from, to }, None) => {
            Posture::at(judged.arm.chain(), &from.zip(to, |a, b| a + u * (b - a))).tcp(&segment.carried.tcp).at
        }
        (Path::JointBlend(blend), None) => {
            let [q, ..] = blend.at(u);
            Posture::at(judged.arm.chain(), &q).tcp(&segment.carried.tcp).at
        }
        _ => Posture::at(judged.arm.chain(), &segment.start).tcp(&segment.carried.tcp).at,
    }
}

fn verdict_at(judged: &Judged, findings: &[Finding], u: f64) -> Verdict {
    findings
        .iter()
        .filter(|finding| judged.on_cycle(finding, finding.from).u <= u && u <= judged.on_cycle(finding, finding.to).u)
        .map(|finding| match &finding.kind {
            Kind::Excess(excess) if excess.over.is_none_or(|[from, to]| u < from.u || to.u < u) => {
                finding.verdict.min(Verdict::Tight)
            }
            Kind::Excess(_) => finding.verdict,
            Kind::NoPath(_) | Kind::Unproved(_) => Verdict::Clear,
        })
        .max()
        .unwrap_or(Verdict::Clear)
}

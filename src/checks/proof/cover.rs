use crate::arm::{Arm, MAX_JOINTS};
use crate::checks::channel::CHANNELS;
use crate::checks::{Check, Meter, Reading, Unproved};
use crate::geometry::V3;
use crate::kinematics::{SphericalWrist, spherical_wrist};
use crate::motion::{Follower, Instant, Path, Segment};

use super::border::Joined;
use super::bounds::{Asked, Even, on_joint_move, on_path};
use super::effort::{Effort, Tally};
use super::leaf::{Middle, Row};
use super::pace::Pace;
use super::view::{Reference, View};

/// What a cover proved of a segment.
#[derive(Debug, Clone)]
pub(crate) struct Covered {
    /// For each needed channel the most that it asks anywhere, if that is proved.
    pub asked: [Option<f64>; CHANNELS],
    /// Whether the joint path is proved to exist and to stay on one branch from the first posture to the last.
    pub path: bool,
    /// Between which values each joint stays, rad or m, rounded outward; where the path is proved.
    pub spans: Option<[[f64; 2]; MAX_JOINTS]>,
    /// Instants (fraction and time) at which a needed channel is flagged: the sweep missed them.
    pub witnesses: Vec<(f64, f64)>,
    /// Where and why it did not close, if so.
    pub stuck: Option<Stuck>,
    /// How it went.
    pub tally: Tally,
}

/// The first stretch that could not be proved, in fractions of the path, and why.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Stuck {
    pub why: Unproved,
    pub from: f64,
    pub to: f64,
}

impl Covered {
    /// Nothing was tried.
    pub fn nothing() -> Self {
        Self { asked: [None; CHANNELS], path: false, spans: None, witnesses: Vec::new(), stuck: None, tally: Tally::default() }
    }
}

/// A stretch narrower than this is given up, in fractions of the path.
const NARROWEST: f64 = 1e-7;

/// On a joint move the link that looks on is this part of the way along the arm: from there neither base nor tool moves much. Of
/// 4,000 random joint moves of six joints a hundredth took more than 15 postures so, and 27 seen from the base.
const LOOKS_ON: usize = 3;

/// Leaves reach this much farther than they are told, in fractions of the path, so that no seam of rounding stays between them.
const SEAM: f64 = 1e-12;

/// What is known of a joint's values by ends and turning points is told this much wider, rad or m, for rounding.
const SPAN_ROUNDING: f64 = 1e-12;

/// One stretch still to be covered, on one piece of the law and in one cell of the track.
#[derive(Debug, Clone, Copy)]
struct Gap {
    from: f64,
    to: f64,
    piece: usize,
}

/// Proves what the channels in `needs` ask at most along a whole segment, which must have been followed to its end: no more than
/// `allowed`.
pub(crate) fn cover(
    arm: &Arm,
    segment: &Segment,
    meter: &Meter,
    gravity: V3,
    needs: &[usize],
    allowed: &Asked,
    effort: Effort,
) -> Covered {
    let mut run = Run {
        arm,
        segment,
        meter,
        gravity,
        follower: Follower::of(arm, segment),
        wrist: spherical_wrist(arm.chain()),
        needs: needs.to_vec(),
        allowed: *allowed,
        out: Covered::nothing(),
        most: [0.0; CHANNELS],
        joined: Vec::new(),
        spans: [[f64::INFINITY, f64::NEG_INFINITY]; MAX_JOINTS],
        hint: 0.25,
        effort,
    };
    run.take_exact();
    if run.segment.duration() == 0.0 || (run.needs.is_empty() && !segment.follows_path()) {
        run.out.path = true;
    } else {
        run.cover_all();
    }
    run.out.spans = run.spans();
    for slot in run.needs {
        run.out.asked[slot] = Some(run.most[slot]);
    }
    run.out
}

/// A segment while it is covered.
pub(super) struct Run<'a> {
    pub(super) arm: &'a Arm,
    pub(super) segment: &'a Segment,
    meter: &'a Meter<'a>,
    gravity: V3,
    pub(super) follower: Follower<'a>,
    wrist: Option<SphericalWrist>,
    needs: Vec<usize>,
    allowed: Asked,
    pub(super) out: Covered,
    most: Asked,
    pub(super) joined: Vec<Joined>,
    /// What the joints turn through on the stretches proved so far.
    spans: [[f64; 2]; MAX_JOINTS],
    hint: f64,
    pub(super) effort: Effort,
}

impl Run<'_> {
    /// On a joint move each joint runs one way, so range, rate and acceleration are exact by ends and corners; on a blend by joints,
    /// which is run evenly, by ends and turning points too; without motion everything is.
    fn take_exact(&mut self) {
        let still = self.segment.duration() == 0.0;
        if !still && self.segment.follows_path() {
            return;
        }
        let Some([start, end]) = self.ends() else { return };
        let corners: Vec<[f64; 2]> = self
            .segment
            .law
            .pieces()
            .iter()
            .flat_map(|p| [[p.rate, p.accel], [p.at(p.duration)[1], p.at(p.duration)[2]]])
            .collect();
        let exact = |slot: &usize| still || matches!(self.meter.channel(*slot).check, Check::Range | Check::Rate | Check::Accel);
        let (taken, left): (Vec<usize>, Vec<usize>) = self.needs.iter().copied().partition(exact);
        let turning_points = match &self.segment.path {
            Path::JointBlend(blend) => blend.turning_points(),
            _ => Vec::new(),
        };
        for at in turning_points.into_iter().filter_map(|u| self.follower.at(u)).chain([start, end]) {
            for &[rate, accel] in if still { &[[0.0, 0.0]][..] } else { &corners[..] } {
                let reading = self.meter.read(&at, rate.max(0.0), accel);
                for &slot in &taken {
                    let asked = self.meter.channel(slot).asked_in(&reading, reading[slot]);
                    let most = self.out.asked[slot].get_or_insert(0.0);
                    *most = most.max(asked);
                }
            }
        }
        self.needs = left;
    }

    /// Between which values the joints stay: on a path by its stretches, otherwise by ends and turning points.
    fn spans(&self) -> Option<[[f64; 2]; MAX_JOINTS]> {
        if self.segment.follows_path() && self.segment.duration() > 0.0 {
            return Some(self.spans).filter(|_| self.out.path);
        }
        let turning_points = match &self.segment.path {
            Path::JointBlend(blend) => blend.turning_points(),
            _ => Vec::new(),
        };
        let mut spans = [[f64::INFINITY, f64::NEG_INFINITY]; MAX_JOINTS];
        for at in turning_points.into_iter().filter_map(|u| self.follower.at(u)).chain(self.ends()?) {
            for (span, q) in spans.iter_mut().zip(at.q.iter()) {
                *span = [span[0].min(q - SPAN_ROUNDING), span[1].max(q + SPAN_ROUNDING)];
            }
        }
        Some(spans)
    }

    fn widen_spans(&mut self, leaf: &[[f64; 2]; MAX_JOINTS]) {
        for (span, leaf) in self.spans.iter_mut().zip(leaf) {
            *span = [span[0].min(leaf[0]), span[1].max(leaf[1])];
        }
    }

    fn ends(&self) -> Option<[Instant; 2]> {
        Some([self.follower.at(0.0)?, self.follower.at(1.0)?])
    }

    fn cover_all(&mut self) {
        let mut gaps = self.gaps();
        while let Some(gap) = gaps.pop() {
            let (half, middle) = (0.5 * (gap.to - gap.from), 0.5 * (gap.from + gap.to));
            let affordable = self.out.tally.postures < self.effort.postures;
            let half = if affordable { self.try_at(middle, half, gap.piece) } else { None };
            let Some(half) = half else {
                // Nothing is proved any more for what is still needed.
                self.needs.clear();
                let why = if affordable { Unproved::TooNarrow } else { Unproved::BudgetSpent };
                self.out.stuck = Some(Stuck { why, from: gap.from, to: gap.to });
                return;
            };
            for rest in [Gap { to: middle - half, ..gap }, Gap { from: middle + half, ..gap }] {
                if rest.to - rest.from > SEAM {
                    gaps.push(rest);
                }
            }
        }
        self.out.path = !self.segment.follows_path() || self.is_one_branch();
        if !self.out.path {
            self.needs.clear();
            self.out.stuck = Some(Stuck { why: Unproved::NotOneBranch, from: 0.0, to: 1.0 });
        }
    }

    /// The segment cut at the corners of its law and, for a redundant arm, at the nodes of its track.
    fn gaps(&self) -> Vec<Gap> {
        let mut gaps = Vec::new();
        for (index, piece) in self.segment.law.pieces().iter().enumerate() {
            let (from, to) = (piece.u.clamp(0.0, 1.0), piece.end().clamp(0.0, 1.0));
            let mut cuts = vec![from];
            if self.arm.is_redundant() {
                cuts.extend(self.segment.track.nodes.iter().map(|node| node.u).filter(|u| *u > from && *u < to));
            }
            cuts.push(to);
            gaps.extend(cuts.windows(2).filter(|w| w[1] > w[0]).map(|w| Gap { from: w[0], to: w[1], piece: index }));
        }
        gaps.reverse();
        gaps
    }

    /// The largest half-width proved at `u`, at most `whole`; `None` if even the narrowest stretch can't be.
    fn try_at(&mut self, u: f64, whole: f64, piece: usize) -> Option<f64> {
        self.out.tally.postures += 1;
        let piece = self.segment.law.pieces()[piece];
        let instant = self.follower.at(u)?;
        let [_, rate, accel] = piece.at(piece.time_of(u));
        let pace = Pace { piece, u, rate_squared: rate * rate, accel };
        let reading = self.meter.read(&instant, rate.max(0.0), accel);
        let mut flagged = false;
        self.needs.retain(|&slot| {
            let channel = self.meter.channel(slot);
            let clear = channel.asked_in(&reading, reading[slot]) <= channel.flagged_above();
            flagged |= !clear;
            clear
        });
        if self.raise(&reading) || flagged {
            self.out.witnesses.push((u, piece.start + piece.time_of(u)));
        }
        if self.segment.follows_path() { self.try_path(&instant, whole, pace) } else { self.try_joint(&instant, whole, pace) }
    }

    /// Where bounds are to come near to what was seen, an instant that asks more than was seen counts as seen; whether it did.
    fn raise(&mut self, reading: &Reading) -> bool {
        let Some(within) = self.effort.within else { return false };
        let mut raised = false;
        for &slot in &self.needs {
            let channel = self.meter.channel(slot);
            let nearer = (channel.asked_in(reading, reading[slot]) + within).min(channel.flagged_above());
            if nearer > self.allowed[slot] {
                self.allowed[slot] = nearer;
                raised = true;
            }
        }
        raised
    }

    fn view<'b>(&'b self, at: &'b Instant, viewer: usize) -> View<'b> {
        let reference = match (self.wrist, self.arm.task().is_whole() && self.arm.len() >= 6) {
            (Some(wrist), _) => Reference::InLastLink(wrist.centre),
            (None, true) => Reference::NearLastAxes,
            (None, false) => Reference::Tcp,
        };
        View::of(self.arm.chain(), at, &self.segment.carried, self.segment.push, self.gravity, reference, viewer)
    }

    fn try_joint(&mut self, at: &Instant, whole: f64, pace: Pace) -> Option<f64> {
        let mut slope: Row = [0.0; MAX_JOINTS];
        let mut bend: Row = [0.0; MAX_JOINTS];
        let mut third: Row = [0.0; MAX_JOINTS];
        slope[..at.slope.len()].copy_from_slice(&at.slope);
        bend[..at.bend.len()].copy_from_slice(&at.bend);
        if let Path::JointBlend(blend) = &self.segment.path {
            third[..at.bend.len()].copy_from_slice(&blend.third());
        }
        let mut half = whole;
        let view = self.view(at, self.arm.len() / LOOKS_ON);
        let mut trials = 0;
        let found = loop {
            trials += 1;
            let reach = half + SEAM;
            let bend_spread = third.map(|third| reach * third.abs());
            let slope_spread: Row = std::array::from_fn(|j| reach * (bend[j].abs() + 0.5 * bend_spread[j]));
            let motion = view.motion(&slope, &slope_spread, reach, 1e-15);
            let even = Even {
                view: &view,
                motion: &motion,
                slope: &slope,
                slope_spread: &slope_spread,
                bend: &bend,
                bend_spread: &bend_spread,
                half: reach,
            };
            let asked = on_joint_move(self.arm, self.meter, &self.needs, &even, pace);
            match self.narrower(&asked, trials) {
                None => break Some((half, asked)),
                Some(share) => half *= share,
            }
            if half < NARROWEST.min(whole) || trials > 3 * self.effort.trials {
                break None;
            }
        };
        self.out.tally.trials += trials;
        let (half, asked) = found?;
        self.keep(&asked);
        Some(half)
    }

    pub(super) fn middle<'b>(&'b self, at: &'b Instant) -> Option<Middle<'b>> {
        let target = self.segment.path.target(at.u)?;
        let viewer = if self.arm.task().is_whole() { self.arm.len().saturating_sub(3) } else { 0 };
        Middle::of(self.arm, self.view(at, viewer), at, target, &self.follower.null_rows(at.u))
    }

    fn try_path(&mut self, at: &Instant, whole: f64, pace: Pace) -> Option<f64> {
        let middle = self.middle(at)?;
        let whole = whole.min(self.effort.widest);
        let mut half = whole.min(self.hint * 1.6).min(0.6 * middle.hope());
        let mut trials = 0;
        let (mut best, mut failed_at) = (None, f64::INFINITY);
        while trials < 3 * self.effort.trials && half >= NARROWEST.min(whole) {
            trials += 1;
            let Some(leaf) = middle.prove(half + SEAM) else {
                failed_at = half;
                half = if best.is_some() { break } else { half * 0.6 };
                continue;
            };
            let asked = on_path(self.meter, &self.needs, &middle, &leaf, pace);
            if let Some(share) = self.narrower(&asked, trials) {
                failed_at = half;
                if best.is_some() {
                    break;
                }
                half *= share;
                continue;
            }
            best = Some((leaf, asked));
            let wider = (half * 1.5).min(whole);
            if half >= whole || wider >= failed_at || trials + 2 > self.effort.trials {
                break;
            }
            half = wider;
        }
        let kept = best.map(|(leaf, asked)| (leaf.half - SEAM, asked, Joined::of(&middle, &leaf), middle.spans(&leaf)));
        self.out.tally.trials += trials;
        let (half, asked, joined, spans) = kept?;
        self.widen_spans(&spans);
        self.hint = half;
        self.joined.push(joined);
        self.keep(&asked);
        Some(half)
    }

    /// By which share a stretch should be narrowed if some needed channel is not clear over it.
    fn narrower(&self, asked: &Asked, trials: usize) -> Option<f64> {
        let worst = self
            .needs
            .iter()
            .map(|&slot| {
                let bound = self.allowed[slot];
                if asked[slot] <= bound { 0.0 } else { asked[slot] - bound }
            })
            .fold(0.0f64, |most, excess| if excess <= most { most } else { excess });
        if worst == 0.0 {
            return None;
        }
        Some(if worst > 0.3 || trials > 3 { 0.45 } else { 0.65 })
    }

    fn keep(&mut self, asked: &Asked) {
        for &slot in &self.needs {
            self.most[slot] = self.most[slot].max(asked[slot]);
        }
    }
}

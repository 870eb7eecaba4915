use crate::motion::Instant;

use super::border::{Enclosure, Joined, meet_at};
use super::cover::Run;
use super::leaf::Middle;

/// How often a leaf may be put between two others to join them.
const MOST_BETWEEN: usize = 3;

impl Run<'_> {
    /// Whether all leaves belong to one branch, which holds the segment's first and last posture.
    pub(super) fn is_one_branch(&mut self) -> bool {
        let mut joined = std::mem::take(&mut self.joined);
        joined.sort_by(|a, b| a.middle.total_cmp(&b.middle));
        let (Some(first), Some(last)) = (joined.first(), joined.last()) else { return false };
        let nodes = &self.segment.track.nodes;
        let end = Enclosure::point(&nodes.last().expect("followed").q);
        if !self.holds(first, first.middle - first.half, &Enclosure::point(&self.segment.start))
            || !self.holds(last, last.middle + last.half, &end)
        {
            return false;
        }
        joined.windows(2).all(|pair| {
            let [left, right] = pair else { return false };
            let border = left.middle + left.half;
            match nodes.iter().find(|node| self.arm.is_redundant() && (node.u - border).abs() < 1e-9) {
                // Another definition of the motion begins here; both hold at the node itself.
                Some(node) => {
                    let point = Enclosure::point(&node.q);
                    self.holds(left, border, &point) && self.holds(right, border, &point)
                }
                None => self.join(left, right, border, MOST_BETWEEN),
            }
        })
    }

    /// Whether a leaf's path goes through a known posture at fraction `u`.
    fn holds(&mut self, leaf: &Joined, u: f64, posture: &Enclosure) -> bool {
        let there = leaf.enclosure(u);
        if leaf.meets(&there, posture) {
            return true;
        }
        let Some(instant) = self.look_at_border(u) else { return false };
        let Some(middle) = self.middle(&instant) else { return false };
        if meet_at(&middle, &there, posture) {
            return true;
        }
        let Some((between, trials)) = self.between(&middle, leaf.half) else { return false };
        self.out.tally.trials += trials;
        let inwards = if u < leaf.middle { between.half } else { -between.half };
        between.meets(&between.enclosure(u), posture) && self.join(&between, leaf, u + inwards, MOST_BETWEEN)
    }

    /// Whether two leaves that share the fraction `u` are of one branch. Where both are too wide there to tell, a leaf is proved
    /// around `u` and joined to each of them nearer to its middle, where they are narrower.
    fn join(&mut self, left: &Joined, right: &Joined, u: f64, more: usize) -> bool {
        let (one, other) = (left.enclosure(u), right.enclosure(u));
        if left.meets(&one, &other) || right.meets(&one, &other) {
            return true;
        }
        let Some(instant) = self.look_at_border(u) else { return false };
        let Some(middle) = self.middle(&instant) else { return false };
        if meet_at(&middle, &one, &other) {
            return true;
        }
        if more == 0 {
            return false;
        }
        let Some((between, trials)) = self.between(&middle, left.half.min(right.half)) else { return false };
        self.out.tally.trials += trials;
        let towards_left = if left.middle < right.middle { -between.half } else { between.half };
        self.join(left, &between, u + towards_left, more - 1) && self.join(&between, right, u - towards_left, more - 1)
    }

    fn look_at_border(&mut self, u: f64) -> Option<Instant> {
        self.out.tally.postures += 1;
        self.follower.at(u)
    }

    /// A leaf around the middle, narrower than `half`, and how many trials it took.
    fn between(&self, middle: &Middle, half: f64) -> Option<(Joined, usize)> {
        (1..=self.effort.trials).find_map(|trial| {
            let leaf = middle.prove(half * 0.6f64.powi(trial as i32))?;
            Some((Joined::of(middle, &leaf), trial))
        })
    }
}

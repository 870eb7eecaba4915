use crate::arm::{Arm, Joints, MAX_JOINTS};
use crate::geometry::Pose;
use crate::kinematics::{Jacobian, Lu, Posture, null_rows, smallest_singular_value, stacked};

use super::{Follower, Instant, Path};

/// A node is one place of a line or arc whose joint values are known; between nodes Newton finds them.
#[derive(Debug, Clone, PartialEq)]
pub struct Node {
    /// Fraction of the path.
    pub u: f64,
    /// Joint values.
    pub q: Joints,
    /// Their first derivative by u.
    pub slope: Joints,
    /// Their second derivative by u.
    pub bend: Joints,
    /// For a redundant arm the rows that make its motion definite in the cell from this node to the next.
    null: Vec<[f64; MAX_JOINTS]>,
    /// Sign of the determinant of the stacked Jacobian with those rows.
    sense: f64,
}

impl Node {
    pub(super) fn null_rows(&self) -> &[[f64; MAX_JOINTS]] {
        &self.null
    }

    pub(super) fn sense(&self) -> f64 {
        self.sense
    }
}

/// A track is the joint path along a line or arc, as far as it could be followed. Empty for a joint move.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Track {
    /// Nodes in order of u.
    pub nodes: Vec<Node>,
    /// Where it was lost, if it was.
    pub lost: Option<Lost>,
}

/// Where and why a path could not be followed further.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Lost {
    /// Fraction of the path up to which it was followed.
    pub u: f64,
    /// Joint values there.
    pub q: Joints,
    /// Smallest singular value there.
    pub sigma: f64,
}

/// First step along a path, as a fraction of it.
const FIRST_STEP: f64 = 1.0 / 8.0;
/// The longest step.
const LONGEST: f64 = 1.0 / 4.0;
/// The shortest step: a thousandth of a millimetre on a path of ten metres.
const SHORTEST: f64 = 1e-7;
/// A predicted posture may be off by this much, rad or m, so that Newton stays on its branch.
const MISS: f64 = 0.03;
/// ... and by this share of the step made, so that a branch that turns sharply is taken in small steps.
const MISS_SHARE: f64 = 0.2;
/// The determinant keeps its sign along a branch. Where it changes between nodes the track either has jumped to the branch beyond a
/// singular posture that the path only comes near to, or passes straight through one, as an arm does that moves in one plane. A step of
/// the joints below this, rad or m, is too short to have jumped anything that matters.
pub(super) const CROSSING: f64 = 1e-3;
/// Cells of a redundant arm are at least this fine, since the path depends on them: a 32nd of it.
const REDUNDANT_CELL: f64 = 1.0 / 32.0;
/// Nodes of one track, at most.
const MOST_NODES: usize = 4000;

impl Track {
    /// Follows a line or arc from joint values `start`, which must stand at its beginning.
    pub fn along(arm: &Arm, path: &Path, tcp: &Pose, start: &Joints) -> Self {
        let mut track = Self::default();
        let Some(mut node) = first_node(arm, path, tcp, start) else {
            track.lost = Some(lost(arm, tcp, 0.0, start));
            return track;
        };
        let mut step = if arm.is_redundant() { REDUNDANT_CELL } else { FIRST_STEP };
        let longest = if arm.is_redundant() { REDUNDANT_CELL } else { LONGEST };
        while node.u < 1.0 && track.nodes.len() < MOST_NODES {
            let u = if node.u + step > 1.0 - SHORTEST { 1.0 } else { node.u + step };
            match next_node(arm, path, tcp, &node, u) {
                Some((next, miss)) => {
                    track.nodes.push(std::mem::replace(&mut node, next));
                    if miss < 0.25 {
                        step = (step * 2.0).min(longest);
                    }
                }
                None if step > SHORTEST => step *= 0.5,
                None => break,
            }
        }
        if node.u < 1.0 {
            track.lost = Some(lost(arm, tcp, node.u, &node.q));
        }
        track.nodes.push(node);
        track
    }
}

impl Track {
    /// The part of a track that was followed to its end, from fraction `from` to `to`, with its last node at `end`.
    pub(super) fn part(&self, [from, to]: [f64; 2], end: &Instant) -> Self {
        let span = to - from;
        // At a node itself the cell before it counts, as it does for the blend that ends there.
        let first = self.nodes.partition_point(|node| node.u < from).saturating_sub(1);
        let inner = self.nodes[first..].iter().take_while(|node| node.u < to);
        let mut nodes: Vec<Node> = inner
            .map(|node| Node {
                u: (node.u - from) / span,
                slope: Joints::from_fn(node.q.len(), |j| node.slope[j] * span),
                bend: Joints::from_fn(node.q.len(), |j| node.bend[j] * span * span),
                ..node.clone()
            })
            .collect();
        let (null, sense) = nodes.last().map_or((Vec::new(), 1.0), |node| (node.null.clone(), node.sense));
        nodes.push(Node {
            u: 1.0,
            q: end.q,
            slope: Joints::from_fn(end.q.len(), |j| end.slope[j] * span),
            bend: Joints::from_fn(end.q.len(), |j| end.bend[j] * span * span),
            null,
            sense,
        });
        Self { nodes, lost: None }
    }
}

fn lost(arm: &Arm, tcp: &Pose, u: f64, q: &Joints) -> Lost {
    let posture = Posture::at(arm.chain(), q);
    let jacobian = Jacobian::at(arm.chain(), &posture, &posture.tcp(tcp).at);
    Lost { u, q: *q, sigma: smallest_singular_value(&jacobian.scaled_rows(arm.task(), arm.characteristic_length().m)) }
}

fn first_node(arm: &Arm, path: &Path, tcp: &Pose, start: &Joints) -> Option<Node> {
    let zeros = Joints::zeros(start.len());
    let (null, sense) = rows(arm, tcp, start);
    let bare = Node { u: 0.0, q: *start, slope: zeros, bend: zeros, null, sense };
    node_at(arm, path, tcp, &bare, 0.0, *start).map(|(node, ..)| node)
}

/// The node at `u` and how much of the allowed miss the prediction used; `None` if the step was too bold.
fn next_node(arm: &Arm, path: &Path, tcp: &Pose, node: &Node, u: f64) -> Option<(Node, f64)> {
    let step = u - node.u;
    let guess = Joints::from_fn(node.q.len(), |j| node.q[j] + step * (node.slope[j] + 0.5 * step * node.bend[j]));
    let moved = guess.zip(&node.q, |a, b| a - b).largest();
    let allowed = MISS.min(MISS_SHARE * moved + 1e-6);
    let (next, miss, sense) = node_at(arm, path, tcp, node, u, guess)?;
    let kept = sense == node.sense || next.q.zip(&node.q, |a, b| a - b).largest() <= CROSSING;
    (kept && miss <= allowed).then_some((next, miss / allowed))
}

/// The node at `u`, how far the guess missed it, rad or m, and the determinant's sign there with the rows of `cell`.
fn node_at(arm: &Arm, path: &Path, tcp: &Pose, cell: &Node, u: f64, guess: Joints) -> Option<(Node, f64, f64)> {
    let target = path.target(u)?;
    let (instant, miss) = Follower::on(arm, path, tcp, &[]).settle(&target, u, cell, guess)?;
    let arrived = instant.lu?.determinant().signum();
    let (null, sense) = if arm.is_redundant() { rows(arm, tcp, &instant.q) } else { (Vec::new(), arrived) };
    Some((Node { u, q: instant.q, slope: instant.slope, bend: instant.bend, null, sense }, miss, arrived))
}

/// The null rows at `q`, none unless the arm is redundant, and the sign of the determinant of the Jacobian with them below.
fn rows(arm: &Arm, tcp: &Pose, q: &Joints) -> (Vec<[f64; MAX_JOINTS]>, f64) {
    let posture = Posture::at(arm.chain(), q);
    let jacobian = Jacobian::at(arm.chain(), &posture, &posture.tcp(tcp).at);
    let count = arm.len() - arm.task().rows().len();
    let null = if count == 0 { Vec::new() } else { null_rows(&jacobian, arm.task(), arm.joints())[..count].to_vec() };
    let sense = Lu::of(stacked(&jacobian, arm.task(), &null), arm.len()).determinant().signum();
    (null, sense)
}

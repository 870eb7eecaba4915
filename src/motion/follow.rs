use crate::arm::{Arm, Joints, MAX_JOINTS};
use crate::geometry::Pose;
use crate::kinematics::{Jacobian, Lu, Posture, drift, small_error, stacked};

use super::track::CROSSING;
use super::{Instant, Node, Path, Segment, Target};

/// A follower walks a segment's path and says what the joints do at any fraction of it.
#[derive(Debug, Clone)]
pub struct Follower<'a> {
    arm: &'a Arm,
    path: &'a Path,
    tcp: &'a Pose,
    nodes: &'a [Node],
}

/// Newton steps allowed from the nearest node.
const STEPS: usize = 12;
/// After a Newton step below this (rad or m) nothing is left to gain.
const LAST_STEP: f64 = 1e-11;
/// Near a singular posture steps stop shrinking before that; after `PATIENCE` of them this is as good as it gets.
const LAST_STEP_THERE: f64 = 1e-8;
const PATIENCE: usize = 6;
/// Newton must not leave its start by more than this, rad or m, or it may have changed branches.
const FARTHEST: f64 = 0.5;

impl<'a> Follower<'a> {
    /// Follows a planned segment.
    pub fn of(arm: &'a Arm, segment: &'a Segment) -> Self {
        Self { arm, path: &segment.path, tcp: &segment.carried.tcp, nodes: &segment.track.nodes }
    }

    pub(super) fn on(arm: &'a Arm, path: &'a Path, tcp: &'a Pose, nodes: &'a [Node]) -> Self {
        Self { arm, path, tcp, nodes }
    }

    /// The instant at fraction `u`; `None` beyond the place where the path was lost.
    pub fn at(&self, u: f64) -> Option<Instant> {
        let Some(target) = self.path.target(u) else { return Some(self.joint_instant(u)) };
        let node = self.nearest(u)?;
        let step = u - node.u;
        let guess = Joints::from_fn(node.q.len(), |j| node.q[j] + step * (node.slope[j] + 0.5 * step * node.bend[j]));
        let narrow = self.cell_is_narrow(u);
        [guess, node.q]
            .into_iter()
            .filter_map(|guess| self.settle(&target, u, node, guess))
            .map(|(instant, _)| instant)
            .find(|instant| narrow || instant.lu.is_some_and(|lu| lu.determinant().signum() == node.sense()))
    }

    /// Whether the joints move so little in the cell of `u` that the determinant may change its sign there.
    fn cell_is_narrow(&self, u: f64) -> bool {
        let next = self.nodes.partition_point(|node| node.u < u).clamp(1, self.nodes.len().max(2) - 1);
        match (self.nodes.get(next - 1), self.nodes.get(next)) {
            (Some(a), Some(b)) => a.q.zip(&b.q, |a, b| a - b).largest() <= CROSSING,
            _ => true,
        }
    }

    /// The rows that, besides the task's, make the motion definite at `u`: none unless the arm is redundant.
    pub fn null_rows(&self, u: f64) -> Vec<[f64; MAX_JOINTS]> {
        self.nearest(u).map_or_else(Vec::new, |node| node.null_rows().to_vec())
    }

    fn nearest(&self, u: f64) -> Option<&'a Node> {
        let last = self.nodes.last()?;
        if u > last.u + 1e-12 {
            return None;
        }
        let next = self.nodes.partition_point(|node| node.u < u);
        // For a redundant arm a node's null rows rule the cell behind it, so the node before is the one that counts.
        if next == 0 || (!self.arm.is_redundant() && next < self.nodes.len() && self.nodes[next].u - u < u - self.nodes[next - 1].u)
        {
            return self.nodes.get(next);
        }
        Some(&self.nodes[next - 1])
    }

    fn joint_instant(&self, u: f64) -> Instant {
        let [q, slope, bend] = match self.path {
            Path::Joint { from, to } => {
                let slope = from.zip(to, |a, b| b - a);
                [Joints::from_fn(from.len(), |j| from[j] + u * slope[j]), slope, Joints::zeros(from.len())]
            }
            Path::JointBlend(blend) => blend.at(u),
            _ => unreachable!("only joint moves have no target"),
        };
        let posture = Posture::at(self.arm.chain(), &q);
        let tcp = posture.tcp(self.tcp);
        let jacobian = Jacobian::at(self.arm.chain(), &posture, &tcp.at);
        Instant { u, q, slope, bend, posture, tcp, jacobian, lu: None }
    }

    /// Newton from `guess` to the target of fraction `u`, in the cell of `node`. Also tells how far the first step went, rad or m.
    pub(super) fn settle(&self, target: &Target, u: f64, node: &Node, guess: Joints) -> Option<(Instant, f64)> {
        let (chain, task, n) = (self.arm.chain(), self.arm.task(), self.arm.len());
        let m = task.rows().len();
        let mut q = guess;
        let mut first = 0.0;
        for count in 0..STEPS {
            let posture = Posture::at(chain, &q);
            let tcp = posture.tcp(self.tcp);
            let jacobian = Jacobian::at(chain, &posture, &tcp.at);
            let lu = Lu::of(stacked(&jacobian, task, node.null_rows()), n);
            let gap = small_error(&tcp, &target.pose);
            let mut wanted = [0.0; MAX_JOINTS];
            for (slot, &row) in task.rows().iter().enumerate() {
                wanted[slot] = gap[row];
            }
            for (row, slot) in node.null_rows().iter().zip(&mut wanted[m..n]) {
                *slot = -(0..n).map(|j| row[j] * (q[j] - node.q[j])).sum::<f64>();
            }
            let step = lu.solve(&wanted);
            let size = step[..n].iter().fold(0.0f64, |most, s| if s.abs() <= most { most } else { s.abs() });
            if count == 0 {
                first = size;
            }
            if !size.is_finite() || size > FARTHEST {
                return None;
            }
            if size < LAST_STEP || (count >= PATIENCE && size < LAST_STEP_THERE) {
                // The joint values take the step; the posture is not worth computing again for so little.
                q.iter_mut().zip(&step).for_each(|(v, s)| *v += s);
                return self.finish(target, u, q, posture, tcp, jacobian, lu).map(|instant| (instant, first));
            }
            q.iter_mut().zip(&step).for_each(|(v, s)| *v += s);
        }
        None
    }

    /// Slopes and bends at the joint values that were found.
    #[expect(clippy::too_many_arguments, reason = "one evaluation's parts, handed over without copying them into a struct first")]
    fn finish(
        &self,
        target: &Target,
        u: f64,
        q: Joints,
        posture: Posture,
        tcp: Pose,
        jacobian: Jacobian,
        lu: Lu,
    ) -> Option<Instant> {
        let (task, n) = (self.arm.task(), self.arm.len());
        let mut wanted = [0.0; MAX_JOINTS];
        let velocity = [target.velocity, target.turning];
        for (slot, &row) in task.rows().iter().enumerate() {
            wanted[slot] = velocity[row / 3][row % 3];
        }
        let slope = Joints::from_slice(&lu.solve(&wanted)[..n]);
        let drift = drift(self.arm.chain(), &posture, &tcp.at, &slope);
        for (slot, &row) in task.rows().iter().enumerate() {
            wanted[slot] = [target.bend, target.swing][row / 3][row % 3] - drift[row];
        }
        let bend = Joints::from_slice(&lu.solve(&wanted)[..n]);
        (slope.is_finite() && bend.is_finite()).then_some(Instant { u, q, slope, bend, posture, tcp, jacobian, lu: Some(lu) })
    }
}

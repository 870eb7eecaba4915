//! The least change of each kind that has a size, against a dense search of changes smaller by a twentieth, over drawn arms and
//! segments. The dense search makes its own edits and judges them through the public survey.

use std::sync::Arc;

use elbowroom::checks::{Check, Finding, Watch};
use elbowroom::geometry::{Rotation, V3, turn_about};
use elbowroom::kinematics::{Posture, Reached, reach};
use elbowroom::motion::Plan;
use elbowroom::program::{Arrive, Edit, Given, PathSpeed, Recipe, Taught, Waypoint};
use elbowroom::review::{Change, Ends, Judged, Remedy};
use elbowroom::units::{Acceleration, Share, Speed};

use crate::cases::remedies;
use crate::least::{directions, ends};
use crate::random::{self, Draw, Family};

/// How much smaller than the remedy a change of the dense search is: none may do.
const SMALLER: [f64; 3] = [0.95, 0.7, 0.4];
/// Sizes on a line that is searched in one dimension.
const LINE: usize = 40;
/// A joint that stands farther from where it stood than this, and than the tool was turned, stands in another posture, rad or m.
const JUMP: f64 = 0.8;

/// What a remedy left on the segment; a change of the dense search must leave no more.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Left {
    Nothing,
    /// Only what does not depend on speed.
    OfPosture,
    Something,
}

/// What a remedy did, for changes to be held against it.
struct Case<'a> {
    judged: &'a Judged,
    finding: &'a Finding,
    to: usize,
    /// What the remedy left on the segment.
    left: Left,
}

type Key = (usize, Check, Option<usize>);

impl Case<'_> {
    fn key(&self, plan: &Plan, finding: &Finding, inserted: Option<usize>) -> Key {
        let to = plan.segments[finding.segment].to;
        let to = if inserted.is_some_and(|index| to > index) { to - 1 } else { to };
        (if finding.check.is_of_cycle() { 0 } else { to }, finding.check, finding.joint)
    }

    /// Whether a changed recipe does as much as the remedy: what the finding is of is clear (and all else on the segment that the
    /// remedy left nothing of), nothing is new or worse, and no joint jumps where a posture is to be kept.
    fn does(&self, edit: &Edit, turned: Option<f64>) -> bool {
        let mut recipe: Recipe = (*self.judged.recipe).clone();
        edit.apply(&mut recipe).expect("it can be made");
        let inserted = if let Edit::Insert { index, .. } = edit { Some(*index) } else { None };
        let after = Judged::of(&self.judged.arm, &Arc::new(recipe), Some(self.judged), &Watch::default()).expect("nobody stops it");
        let before: Vec<(Key, &Finding)> =
            self.judged.survey.findings.iter().map(|f| (self.key(&self.judged.plan, f, None), f)).collect();
        let wanted = self.key(&self.judged.plan, self.finding, None);
        let spare = |finding: &Finding| match &finding.kind {
            elbowroom::checks::Kind::Excess(excess) => excess.room.as_fraction() - excess.reserve.as_fraction(),
            elbowroom::checks::Kind::NoPath(_) => f64::NEG_INFINITY,
            elbowroom::checks::Kind::Unproved(_) => 0.0,
        };
        let fine = after.survey.findings.iter().all(|new| {
            let key = self.key(&after.plan, new, inserted);
            let known = before
                .iter()
                .any(|(old_key, old)| *old_key == key && old.verdict >= new.verdict && spare(old) <= spare(new) + 0.005);
            let too_much = match self.left {
                Left::Nothing => true,
                Left::OfPosture => !new.check.is_of_posture_alone(),
                Left::Something => false,
            };
            known && key != wanted && !(too_much && key.0 == self.to)
        });
        let jump = |turned: f64| {
            let (Some(old), Some(new)) = (self.judged.plan.arriving(self.to), after.plan.arriving(self.to)) else { return false };
            let far = old.start.zip(&new.start, |a, b| a - b).largest().max(old.end.zip(&new.end, |a, b| a - b).largest());
            far > JUMP + turned.abs()
        };
        fine && !turned.is_some_and(jump)
    }

    fn changed(&self, index: usize, how: impl Fn(&mut Waypoint)) -> Edit {
        Edit::change(&self.judged.recipe, index, how)
    }

    /// An edit that moves waypoints, taught as poses or by joints, by `along` (m) and by the rotation `about`.
    fn moved(&self, which: Ends, along: V3, about: V3, own: f64) -> Option<Edit> {
        let edits: Option<Vec<Edit>> = ends(which, self.to)
            .into_iter()
            .map(|index| {
                let mut waypoint = self.judged.recipe.waypoints[index].clone();
                waypoint.shown = None;
                let turn = |axes: &elbowroom::geometry::M3| {
                    let turned = about.try_normalize(0.0).map_or(*axes, |axis| turn_about(&axis, about.norm()) * axes);
                    turned * turn_about(&V3::z(), own)
                };
                match &mut waypoint.taught {
                    Taught::Pose { pose, .. } => {
                        pose.at += along;
                        pose.rotation = pose.rotation.map(|rotation| Rotation::from_matrix(&turn(&rotation.matrix())));
                    }
                    Taught::Joints(q) => {
                        let arm = &self.judged.arm;
                        let tcp = self.judged.recipe.hanging_at(index).arriving().tcp;
                        let mut target = Posture::at(arm.chain(), q).tcp(&tcp);
                        target.at += along;
                        target.axes = turn(&target.axes);
                        let Reached::Yes { q: there, .. } = reach(arm, &tcp, &target, q) else { return None };
                        *q = there;
                    }
                }
                Some(Edit::Change { index, waypoint: Box::new(waypoint) })
            })
            .collect();
        Some(Edit::Together(edits?))
    }

    /// Whether a waypoint may be moved: nothing is taken there and the tool does not push.
    fn free(&self, which: Ends) -> bool {
        let waypoints = &self.judged.recipe.waypoints;
        let pushes = |index: usize| waypoints.get(index).is_some_and(|waypoint| waypoint.push.is_some());
        ends(which, self.to).into_iter().all(|index| waypoints[index].then.is_none() && !pushes(index) && !pushes(index + 1))
    }

    fn speed(&self, change: impl Fn(&mut PathSpeed)) -> Edit {
        self.changed(self.to, |waypoint| {
            if let Some(Arrive::Line(speed)) = &mut waypoint.arrive {
                change(speed);
            }
        })
    }

    /// A smaller change than the remedy's that does as much, in words.
    fn smaller(&self, remedy: &Remedy) -> Option<String> {
        let all = [Ends::Both, Ends::Start, Ends::End];
        let between = |k: usize, from: f64, to: f64| from + (to - from) * k as f64 / LINE as f64;
        match remedy.change {
            Change::Shift { by, .. } => all.into_iter().filter(|ends| self.free(*ends)).find_map(|ends| {
                let mut tried = directions().flat_map(|direction| SMALLER.map(|share| direction * (share * by.norm())));
                let found =
                    tried.find(|along| self.moved(ends, *along, V3::zeros(), 0.0).is_some_and(|edit| self.does(&edit, Some(0.0))));
                found.map(|along| format!("{ends:?} shifted by {along:?}, {} of {by:?}", along.norm() / by.norm()))
            }),
            Change::Tilt { angle, .. } => all.into_iter().filter(|ends| self.free(*ends)).find_map(|ends| {
                let angle = angle.as_rad();
                let mut tried = directions().flat_map(|direction| SMALLER.map(|share| direction * (share * angle)));
                let found = tried.find(|about| {
                    self.moved(ends, V3::zeros(), *about, 0.0).is_some_and(|edit| self.does(&edit, Some(about.norm())))
                });
                found.map(|about| format!("{ends:?} tilted by {about:?}, {} of {angle} rad", about.norm() / angle))
            }),
            Change::Turn { angle, .. } => all.into_iter().find_map(|ends| {
                let most = 0.95 * angle.as_rad().abs();
                let mut tried = (1..=LINE).flat_map(|k| [between(k, 0.0, most), -between(k, 0.0, most)]);
                let found = tried
                    .find(|own| self.moved(ends, V3::zeros(), V3::zeros(), *own).is_some_and(|edit| self.does(&edit, Some(*own))));
                found.map(|own| format!("{ends:?} turned by {own} rad of {angle}"))
            }),
            Change::Via { by, u } => {
                let there = self.judged.plan.arriving(self.to)?.path.target(u)?;
                let old = self.judged.recipe.waypoints[self.to].clone();
                let mut tried = directions().flat_map(|direction| SMALLER.map(|share| direction * (share * by.norm())));
                let found = tried.find(|along| {
                    let turns = self.judged.arm.task().turns();
                    let pose = Given { at: there.pose.at + along, rotation: turns.then(|| there.pose.rotation()), frame: None };
                    let way = random::waypoint("way", Taught::Pose { pose, near: None }, old.arrive.clone());
                    let waypoint = Box::new(Waypoint { tool: old.tool.clone(), ..way });
                    by.norm() > 0.0 && self.does(&Edit::Insert { index: self.to, waypoint }, None)
                });
                found.map(|along| format!("a point {along:?} beside, of {by:?}"))
            }
            Change::Speed { from, to } => {
                let (from, to) = (from.as_m_per_s(), to.as_m_per_s());
                let found = (0..LINE)
                    .map(|k| between(k, from, 1.05 * to))
                    .filter(|v| *v > 1.05 * to)
                    .find(|v| self.does(&self.speed(|speed| speed.speed = Some(Speed::m_per_s(*v))), None));
                found.map(|v| format!("at {v} m/s instead of {to}"))
            }
            Change::Accel { from, to } => {
                let (from, to) = (from.as_m_per_s2(), to.as_m_per_s2());
                let found = (0..LINE)
                    .map(|k| between(k, from, 1.05 * to))
                    .filter(|a| *a > 1.05 * to)
                    .find(|a| self.does(&self.speed(|speed| speed.accel = Some(Acceleration::m_per_s2(*a))), None));
                found.map(|a| format!("with {a} m/s² instead of {to}"))
            }
            Change::Share { from, to } => {
                let (from, to) = (from.as_fraction(), to.as_fraction());
                let found = (0..LINE).map(|k| between(k, from, 1.05 * to)).filter(|v| *v > 1.05 * to).find(|v| {
                    let edit = self.changed(self.to, |waypoint| {
                        if let Some(Arrive::Joint { share, .. }) = &mut waypoint.arrive {
                            *share = Some(Share::fraction(*v));
                        }
                    });
                    self.does(&edit, None)
                });
                found.map(|v| format!("at a share of {v} instead of {to}"))
            }
            _ => None,
        }
    }
}

/// Lines and joint moves of drawn arms, faster than they should be and with less reserve.
fn drawn(family: Family, draw: &mut Draw, line: bool) -> Judged {
    let arm = random::arm(family, draw);
    let mut recipe = random::segment(&arm, line, draw);
    recipe.tools[0].turns_freely = true;
    if let Some(Arrive::Line(speed)) = &mut recipe.waypoints[1].arrive {
        speed.speed = speed.speed.map(|v| Speed::m_per_s(1.6 * v.as_m_per_s()));
    }
    recipe.acceptance.tcp_speed = Some(Speed::m_per_s(2.0));
    random::judged(arm, recipe)
}

/// Holds every remedy with a size of the worst finding of a drawn recipe against the dense search; yields how many of each kind.
fn search(judged: &Judged, seen: &mut std::collections::BTreeMap<String, usize>) -> Vec<String> {
    let certain = |finding: &&Finding| matches!(finding.kind, elbowroom::checks::Kind::Excess(_)) && !finding.check.is_of_cycle();
    let Some(finding) = judged.survey.findings.iter().find(certain) else { return Vec::new() };
    if judged.plan.segments[finding.segment].trouble.is_some() {
        return Vec::new();
    }
    let to = judged.plan.segments[finding.segment].to;
    let mut wrong = Vec::new();
    for remedy in remedies(judged, finding).0 {
        let left = |found: &&Finding| remedy.after.plan.segments[found.segment].to == to && !found.check.is_of_cycle();
        let left: Vec<&Finding> = remedy.effect.remains.iter().filter(left).collect();
        let left = match left.as_slice() {
            [] => Left::Nothing,
            some if some.iter().all(|finding| finding.check.is_of_posture_alone()) => Left::OfPosture,
            _ => Left::Something,
        };
        let case = Case { judged, finding, to, left };
        // What leaves something over that depends on speed is told as such, and is no measure of a least change.
        if remedy.edit.is_none() || left == Left::Something {
            continue;
        }
        *seen.entry(format!("{:?}", remedy.kind())).or_default() += 1;
        if let Some(told) = case.smaller(&remedy) {
            wrong.push(format!("{} for {:?} {:?}: {told}", judged.arm.name(), finding.check, finding.joint));
        }
    }
    wrong
}

#[test]
fn no_change_of_a_dense_search_is_smaller_by_a_twentieth() {
    let count: usize = std::env::var("DENSE").ok().and_then(|n| n.parse().ok()).unwrap_or(3);
    let seed: u64 = std::env::var("DENSE_SEED").ok().and_then(|n| n.parse().ok()).unwrap_or(406);
    let mut draw = Draw(seed);
    let mut seen = std::collections::BTreeMap::new();
    let mut wrong = Vec::new();
    for _ in 0..count {
        for family in [Family::SphericalWrist, Family::OffsetWrist, Family::FourSlide, Family::ThreeSlide] {
            for line in [true, true, false] {
                wrong.extend(search(&drawn(family, &mut draw, line), &mut seen));
            }
        }
    }
    println!("{seen:?}");
    assert!(wrong.is_empty(), "{} wrong of {seen:?}:\n{}", wrong.len(), wrong.join("\n"));
}

use std::sync::Arc;

use crate::checks::{Check, Doubt, Finding, Kind, SegmentSurvey, Watch, judge_at};
use crate::motion::{Plan, Segment};
use crate::program::{Edit, Recipe};
use crate::units::{Room, Seconds, Share};

use super::glance::still_flagged;
use super::{Change, Effect, Judged, Remedy, Short};

/// Two rooms that differ by less are told as the same.
const SAME_ROOM: f64 = 0.005;

/// A joint that stands farther from where it stood than this, and than the tool was turned, stands in another posture, rad or m.
const JUMP: f64 = 0.8;

/// What a change must bring about on the segment concerned.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Aim {
    /// Everything that depends on how fast it runs is clear; what doesn't is no worse than it was.
    Speeds,
    /// Everything is clear.
    All,
    /// The check of the finding is clear; others are no worse than they were.
    Check,
}

/// What was seen of the finding with a change.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Seen {
    /// Whether the aim is met and nothing else is worse than before.
    pub clear: bool,
    /// The room of the finding's check and joint, if there is one to tell.
    pub room: Option<Room>,
    /// Where that is as it should be: what else is not.
    pub spoilt: Option<Finding>,
    /// How far a joint stands at an end of the segment from where it stood, at most, rad or m.
    pub jump: f64,
}

impl Seen {
    const NOTHING: Self = Self { clear: false, room: None, spoilt: None, jump: 0.0 };

    /// The same where a posture must be kept: not clear if a joint jumps farther than a displacement that turns the tool by `turn`
    /// (rad) takes it. To take another posture is another remedy.
    pub fn in_posture(self, turn: f64) -> Self {
        Self { clear: self.clear && self.jump <= JUMP + turn.abs(), ..self }
    }
}

/// What came nearest of all that was tried of one kind.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Nearest {
    room: Option<Room>,
    spoilt: Option<Short>,
}

impl Nearest {
    /// Takes note of what was seen, and yields whether it is clear.
    pub fn note(&mut self, seen: Seen) -> bool {
        let nearer = |room: Room| self.room.is_none_or(|known| room.as_fraction() > known.as_fraction());
        if let Some(room) = seen.room.filter(|room| nearer(*room)) {
            self.room = Some(room);
        }
        self.spoilt = self.spoilt.or(seen.spoilt.as_ref().map(Short::spoils));
        seen.clear
    }

    /// Takes note of what became of an offer and keeps the remedy; whether it is one.
    pub fn take(&mut self, offer: Result<Remedy, Short>, kept: &mut Option<Remedy>) -> bool {
        match offer {
            Ok(remedy) => *kept = Some(remedy),
            Err(short @ Short::Spoils { .. }) => {
                self.spoilt = self.spoilt.or(Some(short));
                return false;
            }
            Err(_) => return false,
        }
        true
    }

    /// Why nothing came of it.
    pub fn short(&self) -> Short {
        self.spoilt.unwrap_or(Short::Nearest(self.room))
    }
}

/// A trial of changes against one finding.
#[derive(Debug, Clone, Copy)]
pub(super) struct Trial<'a> {
    pub judged: &'a Judged,
    pub finding: &'a Finding,
    pub watch: &'a Watch,
}

impl<'a> Trial<'a> {
    /// The segment that the finding is of, in the version that it is of.
    pub fn segment(&self) -> &'a Segment {
        self.judged.plan.version(self.finding.segment, self.finding.stop)
    }

    /// The waypoint that the segment arrives at, counted from 0.
    pub fn to(&self) -> usize {
        self.segment().to
    }

    pub fn recipe(&self) -> &'a Recipe {
        &self.judged.recipe
    }

    /// The edit of the waypoint that the segment arrives at.
    pub fn change(&self, how: impl FnOnce(&mut crate::program::Waypoint)) -> Edit {
        Edit::change(self.recipe(), self.to(), how)
    }

    /// What a change does to the segment concerned and, if that is as it should be, to all others that it touches. Each is judged
    /// and proved by itself.
    pub fn look(&self, edit: &Edit, aim: Aim) -> Seen {
        let mut recipe = self.recipe().clone();
        if edit.apply(&mut recipe).is_err() {
            return Seen::NOTHING;
        }
        self.look_at(&recipe, inserted(edit), aim)
    }

    /// The same of a changed recipe, in which a waypoint may have been inserted.
    pub fn look_at(&self, recipe: &Recipe, inserted: Option<usize>, aim: Aim) -> Seen {
        let judged = self.judged;
        if self.finding.check.is_of_cycle() {
            return self.look_at_cycle(recipe, inserted);
        }
        let before = Some((judged.recipe.as_ref(), judged.plan.as_ref()));
        let Some(replanned) = Plan::again(&judged.arm, recipe, before, &|| !self.watch.is_stopped()) else { return Seen::NOTHING };
        let plan = &replanned.plan;
        let to = self.to();
        let same_rules = recipe.acceptance == judged.recipe.acceptance && plan.gravity == judged.plan.gravity;
        let changed: Vec<usize> = (0..plan.segments.len()).filter(|&i| !same_rules || replanned.same[i].is_none()).collect();
        let is_meant = |i: &usize| origin(plan.segments[*i].to, inserted) == to;
        let (meant, others): (Vec<usize>, Vec<usize>) = changed.into_iter().partition(is_meant);
        let mut seen = Seen { clear: !meant.is_empty(), ..Seen::NOTHING };
        for (own, index) in meant.into_iter().map(|i| (true, i)).chain(others.into_iter().map(|i| (false, i))) {
            if !own && !seen.clear || self.watch.is_stopped() {
                break;
            }
            for segment in [Some(&plan.segments[index]), plan.stops[index].as_ref()].into_iter().flatten() {
                if own && let Some(room) = still_flagged(judged, self.finding, segment, &recipe.acceptance, plan.gravity) {
                    return Seen { clear: false, room: Some(room), ..seen };
                }
                let survey = judge_at(&judged.arm, index, segment, &recipe.acceptance, plan.gravity, Share::WHOLE);
                let amiss = self.amiss(&survey, own.then_some(aim), origin(segment.to, inserted));
                seen.clear &= amiss.is_none();
                seen.spoilt = seen.spoilt.or(amiss.filter(|amiss| !(own && self.is_same(amiss))));
                if own {
                    seen.room = least(seen.room, self.room_in(&survey));
                    seen.jump = seen.jump.max(self.jump(segment));
                }
            }
        }
        Seen { clear: seen.clear && !self.watch.is_stopped(), ..seen }
    }

    /// How far the ends of a segment's version are from where they were.
    fn jump(&self, segment: &Segment) -> f64 {
        let Some(old) = self.judged.plan.arriving(self.to()).filter(|_| !segment.blend && self.finding.check != Check::Reach)
        else {
            return 0.0;
        };
        let far = |new: &crate::arm::Joints, old: &crate::arm::Joints| new.zip(old, |a, b| a - b).largest();
        let at_start = if segment.part[0] == 0.0 { far(&segment.start, &old.start) } else { 0.0 };
        at_start.max(if segment.part[1] == 1.0 { far(&segment.end, &old.end) } else { 0.0 })
    }

    /// The same of what is judged for the cycle as a whole.
    fn look_at_cycle(&self, recipe: &Recipe, inserted: Option<usize>) -> Seen {
        let recipe = Arc::new(recipe.clone());
        let Some(after) = Judged::of(&self.judged.arm, &recipe, Some(self.judged), self.watch) else { return Seen::NOTHING };
        let effect = self.effect(&after, inserted);
        let is_settled = !effect.remains.iter().any(|finding| self.is_same(finding));
        let spoilt = effect.worsens.first().copied();
        Seen {
            clear: is_settled && spoilt.is_none(),
            room: self.room_of(&after, inserted),
            spoilt: spoilt.filter(|_| is_settled),
            jump: 0.0,
        }
    }

    /// What an override does to the segment concerned.
    pub fn look_at_override(&self, share: Share) -> Seen {
        let (judged, index) = (self.judged, self.finding.segment);
        let survey = judge_at(&judged.arm, index, self.segment(), &judged.recipe.acceptance, judged.plan.gravity, share);
        let amiss = self.amiss(&survey, Some(Aim::Speeds), self.to());
        Seen { clear: amiss.is_none(), room: self.room_in(&survey), spoilt: amiss.filter(|amiss| !self.is_same(amiss)), jump: 0.0 }
    }

    /// A finding that stands against an aim on the segment that arrived at `to`; without an aim, one that is new or worse. The
    /// finding that is to be settled is told before others.
    fn amiss(&self, survey: &SegmentSurvey, aim: Option<Aim>, to: usize) -> Option<Finding> {
        let is_wanted = |finding: &Finding| match aim {
            Some(Aim::All) => true,
            Some(Aim::Speeds) => !finding.check.is_of_posture_alone() || finding.check == self.finding.check,
            Some(Aim::Check) => finding.check == self.finding.check,
            None => false,
        };
        let against = survey.findings.iter().filter(|finding| is_wanted(finding) || !self.was_as_bad(finding, to));
        let found = against.min_by_key(|finding| (aim.is_none() || !self.is_same(finding), finding.check != Check::Reach))?;
        // Told by the number that its segment has in the unchanged plan.
        let segment = self.judged.plan.index_arriving(to).unwrap_or(found.segment);
        Some(Finding { segment, ..*found })
    }

    /// Whether a finding of the segment concerned is of the check and joint that are to be settled.
    fn is_same(&self, finding: &Finding) -> bool {
        (finding.check, finding.joint) == (self.finding.check, self.finding.joint)
    }

    /// Whether a finding of the segment that arrived at `to` was there before, and was no better.
    fn was_as_bad(&self, finding: &Finding, to: usize) -> bool {
        let plan = &self.judged.plan;
        self.judged.survey.findings.iter().any(|known| {
            (known.check, known.joint) == (finding.check, finding.joint)
                && (finding.check.is_of_cycle() || plan.segments[known.segment].to == to)
                && known.verdict >= finding.verdict
                && spare(known) <= spare(finding) + SAME_ROOM
        })
    }

    /// The room of the finding's check and joint in a survey.
    pub fn room_in(&self, survey: &SegmentSurvey) -> Option<Room> {
        let result = survey.check(self.finding.check);
        let peaks = result.peaks.iter().filter(|peak| peak.joint == self.finding.joint);
        peaks.map(|peak| peak.room).reduce(Room::least)
    }

    /// The remedy that a change is: judged and proved with the whole recipe. An edit that is `only_told` is not offered to be
    /// applied.
    ///
    /// # Errors
    /// Why it is none.
    pub fn offer(&self, change: Change, edit: Edit, size: f64, only_told: bool) -> Result<Remedy, Short> {
        let before = self.judged;
        let mut recipe = self.recipe().clone();
        let nothing = Short::Nearest(None);
        edit.apply(&mut recipe).map_err(|_| nothing)?;
        if !recipe.faults(&before.arm).is_empty() {
            return Err(nothing);
        }
        let after = Judged::of(&before.arm, &Arc::new(recipe), Some(before), self.watch).ok_or(nothing)?;
        let inserted = inserted(&edit);
        let effect = self.effect(&after, inserted);
        let room = [self.room_of(before, None), self.room_of(&after, inserted)];
        let is_settled = !effect.remains.iter().any(|f| (f.check, f.joint) == (self.finding.check, self.finding.joint));
        if !is_settled {
            return Err(Short::Nearest(room[1]));
        }
        if let Some(spoilt) = effect.worsens.iter().find(|finding| finding.verdict >= self.finding.verdict) {
            let to = origin(after.plan.segments[spoilt.segment].to, inserted);
            let segment = before.plan.index_arriving(to).unwrap_or(spoilt.segment);
            return Err(Short::spoils(&Finding { segment, ..*spoilt }));
        }
        let costs = Seconds::s(after.plan.duration() - before.plan.duration());
        Ok(Remedy { change, edit: (!only_told).then_some(edit), after, effect, room, costs, size })
    }

    /// What an override of the whole program does to the segment, for information.
    pub fn told_of_override(&self, share: Share, size: f64) -> Remedy {
        let (judged, index) = (self.judged, self.finding.segment);
        let own = || judged.survey.findings.iter().filter(|finding| finding.segment == index && !finding.check.is_of_cycle());
        let effect = Effect {
            settles: own().filter(|finding| !finding.check.is_of_posture_alone()).copied().collect(),
            remains: own().filter(|finding| finding.check.is_of_posture_alone()).copied().collect(),
            ..Effect::default()
        };
        let moves: f64 = judged.plan.segments.iter().map(|segment| segment.duration()).sum();
        let costs = Seconds::s(moves * (1.0 / share.as_fraction() - 1.0));
        let room = [self.room_of(judged, None), self.look_at_override(share).room];
        Remedy { change: Change::Override { share }, edit: None, after: judged.clone(), effect, room, costs, size }
    }

    fn effect(&self, after: &Judged, inserted: Option<usize>) -> Effect {
        let to_of = |finding: &Finding| origin(after.plan.segments[finding.segment].to, inserted);
        let is_left = |old: &Finding| {
            let to = self.judged.plan.segments[old.segment].to;
            after
                .survey
                .findings
                .iter()
                .any(|new| (new.check, new.joint) == (old.check, old.joint) && (new.check.is_of_cycle() || to_of(new) == to))
        };
        let own = |new: &&Finding| to_of(new) == self.to() || (new.check.is_of_cycle() && new.check == self.finding.check);
        Effect {
            settles: self.judged.survey.findings.iter().filter(|old| !is_left(old)).copied().collect(),
            remains: after.survey.findings.iter().filter(own).copied().collect(),
            worsens: after.survey.findings.iter().filter(|new| !self.was_as_bad(new, to_of(new))).copied().collect(),
            doubts: after.survey.doubts.iter().filter(|new| !self.was_doubted(new, inserted)).cloned().collect(),
        }
    }

    /// Whether a doubt of the changed recipe was there before.
    fn was_doubted(&self, new: &Doubt, inserted: Option<usize>) -> bool {
        let waypoint = new.waypoint().map(|index| origin(index, inserted));
        let known = |old: &Doubt| old.is_alike(new) && (old.waypoint(), old.joint()) == (waypoint, new.joint());
        self.judged.survey.doubts.iter().any(known)
    }

    fn room_of(&self, judged: &Judged, inserted: Option<usize>) -> Option<Room> {
        if let Some(of_cycle) = judged.survey.cycle.check(self.finding.check) {
            let peaks = of_cycle.peaks.iter().filter(|peak| peak.joint == self.finding.joint);
            return peaks.map(|peak| peak.room).reduce(Room::least);
        }
        let own = judged.survey.segments.iter().filter(|s| origin(judged.plan.segments[s.segment].to, inserted) == self.to());
        own.filter_map(|survey| self.room_in(survey)).reduce(Room::least)
    }
}

/// What is left over the reserve.
fn spare(finding: &Finding) -> f64 {
    match &finding.kind {
        Kind::Excess(excess) => excess.room.as_fraction() - excess.reserve.as_fraction(),
        Kind::NoPath(_) => f64::NEG_INFINITY,
        Kind::Unproved(_) => 0.0,
    }
}

fn least(one: Option<Room>, other: Option<Room>) -> Option<Room> {
    match (one, other) {
        (Some(one), Some(other)) => Some(one.least(other)),
        (one, other) => one.or(other),
    }
}

/// The waypoint of the unchanged recipe whose segment the one that arrives at `to` is, or is a part of.
fn origin(to: usize, inserted: Option<usize>) -> usize {
    match inserted {
        Some(index) if to > index => to - 1,
        _ => to,
    }
}

/// Where an edit inserts a waypoint.
fn inserted(edit: &Edit) -> Option<usize> {
    match edit {
        Edit::Insert { index, .. } => Some(*index),
        Edit::Together(edits) => edits.iter().find_map(inserted),
        _ => None,
    }
}

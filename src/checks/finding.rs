use crate::motion::NoPath;
use crate::units::{Measure, Room};

use super::{Check, Peak, Place, Unproved, Verdict};

/// What a finding is about.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Kind {
    /// More is asked than the reserve or the limit allows.
    Excess(Excess),
    /// No motion exists, or none was found.
    NoPath(NoPath),
    /// Nothing bad was seen, but it is not known.
    Unproved(Unproved),
}

/// How much more is asked than allowed, and where it is worst.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Excess {
    /// The worst instant.
    pub worst: Place,
    /// The part of the stretch that is over the limit, from and to.
    pub over: Option<[Place; 2]>,
    /// What is asked at the worst instant, with its sign (for closeness: what is there).
    pub demand: Measure,
    /// The limit.
    pub limit: Measure,
    /// What is left at the worst instant.
    pub room: Room,
    /// What must be left.
    pub reserve: Room,
    /// Whether it is at the stop, with what was taken or released there.
    pub after_stop: bool,
}

impl Excess {
    /// What a peak of the whole cycle asks too much, which is over at no instant of its own.
    pub(super) fn over_the_cycle(peak: &Peak) -> Self {
        Self {
            worst: peak.at,
            over: None,
            demand: peak.demand,
            limit: peak.limit,
            room: peak.room,
            reserve: peak.reserve,
            after_stop: false,
        }
    }
}

/// A finding is one flagged stretch of one segment.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Finding {
    /// Which segment of the plan, counted from 0.
    pub segment: usize,
    /// Which check.
    pub check: Check,
    /// Which joint, for checks with a channel a joint.
    pub joint: Option<usize>,
    /// Whether it, with its places, is of the segment's version that stops at the fly-by points; otherwise of the cycle.
    pub stop: bool,
    /// How bad it is.
    pub verdict: Verdict,
    /// Where the stretch begins.
    pub from: Place,
    /// Where it ends.
    pub to: Place,
    /// What it is about.
    pub kind: Kind,
}

impl Finding {
    /// The instant to look at first.
    pub fn worst(&self) -> Place {
        match &self.kind {
            Kind::Excess(excess) => excess.worst,
            Kind::NoPath(_) | Kind::Unproved(_) => self.to,
        }
    }

    /// Order of findings: by verdict, then the arm's limits before the cell's criteria, then what is left over the reserve.
    pub fn order(&self, other: &Self) -> std::cmp::Ordering {
        let spare = |finding: &Self| match &finding.kind {
            Kind::Excess(excess) => excess.room.as_fraction() - excess.reserve.as_fraction(),
            Kind::NoPath(_) => f64::NEG_INFINITY,
            Kind::Unproved(_) => 0.0,
        };
        other
            .verdict
            .cmp(&self.verdict)
            .then(other.check.is_arm_limit().cmp(&self.check.is_arm_limit()))
            .then(spare(self).total_cmp(&spare(other)))
            .then(self.segment.cmp(&other.segment))
            .then(self.joint.cmp(&other.joint))
            .then(self.from.time.total_cmp(&other.from.time))
    }
}

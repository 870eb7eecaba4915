use crate::units::{Measure, Room};

use super::{Check, Finding, Tally, TorqueSum, Verdict};

/// A place is one instant of a segment.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Place {
    /// Time since the segment started, s.
    pub time: f64,
    /// Fraction of its path.
    pub u: f64,
}

/// A peak is the worst that one channel asks on a segment.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Peak {
    /// Which joint, for checks with a channel a joint.
    pub joint: Option<usize>,
    /// Where.
    pub at: Place,
    /// What is asked there, with its sign (for closeness: what is there).
    pub demand: Measure,
    /// What it is told against (for a range: the nearer end). Infinite where there is no limit.
    pub limit: Measure,
    /// What is left.
    pub room: Room,
    /// What must be left.
    pub reserve: Room,
    /// Whether it counts for the verdict, or is only shown.
    pub judged: bool,
}

/// Why a check that shows nothing bad is not called clear.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Unproved {
    /// Only samples were looked at; the proof was not tried.
    SamplesOnly,
    /// The proof's budget of postures ended before the whole segment was covered.
    BudgetSpent,
    /// There is an instant around which even the narrowest stretch could not be proved: too near to a limit, or to a singular posture.
    TooNarrow,
    /// Every stretch was proved, but not that the arm goes from one into the next in one posture.
    NotOneBranch,
    /// The path could not be followed to its end.
    NotFollowed,
    /// The arm file rates no holding torque.
    NoRating,
    /// The arm file gives no link masses.
    NoMasses,
    /// It rests on a guess.
    Guess,
}

impl Unproved {
    /// Whether only the proof between the samples is missing, and no data.
    pub fn is_of_proof_alone(self) -> bool {
        matches!(self, Self::SamplesOnly | Self::BudgetSpent | Self::TooNarrow | Self::NotOneBranch)
    }
}

/// How far a result is proved.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Proof {
    /// Proved for every instant: the room is nowhere less than this.
    Proved(Room),
    /// Summed up over the whole cycle, closer until the sum no longer changed; what it may still be off by is counted against it.
    Settled,
    /// A witness was found: an instant where it is not clear.
    Witness,
    /// Neither.
    Open(Unproved),
}

/// What one check found on one segment.
#[derive(Debug, Clone, PartialEq)]
pub struct CheckResult {
    /// Which check.
    pub check: Check,
    /// Whether it was judged here, or only shown.
    pub judged: bool,
    /// The verdict; clear where it was not judged.
    pub verdict: Verdict,
    /// How far that is proved.
    pub proof: Proof,
    /// The worst of every channel. Empty for reach and for a segment without motion.
    pub peaks: Vec<Peak>,
}

impl CheckResult {
    /// The peak nearest to its reserve, of those that count if any does.
    pub fn worst(&self) -> Option<&Peak> {
        let over_reserve = |peak: &Peak| peak.room.as_fraction() - peak.reserve.as_fraction();
        let counts = self.peaks.iter().any(|peak| peak.judged);
        let meant = self.peaks.iter().filter(|peak| peak.limit.si.is_finite() && (peak.judged || !counts));
        meant.min_by(|a, b| over_reserve(a).total_cmp(&over_reserve(b)))
    }
}

/// A profile is the room of every check at many instants of a segment, the worst ones included, in order of time.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Profile {
    /// Instants.
    pub places: Vec<Place>,
    /// Room of each check, in the order of [`Check::ALL`]; `NAN` where it is not judged.
    pub rooms: Vec<[f32; Check::ALL.len()]>,
}

/// Between which values a joint stays on a segment, rad or m.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct JointSpan {
    /// The least value that was seen, and where.
    pub low: (f64, Place),
    /// The greatest value that was seen, and where.
    pub high: (f64, Place),
    /// Least and greatest value at most, rounded outward, where the path is proved.
    pub proved: Option<[f64; 2]>,
}

/// What all checks found on one segment.
#[derive(Debug, Clone, PartialEq)]
pub struct SegmentSurvey {
    /// Which segment of the plan, counted from 0.
    pub segment: usize,
    /// Whether it is a joint move, whose rates and accelerations are the shares it was given.
    pub joint_move: bool,
    /// The worst verdict of all checks.
    pub verdict: Verdict,
    /// One result a check, in the order of [`Check::ALL`].
    pub checks: Vec<CheckResult>,
    /// Its findings.
    pub findings: Vec<Finding>,
    /// Room along it.
    pub profile: Profile,
    /// Its part of the torque over the cycle.
    pub torque: TorqueSum,
    /// How many instants were looked at.
    pub looked_at: usize,
    /// How the proof went.
    pub tally: Tally,
    /// Between which values each joint stays; empty where nothing could be looked at.
    pub spans: Vec<JointSpan>,
}

impl SegmentSurvey {
    /// The result of one check.
    pub fn check(&self, check: Check) -> &CheckResult {
        self.checks.iter().find(|result| result.check == check).expect("every check has a result")
    }

    /// The largest gap between what was seen and what is proved, as a share of the limit, and the check it is of. Closeness to
    /// singularity is left out, since it is proved as a yes or no.
    pub fn largest_gap(&self) -> Option<(Check, f64)> {
        let gap = |result: &CheckResult| {
            let Proof::Proved(proved) = result.proof else { return None };
            let rooms = result.peaks.iter().filter(|peak| peak.judged).map(|peak| peak.room.as_fraction());
            let seen = rooms.reduce(|least, room| if room >= least { least } else { room })?;
            let shown = result.judged && !matches!(result.check, Check::Singular | Check::Reach);
            shown.then(|| (result.check, seen - proved.as_fraction()))
        };
        self.checks.iter().filter_map(gap).max_by(|a, b| a.1.total_cmp(&b.1))
    }

    /// The judged check that is nearest to its reserve, with its worst peak: the worse verdict first. Rate and acceleration of a
    /// clear joint move are what its shares make them, and a clear load at the flange is what it is on every segment, so they come
    /// last.
    pub fn nearest(&self) -> Option<(&CheckResult, &Peak)> {
        let by_share = |result: &CheckResult| {
            let given = self.joint_move && matches!(result.check, Check::Rate | Check::Accel) || result.check == Check::Flange;
            given && result.verdict == Verdict::Clear
        };
        let spare = |peak: &Peak| peak.room.as_fraction() - peak.reserve.as_fraction();
        self.checks.iter().filter(|result| result.judged).filter_map(|result| Some((result, result.worst()?))).min_by(
            |(a, p), (b, q)| b.verdict.cmp(&a.verdict).then(by_share(a).cmp(&by_share(b))).then(spare(p).total_cmp(&spare(q))),
        )
    }
}

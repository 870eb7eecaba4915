use crate::arm::Joints;
use crate::checks::{Check, Doubt, Finding};
use crate::geometry::V3;
use crate::program::Edit;
use crate::units::{Acceleration, Angle, Length, Mass, Room, Seconds, Share, Speed, TurnAcceleration, TurnRate};

use super::Judged;

/// A kind of remedy.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum RemedyKind {
    /// The segment runs slower.
    Slower,
    /// The segment speeds up and slows down less hard.
    Acceleration,
    /// A fly-by point is passed more closely, more widely, or stopped at.
    FlyBy,
    /// The arm stands longer at a waypoint.
    Dwell,
    /// The tool turns about its own axis.
    Turn,
    /// The tool tilts.
    Tilt,
    /// A waypoint is moved.
    Shift,
    /// A point is added on the way.
    Via,
    /// The arm goes by a joint move instead of a line or an arc.
    JointMove,
    /// The arm stands in another posture at the same poses.
    Posture,
    /// An override of the whole segment. Information only.
    Override,
    /// A lighter load. Information only.
    Load,
    /// A load whose centre of mass is nearer. Information only.
    Centre,
    /// A load gripped another way round. Information only.
    Grip,
    /// A base that stands higher or lower. Information only.
    MountHeight,
    /// A base that leans. Information only.
    MountTilt,
}

impl RemedyKind {
    /// All kinds.
    pub const ALL: [Self; 16] = [
        Self::Slower,
        Self::Acceleration,
        Self::FlyBy,
        Self::Dwell,
        Self::Turn,
        Self::Tilt,
        Self::Shift,
        Self::Via,
        Self::JointMove,
        Self::Posture,
        Self::Override,
        Self::Load,
        Self::Centre,
        Self::Grip,
        Self::MountHeight,
        Self::MountTilt,
    ];
}

/// Which of the waypoints at a segment's ends a remedy changes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Ends {
    /// Both, alike.
    Both,
    /// The one that it starts from.
    Start,
    /// The one that it arrives at.
    End,
}

/// What a remedy changes, in figures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Change {
    /// The speed of the TCP on a line or arc.
    Speed {
        /// As it is.
        from: Speed,
        /// As it would be.
        to: Speed,
    },
    /// The turning rate of the tool on a line or arc.
    TurnSpeed {
        /// As it is.
        from: TurnRate,
        /// As it would be.
        to: TurnRate,
    },
    /// The share of the joints' rates on a joint move.
    Share {
        /// As it is.
        from: Share,
        /// As it would be.
        to: Share,
    },
    /// The speeds of both segments that meet in a fly-by point, as a share of what they are.
    Pace {
        /// The share.
        to: Share,
    },
    /// The acceleration of the TCP on a line or arc.
    Accel {
        /// As it is.
        from: Acceleration,
        /// As it would be.
        to: Acceleration,
    },
    /// The turning acceleration of the tool on a line or arc.
    TurnAccel {
        /// As it is.
        from: TurnAcceleration,
        /// As it would be.
        to: TurnAcceleration,
    },
    /// The share of the joints' accelerations on a joint move.
    AccelShare {
        /// As it is.
        from: Share,
        /// As it would be.
        to: Share,
    },
    /// The radius of a fly-by point.
    FlyBy {
        /// Which waypoint, counted from 0.
        waypoint: usize,
        /// As it is.
        from: Length,
        /// As it would be; `None` for a stop.
        to: Option<Length>,
    },
    /// How long the arm stands at a waypoint.
    Dwell {
        /// Which waypoint, counted from 0.
        waypoint: usize,
        /// As it is.
        from: Seconds,
        /// As it would be.
        to: Seconds,
    },
    /// A turn of the tool about its own axis (z of the TCP system).
    Turn {
        /// Where.
        ends: Ends,
        /// By how much, about the tool's z by the right hand.
        angle: Angle,
    },
    /// A tilt of the tool about its TCP.
    Tilt {
        /// Where.
        ends: Ends,
        /// About which axis, unit vector, base axes, by the right hand.
        axis: V3,
        /// By how much, above 0.
        angle: Angle,
    },
    /// A displacement of waypoints.
    Shift {
        /// Where.
        ends: Ends,
        /// By what, base axes, m.
        by: V3,
    },
    /// A point added on a line.
    Via {
        /// Fraction of the line at which it is added.
        u: f64,
        /// How far beside the line, base axes, m.
        by: V3,
    },
    /// A joint move instead of a line or an arc.
    JointMove {
        /// Share of the joints' rates.
        share: Share,
        /// How far the TCP then leaves the line or arc at most, rounded up.
        leaves: Length,
        /// Whether the end is then taught by the joint values that it has now, so that the posture stays.
        keeps: bool,
    },
    /// Another posture from one waypoint on, up to the next joint move.
    Posture {
        /// The first waypoint concerned, counted from 0.
        waypoint: usize,
        /// The last one.
        last: usize,
        /// Joint values at the first as they are.
        from: Joints,
        /// As they would be.
        to: Joints,
    },
    /// An override at which the segment is clear.
    Override {
        /// The override.
        share: Share,
    },
    /// The mass of the load.
    Load {
        /// As typed.
        from: Mass,
        /// The heaviest that is clear at the same centre.
        to: Mass,
    },
    /// The centre of mass of the load.
    Centre {
        /// By what it would be nearer, TCP axes, m.
        by: V3,
    },
    /// How the load is gripped.
    Grip {
        /// Axis of the TCP system about which the load would be turned in the grip: 0 for x, 1 for y, 2 for z.
        axis: usize,
        /// By how much.
        angle: Angle,
    },
    /// The height of the base in the world.
    MountHeight {
        /// By how much higher; below 0 for lower.
        by: Length,
    },
    /// A lean of the base.
    MountTilt {
        /// Axis of the base about which it would lean: 0 for x, 1 for y.
        axis: usize,
        /// By how much, by the right hand.
        angle: Angle,
    },
}

impl Change {
    /// Which kind of remedy it is.
    pub fn kind(&self) -> RemedyKind {
        match self {
            Self::Speed { .. } | Self::TurnSpeed { .. } | Self::Share { .. } | Self::Pace { .. } => RemedyKind::Slower,
            Self::Accel { .. } | Self::TurnAccel { .. } | Self::AccelShare { .. } => RemedyKind::Acceleration,
            Self::FlyBy { .. } => RemedyKind::FlyBy,
            Self::Dwell { .. } => RemedyKind::Dwell,
            Self::Turn { .. } => RemedyKind::Turn,
            Self::Tilt { .. } => RemedyKind::Tilt,
            Self::Shift { .. } => RemedyKind::Shift,
            Self::Via { .. } => RemedyKind::Via,
            Self::JointMove { .. } => RemedyKind::JointMove,
            Self::Posture { .. } => RemedyKind::Posture,
            Self::Override { .. } => RemedyKind::Override,
            Self::Load { .. } => RemedyKind::Load,
            Self::Centre { .. } => RemedyKind::Centre,
            Self::Grip { .. } => RemedyKind::Grip,
            Self::MountHeight { .. } => RemedyKind::MountHeight,
            Self::MountTilt { .. } => RemedyKind::MountTilt,
        }
    }
}

/// What a remedy does to the findings of the whole recipe.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Effect {
    /// Findings of before that are gone, the worst first.
    pub settles: Vec<Finding>,
    /// Findings that are still there on the segment that it is about, as they are after it.
    pub remains: Vec<Finding>,
    /// Findings that are new or worse, anywhere, as they are after it.
    pub worsens: Vec<Finding>,
    /// Doubts that are new, anywhere, as they are after it.
    pub doubts: Vec<Doubt>,
}

/// A remedy is one change that settles a finding: tried, judged and proved again with the whole recipe, and only then offered.
#[derive(Debug, Clone)]
pub struct Remedy {
    /// What it changes.
    pub change: Change,
    /// The edit that makes the change; `None` where it is information only, such as the heaviest load.
    pub edit: Option<Edit>,
    /// The whole recipe, judged with the change.
    pub after: Judged,
    /// What it settles, what remains, what it makes worse.
    pub effect: Effect,
    /// Room of the finding's check and joint before and after, at its worst; `None` where there is none to tell (reach).
    pub room: [Option<Room>; 2],
    /// What it costs on the cycle; below 0 where it saves time.
    pub costs: Seconds,
    /// How much it changes of what the person taught; remedies are ranked by it, the least first.
    pub size: f64,
}

impl Remedy {
    /// Which kind it is.
    pub fn kind(&self) -> RemedyKind {
        self.change.kind()
    }

    /// The order in which remedies are shown: what can be applied first; of those what brings nothing bad, then what brings a doubt,
    /// then what makes something worse; then by size.
    pub fn order(&self, other: &Self) -> std::cmp::Ordering {
        let brings = |effect: &Effect| (!effect.worsens.is_empty(), !effect.doubts.is_empty());
        (self.edit.is_none().cmp(&other.edit.is_none()))
            .then(brings(&self.effect).cmp(&brings(&other.effect)))
            .then(self.size.total_cmp(&other.size))
            .then(self.kind().cmp(&other.kind()))
    }
}

/// Why a kind of remedy yields nothing.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Short {
    /// Nothing that was tried settles it. The room of the finding's check and joint where it came nearest, if there is one to tell.
    Nearest(Option<Room>),
    /// It settles the finding but makes something else as bad or worse.
    Spoils {
        /// On which segment of the plan as it is, counted from 0.
        segment: usize,
        /// What.
        check: Check,
        /// Of which joint, for checks with a channel a joint.
        joint: Option<usize>,
    },
    /// The work fixes the points: something is taken, released or pushed there.
    Fixed,
}

/// A kind of remedy that was tried without success.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tried {
    /// Which kind.
    pub kind: RemedyKind,
    /// Why it yields nothing.
    pub short: Short,
}

impl Short {
    pub(super) fn spoils(finding: &Finding) -> Self {
        Self::Spoils { segment: finding.segment, check: finding.check, joint: finding.joint }
    }
}

/// News of a search.
#[derive(Debug, Clone)]
pub enum Told {
    /// A remedy.
    Found(Box<Remedy>),
    /// A kind that was tried without success.
    Tried(Tried),
}

impl Told {
    /// Which kind it is of.
    pub fn kind(&self) -> RemedyKind {
        match self {
            Self::Found(remedy) => remedy.kind(),
            Self::Tried(tried) => tried.kind,
        }
    }
}

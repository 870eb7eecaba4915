use crate::arm::{Arm, Joint, Joints, MAX_JOINTS};
use crate::checks::{Check, Excess, Finding, Place, SegmentSurvey, direction};
use crate::dynamics::{Going, MovingParts, Shares, Wrench, holding_shares};
use crate::geometry::V3;
use crate::kinematics::{
    Closeness, Lu, SpeedLeft, Svd, invert, null_rows, singular_posture, speed_left, spherical_wrist, stacked, svd,
};
use crate::motion::{Follower, Instant, Segment, Side};
use crate::program::Carried;
use crate::units::{Acceleration, Share, Speed, TurnAcceleration, TurnRate};

use super::Judged;

/// A scene is one instant of a segment computed anew, with everything that the words draw on.
#[derive(Clone, Copy)]
pub(super) struct Scene<'a> {
    pub judged: &'a Judged,
    pub index: usize,
    pub segment: &'a Segment,
    pub instant: Instant,
    /// Rate of the fraction, 1/s.
    pub rate: f64,
    /// Its acceleration, 1/s².
    pub accel: f64,
    /// Tool and load at that instant.
    pub carried: &'a Carried,
    /// What the tool exerts on the work, base axes.
    pub push: Option<Wrench>,
}

/// A path shorter than this (m), or a turn less than this (rad), does not lead.
const NOTHING: f64 = 1e-9;

impl<'a> Scene<'a> {
    /// The worst instant of a finding; `None` where the path can't be followed to it.
    pub fn of(judged: &'a Judged, finding: &Finding, excess: &Excess) -> Option<Self> {
        let mut scene = Self::at(judged, finding.segment, finding.stop, excess.worst)?;
        if excess.after_stop {
            scene.carried = scene.segment.carried_after.as_ref()?;
            (scene.rate, scene.accel, scene.push) = (0.0, 0.0, None);
        } else if let (Check::Accel | Check::Moving, Some(joint)) = (finding.check, finding.joint) {
            // At a corner of the law the acceleration jumps; the side is meant that the finding tells.
            let miss = |[rate, accel]: [f64; 2]| {
                let value = match finding.check {
                    Check::Moving => Self { rate, accel, ..scene }.moving_parts(joint).at_pace(1.0),
                    _ => scene.instant.accelerations(rate, accel)[joint],
                };
                (value - excess.demand.si).abs()
            };
            let sides = [Side::Before, Side::After].map(|side| {
                let [_, rate, accel] = scene.segment.law.at(excess.worst.time, side);
                [rate, accel]
            });
            [scene.rate, scene.accel] = if miss(sides[1]) < miss(sides[0]) { sides[1] } else { sides[0] };
        }
        Some(scene)
    }

    /// A place of a segment, or of its version that stops at fly-by points; `None` where the path can't be followed to it.
    pub fn at(judged: &'a Judged, index: usize, stop: bool, place: Place) -> Option<Self> {
        let segment: &Segment = judged.plan.version(index, stop);
        let instant = Follower::of(&judged.arm, segment).at(place.u)?;
        let [_, rate, accel] = segment.law.at(place.time, Side::Before);
        let push = segment.push.map(|push| push.in_base(&instant.tcp));
        Some(Self { judged, index, segment, instant, rate, accel, carried: &segment.carried, push })
    }

    pub fn arm(&self) -> &'a Arm {
        &self.judged.arm
    }

    pub fn joint(&self, joint: usize) -> &'a Joint {
        &self.judged.arm.joints()[joint]
    }

    pub fn survey(&self) -> &'a SegmentSurvey {
        &self.judged.survey.segments[self.index]
    }

    /// Joint rates, SI.
    pub fn rates(&self) -> Joints {
        self.instant.rates(self.rate)
    }

    /// Velocity of the TCP, base axes, m/s.
    pub fn velocity(&self) -> V3 {
        let [x, y, z, ..] = self.instant.jacobian.twist(&self.rates());
        V3::new(x, y, z)
    }

    /// Turning rate of the tool, base axes, rad/s.
    pub fn turning(&self) -> V3 {
        let [.., x, y, z] = self.instant.jacobian.twist(&self.rates());
        V3::new(x, y, z)
    }

    /// Singular values and directions of the task, translations divided by the characteristic length.
    pub fn parts(&self) -> Svd {
        svd(&self.instant.jacobian.scaled_rows(self.arm().task(), self.arm().characteristic_length().m))
    }

    /// The tool's speed left here.
    pub fn speed_left(&self) -> SpeedLeft {
        let arm = self.arm();
        let lu = self.instant.lu.unwrap_or_else(|| {
            let null = if arm.is_redundant() {
                null_rows(&self.instant.jacobian, arm.task(), arm.joints())
            } else {
                [[0.0; MAX_JOINTS]; MAX_JOINTS]
            };
            Lu::of(stacked(&self.instant.jacobian, arm.task(), &null), arm.len())
        });
        speed_left(&invert(&lu), arm.task(), arm.joints())
    }

    /// The nearest singular posture, unless it is far.
    pub fn closeness(&self) -> Option<Closeness> {
        singular_posture(self.arm(), spherical_wrist(self.arm().chain()), &self.instant.q)
    }

    /// Who asks how much of the holding torque.
    pub fn shares(&self) -> Shares {
        holding_shares(self.arm().chain(), &self.instant.posture, self.carried, &self.judged.plan.gravity, self.push.as_ref())
    }

    /// What a joint's torque in motion is made of here.
    pub fn moving_parts(&self, joint: usize) -> MovingParts {
        let accelerations = self.instant.accelerations(self.rate, self.accel);
        MovingParts::of(
            self.arm().chain(),
            self.joint(joint),
            joint,
            self.instant.q[joint],
            &self.instant.posture,
            self.carried,
            &self.judged.plan.gravity,
            self.push.as_ref(),
            &Going { rates: self.rates(), accelerations },
            direction(self.instant.slope[joint], self.rate, self.accel),
        )
    }

    /// The names of tool and load here.
    pub fn carried_names(&self) -> [String; 2] {
        let recipe = &self.judged.recipe;
        let hangs = recipe.hanging_at(self.segment.to);
        let tool = hangs.tool.map_or("tool".to_owned(), |tool| tool.name.clone());
        let after = !std::ptr::eq(self.carried, &self.segment.carried);
        let load = if after { hangs.after } else { hangs.before };
        [tool, load.map_or("load".to_owned(), |load| load.name.clone())]
    }

    /// What would have to be asked for so that the fraction runs no faster than `rate` (1/s): the path's speed, or the share of
    /// the joints' rates on a joint move. Rounded to the safe side.
    pub fn asking(&self, rate: f64) -> String {
        let (length, turn) = (self.segment.path.length(), self.segment.path.turn());
        if self.segment.blend {
            return self.pace_of_blend(rate / self.segment.law.top_rate());
        }
        if self.segment.follows_path() {
            return if length > NOTHING {
                Speed::m_per_s(rate * length).measure().text_down(0)
            } else {
                TurnRate::rad_per_s(rate * turn).measure().text_down(0)
            };
        }
        let share = self.ways().zip(self.arm().joints()).map(|(way, joint)| rate * way / joint.rate).fold(0.0, f64::max);
        format!("a share of {}", percent_down(share))
    }

    /// The same for the acceleration of the fraction, 1/s².
    pub fn asking_accel(&self, accel: f64) -> String {
        let (length, turn) = (self.segment.path.length(), self.segment.path.turn());
        if self.segment.blend {
            return self.pace_of_blend(1.0);
        }
        if self.segment.follows_path() {
            return if length > NOTHING {
                Acceleration::m_per_s2(accel * length).measure().text_down(0)
            } else {
                TurnAcceleration::rad_per_s2(accel * turn).measure().text_down(0)
            };
        }
        let share = self.ways().zip(self.arm().joints()).map(|(way, joint)| accel * way / joint.accel).fold(0.0, f64::max);
        format!("an acceleration share of {}", percent_down(share))
    }

    /// A share of the pace at which a blend is passed, rounded to the safe side.
    fn pace_of_blend(&self, share: f64) -> String {
        format!("{} of the pace at which the fly-by point is passed", percent_down(share.min(1.0)))
    }

    /// How far each joint goes on a joint move, SI.
    fn ways(&self) -> impl Iterator<Item = f64> {
        let (start, end) = (self.segment.start, self.segment.end);
        (0..start.len()).map(move |j| (end[j] - start[j]).abs())
    }
}

/// A share in whole percent, rounded to the safe side.
fn percent_down(share: f64) -> Share {
    Share::percent((share * 100.0 + 1e-6).floor())
}

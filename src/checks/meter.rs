use crate::arm::{Arm, Joints, MAX_JOINTS};
use crate::dynamics::{Going, drive_torque, holding_torque, moving_torque, with_friction};
use crate::geometry::V3;
use crate::kinematics::{Lu, invert, null_rows, smallest_singular_value, speed_left, stacked};
use crate::motion::{Instant, Segment};
use crate::program::{Acceptance, Carried};
use crate::units::Speed;

use super::channel::CHANNELS;
use super::points::{Carrying, watched};
use super::{Channel, Check, accel, brake, flange, holding, moving, points, range, rate, singular, tcp_speed};

/// A reading is the value of every channel at one instant, SI.
pub type Reading = [f64; CHANNELS];

/// First slot of the flange's channels.
const FLANGE: usize = 6 * MAX_JOINTS;
/// First slot of the channels that are not a joint's.
const SINGULAR: usize = 8 * MAX_JOINTS + 1;
/// Slots of the points' speeds: all of them, and the flange by itself.
const POINTS: usize = 8 * MAX_JOINTS + 4;
const FLANGE_ALONE: usize = POINTS + 1;

/// A meter reads all channels of a segment.
#[derive(Debug)]
pub struct Meter<'a> {
    arm: &'a Arm,
    segment: &'a Segment,
    gravity: V3,
    channels: [Channel; CHANNELS],
    used: Vec<usize>,
    /// Points whose speed has a limit: all of them, and the flange by itself.
    points: Vec<Carrying>,
    flange: Option<Carrying>,
}

impl<'a> Meter<'a> {
    /// A meter for one segment of an arm under the given criteria and gravity (base axes, m/s²).
    pub fn of(arm: &'a Arm, segment: &'a Segment, criteria: &Acceptance, gravity: V3) -> Self {
        let path = segment.follows_path();
        let mut channels = [Channel::UNUSED; CHANNELS];
        let mut used = Vec::with_capacity(CHANNELS);
        for (j, joint) in arm.joints().iter().enumerate() {
            for (check, channel) in [
                (Check::Range, range::channel(joint, j, criteria)),
                (Check::Rate, rate::channel(joint, j, criteria, path)),
                (Check::Accel, accel::channel(joint, j, criteria, path)),
                (Check::Holding, holding::channel(joint, j, criteria)),
                (Check::Moving, moving::channel(arm, joint, j, criteria)),
                (Check::Brake, brake::channel(joint, j, criteria)),
            ] {
                let slot = check.first_channel().expect("per joint") + j;
                channels[slot] = channel;
                used.push(slot);
            }
        }
        for (check, channel) in [
            (Check::Singular, singular::channel(criteria, path)),
            (Check::SpeedLeft, singular::speed_left_channel(criteria, path)),
            (Check::TcpSpeed, tcp_speed::channel(criteria)),
        ] {
            let slot = check.first_channel().expect("single");
            channels[slot] = channel;
            used.push(slot);
        }
        for (slot, channel) in (FLANGE..).zip(flange::channels(arm.flange())) {
            channels[slot] = channel;
            used.push(slot);
        }
        let mut points = Vec::new();
        if criteria.point_speed.is_some() {
            channels[POINTS] = points::channel(criteria);
            used.push(POINTS);
            points = watched(arm, segment);
        }
        used.sort_unstable();
        Self { arm, segment, gravity, channels, used, points, flange: None }
    }

    /// The same meter with the flange held to a speed of its own besides, as in manual mode at reduced speed.
    #[must_use]
    pub fn with_flange_held_to(mut self, limit: Speed) -> Self {
        self.channels[FLANGE_ALONE] = points::flange_channel(limit);
        self.flange = Some(Carrying::flange(self.arm));
        self.used.push(FLANGE_ALONE);
        self
    }

    /// The arm, the segment and gravity (base axes, m/s²) that it reads.
    pub(super) fn reads(&self) -> (&'a Arm, &'a Segment, V3) {
        (self.arm, self.segment, self.gravity)
    }

    /// The points that a channel of their speed is of.
    pub(super) fn points(&self, slot: usize) -> &[Carrying] {
        if slot == FLANGE_ALONE { self.flange.as_slice() } else { &self.points }
    }

    /// The slots of a reading that this arm uses.
    pub fn used(&self) -> &[usize] {
        &self.used
    }

    /// The channel in a slot.
    pub fn channel(&self, slot: usize) -> &Channel {
        &self.channels[slot]
    }

    /// The slots of one check.
    pub fn slots(&self, check: Check) -> std::ops::Range<usize> {
        match check.first_channel() {
            None => 0..0,
            Some(first) if check.is_per_joint() => first..first + self.arm.len(),
            Some(first) if check == Check::Flange => first..first + 1 + 2 * self.arm.flange().wrist.len(),
            // A point is watched where there is a limit for it.
            Some(_) if check == Check::PointSpeed => {
                let first = if self.points.is_empty() { FLANGE_ALONE } else { POINTS };
                first..FLANGE_ALONE + usize::from(self.flange.is_some())
            }
            Some(first) => first..first + 1,
        }
    }

    /// All channels at an instant whose fraction runs at `rate` (1/s) and speeds up by `accel` (1/s²).
    pub fn read(&self, at: &Instant, rate: f64, accel: f64) -> Reading {
        self.read_with(at, rate, accel, &self.segment.carried)
    }

    /// The same with another tool and load than the segment's own.
    pub fn read_with(&self, at: &Instant, rate: f64, accel: f64, carried: &Carried) -> Reading {
        let n = self.arm.len();
        let mut reading = [0.0; CHANNELS];
        let push = if std::ptr::eq(carried, &self.segment.carried) { self.segment.push } else { None };
        let wrench = push.map(|push| push.in_base(&at.tcp));
        let chain = self.arm.chain();
        let weights = holding_torque(chain, &at.posture, carried, &self.gravity, None);
        let torque = match &wrench {
            Some(wrench) => holding_torque(chain, &at.posture, carried, &self.gravity, Some(wrench)),
            None => weights,
        };
        let going = Going { rates: at.rates(rate), accelerations: at.accelerations(rate, accel) };
        let moving = self.moving_torques(at, rate, accel, carried);
        for (j, joint) in self.arm.joints().iter().enumerate() {
            let balance = joint.drive.balance(at.q[j]);
            reading[j] = at.q[j];
            reading[MAX_JOINTS + j] = going.rates[j];
            reading[2 * MAX_JOINTS + j] = going.accelerations[j];
            reading[3 * MAX_JOINTS + j] = torque[j] - balance;
            reading[4 * MAX_JOINTS + j] = moving[j];
            reading[5 * MAX_JOINTS + j] = weights[j] - balance;
        }
        flange::read(self.arm.flange(), &at.posture, carried, &mut reading[FLANGE..SINGULAR]);
        let task = self.arm.task();
        reading[SINGULAR] = smallest_singular_value(&at.jacobian.scaled_rows(task, self.arm.characteristic_length().m));
        let lu = at.lu.unwrap_or_else(|| {
            let null = if self.arm.is_redundant() {
                null_rows(&at.jacobian, task, self.arm.joints())
            } else {
                [[0.0; MAX_JOINTS]; MAX_JOINTS]
            };
            Lu::of(stacked(&at.jacobian, task, &null), n)
        });
        reading[SINGULAR + 1] = speed_left(&invert(&lu), task, self.arm.joints()).moving;
        let [x, y, z, ..] = at.jacobian.twist(&at.slope);
        reading[SINGULAR + 2] = V3::new(x, y, z).norm() * rate;
        for slot in [POINTS, FLANGE_ALONE] {
            let speeds = self.points(slot).iter().map(|point| point.velocity(self.arm, at).norm() * rate);
            // What is no number stays no number.
            reading[slot] = speeds.fold(0.0, |most, speed| if speed <= most { most } else { speed });
        }
        reading
    }

    /// The torque in motion of every joint alone, rotors, friction and balancers included, N·m or N; for those who need no more.
    pub(super) fn moving_torques(&self, at: &Instant, rate: f64, accel: f64, carried: &Carried) -> Joints {
        let going = Going { rates: at.rates(rate), accelerations: at.accelerations(rate, accel) };
        let push = if std::ptr::eq(carried, &self.segment.carried) { self.segment.push } else { None };
        let wrench = push.map(|push| push.in_base(&at.tcp));
        let mut torque = moving_torque(self.arm.chain(), &at.posture, carried, &self.gravity, wrench.as_ref(), &going);
        for (j, joint) in self.arm.joints().iter().enumerate() {
            let asked = torque[j] + drive_torque(&joint.drive, at.q[j], going.accelerations[j]);
            let friction = joint.drive.friction.map_or(0.0, |f| f.asks(direction(at.slope[j], rate, accel), going.rates[j]));
            torque[j] = with_friction(asked, friction);
        }
        torque
    }
}

/// A joint whose way along the whole segment would be shorter than this at the slope of an instant stands still there, rad or m.
pub(super) const STANDS: f64 = 1e-9;

/// Which way a joint moves, or is about to move at the ends of a segment: -1, 0 or 1.
pub fn direction(slope: f64, rate: f64, accel: f64) -> f64 {
    let stands = slope.abs() <= STANDS || (rate == 0.0 && accel == 0.0);
    if stands { 0.0 } else { slope.signum() }
}

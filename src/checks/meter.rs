use crate::arm::{Arm, MAX_JOINTS};
use crate::dynamics::holding_torque;
use crate::geometry::V3;
use crate::kinematics::{Lu, invert, null_rows, smallest_singular_value, speed_left, stacked};
use crate::motion::{Instant, Segment};
use crate::program::{Acceptance, Carried};

use super::channel::CHANNELS;
use super::{Channel, Check, accel, holding, range, rate, singular, tcp_speed};

/// A reading is the value of every channel at one instant, SI.
pub type Reading = [f64; CHANNELS];

/// A meter reads all channels of a segment.
#[derive(Debug)]
pub struct Meter<'a> {
    arm: &'a Arm,
    segment: &'a Segment,
    gravity: V3,
    channels: [Channel; CHANNELS],
    used: Vec<usize>,
}

impl<'a> Meter<'a> {
    /// A meter for one segment of an arm under the given criteria and gravity (base axes, m/s²).
    pub fn of(arm: &'a Arm, segment: &'a Segment, criteria: &Acceptance, gravity: V3) -> Self {
        let path = segment.follows_path();
        let mut channels = [tcp_speed::channel(criteria); CHANNELS];
        let mut used = Vec::with_capacity(CHANNELS);
        for (j, joint) in arm.joints().iter().enumerate() {
            for (check, channel) in [
                (Check::Range, range::channel(joint, j, criteria)),
                (Check::Rate, rate::channel(joint, j, criteria, path)),
                (Check::Accel, accel::channel(joint, j, criteria, path)),
                (Check::Holding, holding::channel(joint, j, criteria)),
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
        used.sort_unstable();
        Self { arm, segment, gravity, channels, used }
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
        let torque = holding_torque(self.arm.chain(), &at.posture, carried, &self.gravity, wrench.as_ref());
        for j in 0..n {
            reading[j] = at.q[j];
            reading[MAX_JOINTS + j] = at.slope[j] * rate;
            reading[2 * MAX_JOINTS + j] = at.bend[j] * rate * rate + at.slope[j] * accel;
            reading[3 * MAX_JOINTS + j] = torque[j];
        }
        let task = self.arm.task();
        reading[4 * MAX_JOINTS] = smallest_singular_value(&at.jacobian.scaled_rows(task, self.arm.characteristic_length().m));
        let lu = at.lu.unwrap_or_else(|| {
            let null = if self.arm.is_redundant() {
                null_rows(&at.jacobian, task, self.arm.joints())
            } else {
                [[0.0; MAX_JOINTS]; MAX_JOINTS]
            };
            Lu::of(stacked(&at.jacobian, task, &null), n)
        });
        reading[4 * MAX_JOINTS + 1] = speed_left(&invert(&lu), task, self.arm.joints()).moving;
        let [x, y, z, ..] = at.jacobian.twist(&at.slope);
        reading[4 * MAX_JOINTS + 2] = V3::new(x, y, z).norm() * rate;
        reading
    }
}

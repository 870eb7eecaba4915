use crate::arm::Joints;
use crate::checks::{Check, Finding, Meter, Reading, Verdict};
use crate::geometry::Pose;
use crate::kinematics::{Jacobian, Posture};
use crate::motion::{Cursor, Follower, Instant, Segment, Side};
use crate::program::Carried;
use crate::review::Judged;
use crate::units::{Measure, Room};

/// A gauge is one quantity at one instant, with what it asks of its limit.
#[derive(Debug, Clone, Copy)]
pub struct Gauge {
    /// Which check it belongs to.
    pub check: Check,
    /// Which joint, for checks that have one a joint.
    pub joint: Option<usize>,
    /// What is there.
    pub value: Measure,
    /// What it is told against, SI; infinite where there is no limit.
    pub limit: f64,
    /// What is left.
    pub room: Room,
    /// What must be left, as a fraction.
    pub reserve: f64,
    /// The verdict on this instant; clear where it is only shown.
    pub verdict: Verdict,
    /// Whether it is judged on this segment.
    pub judged: bool,
}

/// A fraction that comes back from its time may differ by this much.
const ROUNDING: f64 = 1e-9;

/// A probe reads gauges along one segment.
#[derive(Debug)]
pub struct Probe<'a> {
    segment: &'a Segment,
    follower: Follower<'a>,
    meter: Meter<'a>,
}

impl<'a> Probe<'a> {
    /// A probe for a segment (counted from 0) of a judged recipe; `None` if there is no such segment.
    pub fn of(judged: &'a Judged, segment: usize) -> Option<Self> {
        Self::of_version(judged, segment, false)
    }

    /// A probe for a segment as it runs on the cycle, or for its version that stops at fly-by points where `stop` says so and there
    /// is one.
    pub fn of_version(judged: &'a Judged, segment: usize, stop: bool) -> Option<Self> {
        judged.plan.segments.get(segment)?;
        let planned: &Segment = judged.plan.version(segment, stop);
        Some(Self {
            segment: planned,
            follower: Follower::of(&judged.arm, planned),
            meter: Meter::of(&judged.arm, planned, &judged.recipe.acceptance, judged.plan.gravity),
        })
    }

    /// The arm and what its joints do `time` seconds after the segment's start; `None` where it could not be followed.
    pub fn read(&self, time: f64) -> Option<(Instant, Reading)> {
        let (segment, lasts) = (self.segment, self.segment.duration());
        let fraction = segment.law.at(time, Side::Before)[0];
        if fraction > segment.followed_to() + ROUNDING {
            return None;
        }
        let instant = self.follower.at(fraction.min(segment.followed_to()))?;
        if time >= lasts + segment.dwell
            && let Some(after) = &segment.carried_after
        {
            return Some((instant, self.meter.read_with(&instant, 0.0, 0.0, after)));
        }
        if time > lasts {
            return Some((instant, self.meter.read(&instant, 0.0, 0.0)));
        }
        let [_, rate, accel] = segment.law.at(time, Side::Before);
        let mut reading = self.meter.read(&instant, rate, accel);
        // Where the speed law has a corner the side that asks more counts, of whatever jumps there.
        let [_, rate, accel_after] = segment.law.at(time, Side::After);
        if accel_after != accel {
            let other = self.meter.read(&instant, rate, accel_after);
            for slot in [Check::Accel, Check::Moving].into_iter().flat_map(|check| self.meter.slots(check)) {
                let channel = self.meter.channel(slot);
                if channel.asked_in(&other, other[slot]) > channel.asked_in(&reading, reading[slot]) {
                    reading[slot] = other[slot];
                }
            }
        }
        Some((instant, reading))
    }

    /// The gauges of one check in a reading.
    pub fn gauges(&self, reading: &Reading, check: Check) -> impl Iterator<Item = Gauge> {
        self.meter.slots(check).map(move |slot| {
            // A rating may fall with the rate.
            let (channel, value) = (self.meter.channel(slot).within(reading), reading[slot]);
            let verdict = if channel.judged { channel.verdict(channel.asked(value)) } else { Verdict::Clear };
            Gauge {
                check,
                joint: channel.joint,
                value: Measure::si(value, channel.of),
                limit: channel.limit(value),
                room: channel.room(value),
                reserve: channel.reserve,
                verdict,
                judged: channel.judged,
            }
        })
    }

    /// The arm and all its quantities `time` seconds after the segment's start.
    fn gauges_at(&self, judged: &Judged, time: f64) -> Gauges {
        let segment = self.segment;
        let gone = segment.carried_after.as_ref().filter(|_| time >= segment.duration() + segment.dwell);
        let load = gone.unwrap_or(&segment.carried).load_mass;
        if let Some((instant, reading)) = self.read(time) {
            let all = Check::ALL.into_iter().flat_map(|check| self.gauges(&reading, check).collect::<Vec<_>>()).collect();
            return Gauges { fraction: instant.u, q: instant.q, posture: instant.posture, tcp: instant.tcp, load, all };
        }
        let q = segment.track.lost.map_or(segment.start, |lost| lost.q);
        let posture = Posture::at(judged.arm.chain(), &q);
        let tcp = posture.tcp(&segment.carried.tcp);
        Gauges { fraction: segment.followed_to(), q, posture, tcp, load, all: Vec::new() }
    }
}

/// Gauges are the arm and all its quantities at the cursor.
#[derive(Debug, Clone)]
pub struct Gauges {
    /// Fraction of the segment's path.
    pub fraction: f64,
    /// Joint values.
    pub q: Joints,
    /// The arm.
    pub posture: Posture,
    /// The TCP, base.
    pub tcp: Pose,
    /// Mass of the load in the tool, kg.
    pub load: f64,
    /// All quantities; empty where the path could not be followed, and then the arm stands where it was lost.
    pub all: Vec<Gauge>,
}

impl Gauges {
    /// The gauges at a cursor; `None` for a recipe without segments.
    pub fn at(judged: &Judged, cursor: Cursor) -> Option<Self> {
        let probe = Probe::of(judged, cursor.segment)?;
        Some(probe.gauges_at(judged, cursor.time))
    }

    /// The gauges at the worst instant of a finding, on the version of its segment that it is of; the arm alone where the path could
    /// not be followed there.
    pub fn at_worst(judged: &Judged, finding: &Finding) -> Option<Self> {
        let probe = Probe::of_version(judged, finding.segment, finding.stop)?;
        Some(probe.gauges_at(judged, Some(finding.worst().time).filter(|time| time.is_finite()).unwrap_or(0.0)))
    }

    /// The gauges at rest at joint values that need not be on the segment, with this tool and load; limits and reserves as on the
    /// segment, without its process force.
    pub fn jogged(judged: &Judged, segment: usize, q: &Joints, carried: &Carried) -> Option<Self> {
        let probe = Probe::of(judged, segment)?;
        let posture = Posture::at(judged.arm.chain(), q);
        let tcp = posture.tcp(&carried.tcp);
        let jacobian = Jacobian::at(judged.arm.chain(), &posture, &tcp.at);
        let still = Joints::zeros(q.len());
        let instant = Instant { u: 0.0, q: *q, slope: still, bend: still, posture, tcp, jacobian, lu: None };
        let reading = probe.meter.read_with(&instant, 0.0, 0.0, carried);
        let all = Check::ALL.into_iter().flat_map(|check| probe.gauges(&reading, check).collect::<Vec<_>>()).collect();
        Some(Self { fraction: 0.0, q: *q, posture, tcp, load: carried.load_mass, all })
    }

    /// One quantity.
    pub fn get(&self, check: Check, joint: Option<usize>) -> Option<&Gauge> {
        self.all.iter().find(|gauge| gauge.check == check && gauge.joint == joint)
    }

    /// The gauge of a check that has the least room beyond its reserve.
    pub fn worst(&self, check: Check) -> Option<&Gauge> {
        let spare = |gauge: &Gauge| gauge.room.as_fraction() - gauge.reserve;
        self.all.iter().filter(|gauge| gauge.check == check).min_by(|a, b| spare(a).total_cmp(&spare(b)))
    }
}

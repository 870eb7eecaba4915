use crate::checks::{Check, Finding, Meter};
use crate::geometry::V3;
use crate::motion::{Follower, Segment, Side};
use crate::program::Acceptance;
use crate::units::Room;

use super::Judged;

/// Instants of a segment that are looked at.
const LOOKS: usize = 48;
/// Further looks beside the worst of them, each half as far away as the one before.
const CLOSER: usize = 7;

/// A look at a few instants of a changed segment, for a witness that the check and joint of the finding are still flagged there: enough to
/// reject a change, never to accept one. Yields the least room that was seen of them, if there is such a
/// witness.
///
/// `gravity` is in base axes, m/s².
pub(super) fn still_flagged(
    judged: &Judged,
    finding: &Finding,
    segment: &Segment,
    criteria: &Acceptance,
    gravity: V3,
) -> Option<Room> {
    if finding.check == Check::Reach || finding.check.is_of_cycle() || segment.trouble.is_some() {
        return None;
    }
    let meter = Meter::of(&judged.arm, segment, criteria, gravity);
    let follower = Follower::of(&judged.arm, segment);
    let mut flagged = false;
    let mut look = |time: f64| {
        let [u, rate, accel] = segment.law.at(time, Side::Before);
        let reading = meter.read(&follower.at(u)?, rate, accel);
        let mut room: Option<Room> = None;
        for slot in meter.slots(finding.check).filter(|slot| meter.channel(*slot).joint == finding.joint) {
            let channel = meter.channel(slot);
            let value = reading[slot];
            flagged |= channel.judged && channel.asked_in(&reading, value) > channel.flagged_above();
            let here = channel.within(&reading).room(value);
            room = Some(room.map_or(here, |least| least.least(here)));
        }
        room
    };
    let lasts = segment.duration();
    let mut worst: Option<(f64, Room)> = None;
    let take = |time: f64, room: Option<Room>, worst: &mut Option<(f64, Room)>| {
        if let Some(room) = room.filter(|room| worst.is_none_or(|(_, least)| room.as_fraction() < least.as_fraction())) {
            *worst = Some((time, room));
        }
    };
    for k in 0..=LOOKS {
        let time = lasts * k as f64 / LOOKS as f64;
        take(time, look(time), &mut worst);
    }
    let mut step = lasts / LOOKS as f64;
    for _ in 0..CLOSER {
        step *= 0.5;
        let Some((middle, _)) = worst else { break };
        for time in [middle - step, middle + step] {
            let time = time.clamp(0.0, lasts);
            take(time, look(time), &mut worst);
        }
    }
    worst.filter(|_| flagged).map(|(_, room)| room)
}

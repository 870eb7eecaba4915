use super::sweep::{Look, Sweep};
use super::{Channel, Excess, Finding, Kind, Meter, Place};
use crate::units::{Measure, Room};

/// A border between flagged and not is found to this share of the segment's time.
const BORDER: f64 = 1e-6;

/// Every flagged stretch of one channel along a sweep.
pub(super) fn stretches(sweep: &Sweep, meter: &Meter, slot: usize, segment: usize) -> Vec<Finding> {
    let channel = meter.channel(slot);
    let level = match (channel.judged, channel.is_flagged_over()) {
        (true, _) => channel.flagged_above(),
        (false, true) => channel.over_above(),
        (false, false) => return Vec::new(),
    };
    runs(&sweep.looks, |look| look.asked[slot] > level)
        .into_iter()
        .map(|run| {
            let worst = worst_of(&sweep.looks[run.clone()], slot);
            let from = border(sweep, slot, level, run.start, run.start.checked_sub(1));
            let to = border(sweep, slot, level, run.end - 1, Some(run.end));
            let above = channel.over_above();
            let over = (!channel.check.is_tight_at_worst() && worst.asked[slot] > above).then(|| {
                let is_over = |k: &usize| sweep.looks[*k].asked[slot] > above;
                let first = run.clone().find(is_over).expect("the worst is over");
                let last = run.clone().rev().find(is_over).expect("the worst is over");
                [border(sweep, slot, above, first, first.checked_sub(1)), border(sweep, slot, above, last, Some(last + 1))]
            });
            finding(channel, segment, worst, slot, [from, to], over)
        })
        .collect()
}

/// Two demands count as equal when they differ by less than this share: the last digits must not decide which of two instants is
/// named.
const EQUAL: f64 = 1e-9;

/// The first look that asks most of a channel; one without a number is most of all.
pub(super) fn worst_of(looks: &[Look], slot: usize) -> &Look {
    first_largest(looks, |look| look.asked[slot])
}

/// The first look at which a value is largest but for its last digits; one without a number is largest of all.
pub(super) fn first_largest(looks: &[Look], value: impl Fn(&Look) -> f64) -> &Look {
    let mut best = &looks[0];
    for look in &looks[1..] {
        let most = value(best);
        if !most.is_nan() && !(value(look) <= most + EQUAL * most.abs()) {
            best = look;
        }
    }
    best
}

/// A finding of one channel with its figures.
pub(super) fn finding(
    channel: &Channel,
    segment: usize,
    worst: &Look,
    slot: usize,
    [from, to]: [Place; 2],
    over: Option<[Place; 2]>,
) -> Finding {
    let value = worst.reading[slot];
    let channel = &channel.within(&worst.reading);
    let excess = Excess {
        worst: worst.place,
        over,
        demand: Measure::si(value, channel.of),
        limit: Measure::si(channel.limit(value), channel.of),
        room: channel.room(value),
        reserve: Room::fraction(channel.reserve),
        after_stop: false,
    };
    let verdict = channel.verdict(worst.asked[slot]);
    Finding { segment, check: channel.check, joint: channel.joint, stop: false, verdict, from, to, kind: Kind::Excess(excess) }
}

/// Runs of looks that satisfy a condition, as ranges of indices.
fn runs(looks: &[Look], mut flagged: impl FnMut(&Look) -> bool) -> Vec<std::ops::Range<usize>> {
    let mut found = Vec::new();
    let mut begun = None;
    for (index, look) in looks.iter().enumerate() {
        match (flagged(look), begun) {
            (true, None) => begun = Some(index),
            (false, Some(start)) => {
                found.push(start..index);
                begun = None;
            }
            _ => {}
        }
    }
    found.extend(begun.map(|start| start..looks.len()));
    found
}

/// Where the channel crosses `level` between a look above it and its neighbour below it; the look itself at the segment's ends.
fn border(sweep: &Sweep, slot: usize, level: f64, above: usize, below: Option<usize>) -> Place {
    let high = &sweep.looks[above];
    let Some(low) = below.and_then(|index| sweep.looks.get(index)) else { return high.place };
    let (first, second) = if low.place.time < high.place.time { (low, high) } else { (high, low) };
    let Some(piece) = sweep.piece_between(first, second) else { return high.place };
    let start = sweep.piece_start(piece);
    let (mut inside, mut outside) = (high.place, low.place.time);
    while (inside.time - outside).abs() > BORDER * sweep.duration() {
        let middle = 0.5 * (inside.time + outside);
        match sweep.look(piece, middle - start) {
            Some(look) if look.asked[slot] > level => inside = look.place,
            Some(_) => outside = middle,
            None => break,
        }
    }
    inside
}

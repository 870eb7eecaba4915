use crate::motion::{Plan, Side};
use crate::units::Seconds;

/// A trace has at most this many rows on its even grid.
pub const MOST_ROWS: f64 = 1e6;

/// Rows that fall on the same instant but for rounding, s.
const SAME: f64 = 1e-9;

/// A trace would have more rows than [`MOST_ROWS`].
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[error(
    "a row every {every} s over a cycle of {cycle} makes {rows:.0} rows; at most {most:.0} are written, so every must be at \
     least {least}",
    every = .every.as_s(), most = MOST_ROWS, least = Seconds::s(.cycle.as_s() / MOST_ROWS).measure().text_up(6)
)]
pub struct TooManyRows {
    /// The step asked for.
    pub every: Seconds,
    /// Duration of the cycle.
    pub cycle: Seconds,
    /// How many rows that makes.
    pub rows: f64,
}

/// What the arm does at a row of a trace.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Doing {
    /// It moves on a segment; which side of a corner of the speed law is meant.
    Moves(Side),
    /// It stands at the segment's start, before the first segment begins.
    Waits,
    /// It stands at the segment's end.
    Stands,
    /// It stands there with what was taken, or without what was released.
    StandsAfter,
}

/// One row of a trace: which segment (from 0), how long since it started (s), what the arm does.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Row {
    pub segment: usize,
    pub time: f64,
    pub doing: Doing,
}

/// All rows of a trace in order of time: the even grid over the cycle, and the instants at which something jumps. Where values
/// differ on both sides of an instant it has two rows.
pub(super) fn rows(plan: &Plan, every: Seconds) -> Result<Vec<Row>, TooManyRows> {
    let cycle = Seconds::s(plan.duration());
    let count = cycle.as_s() / every.as_s();
    if count.is_nan() || count > MOST_ROWS {
        return Err(TooManyRows { every, cycle, rows: count });
    }
    let mut rows = Vec::new();
    if plan.first_dwell > 0.0 && !plan.segments.is_empty() {
        let grid = Grid { every: every.as_s(), start: -plan.first_dwell, offset: plan.first_dwell };
        grid.fill(0.0, plan.first_dwell, |t| rows.push(Row { segment: 0, time: t - plan.first_dwell, doing: Doing::Waits }));
    }
    for (index, (segment, start)) in plan.segments.iter().zip(&plan.starts).enumerate() {
        let row = |time, doing| Row { segment: index, time, doing };
        let duration = segment.duration();
        let grid = Grid { every: every.as_s(), start: *start, offset: 0.0 };
        for piece in segment.law.pieces().iter().filter(|piece| piece.duration > 0.0) {
            let end = piece.start + piece.duration;
            rows.push(row(piece.start, Doing::Moves(Side::After)));
            grid.between(piece.start, end, |t| rows.push(row(t, Doing::Moves(Side::Before))));
            rows.push(row(end.min(duration), Doing::Moves(Side::Before)));
        }
        if duration == 0.0 || segment.dwell > 0.0 {
            grid.fill(duration, duration + segment.dwell, |t| rows.push(row(t, Doing::Stands)));
        }
        if segment.carried_after.is_some() {
            rows.push(row(duration + segment.dwell, Doing::StandsAfter));
        }
    }
    Ok(rows)
}

/// The even grid over the cycle as a segment that starts at `start` sees it.
struct Grid {
    every: f64,
    start: f64,
    offset: f64,
}

impl Grid {
    /// Both ends and every grid instant between them.
    fn fill(&self, from: f64, to: f64, mut row: impl FnMut(f64)) {
        row(from);
        self.between(from, to, &mut row);
        if to > from {
            row(to);
        }
    }

    /// Every grid instant between two instants of the segment, neither of them.
    fn between(&self, from: f64, to: f64, mut row: impl FnMut(f64)) {
        let shift = self.start + self.offset;
        let mut k = ((shift + from + SAME) / self.every).ceil().max(0.0);
        loop {
            let t = k * self.every - shift;
            if t >= to - SAME {
                return;
            }
            if t > from + SAME {
                row(t);
            }
            k += 1.0;
        }
    }
}

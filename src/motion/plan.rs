use std::sync::Arc;

use crate::geometry::V3;

use super::planner::Made;
use super::{FlyBy, Segment};

/// A plan is a recipe turned into motion: joint values at every waypoint, the path and timing of every segment.
#[derive(Debug, Clone)]
pub struct Plan {
    /// One segment for every waypoint but the first, in order, and after it the blend past that waypoint where it is a fly-by
    /// point.
    pub segments: Vec<Arc<Segment>>,
    /// For each segment that a blend cuts something off: the whole of it, from stop to stop, as a controller that stops at the
    /// fly-by point runs it.
    pub stops: Vec<Option<Arc<Segment>>>,
    /// The fly-by points.
    pub fly_bys: Vec<FlyBy>,
    /// When each segment starts on the cycle, s.
    pub starts: Vec<f64>,
    /// Gravity in base axes, m/s².
    pub gravity: V3,
    /// How long the arm stands at the first waypoint, s.
    pub first_dwell: f64,
    /// What a later plan of an edited recipe can take over.
    pub(super) made: Made,
}

/// A cursor is one instant on the cycle: a segment and the time since it started, which may run on into the dwell at its end.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Cursor {
    /// Which segment, counted from 0.
    pub segment: usize,
    /// Time since it started, s.
    pub time: f64,
}

impl Plan {
    /// The segment that arrives at a waypoint (counted from 0), from stop to stop; none for the first.
    pub fn arriving(&self, waypoint: usize) -> Option<&Arc<Segment>> {
        let index = self.index_arriving(waypoint)?;
        Some(self.stops[index].as_ref().unwrap_or(&self.segments[index]))
    }

    /// The place among all segments of the one that arrives at a waypoint (counted from 0); a blend past it stands one behind.
    pub fn index_arriving(&self, waypoint: usize) -> Option<usize> {
        let index = self.segments.partition_point(|segment| segment.to < waypoint);
        self.segments.get(index).is_some_and(|segment| segment.to == waypoint).then_some(index)
    }

    /// A segment as it runs on the cycle, or the version of it that stops at both ends where `stop` says so and there is one.
    pub fn version(&self, index: usize, stop: bool) -> &Arc<Segment> {
        self.stops[index].as_ref().filter(|_| stop).unwrap_or(&self.segments[index])
    }

    /// The fraction of a segment on the cycle that is nearest to fraction `u` of its version from stop to stop.
    pub fn nearest_on_cycle(&self, index: usize, u: f64) -> f64 {
        let [from, to] = self.segments[index].part;
        ((u - from) / (to - from)).clamp(0.0, 1.0)
    }

    /// Duration of the whole cycle, dwells included, s.
    pub fn duration(&self) -> f64 {
        match (self.starts.last(), self.segments.last()) {
            (Some(start), Some(segment)) => start + segment.duration() + segment.dwell,
            _ => self.first_dwell,
        }
    }

    /// When the cursor's instant is on the cycle, s.
    pub fn time(&self, cursor: Cursor) -> f64 {
        self.starts.get(cursor.segment).copied().unwrap_or(0.0) + cursor.time
    }

    /// The cursor of an instant on the cycle; times outside are brought to its ends.
    pub fn cursor(&self, time: f64) -> Cursor {
        let segment = self.starts.partition_point(|start| *start <= time).saturating_sub(1);
        let start = self.starts.get(segment).copied().unwrap_or(0.0);
        let lasts = self.segments.get(segment).map_or(0.0, |s| s.duration() + s.dwell);
        Cursor { segment, time: (time - start).clamp(0.0, lasts) }
    }
}

use unicode_width::UnicodeWidthStr;

use crate::checks::{Doubt, Verdict};
use crate::program::Recipe;
use crate::review::{Judged, doubt_text};

use super::filter::Shown;
use super::phrases::{events, how};

/// A row of the list.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Row {
    /// The waypoint that the program starts from.
    Start,
    /// The segment of that number, counted from 0, with the waypoint that it arrives at.
    Segment(usize),
    /// What happens at a waypoint, counted from 0.
    Events(usize),
    /// A doubt about a waypoint, by its place among all doubts.
    Doubt(usize),
    /// That the segment above is listed only because the cursor is on it; the filter hides it.
    Outside,
}

/// The list's rows in order, and how wide its columns must be.
#[derive(Debug, Clone, Default)]
pub struct Rows {
    rows: Vec<Row>,
    of_segment: Vec<usize>,
    /// Width of the longest name of a waypoint.
    pub name: usize,
    /// Width of the longest text on how a waypoint is arrived at.
    pub how: usize,
    /// Width of the longest verdict.
    pub verdict: usize,
}

impl Rows {
    /// The rows of a recipe, with doubts and verdicts once it is judged.
    pub fn of(recipe: &Recipe, judged: Option<&Judged>) -> Self {
        let mut list = Self { verdict: Verdict::Clear.word().len(), ..Self::default() };
        let doubts = judged.map_or(&[][..], |judged| &judged.survey.doubts);
        let mut by_waypoint: Vec<(usize, usize)> =
            doubts.iter().enumerate().map(|(index, doubt)| (waypoint_of(doubt), index)).collect();
        by_waypoint.sort_unstable();
        let mut doubted = by_waypoint.into_iter().peekable();
        for (index, waypoint) in recipe.waypoints.iter().enumerate() {
            if index == 0 {
                list.rows.push(Row::Start);
            } else if let Some(judged) = judged {
                // With a blend past a fly-by point two segments belong to one waypoint.
                let segments = &judged.plan.segments;
                let first = segments.partition_point(|segment| segment.to < index);
                for segment in first..segments.partition_point(|segment| segment.to <= index) {
                    list.of_segment.push(list.rows.len());
                    list.rows.push(Row::Segment(segment));
                }
            } else {
                list.of_segment.push(list.rows.len());
                list.rows.push(Row::Segment(index - 1));
            }
            if !events(recipe, index).is_empty() {
                list.rows.push(Row::Events(index));
            }
            while let Some((_, doubt)) = doubted.next_if(|(at, _)| *at <= index) {
                list.rows.push(Row::Doubt(doubt));
            }
            list.name = list.name.max(waypoint.name.width());
            list.how = list.how.max(how(recipe, index).width());
        }
        if let Some(judged) = judged {
            list.verdict = judged.survey.segments.iter().map(|survey| survey.verdict.word().len()).fold(list.verdict, usize::max);
        }
        list
    }

    /// The rows that a filter leaves, columns as wide as before. The segment that the cursor is on always stands there, so that nobody
    /// edits what they don't see.
    pub fn narrowed(&self, judged: &Judged, shown: &Shown, here: usize) -> Self {
        let mut list = Self { rows: Vec::new(), of_segment: vec![0; self.of_segment.len()], ..*self };
        for row in &self.rows {
            let is_shown = match row {
                Row::Start => shown.has_waypoint(0),
                Row::Segment(segment) => shown.has(*segment) || *segment == here,
                Row::Events(waypoint) => shown.has_waypoint(*waypoint),
                Row::Doubt(doubt) => judged.survey.doubts.get(*doubt).is_some_and(|doubt| shown.has_waypoint(waypoint_of(doubt))),
                Row::Outside => false,
            };
            if let Row::Segment(segment) = row {
                list.of_segment[*segment] = list.rows.len();
            }
            if is_shown {
                list.rows.push(*row);
            }
            if *row == Row::Segment(here) && !shown.has(here) {
                list.rows.push(Row::Outside);
            }
        }
        list
    }

    /// Whether there are none.
    pub fn is_empty(&self) -> bool {
        self.rows.is_empty()
    }

    /// How many there are.
    pub fn len(&self) -> usize {
        self.rows.len()
    }

    /// The rows that stand in a list of `height` rows, so that a segment is among them, and the first one's place.
    pub fn around(&self, segment: usize, height: usize) -> (usize, &[Row]) {
        let row = self.of_segment.get(segment).copied().unwrap_or(0);
        let first = row.saturating_sub(height / 2).min(self.rows.len().saturating_sub(height));
        (first, &self.rows[first..(first + height).min(self.rows.len())])
    }
}

fn waypoint_of(doubt: &Doubt) -> usize {
    doubt.waypoint().unwrap_or(0)
}

/// A doubt in words.
pub fn doubt_words(judged: &Judged, doubt: usize) -> String {
    judged.survey.doubts.get(doubt).map_or_else(String::new, |doubt| doubt_text(judged, doubt))
}

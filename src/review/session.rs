use crate::checks::Finding;
use crate::motion::Cursor;

use super::Judged;

/// A session is a judged recipe with the one cursor that every view of it shares, and the finding that is looked at.
#[derive(Debug, Clone)]
pub struct Session {
    judged: Judged,
    cursor: Cursor,
    finding: Option<usize>,
    /// Whether the waypoint that the program starts from is meant, not the segment that leaves it.
    on_start: bool,
}

/// Steps from one end of a segment to the other.
const STEPS: f64 = 48.0;
/// The longest step, s: a segment of a minute is still walked in steps that the eye can follow.
const LONGEST_STEP: f64 = 0.25;
/// The shortest step, s.
const SHORTEST_STEP: f64 = 0.002;

impl Session {
    /// Opens a judged recipe on its worst finding; without findings on its first segment, where that is nearest to its reserve.
    pub fn open(judged: Judged) -> Self {
        let mut session = Self { judged, cursor: Cursor { segment: 0, time: 0.0 }, finding: None, on_start: false };
        if !session.go_to_worst() {
            session.go_to_segment(0);
        }
        session
    }

    /// The segment of a newer judgement that arrives at the waypoint of the same name as the cursor's does.
    fn place_in(&self, newer: &Judged) -> Option<usize> {
        let segment = self.judged.plan.segments.get(self.cursor.segment)?;
        let waypoint = newer.recipe.waypoint_named(&self.judged.recipe.waypoints[segment.to].name)?;
        let index = newer.plan.index_arriving(waypoint)?;
        let blend = newer.plan.segments.get(index + 1).is_some_and(|next| next.blend && segment.blend);
        Some(index + usize::from(blend))
    }

    /// Takes over a newer judgement. The cursor stays on its segment at the same share of its time, and on its finding if there
    /// still is one of that check and joint.
    pub fn renew(&mut self, judged: Judged) {
        let before = self.finding().copied();
        let share = self.cursor.time / self.lasts(self.cursor.segment);
        let segment = self.place_in(&judged).unwrap_or(self.cursor.segment);
        self.judged = judged;
        let segment = segment.min(self.segments().saturating_sub(1));
        let time = if share.is_finite() { share * self.lasts(segment) } else { 0.0 };
        self.cursor = Cursor { segment, time };
        if self.on_start {
            self.go_to_start();
        }
        self.finding = before
            .and_then(|old| {
                let same = |new: &Finding| new.segment == segment && new.check == old.check && new.joint == old.joint;
                self.judged.survey.findings.iter().position(same)
            })
            .or_else(|| self.worst_of(segment));
    }

    /// The judged recipe.
    pub fn judged(&self) -> &Judged {
        &self.judged
    }

    /// The cursor.
    pub fn cursor(&self) -> Cursor {
        self.cursor
    }

    /// When the cursor is on the cycle, s.
    pub fn time(&self) -> f64 {
        self.judged.plan.time(self.cursor)
    }

    /// The finding that is looked at; `None` on a segment that has none.
    pub fn finding(&self) -> Option<&Finding> {
        self.judged.survey.findings.get(self.finding?)
    }

    /// Which finding is looked at, counted from 1, the worst first.
    pub fn finding_number(&self) -> Option<usize> {
        self.finding.map(|index| index + 1)
    }

    /// How many segments there are.
    pub fn segments(&self) -> usize {
        self.judged.plan.segments.len()
    }

    /// How long a segment lasts, its dwell included, s; 0 for one that is not there.
    pub fn lasts(&self, segment: usize) -> f64 {
        self.judged.plan.segments.get(segment).map_or(0.0, |s| s.duration() + s.dwell)
    }

    /// Goes to the worst instant of the worst finding; `false` if there is none.
    pub fn go_to_worst(&mut self) -> bool {
        self.go_to_worst_among(|_| true)
    }

    /// The same among the findings on segments that are meant.
    pub fn go_to_worst_among(&mut self, meant: impl Fn(usize) -> bool) -> bool {
        let found = self.judged.survey.findings.iter().position(|finding| meant(finding.segment));
        found.is_some_and(|index| self.go_to_finding(index))
    }

    /// Goes to the next finding, from the last on to the worst; `false` if there is none.
    pub fn go_to_next_finding(&mut self) -> bool {
        self.go_to_next_finding_among(|_| true)
    }

    /// The same among the findings on segments that are meant.
    pub fn go_to_next_finding_among(&mut self, meant: impl Fn(usize) -> bool) -> bool {
        let first = self.finding.map_or(0, |index| index + 1);
        self.go_to_first_of(|on, count| (first + on) % count, meant)
    }

    /// Goes to the finding before, from the worst on to the last; `false` if there is none.
    pub fn go_to_previous_finding(&mut self) -> bool {
        self.go_to_previous_finding_among(|_| true)
    }

    /// The same among the findings on segments that are meant.
    pub fn go_to_previous_finding_among(&mut self, meant: impl Fn(usize) -> bool) -> bool {
        let behind = self.finding.unwrap_or(1);
        self.go_to_first_of(|on, count| (behind + 2 * count - 1 - on) % count, meant)
    }

    /// Goes to the first finding on a segment that is meant, in the order in which `nth` numbers them.
    fn go_to_first_of(&mut self, nth: impl Fn(usize, usize) -> usize, meant: impl Fn(usize) -> bool) -> bool {
        let findings = &self.judged.survey.findings;
        let found = (0..findings.len()).map(|on| nth(on, findings.len())).find(|&index| meant(findings[index].segment));
        found.is_some_and(|index| self.go_to_finding(index))
    }

    fn go_to_finding(&mut self, index: usize) -> bool {
        let Some(finding) = self.judged.survey.findings.get(index) else { return false };
        // A segment without motion has no times to speak of.
        let time = Some(self.judged.on_cycle(finding, finding.worst()).time).filter(|time| time.is_finite()).unwrap_or(0.0);
        self.on_start = false;
        self.cursor = Cursor { segment: finding.segment, time };
        self.finding = Some(index);
        true
    }

    /// Goes to a segment (counted from 0; one past the last means the last): to its worst finding, else where it is nearest to its
    /// reserve.
    pub fn go_to_segment(&mut self, segment: usize) {
        let segment = segment.min(self.segments().saturating_sub(1));
        if let Some(index) = self.worst_of(segment) {
            self.go_to_finding(index);
            return;
        }
        let nearest = self.judged.survey.segments.get(segment).and_then(|survey| survey.nearest());
        self.on_start = false;
        self.cursor = Cursor { segment, time: nearest.map_or(0.0, |(_, peak)| peak.at.time) };
        self.finding = None;
    }

    /// Goes to the segment that arrives at a waypoint (counted from 0); the first waypoint is the cycle's start.
    pub fn go_to_waypoint(&mut self, waypoint: usize) {
        match self.judged.plan.index_arriving(waypoint) {
            Some(segment) => self.go_to_segment(segment),
            None => self.go_to_time(0.0),
        }
    }

    /// Goes to the waypoint that the program starts from, which no segment arrives at.
    pub fn go_to_start(&mut self) {
        self.go_to_time(0.0);
        self.on_start = true;
    }

    /// Whether the waypoint that the program starts from is meant, not the segment that leaves it.
    pub fn is_on_start(&self) -> bool {
        self.on_start
    }

    /// The waypoint that the cursor's segment arrives at or passes, counted from 0; 0 itself after [`Session::go_to_start`].
    pub fn waypoint(&self) -> usize {
        if self.on_start {
            return 0;
        }
        self.judged.plan.segments.get(self.cursor.segment).map_or(0, |segment| segment.to)
    }

    /// Goes some segments on (or back).
    pub fn go_by_segments(&mut self, count: isize) {
        let to = self.cursor.segment.saturating_add_signed(count);
        self.go_to_segment(to);
    }

    /// Goes to a time on the cycle, s; times outside are brought to its ends.
    pub fn go_to_time(&mut self, time: f64) {
        self.place(self.judged.plan.cursor(time));
    }

    /// Goes to a time of the cursor's own segment, s; times outside are brought to its ends.
    pub fn go_to_time_in_segment(&mut self, time: f64) {
        let segment = self.cursor.segment;
        self.place(Cursor { segment, time: time.clamp(0.0, self.lasts(segment)) });
    }

    /// Goes some steps on in time (or back). A step stops at a segment's end, where a load may be taken, before it goes on.
    pub fn step(&mut self, steps: isize) {
        let Cursor { segment, time } = self.cursor;
        let lasts = self.lasts(segment);
        let length = (lasts / STEPS).clamp(SHORTEST_STEP, LONGEST_STEP) * steps as f64;
        if steps > 0 && time >= lasts && segment + 1 < self.segments() {
            self.place(Cursor { segment: segment + 1, time: 0.0 });
        } else if steps < 0 && time <= 0.0 && segment > 0 {
            self.place(Cursor { segment: segment - 1, time: self.lasts(segment - 1) });
        } else {
            self.go_to_time_in_segment(time + length);
        }
    }

    fn place(&mut self, cursor: Cursor) {
        if cursor.segment != self.cursor.segment {
            self.finding = self.worst_of(cursor.segment);
        }
        self.cursor = cursor;
        self.on_start = false;
    }

    fn worst_of(&self, segment: usize) -> Option<usize> {
        self.judged.survey.findings.iter().position(|finding| finding.segment == segment)
    }
}

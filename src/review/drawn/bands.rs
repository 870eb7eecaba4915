use crate::checks::{Check, Finding, Kind, Place, Verdict};
use crate::review::{Judged, check_brief};

/// Bands are the ribbon's cells: for every check the worst verdict inside each cell's span of time.
#[derive(Debug, Clone, Default)]
pub struct Bands {
    /// One row a check that is judged somewhere, in the order of the checks.
    pub rows: Vec<Band>,
    /// Where segments begin and end, in cells, in order: first cell, and the one behind the last.
    pub segments: Vec<[usize; 2]>,
    width: usize,
}

/// A band is one row of the ribbon.
#[derive(Debug, Clone)]
pub struct Band {
    /// Which check.
    pub check: Check,
    /// Its worst verdict.
    pub worst: Verdict,
    /// The cells; `None` where it is not judged.
    pub cells: Vec<Option<Verdict>>,
}

impl Bands {
    /// The bands of a judged recipe in `width` cells.
    pub fn of(judged: &Judged, width: usize) -> Self {
        let scale = Scale { width, per_second: width as f64 / judged.plan.duration().max(1e-9) };
        let mut bands = Self { rows: Vec::new(), width, segments: Vec::new() };
        if width == 0 {
            return bands;
        }
        for (segment, start) in judged.plan.segments.iter().zip(&judged.plan.starts) {
            bands.segments.push([scale.border(*start), scale.border(start + segment.duration() + segment.dwell)]);
        }
        for check in Check::ALL {
            let mut band = Band { check, worst: Verdict::Clear, cells: vec![None; width] };
            for survey in &judged.survey.segments {
                let result = survey.check(check);
                band.worst = band.worst.max(result.verdict);
                if result.judged {
                    let [first, end] = bands.segments[survey.segment];
                    band.cells[first.min(width - 1)..end.max(first + 1).min(width)].iter_mut().for_each(|cell| {
                        cell.get_or_insert(Verdict::Clear);
                    });
                }
            }
            for finding in judged.survey.findings.iter().filter(|finding| finding.check == check) {
                paint(&mut band.cells, &scale, judged, finding);
            }
            // That a motion exists goes without saying as long as it does.
            if check != Check::Reach || band.worst != Verdict::Clear {
                bands.rows.push(band);
            }
        }
        bands.rows.retain(|band| band.cells.iter().any(Option::is_some));
        bands
    }

    /// The rows for a ribbon of `count` rows, with their words: all if they fit, else the worst ones, in the order of the checks,
    /// and one for all the others together.
    pub fn in_rows(&self, count: usize) -> Vec<(&'static str, Vec<Option<Verdict>>)> {
        let whole = |row: &usize| (check_brief(self.rows[*row].check), self.rows[*row].cells.clone());
        let mut order: Vec<usize> = (0..self.rows.len()).collect();
        if count >= order.len() {
            return order.iter().map(whole).collect();
        }
        order.sort_by_key(|row| std::cmp::Reverse(self.rows[*row].worst));
        let others = order.split_off(count.saturating_sub(1));
        order.sort_unstable();
        let mut rows: Vec<_> = order.iter().map(whole).collect();
        let mut rest = vec![None; self.width];
        for row in others {
            rest.iter_mut().zip(&self.rows[row].cells).for_each(|(all, cell): (&mut Option<Verdict>, _)| *all = (*all).max(*cell));
        }
        rows.push((if rows.is_empty() { "all checks" } else { "all others" }, rest));
        rows.truncate(count);
        rows
    }

    /// How many rows have something to tell.
    pub fn flagged(&self) -> usize {
        self.rows.iter().filter(|band| band.worst != Verdict::Clear).count()
    }
}

#[derive(Debug)]
struct Scale {
    width: usize,
    per_second: f64,
}

impl Scale {
    /// The cell border nearest to a time.
    fn border(&self, time: f64) -> usize {
        (time * self.per_second).round().clamp(0.0, self.width as f64) as usize
    }

    /// The cell in which a time is.
    fn cell(&self, time: f64) -> usize {
        ((time * self.per_second).max(0.0) as usize).min(self.width - 1)
    }
}

/// Which cell of a ribbon of `width` cells a time on the cycle is in.
pub fn cell_of(judged: &Judged, time: f64, width: usize) -> usize {
    Scale { width: width.max(1), per_second: width as f64 / judged.plan.duration().max(1e-9) }.cell(time)
}

fn paint(cells: &mut [Option<Verdict>], scale: &Scale, judged: &Judged, finding: &Finding) {
    let start = judged.plan.starts[finding.segment];
    let segment = &judged.plan.segments[finding.segment];
    let lasts = segment.duration() + segment.dwell;
    // What is found at a segment's very end belongs to the last cell that is its own.
    let end = scale.cell((start + lasts).next_down());
    let on_cycle = |place: Place| judged.on_cycle(finding, place).time;
    let mut fill = |from: f64, to: f64, verdict: Verdict| {
        let first = scale.cell(start + from).min(end);
        let last = scale.cell((start + to).next_down()).clamp(first, end.max(first));
        cells[first..=last].iter_mut().for_each(|cell| *cell = (*cell).max(Some(verdict)));
    };
    match &finding.kind {
        Kind::Excess(excess) => {
            let outside = if excess.over.is_some() { Verdict::Tight } else { finding.verdict };
            fill(on_cycle(finding.from), on_cycle(finding.to), outside);
            if let Some([from, to]) = excess.over {
                fill(on_cycle(from), on_cycle(to), finding.verdict);
            }
            fill(on_cycle(excess.worst), on_cycle(excess.worst), finding.verdict);
        }
        // From where it could not be followed on there is no motion.
        Kind::NoPath(_) => fill(Some(on_cycle(finding.to)).filter(|time| time.is_finite()).unwrap_or(0.0), lasts, finding.verdict),
        Kind::Unproved(_) => fill(on_cycle(finding.from), on_cycle(finding.to), finding.verdict),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_time_on_a_border_belongs_to_the_cell_behind_it() {
        let scale = Scale { width: 10, per_second: 1.0 };
        assert_eq!((scale.cell(3.0), scale.cell(2.999), scale.cell(99.0)), (3, 2, 9));
        assert_eq!((scale.border(2.6), scale.border(2.4)), (3, 2));
    }
}

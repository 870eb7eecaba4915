use ratatui::layout::Rect;

use super::app::Pane;

/// A layout says where the panes stand. A pane that does not fit has no area.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct Layout {
    /// One sentence on the whole.
    pub headline: Rect,
    /// Verdicts along the cycle.
    pub ribbon: Rect,
    /// Waypoints and segments.
    pub list: Rect,
    /// The explanation.
    pub why: Rect,
    /// The joints at the cursor.
    pub joints: Rect,
    /// The chart.
    pub chart: Rect,
    /// The arm.
    pub arm: Rect,
    /// The line between the left and the right panes.
    pub post: Rect,
    /// Keys, messages and questions.
    pub footer: Rect,
}

/// Columns in front of the ribbon's cells.
pub const RIBBON_LABEL: u16 = 11;
/// From this width on the joints, and a list with its figures, stand beside something else.
const BESIDE: u16 = 76;
/// From this width on the arm is shown too.
const WITH_ARM: u16 = 100;
/// Columns that the joints need.
const JOINTS_WIDE: u16 = 47;

/// How many rows the panes would like.
#[derive(Debug, Clone, Copy, Default)]
pub struct Wants {
    /// Joints of the arm.
    pub joints: usize,
    /// Checks in the ribbon.
    pub bands: usize,
    /// Of them, those that have something to tell.
    pub flagged: usize,
    /// Rows of the list.
    pub rows: usize,
}

impl Layout {
    /// The layout of a screen: `pane` is the one worked in, which stays where only one fits.
    pub fn of(area: Rect, pane: Pane, wants: Wants) -> Self {
        let mut layout = Self::default();
        let small = |count: usize, most: u16| most.min(count.min(usize::from(most)) as u16);
        let (joints, bands, flagged) = (small(wants.joints, 9), small(wants.bands, 8), small(wants.flagged, 8));
        let mut rest = area;
        layout.headline = take_top(&mut rest, u16::from(area.height >= 1) + u16::from(area.width < 72 && area.height >= 10));
        layout.footer = take_bottom(&mut rest, u16::from(area.height >= 3));
        let shown = match area.height {
            0..6 => 0,
            6..18 => 2,
            18..32 => 1 + bands.min((flagged + 1).clamp(3, 4)),
            _ => 1 + bands,
        };
        layout.ribbon = take_top(&mut rest, shown);
        if rest.width >= WITH_ARM && rest.height >= 24 {
            layout.all(rest, joints, small(wants.rows, rest.height));
        } else if rest.width >= BESIDE && rest.height >= joints + 6 {
            layout.four(rest, joints);
        } else {
            layout.one(rest, pane);
        }
        layout
    }

    /// How many cells the ribbon has on a screen.
    pub fn ribbon_cells(area: Rect) -> usize {
        usize::from(area.width.saturating_sub(label_width(area.width)))
    }

    fn all(&mut self, rest: Rect, joints: u16, rows: u16) {
        let (mut left, mut right) = self.sides(rest, (rest.width / 2).max(JOINTS_WIDE));
        // What a short list leaves goes to the chart.
        let spare = rest.height.saturating_sub(joints + 2).saturating_sub(rows + 1);
        self.chart = take_bottom(&mut left, (rest.height / 4).clamp(7, 16).max(spare));
        self.joints = take_bottom(&mut left, joints + 2);
        self.list = left;
        self.arm = take_top(&mut right, (rest.height / 2).max(12));
        self.why = right;
    }

    fn four(&mut self, rest: Rect, joints: u16) {
        let (mut left, mut right) = self.sides(rest, (rest.width * 3 / 5).clamp(JOINTS_WIDE, 72).min(rest.width - 30));
        let low = (joints + 2).max(rest.height * 2 / 5);
        self.joints = take_bottom(&mut left, low);
        self.list = left;
        self.chart = take_bottom(&mut right, low);
        self.why = right;
    }

    fn one(&mut self, rest: Rect, pane: Pane) {
        match pane {
            Pane::List => self.list = rest,
            Pane::Why => self.why = rest,
            Pane::Joints => self.joints = rest,
            Pane::Chart => self.chart = rest,
        }
    }

    fn sides(&mut self, rest: Rect, left: u16) -> (Rect, Rect) {
        self.post = Rect { x: rest.x + left, width: 1, ..rest };
        let right = Rect { x: rest.x + left + 1, width: rest.width - left - 1, ..rest };
        (Rect { width: left, ..rest }, right)
    }
}

/// Columns in front of the ribbon's cells on a screen of some width; none where there is hardly any room.
pub fn label_width(width: u16) -> u16 {
    if width >= 40 { RIBBON_LABEL } else { 0 }
}

fn take_top(rest: &mut Rect, height: u16) -> Rect {
    let height = height.min(rest.height);
    let taken = Rect { height, ..*rest };
    *rest = Rect { y: rest.y + height, height: rest.height - height, ..*rest };
    taken
}

fn take_bottom(rest: &mut Rect, height: u16) -> Rect {
    let height = height.min(rest.height);
    *rest = Rect { height: rest.height - height, ..*rest };
    Rect { y: rest.y + rest.height, height, ..*rest }
}

#[cfg(test)]
mod tests {
    use super::*;

    const WANTS: Wants = Wants { joints: 6, bands: 7, flagged: 2, rows: 18 };

    #[test]
    fn everything_but_the_arm_stands_in_eighty_by_twentyfour() {
        let layout = Layout::of(Rect::new(0, 0, 80, 24), Pane::List, WANTS);
        for pane in [layout.headline, layout.ribbon, layout.list, layout.why, layout.joints, layout.chart, layout.footer] {
            assert!(!pane.is_empty(), "{layout:?}");
        }
        assert!(layout.arm.is_empty());
        assert!(!Layout::of(Rect::new(0, 0, 120, 40), Pane::List, WANTS).arm.is_empty());
    }

    #[test]
    fn panes_never_leave_the_screen_or_lie_on_each_other() {
        let most = Wants { joints: 9, bands: 8, flagged: 8, rows: 10_000 };
        for width in (0..220).step_by(3) {
            for height in 0..70 {
                let area = Rect::new(0, 0, width, height);
                let l = Layout::of(area, Pane::Why, most);
                let panes = [l.headline, l.ribbon, l.list, l.why, l.joints, l.chart, l.arm, l.post, l.footer];
                for (i, pane) in panes.iter().enumerate().filter(|(_, pane)| !pane.is_empty()) {
                    assert_eq!(pane.intersection(area), *pane, "{width}x{height}");
                    assert!(panes[..i].iter().all(|other| other.intersection(*pane).is_empty()), "{width}x{height}");
                }
            }
        }
    }
}

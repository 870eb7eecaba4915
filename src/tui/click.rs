use ratatui::layout::{Position, Rect};

use super::app::{App, Pane};
use super::layout::label_width;
use super::rows::Row;
use super::update::{follow_finding, layout};

/// Selects what stands where somebody clicked.
pub(super) fn click(app: &mut App, column: u16, row: u16) {
    let (at, layout) = (Position::new(column, row), layout(app));
    if layout.ribbon.contains(at) {
        let label = label_width(app.area.width);
        let cells = Rect { x: layout.ribbon.x + label, width: layout.ribbon.width - label, ..layout.ribbon };
        if cells.contains(at)
            && let Some(session) = &mut app.session
        {
            let share = (f64::from(at.x - cells.x) + 0.5) / f64::from(cells.width);
            session.go_to_time(share * session.judged().plan.duration());
        }
        return;
    }
    let panes = [(layout.list, Pane::List), (layout.why, Pane::Why), (layout.joints, Pane::Joints), (layout.chart, Pane::Chart)];
    let Some((area, pane)) = panes.into_iter().find(|(area, _)| area.contains(at)) else { return };
    app.pane = pane;
    let Some(line) = (at.y - area.y).checked_sub(1).map(usize::from) else { return };
    match pane {
        Pane::List => {
            let (_, rows) = app.scene.listed().around(app.segment(), usize::from(area.height) - 1);
            if let (Some(Row::Start), Some(session)) = (rows.get(line), &mut app.session) {
                session.go_to_start();
                follow_finding(app);
                return;
            }
            let segment = match rows.get(line) {
                Some(Row::Segment(segment)) => Some(*segment),
                Some(Row::Events(waypoint)) => app.judged().and_then(|judged| judged.plan.index_arriving(*waypoint)),
                _ => None,
            };
            if let (Some(segment), Some(session)) = (segment, &mut app.session) {
                session.go_to_segment(segment);
                follow_finding(app);
            }
        }
        Pane::Joints if line < app.arm.len() => app.joint = line,
        _ => {}
    }
}

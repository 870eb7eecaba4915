use unicode_width::UnicodeWidthStr;

use crate::checks::{Check, Verdict};
use crate::motion::Segment;
use crate::program::{Arrive, PathSpeed};
use crate::review::{Judged, check_words, explain};
use crate::units::{Measure, Share};

/// Names are not cut shorter than this.
const SHORTEST_NAME: usize = 8;

/// Columns that a narrow table leaves out, those that go first in front: what is asked, then how; the room goes before either.
const LEFT_OUT: [&[usize]; 3] = [&[], &[3], &[2, 3]];

/// The segments in a table, a line each: number, name of the waypoint it arrives at, kind, what is asked, verdict, and what is
/// nearest to its reserve. Where lines would be longer than `width`, names are cut, then columns are left out.
pub(super) fn table(judged: &Judged, width: usize) -> String {
    let mut rows = vec![["#", "to", "how", "asked", "verdict", "nearest to its reserve"].map(str::to_owned)];
    rows.extend(judged.plan.segments.iter().enumerate().map(|(index, segment)| row(judged, index, segment)));
    let whole = widths(&rows);
    let others = |left_out: &[usize], widths: &[usize; 6]| {
        let kept = (0..6).filter(|column| *column != 1 && !left_out.contains(column));
        kept.map(|column| widths[column] + 1).sum::<usize>()
    };
    if others(&[], &whole) + SHORTEST_NAME > width {
        for row in &mut rows {
            if let Some((_, brief)) = row[5].split_once(", ").filter(|(room, _)| room.starts_with("room ")) {
                row[5] = brief.replace(", asks ", " ");
            }
        }
        "nearest".clone_into(&mut rows[0][5]);
    }
    let mut widths = widths(&rows);
    let fits = |left_out: &&[usize]| others(left_out, &widths) + SHORTEST_NAME <= width;
    let left_out = LEFT_OUT.into_iter().find(fits).unwrap_or(LEFT_OUT[2]);
    widths[1] = widths[1].min(width.saturating_sub(others(left_out, &widths)).max(SHORTEST_NAME));
    let lines = rows.iter().map(|row| {
        let cells =
            row.iter().zip(widths).enumerate().filter(|(column, _)| !left_out.contains(column)).map(|(column, (cell, columns))| {
                let cell = cut(cell, columns);
                let gap = " ".repeat(columns - cell.width());
                if column == 0 || column == 3 { gap + &cell } else { cell + &gap }
            });
        cut(cells.collect::<Vec<_>>().join(" ").trim_end(), width) + "\n"
    });
    lines.collect()
}

fn widths(rows: &[[String; 6]]) -> [usize; 6] {
    [0, 1, 2, 3, 4, 5].map(|column| rows.iter().map(|row| row[column].width()).max().unwrap_or(0))
}

fn row(judged: &Judged, index: usize, segment: &Segment) -> [String; 6] {
    let waypoint = &judged.recipe.waypoints[segment.to];
    let how = if segment.blend { "fly-by" } else { waypoint.arrive.as_ref().map_or("joint", |arrive| arrive.word()) };
    [
        segment.number().to_string(),
        waypoint.name.clone(),
        how.to_owned(),
        asked(judged, segment),
        judged.survey.segments[index].verdict.word().to_owned(),
        nearest(judged, index),
    ]
}

/// The speed or share that a segment was given.
fn asked(judged: &Judged, segment: &Segment) -> String {
    if segment.blend {
        return judged.recipe.waypoints[segment.to].fly_by.map_or(String::new(), |radius| radius.to_string());
    }
    let usual = &judged.recipe.usual;
    let path = |speed: &PathSpeed| match speed.speed.or(usual.speed) {
        Some(given) => given.to_string(),
        None => speed.turn_speed.unwrap_or(usual.turn_speed).to_string(),
    };
    match &judged.recipe.waypoints[segment.to].arrive {
        Some(Arrive::Line(speed) | Arrive::Arc { speed, .. }) => path(speed),
        _ => segment.shares.map_or(String::new(), |[share, _]| Share::fraction(share).to_string()),
    }
}

/// `room -54 %, rate J4, asks 154 %`.
fn nearest(judged: &Judged, index: usize) -> String {
    let survey = &judged.survey.segments[index];
    if let Some(finding) =
        survey.findings.first().filter(|finding| finding.check == Check::Reach || finding.verdict == Verdict::Unproven)
    {
        let title = explain(judged, finding).title;
        return title.split_once(": ").map_or(title.clone(), |(_, rest)| rest.to_owned());
    }
    let Some((result, peak)) = survey.nearest() else { return "no motion".to_owned() };
    let joint = peak.joint.map(|j| &judged.arm.joints()[j]);
    let check = if result.check == Check::Accel { "accel" } else { check_words(result.check) };
    let name = joint.map_or(check.to_owned(), |joint| format!("{check} {}", joint.name));
    let figure = match (result.check, joint) {
        (Check::Range, Some(joint)) => {
            format!(", {} to end", Measure::si(joint.range.to_end(peak.demand.si), peak.demand.of).text_down(1))
        }
        (Check::Singular | Check::SpeedLeft, _) => String::new(),
        _ => format!(", asks {}", peak.room.asks()),
    };
    format!("room {}, {name}{figure}", peak.room)
}

/// A name cut to a number of columns, its end marked.
pub(super) fn cut(text: &str, columns: usize) -> String {
    if text.width() <= columns {
        return text.to_owned();
    }
    let mut kept = String::new();
    for letter in text.chars() {
        if format!("{kept}{letter}").width() + 2 > columns {
            break;
        }
        kept.push(letter);
    }
    kept + ".."
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn long_names_are_cut_to_columns() {
        assert_eq!(cut("above rack", 10), "above rack");
        assert_eq!(cut("above the rack", 10), "above th..");
        assert_eq!(cut("棚の上の部品", 8), "棚の上..");
    }
}

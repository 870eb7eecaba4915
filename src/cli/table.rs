use unicode_width::UnicodeWidthStr;

use crate::review::{Judged, SEGMENT_HEADS, segment_row};

/// Names are not cut shorter than this.
const SHORTEST_NAME: usize = 8;

/// Columns that a narrow table leaves out, those that go first in front: what is asked, then how; the room goes before either.
const LEFT_OUT: [&[usize]; 3] = [&[], &[3], &[2, 3]];

/// The segments in a table, a line each: number, name of the waypoint it arrives at, kind, what is asked, verdict, and what is
/// nearest to its reserve. Where lines would be longer than `width`, names are cut, then columns are left out.
pub(super) fn table(judged: &Judged, width: usize) -> String {
    let mut rows = vec![SEGMENT_HEADS.map(str::to_owned)];
    rows.extend((0..judged.plan.segments.len()).map(|index| segment_row(judged, index)));
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

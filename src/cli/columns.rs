use unicode_width::UnicodeWidthStr;

use super::table::cut;

/// Which side of its column a cell stands at.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Stands {
    /// At its beginning: words.
    First,
    /// At its end: figures.
    Last,
}

/// A cell is not cut shorter than this.
const SHORTEST: usize = 8;

/// Rows in columns with a gap between them, a line each. Where a line would be longer than `width`, the cells of column `cut_at`
/// are cut.
pub(super) fn columns<const N: usize>(rows: &[[String; N]], stands: [Stands; N], cut_at: usize, width: usize) -> String {
    let mut widths: [usize; N] = std::array::from_fn(|column| rows.iter().map(|row| row[column].width()).max().unwrap_or(0));
    let others = widths.iter().sum::<usize>() - widths[cut_at] + N - 1;
    widths[cut_at] = widths[cut_at].min(width.saturating_sub(others).max(SHORTEST));
    let line = |row: &[String; N]| {
        let cells = row.iter().zip(widths).zip(stands).map(|((cell, columns), stands)| {
            let cell = cut(cell, columns);
            let gap = " ".repeat(columns - cell.width());
            if stands == Stands::Last { gap + &cell } else { cell + &gap }
        });
        cells.collect::<Vec<_>>().join(" ").trim_end().to_owned() + "\n"
    };
    rows.iter().map(line).collect()
}

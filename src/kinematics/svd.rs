use crate::arm::MAX_JOINTS;

use super::jacobian::Scaled;
use super::singular::orthogonalise;

/// The singular value decomposition of a scaled Jacobian, the largest value first.
#[derive(Debug, Clone, Copy)]
pub struct Svd {
    /// How many values.
    pub count: usize,
    /// Singular values.
    pub values: [f64; 6],
    /// For each value the unit direction of the task (in task rows) that it stretches to.
    pub task: [[f64; 6]; 6],
    /// For each value the unit combination of joint rates that yields it.
    pub joints: [[f64; MAX_JOINTS]; 6],
}

/// Decomposes by one-sided Jacobi rotations of the rows (needs `rows <= columns`) or of the columns.
pub fn svd(scaled: &Scaled) -> Svd {
    let wide = scaled.rows <= scaled.columns;
    let count = scaled.rows.min(scaled.columns);
    let mut vectors = [[0.0; MAX_JOINTS]; 6];
    let mut turns = [[0.0; 6]; 6];
    for i in 0..count {
        turns[i][i] = 1.0;
        for k in 0..scaled.rows.max(scaled.columns) {
            vectors[i][k] = if wide { scaled.entries[i][k] } else { scaled.entries[k][i] };
        }
    }
    orthogonalise(&mut vectors[..count], |i, j, c, s| {
        for k in 0..count {
            let (x, y) = (turns[i][k], turns[j][k]);
            turns[i][k] = c * x - s * y;
            turns[j][k] = s * x + c * y;
        }
    });
    let norms: Vec<f64> = vectors[..count].iter().map(|v| v.iter().map(|x| x * x).sum::<f64>().sqrt()).collect();
    let mut order: Vec<usize> = (0..count).collect();
    order.sort_by(|&a, &b| norms[b].total_cmp(&norms[a]));
    let mut out = Svd { count, values: [0.0; 6], task: [[0.0; 6]; 6], joints: [[0.0; MAX_JOINTS]; 6] };
    for (slot, &i) in order.iter().enumerate() {
        out.values[slot] = norms[i];
        let unit = |x: f64| if norms[i] > 0.0 { x / norms[i] } else { 0.0 };
        if wide {
            out.task[slot][..count].copy_from_slice(&turns[i][..count]);
            out.joints[slot] = vectors[i].map(unit);
        } else {
            out.joints[slot][..count].copy_from_slice(&turns[i][..count]);
            for k in 0..scaled.rows {
                out.task[slot][k] = unit(vectors[i][k]);
            }
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_parts_make_the_whole_again() {
        for (rows, columns) in [(6, 6), (3, 5), (6, 8), (4, 3)] {
            let mut a = Scaled { rows, columns, entries: [[0.0; MAX_JOINTS]; 6] };
            for i in 0..rows {
                for j in 0..columns {
                    a.entries[i][j] = ((i * 11 + j * 17) as f64).sin();
                }
            }
            let parts = svd(&a);
            for i in 0..rows {
                for j in 0..columns {
                    let sum: f64 = (0..parts.count).map(|k| parts.values[k] * parts.task[k][i] * parts.joints[k][j]).sum();
                    assert!((sum - a.entries[i][j]).abs() < 1e-13, "{rows}x{columns}");
                }
            }
        }
    }
}

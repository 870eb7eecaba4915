use crate::arm::{Chain, MAX_JOINTS, Task};
use crate::geometry::V3;

use super::Posture;

/// The geometric Jacobian of a point fixed to the last link, base axes: column j is what a unit rate of joint j does to it.
/// Rows 0 to 2: velocity, m/s per rad/s (m/s per m/s for a sliding joint); rows 3 to 5: turning rate, rad/s per rad/s.
#[derive(Debug, Clone, Copy)]
pub struct Jacobian {
    len: usize,
    columns: [[f64; 6]; MAX_JOINTS],
}

impl Jacobian {
    /// The Jacobian at `point` (base, m): `[z x (p - o); z]` for a revolute joint, `[z; 0]` for a prismatic one.
    #[inline]
    pub fn at(chain: &Chain, posture: &Posture, point: &V3) -> Self {
        let mut columns = [[0.0; 6]; MAX_JOINTS];
        for (j, column) in columns[..chain.len].iter_mut().enumerate() {
            let z = posture.axis(j);
            *column = if chain.turns[j] {
                let v = z.cross(&(point - posture.origin(j)));
                [v.x, v.y, v.z, z.x, z.y, z.z]
            } else {
                [z.x, z.y, z.z, 0.0, 0.0, 0.0]
            };
        }
        Self { len: chain.len, columns }
    }

    /// How many joints, so columns.
    pub fn len(&self) -> usize {
        self.len
    }

    /// Whether it has no columns.
    pub fn is_empty(&self) -> bool {
        self.len == 0
    }

    /// Its columns in joint order.
    pub fn columns(&self) -> &[[f64; 6]] {
        &self.columns[..self.len]
    }

    /// Twist (velocity over turning rate) that the joint rates `rates` yield.
    pub fn twist(&self, rates: &[f64]) -> [f64; 6] {
        let mut twist = [0.0; 6];
        for (column, rate) in self.columns().iter().zip(rates) {
            for (t, c) in twist.iter_mut().zip(column) {
                *t += c * rate;
            }
        }
        twist
    }

    /// The task's rows with translations divided by `length` (m), row by row: what singular values are taken of.
    #[inline]
    pub fn scaled_rows(&self, task: &Task, length: f64) -> Scaled {
        let rows = task.rows();
        let mut scaled = Scaled { rows: rows.len(), columns: self.len, entries: [[0.0; MAX_JOINTS]; 6] };
        for (entries, &row) in scaled.entries.iter_mut().zip(rows) {
            let scale = if row < 3 { 1.0 / length } else { 1.0 };
            for (entry, column) in entries.iter_mut().zip(self.columns()) {
                *entry = column[row] * scale;
            }
        }
        scaled
    }
}

/// A Jacobian made comparable: task rows only, translations divided by the characteristic length.
#[derive(Debug, Clone, Copy)]
pub struct Scaled {
    /// How many rows.
    pub rows: usize,
    /// How many columns.
    pub columns: usize,
    /// Entries, row by row.
    pub entries: [[f64; MAX_JOINTS]; 6],
}

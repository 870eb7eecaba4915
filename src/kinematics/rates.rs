use crate::arm::{Joint, MAX_JOINTS, Task};

use super::Jacobian;

/// The task's rows of the Jacobian with `null` rows below: for an arm with as many joints as its task has rows, the Jacobian
/// itself. Square, `n` x `n`.
#[inline]
pub fn stacked(jacobian: &Jacobian, task: &Task, null: &[[f64; MAX_JOINTS]]) -> [[f64; MAX_JOINTS]; MAX_JOINTS] {
    let mut rows = [[0.0; MAX_JOINTS]; MAX_JOINTS];
    for (j, column) in jacobian.columns().iter().enumerate() {
        for (slot, &row) in task.rows().iter().enumerate() {
            rows[slot][j] = column[row];
        }
    }
    let m = task.rows().len();
    for (slot, row) in null.iter().take(jacobian.len() - m).enumerate() {
        rows[m + slot] = *row;
    }
    rows
}

/// The rows that make a redundant arm's motion definite: joint rates that satisfy `row · q' = 0` for each of them are, among all
/// that yield one twist, those with the least sum of squared shares of the joints' rates. `n - m` rows of unit length.
pub fn null_rows(jacobian: &Jacobian, task: &Task, joints: &[Joint]) -> [[f64; MAX_JOINTS]; MAX_JOINTS] {
    let (n, m) = (jacobian.len(), task.rows().len());
    // Unit vectors that span the rows of J W, W the joints' rates; then more of them, square to all before: the null space.
    let mut basis = [[0.0; MAX_JOINTS]; MAX_JOINTS];
    let mut count = 0;
    let mut add = |mut vector: [f64; MAX_JOINTS], least: f64| {
        let before = norm(&vector);
        for _ in 0..2 {
            for row in &basis[..count] {
                let along: f64 = row.iter().zip(&vector).map(|(a, b)| a * b).sum();
                vector.iter_mut().zip(row).for_each(|(v, r)| *v -= along * r);
            }
        }
        let length = norm(&vector);
        if length > least * before && count < n {
            basis[count] = vector.map(|v| v / length);
            count += 1;
            return true;
        }
        false
    };
    for &row in task.rows() {
        let mut vector = [0.0; MAX_JOINTS];
        for (j, column) in jacobian.columns().iter().enumerate() {
            vector[j] = column[row] * joints[j].rate;
        }
        add(vector, DEPENDENT);
    }
    let mut null = [[0.0; MAX_JOINTS]; MAX_JOINTS];
    let mut found = 0;
    // Unit vectors in joint order; each adds what the ones before have left. One of them always leaves at least 1/sqrt(n).
    let floor = 0.9 / (n as f64).sqrt();
    for threshold in [floor, DEPENDENT] {
        for k in 0..n {
            let mut unit = [0.0; MAX_JOINTS];
            unit[k] = 1.0;
            if found < n - m && add(unit, threshold) {
                found += 1;
            }
        }
    }
    for (slot, vector) in null.iter_mut().zip(&basis[count - found..count]) {
        for j in 0..n {
            slot[j] = vector[j] / joints[j].rate;
        }
        let length = norm(slot);
        slot.iter_mut().for_each(|v| *v /= length);
    }
    null
}

/// A vector that keeps less than this share of its length counts as a combination of the others.
const DEPENDENT: f64 = 1e-7;

fn norm(vector: &[f64]) -> f64 {
    vector.iter().map(|v| v * v).sum::<f64>().sqrt()
}

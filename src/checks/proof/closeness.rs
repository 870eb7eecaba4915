use crate::arm::MAX_JOINTS;

use super::leaf::{Leaf, Middle};

/// What is taken off the Gram matrix for rounding, as a share of its trace.
const ROUNDING: f64 = 1e-12;

/// Whether the smallest singular value (task rows, translations at the TCP divided by the characteristic length) is proved to be
/// at least `least` over the whole stretch.
///
/// `J(s) = J + s J' + rest` with the rest's norm at most `rho`. `(J + sJ')ᵀ(J + sJ') >= JᵀJ + s (JᵀJ' + J'ᵀJ)`, which is affine in
/// s, so its least eigenvalue is concave and least at an end of the stretch; by Weyl's inequality the rest takes at most `rho`
/// off a singular value. Both ends are tested by Cholesky's decomposition. More columns than rows: `J Jᵀ`.
pub(super) fn keeps(middle: &Middle, leaf: &Leaf, least: f64) -> bool {
    let n = middle.arm.len();
    let task = middle.arm.task();
    let length = middle.arm.characteristic_length().m;
    let offset = middle.view.tcp_offset(&leaf.motion);
    let m = task.rows().len();
    let mut j0 = [[0.0; MAX_JOINTS]; 6];
    let mut j1 = [[0.0; MAX_JOINTS]; 6];
    let mut spread = 0.0;
    for j in 0..n {
        let column = middle.view.tcp_column(&leaf.motion, &offset, j);
        let axis = leaf.motion.z[j];
        let turns = middle.arm.chain().turns[j];
        spread += (column.change.radius / length).powi(2);
        if turns && task.turns() {
            spread += axis.change.radius.powi(2);
        }
        for (slot, &row) in task.rows().iter().enumerate() {
            (j0[slot][j], j1[slot][j]) = if row < 3 {
                (column.at.centre[row] / length, column.change.centre[row] / length)
            } else if turns {
                (axis.at.centre[row - 3], axis.change.centre[row - 3])
            } else {
                (0.0, 0.0)
            };
        }
    }
    // The middle's own rounding and slack are far below a billionth.
    let floor = (least + leaf.half * spread.sqrt()) * (1.0 + 1e-9) + 1e-9;
    if m >= n { holds::<true>(&j0, &j1, m, n, leaf.half, floor) } else { holds::<false>(&j0, &j1, n, m, leaf.half, floor) }
}

/// The test for a Gram matrix of size `k`, summed over `over`; by columns or by rows.
fn holds<const BY_COLUMNS: bool>(
    j0: &[[f64; MAX_JOINTS]; 6],
    j1: &[[f64; MAX_JOINTS]; 6],
    over: usize,
    k: usize,
    half: f64,
    floor: f64,
) -> bool {
    let entry = |a: &[[f64; MAX_JOINTS]; 6], i: usize, o: usize| if BY_COLUMNS { a[o][i] } else { a[i][o] };
    let mut gram = [[0.0; 6]; 6];
    let mut change = [[0.0; 6]; 6];
    for a in 0..k {
        for b in 0..=a {
            for o in 0..over {
                gram[a][b] += entry(j0, a, o) * entry(j0, b, o);
                change[a][b] += entry(j0, a, o) * entry(j1, b, o) + entry(j1, a, o) * entry(j0, b, o);
            }
        }
    }
    let trace: f64 = (0..k).map(|i| gram[i][i]).sum();
    [half, -half].into_iter().all(|s| {
        let mut matrix = gram;
        for a in 0..k {
            for b in 0..=a {
                matrix[a][b] += s * change[a][b];
            }
            matrix[a][a] -= floor * floor + ROUNDING * trace;
        }
        is_positive_definite(&mut matrix, k)
    })
}

/// Cholesky's decomposition of the lower triangle, in place; it succeeds for positive definite matrices only.
fn is_positive_definite(a: &mut [[f64; 6]; 6], k: usize) -> bool {
    for j in 0..k {
        let pivot = a[j][j] - (0..j).map(|i| a[j][i] * a[j][i]).sum::<f64>();
        if pivot.is_nan() || pivot <= 0.0 {
            return false;
        }
        let root = pivot.sqrt();
        a[j][j] = root;
        for i in j + 1..k {
            let sum: f64 = (0..j).map(|o| a[i][o] * a[j][o]).sum();
            a[i][j] = (a[i][j] - sum) / root;
        }
    }
    true
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cholesky_tells_definite_from_not() {
        let mut definite = [[0.0; 6]; 6];
        for i in 0..6 {
            definite[i][i] = 2.0;
            if i > 0 {
                definite[i][i - 1] = -0.99;
            }
        }
        assert!(is_positive_definite(&mut definite.clone(), 6));
        definite[3][3] = 0.5;
        assert!(!is_positive_definite(&mut definite, 6));
    }

    #[test]
    fn the_gram_test_uses_its_bound() {
        // A diagonal Jacobian whose smallest singular value falls evenly from 0.3 to 0.2 over the stretch.
        let (mut j0, mut j1) = ([[0.0; MAX_JOINTS]; 6], [[0.0; MAX_JOINTS]; 6]);
        for i in 0..6 {
            j0[i][i] = if i == 2 { 0.25 } else { 1.0 };
        }
        j1[2][2] = 1.0;
        // At the low end: 0.0625 - 2 * 0.05 * 0.25 = 0.0375, and the part of second order that is given away is 0.0025.
        assert!(holds::<true>(&j0, &j1, 6, 6, 0.05, 0.1936));
        assert!(!holds::<true>(&j0, &j1, 6, 6, 0.05, 0.1938));
        assert!(holds::<true>(&j0, &j1, 6, 6, 0.005, 0.2449), "0.245 is the true least");
        assert!(!holds::<true>(&j0, &j1, 6, 6, 0.005, 0.2451));
    }
}

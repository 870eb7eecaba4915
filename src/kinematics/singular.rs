use crate::arm::MAX_JOINTS;

use super::jacobian::Scaled;

/// Below this share of the largest singular value the Gram matrix has lost too many digits, and the exact method is used.
/// Squaring leaves an error of about `eps / (2 share²)` in the share: 1e-9 here.
const GRAM_IS_GOOD: f64 = 3e-4;

/// The smallest singular value of a scaled Jacobian, to about ten digits at any size; NaN if an entry is none.
///
/// Rows and columns: of the lesser count, so a four-joint arm with four task rows has four singular values. The Gram matrix is
/// brought to three diagonals by Householder reflections and its least eigenvalue found from below by Laguerre's iteration,
/// which cannot overshoot; near zero, where squaring loses digits, one-sided Jacobi (Hestenes) decides instead.
pub fn smallest_singular_value(scaled: &Scaled) -> f64 {
    match scaled.rows.min(scaled.columns) {
        1 => smallest::<1>(scaled),
        2 => smallest::<2>(scaled),
        3 => smallest::<3>(scaled),
        4 => smallest::<4>(scaled),
        5 => smallest::<5>(scaled),
        _ => smallest::<6>(scaled),
    }
}

#[inline]
fn smallest<const N: usize>(scaled: &Scaled) -> f64 {
    let gram = gram::<N>(scaled);
    let trace: f64 = (0..N).map(|i| gram[i][i]).sum();
    if !trace.is_finite() {
        return f64::NAN;
    }
    let (diagonal, beside_squared) = tridiagonal(gram);
    let least = least_root(&diagonal, &beside_squared);
    if least > GRAM_IS_GOOD * GRAM_IS_GOOD * trace && none_below(&diagonal, &beside_squared, least * (1.0 - PASSED_OVER)) {
        return least.sqrt();
    }
    singular_values(scaled)[N - 1]
}

/// `A Aᵀ` or `Aᵀ A`, whichever is the smaller.
#[inline]
fn gram<const N: usize>(scaled: &Scaled) -> [[f64; N]; N] {
    let mut gram = [[0.0; N]; N];
    let a = &scaled.entries;
    if scaled.rows == N && scaled.columns == N {
        // The common case with a length that is known when compiling, for the sums to be unrolled.
        // Row by row, whose entries do not wait for each other; A^T A has the eigenvalues of A A^T.
        for row in &a[..N] {
            for i in 0..N {
                for j in 0..N {
                    gram[i][j] += row[i] * row[j];
                }
            }
        }
    } else if scaled.rows <= scaled.columns {
        for i in 0..N {
            for j in 0..=i {
                let mut sum = 0.0;
                for k in 0..scaled.columns {
                    sum += a[i][k] * a[j][k];
                }
                gram[i][j] = sum;
                gram[j][i] = sum;
            }
        }
    } else {
        for i in 0..N {
            for j in 0..=i {
                let mut sum = 0.0;
                for row in &a[..scaled.rows] {
                    sum += row[i] * row[j];
                }
                gram[i][j] = sum;
                gram[j][i] = sum;
            }
        }
    }
    gram
}

/// Diagonal and squared off-diagonal of the Householder tridiagonal form (beside[i] stands between i and i+1).
#[inline]
fn tridiagonal<const N: usize>(mut a: [[f64; N]; N]) -> ([f64; N], [f64; N]) {
    let mut beside = [0.0; N];
    for k in 0..N.saturating_sub(2) {
        let mut below = 0.0;
        for i in k + 2..N {
            below += a[i][k] * a[i][k];
        }
        let head = a[k + 1][k];
        let norm_squared = below + head * head;
        beside[k] = norm_squared;
        if below == 0.0 {
            continue;
        }
        let norm = norm_squared.sqrt();
        // The reflection's vector v: the column below the diagonal with its head moved away from zero.
        let mut v = [0.0; N];
        v[k + 1] = if head > 0.0 { head + norm } else { head - norm };
        for i in k + 2..N {
            v[i] = a[i][k];
        }
        let beta = 1.0 / (norm_squared + head.abs() * norm);
        // Whole rows at a time: v and p are zero up to k, and entries of a row do not wait for each other.
        let mut p = [0.0; N];
        for j in k + 1..N {
            for i in 0..N {
                p[i] += a[j][i] * v[j];
            }
        }
        for i in 0..N {
            p[i] = if i > k { beta * p[i] } else { 0.0 };
        }
        let mut half = 0.0;
        for i in 0..N {
            half += p[i] * v[i];
        }
        half *= 0.5 * beta;
        for i in 0..N {
            p[i] -= half * v[i];
        }
        for i in k + 1..N {
            for j in 0..N {
                a[i][j] -= v[i] * p[j] + p[i] * v[j];
            }
        }
    }
    if N >= 2 {
        beside[N - 2] = a[N - 1][N - 2] * a[N - 1][N - 2];
    }
    let mut diagonal = [0.0; N];
    for i in 0..N {
        diagonal[i] = a[i][i];
    }
    (diagonal, beside)
}

/// Laguerre's iteration stops when a step gains less than this share of the root, or of the largest diagonal times 1e-4.
const ROOT_STEP: f64 = 1e-13;
/// ... or when a step that shrank at least so much foretells that the next one would gain less than [`NEXT_STEP`] of the root:
/// convergence is cubic, so after steps a and b comes one of about b (b/a)^3. What is left out is on the safe side, for every step
/// ends at or below the root.
const SHRINKS: f64 = 0.03;
/// See [`SHRINKS`].
const NEXT_STEP: f64 = 1e-14;

/// The least root of the characteristic polynomial, from 0 upwards. All roots are real, so each step stays at or below it.
#[inline]
fn least_root<const N: usize>(diagonal: &[f64; N], beside_squared: &[f64; N]) -> f64 {
    if N == 1 {
        return diagonal[0].max(0.0);
    }
    let n = N as f64;
    let largest = diagonal.iter().fold(0.0f64, |most, d| most.max(*d));
    let (mut x, mut last) = (0.0, 0.0);
    for _ in 0..60 {
        // Values and the first two derivatives of the leading minors by their three-term recurrence.
        let (mut p0, mut d0, mut s0) = (1.0, 0.0, 0.0);
        let (mut p1, mut d1, mut s1) = (diagonal[0] - x, -1.0, 0.0);
        for i in 1..N {
            let a = diagonal[i] - x;
            let b = beside_squared[i - 1];
            let p2 = a * p1 - b * p0;
            let d2 = a * d1 - p1 - b * d0;
            let s2 = a * s1 - 2.0 * d1 - b * s0;
            (p0, d0, s0) = (p1, d1, s1);
            (p1, d1, s1) = (p2, d2, s2);
        }
        if p1 <= 0.0 {
            return x;
        }
        // From below the least root, d1/p1 is negative and the step is positive.
        let inverse = 1.0 / p1;
        let g = d1 * inverse;
        let h = g * g - s1 * inverse;
        let root = ((n - 1.0) * (n * h - g * g)).max(0.0).sqrt();
        let step = n / (root - g);
        if !step.is_finite() {
            return x;
        }
        x += step;
        let shrinks = step / last;
        let foretold = step * shrinks * shrinks * shrinks;
        if step <= ROOT_STEP * x.max(1e-4 * largest) || (last > 0.0 && shrinks <= SHRINKS && foretold <= NEXT_STEP * x) {
            return x;
        }
        last = step;
    }
    x
}

/// How far, as a share of the root, an eigenvalue must be below it to count as passed over. What rounding makes of a root that
/// [`GRAM_IS_GOOD`] lets through stays below.
const PASSED_OVER: f64 = 1e-8;

/// Whether no eigenvalue is below `x`: no leading minor of the matrix less `x` is negative (Sturm). Where two eigenvalues are zero at
/// once, value and slope of the characteristic polynomial are both rounding, and Laguerre's iteration jumps over them.
#[inline]
fn none_below<const N: usize>(diagonal: &[f64; N], beside_squared: &[f64; N], x: f64) -> bool {
    // By the leading minors rather than by pivots: all of them positive means the same, and nothing is divided.
    let (mut before, mut minor) = (1.0, diagonal[0] - x);
    for i in 1..N {
        if minor <= 0.0 {
            return false;
        }
        (before, minor) = (minor, (diagonal[i] - x) * minor - beside_squared[i - 1] * before);
    }
    minor > 0.0
}

/// All singular values, the largest first, `min(rows, columns)` of them and zeros behind, by one-sided Jacobi rotations
/// (Hestenes), exact to the last digits also where tiny.
pub fn singular_values(scaled: &Scaled) -> [f64; 6] {
    // Work on vectors that are the shorter side's rows or columns, so that there are at most six.
    let (count, length, transpose) =
        if scaled.rows <= scaled.columns { (scaled.rows, scaled.columns, false) } else { (scaled.columns, scaled.rows, true) };
    let mut vectors = [[0.0; MAX_JOINTS]; 6];
    for (i, vector) in vectors[..count].iter_mut().enumerate() {
        for (k, entry) in vector[..length].iter_mut().enumerate() {
            *entry = if transpose { scaled.entries[k][i] } else { scaled.entries[i][k] };
        }
    }
    orthogonalise(&mut vectors[..count], |_, _, _, _| {});
    let mut values = [0.0; 6];
    for (value, vector) in values.iter_mut().zip(&vectors[..count]) {
        *value = vector.iter().map(|v| v * v).sum::<f64>().sqrt();
    }
    values[..count].sort_by(|a, b| b.total_cmp(a));
    values
}

/// Two vectors count as square to each other when their product is below this share of their norms.
const SQUARE: f64 = 1e-15;

/// Turns vectors in pairs until all are square to each other; tells every rotation (i, j, cos, sin) as it is made.
pub(super) fn orthogonalise<const L: usize>(vectors: &mut [[f64; L]], mut rotated: impl FnMut(usize, usize, f64, f64)) {
    let dot = |a: &[f64; L], b: &[f64; L]| a.iter().zip(b).map(|(x, y)| x * y).sum::<f64>();
    for _ in 0..40 {
        let mut settled = true;
        for i in 0..vectors.len() {
            for j in i + 1..vectors.len() {
                let (aa, bb, ab) = (dot(&vectors[i], &vectors[i]), dot(&vectors[j], &vectors[j]), dot(&vectors[i], &vectors[j]));
                if ab == 0.0 || ab.abs() <= SQUARE * (aa * bb).sqrt() || !ab.is_finite() {
                    continue;
                }
                settled = false;
                let zeta = (bb - aa) / (2.0 * ab);
                let t = zeta.signum() / (zeta.abs() + (1.0 + zeta * zeta).sqrt());
                let c = 1.0 / (1.0 + t * t).sqrt();
                let s = c * t;
                for k in 0..L {
                    let (x, y) = (vectors[i][k], vectors[j][k]);
                    vectors[i][k] = c * x - s * y;
                    vectors[j][k] = s * x + c * y;
                }
                rotated(i, j, c, s);
            }
        }
        if settled {
            return;
        }
    }
}

/// Largest over smallest singular value; infinite at a singular posture.
pub fn condition(values: &[f64; 6], count: usize) -> f64 {
    values[0] / values[count - 1]
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::DMatrix;

    fn matrix(rows: usize, columns: usize, seed: f64, shrink: f64) -> Scaled {
        let mut scaled = Scaled { rows, columns, entries: [[0.0; MAX_JOINTS]; 6] };
        for i in 0..rows {
            for j in 0..columns {
                scaled.entries[i][j] = ((i * 5 + j * 3) as f64 + seed).sin() * if i == 0 { shrink } else { 1.0 };
            }
            // Away from the rank 2 that sines of a sum have.
            scaled.entries[i][i % columns] += 0.3 * seed.cos() + i as f64 * 0.1;
        }
        scaled
    }

    #[test]
    fn both_methods_agree_with_a_library() {
        for (rows, columns) in [(1, 1), (1, 4), (2, 2), (3, 3), (4, 4), (5, 5), (6, 6), (6, 7), (6, 9), (3, 5)] {
            for seed in [0.1, 0.7, 1.9, 4.4] {
                for shrink in [1.0, 1e-3, 1e-7] {
                    let scaled = matrix(rows, columns, seed, shrink);
                    let theirs = DMatrix::from_fn(rows, columns, |i, j| scaled.entries[i][j]).singular_values();
                    let least = theirs.iter().fold(f64::INFINITY, |a, b| a.min(*b));
                    let ours = singular_values(&scaled);
                    let most = theirs.max();
                    assert!((ours[0] - most).abs() < 1e-13 * most, "{rows}x{columns}");
                    assert!((ours[rows - 1] - least).abs() < 1e-13 * most, "{rows}x{columns}: {} {least}", ours[rows - 1]);
                    let fast = smallest_singular_value(&scaled);
                    assert!((fast - least).abs() < 1e-9 * least + 1e-13 * most, "{rows}x{columns} {seed} {shrink}: {fast} {least}");
                }
            }
        }
    }

    #[test]
    fn two_zeros_at_once_are_not_passed_over() {
        // Rows of rank N - 2: the last two are sums of the others.
        for n in 3..=6 {
            for seed in [0.3, 0.9, 2.2, 5.1] {
                let mut scaled = matrix(n, n, seed, 1.0);
                for k in 0..n {
                    let sum: f64 = (0..n - 2).map(|i| scaled.entries[i][k] * 0.7).sum();
                    scaled.entries[n - 2][k] = sum;
                    scaled.entries[n - 1][k] = -1.3 * sum + scaled.entries[0][k];
                }
                let least = smallest_singular_value(&scaled);
                assert!((0.0..1e-14).contains(&least), "{n} {seed}: {least}");
            }
        }
    }

    #[test]
    fn equal_singular_values_and_zeros_are_found() {
        let mut scaled = Scaled { rows: 6, columns: 6, entries: [[0.0; MAX_JOINTS]; 6] };
        assert_eq!(smallest_singular_value(&scaled), 0.0);
        for i in 0..6 {
            scaled.entries[i][5 - i] = 2.0;
        }
        assert!((smallest_singular_value(&scaled) - 2.0).abs() < 1e-9);
        scaled.entries[0][5] = f64::NAN;
        assert!(smallest_singular_value(&scaled).is_nan());
    }
}

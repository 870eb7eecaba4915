use crate::arm::MAX_JOINTS;

/// A square matrix of up to nine rows split into triangles with row pivoting, ready to solve; all on the stack.
#[derive(Debug, Clone, Copy)]
pub struct Lu {
    n: usize,
    rows: [[f64; MAX_JOINTS]; MAX_JOINTS],
    inverse: [f64; MAX_JOINTS],
    from: [usize; MAX_JOINTS],
    sign: f64,
}

impl Lu {
    /// Splits the leading `n` rows and columns of `rows`. A singular matrix is split too; solving then yields what is not finite.
    #[inline]
    pub fn of(rows: [[f64; MAX_JOINTS]; MAX_JOINTS], n: usize) -> Self {
        let mut lu = Self { n, rows, inverse: [0.0; MAX_JOINTS], from: [0, 1, 2, 3, 4, 5, 6, 7, 8], sign: 1.0 };
        match n {
            1 => lu.split::<1>(),
            2 => lu.split::<2>(),
            3 => lu.split::<3>(),
            4 => lu.split::<4>(),
            5 => lu.split::<5>(),
            6 => lu.split::<6>(),
            7 => lu.split::<7>(),
            8 => lu.split::<8>(),
            _ => lu.split::<9>(),
        }
        lu
    }

    #[inline]
    fn split<const N: usize>(&mut self) {
        for k in 0..N {
            let mut pivot = k;
            for i in k + 1..N {
                if self.rows[i][k].abs() > self.rows[pivot][k].abs() {
                    pivot = i;
                }
            }
            if pivot != k {
                self.rows.swap(k, pivot);
                self.from.swap(k, pivot);
                self.sign = -self.sign;
            }
            let inverse = 1.0 / self.rows[k][k];
            self.inverse[k] = inverse;
            let top = self.rows[k];
            for row in &mut self.rows[k + 1..N] {
                let factor = row[k] * inverse;
                row[k] = factor;
                for j in k + 1..N {
                    row[j] -= factor * top[j];
                }
            }
        }
    }

    /// The solution x of `A x = b`, in the leading entries.
    #[inline]
    pub fn solve(&self, b: &[f64; MAX_JOINTS]) -> [f64; MAX_JOINTS] {
        match self.n {
            1 => self.solved::<1>(b),
            2 => self.solved::<2>(b),
            3 => self.solved::<3>(b),
            4 => self.solved::<4>(b),
            5 => self.solved::<5>(b),
            6 => self.solved::<6>(b),
            7 => self.solved::<7>(b),
            8 => self.solved::<8>(b),
            _ => self.solved::<9>(b),
        }
    }

    #[inline]
    fn solved<const N: usize>(&self, b: &[f64; MAX_JOINTS]) -> [f64; MAX_JOINTS] {
        let mut x = [0.0; MAX_JOINTS];
        for i in 0..N {
            let mut sum = b[self.from[i]];
            for j in 0..i {
                sum -= self.rows[i][j] * x[j];
            }
            x[i] = sum;
        }
        for i in (0..N).rev() {
            let mut sum = x[i];
            for j in i + 1..N {
                sum -= self.rows[i][j] * x[j];
            }
            x[i] = sum * self.inverse[i];
        }
        x
    }

    /// The determinant.
    pub fn determinant(&self) -> f64 {
        (0..self.n).map(|i| self.rows[i][i]).product::<f64>() * self.sign
    }
}

/// The inverse of what `lu` splits, row by row; not finite where that is singular.
pub fn invert(lu: &Lu) -> [[f64; MAX_JOINTS]; MAX_JOINTS] {
    let mut inverse = [[0.0; MAX_JOINTS]; MAX_JOINTS];
    for column in 0..lu.n {
        let mut unit = [0.0; MAX_JOINTS];
        unit[column] = 1.0;
        let x = lu.solve(&unit);
        for row in 0..lu.n {
            inverse[row][column] = x[row];
        }
    }
    inverse
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::DMatrix;

    #[test]
    fn solutions_and_determinants_agree_with_a_library() {
        for n in 1..=9 {
            let mut rows = [[0.0; 9]; 9];
            for i in 0..n {
                for j in 0..n {
                    rows[i][j] = ((i * 7 + j * 13 + n) as f64 * 0.7).sin();
                }
            }
            let lu = Lu::of(rows, n);
            let theirs = DMatrix::from_fn(n, n, |i, j| rows[i][j]);
            assert!((lu.determinant() - theirs.determinant()).abs() < 1e-12);
            let inverse = invert(&lu);
            let ours = DMatrix::from_fn(n, n, |i, j| inverse[i][j]);
            assert!((&ours * &theirs - DMatrix::identity(n, n)).norm() < 1e-10 * ours.norm() * theirs.norm());
        }
    }

    #[test]
    fn a_singular_matrix_yields_nothing_finite() {
        let lu = Lu::of([[0.0; 9]; 9], 3);
        assert!(!lu.solve(&[1.0; 9])[0].is_finite());
    }
}

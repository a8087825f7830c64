//! Linear least squares by orthogonal factoring (modified Gram-Schmidt, every column orthogonalised twice), for the few columns and rows
//! of a shot. Normal equations would square the condition number; this does not.

use super::station::MAX_STATIONS;

/// Rows of every problem: one per station and one for the attenuation allowance. Rows that are not needed are zero.
pub(super) const ROWS: usize = MAX_STATIONS + 1;

/// Row of the allowance.
pub(super) const ALLOWANCE_ROW: usize = MAX_STATIONS;

/// One column of the matrix, or one right-hand side.
pub(super) type Column = [f64; ROWS];

/// A column that keeps less than this share of its length after the earlier columns are taken out depends on them.
const DEPENDENT: f64 = 1e-13;

/// Orthogonal factors `A = Q R` of a matrix with `P` independent columns.
#[derive(Clone, Copy)]
pub(super) struct Factor<const P: usize> {
    q: [Column; P],
    r: [[f64; P]; P],
}

/// Scalar product of two columns.
pub(super) fn dot(a: &Column, b: &Column) -> f64 {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

/// Takes `amount` times `direction` out of `column`.
fn take_out(column: &mut Column, direction: &Column, amount: f64) {
    for (x, d) in column.iter_mut().zip(direction) {
        *x -= amount * d;
    }
}

impl<const P: usize> Factor<P> {
    /// Factors the matrix with these columns. `None` when they are dependent or not finite.
    pub(super) fn new(columns: &[Column; P]) -> Option<Self> {
        let mut q = [[0.0; ROWS]; P];
        let mut r = [[0.0; P]; P];
        for k in 0..P {
            let mut column = columns[k];
            let before = libm::sqrt(dot(&column, &column));
            // Once loses orthogonality in proportion to the condition number; twice is enough (a classical result).
            for _ in 0..2 {
                for j in 0..k {
                    let amount = dot(&q[j], &column);
                    r[j][k] += amount;
                    take_out(&mut column, &q[j], amount);
                }
            }
            let after = libm::sqrt(dot(&column, &column));
            // Written so that a column of zeros and one that is not a number fail as well.
            if !(after > DEPENDENT * before && after.is_finite()) {
                return None;
            }
            r[k][k] = after;
            q[k] = column.map(|x| x / after);
        }
        Some(Self { q, r })
    }

    /// Solves `R x = z` from the last unknown upwards.
    fn back_substitute(&self, z: [f64; P]) -> [f64; P] {
        let mut x = [0.0; P];
        for i in (0..P).rev() {
            let row = &self.r[i];
            let known: f64 = row.iter().zip(&x).skip(i + 1).map(|(a, b)| a * b).sum();
            x[i] = (z[i] - known) / row[i];
        }
        x
    }

    /// The least-squares solution for the right-hand side `b`. The right-hand side is reduced step by step like a column: as stable as
    /// Householder reflections.
    pub(super) fn solve(&self, b: &Column) -> [f64; P] {
        let mut rest = *b;
        let z = self.q.each_ref().map(|q| {
            let amount = dot(q, &rest);
            take_out(&mut rest, q, amount);
            amount
        });
        self.back_substitute(z)
    }

    /// Leverage of each row: the diagonal of `Q Q^T`.
    pub(super) fn leverages(&self) -> Column {
        let mut h = [0.0; ROWS];
        for q in &self.q {
            for (sum, x) in h.iter_mut().zip(q) {
                *sum += x * x;
            }
        }
        h
    }

    /// Covariance of the solution when the right-hand side has independent errors of these variances. With ones it is `(A^T A)^-1`.
    pub(super) fn covariance(&self, variances: &Column) -> [[f64; P]; P] {
        let mut sum = [[0.0; P]; P];
        for (row, variance) in variances.iter().enumerate() {
            let slope = self.back_substitute(self.q.map(|q| q[row]));
            for (line, a) in sum.iter_mut().zip(slope) {
                for (cell, b) in line.iter_mut().zip(slope) {
                    *cell += variance * a * b;
                }
            }
        }
        sum
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// JCGM 100:2008, H.3, calibration of a thermometer (data and printed results from memory): 11 readings, a line about 20 degC.
    #[test]
    fn calibration_line_of_jcgm_100_h3() {
        let t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.010, 26.511];
        let b = [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.160];
        let mut columns = [[0.0; ROWS]; 2];
        let mut right = [0.0; ROWS];
        for i in 0..11 {
            columns[0][i] = 1.0;
            columns[1][i] = t[i] - 20.0;
            right[i] = b[i];
        }
        let factor = Factor::new(&columns).unwrap();
        let [y1, y2] = factor.solve(&right);
        let squares: f64 = (0..11).map(|i| (b[i] - y1 - y2 * (t[i] - 20.0)).powi(2)).sum();
        let s = libm::sqrt(squares / 9.0);
        let c = factor.covariance(&[s * s; ROWS]);
        let round = |x: f64, digits: i32| libm::round(x * 10_f64.powi(digits)) / 10_f64.powi(digits);
        assert_eq!(round(y1, 4), -0.1712);
        assert_eq!(round(libm::sqrt(c[0][0]), 4), 0.0029);
        assert_eq!(round(y2, 5), 0.00218);
        assert_eq!(round(libm::sqrt(c[1][1]), 5), 0.00067);
        assert_eq!(round(c[0][1] / libm::sqrt(c[0][0] * c[1][1]), 3), -0.930);
        assert_eq!(round(s, 4), 0.0035);
        let at_30 = y1 + y2 * 10.0;
        let variance = c[0][0] + 20.0 * c[0][1] + 100.0 * c[1][1];
        assert_eq!(round(at_30, 4), -0.1494);
        assert_eq!(round(libm::sqrt(variance), 4), 0.0041);
    }

    /// Columns 1, x, x^2, x^3 on a short stretch far from zero have a condition number near 1e7: Q stays orthogonal to rounding.
    #[test]
    fn factors_stay_orthogonal() {
        let mut columns = [[0.0; ROWS]; 4];
        for i in 0..ROWS {
            let x = 2.0 + 0.01 * i as f64;
            for (k, column) in columns.iter_mut().enumerate() {
                column[i] = x.powi(k as i32);
            }
        }
        let factor = Factor::new(&columns).unwrap();
        for (i, a) in factor.q.iter().enumerate() {
            for (j, b) in factor.q.iter().enumerate() {
                let want = if i == j { 1.0 } else { 0.0 };
                assert!((dot(a, b) - want).abs() < 1e-15);
            }
        }
        let trace: f64 = factor.leverages().iter().sum();
        assert!((trace - 4.0).abs() < 1e-14);
    }

    #[test]
    fn dependent_columns_are_refused() {
        let ones = [1.0; ROWS];
        assert!(Factor::new(&[ones, [3.0; ROWS]]).is_none());
        assert!(Factor::new(&[ones, [0.0; ROWS]]).is_none());
        assert!(Factor::new(&[ones, [f64::NAN; ROWS]]).is_none());
    }
}

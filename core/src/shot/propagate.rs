//! The law of propagation of uncertainty (JCGM 100:2008, 5.1 and 5.2; JCGM 102:2011 for several outputs; clause numbers from memory).
//!
//! An output `y` has sensitivities `c_i = dy/dx_i` to inputs with standard uncertainties `u_i` and correlations `r_ij`. The matrix of
//! correlations is a slice, row by row; `None` means independent inputs. With it, `cov(y, z) = sum_ij c_i u_i r_ij u_j d_j`.

use core::fmt;

/// How far a correlation matrix may be from symmetric, or a variance below zero relative to its terms, by rounding of its entries: they are
/// often typed with two decimals, but a matrix is either symmetric or not.
const ROUNDING: f64 = 1e-12;

/// What is wrong with the inputs of a propagation.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub enum PropagationError {
    /// Slices that must have one entry per input differ in length.
    Length {
        /// Number of sensitivities.
        expected: usize,
        /// Length that was found.
        found: usize,
    },
    /// A sensitivity is not finite.
    Sensitivity {
        /// Index of the input.
        input: usize,
        /// Its value.
        value: f64,
    },
    /// A standard uncertainty is negative or not finite.
    Uncertainty {
        /// Index of the input.
        input: usize,
        /// Its value.
        value: f64,
    },
    /// A correlation is outside -1 to 1, not 1 on the diagonal, or not the same both ways.
    Correlation {
        /// Row.
        row: usize,
        /// Column.
        column: usize,
        /// Its value.
        value: f64,
    },
    /// The correlations contradict each other: they give a negative variance.
    Impossible {
        /// That variance.
        variance: f64,
    },
    /// A variance is too large to represent.
    Overflow,
}

impl fmt::Display for PropagationError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::Length { expected, found } => {
                write!(f, "{found} entries where {expected} are needed (a correlation matrix needs the square of the inputs)")
            }
            Self::Sensitivity { input, value } => {
                write!(f, "sensitivity to input {input} is {value}: not finite")
            }
            Self::Uncertainty { input, value } => {
                write!(f, "standard uncertainty of input {input} is {value}: zero or more is needed")
            }
            Self::Correlation { row, column, value } => {
                write!(f, "correlation of inputs {row} and {column} is {value}: -1 to 1, the same both ways and 1 with itself is needed")
            }
            Self::Impossible { variance } => {
                write!(f, "the correlations contradict each other: they give a variance of {variance}")
            }
            Self::Overflow => write!(f, "a variance is too large to represent"),
        }
    }
}

impl core::error::Error for PropagationError {}

/// Inputs of a measurement model: standard uncertainties and correlations, checked once.
///
/// ```
/// use endwall::shot::Inputs;
/// // Two resistors in series, each 100 ohm with 0.1 ohm: fully correlated when calibrated against the same standard.
/// let apart = Inputs::new(&[0.1, 0.1], None)?;
/// let together = Inputs::new(&[0.1, 0.1], Some(&[1.0, 1.0, 1.0, 1.0]))?;
/// assert!((apart.standard_uncertainty(&[1.0, 1.0])? - 0.1 * 2.0_f64.sqrt()).abs() < 1e-15);
/// assert!((together.standard_uncertainty(&[1.0, 1.0])? - 0.2).abs() < 1e-15);
/// # Ok::<(), endwall::shot::PropagationError>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Inputs<'a> {
    uncertainties: &'a [f64],
    correlations: Option<&'a [f64]>,
}

impl<'a> Inputs<'a> {
    /// Takes standard uncertainties, each in the unit of its input, and the matrix of correlations, row by row, with as many rows and columns
    /// as there are inputs; `None`: independent.
    ///
    /// # Errors
    /// [`PropagationError::Uncertainty`], [`PropagationError::Length`], [`PropagationError::Correlation`].
    pub fn new(uncertainties: &'a [f64], correlations: Option<&'a [f64]>) -> Result<Self, PropagationError> {
        for (input, &value) in uncertainties.iter().enumerate() {
            if !(value >= 0.0 && value.is_finite()) {
                return Err(PropagationError::Uncertainty { input, value });
            }
        }
        if let Some(matrix) = correlations {
            check_correlations(matrix, uncertainties.len())?;
        }
        Ok(Self { uncertainties, correlations })
    }

    /// Covariance of two outputs with sensitivities `c` and `d`: `sum_ij c_i u_i r_ij u_j d_j` (JCGM 100, F.1.2.3; JCGM 102, 6.2), in the product
    /// of the units of the outputs. Relative error a few ulp of the sum of the absolute terms.
    ///
    /// # Errors
    /// [`PropagationError::Length`], [`PropagationError::Sensitivity`], [`PropagationError::Overflow`].
    pub fn covariance(&self, c: &[f64], d: &[f64]) -> Result<f64, PropagationError> {
        self.check(c)?;
        self.check(d)?;
        let sum = self.sum(c, d, |x| x);
        if sum.is_finite() { Ok(sum) } else { Err(PropagationError::Overflow) }
    }

    /// Combined variance of an output: JCGM 100, equation (10) for independent inputs, (13) and (16) for correlated ones.
    ///
    /// # Errors
    /// As [`Inputs::covariance`], and [`PropagationError::Impossible`] when the correlations give a negative variance (beyond rounding).
    pub fn variance(&self, c: &[f64]) -> Result<f64, PropagationError> {
        let variance = self.covariance(c, c)?;
        if variance >= 0.0 {
            return Ok(variance);
        }
        if variance > -ROUNDING * self.sum(c, c, libm::fabs) {
            return Ok(0.0);
        }
        Err(PropagationError::Impossible { variance })
    }

    /// Combined standard uncertainty of an output, in its unit.
    ///
    /// # Errors
    /// As [`Inputs::variance`].
    pub fn standard_uncertainty(&self, c: &[f64]) -> Result<f64, PropagationError> {
        self.variance(c).map(libm::sqrt)
    }

    /// Correlation of two outputs, -1 to 1; `None` when one of them has no uncertainty.
    ///
    /// # Errors
    /// As [`Inputs::variance`].
    ///
    /// ```
    /// use endwall::shot::Inputs;
    /// // The sum and the difference of two inputs that are equally uncertain share nothing.
    /// let inputs = Inputs::new(&[0.5, 0.5], None)?;
    /// assert_eq!(inputs.correlation(&[1.0, 1.0], &[1.0, -1.0])?, Some(0.0));
    /// # Ok::<(), endwall::shot::PropagationError>(())
    /// ```
    pub fn correlation(&self, c: &[f64], d: &[f64]) -> Result<Option<f64>, PropagationError> {
        let product = self.standard_uncertainty(c)? * self.standard_uncertainty(d)?;
        let covariance = self.covariance(c, d)?;
        Ok((product > 0.0).then(|| (covariance / product).clamp(-1.0, 1.0)))
    }

    /// Contribution of each input to the standard uncertainty of an output, `c_i u_i`, with the sign of the sensitivity, into `into`.
    ///
    /// # Errors
    /// [`PropagationError::Length`], [`PropagationError::Sensitivity`].
    ///
    /// ```
    /// use endwall::shot::Inputs;
    /// let mut contributions = [0.0; 2];
    /// Inputs::new(&[0.5, 2.0], None)?.contributions(&[-3.0, 1.0], &mut contributions)?;
    /// assert_eq!(contributions, [-1.5, 2.0]);
    /// # Ok::<(), endwall::shot::PropagationError>(())
    /// ```
    pub fn contributions(&self, c: &[f64], into: &mut [f64]) -> Result<(), PropagationError> {
        self.check(c)?;
        self.check_length(into.len())?;
        for ((place, sensitivity), uncertainty) in into.iter_mut().zip(c).zip(self.uncertainties) {
            *place = sensitivity * uncertainty;
        }
        Ok(())
    }

    /// Share of each input in the variance of an output, into `into`: `c_i u_i sum_j(r_ij c_j u_j) / u_c^2`; all zero when the output has no
    /// uncertainty. The shares sum to one. With correlated inputs a single share may be negative: only the sum over inputs that are
    /// correlated with each other means something, as one line.
    ///
    /// # Errors
    /// As [`Inputs::variance`], and [`PropagationError::Length`] for `into`.
    ///
    /// ```
    /// use endwall::shot::Inputs;
    /// let mut shares = [0.0; 2];
    /// Inputs::new(&[3.0, 4.0], None)?.shares(&[1.0, 1.0], &mut shares)?;
    /// assert_eq!(shares, [0.36, 0.64]);
    /// # Ok::<(), endwall::shot::PropagationError>(())
    /// ```
    pub fn shares(&self, c: &[f64], into: &mut [f64]) -> Result<(), PropagationError> {
        let variance = self.variance(c)?;
        self.check_length(into.len())?;
        for (i, place) in into.iter_mut().enumerate() {
            *place = if variance > 0.0 { self.row(i, c, c, |x| x) / variance } else { 0.0 };
        }
        Ok(())
    }

    /// `c_i u_i sum_j(r_ij u_j d_j)`, each term seen through `view`.
    fn row(&self, i: usize, c: &[f64], d: &[f64], view: impl Fn(f64) -> f64) -> f64 {
        let (Some(&ci), Some(&ui), Some(&di)) = (c.get(i), self.uncertainties.get(i), d.get(i)) else {
            return 0.0;
        };
        let left = ci * ui;
        match self.correlations.and_then(|m| line_of(m, self.uncertainties.len(), i)) {
            None => view(left * (ui * di)),
            Some(row) => row.iter().zip(self.uncertainties).zip(d).map(|((r, u), d)| view(left * (r * (u * d)))).sum(),
        }
    }

    /// The double sum, each term seen through `view`.
    fn sum(&self, c: &[f64], d: &[f64], view: impl Fn(f64) -> f64) -> f64 {
        (0..self.uncertainties.len()).map(|i| self.row(i, c, d, &view)).sum()
    }

    fn check_length(&self, found: usize) -> Result<(), PropagationError> {
        let expected = self.uncertainties.len();
        if found == expected { Ok(()) } else { Err(PropagationError::Length { expected, found }) }
    }

    fn check(&self, sensitivities: &[f64]) -> Result<(), PropagationError> {
        self.check_length(sensitivities.len())?;
        match sensitivities.iter().enumerate().find(|(_, c)| !c.is_finite()) {
            Some((input, &value)) => Err(PropagationError::Sensitivity { input, value }),
            None => Ok(()),
        }
    }
}

/// One row of a square matrix that is stored row by row.
fn line_of(matrix: &[f64], inputs: usize, row: usize) -> Option<&[f64]> {
    matrix.get(row.saturating_mul(inputs)..)?.get(..inputs)
}

/// Size, diagonal, range and symmetry of a correlation matrix.
fn check_correlations(matrix: &[f64], inputs: usize) -> Result<(), PropagationError> {
    let expected = inputs.saturating_mul(inputs);
    if matrix.len() != expected {
        return Err(PropagationError::Length { expected, found: matrix.len() });
    }
    for row in 0..inputs {
        let line = line_of(matrix, inputs, row).unwrap_or_default();
        for (column, &value) in line.iter().enumerate() {
            let mirrored = line_of(matrix, inputs, column).and_then(|l| l.get(row)).copied().unwrap_or(value);
            let fits = (-1.0..=1.0).contains(&value)
                && libm::fabs(value - mirrored) <= ROUNDING
                && (row != column || libm::fabs(value - 1.0) <= ROUNDING);
            if !fits {
                return Err(PropagationError::Correlation { row, column, value });
            }
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn independent_is_the_identity_matrix() {
        let u = [0.3, 1.5, 0.02];
        let identity = [1.0, 0.0, 0.0, 0.0, 1.0, 0.0, 0.0, 0.0, 1.0];
        let (c, d) = ([2.0, -1.0, 40.0], [0.5, 3.0, 7.0]);
        let a = Inputs::new(&u, None).unwrap();
        let b = Inputs::new(&u, Some(&identity)).unwrap();
        assert_eq!(a.covariance(&c, &d), b.covariance(&c, &d));
        assert!((a.variance(&c).unwrap() - (0.36 + 2.25 + 0.64)).abs() < 1e-15);
        assert!((a.covariance(&c, &d).unwrap() - (0.09 - 6.75 + 0.112)).abs() < 1e-14);
        let mut contributions = [0.0; 3];
        a.contributions(&c, &mut contributions).unwrap();
        assert_eq!(contributions, [0.6, -1.5, 0.8]);
    }

    #[test]
    fn shares_sum_to_one_with_correlation() {
        let r = [1.0, -0.9, 0.0, -0.9, 1.0, 0.0, 0.0, 0.0, 1.0];
        let inputs = Inputs::new(&[1.0, 0.4, 0.5], Some(&r)).unwrap();
        let mut shares = [0.0; 3];
        inputs.shares(&[1.0, 1.0, 1.0], &mut shares).unwrap();
        assert!((shares.iter().sum::<f64>() - 1.0).abs() < 1e-15);
        assert!(shares[1] < 0.0, "{shares:?}");
        assert_eq!(inputs.correlation(&[1.0, 0.0, 0.0], &[0.0, 1.0, 0.0]).unwrap(), Some(-0.9));
        assert_eq!(inputs.correlation(&[0.0; 3], &[0.0, 1.0, 0.0]).unwrap(), None);
    }

    #[test]
    fn full_correlation_cancels() {
        let inputs = Inputs::new(&[0.1, 0.3], Some(&[1.0; 4])).unwrap();
        assert!(inputs.variance(&[3.0, -1.0]).unwrap() < 1e-17);
    }

    #[test]
    fn bad_inputs_are_named() {
        assert_eq!(Inputs::new(&[-1.0], None).err(), Some(PropagationError::Uncertainty { input: 0, value: -1.0 }));
        let lopsided = Inputs::new(&[1.0, 1.0], Some(&[1.0, 0.5, 0.4, 1.0])).err();
        assert_eq!(lopsided, Some(PropagationError::Correlation { row: 0, column: 1, value: 0.5 }));
        let short = Inputs::new(&[1.0, 1.0], Some(&[1.0])).err();
        assert_eq!(short, Some(PropagationError::Length { expected: 4, found: 1 }));
        // Three inputs cannot all be opposite to each other.
        let r = [1.0, -0.9, -0.9, -0.9, 1.0, -0.9, -0.9, -0.9, 1.0];
        let opposite = Inputs::new(&[1.0; 3], Some(&r)).unwrap().variance(&[1.0; 3]);
        assert!(matches!(opposite, Err(PropagationError::Impossible { .. })));
        let plain = Inputs::new(&[1.0; 2], None).unwrap();
        assert!(matches!(plain.variance(&[f64::NAN, 1.0]), Err(PropagationError::Sensitivity { input: 0, .. })));
        assert_eq!(plain.variance(&[1.0]), Err(PropagationError::Length { expected: 2, found: 1 }));
        assert_eq!(plain.variance(&[1e200, 1.0]), Err(PropagationError::Overflow));
    }
}

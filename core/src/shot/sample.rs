//! Repeated observations: mean, scatter, and what to expect of the next one (JCGM 100:2008, 4.2).

use core::fmt;

/// Mean and scatter of independent observations of one quantity, in its unit.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
#[non_exhaustive]
pub struct Sample {
    /// Number of observations n, one or more.
    pub count: usize,
    /// Arithmetic mean.
    pub mean: f64,
    /// Sample standard deviation s with n − 1 degrees of freedom: how far single observations scatter. `None` for one observation, whose scatter is not known.
    pub standard_deviation: Option<f64>,
}

/// Why observations have no mean.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub enum SampleError {
    /// There are none.
    Empty,
    /// One is not a number, or of a size beyond 1e300.
    Observation {
        /// Its index.
        index: usize,
        /// Its value.
        value: f64,
    },
}

impl fmt::Display for SampleError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::Empty => f.write_str("no observations: one or more are needed"),
            Self::Observation { index, value } => write!(f, "observation {index} is {value}: a finite number below 1e300 is needed"),
        }
    }
}

impl core::error::Error for SampleError {}

/// Largest size of an observation: sums of 2^23 of them and their differences are finite.
const LARGEST: f64 = 1e300;

impl Sample {
    /// q̄ = Σ q/n and s = √(Σ (q − q̄)²/(n − 1)): JCGM 100:2008, equations (3) and (4).
    ///
    /// Two passes. The mean is corrected by that of the differences, so that it is good to about an ulp of the largest observation; s is formed from the
    /// differences, without cancellation of large numbers, to n ulp beside what rounding of the mean does. Observations are numbers of a size up to 1e300.
    ///
    /// # Errors
    /// [`SampleError`].
    ///
    /// ```
    /// use endwall::shot::Sample;
    /// // By hand: mean 5, differences −3, −1, 1, 3, s² = 20/3.
    /// let sample = Sample::of(&[2.0, 4.0, 6.0, 8.0])?;
    /// assert_eq!((sample.count, sample.mean), (4, 5.0));
    /// assert!((sample.standard_deviation.unwrap() - (20.0_f64 / 3.0).sqrt()).abs() < 1e-15);
    /// assert_eq!(Sample::of(&[2.0])?.standard_deviation, None);
    /// # Ok::<(), endwall::shot::SampleError>(())
    /// ```
    pub fn of(observations: &[f64]) -> Result<Self, SampleError> {
        if observations.is_empty() {
            return Err(SampleError::Empty);
        }
        for (index, &value) in observations.iter().enumerate() {
            if value.is_nan() || libm::fabs(value) > LARGEST {
                return Err(SampleError::Observation { index, value });
            }
        }
        let count = observations.len();
        let n = count as f64;
        let rough = observations.iter().sum::<f64>() / n;
        let mean = rough + observations.iter().map(|value| value - rough).sum::<f64>() / n;
        // In units of the largest difference, so that squares stay in range.
        let largest = observations.iter().map(|value| libm::fabs(value - mean)).fold(0.0, f64::max);
        let square = |value: &f64| {
            let difference = if largest > 0.0 { (value - mean) / largest } else { 0.0 };
            difference * difference
        };
        let scatter = || largest * libm::sqrt(observations.iter().map(square).sum::<f64>() / (n - 1.0));
        Ok(Self { count, mean, standard_deviation: (count > 1).then(scatter) })
    }

    /// n − 1.
    pub fn degrees_of_freedom(&self) -> usize {
        self.count.saturating_sub(1)
    }

    /// Standard uncertainty of the mean as an estimate of what is common to the observations: s/√n, JCGM 100:2008, equation (5). `None` for one
    /// observation.
    ///
    /// An error that all observations share does not show in it.
    ///
    /// ```
    /// use endwall::shot::Sample;
    /// let sample = Sample::of(&[1.0, 2.0, 3.0, 4.0])?;
    /// assert_eq!(sample.mean_uncertainty(), sample.standard_deviation.map(|s| s / 2.0));
    /// # Ok::<(), endwall::shot::SampleError>(())
    /// ```
    pub fn mean_uncertainty(&self) -> Option<f64> {
        self.standard_deviation.map(|s| s / libm::sqrt(self.count as f64))
    }

    /// Standard uncertainty of the next observation when the mean is expected of it: √(s² + s²/n), its own scatter and that of the mean. `None` for one
    /// observation. With [`coverage_factor`](super::coverage_factor) for n − 1 degrees of freedom it gives the interval in which the next one falls, for
    /// observations of a normal distribution.
    ///
    /// ```
    /// use endwall::shot::Sample;
    /// // Two observations at ±1: s² = 2, and 2 + 2/2 = 3.
    /// let next = Sample::of(&[-1.0, 1.0])?.next_uncertainty().unwrap();
    /// assert!((next - 3.0_f64.sqrt()).abs() < 1e-15);
    /// # Ok::<(), endwall::shot::SampleError>(())
    /// ```
    pub fn next_uncertainty(&self) -> Option<f64> {
        self.standard_deviation.map(|s| s * libm::sqrt(1.0 + 1.0 / self.count as f64))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::shot::{Generator, coverage_factor};

    /// JCGM 100:2008, 4.4.3 and table 1 (values from memory): twenty readings of a temperature in °C; mean 100.145, s 1.489, s/√20 0.333.
    const READINGS: [f64; 20] = [
        96.90, 98.18, 98.25, 98.61, 99.03, 99.49, 99.56, 99.74, 99.89, 100.07, 100.33, 100.42, 100.68, 100.95, 101.11, 101.20, 101.57,
        101.84, 102.36, 102.72,
    ];

    #[test]
    fn the_readings_of_jcgm_100() {
        let sample = Sample::of(&READINGS).unwrap();
        assert!((sample.mean - 100.145).abs() < 5e-4, "{sample:?}");
        assert!((sample.standard_deviation.unwrap() - 1.489).abs() < 5e-4, "{sample:?}");
        assert!((sample.mean_uncertainty().unwrap() - 0.333).abs() < 5e-4, "{sample:?}");
        assert_eq!((sample.count, sample.degrees_of_freedom()), (20, 19));
    }

    /// Shifting the readings does not change their scatter, scaling scales it: also where squares of the numbers leave the range.
    #[test]
    fn shift_and_scale() {
        let s = Sample::of(&READINGS).unwrap().standard_deviation.unwrap();
        for (scale, shift) in [(1.0, 1e6), (1e200, 0.0), (1e-200, 0.0), (-3.0, 7.0)] {
            let moved = READINGS.map(|value| value * scale + shift);
            let found = Sample::of(&moved).unwrap();
            assert!((found.standard_deviation.unwrap() / (s * f64::abs(scale)) - 1.0).abs() < 1e-9, "{scale} {shift}: {found:?}");
            assert!((found.mean / (100.145 * scale + shift) - 1.0).abs() < 1e-14, "{scale} {shift}: {found:?}");
        }
        let same = Sample::of(&[0.1; 7]).unwrap();
        assert_eq!((same.mean, same.standard_deviation), (0.1, Some(0.0)));
    }

    #[test]
    fn one_observation_has_no_scatter_and_none_has_nothing() {
        let one = Sample::of(&[0.93]).unwrap();
        assert_eq!((one.count, one.mean, one.standard_deviation, one.degrees_of_freedom()), (1, 0.93, None, 0));
        assert_eq!((one.mean_uncertainty(), one.next_uncertainty()), (None, None));
        assert_eq!(Sample::of(&[]), Err(SampleError::Empty));
        assert!(matches!(Sample::of(&[1.0, f64::NAN]), Err(SampleError::Observation { index: 1, .. })));
        assert_eq!(Sample::of(&[f64::INFINITY]), Err(SampleError::Observation { index: 0, value: f64::INFINITY }));
    }

    /// The next of four normal observations falls into mean ± k·√(s² + s²/n) as often as k says; ± k·s alone is too narrow.
    #[test]
    fn the_next_observation_is_where_it_is_expected() {
        let mut generator = Generator::new(11);
        let k = coverage_factor(0.95, 3.0).unwrap();
        let (mut inside, mut narrow) = (0_u32, 0_u32);
        for _ in 0..20_000 {
            let sample = Sample::of(&[0; 4].map(|_| generator.normal())).unwrap();
            let off = libm::fabs(generator.normal() - sample.mean);
            inside += u32::from(off <= k * sample.next_uncertainty().unwrap());
            narrow += u32::from(off <= k * sample.standard_deviation.unwrap());
        }
        // 19 000 with a standard deviation of 31.
        assert!((f64::from(inside) - 19_000.0).abs() < 4.0 * 31.0, "{inside}");
        assert!(narrow < 18_800, "{narrow}");
    }
}

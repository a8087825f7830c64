//! Coverage factors and effective degrees of freedom (JCGM 100:2008, annex G).

use core::fmt;

/// Level of confidence that belongs to `k = 2` of a normal distribution, `erf(sqrt(2))`: the column "95.45 %" of JCGM 100, table G.2.
pub const LEVEL_TWO_SIGMA: f64 = 0.954_499_736_103_642;

/// Degrees of freedom from which the expansion about the normal distribution is used: its fifth term is then below 1e-11.
const MANY: f64 = 1000.0;

/// Halvings of a bracket: from at most 2^60 wide to neighbouring doubles.
const HALVINGS: usize = 120;

/// What is wrong with a request for a coverage factor or for effective degrees of freedom.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub enum CoverageError {
    /// The level of confidence is outside 0.5 to 0.9999.
    Level {
        /// Its value.
        value: f64,
    },
    /// The degrees of freedom are below one, or not a number.
    DegreesOfFreedom {
        /// Their value.
        value: f64,
    },
    /// A contribution to the uncertainty is not finite.
    Contribution {
        /// Its index.
        index: usize,
        /// Its value.
        value: f64,
    },
}

impl fmt::Display for CoverageError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::Level { value } => {
                write!(f, "level of confidence {value}: a number from 0.5 to 0.9999 is needed (0.95 for 95 %)")
            }
            Self::DegreesOfFreedom { value } => {
                write!(f, "degrees of freedom {value}: one or more is needed")
            }
            Self::Contribution { index, value } => {
                write!(f, "contribution {index} to the uncertainty is {value}: a finite number is needed")
            }
        }
    }
}

impl core::error::Error for CoverageError {}

/// Coverage factor `k`: half width, in standard uncertainties, of the central interval that holds a share `level` of Student's t
/// distribution with `degrees_of_freedom`, JCGM 100:2008, G.3 and table G.2.
///
/// `degrees_of_freedom` may be any real number from one to infinity (`f64::INFINITY`: the normal distribution). JCGM 100 G.4.1 allows to
/// interpolate in the table or to truncate to the next lower whole number; here the quantile is computed at the real number itself, where
/// the table would be interpolated. To truncate, pass `libm::floor(degrees_of_freedom)`. `level` lies in 0.5 to 0.9999 and is
/// dimensionless, as is the result. Relative error below 1e-10; bounded work.
///
/// # Errors
/// [`CoverageError::Level`], [`CoverageError::DegreesOfFreedom`].
///
/// ```
/// use endwall::shot::coverage_factor;
/// assert!((coverage_factor(0.95, 9.0)? - 2.26).abs() < 0.005);
/// # Ok::<(), endwall::shot::CoverageError>(())
/// ```
pub fn coverage_factor(level: f64, degrees_of_freedom: f64) -> Result<f64, CoverageError> {
    if !(0.5..=0.9999).contains(&level) {
        return Err(CoverageError::Level { value: level });
    }
    if degrees_of_freedom.is_nan() || degrees_of_freedom < 1.0 {
        return Err(CoverageError::DegreesOfFreedom { value: degrees_of_freedom });
    }
    let outside = 1.0 - level;
    if degrees_of_freedom >= MANY {
        let normal = bisect(|z| libm::erfc(z / core::f64::consts::SQRT_2) > outside);
        return Ok(near_normal(normal, degrees_of_freedom));
    }
    let scale = log_beta_half(0.5 * degrees_of_freedom);
    Ok(bisect(|t| two_tails(t, degrees_of_freedom, scale) > outside))
}

/// Effective degrees of freedom of a combined standard uncertainty (Welch-Satterthwaite, JCGM 100:2008, equation (G.2b)):
/// `u_c^4 / sum(u_i^4 / nu_i)`.
///
/// Each component is `(u_i, nu_i)`: the contribution `c_i u(x_i)` of an input in the unit of the result, of either sign, and the degrees of
/// freedom of `u(x_i)`, one or more, `f64::INFINITY` where it is taken as known. The inputs must be independent. The result is dimensionless,
/// not below the smallest `nu_i` and not above the sum of those that count; infinite when no finite one counts. A few ulp of error.
///
/// # Errors
/// [`CoverageError::DegreesOfFreedom`], [`CoverageError::Contribution`].
///
/// ```
/// use endwall::shot::effective_degrees_of_freedom;
/// assert_eq!(effective_degrees_of_freedom(&[(1.0, 4.0), (1.0, 4.0)])?, 8.0);
/// assert_eq!(effective_degrees_of_freedom(&[(1.0, f64::INFINITY)])?, f64::INFINITY);
/// # Ok::<(), endwall::shot::CoverageError>(())
/// ```
pub fn effective_degrees_of_freedom(components: &[(f64, f64)]) -> Result<f64, CoverageError> {
    let mut largest = 0.0;
    for (index, &(contribution, degrees)) in components.iter().enumerate() {
        if !contribution.is_finite() {
            return Err(CoverageError::Contribution { index, value: contribution });
        }
        if degrees.is_nan() || degrees < 1.0 {
            return Err(CoverageError::DegreesOfFreedom { value: degrees });
        }
        largest = libm::fabs(contribution).max(largest);
    }
    if largest == 0.0 {
        return Ok(f64::INFINITY);
    }
    // In units of the largest, so that fourth powers stay in range.
    let (mut variance, mut spread) = (0.0, 0.0);
    for &(contribution, degrees) in components {
        let ratio = contribution / largest;
        let square = ratio * ratio;
        variance += square;
        spread += square * square / degrees;
    }
    Ok(variance * variance / spread)
}

/// Where `above` turns from true to false on the positive axis: the bracket is doubled from 1, then halved.
fn bisect(above: impl Fn(f64) -> bool) -> f64 {
    let (mut low, mut high) = (0.0, 1.0);
    for _ in 0..60 {
        if !above(high) {
            break;
        }
        low = high;
        high *= 2.0;
    }
    for _ in 0..HALVINGS {
        let middle = 0.5 * (low + high);
        if above(middle) {
            low = middle;
        } else {
            high = middle;
        }
    }
    0.5 * (low + high)
}

/// Quantile for many degrees of freedom from the normal one (Abramowitz and Stegun 26.7.5, from memory).
fn near_normal(z: f64, degrees_of_freedom: f64) -> f64 {
    let (d, s) = (1.0 / degrees_of_freedom, z * z);
    let g1 = (s + 1.0) / 4.0;
    let g2 = ((5.0 * s + 16.0) * s + 3.0) / 96.0;
    let g3 = (((3.0 * s + 19.0) * s + 17.0) * s - 15.0) / 384.0;
    let g4 = ((((79.0 * s + 776.0) * s + 1482.0) * s - 1920.0) * s - 945.0) / 92160.0;
    z * (1.0 + d * (g1 + d * (g2 + d * (g3 + d * g4))))
}

/// `ln B(a, 1/2)`.
fn log_beta_half(a: f64) -> f64 {
    let log_gamma_half = 0.5 * libm::log(core::f64::consts::PI);
    libm::lgamma(a) - libm::lgamma(a + 0.5) + log_gamma_half
}

/// Share of Student's distribution outside `-t..t`: the regularised incomplete beta function `I_x(nu/2, 1/2)`, `x = nu/(nu + t^2)`
/// (Abramowitz and Stegun 26.7.1 with 26.5.2, from memory). `scale` is `ln B(nu/2, 1/2)`.
fn two_tails(t: f64, degrees_of_freedom: f64, scale: f64) -> f64 {
    let a = 0.5 * degrees_of_freedom;
    let square = t * t;
    let total = degrees_of_freedom + square;
    let (x, rest) = (degrees_of_freedom / total, square / total);
    // x^a (1 - x)^(1/2) / B, with ln x formed from what is small.
    let front = libm::exp(-a * libm::log1p(square / degrees_of_freedom) - scale) * libm::sqrt(rest);
    // The continued fraction converges fast on the side of the mean that this comparison picks.
    if x < (a + 1.0) / (a + 2.5) { front * beta_fraction(a, 0.5, x) / a } else { 1.0 - front * beta_fraction(0.5, a, rest) / 0.5 }
}

/// Continued fraction of the incomplete beta function (Abramowitz and Stegun 26.5.8, from memory), evaluated forwards (Lentz).
fn beta_fraction(a: f64, b: f64, x: f64) -> f64 {
    // Keeps a denominator that vanishes by accident away from zero without changing any other.
    let guard = |v: f64| if libm::fabs(v) < 1e-300 { 1e-300 } else { v };
    let mut c = 1.0;
    let mut d = 1.0 / guard(1.0 - (a + b) * x / (a + 1.0));
    let mut value = d;
    for m in 1..=500_u16 {
        let m = f64::from(m);
        let even = m * (b - m) * x / ((a + 2.0 * m - 1.0) * (a + 2.0 * m));
        d = 1.0 / guard(1.0 + even * d);
        c = guard(1.0 + even / c);
        value *= c * d;
        let odd = -(a + m) * (a + b + m) * x / ((a + 2.0 * m) * (a + 2.0 * m + 1.0));
        d = 1.0 / guard(1.0 + odd * d);
        c = guard(1.0 + odd / c);
        value *= c * d;
        if libm::fabs(c * d - 1.0) < 1e-16 {
            break;
        }
    }
    value
}

#[cfg(test)]
mod tests {
    use super::*;

    /// JCGM 100:2008, table G.2, columns 95 % and 95.45 % (values from memory; both are rounded to two decimals there).
    const TABLE_G2: [(f64, f64, f64); 26] = [
        (1.0, 12.71, 13.97),
        (2.0, 4.30, 4.53),
        (3.0, 3.18, 3.31),
        (4.0, 2.78, 2.87),
        (5.0, 2.57, 2.65),
        (6.0, 2.45, 2.52),
        (7.0, 2.36, 2.43),
        (8.0, 2.31, 2.37),
        (9.0, 2.26, 2.32),
        (10.0, 2.23, 2.28),
        (11.0, 2.20, 2.25),
        (12.0, 2.18, 2.23),
        (13.0, 2.16, 2.21),
        (14.0, 2.14, 2.20),
        (15.0, 2.13, 2.18),
        (16.0, 2.12, 2.17),
        (17.0, 2.11, 2.16),
        (18.0, 2.10, 2.15),
        (19.0, 2.09, 2.14),
        (20.0, 2.09, 2.13),
        (25.0, 2.06, 2.11),
        (30.0, 2.04, 2.09),
        (35.0, 2.03, 2.07),
        (40.0, 2.02, 2.06),
        (50.0, 2.01, 2.05),
        (100.0, 1.984, 2.025),
    ];

    #[test]
    fn table_g2_of_jcgm_100() {
        for (degrees, at_95, at_two_sigma) in TABLE_G2 {
            // The last row is printed with three decimals.
            let half = if degrees == 100.0 { 0.0005 } else { 0.005 };
            for (level, want) in [(0.95, at_95), (0.9545, at_two_sigma)] {
                let k = coverage_factor(level, degrees).unwrap();
                assert!((k - want).abs() <= half + 1e-9, "{degrees} {level}: {k}, table {want}");
            }
        }
        assert!((coverage_factor(0.95, f64::INFINITY).unwrap() - 1.959_963_984_540_054).abs() < 1e-14);
        assert!((coverage_factor(LEVEL_TWO_SIGMA, f64::INFINITY).unwrap() - 2.0).abs() < 1e-13);
    }

    /// Closed forms: one degree of freedom `tan(pi p/2)`, two `p sqrt(2/(1-p^2))`, four by its cubic.
    #[test]
    fn closed_forms() {
        for level in [0.5, 0.6827, 0.95, 0.9545, 0.99, 0.9973, 0.9999] {
            let one = libm::tan(core::f64::consts::FRAC_PI_2 * level);
            let two = level * libm::sqrt(2.0 / (1.0 - level * level));
            assert!((coverage_factor(level, 1.0).unwrap() / one - 1.0).abs() < 1e-11, "{level}");
            assert!((coverage_factor(level, 2.0).unwrap() / two - 1.0).abs() < 1e-12, "{level}");
            // Four: p = s (3 - s^2)/2 with s = t/sqrt(4 + t^2).
            let t = coverage_factor(level, 4.0).unwrap();
            let s = t / libm::sqrt(4.0 + t * t);
            assert!((s * (3.0 - s * s) / 2.0 - level).abs() < 1e-13, "{level}");
        }
    }

    #[test]
    fn falls_with_degrees_of_freedom_and_joins_the_expansion() {
        for level in [0.5, 0.95, 0.9999] {
            let mut last = f64::INFINITY;
            for i in 0..200 {
                let k = coverage_factor(level, 1.0 + 0.37 * f64::from(i)).unwrap();
                assert!(k < last);
                last = k;
            }
            let scale = log_beta_half(0.5 * MANY);
            let direct = bisect(|t| two_tails(t, MANY, scale) > 1.0 - level);
            assert!((coverage_factor(level, MANY).unwrap() / direct - 1.0).abs() < 1e-10, "{level}");
        }
    }

    #[test]
    fn bad_requests_are_named() {
        assert_eq!(coverage_factor(95.0, 9.0), Err(CoverageError::Level { value: 95.0 }));
        assert_eq!(coverage_factor(0.95, 0.5), Err(CoverageError::DegreesOfFreedom { value: 0.5 }));
        assert!(coverage_factor(f64::NAN, 9.0).is_err() && coverage_factor(0.95, f64::NAN).is_err());
        assert!(effective_degrees_of_freedom(&[(1.0, 0.0)]).is_err());
        assert!(matches!(
            effective_degrees_of_freedom(&[(1.0, 5.0), (f64::INFINITY, 5.0)]),
            Err(CoverageError::Contribution { index: 1, .. })
        ));
    }

    #[test]
    fn effective_degrees_of_freedom_do_not_overflow() {
        let far = effective_degrees_of_freedom(&[(3e200, 5.0), (-4e200, f64::INFINITY)]).unwrap();
        assert!((far - 625.0 / 81.0 * 5.0).abs() < 1e-12);
        assert_eq!(effective_degrees_of_freedom(&[]), Ok(f64::INFINITY));
    }
}

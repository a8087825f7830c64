//! A real number that stays exact as long as it can.
//!
//! Ratios of whole numbers stay ratios, and `shift ± √radicand` stays symbolic, so that a comparison with a
//! double is exact. Everything else is a binary float of [`WORKING`] bits or more that knows how many of its
//! bits are right; a comparison that those bits cannot decide panics instead of guessing.

use core::cmp::Ordering;

use dashu_base::{Abs, BitTest, Sign, SquareRoot, SquareRootRem};
use dashu_float::{Context, FBig, round::mode::HalfEven};
use dashu_int::{IBig, UBig};
use dashu_ratio::RBig;

/// Bits with which an approximated value is computed, unless a function asks for more.
pub const WORKING: usize = 640;

/// Right bits that an approximated value must have to be compared with a double.
pub const PRECISION: i64 = 400;

/// Binary float of arbitrary precision, rounded to nearest.
pub type Float = FBig<HalfEven, 2>;

/// A real number: exact where possible, otherwise with a count of right bits.
#[derive(Clone, Debug)]
pub enum Real {
    /// A ratio of whole numbers.
    Rational(RBig),
    /// `shift + √radicand`, or `shift − √radicand` when `negative`; the radicand is positive and no square.
    Surd {
        /// Rational part.
        shift: RBig,
        /// Number under the root.
        radicand: RBig,
        /// Whether the root is subtracted.
        negative: bool,
    },
    /// A float within `2^-bits` of the truth, relative.
    Approximate {
        /// The float.
        value: Float,
        /// Number of right bits.
        bits: i64,
    },
}

/// The exact ratio `numerator / denominator`.
#[must_use]
pub fn ratio(numerator: i64, denominator: i64) -> RBig {
    RBig::from_parts_signed(IBig::from(numerator), IBig::from(denominator))
}

/// The double taken as the exact number that it is. Panics when it is not finite.
#[must_use]
pub fn exact(value: f64) -> RBig {
    RBig::try_from(value).unwrap_or_else(|_| panic!("{value} is no finite number"))
}

/// Reads `"7"`, `"-7/5"`, `"0.25"` or `"1.5e-3"` as the exact ratio that it is.
#[must_use]
pub fn parse(text: &str) -> RBig {
    if let Some((numerator, denominator)) = text.split_once('/') {
        return parse(numerator) / parse(denominator);
    }
    let (mantissa, power) = text.split_once(['e', 'E']).unwrap_or((text, "0"));
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    let digits: IBig = format!("{whole}{fraction}").parse().unwrap_or_else(|_| panic!("no number: {text:?}"));
    let power: i64 = power.parse().unwrap_or_else(|_| panic!("no power of ten: {text:?}"));
    let shift = power - i64::try_from(fraction.len()).expect("short text");
    let scale = RBig::from(UBig::from(10u8).pow(usize::try_from(shift.unsigned_abs()).expect("small power")));
    if shift < 0 { RBig::from(digits) / scale } else { RBig::from(digits) * scale }
}

/// Two to the power `exponent`, exactly.
#[must_use]
pub fn power_of_two(exponent: i64) -> RBig {
    let size = RBig::from(UBig::ONE << usize::try_from(exponent.unsigned_abs()).expect("small exponent"));
    if exponent < 0 { RBig::ONE / size } else { size }
}

/// The square root when it is rational.
#[must_use]
pub fn rational_root(value: &RBig) -> Option<RBig> {
    let numerator = value.numerator().clone();
    assert!(numerator.sign() == Sign::Positive, "square root of the negative number {value}");
    let (top, rest) = UBig::try_from(numerator).expect("sign was checked").sqrt_rem();
    if !rest.is_zero() {
        return None;
    }
    let (bottom, rest) = value.denominator().sqrt_rem();
    rest.is_zero().then(|| RBig::from_parts(IBig::from(top), bottom))
}

/// The ratio rounded to a float of `bits` bits.
#[must_use]
pub fn float(value: &RBig, bits: usize) -> Float {
    let context = Context::<HalfEven>::new(bits + 4);
    let numerator = context.convert_int::<2>(value.numerator().clone()).value();
    let denominator = context.convert_int::<2>(IBig::from(value.denominator().clone())).value();
    numerator / denominator
}

/// `floor(log2 |value|)`; panics for zero.
pub(super) fn exponent(value: &Float) -> i64 {
    assert!(!value.repr().is_zero(), "an approximated value cancelled completely");
    let digits = value.repr().significand().clone().abs().bit_len();
    i64::try_from(value.repr().exponent()).expect("small exponent") + i64::try_from(digits).expect("short") - 1
}

impl Real {
    /// A whole number.
    #[must_use]
    pub fn int(value: i64) -> Self {
        Self::Rational(RBig::from(value))
    }

    /// A double, taken exactly.
    #[must_use]
    pub fn from_f64(value: f64) -> Self {
        Self::Rational(exact(value))
    }

    /// An approximated value with the given number of right bits.
    pub(super) fn approximate(value: Float, bits: i64) -> Self {
        assert!(bits > 0, "all digits of an approximated value are lost: {value:?} {bits}");
        Self::Approximate { value, bits }
    }

    /// `shift ± √radicand`, reduced to a ratio where the root is one.
    pub(super) fn surd(shift: RBig, radicand: RBig, negative: bool) -> Self {
        match rational_root(&radicand) {
            Some(root) if negative => Self::Rational(shift - root),
            Some(root) => Self::Rational(shift + root),
            None => Self::Surd { shift, radicand, negative },
        }
    }

    /// The ratio, if the value is known to be one.
    #[must_use]
    pub fn as_rational(&self) -> Option<&RBig> {
        if let Self::Rational(value) = self { Some(value) } else { None }
    }

    /// The value as a float of at least `bits` right bits (fewer only if the value itself has fewer), with their number.
    #[must_use]
    pub fn to_float(&self, bits: usize) -> (Float, i64) {
        let right = |precision: usize| i64::try_from(precision).expect("small precision");
        match self {
            Self::Rational(value) => (float(value, bits), right(bits)),
            Self::Approximate { value, bits } => (value.clone(), *bits),
            Self::Surd { shift, radicand, negative } => {
                let mut precision = bits + 8;
                loop {
                    let root = float(radicand, precision).sqrt();
                    let part = float(shift, precision);
                    let reference = exponent(&root);
                    let value = if *negative { part - root } else { part + root };
                    // The sum is as wrong as its larger part; what the subtraction ate is asked for again.
                    if !value.repr().is_zero() {
                        let eaten = (reference + 2 - exponent(&value)).max(0);
                        if right(precision) - eaten >= right(bits) + 4 {
                            return (value, right(bits));
                        }
                    }
                    precision *= 2;
                }
            }
        }
    }

    /// The nearest double (for printing and for starting values).
    #[must_use]
    pub fn to_f64(&self) -> f64 {
        match self {
            Self::Rational(value) => value.to_f64().value(),
            _ => self.to_float(WORKING).0.to_f64().value(),
        }
    }

    /// Compares with a double. Exact for ratios and roots; panics when the right bits do not decide.
    #[must_use]
    pub fn cmp_f64(&self, double: f64) -> Ordering {
        assert!(!double.is_nan(), "a bound is NaN");
        if double.is_infinite() {
            return if double > 0.0 { Ordering::Less } else { Ordering::Greater };
        }
        self.cmp_rational(&exact(double))
    }

    /// Compares with a ratio. Exact for ratios and roots; panics when the right bits do not decide.
    #[must_use]
    pub fn cmp_rational(&self, other: &RBig) -> Ordering {
        match self {
            Self::Rational(value) => value.cmp(other),
            Self::Surd { shift, radicand, negative } => {
                let rest = other - shift;
                let square = &rest * &rest;
                match (negative, rest > RBig::ZERO) {
                    (false, false) => Ordering::Greater,
                    (false, true) => radicand.cmp(&square),
                    (true, true) => Ordering::Less,
                    (true, false) => square.cmp(radicand),
                }
            }
            Self::Approximate { value, bits } => {
                assert!(*bits >= PRECISION, "only {bits} bits of an approximated value are right");
                let difference = value - float(other, value.precision().max(WORKING) + 64);
                let undecided = difference.repr().is_zero() || exponent(&difference) < exponent(value) - bits + 3;
                assert!(!undecided, "{bits} right bits do not tell the truth from {other}; is it exact?");
                if difference.repr().sign() == Sign::Negative { Ordering::Less } else { Ordering::Greater }
            }
        }
    }

    /// Sign of the value; an approximated value has one by construction.
    #[must_use]
    pub fn signum(&self) -> i32 {
        match self {
            Self::Approximate { value, .. } => {
                if value.repr().sign() == Sign::Negative {
                    -1
                } else {
                    1
                }
            }
            _ => self.cmp_rational(&RBig::ZERO) as i32,
        }
    }

    /// `|self / other − 1|` as a double, at most as good as the right bits of both.
    #[must_use]
    pub fn relative_difference(&self, other: &Self) -> f64 {
        if let (Self::Rational(a), Self::Rational(b)) = (self, other) {
            return (a / b - RBig::ONE).abs().to_f64().value();
        }
        let (a, b) = (self.to_float(WORKING).0, other.to_float(WORKING).0);
        (a / b - Float::ONE).abs().to_f64().value()
    }
}

//! A quantity as typed: `32.99 ± 0.08 kPa`.

use alloc::format;
use alloc::string::{String, ToString};

use super::error::{ErrorKind, RecordError};
use super::quantity_text::{self, Parts};
use super::unit::{Dimension, Unit};
use crate::number::Rational;

/// What a number after ± means.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Coverage {
    /// A standard uncertainty: nothing else was said.
    Standard,
    /// An expanded uncertainty, `(k=2)`: divided by the factor (JCGM 100:2008, 7.2.3).
    Factor(Rational),
    /// Half-width of a rectangular distribution, `(limits)`: divided by √3 (JCGM 100:2008, 4.3.7).
    Limits,
}

/// The uncertainty of a [`Quantity`], in SI units.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Uncertainty {
    /// The half-width as stated, exact, in SI units.
    pub stated: Rational,
    /// What the half-width means.
    pub coverage: Coverage,
    /// The standard uncertainty: the nearest double, or within two units in the last place after a division by √3.
    pub standard: f64,
    /// Degrees of freedom; `None` where not stated (taken as infinite).
    pub degrees_of_freedom: Option<f64>,
}

impl Uncertainty {
    /// The standard uncertainty as an exact number; `None` for limits, whose √3 is irrational.
    pub fn exact(&self) -> Option<Rational> {
        match self.coverage {
            Coverage::Standard => Some(self.stated),
            Coverage::Factor(k) => self.stated.checked_div(k),
            Coverage::Limits => None,
        }
    }
}

/// Whether a pressure counts from zero or from the surroundings.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mark {
    /// Nothing was said; taken as absolute where that is allowed.
    Unmarked,
    /// `(a)`: absolute.
    Absolute,
    /// `(g)`: above the surroundings.
    Gauge,
}

/// A measured quantity: the text as typed and its exact SI value.
///
/// ```
/// use endwall::record::{Dimension, Quantity};
/// let pressure = Quantity::parse("32.99 ± 0.16 kPa (k=2)", Dimension::Pressure).unwrap();
/// assert_eq!(pressure.value(), "32990".parse().unwrap());
/// assert_eq!(pressure.standard_uncertainty(), Some(80.0));
/// assert_eq!(pressure.typed(), "32.99 ± 0.16 kPa (k=2)");
/// ```
#[derive(Clone, Debug, PartialEq)]
pub struct Quantity {
    typed: String,
    dimension: Dimension,
    value: Rational,
    unit: Unit,
    mark: Mark,
    uncertainty: Option<Uncertainty>,
}

/// A mistake inside the text of a quantity; [`at`](Self::at) adds the field.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct QuantityError {
    typed: String,
    wrong: String,
    remedy: String,
}

impl QuantityError {
    pub(crate) fn new(typed: &str, wrong: impl Into<String>, remedy: impl Into<String>) -> Self {
        Self { typed: typed.into(), wrong: wrong.into(), remedy: remedy.into() }
    }

    /// The error with the path of the field that it belongs to.
    pub fn at(self, path: &str) -> RecordError {
        RecordError::new(ErrorKind::Quantity, path, &self.typed, self.wrong, self.remedy)
    }
}

impl core::fmt::Display for QuantityError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        self.clone().at("").fmt(f)
    }
}

impl core::error::Error for QuantityError {}

/// 2^±200, the range in which the core proves its results.
const SMALLEST: f64 = f64::from_bits((1023 - 200) << 52);
const LARGEST: f64 = f64::from_bits((1023 + 200) << 52);

impl Quantity {
    /// Reads a quantity of the wanted dimension.
    ///
    /// Forms: `32.99 kPa`, `32.99 ± 0.08 kPa` (`+/-` too), `32.99(8) kPa` (JCGM 100:2008, 7.2.2: the digits in
    /// parentheses count in the last digits of the value; with a decimal point they count in its unit),
    /// `32.99 ± 0.25 % kPa` (relative). `(k=2)`, `(limits)` and `(dof 9)` may follow in any order, and `(a)` or `(g)`
    /// after a unit of pressure. The text is at most 200 bytes long; numbers have at most 38 digits.
    ///
    /// # Errors
    /// What is wrong with the text and what would be right. A guess is offered, never taken.
    ///
    /// ```
    /// use endwall::record::{Dimension, Quantity};
    /// let a = Quantity::parse("296.20(50) K", Dimension::Temperature).unwrap();
    /// let b = Quantity::parse("23.05 ± 0.5 °C", Dimension::Temperature).unwrap();
    /// assert_eq!(a.value(), b.value());
    /// assert_eq!(a.standard_uncertainty(), b.standard_uncertainty());
    /// let missing = Quantity::parse("8.000", Dimension::Pressure).unwrap_err();
    /// assert!(missing.to_string().contains("no unit"));
    /// ```
    pub fn parse(text: &str, wanted: Dimension) -> Result<Self, QuantityError> {
        let parts = quantity_text::split(text, wanted)?;
        let too_long = || QuantityError::new(text, "the number does not fit 38 digits in SI units", "type fewer digits");
        if parts.mark != Mark::Unmarked && wanted != Dimension::Pressure {
            return Err(QuantityError::new(text, "(a) and (g) belong to units of pressure", "leave the mark out"));
        }
        let value = parts.unit.to_si(parts.value).ok_or_else(too_long)?;
        let magnitude = value.to_f64().abs();
        if magnitude != 0.0 && !(SMALLEST..=LARGEST).contains(&magnitude) {
            return Err(QuantityError::new(text, "the value lies beyond the range 2^-200 to 2^200", "check the power of ten"));
        }
        let uncertainty = match parts.uncertainty {
            None => None,
            Some(half_width) => Some(uncertainty(text, &parts, half_width).and_then(|u| u.ok_or_else(too_long))?),
        };
        Ok(Self { typed: text.to_string(), dimension: wanted, value, unit: parts.unit, mark: parts.mark, uncertainty })
    }

    /// The text as typed.
    pub fn typed(&self) -> &str {
        &self.typed
    }

    /// What it measures.
    pub fn dimension(&self) -> Dimension {
        self.dimension
    }

    /// The exact SI value. A gauge pressure stays one: see [`absolute`](Self::absolute).
    pub fn value(&self) -> Rational {
        self.value
    }

    /// The unit as typed, for showing results in the writer's units.
    pub fn unit(&self) -> Unit {
        self.unit
    }

    /// Gauge, absolute or unmarked.
    pub fn mark(&self) -> Mark {
        self.mark
    }

    /// The uncertainty with its meaning; `None` where none was typed.
    pub fn uncertainty(&self) -> Option<&Uncertainty> {
        self.uncertainty.as_ref()
    }

    /// The standard uncertainty in SI units; `None` where none was typed.
    pub fn standard_uncertainty(&self) -> Option<f64> {
        self.uncertainty.map(|u| u.standard)
    }

    /// Degrees of freedom of the uncertainty; `None` where not stated.
    pub fn degrees_of_freedom(&self) -> Option<f64> {
        self.uncertainty.and_then(|u| u.degrees_of_freedom)
    }

    /// The absolute pressure: the value itself, or gauge plus ambient, exactly, with the uncertainties added in quadrature if the gauge value states one.
    /// `None` if a gauge pressure meets no ambient pressure, or 128-bit integers do not hold the sum.
    ///
    /// ```
    /// use endwall::record::{Dimension, Quantity};
    /// let gauge = Quantity::parse("1.5 ± 0.03 bar(g)", Dimension::Pressure).unwrap();
    /// let ambient = Quantity::parse("101.3 ± 4 kPa", Dimension::Pressure).unwrap();
    /// let sum = gauge.absolute(Some(&ambient)).unwrap();
    /// assert_eq!((sum.value, sum.standard_uncertainty), ("251300".parse().unwrap(), Some(5000.0)));
    /// assert!(gauge.absolute(None).is_none());
    /// ```
    pub fn absolute(&self, ambient: Option<&Self>) -> Option<Absolute> {
        if self.mark != Mark::Gauge {
            return Some(Absolute { value: self.value, standard_uncertainty: self.standard_uncertainty() });
        }
        let ambient = ambient?;
        // That of the ambient pressure alone does not say how well the gauge was read.
        let standard_uncertainty = self.standard_uncertainty().map(|own| libm::hypot(own, ambient.standard_uncertainty().unwrap_or(0.0)));
        Some(Absolute { value: self.value.checked_add(ambient.value)?, standard_uncertainty })
    }
}

/// An absolute pressure, Pa.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Absolute {
    /// The exact value.
    pub value: Rational,
    /// The standard uncertainty; `None` where none was stated.
    pub standard_uncertainty: Option<f64>,
}

/// The uncertainty in SI units; the inner `None` where 128-bit integers do not hold it.
fn uncertainty(text: &str, parts: &Parts, half_width: Rational) -> Result<Option<Uncertainty>, QuantityError> {
    let stated = if parts.relative {
        if parts.unit.has_offset() {
            let wrong = format!("a percentage of a temperature in {} has no meaning", parts.unit.symbol());
            let remedy = format!("state the uncertainty in {}", parts.unit.symbol());
            return Err(QuantityError::new(text, wrong, remedy));
        }
        let hundredth = Rational::ratio(1, 100).unwrap_or(Rational::ONE);
        parts
            .value
            .abs()
            .checked_mul(half_width)
            .and_then(|product| product.checked_mul(hundredth))
            .and_then(|product| parts.unit.difference_to_si(product))
    } else {
        parts.unit.difference_to_si(half_width)
    };
    let Some(stated) = stated else { return Ok(None) };
    let standard = match parts.coverage {
        Coverage::Standard => stated.to_f64(),
        Coverage::Factor(k) => match stated.checked_div(k) {
            Some(exact) => exact.to_f64(),
            None => return Ok(None),
        },
        Coverage::Limits => stated.to_f64() / libm::sqrt(3.0),
    };
    if standard != 0.0 && !(SMALLEST..=LARGEST).contains(&standard) {
        let wrong = "the uncertainty lies beyond the range 2^-200 to 2^200";
        return Err(QuantityError::new(text, wrong, "check the power of ten"));
    }
    Ok(Some(Uncertainty { stated, coverage: parts.coverage, standard, degrees_of_freedom: parts.degrees_of_freedom.map(Rational::to_f64) }))
}

#[cfg(test)]
#[path = "quantity_tests.rs"]
mod tests;

//! Units: dimension and exact ratio to SI.
//!
//! Exact by definition: atm, bar, Torr (1 atm/760), inch (25.4 mm), pound (0.45359237 kg) and standard gravity
//! (9.80665 m/s²), as listed in NIST SP 811, appendix B (from memory). Conventional mercury columns use 13.5951 g/cm³:
//! 1 mmHg = 133.322387415 Pa, 1 inHg = 25.4 mmHg.

use alloc::format;
use alloc::string::{String, ToString};

use crate::number::Rational;

/// What a quantity measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Dimension {
    /// Pressure, Pa.
    Pressure,
    /// Temperature, K.
    Temperature,
    /// Length, m.
    Length,
    /// Time, s.
    Time,
    /// Speed, m/s.
    Speed,
    /// Molar mass, kg/mol.
    MolarMass,
    /// A fraction of one, typed with `%`, `ppm` or no unit.
    Fraction,
    /// A ratio without a unit, such as the heat capacity ratio.
    Ratio,
    /// Change per length, 1/m.
    PerLength,
    /// Acoustic impedance of a wall (density times wave speed), Pa s/m.
    Impedance,
    /// Change of pressure with time, Pa/s.
    PressureRate,
}

impl Dimension {
    /// What the quantity is called in a message.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Pressure => "a pressure",
            Self::Temperature => "a temperature",
            Self::Length => "a length",
            Self::Time => "a time",
            Self::Speed => "a speed",
            Self::MolarMass => "a molar mass",
            Self::Fraction => "a fraction",
            Self::Ratio => "a ratio without a unit",
            Self::PerLength => "a change per length",
            Self::Impedance => "an impedance",
            Self::PressureRate => "a change of pressure with time",
        }
    }

    /// The SI unit in which values are kept.
    pub const fn si_unit(self) -> &'static str {
        match self {
            Self::Pressure => "Pa",
            Self::Temperature => "K",
            Self::Length => "m",
            Self::Time => "s",
            Self::Speed => "m/s",
            Self::MolarMass => "kg/mol",
            Self::Fraction | Self::Ratio => "1",
            Self::PerLength => "1/m",
            Self::Impedance => "Pa s/m",
            Self::PressureRate => "Pa/s",
        }
    }

    /// True where a bare number says it all.
    pub const fn may_lack_unit(self) -> bool {
        matches!(self, Self::Fraction | Self::Ratio)
    }

    /// The accepted units, for a message.
    pub fn accepted(self) -> String {
        let mut list = String::new();
        for unit in UNITS.iter().filter(|unit| unit.dimension == self && !unit.second_spelling) {
            if !list.is_empty() {
                list.push_str(", ");
            }
            list.push_str(unit.symbol);
        }
        match self {
            Self::Fraction => list + " or no unit",
            Self::Ratio => "no unit".to_string(),
            _ => list,
        }
    }
}

/// A unit: its symbol, its dimension and its exact ratio to the SI unit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Unit {
    symbol: &'static str,
    dimension: Dimension,
    numerator: u128,
    denominator: u128,
    /// Hundredths of this unit from absolute zero to its zero point; only temperatures have one.
    zero_hundredths: i64,
    /// True for another spelling of a unit that is listed before.
    second_spelling: bool,
}

const fn unit(symbol: &'static str, dimension: Dimension, numerator: u128, denominator: u128) -> Unit {
    Unit { symbol, dimension, numerator, denominator, zero_hundredths: 0, second_spelling: false }
}

const fn also(mut first: Unit, symbol: &'static str) -> Unit {
    first.symbol = symbol;
    first.second_spelling = true;
    first
}

const CELSIUS: Unit = Unit { zero_hundredths: 27315, ..unit("degC", Dimension::Temperature, 1, 1) };
const FAHRENHEIT: Unit = Unit { zero_hundredths: 45967, ..unit("degF", Dimension::Temperature, 5, 9) };
const MICROSECOND: Unit = unit("us", Dimension::Time, 1, 1_000_000);
const IMPEDANCE: Unit = unit("Pa s/m", Dimension::Impedance, 1, 1);

static UNITS: [Unit; 43] = [
    unit("Pa", Dimension::Pressure, 1, 1),
    unit("hPa", Dimension::Pressure, 100, 1),
    unit("kPa", Dimension::Pressure, 1000, 1),
    unit("MPa", Dimension::Pressure, 1_000_000, 1),
    unit("bar", Dimension::Pressure, 100_000, 1),
    unit("mbar", Dimension::Pressure, 100, 1),
    unit("Torr", Dimension::Pressure, 101_325, 760),
    unit("mTorr", Dimension::Pressure, 101_325, 760_000),
    unit("mmHg", Dimension::Pressure, 133_322_387_415, 1_000_000_000),
    unit("inHg", Dimension::Pressure, 3_386_388_640_341, 1_000_000_000),
    unit("atm", Dimension::Pressure, 101_325, 1),
    // 0.45359237 kg · 9.80665 m/s² / (0.0254 m)².
    unit("psi", Dimension::Pressure, 44_482_216_152_605, 6_451_600_000),
    unit("K", Dimension::Temperature, 1, 1),
    CELSIUS,
    also(CELSIUS, "°C"),
    FAHRENHEIT,
    also(FAHRENHEIT, "°F"),
    unit("m", Dimension::Length, 1, 1),
    unit("cm", Dimension::Length, 1, 100),
    unit("mm", Dimension::Length, 1, 1000),
    unit("in", Dimension::Length, 254, 10_000),
    unit("s", Dimension::Time, 1, 1),
    unit("ms", Dimension::Time, 1, 1000),
    MICROSECOND,
    // The micro sign and the Greek letter look alike; keyboards type either.
    also(MICROSECOND, "\u{b5}s"),
    also(MICROSECOND, "\u{3bc}s"),
    unit("ns", Dimension::Time, 1, 1_000_000_000),
    unit("m/s", Dimension::Speed, 1, 1),
    unit("kg/mol", Dimension::MolarMass, 1, 1),
    unit("g/mol", Dimension::MolarMass, 1, 1000),
    unit("%", Dimension::Fraction, 1, 100),
    unit("ppm", Dimension::Fraction, 1, 1_000_000),
    unit("%/m", Dimension::PerLength, 1, 100),
    unit("1/m", Dimension::PerLength, 1, 1),
    IMPEDANCE,
    also(IMPEDANCE, "kg/(m2 s)"),
    also(IMPEDANCE, "kg/(m² s)"),
    unit("MPa s/m", Dimension::Impedance, 1_000_000, 1),
    unit("Pa/s", Dimension::PressureRate, 1, 1),
    unit("Pa/min", Dimension::PressureRate, 1, 60),
    unit("mbar/min", Dimension::PressureRate, 100, 60),
    unit("mTorr/min", Dimension::PressureRate, 101_325, 45_600_000),
    unit("Torr/min", Dimension::PressureRate, 101_325, 45_600),
];

/// One, the unit of a number that has none.
pub(crate) const ONE: Unit = unit("", Dimension::Ratio, 1, 1);

impl Unit {
    /// The unit of this exact symbol; capitals matter.
    ///
    /// ```
    /// # use endwall::record::{Dimension, Unit};
    /// assert_eq!(Unit::find("kPa").unwrap().dimension(), Dimension::Pressure);
    /// assert!(Unit::find("Kpa").is_none());
    /// ```
    pub fn find(symbol: &str) -> Option<Self> {
        UNITS.iter().find(|unit| unit.symbol == symbol).copied()
    }

    /// The symbol; empty for a number without a unit.
    pub const fn symbol(self) -> &'static str {
        self.symbol
    }

    /// What it measures.
    pub const fn dimension(self) -> Dimension {
        self.dimension
    }

    /// The SI value of one unit, exactly (of one degree, as a difference).
    ///
    /// ```
    /// # use endwall::{number::Rational, record::Unit};
    /// assert_eq!(Unit::find("Torr").unwrap().ratio(), "101325/760".parse().unwrap());
    /// ```
    pub fn ratio(self) -> Rational {
        // No denominator in the table is zero.
        Rational::ratio(self.numerator, self.denominator).unwrap_or(Rational::ONE)
    }

    /// True for a temperature scale whose zero is not absolute zero.
    pub const fn has_offset(self) -> bool {
        self.zero_hundredths != 0
    }

    /// A reading in this unit as an exact SI value: (x + offset)·ratio. `None` where 128-bit integers do not hold it.
    ///
    /// ```
    /// # use endwall::record::Unit;
    /// let kelvin = Unit::find("degF").unwrap().to_si("73.4".parse().unwrap()).unwrap();
    /// assert_eq!(kelvin, "296.15".parse().unwrap());
    /// ```
    pub fn to_si(self, reading: Rational) -> Option<Rational> {
        let zero = Rational::integer(self.zero_hundredths).checked_div(Rational::integer(100))?;
        reading.checked_add(zero)?.checked_mul(self.ratio())
    }

    /// A difference in this unit as an exact SI value: x·ratio. `None` where 128-bit integers do not hold it.
    pub fn difference_to_si(self, difference: Rational) -> Option<Rational> {
        difference.checked_mul(self.ratio())
    }

    /// An SI value as a reading in this unit: x/ratio − offset, the double nearest to it where 128-bit integers hold it,
    /// otherwise within a few units in the last place of the larger term.
    ///
    /// ```
    /// # use endwall::{number::Rational, record::Unit};
    /// let kelvin: Rational = "569.35".parse().unwrap();
    /// assert_eq!(Unit::find("degC").unwrap().reading(kelvin), 296.2);
    /// assert_eq!(Unit::find("kPa").unwrap().reading(8000.0.into()), 8.0);
    /// ```
    pub fn reading(self, value: Rational) -> f64 {
        let zero = Rational::integer(self.zero_hundredths).checked_div(Rational::integer(100));
        let exact = zero.and_then(|zero| value.checked_div(self.ratio())?.checked_sub(zero));
        exact.map_or_else(
            || value.to_f64() * self.denominator as f64 / self.numerator as f64 - self.zero_hundredths as f64 / 100.0,
            Rational::to_f64,
        )
    }
}

/// What a wrongly written unit was probably meant to be.
pub(crate) fn guess(typed: &str, wanted: Dimension) -> Option<String> {
    let folded: String = typed.chars().filter(|c| !c.is_whitespace() && *c != '.').flat_map(char::to_lowercase).collect();
    let by_capitals = |unit: &&Unit| unit.symbol.to_lowercase().replace(' ', "") == folded;
    if let Some(unit) = UNITS.iter().filter(|unit| unit.dimension == wanted).find(by_capitals) {
        return Some(unit.symbol.to_string());
    }
    let alias = match folded.as_str() {
        "c" | "celsius" | "degreecelsius" | "degreescelsius" | "℃" | "deg" => "degC",
        "f" | "fahrenheit" | "℉" => "degF",
        "kelvin" | "°k" | "degk" => "K",
        "sec" | "second" | "seconds" => "s",
        "msec" => "ms",
        "usec" | "microsec" | "microsecond" | "microseconds" | "mus" => "us",
        "nsec" => "ns",
        "psia" => "psi(a)",
        "psig" => "psi(g)",
        "bara" => "bar(a)",
        "barg" => "bar(g)",
        "kpaa" => "kPa(a)",
        "kpag" => "kPa(g)",
        "tor" => "Torr",
        "micron" | "microns" => "mTorr",
        "n/m2" | "n/m²" | "pascal" => "Pa",
        "inch" | "inches" | "\"" => "in",
        "meter" | "metre" | "meters" | "metres" => "m",
        "percent" | "pct" | "mol%" | "%mol" => "%",
        "g/mole" | "gmol-1" | "u" | "amu" => "g/mol",
        "m/sec" | "ms-1" | "mps" => "m/s",
        "m-1" | "/m" => "1/m",
        "percent/m" => "%/m",
        _ => "",
    };
    if !alias.is_empty() {
        return Some(alias.to_string());
    }
    UNITS.iter().find(by_capitals).map(|unit| unit.symbol.to_string())
}

/// The sentence that offers a guess, or the list of what is accepted.
pub(crate) fn remedy(typed: &str, wanted: Dimension) -> String {
    if wanted == Dimension::Ratio {
        return "write the ratio without a unit, like 5/3 or 1.29".to_string();
    }
    match guess(typed, wanted) {
        Some(meant) => format!("was {meant} meant? Accepted for {}: {}", wanted.name(), wanted.accepted()),
        None => format!("accepted for {}: {}", wanted.name(), wanted.accepted()),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn pascals(symbol: &str) -> f64 {
        Unit::find(symbol).unwrap().ratio().to_f64()
    }

    #[test]
    fn ratios_are_those_of_the_definitions() {
        // NIST SP 811, appendix B.8 (from memory): conventional values to seven digits.
        for (symbol, value) in [("psi", 6894.757), ("mmHg", 133.3224), ("inHg", 3386.389), ("Torr", 133.3224), ("atm", 101_325.0)] {
            assert!((pascals(symbol) / value - 1.0).abs() < 5e-7, "{symbol}");
        }
        let pound_force: Rational = "0.45359237".parse::<Rational>().unwrap().checked_mul("9.80665".parse().unwrap()).unwrap();
        let square_inch: Rational = "0.00064516".parse().unwrap();
        assert_eq!(Unit::find("psi").unwrap().ratio(), pound_force.checked_div(square_inch).unwrap());
        let mercury: Rational = "13.5951".parse::<Rational>().unwrap().checked_mul("9.80665".parse().unwrap()).unwrap();
        assert_eq!(Unit::find("mmHg").unwrap().ratio(), mercury);
        assert_eq!(Unit::find("inHg").unwrap().ratio(), mercury.checked_mul("25.4".parse().unwrap()).unwrap());
        assert_eq!(pascals("mTorr") * 1000.0, pascals("Torr"));
    }

    #[test]
    fn temperatures_have_their_zero() {
        let si = |symbol: &str, text: &str| Unit::find(symbol).unwrap().to_si(text.parse().unwrap()).unwrap();
        assert_eq!(si("degC", "23.05"), "296.2".parse().unwrap());
        assert_eq!(si("°F", "-459.67"), Rational::ZERO);
        assert_eq!(si("°F", "32"), "273.15".parse().unwrap());
        assert_eq!(Unit::find("degC").unwrap().reading("273.15".parse().unwrap()), 0.0);
    }

    #[test]
    fn guesses_are_offered_never_taken() {
        assert_eq!(guess("Kpa", Dimension::Pressure).as_deref(), Some("kPa"));
        assert_eq!(guess("mm Hg", Dimension::Pressure).as_deref(), Some("mmHg"));
        assert_eq!(guess("psig", Dimension::Pressure).as_deref(), Some("psi(g)"));
        assert_eq!(guess("C", Dimension::Temperature).as_deref(), Some("degC"));
        assert_eq!(guess("S", Dimension::Time).as_deref(), Some("s"));
        assert_eq!(guess("furlong", Dimension::Length), None);
        assert_eq!(Unit::find("\u{b5}s"), Unit::find("µs"));
        assert!(Unit::find("\u{3bc}s").is_some());
    }
}

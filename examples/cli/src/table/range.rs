//! The first column of a table: Mach numbers or shock speeds, as exact decimals.

use std::cmp::Ordering;
use std::fmt;

use endwall::number::Rational;
use endwall::record::Dimension;
use endwall::shock::Entry;

use super::Arguments;
use crate::failure::Failure;
use crate::options::exact;
use crate::progress::Bar;

/// A table for people; a computer that wants more should call the library.
const MOST_ROWS: u64 = 100_000;

/// What the range is of.
#[derive(Clone, Copy, PartialEq)]
pub struct Kind {
    /// What fixes the shock of a row.
    pub entry: Entry,
    /// Decimals at most: with these a number has at most 15 digits, which a double holds and prints back.
    most_decimals: usize,
    largest: i64,
    /// Its unit behind a number.
    pub unit: &'static str,
    example: &'static str,
    name: &'static str,
}

const MACH: Kind = Kind { entry: Entry::Mach, most_decimals: 12, largest: 999, unit: "", example: "1.25", name: "Mach number" };
const SPEED: Kind =
    Kind { entry: Entry::ShockSpeed, most_decimals: 9, largest: 99_999, unit: " m/s", example: "850 m/s", name: "shock speed" };

/// The rows of a table by their first column.
pub struct Range {
    /// What it is of.
    pub kind: Kind,
    first: Rational,
    last: Rational,
    step: Rational,
    decimals: usize,
}

impl Range {
    /// Reads `--from`, `--to` and `--step`: Mach numbers, or shock speeds with their unit.
    pub fn read(arguments: &Arguments) -> Result<Self, Failure> {
        let Arguments { from, to, step, .. } = arguments;
        let kind = if from.trim().ends_with("m/s") { SPEED } else { MACH };
        let (first, last, difference) = (kind.number("from", from)?, kind.number("to", to)?, kind.number("step", step)?);
        if kind == MACH && !exceeds(first, Rational::ONE) {
            return Err(Failure::option("from", "a Mach number of 1 or less has no shock", from, "begin above 1, for example at 1.1"));
        }
        if !first.is_positive() {
            return Err(Failure::option("from", "a shock speed is above zero", from, "begin above the sound speed of the gas"));
        }
        if !difference.is_positive() {
            return Err(Failure::option("step", "a step is above zero", step, format!("write it like 0.1{}", kind.unit)));
        }
        if exceeds(first, last) {
            return Err(Failure::option("to", format!("the table ends before it begins at {from}"), to, "give a larger number"));
        }
        let too_many = Rational::from(MOST_ROWS as f64).checked_mul(difference).and_then(|span| first.checked_add(span));
        if too_many.is_none_or(|end| !exceeds(end, last)) {
            return Err(Failure::option("step", format!("the table has more than {MOST_ROWS} rows"), step, "take a larger step"));
        }
        let decimals = decimals(digits(from)).max(decimals(digits(step)));
        Ok(Self { kind, first, last, step: difference, decimals })
    }

    /// Makes a row of each value, which comes with its text, and whether it is the first one.
    pub fn rows(&self, mut row: impl FnMut(Rational, String, bool) -> Result<Vec<String>, Failure>) -> Result<Vec<Vec<String>>, Failure> {
        let steps = self.last.checked_sub(self.first).and_then(|span| span.checked_div(self.step));
        // For the bar alone, so that a rounding error of the quotient does no harm.
        let number = steps.map_or(MOST_ROWS, |steps| steps.to_f64() as u64 + 1);
        let mut rows = Vec::new();
        let mut bar = Bar::new("rows");
        let mut next = Some(self.first);
        while let Some(value) = next.filter(|value| !exceeds(*value, self.last)) {
            rows.push(row(value, format!("{:.*}", self.decimals, value.to_f64()), rows.is_empty())?);
            bar.show(rows.len() as u64, number);
            next = value.checked_add(self.step);
        }
        Ok(rows)
    }
}

impl Kind {
    /// A value or a step as an exact decimal, short enough that the doubles nearest to its multiples print as it was typed.
    fn number(&self, option: &str, typed: &str) -> Result<Rational, Failure> {
        let refuse = |wrong: &dyn fmt::Display| Failure::option(option, wrong, typed, format!("write a decimal like {}", self.example));
        let number: Rational = if self.entry == Entry::Mach {
            typed.parse().map_err(|error| refuse(&error))?
        } else {
            exact(option, typed, Dimension::Speed)?.value()
        };
        let digits = digits(typed);
        if digits.contains(['/', 'e', 'E']) || decimals(digits) > self.most_decimals {
            return Err(refuse(&format!("a decimal number with at most {} decimals is wanted", self.most_decimals)));
        }
        if exceeds(number, Rational::integer(self.largest)) {
            return Err(refuse(&format!("the table goes to a {} of {}{}", self.name, self.largest, self.unit)));
        }
        Ok(number)
    }
}

/// The number in front of a unit.
fn digits(typed: &str) -> &str {
    typed.trim().trim_end_matches("m/s").trim()
}

fn decimals(digits: &str) -> usize {
    digits.split_once('.').map_or(0, |(_, decimals)| decimals.len())
}

fn exceeds(a: Rational, b: Rational) -> bool {
    a.compare(b) == Some(Ordering::Greater)
}

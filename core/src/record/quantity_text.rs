//! Takes the text of a quantity apart.

use alloc::format;
use alloc::string::{String, ToString};

use super::quantity::{Coverage, Mark, QuantityError};
use super::unit::{self, Dimension, Unit};
use crate::number::Rational;

/// No quantity needs more; the bound keeps messages and work small.
const LONGEST: usize = 200;

/// A quantity in the units in which it was typed.
pub(super) struct Parts {
    pub(super) value: Rational,
    pub(super) uncertainty: Option<Rational>,
    /// The uncertainty is a percentage of the value.
    pub(super) relative: bool,
    pub(super) coverage: Coverage,
    pub(super) degrees_of_freedom: Option<Rational>,
    pub(super) unit: Unit,
    pub(super) mark: Mark,
}

/// What may follow a quantity in parentheses.
#[derive(Default)]
struct Remarks {
    factor: Option<Rational>,
    limits: bool,
    degrees_of_freedom: Option<Rational>,
    mark: Option<Mark>,
}

pub(super) fn split(text: &str, wanted: Dimension) -> Result<Parts, QuantityError> {
    if text.len() > LONGEST {
        return Err(QuantityError::new(text, "the text is too long for a quantity", "write it like \"32.99 ± 0.08 kPa\""));
    }
    let fail = |wrong: &str, remedy: &str| QuantityError::new(text, wrong, remedy);
    let (body, remarks) = remarks(text)?;
    let Number { value, digits, concise, rest } = number(text, body, wanted)?;
    let mut uncertainty = concise.map(|(inside, exponent)| in_last_digits(text, digits, inside, exponent)).transpose()?;
    let mut rest = rest.trim_start();
    let mut relative = false;
    if let Some(after) = rest.strip_prefix('±').or_else(|| rest.strip_prefix("+/-")) {
        if uncertainty.is_some() {
            return Err(fail("two uncertainties are given", "keep either the digits in parentheses or the number after ±"));
        }
        let after = after.trim_start();
        if after.starts_with(['-', '−']) {
            return Err(fail("the uncertainty is negative", "an uncertainty is zero or more"));
        }
        let length = number_length(after);
        let (typed, after) = after.split_at_checked(length).unwrap_or(("", after));
        if typed.is_empty() {
            return Err(fail("no number follows ±", "write it like \"32.99 ± 0.08 kPa\""));
        }
        uncertainty = Some(exact(text, typed)?);
        rest = after.trim_start();
        // `% kPa` is a percentage of the value; `%/m` and a lone `%` are units.
        if let Some(after) = rest.strip_prefix('%') {
            if !after.trim().is_empty() && (after.starts_with(char::is_whitespace) || Unit::find(after.trim()).is_some()) {
                relative = true;
                rest = after.trim_start();
            }
        }
    }
    let unit = read_unit(text, rest.trim_end(), wanted)?;
    let coverage = match (remarks.factor, remarks.limits) {
        (Some(_), true) => return Err(fail("(k=…) and (limits) exclude each other", "keep the one that is meant")),
        (Some(k), false) => Coverage::Factor(k),
        (None, true) => Coverage::Limits,
        (None, false) => Coverage::Standard,
    };
    if uncertainty.is_none() && (coverage != Coverage::Standard || remarks.degrees_of_freedom.is_some()) {
        return Err(fail(
            "(k=…), (limits) and (dof …) describe an uncertainty, and none is given",
            "add ± and its value, or leave the remark out",
        ));
    }
    Ok(Parts {
        value,
        uncertainty,
        relative,
        coverage,
        degrees_of_freedom: remarks.degrees_of_freedom,
        unit,
        mark: remarks.mark.unwrap_or(Mark::Unmarked),
    })
}

/// Takes the known remarks off the end; an unknown one stays and is refused with the unit.
fn remarks(text: &str) -> Result<(&str, Remarks), QuantityError> {
    let mut body = text.trim();
    let mut found = Remarks::default();
    while let Some((before, inside)) = body.strip_suffix(')').and_then(|open| open.rsplit_once('(')) {
        let inside = inside.trim();
        let twice = |already: bool| {
            if already {
                return Err(QuantityError::new(text, format!("({inside}) repeats a remark"), "keep one"));
            }
            Ok(())
        };
        if inside == "limits" {
            twice(found.limits)?;
            found.limits = true;
        } else if inside == "a" || inside == "g" {
            twice(found.mark.is_some())?;
            found.mark = Some(if inside == "a" { Mark::Absolute } else { Mark::Gauge });
        } else if let Some(number) = inside.strip_prefix('k').and_then(|rest| rest.trim_start().strip_prefix('=')) {
            twice(found.factor.is_some())?;
            found.factor = Some(positive(text, number, "the coverage factor k", "(k=2)")?);
        } else if let Some(number) = inside.strip_prefix("dof") {
            twice(found.degrees_of_freedom.is_some())?;
            let number = number.trim_start().trim_start_matches('=');
            let freedom = positive(text, number, "the number of degrees of freedom", "(dof 9)")?;
            if freedom.to_f64() < 1.0 {
                return Err(QuantityError::new(text, "fewer than one degree of freedom", "write it like (dof 9)"));
            }
            found.degrees_of_freedom = Some(freedom);
        } else {
            break;
        }
        body = before.trim_end();
    }
    Ok((body, found))
}

fn positive(text: &str, number: &str, name: &str, example: &str) -> Result<Rational, QuantityError> {
    match number.parse::<Rational>() {
        Ok(value) if value.is_positive() => Ok(value),
        _ => Err(QuantityError::new(text, format!("{name} is not a number above zero"), format!("write it like {example}"))),
    }
}

/// The value at the start of a text, and what follows it.
struct Number<'a> {
    value: Rational,
    /// Sign, digits and point, without a power of ten.
    digits: &'a str,
    /// What stood in parentheses right behind the digits, and the power of ten behind that.
    concise: Option<(&'a str, &'a str)>,
    rest: &'a str,
}

fn number<'a>(text: &str, body: &'a str, wanted: Dimension) -> Result<Number<'a>, QuantityError> {
    let example = example(wanted);
    if body.is_empty() {
        return Err(QuantityError::new(text, "nothing is given", format!("write it like \"{example}\"")));
    }
    let length = number_length(body);
    let (mut typed, mut rest) = body.split_at_checked(length).unwrap_or(("", body));
    if typed.is_empty() {
        return Err(QuantityError::new(text, "it does not begin with a number", format!("write it like \"{example}\"")));
    }
    if rest.starts_with('/') && wanted.may_lack_unit() {
        let below = rest.get(1..).map_or(0, number_length);
        if let (true, Some((both, after))) = (below > 0, body.split_at_checked(length + 1 + below)) {
            (typed, rest) = (both, after);
        }
    }
    if let Some(after) = rest.strip_prefix(',').filter(|after| after.starts_with(|c: char| c.is_ascii_digit())) {
        let decimals = after.split(|c: char| !c.is_ascii_digit()).next().unwrap_or("");
        return Err(QuantityError::new(
            text,
            "a comma stands in the number",
            format!("decimals have a point: was {typed}.{decimals} meant?"),
        ));
    }
    if let Some((inside, after)) = rest.strip_prefix('(').and_then(|open| open.split_once(')')) {
        if typed.contains(['e', 'E', '/']) {
            return Err(QuantityError::new(
                text,
                "the parentheses do not follow the digits that they count in",
                "write it like 3.299(8)e4",
            ));
        }
        let power = exponent_length(after);
        let (power, rest) = after.split_at_checked(power).unwrap_or(("", after));
        let value = exact(text, &format!("{typed}{power}"))?;
        return Ok(Number { value, digits: typed, concise: Some((inside, power)), rest });
    }
    Ok(Number { value: exact(text, typed)?, digits: typed, concise: None, rest })
}

/// The concise notation: `32.99(8)` is ± 0.08, `32.99(0.08)` as well.
fn in_last_digits(text: &str, digits: &str, inside: &str, exponent: &str) -> Result<Rational, QuantityError> {
    let plain = !inside.is_empty() && inside.bytes().all(|byte| byte.is_ascii_digit() || byte == b'.');
    if !plain {
        let wrong = format!("({inside}) is not an uncertainty in the last digits");
        return Err(QuantityError::new(text, wrong, "write it like 32.99(8), which means 32.99 ± 0.08"));
    }
    let decimals = if inside.contains('.') { 0 } else { digits.split_once('.').map_or(0, |(_, decimals)| decimals.len()) };
    let in_units = exact(text, &format!("{inside}e-{decimals}"))?;
    let power = exact(text, &format!("1{exponent}"))?;
    in_units.checked_mul(power).ok_or_else(|| QuantityError::new(text, "the uncertainty has too many digits", "type fewer digits"))
}

/// The exact number; a typographic minus counts as a minus.
fn exact(text: &str, typed: &str) -> Result<Rational, QuantityError> {
    typed.replace('−', "-").parse().map_err(|error| {
        QuantityError::new(
            text,
            format!("\"{typed}\" is not read as a number: {error}"),
            "write digits with a decimal point, like 32.99 or 3.299e4",
        )
    })
}

/// The length in bytes of the number at the start: sign, digits with at most one point, power of ten.
fn number_length(text: &str) -> usize {
    let sign = text.chars().next().filter(|c| matches!(c, '+' | '-' | '−')).map_or(0, char::len_utf8);
    let (mut at, mut digits, mut point) = (sign, 0, false);
    for byte in text.bytes().skip(sign) {
        match byte {
            b'0'..=b'9' => digits += 1,
            b'.' if !point => point = true,
            _ => break,
        }
        at += 1;
    }
    if digits == 0 { 0 } else { at + text.get(at..).map_or(0, exponent_length) }
}

/// The length of `e4`, `E-3` at the start, or zero.
fn exponent_length(text: &str) -> usize {
    let mut bytes = text.bytes();
    if !matches!(bytes.next(), Some(b'e' | b'E')) {
        return 0;
    }
    let sign = usize::from(matches!(bytes.clone().next(), Some(b'+' | b'-')));
    let digits = bytes.skip(sign).take_while(u8::is_ascii_digit).count();
    if digits == 0 { 0 } else { 1 + sign + digits }
}

fn read_unit(text: &str, typed: &str, wanted: Dimension) -> Result<Unit, QuantityError> {
    if typed.is_empty() {
        if wanted.may_lack_unit() {
            return Ok(unit::ONE);
        }
        return Err(QuantityError::new(
            text,
            format!("it has no unit, and {} needs one", wanted.name()),
            format!("accepted: {}", wanted.accepted()),
        ));
    }
    let Some(found) = Unit::find(typed) else { return Err(unknown_unit(text, typed, wanted)) };
    if found.dimension() != wanted {
        let wrong = format!("{typed} is the unit of {}, and {} is wanted", found.dimension().name(), wanted.name());
        return Err(QuantityError::new(text, wrong, format!("accepted: {}", wanted.accepted())));
    }
    Ok(found)
}

/// Says what is strange behind the number: a common slip is named, otherwise the unit is unknown.
fn unknown_unit(text: &str, typed: &str, wanted: Dimension) -> QuantityError {
    if let Some((before, _)) = typed.split_once('±').or_else(|| typed.split_once("+/-")) {
        let wrong = match before.trim() {
            "" => "± stands twice".to_string(),
            unit => format!("the unit {unit} stands before ±"),
        };
        return QuantityError::new(
            text,
            wrong,
            format!("write the uncertainty once and the unit once, at the end: \"{}\"", example(wanted)),
        );
    }
    if typed.starts_with(|c: char| c.is_ascii_digit()) {
        return QuantityError::new(text, "a second number follows the first", "write digits without spaces, and ± before the uncertainty");
    }
    if typed.starts_with("+-") || typed.starts_with(['+', '-', '−']) {
        return QuantityError::new(text, format!("\"{typed}\" is not understood"), "was ± (or +/-) meant?");
    }
    if let Some((before, remark)) = typed.split_once('(') {
        if Unit::find(before.trim()).is_some() {
            let wrong = format!("the remark ({remark} is unknown");
            return QuantityError::new(text, wrong, "known remarks: (k=2), (limits), (dof 9), and for pressures (a), (g)");
        }
    }
    if let Some((before, stray)) = typed.split_once(char::is_whitespace) {
        if let Some(found) = Unit::find(before) {
            let wrong = format!("\"{}\" follows the unit {}", stray.trim(), found.symbol());
            return QuantityError::new(text, wrong, "keep notes in the field \"notes\"");
        }
    }
    QuantityError::new(text, format!("the unit \"{typed}\" is unknown"), unit::remedy(typed, wanted))
}

/// A well-formed quantity of the dimension, for messages.
fn example(wanted: Dimension) -> String {
    match wanted {
        Dimension::Pressure => "32.99 ± 0.08 kPa",
        Dimension::Temperature => "296.2 ± 0.5 K",
        Dimension::Length => "1.250 ± 0.0003 m",
        Dimension::Time => "413.9 ± 0.3 us",
        Dimension::Speed => "950.0 ± 1.0 m/s",
        Dimension::MolarMass => "39.948 g/mol",
        Dimension::Fraction => "1.00 %",
        Dimension::Ratio => "5/3",
        Dimension::PerLength => "1.0 ± 0.6 %/m",
        Dimension::Impedance => "39.5 MPa s/m",
        Dimension::PressureRate => "0.5 Pa/min",
    }
    .to_string()
}

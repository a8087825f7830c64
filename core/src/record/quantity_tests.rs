use super::*;

fn read(text: &str, dimension: Dimension) -> Quantity {
    Quantity::parse(text, dimension).unwrap_or_else(|error| panic!("{text}: {error}"))
}

fn refused(text: &str, dimension: Dimension) -> String {
    Quantity::parse(text, dimension).expect_err(text).to_string()
}

fn exact(text: &str) -> Rational {
    text.parse().unwrap()
}

#[test]
fn every_way_to_state_an_uncertainty() {
    for (text, standard) in [
        ("32.99 ± 0.08 kPa", "80"),
        ("32.99±0.08kPa", "80"),
        ("32.99 +/- 0.08 kPa", "80"),
        ("32.99(8) kPa", "80"),
        ("32.99(0.08) kPa", "80"),
        ("3.299(8)e1 kPa", "80"),
        ("+32.99 ± 0.16 kPa (k=2)", "80"),
        ("32.99 ± 0.16 kPa ( k = 2 )", "80"),
        ("32.99(16) kPa (k=2)", "80"),
        ("32.99 ± 0.25 % kPa", "82.475"),
        ("32.99 ± 0.5 %kPa (k=2)", "82.475"),
        ("  32.99\u{a0}±\u{a0}0.08\u{202f}kPa  ", "80"),
    ] {
        let quantity = read(text, Dimension::Pressure);
        assert_eq!(quantity.value(), exact("32990"), "{text}");
        assert_eq!(quantity.uncertainty().unwrap().exact(), Some(exact(standard)), "{text}");
        assert_eq!(quantity.standard_uncertainty(), Some(exact(standard).to_f64()), "{text}");
        assert_eq!(quantity.typed(), text);
    }
    // JCGM 100:2008, 7.2.2: the example m_s = 100.02147(35) g, here with a unit of this file.
    let example = read("100.02147(35) kPa", Dimension::Pressure);
    assert_eq!(example.uncertainty().unwrap().exact(), Some(exact("0.35")));
    // 12 in the last digits of a whole number.
    assert_eq!(read("1200(12) Pa", Dimension::Pressure).standard_uncertainty(), Some(12.0));
}

#[test]
fn limits_and_degrees_of_freedom() {
    let quantity = read("32.99 ± 0.3 kPa (limits) (dof 9)", Dimension::Pressure);
    let uncertainty = quantity.uncertainty().unwrap();
    assert_eq!(uncertainty.stated, exact("300"));
    assert_eq!(uncertainty.coverage, Coverage::Limits);
    assert_eq!(uncertainty.exact(), None);
    assert!((uncertainty.standard / 173.205_080_756_887_73 - 1.0).abs() < 1e-15);
    assert_eq!(uncertainty.degrees_of_freedom, Some(9.0));
    let other_order = read("32.99 ± 0.3 kPa (dof 9)(limits)", Dimension::Pressure);
    assert_eq!(other_order.uncertainty(), Some(uncertainty));
    assert_eq!(read("1 ± 0.1 s (dof 7.5)", Dimension::Time).degrees_of_freedom(), Some(7.5));
}

#[test]
fn percent_is_a_unit_or_a_part_of_the_value() {
    let fraction = read("0.50 ± 0.01 %", Dimension::Fraction);
    assert_eq!((fraction.value(), fraction.standard_uncertainty()), (exact("0.005"), Some(0.0001)));
    let relative = read("0.50 ± 2 % %", Dimension::Fraction);
    assert_eq!(relative.standard_uncertainty(), Some(0.0001));
    let slope = read("1.0 ± 0.6 %/m", Dimension::PerLength);
    assert_eq!((slope.value(), slope.standard_uncertainty()), (exact("0.01"), Some(0.006)));
    let slope = read("1.0 ± 60 % %/m", Dimension::PerLength);
    assert_eq!(slope.standard_uncertainty(), Some(0.006));
    assert_eq!(read("200 ppm", Dimension::Fraction).value(), exact("0.0002"));
    assert_eq!(read("5/3", Dimension::Ratio).value(), exact("5/3"));
    assert_eq!(read("0.005", Dimension::Fraction).value(), exact("0.005"));
}

#[test]
fn a_temperature_uncertainty_is_a_difference() {
    let celsius = read("23 ± 0.5 °C", Dimension::Temperature);
    assert_eq!((celsius.value(), celsius.standard_uncertainty()), (exact("296.15"), Some(0.5)));
    let fahrenheit = read("73.4 ± 0.9 degF", Dimension::Temperature);
    assert_eq!((fahrenheit.value(), fahrenheit.standard_uncertainty()), (exact("296.15"), Some(0.5)));
    assert!(refused("23 ± 1 % degC", Dimension::Temperature).contains("percentage"));
    assert_eq!(read("296 ± 1 % K", Dimension::Temperature).standard_uncertainty(), Some(2.96));
}

#[test]
fn gauge_and_absolute() {
    assert_eq!(read("2.5 bar(g)", Dimension::Pressure).mark(), Mark::Gauge);
    assert_eq!(read("2.5 ± 0.1 kPa (a) (k=2)", Dimension::Pressure).mark(), Mark::Absolute);
    assert_eq!(read("2.5 kPa(k=2)(a)".replace("(k=2)", "").as_str(), Dimension::Pressure).mark(), Mark::Absolute);
    assert!(refused("2.5 m(g)", Dimension::Length).contains("units of pressure"));
    let vacuum = read("-0.9 bar(g)", Dimension::Pressure);
    let ambient = read("1 bar", Dimension::Pressure);
    let sum = vacuum.absolute(Some(&ambient)).unwrap();
    assert_eq!((sum.value, sum.standard_uncertainty), (exact("10000"), None));
}

#[test]
fn what_is_wrong_is_named_with_what_would_be_right() {
    use Dimension::{Length, Pressure, Temperature, Time};
    for (text, dimension, wrong, right) in [
        ("32.99", Pressure, "no unit", "kPa"),
        ("32.99 ± 0.08", Pressure, "no unit", "kPa"),
        ("32.99 Kpa", Pressure, "\"Kpa\" is unknown", "was kPa meant?"),
        ("32.99 psig", Pressure, "unknown", "psi(g)"),
        ("23 C", Temperature, "unknown", "was degC meant?"),
        ("23 K", Pressure, "K is the unit of a temperature", "kPa"),
        ("0.3 m", Time, "a length", "us"),
        ("32.99 ± -0.08 kPa", Pressure, "negative", "zero or more"),
        ("32.99 ± −0.08 kPa", Pressure, "negative", "zero or more"),
        ("32.99 ± kPa", Pressure, "no number follows ±", "32.99 ± 0.08 kPa"),
        ("32.99(8) ± 0.08 kPa", Pressure, "two uncertainties", "keep"),
        ("32.99 kPa ± 0.08 kPa", Pressure, "before ±", "once, at the end"),
        ("32.99 kPa gauge", Pressure, "\"gauge\" follows the unit kPa", "notes"),
        ("1 013.25 hPa", Pressure, "second number", "without spaces"),
        ("32,99 kPa", Pressure, "comma", "was 32.99 meant?"),
        ("32.99 +- 0.08 kPa", Pressure, "not understood", "±"),
        ("about 33 kPa", Pressure, "does not begin with a number", "32.99"),
        ("", Pressure, "nothing", "32.99"),
        ("NaN kPa", Pressure, "does not begin with a number", "32.99"),
        ("1e400 kPa", Pressure, "38 digits", "like 32.99"),
        ("1e-60 ns", Time, "38 digits", "like 32.99"),
        ("32.99 kPa (k=2)", Pressure, "none is given", "leave the remark out"),
        ("32.99 ± 0.1 kPa (k=0)", Pressure, "above zero", "(k=2)"),
        ("32.99 ± 0.1 kPa (dof x)", Pressure, "above zero", "(dof 9)"),
        ("32.99 ± 0.1 kPa (dof 0.5)", Pressure, "fewer than one", "(dof 9)"),
        ("32.99 ± 0.1 kPa (k=2) (limits)", Pressure, "exclude each other", "keep"),
        ("32.99 ± 0.1 kPa (k=2) (k=2)", Pressure, "repeats", "keep one"),
        ("32.99 ± 0.1 kPa (95 %)", Pressure, "(95 %) is unknown", "(limits)"),
        ("32.99(x) kPa", Pressure, "last digits", "32.99(8)"),
        ("3.2e4(8) Pa", Pressure, "parentheses", "3.299(8)e4"),
        ("1.2 furlong", Length, "unknown", "mm"),
        ("(32.99 ± 0.08) kPa", Pressure, "does not begin with a number", "32.99 ± 0.08 kPa"),
    ] {
        let message = refused(text, dimension);
        assert!(message.contains(wrong), "{text}: {message}");
        assert!(message.contains(right), "{text}: {message}");
        assert!(message.lines().count() <= 2, "{message}");
    }
    assert!(refused(&"9".repeat(300), Pressure).contains("too long"));
    assert!(refused(&(String::from("1.") + &"9".repeat(60) + " Pa"), Pressure).contains("38 digits"));
}

#[test]
fn a_typed_decimal_is_exact() {
    for text in ["0.1", "296.2", "39.948", "3.3333333333333333333333333333", "1e-20"] {
        assert_eq!(read(&(String::from(text) + " m"), Dimension::Length).value(), exact(text));
    }
    assert_eq!(read("413.852 us", Dimension::Time).value(), exact("413.852e-6"));
    assert_eq!(read("413.852 \u{3bc}s", Dimension::Time), {
        let mut other = read("413.852 us", Dimension::Time);
        other.typed = String::from("413.852 \u{3bc}s");
        other.unit = Unit::find("\u{3bc}s").unwrap();
        other
    });
}

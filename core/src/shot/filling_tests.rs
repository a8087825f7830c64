use super::*;
use crate::shot::Generator;

fn exactly(text: &str) -> Rational {
    text.parse().unwrap()
}

fn fractions<const N: usize>(texts: [&str; N]) -> [Rational; N] {
    texts.map(exactly)
}

/// The readings that a hand writes down.
#[test]
fn readings_of_decimals_are_exact() {
    let mixture = fractions(["0.004", "0.008", "0.988"]);
    let filling = Filling::new(exactly("0"), exactly("200000"), &mixture).unwrap();
    let steps: [FillingStep; 3] = core::array::from_fn(|at| filling.step(at).unwrap());
    assert_eq!(steps.map(|step| step.reading), [800.0, 2400.0, 200_000.0].map(|p| (p, Enclosure::from(p))));
    assert_eq!(steps.map(|step| step.partial_pressure), [800.0, 1600.0, 197_600.0].map(|p| (p, Enclosure::from(p))));
    assert!(steps.iter().zip(&mixture).all(|(step, fraction)| step.fraction.1 == Enclosure::from(*fraction)));
    assert!(filling.step(3).is_none() && filling.standard_uncertainty(3, |_, _| 1.0).is_none());
    assert_eq!(filling.residual_fraction(), (0.0, Enclosure::from(0.0)));
}

/// 1 kPa of air in 10 kPa: a tenth of the mixture, and nine tenths are shared by the gases.
#[test]
fn what_the_pump_left_is_counted_in() {
    let mixture = fractions(["0.25", "0.75"]);
    let filling = Filling::new(exactly("1000"), exactly("10000"), &mixture).unwrap();
    let [first, second] = [0, 1].map(|at| filling.step(at).unwrap());
    assert_eq!([first, second].map(|step| step.reading.0), [3250.0, 10_000.0]);
    assert_eq!([first, second].map(|step| step.partial_pressure.0), [2250.0, 6750.0]);
    assert_eq!([first, second].map(|step| step.fraction.0), [0.225, 0.675]);
    assert_eq!(filling.residual_fraction().1, Enclosure::from(exactly("0.1")));
}

/// Against exact rationals, by another way: partial pressures added up.
#[test]
fn enclosures_hold_the_exact_answer_and_are_narrow() {
    let mut random = Generator::new(7);
    let mut any = |most: u64| i64::try_from(random.next_u64() % most).unwrap() + 1;
    for _ in 0..500 {
        let parts: [i64; 5] = core::array::from_fn(|_| any(1_000_000));
        let sum = Rational::integer(parts.iter().sum());
        let mixture = parts.map(|part| Rational::integer(part).checked_div(sum).unwrap());
        let pressure = Rational::integer(any(10_000_000)).checked_div(Rational::integer(10)).unwrap();
        let residual = pressure.checked_div(Rational::integer(any(1000) + 1)).unwrap();
        let filling = Filling::new(residual, pressure, &mixture).unwrap();
        let added = pressure.checked_sub(residual).unwrap();
        let mut reading = residual;
        for (at, fraction) in mixture.iter().enumerate() {
            let step = filling.step(at).unwrap();
            let partial = fraction.checked_mul(added).unwrap();
            reading = reading.checked_add(partial).unwrap();
            for ((nearest, bounds), answer) in [
                (step.partial_pressure, partial),
                (step.reading, reading),
                (step.fraction, partial.checked_div(pressure).unwrap()),
                (filling.residual_fraction(), residual.checked_div(pressure).unwrap()),
            ] {
                assert!(bounds.is_proven() && bounds.encloses(Enclosure::from(answer)), "{bounds} {}", answer.to_f64());
                assert!(bounds.width_in_ulp() <= 2, "{bounds}");
                assert_eq!(nearest, answer.to_f64());
            }
        }
    }
}

/// A planned fill pressure is an enclosure itself.
#[test]
fn a_tolerance_of_the_pressure_is_carried_along() {
    let mixture = fractions(["0.1", "0.9"]);
    let wide = Enclosure::new(9000.0, 9100.0).unwrap();
    let filling = Filling::new(exactly("10"), wide, &mixture).unwrap();
    for pressure in ["9000", "9033.3", "9100"] {
        let at = Filling::new(exactly("10"), exactly(pressure), &mixture).unwrap();
        for step in 0..2 {
            let [inside, box_of] = [at, filling].map(|filling| filling.step(step).unwrap());
            assert!(box_of.reading.1.encloses(inside.reading.1) && box_of.partial_pressure.1.encloses(inside.partial_pressure.1));
            assert!(box_of.fraction.1.encloses(inside.fraction.1));
        }
    }
    let last = filling.step(1).unwrap().reading.1;
    assert!(last.encloses(wide) && last.width() < wide.width() + 1e-10, "{last}");
}

/// The spread of fractions computed from readings with errors, which no slope enters.
#[test]
fn uncertainties_are_those_of_a_monte_carlo_run() {
    const RUNS: u32 = 40_000;
    let mixture = fractions(["0.02", "0.28", "0.5", "0.2"]);
    let filling = Filling::new(exactly("500"), exactly("100000"), &mixture).unwrap();
    let uncertainty = |number: usize, reading: f64| if number == 0 { 100.0 } else { libm::hypot(30.0, 2e-3 * reading) };
    let nominal: [f64; 5] = core::array::from_fn(|at| if at == 0 { 500.0 } else { filling.step(at - 1).unwrap().reading.0 });
    let mut random = Generator::new(11);
    let (mut sums, mut squares) = ([0.0; 5], [0.0; 5]);
    for _ in 0..RUNS {
        let read: [f64; 5] = core::array::from_fn(|at| nominal[at] + uncertainty(at, nominal[at]) * random.normal());
        for at in 0..5 {
            let added = if at == 0 { read[0] } else { read[at] - read[at - 1] };
            sums[at] += added / read[4];
            squares[at] += added / read[4] * (added / read[4]);
        }
    }
    for at in 0..5 {
        let mean = sums[at] / f64::from(RUNS);
        let spread = libm::sqrt(squares[at] / f64::from(RUNS) - mean * mean);
        let told =
            if at == 0 { filling.residual_uncertainty(uncertainty) } else { filling.standard_uncertainty(at - 1, uncertainty).unwrap() };
        // The spread itself scatters by 1/√(2·40000), 0.35 %; second-order terms are smaller.
        assert!((told / spread - 1.0).abs() < 0.015, "{at}: {told} {spread}");
    }
}

/// What the first gas has too much, the second has too little, once nothing was left by the pump.
#[test]
fn two_gases_share_their_reading() {
    let mixture = fractions(["0.1", "0.9"]);
    let filling = Filling::new(exactly("0"), exactly("50000"), &mixture).unwrap();
    let uncertainty = |number: usize, reading: f64| if number == 0 { 0.0 } else { 1e-3 * reading };
    let [first, second] = [0, 1].map(|at| filling.standard_uncertainty(at, uncertainty).unwrap());
    assert!((first / second - 1.0).abs() < 1e-12);
    // x = p1/p2 with 0.1 % each.
    assert!((first / (0.1 * 1e-3 * libm::sqrt(2.0)) - 1.0).abs() < 1e-12);
    // A gas alone is all there is: only what the pump left is in doubt.
    let alone = [Rational::ONE];
    let pure = Filling::new(exactly("0"), exactly("50000"), &alone).unwrap();
    assert_eq!(pure.standard_uncertainty(0, uncertainty), Some(0.0));
}

#[test]
fn what_is_refused_is_named() {
    let half = fractions(["0.5", "0.5"]);
    let refused = |residual: f64, pressure: f64, mixture: &[Rational]| {
        let error = Filling::new(residual, pressure, mixture).unwrap_err();
        (error.parameter, error.rule)
    };
    assert_eq!(refused(0.0, 0.0, &half), (Parameter::Pressure, Rule::Above(0.0)));
    assert_eq!(refused(0.0, f64::NAN, &half), (Parameter::Pressure, Rule::Finite));
    assert_eq!(refused(-1.0, 10.0, &half), (Parameter::ResidualPressure, Rule::Between(0.0, 10.0)));
    assert_eq!(refused(10.0, 10.0, &half), (Parameter::ResidualPressure, Rule::Between(0.0, 10.0)));
    assert_eq!(refused(f64::NAN, 10.0, &half), (Parameter::ResidualPressure, Rule::Finite));
    assert_eq!(refused(0.0, 10.0, &fractions(["0.5", "0.4"])), (Parameter::MoleFraction, Rule::SumToOne(0.9)));
    assert_eq!(refused(0.0, 10.0, &fractions(["1.5", "-0.5"])), (Parameter::MoleFraction, Rule::Between(0.0, 1.0)));
    assert_eq!(refused(0.0, 10.0, &[]), (Parameter::MoleFraction, Rule::SumToOne(0.0)));
    // Denominators without a common factor: their product does not fit.
    let long = [(1 << 61) - 1, (1 << 62) - 57, (1 << 61) + 15].map(|odd| Rational::ratio(1, odd).unwrap());
    assert_eq!(refused(0.0, 10.0, &long), (Parameter::MoleFraction, Rule::Digits));
}

//! Checks of the isentropic change: answers of 50-digit arithmetic, widths, the way back, joints, ends of the data and every refusal.

use super::*;
use crate::gas::Portion;
use crate::gas::species::{Species, named, table};
use crate::number::Rational;

fn exact(text: &str) -> Rational {
    text.parse().unwrap()
}

fn pure<'a>(species: &'a Species<'a>) -> [Portion<'a>; 1] {
    [Portion { species, fraction: Rational::ONE }]
}

#[test]
fn answers_contain_those_of_fifty_digits() {
    // By bisection with the integrals of the published polynomials in 50-digit arithmetic; across no, one and two joints, up and down.
    for (name, temperature, factor, answer) in [
        ("Ar", "1400", "1.06", "1433.0138297962341080385411432034"),
        ("N2", "1400", "1.06", "1419.768967865621043308101795807"),
        ("N2", "295.15", "1000", "1822.6683290876329204591825821081"),
        ("CO2", "5000", "8", "6494.5888488395756267036534053692"),
        ("CO2", "5000", "1e-5", "1025.8616236203452677635860300055"),
        ("O2", "1000", "1.000001", "1000.0002383572267526243627893517"),
        ("SF6", "400", "0.5", "380.43504446291939521442291807438"),
        ("N2", "900", "1.6", "1015.2338284631928248205190371568"),
        ("N2", "1000", "0.999", "999.74560532477143185150163077875"),
    ] {
        let portions = pure(named(name).unwrap());
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let found = gas.isentropic_temperature(exact(temperature), exact(factor)).unwrap();
        assert!(found.overlaps(Enclosure::from(exact(answer))), "{name} {temperature} {factor} {found:?}");
        assert!(found.width_in_ulp() <= 2, "{name} {found:?}");
    }
}

#[test]
fn every_species_is_narrow_and_comes_back() {
    for species in table::ALL {
        let portions = pure(species);
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let (coldest, hottest) = gas.range();
        for temperature in [300.0, 999.999, 1000.0, 1000.001, 1500.0, 4000.0, 6000.0] {
            for factor in [0.3, 0.94, 1.0 - 1e-12, 1.0, 1.0 + f64::EPSILON, 1.0 + 1e-9, 1.06, 2.0, 100.0] {
                let Ok(found) = gas.isentropic_temperature(temperature, factor) else {
                    // Only where c_p/R ≥ 2.4 would take it outside.
                    let far = temperature * libm::pow(factor, 1.0 / 2.4);
                    assert!(!(coldest..hottest).contains(&far), "{} {temperature} {factor}", species.name);
                    continue;
                };
                assert!(found.width_in_ulp() <= 2, "{} {temperature} {factor} {found:?}", species.name);
                assert!(factor != 1.0 || found == Enclosure::from(temperature));
                assert!(factor <= 1.0 || found.low() >= temperature);
                let inverse = Rational::ONE.checked_div(factor.into()).unwrap();
                if found.high() < hottest && temperature < hottest {
                    let back = gas.isentropic_temperature(found, inverse).unwrap();
                    assert!(back.contains(temperature), "{} {temperature} {factor} {back:?}", species.name);
                }
            }
        }
    }
}

#[test]
fn constant_heat_capacity_agrees_with_its_own_formula() {
    let helium = pure(&table::HE);
    let gas = ThermallyPerfectGas::new(&helium).unwrap();
    let gamma = HeatCapacityRatio::ratio(5, 3).unwrap();
    for factor in [0.5, 0.999, 1.0, 1.06, 7.0, 32.0] {
        let (a, b) = (gas.isentropic_temperature(700.0, factor).unwrap(), gamma.isentropic_temperature(700.0, factor).unwrap());
        assert!(a.overlaps(b) && b.width_in_ulp() <= 2, "{factor} {a:?} {b:?}");
    }
    // 32^(2/5) = 4, and 2⁻⁷ to the power 2/7 is 1/4.
    assert!(gamma.isentropic_temperature(700.0, 32.0).unwrap().contains(2800.0));
    let diatomic = HeatCapacityRatio::ratio(7, 5).unwrap();
    assert!(diatomic.isentropic_temperature(700.0, 1.0 / 128.0).unwrap().contains(175.0));
    let (least, greatest) = (Ball::SMALLEST_ENTRY, Ball::LARGEST_ENTRY);
    for (temperature, factor) in [(greatest, least), (least, greatest), (greatest, greatest), (1.0, 1.0)] {
        assert!(diatomic.isentropic_temperature(temperature, factor).unwrap().width_in_ulp() <= 2, "{temperature} {factor}");
    }
}

#[test]
fn tolerances_give_the_hull() {
    let portions = pure(&table::CO2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let gamma = HeatCapacityRatio::new(Enclosure::new(1.2, 1.3).unwrap()).unwrap();
    let temperature = Enclosure::new(990.0, 1010.0).unwrap();
    for (low, high) in [(0.9, 1.1), (0.8, 0.9), (1.1, 1.2)] {
        let factor = Enclosure::new(low, high).unwrap();
        let (whole, constant) =
            (gas.isentropic_temperature(temperature, factor).unwrap(), gamma.isentropic_temperature(temperature, factor).unwrap());
        let mut all: Option<Enclosure> = None;
        let mut hull = |part: Enclosure| all = Some(all.map_or(part, |all| all.hull(part)));
        for t in [990.0, 995.0, 1000.0, 1000.5, 1010.0] {
            for r in [low, f64::midpoint(low, high), high] {
                assert!(whole.encloses(gas.isentropic_temperature(t, r).unwrap()));
                for g in [exact("1.2"), exact("1.25"), exact("1.3")] {
                    hull(HeatCapacityRatio::new(g).unwrap().isentropic_temperature(t, r).unwrap());
                }
            }
        }
        let all = all.unwrap();
        assert!(constant.overlaps(all) && (constant.width() / all.width() - 1.0).abs() < 1e-12, "{constant:?} {all:?}");
    }
}

#[test]
fn decimals_at_a_joint_are_covered() {
    let portions = pure(&table::N2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    for text in ["1000", "1000.00000000000000000001", "999.99999999999999999999"] {
        let found = gas.isentropic_temperature(exact(text), exact("1.06")).unwrap();
        assert!(found.width_in_ulp() <= 2);
        // Back onto the joint.
        let back = gas.isentropic_temperature(found, exact("50/53")).unwrap();
        assert!(back.contains(1000.0), "{back:?}");
    }
}

#[test]
fn an_answer_at_a_joint_is_the_hull_of_both_polynomials() {
    let portions = pure(&table::N2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    // The factor from 900 K to the joint at 1000 K to 37 digits (50-digit arithmetic): no proof tells on which side T′ is.
    let found = gas.isentropic_temperature(exact("900"), exact("1.507525597366706248432560864546775743")).unwrap();
    assert!(found.contains(1000.0) && found.width_in_ulp() <= 2, "{found:?}");
}

#[test]
fn what_is_outside_is_refused() {
    let portions = pure(&table::N2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let refused = |t: f64, r: f64| gas.isentropic_temperature(t, r).map_err(|error| (error.parameter, error.rule)).unwrap_err();
    let data = Rule::DataRange(200.0, 20_000.0);
    assert_eq!(refused(199.9, 1.0), (Parameter::Temperature, data));
    assert_eq!(refused(20_001.0, 1.0), (Parameter::Temperature, data));
    assert_eq!(refused(f64::NAN, 1.0), (Parameter::Temperature, Rule::Finite));
    assert_eq!(refused(300.0, 0.0), (Parameter::PressureFactor, Rule::Above(0.0)));
    assert_eq!(refused(300.0, f64::INFINITY), (Parameter::PressureFactor, Rule::Finite));
    for (t, r) in [(300.0, 0.2), (200.0, 1.0 - f64::EPSILON), (20_000.0, 1.0 + f64::EPSILON), (5000.0, 1e5)] {
        assert_eq!(refused(t, r), (Parameter::PressureFactor, Rule::HeatsBeyondData(200.0, 20_000.0)), "{t} {r}");
    }
    // To the ends of the data to 37 digits (50-digit arithmetic): not proven to stay inside. Just inside is answered.
    for (t, r, inward) in
        [("300", "0.2418041561382243599426063563826168062", 1.0 + 1e-15), ("5000", "4304.734604491128366481775838570464262", 1.0 - 1e-15)]
    {
        assert!(gas.isentropic_temperature(exact(t), exact(r)).is_err(), "{t} {r}");
        assert!(gas.isentropic_temperature(exact(t), exact(r).to_f64() * inward).is_ok(), "{t} {r}");
    }
    assert!(gas.isentropic_temperature(200.0, 1.0).is_ok() && gas.isentropic_temperature(200.0, 1.5).is_ok());
    assert!(gas.isentropic_temperature(20_000.0, 1.0).is_ok() && gas.isentropic_temperature(20_000.0, 0.5).is_ok());
}

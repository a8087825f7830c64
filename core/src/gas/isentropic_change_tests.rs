//! Checks of the integrals and of their inverses: 45-digit quadrature, the closed form, every species over all its data, the way back.

use super::*;
use crate::gas::species::{Species, named, table};
use crate::gas::{Portion, ThermallyPerfectGas};
use crate::number::Rational;

fn exact(text: &str) -> Ball {
    Ball::from(text.parse::<Rational>().unwrap())
}

fn with_gas<T>(species: &Species<'_>, use_it: impl FnOnce(&HeatCapacity<Ball>) -> T) -> T {
    let portions = [Portion { species, fraction: Rational::ONE }];
    use_it(ThermallyPerfectGas::new(&portions).unwrap().heat_capacity())
}

#[test]
fn speeds_are_those_of_forty_digits() {
    // Adaptive quadrature (tanh-sinh) of the published polynomials in 45-digit arithmetic, over pieces that end at the joints.
    for (name, from, to, answer) in [
        ("N2", "885", "450", "-53.4328479626980680441460307611611"),
        ("N2", "300", "1300", "120.0579496683887990508995976617075"),
        ("Ar", "1500", "250", "-88.76275611221752134662185714467182"),
        ("CO2", "2500", "300", "-386.5437096277434363117385585151361"),
        ("SF6", "600", "220.5", "-248.7108519399676723242265527330424"),
        ("CH4", "1000", "999.99", "-0.002639307156843048672022393927557071"),
        ("H2", "295", "4000", "318.1063489074321165415542636779888"),
        ("O2", "7000", "900", "-461.385232556328751088115053863416"),
    ] {
        with_gas(named(name).unwrap(), |gas| {
            let (temperature, end) = (exact(from), exact(to));
            let excess = (end - temperature) / temperature;
            let [first, last] = [temperature, end].map(|t| gas.index_at(t.nearest()));
            let found = gas.speed_rise(first, temperature, excess, last);
            let difference = found - exact(answer);
            assert!(difference.magnitude() < 1e-20 * found.magnitude(), "{name} {from} {to} {difference:?}");
        });
    }
}

#[test]
fn constant_heat_capacity_is_the_closed_form() {
    // Helium: c = 5/2 by its polynomial, 2√(c(c − 1))(√T′ − √T).
    with_gas(&table::HE, |helium| {
        for (from, to) in [(300.0, 1000.0), (300.0, 201.0), (5000.0, 300.0), (300.0, 300.000_000_1)] {
            let [start, end] = [from, to].map(Ball::from);
            let found = helium.speed_rise(helium.index_at(from), start, (end - start) / start, helium.index_at(to));
            let factor = (Ball::whole(15) / Ball::whole(4)).sqrt().doubled();
            let difference = found - factor * (end - start) / (end.sqrt() + start.sqrt());
            assert!(difference.magnitude() < 1e-20 * found.magnitude(), "{from} {to} {difference:?}");
            assert!(difference.enclosure().contains(0.0));
        }
    });
}

#[test]
fn every_species_comes_back_over_all_its_data() {
    for species in table::ALL {
        with_gas(species, |gas| {
            let (coldest, hottest) = gas.range();
            for temperature in [300.0, 700.0, 999.0, 1500.0, 5000.0] {
                let start = Ball::from(temperature);
                let from = gas.index_at(temperature);
                for end in [coldest * 1.000_001, 450.0, 999.999_999, 1_000.000_001, 1300.0, 4000.0, hottest * 0.999_999, temperature + 1e-9]
                {
                    let excess = (Ball::from(end) - start) / start;
                    let to = gas.index_at(end);
                    let changes = [
                        gas.changed_by::<Speed>(from, start, gas.speed_rise(from, start, excess, to)),
                        gas.changed_by::<Pressure>(from, start, gas.entropy_rise(from, start, excess, to)),
                    ];
                    for change in changes {
                        let [Some(found), None] = change else { panic!("{} {temperature} {end} {change:?}", species.name) };
                        assert_eq!(found.to, to);
                        let difference = found.excess - excess;
                        assert!(difference.enclosure().contains(0.0), "{} {temperature} {end} {difference:?}", species.name);
                        assert!(found.excess.radius() < 1e-18 * found.excess.magnitude(), "{} {temperature} {end}", species.name);
                    }
                }
                // Beyond both ends of the data there is none.
                for end in [coldest, hottest] {
                    let excess = (Ball::from(end) - start) / start;
                    let rise = gas.speed_rise(from, start, excess, gas.index_at(end)) * Ball::from(1.000_001);
                    assert!(gas.changed_by::<Speed>(from, start, rise).iter().all(Option::is_none), "{}", species.name);
                }
            }
        });
    }
}

#[test]
fn a_joint_leaves_both_sides() {
    with_gas(&table::N2, |gas| {
        let start = Ball::from(700.0);
        let excess = (Ball::from(1000.0) - start) / start;
        let rise = gas.speed_rise(0, start, excess, 0);
        let both = gas.changed_by::<Speed>(0, start, rise);
        for change in both {
            let change = change.unwrap();
            assert!((change.excess - excess).magnitude() < 1e-20, "{change:?}");
        }
    });
}

#[test]
fn a_small_change_keeps_its_digits() {
    // To first order x = ln(1 + e)/c; in f64 a difference of two integrals from a fixed temperature would have three digits of it.
    let small = libm::scalbn(1.0, -40);
    with_gas(&table::N2, |gas| {
        for temperature in [500.0, 1000.0, 3000.0] {
            let (start, from) = (Ball::from(temperature), gas.index_at(temperature));
            let [Some(Change { excess, .. }), None] = gas.changed_by::<Pressure>(from, start, Ball::from(1.0 - small).ln()) else {
                panic!()
            };
            let first = -small / gas.value(from, start).nearest();
            assert!((excess.nearest() / first - 1.0).abs() < 2.0 * small, "{temperature} {excess:?}");
            assert!(excess.radius() < 1e-21 * excess.nearest().abs(), "{excess:?}");
        }
    });
}

//! The table of species in the library against the data file, digit for digit.

use endwall::gas::species::{self, Coefficient, table};
use endwall_tests::glenn::glenn;
use endwall_tests::oracle::{RBig, exact, parse};

/// A coefficient as the exact ratio, from its own exact form.
fn ratio_of(coefficient: Coefficient) -> RBig {
    let value = coefficient.rational().expect("in the domain");
    parse(&decimal_of(value))
}

fn decimal_of(value: endwall::number::Rational) -> String {
    // Every printed coefficient is an integer over a power of ten: scale until it is one.
    let ten = endwall::number::Rational::integer(10);
    let mut scaled = value;
    for power in 0..=40 {
        if let Some(whole) = scaled.to_i64() {
            return format!("{whole}e-{power}");
        }
        scaled = scaled.checked_mul(ten).expect("few digits");
    }
    panic!("{} is no decimal", value.to_f64())
}

#[test]
fn every_digit_is_that_of_the_file() {
    let mut compared = 0;
    for species in table::ALL {
        let given = &glenn()[species.name];
        assert_eq!(ratio_of(species.molar_mass), given.molar_mass, "{}: molar mass", species.name);
        assert_eq!(species.ranges.len(), given.ranges.len(), "{}: ranges", species.name);
        for (range, given) in species.ranges.iter().zip(&given.ranges) {
            let name = format!("{} from {} K", species.name, range.low);
            for (k, (found, wanted)) in range.heat_capacity.into_iter().zip(&given.a).enumerate() {
                assert_eq!(ratio_of(found), *wanted, "{name}: a{}", k + 1);
                compared += 1;
            }
            assert_eq!(ratio_of(range.enthalpy), given.b, "{name}: b1");
            // 298.15 K has no double; the library has the nearest.
            for (found, wanted) in [(range.low, &given.low), (range.high, &given.high)] {
                assert_eq!(found.to_bits(), wanted.to_f64().value().to_bits(), "{name}: {found}");
                assert!(exact(found) == *wanted || species.name == "HD", "{name}: {found}");
            }
        }
        assert_eq!(u64::from(species.shape.twice_frozen_heat_capacity()), given.twice_rigid(), "{}: shape", species.name);
        assert_eq!(species::named(species.name), Some(species));
        assert!(species.check().is_ok(), "{}", species.name);
    }
    println!("{} species, {compared} coefficients", table::ALL.len());
    // Air is a mixture, which the library makes from its species.
    assert!(glenn().keys().filter(|name| *name != "Air").all(|name| species::named(name).is_some()));
}

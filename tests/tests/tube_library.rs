//! What the tube does with the shock, against published values and property libraries. Sources and tolerances stand in the files in `data/`.

use endwall::gas::HeatCapacityRatio;
use endwall::gas::species::table;
use endwall::number::Rational;
use endwall::tube::{Bifurcation, Verdict, bifurcation_band, collision_integral, lennard_jones};
use endwall_tests::data;
use endwall_tests::tolerances::{BIFURCATION_ROOT, COLLISION_INTEGRAL, VISCOSITY, VISCOSITY_AT_300, VISCOSITY_OF_WATER};

fn ratio(text: &str) -> HeatCapacityRatio {
    HeatCapacityRatio::new(text.parse::<Rational>().expect("a ratio")).expect("in the domain")
}

#[test]
fn bands_of_bifurcation() {
    for row in data::bifurcation().rows() {
        let gamma = ratio(row.text("heat_capacity_ratio"));
        let band = bifurcation_band(gamma).expect("a proof").expect("a band");
        for (column, found, below, above) in [
            ("lower_mach", band.lower, Verdict::DoesNot, Verdict::Bifurcates),
            ("upper_mach", band.upper, Verdict::Bifurcates, Verdict::DoesNot),
        ] {
            assert!(found.is_proven() && found.width_in_ulp() <= 2, "{found:?}");
            assert!((found.middle() / row.f64(column) - 1.0).abs() < BIFURCATION_ROOT, "{column}: {found} for {}", row.text(column));
            // At the bounds of the enclosure themselves the criterion is proven to have opposite answers.
            let verdict = |mach: f64| Bifurcation::new(gamma, mach).expect("a shock").verdict;
            assert_eq!((verdict(found.low()), verdict(found.high())), (below, above), "{column} {found:?}");
        }
    }
}

#[test]
fn viscosity_of_dilute_gases() {
    let species = [
        &table::HE,
        &table::NE,
        &table::AR,
        &table::KR,
        &table::XE,
        &table::H2,
        &table::N2,
        &table::O2,
        &table::CO,
        &table::CO2,
        &table::CH4,
        &table::H2O,
        &table::N2O,
        &table::SF6,
    ];
    let mut seen = std::collections::BTreeSet::new();
    let (mut worst, mut worst_integral) = (0.0_f64, 0.0_f64);
    for row in data::viscosity_library().rows() {
        let (name, temperature, listed) = (row.text("species"), row.f64("temperature"), row.f64("value"));
        if name == "Omega22" {
            let error = (collision_integral(temperature) / listed - 1.0).abs();
            assert!(error < COLLISION_INTEGRAL, "{temperature}: {error}");
            worst_integral = worst_integral.max(error);
            continue;
        }
        seen.insert(name);
        let gas = species.into_iter().find(|gas| gas.name == name).unwrap_or_else(|| panic!("{name} is not listed"));
        let viscosity = lennard_jones(name).expect("listed").viscosity(gas.molar_mass.to_f64(), temperature).expect("in the range");
        let error = (viscosity / listed - 1.0).abs();
        let allowed = match name {
            "H2O" => VISCOSITY_OF_WATER,
            _ if temperature == 300.0 => VISCOSITY_AT_300,
            _ => VISCOSITY,
        };
        assert!(error < allowed, "{name} {} at {temperature} K: {viscosity} for {listed}", row.text("description"));
        if name != "H2O" {
            worst = worst.max(error);
        }
    }
    println!("viscosity: worst {worst:.4}, collision integral {worst_integral:.5}");
    assert_eq!(seen.len(), species.len());
}

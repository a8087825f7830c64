//! Shocks into gases whose heat capacity depends on temperature.

use super::{Fingerprint, whole};
use endwall::gas::species::{Species, table};
use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
use endwall::number::Rational;
use endwall::shock::{Entry, Output, ThermalFill, ThermalShock};
use endwall::shot::Generator;

const SPECIES: [&Species<'static>; 8] = [&table::N2, &table::O2, &table::CO2, &table::AR, &table::HE, &table::CH4, &table::H2O, &table::H2];

/// Every output of a shock into a mixture of two species, with proof and in plain doubles, and the shock found again from its T5.
pub fn shocks(generator: &mut Generator, fingerprint: &mut Fingerprint) {
    let mut species = || SPECIES[whole(generator, 0, 7) as usize];
    let (first, second) = (species(), species());
    let thousandths = u128::from(whole(generator, 1, 999));
    let part = |n: u128| Rational::ratio(n, 1000).unwrap_or(Rational::ONE);
    let portions =
        [Portion { species: first, fraction: part(thousandths) }, Portion { species: second, fraction: part(1000 - thousandths) }];
    let model = HeatCapacityModel::ALL[whole(generator, 0, 3) as usize];
    let tenths = |n: u32| Rational::ratio(u128::from(n), 10).unwrap_or(Rational::ONE);
    let (pressure, temperature) = (tenths(whole(generator, 1_000, 1_000_000)), tenths(whole(generator, 2_500, 4_000)));
    let mach = Rational::ratio(u128::from(whole(generator, 10_100, 60_000)), 10_000).unwrap_or(Rational::ONE);
    let fill = ThermallyPerfectGas::new(&portions).and_then(|gas| ThermalFill::new(gas, model, pressure, temperature));
    let Ok(fill) = fill else { return };
    let Ok(shock) = ThermalShock::new(&fill, Entry::Mach, mach) else { return };
    for output in Output::ALL {
        fingerprint.add_enclosure(shock.output(output));
        fingerprint.add(shock.nearest(output));
    }
    if let Some(plain) = fill.plain(|x| x).reflected(shock.nearest(Output::ShockSpeed), 0.0) {
        fingerprint.add(plain.flow().evaluate(Output::Temperature5));
        fingerprint.add(plain.flow().evaluate(Output::Pressure5));
    }
    if let Ok(again) = ThermalShock::new(&fill, Entry::ReflectedTemperature, shock.nearest(Output::Temperature5)) {
        fingerprint.add_enclosure(again.output(Output::Mach));
    }
}

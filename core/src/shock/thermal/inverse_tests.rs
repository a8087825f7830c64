//! Inverse problems beside a joint of the data, where the enthalpy jumps.

use crate::gas::species::named;
use crate::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
use crate::number::{Enclosure, Rational};
use crate::shock::{Entry, Output, ThermalFill, ThermalShock};

/// The jump leaves a range of Mach numbers of about 10⁻⁹ in which either polynomial may hold; a T5 just above the joint belongs to its upper end.
#[test]
fn a_temperature_just_above_a_joint_is_that_of_the_upper_polynomial() {
    for (name, t1, t5) in [
        ("H2", "310", "1000.0000000000005"),
        ("O2", "295", "1000.0000000000005"),
        ("N2", "300", "1000.0000000000001"),
        ("H2", "310", "1000.000000001"),
        ("CO2", "300", "1000.0000000003"),
    ] {
        let exact = |text: &str| text.parse::<Rational>().unwrap();
        let portions = [Portion { species: named(name).unwrap(), fraction: Rational::ONE }];
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 1e4, exact(t1)).unwrap();
        let found = ThermalShock::new(&fill, Entry::ReflectedTemperature, exact(t5)).unwrap();
        let mach = found.output(Output::Mach);
        // By steps of one slope on forward solutions, from above, where the joint is far.
        let forward = |mach: f64| ThermalShock::new(&fill, Entry::Mach, mach).unwrap().output(Output::Temperature5);
        let miss = |mach: f64| forward(mach).middle() - t5.parse::<f64>().unwrap();
        let [far, near] = [mach.high() * (1.0 + 2e-7), mach.high() * (1.0 + 1e-7)];
        let slope = (miss(far) - miss(near)) / (far - near);
        let new = (0..4).fold(near, |mach, _| mach - miss(mach) / slope);
        let (low, high) = (new.next_down().next_down().next_down(), new.next_up().next_up().next_up());
        assert!(forward(new).width_in_ulp() <= 4 && miss(new).abs() < 1e-9, "{name} {t1} {t5} {:?}", forward(new));
        assert!(mach.overlaps(Enclosure::new(low, high).unwrap()), "{name} {t1} {t5}: {mach:?}, {new:?}");
    }
}

/// At a joint the answer holds both its ends.
#[test]
fn a_joint_is_answered_with_what_either_polynomial_gives() {
    for (name, t1) in [("N2", "300"), ("N2", "293.15"), ("H2", "310"), ("O2", "295"), ("Ar", "300")] {
        let portions = [Portion { species: named(name).unwrap(), fraction: Rational::ONE }];
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 1e4, t1.parse::<Rational>().unwrap()).unwrap();
        let Ok(found) = ThermalShock::new(&fill, Entry::ReflectedTemperature, 1000.0) else { continue };
        let mach = found.output(Output::Mach);
        let below = ThermalShock::new(&fill, Entry::Mach, mach.low() * (1.0 - 1e-12)).unwrap().output(Output::Temperature5);
        assert!(below.low() <= 1000.0, "{name} {t1} {mach:?} {below:?}");
    }
}

//! Checks of the reflection from a wall that recedes faster than the gas: answers of 45-digit arithmetic, the closed form, limits and refusals.

use super::super::flow::ThermalFlow;
use super::{ThermalFill, ThermalShock};
use crate::gas::species::named;
use crate::gas::{Fill, Gas, HeatCapacityModel, HeatCapacityRatio, Portion, Rule, ThermallyPerfectGas};
use crate::number::{Enclosure, Rational};
use crate::shock::thermal::ThermalError;
use crate::shock::{Entry, Incident, Output, Wave};

fn exact(text: &str) -> Rational {
    text.parse().unwrap()
}

fn with_shock<T>(name: &str, model: HeatCapacityModel, temperature: &str, speed: &str, use_it: impl FnOnce(ThermalShock<'_>) -> T) -> T {
    let portions = [Portion { species: named(name).unwrap(), fraction: Rational::ONE }];
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let fill = ThermalFill::new(gas, model, 1e4, exact(temperature)).unwrap();
    use_it(ThermalShock::new(&fill, Entry::ShockSpeed, exact(speed)).unwrap())
}

#[test]
fn expansions_are_those_of_forty_digits() {
    // The conservation laws and the integrals (tanh-sinh quadrature) of the published polynomials, solved by bracketing in 45-digit arithmetic.
    for (name, t1, speed, wall, t5, ratio) in [
        ("N2", "295", "1050", "950", "695.90165068460849209554204996054", "6.8595286283511270798977530828708"),
        ("CO2", "300", "900", "900", "633.70397450885865234456182847579", "7.6508767680273416267434341198625"),
        ("Ar", "300", "1500", "1300", "1914.7475906416859316894992067836", "17.176282424739160977908709720528"),
        ("CH4", "298.15", "1200", "1150", "513.94646128057776670603615666821", "5.1468102178691995017936054846777"),
    ] {
        with_shock(name, HeatCapacityModel::Equilibrium, t1, speed, |shock| {
            let receding = shock.reflected_from_wall(exact(wall)).unwrap();
            assert_eq!(receding.wave(), Wave::Expansion);
            for (output, answer) in [(Output::Temperature5, t5), (Output::ReflectedPressureRatio, ratio)] {
                let found = receding.output(output);
                assert!(found.overlaps(Enclosure::from(exact(answer))), "{name} {output:?} {found:?}");
                assert!(found.width_in_ulp() <= 2, "{name} {output:?} {found:?}");
            }
            // The gas law, the head of the wave, and what the wall does not change.
            let (two, five) = (receding.state_2(), receding.state_5());
            let by_gas_law = two.density * (five.pressure / two.pressure) * (two.temperature / five.temperature);
            assert!(by_gas_law.overlaps(five.density));
            assert!(receding.output(Output::ReflectedSpeed).overlaps(two.sound_speed - two.gas_speed));
            assert!(receding.output(Output::ReflectedMach).contains(1.0));
            assert_eq!(two, shock.state_2());
        });
    }
}

#[test]
fn frozen_vibration_is_the_closed_form() {
    with_shock("N2", HeatCapacityModel::FrozenThenEquilibrium, "295", "1050", |shock| {
        let molar_mass = shock.fill().gas().molar_mass();
        let gas = Gas::new(HeatCapacityRatio::ratio(7, 5).unwrap(), molar_mass.enclosure()).unwrap();
        let closed = Incident::new(&Fill::new(gas, 1e4, 295.0).unwrap(), Entry::ShockSpeed, 1050.0).unwrap();
        for wall in [900.0, 1500.0, 3000.0] {
            let (found, expected) = (shock.reflected_from_wall(wall).unwrap(), closed.reflected_from_wall(wall).unwrap());
            assert_eq!(expected.wave, Wave::Expansion);
            let state = found.state_5();
            for (own, other) in [
                (state.pressure, expected.state.pressure),
                (state.temperature, expected.state.temperature),
                (state.density, expected.state.density),
                (state.sound_speed, expected.state.sound_speed),
            ] {
                assert!(own.overlaps(other) && own.width_in_ulp() <= 2, "{wall} {own:?} {other:?}");
            }
        }
    });
}

#[test]
fn a_wall_near_the_gas_speed_returns_a_weak_wave() {
    with_shock("CO2", HeatCapacityModel::Equilibrium, "300", "900", |shock| {
        let gas_speed = shock.nearest(Output::GasSpeed2);
        let p2 = shock.nearest(Output::Pressure2);
        // To first order p5 − p2 = ρ2 a2 (u2 − V), for a shock as for an expansion.
        let impedance = shock.nearest(Output::Density2) * shock.nearest(Output::SoundSpeed2);
        for (slower, wave) in [(1e-3, Wave::Shock), (-1e-3, Wave::Expansion)] {
            let near = shock.reflected_from_wall(gas_speed - slower).unwrap();
            assert_eq!(near.wave(), wave);
            let rise = near.ball(Output::Pressure5).nearest() - p2;
            assert!((rise / (impedance * slower) - 1.0).abs() < 1e-4, "{wave:?} {rise}");
        }
    });
}

#[test]
fn entries_of_state_5_belong_to_the_rigid_wall() {
    with_shock("N2", HeatCapacityModel::Equilibrium, "295", "1050", |by_speed| {
        let rigid = ThermalShock::new(by_speed.fill(), Entry::ReflectedTemperature, 1200.0).unwrap();
        for wall in [100.0, 700.0] {
            let moved = rigid.reflected_from_wall(wall).unwrap();
            let speed = |shock: &ThermalShock<'_>| {
                shock.flows.iter().flatten().next().map(|flow: &ThermalFlow<_>| flow.evaluate(Output::ShockSpeed).nearest())
            };
            assert_eq!(speed(&moved), speed(&rigid));
            assert!(moved.output(Output::Temperature5).high() < 1200.0, "{wall}");
        }
    });
}

#[test]
fn below_the_data_it_is_refused() {
    with_shock("N2", HeatCapacityModel::Equilibrium, "295", "1050", |shock| {
        let Err(ThermalError::Input(error)) = shock.reflected_from_wall(2500.0) else { panic!() };
        assert_eq!(error.rule, Rule::HeatsBeyondData(200.0, 20_000.0));
    });
}

//! What several of the checks of the library need: inputs in the forms of the library and of the oracle, and the truth of every output.

#![allow(dead_code, reason = "each check uses its own part")]

pub mod property;
pub mod thermal;

use endwall::gas::{Fill, Gas, HeatCapacityRatio};
use endwall::number::{Enclosure, Rational};
use endwall::shock::{Entry, Output};
use endwall_tests::oracle::{self, RBig, Real, Shot, exact, power_of_two};
use endwall_tests::random::{Input, Random};

/// Whether the long runs were asked for (`ENDWALL_LONG=1`).
pub fn long() -> bool {
    std::env::var_os("ENDWALL_LONG").is_some_and(|value| value == "1")
}

/// The number of cases of a run.
pub fn cases(usual: usize, long_run: usize) -> usize {
    if long() { long_run } else { usual }
}

/// The input as the library takes it.
pub fn rational(input: &Input) -> Rational {
    match input {
        Input::Ratio(numerator, denominator) => {
            Rational::ratio(u128::from(*numerator), u128::from(*denominator)).expect("a denominator that is not zero")
        }
        Input::Double(value) => Rational::from(*value),
        Input::Decimal(text) => text.parse().expect("a decimal"),
    }
}

/// The ratio of heat capacities, where it is in the domain of the library.
pub fn heat_capacity_ratio(input: &Input) -> Option<HeatCapacityRatio> {
    let inside = {
        let value = input.exact();
        value >= exact(1.000_001) && value <= exact(100.0)
    };
    let built = HeatCapacityRatio::new(rational(input));
    assert_eq!(built.is_ok(), inside, "{input:?}: {built:?}");
    built.ok()
}

/// Decimal digits of a positive number, cut after `digits` significant ones.
pub fn decimal(value: &Real, digits: i32) -> String {
    let power = digits - 1 - value.to_f64().log10().floor() as i32;
    let (mantissa, _) = value.to_float(oracle::WORKING);
    let ten = RBig::from(10);
    let mut scale = RBig::ONE;
    for _ in 0..power.abs() {
        scale *= &ten;
    }
    let scale = if power < 0 { RBig::ONE / scale } else { scale };
    let whole = (mantissa * oracle::float(&scale, oracle::WORKING)).floor();
    format!("{}e{}", whole.to_int().value(), -power)
}

/// A fill in both worlds.
#[derive(Clone, Debug)]
pub struct Filled {
    /// For the library.
    pub fill: Fill,
    /// For the oracle.
    pub oracle: oracle::Fill,
}

/// A fill from inputs inside the domain; `None` where the ratio of heat capacities is outside.
pub fn fill(gamma: &Input, molar_mass: &Input, pressure: &Input, temperature: &Input) -> Option<Filled> {
    let gas = Gas::new(heat_capacity_ratio(gamma)?, rational(molar_mass)).expect("a molar mass in the domain");
    Some(Filled {
        fill: Fill::new(gas, rational(pressure), rational(temperature)).expect("a fill in the domain"),
        oracle: oracle::Fill {
            heat_capacity_ratio: gamma.exact(),
            molar_mass: molar_mass.exact(),
            pressure: pressure.exact(),
            temperature: temperature.exact(),
        },
    })
}

/// A random fill: typed decimals and doubles of the trade.
pub fn random_fill(random: &mut Random, gamma: &Input) -> Option<Filled> {
    let choose = |random: &mut Random, low: f64, high: f64, digits: usize| {
        let value = random.between(low, high);
        if random.below(3) == 0 { Input::Double(value) } else { Input::Decimal(format!("{value:.digits$}")) }
    };
    let molar_mass = choose(random, 0.002, 0.15, 7);
    let pressure = choose(random, 100.0, 200_000.0, 1);
    let temperature = choose(random, 200.0, 600.0, 2);
    fill(gamma, &molar_mass, &pressure, &temperature)
}

/// The exact answer for every output.
pub fn truth(output: Output, shot: &Shot) -> Real {
    let one = Real::int(1);
    let (ahead, back) = (&shot.incident, &shot.reflected);
    match output {
        Output::ShockSpeed => shot.shock_speed.clone(),
        Output::Mach => ahead.mach.clone(),
        Output::MachExcess => &ahead.mach - &one,
        Output::Density1 => shot.state_1.density.clone(),
        Output::SoundSpeed1 => shot.state_1.sound_speed.clone(),
        Output::PressureRatio => ahead.pressure.clone(),
        Output::PressureExcess => ahead.pressure_excess.clone(),
        Output::Pressure2 => shot.state_2.pressure.clone(),
        Output::PressureRise => shot.incident_step.clone(),
        Output::DensityRatio => ahead.density.clone(),
        Output::DensityExcess => ahead.density_excess.clone(),
        Output::Density2 => shot.state_2.density.clone(),
        Output::TemperatureRatio => ahead.temperature.clone(),
        Output::TemperatureExcess => ahead.temperature_excess.clone(),
        Output::Temperature2 => shot.state_2.temperature.clone(),
        Output::SoundSpeed2 => shot.state_2.sound_speed.clone(),
        Output::GasSpeed2 => shot.state_2.gas_speed.clone(),
        Output::GasSpeedRatio => ahead.gas_speed.clone(),
        Output::MachBehind => (&ahead.mach - &ahead.gas_speed) / &ahead.sound_speed,
        Output::ShockFrameSpeed2 => &shot.shock_speed - &shot.state_2.gas_speed,
        Output::ReflectedOverIncidentPressure => back.pressure_over_2.clone(),
        Output::ReflectedPressureRatio => back.pressure.clone(),
        Output::ReflectedPressureExcess => back.pressure_excess.clone(),
        Output::Pressure5 => shot.state_5.pressure.clone(),
        Output::Step => shot.step.clone(),
        Output::ReflectionCoefficient => &shot.step / &shot.incident_step,
        Output::ReflectedDensityRatio => back.density.clone(),
        Output::ReflectedDensityExcess => &back.density - &one,
        Output::Density5 => shot.state_5.density.clone(),
        Output::ReflectedTemperatureRatio => back.temperature.clone(),
        Output::ReflectedTemperatureExcess => back.temperature_excess.clone(),
        Output::Temperature5 => shot.state_5.temperature.clone(),
        Output::SoundSpeed5 => shot.state_5.sound_speed.clone(),
        Output::ReflectedSpeed => shot.reflected_speed.clone(),
        Output::ReflectedSpeedRatio => back.speed.clone(),
        Output::ReflectedMach => back.mach.clone().expect("a rigid wall sends a shock"),
        Output::ReflectedMachExcess => back.mach_excess.clone().expect("a rigid wall sends a shock"),
    }
}

/// Whether the library's enclosure holds the truth. Of an approximated truth the whole uncertainty must lie inside.
pub fn holds(found: Enclosure, truth: &Real) -> bool {
    let Real::Approximate { value, bits } = truth else {
        return oracle::contains(found.low(), found.high(), truth);
    };
    assert!(*bits > 200, "only {bits} bits of the truth are known");
    let middle = RBig::from(value.repr().significand().clone()) * power_of_two(value.repr().exponent() as i64);
    let radius = &middle * power_of_two(-bits) * RBig::from(truth.signum());
    exact(found.low()) <= &middle - &radius && &middle + radius <= exact(found.high())
}

/// Whether it is the only best one.
pub fn is_optimal(found: Enclosure, truth: &Real) -> bool {
    oracle::optimal(found.low(), found.high(), truth)
}

/// The output that an entry repeats.
pub fn repeated(entry: Entry, shot: &Shot) -> Real {
    truth(entry.output(), shot)
}

//! Shocks into thermally perfect gases in the forms of the library and of the oracle.

use dashu_base::Abs;
use endwall::gas::{HeatCapacityModel, InputError, Portion, Rule, ThermallyPerfectGas, species};
use endwall::number::Enclosure;
use endwall::shock::{Entry, Output, ThermalError, ThermalFill, ThermalShock};
use endwall_tests::glenn::glenn;
use endwall_tests::oracle::thermal::{ThermalAnswer, ThermalGas, ThermalModel, ThermalProblem, ThermalRefusal, ThermalShot};
use endwall_tests::oracle::{self, Float, RBig, Real};
use endwall_tests::random::{Input, Random};

use super::rational;

/// A shock into a mixture.
#[derive(Clone, Debug)]
pub struct ThermalCase {
    /// Species and mole fractions as typed.
    pub portions: Vec<(&'static str, String)>,
    /// The model.
    pub model: HeatCapacityModel,
    /// p1, Pa.
    pub pressure: Input,
    /// T1, K.
    pub temperature: Input,
    /// What is given: the Mach number, M − 1 or the shock speed.
    pub entry: Entry,
    /// Its value.
    pub value: Input,
}

/// A pure gas.
pub fn pure(name: &'static str) -> Vec<(&'static str, String)> {
    vec![(name, "1".to_owned())]
}

/// Dry air: the composition of the data file, in mole fractions.
pub fn air() -> Vec<(&'static str, String)> {
    [("N2", "0.78084"), ("O2", "0.209476"), ("Ar", "0.009365"), ("CO2", "0.000319")].map(|(name, x)| (name, x.to_owned())).to_vec()
}

/// The portions as the library takes them.
pub fn portions(of: &[(&'static str, String)]) -> Vec<Portion<'static>> {
    let portion = |(name, fraction): &(&'static str, String)| Portion {
        species: species::named(name).expect("a species of the table"),
        fraction: fraction.parse().expect("a decimal"),
    };
    of.iter().map(portion).collect()
}

/// The mixture as the oracle takes it.
pub fn oracle_gas(of: &[(&'static str, String)]) -> ThermalGas {
    ThermalGas::new(of.iter().map(|(name, fraction)| (&glenn()[*name], Input::Decimal(fraction.clone()).exact())).collect())
}

/// The model of the same name.
pub fn oracle_model(model: HeatCapacityModel) -> ThermalModel {
    match model {
        HeatCapacityModel::Constant => ThermalModel::Constant,
        HeatCapacityModel::Equilibrium => ThermalModel::Equilibrium,
        HeatCapacityModel::Frozen => ThermalModel::Frozen,
        HeatCapacityModel::FrozenThenEquilibrium => ThermalModel::FrozenThenEquilibrium,
    }
}

impl ThermalCase {
    /// The library's answer.
    pub fn solve<T>(&self, then: impl FnOnce(Result<ThermalShock<'_>, ThermalError>) -> T) -> T {
        let portions = portions(&self.portions);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        let fill = ThermalFill::new(gas, self.model, rational(&self.pressure), rational(&self.temperature)).expect("a fill in the data");
        then(ThermalShock::new(&fill, self.entry, rational(&self.value)))
    }

    /// The question as the oracle takes it.
    pub fn problem(&self, closely: bool) -> ThermalProblem {
        ThermalProblem {
            gas: oracle_gas(&self.portions),
            model: oracle_model(self.model),
            pressure: self.pressure.exact(),
            temperature: self.temperature.exact(),
            closely,
        }
    }

    /// The oracle's answer.
    pub fn truth(&self, closely: bool) -> Result<ThermalAnswer, ThermalRefusal> {
        let problem = self.problem(closely);
        let value = self.value.exact();
        match self.entry {
            Entry::ShockSpeed => problem.at_speed(&value),
            Entry::MachExcess => problem.at_mach(&(value + RBig::ONE)),
            Entry::Mach => problem.at_mach(&value),
            _ => unreachable!("not an entry of these cases"),
        }
    }
}

/// Whether an error says that the gas becomes hotter than its data reach.
pub fn is_beyond_data(error: ThermalError) -> bool {
    matches!(error, ThermalError::Input(InputError { rule: Rule::HeatsBeyondData(..), .. }))
}

/// Whether an error says that the shock is not faster than sound.
pub fn is_subsonic(error: ThermalError) -> bool {
    matches!(error, ThermalError::Input(InputError { rule: Rule::AboveSoundSpeed(_) | Rule::Above(_), .. }))
}

/// Every output from the states of the oracle, each by its definition.
pub fn thermal_truth(output: Output, shot: &ThermalShot) -> Real {
    let one = Real::int(1);
    let [state_1, state_2, state_5] = &shot.states;
    match output {
        Output::ShockSpeed => shot.shock_speed.clone(),
        Output::Mach => shot.mach.clone(),
        Output::MachExcess => &shot.mach - &one,
        Output::Density1 => state_1.density.clone(),
        Output::SoundSpeed1 => state_1.sound_speed.clone(),
        Output::PressureRatio => &state_2.pressure / &state_1.pressure,
        Output::PressureExcess => &state_2.pressure / &state_1.pressure - one,
        Output::Pressure2 => state_2.pressure.clone(),
        Output::PressureRise => &state_2.pressure - &state_1.pressure,
        Output::DensityRatio => &state_2.density / &state_1.density,
        Output::DensityExcess => &state_2.density / &state_1.density - one,
        Output::Density2 => state_2.density.clone(),
        Output::TemperatureRatio => &state_2.temperature / &state_1.temperature,
        Output::TemperatureExcess => &state_2.temperature / &state_1.temperature - one,
        Output::Temperature2 => state_2.temperature.clone(),
        Output::SoundSpeed2 => state_2.sound_speed.clone(),
        Output::GasSpeed2 => state_2.gas_speed.clone(),
        Output::GasSpeedRatio => &state_2.gas_speed / &state_1.sound_speed,
        Output::MachBehind => (&shot.shock_speed - &state_2.gas_speed) / &state_2.sound_speed,
        Output::ShockFrameSpeed2 => &shot.shock_speed - &state_2.gas_speed,
        Output::ReflectedOverIncidentPressure => &state_5.pressure / &state_2.pressure,
        Output::ReflectedPressureRatio => &state_5.pressure / &state_1.pressure,
        Output::ReflectedPressureExcess => &state_5.pressure / &state_1.pressure - one,
        Output::Pressure5 => state_5.pressure.clone(),
        Output::Step => &state_5.pressure - &state_1.pressure,
        Output::ReflectionCoefficient => (&state_5.pressure - &state_1.pressure) / (&state_2.pressure - &state_1.pressure),
        Output::ReflectedDensityRatio => &state_5.density / &state_1.density,
        Output::ReflectedDensityExcess => &state_5.density / &state_1.density - one,
        Output::Density5 => state_5.density.clone(),
        Output::ReflectedTemperatureRatio => &state_5.temperature / &state_1.temperature,
        Output::ReflectedTemperatureExcess => &state_5.temperature / &state_1.temperature - one,
        Output::Temperature5 => state_5.temperature.clone(),
        Output::SoundSpeed5 => state_5.sound_speed.clone(),
        Output::ReflectedSpeed => shot.reflected_speed.clone(),
        Output::ReflectedSpeedRatio => &shot.reflected_speed / &state_1.sound_speed,
        Output::ReflectedMach => (&shot.reflected_speed + &state_2.gas_speed) / &state_2.sound_speed,
        Output::ReflectedMachExcess => (&shot.reflected_speed + &state_2.gas_speed) / &state_2.sound_speed - one,
    }
}

/// Where the truth lies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Place {
    /// Inside.
    Inside,
    /// Nearer to an end than the right bits of the oracle tell: the answer is a double, or all but one.
    AtAnEnd,
    /// Outside.
    Outside,
}

/// Where in the enclosure the truth lies, with all of its uncertainty.
pub fn place(found: Enclosure, truth: &Real) -> Place {
    let Real::Approximate { value, bits } = truth else {
        let inside = oracle::contains(found.low(), found.high(), truth);
        return if inside { Place::Inside } else { Place::Outside };
    };
    assert!(*bits > 180, "only {bits} bits of the truth are known");
    let radius = value.clone().abs() * Float::from_parts(1.into(), -(*bits as isize));
    let double = |x: f64| Float::try_from(x).expect("a bound is a number");
    let (above, below) = (value - double(found.low()), double(found.high()) - value);
    if above >= radius && below >= radius {
        Place::Inside
    } else if above >= -radius.clone() && below >= -radius {
        Place::AtAnEnd
    } else {
        Place::Outside
    }
}

/// Names of all species.
pub fn names() -> Vec<&'static str> {
    species::table::ALL.iter().map(|species| species.name).collect()
}

/// One to five species with exact decimal fractions.
pub fn random_mixture(random: &mut Random) -> Vec<(&'static str, String)> {
    let names = names();
    let count = 1 + random.below(5) as usize;
    let mut chosen: Vec<&'static str> = Vec::new();
    while chosen.len() < count {
        let name = *random.pick(&names);
        if !chosen.contains(&name) {
            chosen.push(name);
        }
    }
    let digits = 2 + random.below(5) as usize;
    let whole = 10u64.pow(digits as u32);
    let mut left = whole;
    let mut mixture = Vec::new();
    for (place, name) in chosen.iter().enumerate() {
        let share = if place + 1 == count { left } else { random.below(left + 1) };
        left -= share;
        mixture.push((*name, format!("{}.{:0digits$}", share / whole, share % whole)));
    }
    mixture
}

/// A random case: M − 1 from 10⁻⁶ to 9, or in one of eight down to 10⁻⁹, evenly over its powers; T1 from the lowest of the data to 1000 K.
pub fn random_case(random: &mut Random) -> ThermalCase {
    let portions = random_mixture(random);
    let model = *random.pick(&HeatCapacityModel::ALL);
    let low = if portions.iter().any(|(name, _)| *name == "HD") { 298.15 } else { 200.0 };
    let temperature = random.between(low, 1000.0);
    // A few at the trade's, most anywhere.
    let temperature =
        if random.below(2) == 0 { Input::Double(temperature) } else { Input::Decimal(format!("{:.2}", temperature.max(low + 0.01))) };
    let power = if random.below(8) == 0 { random.between(-9.0, -6.0) } else { random.between(-6.0, 9f64.log10()) };
    let excess = 10f64.powf(power);
    let pressure = random.between(100.0, 200_000.0);
    let pressure = if random.below(2) == 0 { Input::Double(pressure) } else { Input::Decimal(format!("{pressure:.1}")) };
    let mut case = ThermalCase { portions, model, pressure, temperature, entry: Entry::MachExcess, value: Input::Double(excess) };
    match random.below(4) {
        0 => (case.entry, case.value) = (Entry::Mach, Input::Double(1.0 + excess)),
        1 => (case.entry, case.value) = (Entry::Mach, Input::Decimal(format!("{:.12}", 1.0 + excess))),
        2 => {
            // The sound speed ahead, roughly: what counts is the exact speed that is typed here.
            let problem = case.problem(false);
            let c = problem.heat_capacity_1().to_f64().value();
            let sound = (c / (c - 1.0) * 8.314_462_618 * case.temperature.to_f64() / problem.gas.molar_mass().to_f64().value()).sqrt();
            let speed = sound * (1.0 + excess);
            case.entry = Entry::ShockSpeed;
            case.value = if random.below(2) == 0 { Input::Double(speed) } else { Input::Decimal(format!("{speed:.3}")) };
        }
        _ => {}
    }
    case
}

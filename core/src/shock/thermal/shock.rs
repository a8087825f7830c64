//! Shocks into a thermally perfect gas, as enclosures.

use super::ThermalError;
use super::certify::{Problem, Root};
use super::flow::{Ranges, ThermalFlow, reflected_stage};
use super::plain::PlainShock;
use super::setting::Setting;
use super::stage::GivenSpeed;
use crate::gas::{HeatCapacity, HeatCapacityModel, InputError, Parameter, Rule, ThermallyPerfectGas, positive};
use crate::number::{Ball, Enclosure, Known, Positive, Semifield};
use crate::shock::{Entry, Output, State};

/// A fill of thermally perfect gas: p1 (Pa, absolute), T1 (K, within the data of the gas), and the heat capacity that the shocks are to have.
#[derive(Clone, Copy, Debug)]
pub struct ThermalFill<'a> {
    gas: ThermallyPerfectGas<'a>,
    model: HeatCapacityModel,
    pressure: Known,
    temperature: Known,
}

impl<'a> ThermalFill<'a> {
    /// A fill.
    ///
    /// # Errors
    /// [`InputError`] for a pressure that is not positive or beyond 2^±200, and for a temperature outside the data of the gas.
    pub fn new(
        gas: ThermallyPerfectGas<'a>,
        model: HeatCapacityModel,
        pressure: impl Into<Known>,
        temperature: impl Into<Known>,
    ) -> Result<Self, InputError> {
        let (pressure, temperature) = (pressure.into(), temperature.into());
        positive(Parameter::FillPressure, pressure)?;
        positive(Parameter::FillTemperature, temperature)?;
        gas.check_temperature(Parameter::FillTemperature, temperature.enclosure().low())?;
        gas.check_temperature(Parameter::FillTemperature, temperature.enclosure().high())?;
        Ok(Self { gas, model, pressure, temperature })
    }

    /// The gas.
    pub fn gas(&self) -> &ThermallyPerfectGas<'a> {
        &self.gas
    }

    /// The heat capacity that the shocks have.
    pub fn model(&self) -> HeatCapacityModel {
        self.model
    }

    /// p1, Pa.
    pub fn pressure(&self) -> Known {
        self.pressure
    }

    /// T1, K.
    pub fn temperature(&self) -> Known {
        self.temperature
    }

    /// The fill in balls, with the heat capacities of the model.
    pub(super) fn setting(&self, wall_speed: Ball) -> Setting<Ball> {
        let temperature = self.temperature.ball();
        let full = *self.gas.heat_capacity();
        let first = full.index_at(temperature.nearest());
        let frozen = || HeatCapacity::constant(self.gas.frozen_heat_capacity(temperature));
        let (incident, reflected) = match self.model {
            HeatCapacityModel::Constant => {
                let constant = HeatCapacity::constant(full.value(first, temperature));
                (constant, constant)
            }
            HeatCapacityModel::Equilibrium => (full, full),
            HeatCapacityModel::Frozen => (frozen(), frozen()),
            HeatCapacityModel::FrozenThenEquilibrium => (frozen(), full),
        };
        let lagging = (self.model == HeatCapacityModel::FrozenThenEquilibrium).then_some(first);
        let molar_mass = self.gas.molar_mass();
        Setting { pressure: self.pressure.ball(), temperature, molar_mass, wall_speed, incident, reflected, lagging }
    }
}

/// Solutions that cannot be told apart: either polynomial at a joint near T2, for each either one at a joint near T5.
const FLOWS: usize = 4;

/// A shock into a fill of thermally perfect gas, and its reflection from a rigid wall.
///
/// Each output is an enclosure of the model's exact answer, of at most two units in the last place for exact inputs. Model: ideal gas with the heat
/// capacity of the data, conservation of mass, momentum and energy. Existence and uniqueness of both shocks over all temperatures of the
/// data are proven (see [`how_it_is_proven`](crate::how_it_is_proven)).
///
/// ```
/// use endwall::gas::species::table;
/// use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
/// use endwall::shock::{Entry, Output, ThermalFill, ThermalShock};
/// let nitrogen = [Portion { species: &table::N2, fraction: "1".parse()? }];
/// let gas = ThermallyPerfectGas::new(&nitrogen)?;
/// let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 295.0)?;
/// let shock = ThermalShock::new(&fill, Entry::ShockSpeed, 1050.0)?;
/// let end_wall = shock.state_5();
/// assert!(end_wall.temperature.width_in_ulp() <= 2);
/// // Constant heat capacity, as textbooks have it, comes out 7 % hotter at Mach 3.
/// let constant = ThermalFill::new(gas, HeatCapacityModel::Constant, 10e3, 295.0)?;
/// let textbook = ThermalShock::new(&constant, Entry::ShockSpeed, 1050.0)?.state_5();
/// let ratio = textbook.temperature.middle() / end_wall.temperature.middle();
/// assert!((ratio - 1.074).abs() < 0.002);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct ThermalShock<'a> {
    fill: ThermalFill<'a>,
    entry: Entry,
    value: Known,
    flows: [Option<ThermalFlow<Ball>>; FLOWS],
    steps: [u32; 2],
}

impl<'a> ThermalShock<'a> {
    /// The shock into `fill` for which the quantity `entry` has this value.
    ///
    /// # Errors
    /// [`ThermalError`] for a shock that is not faster than sound, for a temperature that leaves the data, and where a part of the proof fails.
    pub fn new(fill: &ThermalFill<'a>, entry: Entry, value: impl Into<Known>) -> Result<Self, ThermalError> {
        let value = value.into();
        positive(entry.parameter(), value)?;
        let setting = fill.setting(Ball::whole(0));
        let first = setting.incident.index_at(setting.temperature.nearest());
        let incident = match entry {
            Entry::ShockSpeed => setting.at_speed(value.ball()),
            Entry::MachExcess => setting.at_mach_excess(first, value.ball()),
            _ => setting.at_mach_excess(first, value.ball() - Ball::whole(1)),
        };
        let (flows, steps) = solve(&setting, &incident, entry.parameter(), value.nominal())?;
        Ok(Self { fill: *fill, entry, value, flows, steps })
    }

    /// An enclosure of one output.
    pub fn output(&self, output: Output) -> Enclosure {
        if output == self.entry.output() {
            return self.value.enclosure();
        }
        let mut enclosures = self.flows.iter().flatten().map(|flow| flow.evaluate(output).enclosure());
        let first = enclosures.next().unwrap_or(Enclosure::UNKNOWN);
        enclosures.fold(first, Enclosure::hull)
    }

    /// The double nearest to the exact answer at the nominal inputs.
    pub fn nearest(&self, output: Output) -> f64 {
        if output == self.entry.output() {
            return self.value.nominal();
        }
        let bounds = self.output(output);
        let nearest = self.flows.iter().flatten().next().map_or(f64::NAN, |flow| flow.evaluate(output).nearest());
        if bounds.contains(nearest) { nearest } else { bounds.middle() }
    }

    /// The fill.
    pub fn fill(&self) -> &ThermalFill<'a> {
        &self.fill
    }

    /// Plain Newton steps before the proof, for the incident and the reflected shock.
    pub fn steps(&self) -> [u32; 2] {
        self.steps
    }

    /// State 1, the fill.
    pub fn state_1(&self) -> State {
        State {
            pressure: self.fill.pressure.enclosure(),
            temperature: self.fill.temperature.enclosure(),
            density: self.output(Output::Density1),
            sound_speed: self.output(Output::SoundSpeed1),
            gas_speed: Enclosure::whole(0),
        }
    }

    /// State 2, behind the incident shock.
    pub fn state_2(&self) -> State {
        State {
            pressure: self.output(Output::Pressure2),
            temperature: self.output(Output::Temperature2),
            density: self.output(Output::Density2),
            sound_speed: self.output(Output::SoundSpeed2),
            gas_speed: self.output(Output::GasSpeed2),
        }
    }

    /// State 5, at rest behind the shock that reflects off a rigid wall.
    pub fn state_5(&self) -> State {
        State {
            pressure: self.output(Output::Pressure5),
            temperature: self.output(Output::Temperature5),
            density: self.output(Output::Density5),
            sound_speed: self.output(Output::SoundSpeed5),
            gas_speed: Enclosure::whole(0),
        }
    }
}

type Flows = [Option<ThermalFlow<Ball>>; FLOWS];

/// Both shocks: approximately in f64, then with proof.
fn solve(
    setting: &Setting<Ball>,
    incident: &GivenSpeed<Ball>,
    parameter: Parameter,
    value: f64,
) -> Result<(Flows, [u32; 2]), ThermalError> {
    let first = setting.incident.index_at(setting.temperature.nearest());
    let c = setting.incident.value(first, setting.temperature);
    // Supersonic: the residual at no compression, 2(c(m − 1) − m), is positive.
    let one = Ball::whole(1);
    if !(incident.m_excess * (c - one) - one).is_certainly_positive() {
        let sound_speed = (c / (c - one) * setting.scale()).sqrt().nearest();
        let rule = if parameter == Parameter::ShockSpeed { Rule::AboveSoundSpeed(sound_speed) } else { Rule::Above(1.0) };
        return Err(InputError { parameter, value, rule }.into());
    }
    let plain_setting = setting.map(Ball::nearest);
    let plain_incident = GivenSpeed { m: incident.m.nearest(), m_excess: incident.m_excess.nearest() };
    let plain = PlainShock::new(&plain_setting, &plain_incident);
    let (low, high) = setting.reflected.range();
    let plain = plain.ok_or(InputError { parameter, value, rule: Rule::HeatsBeyondData(low, high) })?;
    let mut flows = [None; FLOWS];
    let mut used = flows.iter_mut();
    let problem =
        Problem { stage: *incident, heat_capacity: &setting.incident, from: plain.ranges.first, temperature: setting.temperature };
    let [compression, reflected_compression] = plain.compressions;
    for Root { compression, to } in problem.roots(compression, plain.ranges.second)?.into_iter().flatten() {
        let behind = problem.behind(compression);
        // With one heat capacity for both shocks the range behind one is the range ahead of the other.
        let ahead = if setting.lagging.is_some() { setting.reflected.index_at(behind.nearest()) } else { to };
        let ranges = Ranges { first: plain.ranges.first, second: to, ahead, fifth: plain.ranges.fifth };
        let (stage, ..) = reflected_stage(setting, incident, ranges, compression);
        let reflection = Problem { stage, heat_capacity: &setting.reflected, from: ahead, temperature: behind };
        for Root { compression: reflected, to: fifth } in reflection.roots(reflected_compression, plain.ranges.fifth)?.into_iter().flatten()
        {
            if let Some(place) = used.next() {
                *place = Some(ThermalFlow::new(setting, incident, Ranges { fifth, ..ranges }, compression, reflected));
            }
        }
    }
    Ok((flows, plain.steps()))
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use crate::gas::Portion;
    use crate::gas::species::{Species, table};
    use crate::number::Rational;

    fn pure<'a>(species: &'a Species<'a>) -> [Portion<'a>; 1] {
        [Portion { species, fraction: Rational::ONE }]
    }

    #[test]
    fn every_output_is_narrow() {
        for species in table::ALL {
            let portions = pure(species);
            let gas = ThermallyPerfectGas::new(&portions).unwrap();
            for model in HeatCapacityModel::ALL {
                let temperature = if species.name == "HD" { 300.0 } else { 295.0 };
                let fill = ThermalFill::new(gas, model, 10e3, temperature).unwrap();
                for mach in [1.000_001, 1.01, 1.3, 2.0, 3.0, 4.0] {
                    match ThermalShock::new(&fill, Entry::Mach, mach) {
                        Ok(shock) => {
                            for output in Output::ALL {
                                let bounds = shock.output(output);
                                assert!(bounds.width_in_ulp() <= 2, "{} {model:?} {mach} {output:?} {bounds:?}", species.name);
                            }
                            if mach == 3.0 { std::println!("{} {model:?} {} {:?}", species.name, shock.nearest(Output::Temperature5), shock.steps()); }
                        }
                        Err(error) => std::println!("{} {model:?} {mach} {error}", species.name),
                    }
                }
            }
        }
    }
}

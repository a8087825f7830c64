//! What is computed: the object that `--json` prints.

use endwall::number::{Enclosure, Semifield};
use endwall::record::{Flag, HeatCapacityChoice, Incident, Reflected, Report, ReportQuantity, ReportState, States};
use endwall::shock::{Output, WallReflection, Wave};
use serde::Serialize;

use super::input::Input;
use super::shock::Shock;
use crate::failure::Failure;

/// The answer, laid out like the report of a shot as far as it goes. Without measurements there are no uncertainties: they are null.
#[derive(Serialize)]
pub struct Answer {
    /// The incident shock.
    pub incident: Incident,
    /// States 1, 2 and 5.
    pub states: States,
    /// The reflected shock.
    pub reflected: Reflected,
    /// p5 − p1, Pa.
    pub step: ReportQuantity,
    /// (p5 − p1)/(p2 − p1).
    pub reflected_pressure_coefficient: ReportQuantity,
    /// The heat capacity that was chosen, and what the others would give at the same shock speed, if that is one number.
    pub heat_capacity: HeatCapacityChoice,
    /// What the reader must know.
    pub flags: Vec<Flag>,
    /// How it came about.
    pub made_by: MadeBy,
}

/// How the answer came about.
#[derive(Serialize)]
pub struct MadeBy {
    version: &'static str,
    gas_data: String,
}

impl Answer {
    /// Computes it.
    pub fn new(input: &Input) -> Result<Self, Failure> {
        input.with_shock(|shock, gas_data| Ok(Self::of(input, shock, gas_data)))
    }

    fn of(input: &Input, shock: &Shock<'_>, gas_data: &str) -> Self {
        let wall = match shock {
            Shock::Constant(_, wall) => wall.as_ref(),
            Shock::Thermal(_) => None,
        };
        // A wall of the other kind stands in `wall`.
        let wall_speed = match shock {
            Shock::Constant(..) => Enclosure::whole(0),
            Shock::Thermal(shock) => shock.wall_speed(),
        };
        let output = |output, unit| quantity(shock.nearest(output), shock.output(output), unit);
        let state = |values: [Output; 5]| {
            let [pressure, temperature, density, sound_speed, gas_speed] = values;
            ReportState {
                pressure: output(pressure, "Pa"),
                temperature: output(temperature, "K"),
                density: output(density, "kg/m3"),
                sound_speed: output(sound_speed, "m/s"),
                gas_speed: output(gas_speed, "m/s"),
            }
        };
        let fill = shock.state_1();
        let at_rest = || quantity(0.0, Enclosure::whole(0), "m/s");
        let report = input.report(shock.nearest(Output::ShockSpeed));
        Self {
            incident: Incident { speed: output(Output::ShockSpeed, "m/s"), mach: output(Output::Mach, "1"), attenuation: None },
            states: States {
                fill: ReportState {
                    pressure: quantity(input.pressure.nominal(), fill.pressure, "Pa"),
                    temperature: quantity(input.temperature.nominal(), fill.temperature, "K"),
                    density: output(Output::Density1, "kg/m3"),
                    sound_speed: output(Output::SoundSpeed1, "m/s"),
                    gas_speed: at_rest(),
                },
                incident: state([Output::Pressure2, Output::Temperature2, Output::Density2, Output::SoundSpeed2, Output::GasSpeed2]),
                reflected: match wall {
                    Some(wall) => behind(wall),
                    None => ReportState {
                        gas_speed: middle(wall_speed, "m/s"),
                        ..state([Output::Pressure5, Output::Temperature5, Output::Density5, Output::SoundSpeed5, Output::GasSpeed2])
                    },
                },
            },
            reflected: match wall {
                Some(wall) => Reflected { speed: middle(wall.front_speed, "m/s"), mach: middle(wall.mach, "1") },
                None => Reflected { speed: output(Output::ReflectedSpeed, "m/s"), mach: output(Output::ReflectedMach, "1") },
            },
            step: match wall {
                Some(wall) => middle(wall.state.pressure - fill.pressure, "Pa"),
                None => output(Output::Step, "Pa"),
            },
            reflected_pressure_coefficient: match wall {
                Some(wall) => middle((wall.state.pressure - fill.pressure) / shock.output(Output::PressureRise), "1"),
                None => output(Output::ReflectionCoefficient, "1"),
            },
            flags: flags(input, report.as_ref(), shock),
            heat_capacity: report.filter(|_| !input.has_range()).map_or_else(
                || HeatCapacityChoice { chosen: input.shot.heat_capacity.name(), beside: Vec::new(), relaxation: Vec::new() },
                |report| report.heat_capacity,
            ),
            made_by: MadeBy { version: env!("CARGO_PKG_VERSION"), gas_data: gas_data.into() },
        }
    }

    /// The object as text.
    pub fn to_json(&self) -> Result<String, Failure> {
        serde_json::to_string_pretty(self).map_err(Failure::unformatted)
    }
}

/// Flags of a report that are about its model.
const OF_MODEL: [&str; 6] = ["constant-heat-capacity", "ionisation", "dissociation", "relaxation-shortened", "real-gas", "wall-moves"];

/// The flags of the record, and those of its model at the shock speed.
fn flags(input: &Input, report: Option<&Report>, shock: &Shock<'_>) -> Vec<Flag> {
    let own = |flag: &&Flag| flag.code != "missing-uncertainty";
    // A record is not what was typed, and beside a range nothing stands.
    let beside = if input.has_range() { "" } else { "; the other choices stand beside" };
    let in_words = |flag: &Flag| {
        let text = flag.text.replace("the record does not choose a heat capacity", "no --heat-capacity is given");
        Flag::new(&flag.code, text.replace("; the other choices stand beside", beside))
    };
    let of_model = report.map_or(&[][..], |report| &report.flags).iter().filter(|flag| OF_MODEL.contains(&flag.code.as_str()));
    let mut flags: Vec<Flag> = input.shot.flags.iter().filter(own).map(in_words).chain(of_model.cloned()).collect();
    // A reduction, which takes slopes, does not follow a wall that a thermally perfect gas expands behind.
    if matches!(shock, Shock::Thermal(shock) if shock.wave() == Wave::Expansion) {
        let text = "the end wall recedes faster than the gas: an expansion runs back from it, state 5 is the gas that follows the wall, and U_R is the speed of the head of the expansion";
        flags.push(Flag::new("wall-moves", text));
    }
    flags
}

/// The state at a wall that moves.
fn behind(wall: &WallReflection) -> ReportState {
    let state = &wall.state;
    ReportState {
        pressure: middle(state.pressure, "Pa"),
        temperature: middle(state.temperature, "K"),
        density: middle(state.density, "kg/m3"),
        sound_speed: middle(state.sound_speed, "m/s"),
        gas_speed: middle(state.gas_speed, "m/s"),
    }
}

fn middle(bounds: Enclosure, unit: &'static str) -> ReportQuantity {
    quantity(bounds.middle(), bounds, unit)
}

fn quantity(value: f64, bounds: Enclosure, unit: &'static str) -> ReportQuantity {
    let proven = bounds.is_proven().then(|| [bounds.low(), bounds.high()]);
    ReportQuantity { value, unit, proven, standard_uncertainty: None, expanded: None, coverage_factor: None }
}

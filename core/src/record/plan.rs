//! The record of a plan: a wanted state at the end wall, and what is known of gas, driver and tube.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::digest::input_digest;
use super::error::{ErrorKind, RecordError};
use super::filling::{self, FillingRecord};
use super::flag::Flag;
use super::gas::{self, GasRecord};
use super::hazard;
use super::observation;
use super::optional::{self, Driver, Tube};
use super::quantity::{Absolute, Mark, Quantity};
use super::read::{self, Entry, Fields, Reading};
use super::shot::{self, Shot};
use super::species::{self, OwnSpecies};
use super::tree;
use super::unit::Dimension;
use crate::gas::HeatCapacityModel;

/// What the shot is to reach.
#[derive(Clone, Debug, PartialEq)]
pub enum Target {
    /// T5 (K) and p5, as typed and absolute (Pa): the fill pressure follows.
    State {
        /// K.
        temperature: Quantity,
        /// As typed, and absolute in Pa.
        pressure: (Quantity, Absolute),
    },
    /// The step p5 − p1 (Pa) into a fill of given pressure, as typed and absolute (Pa).
    Step {
        /// Pa.
        step: Quantity,
        /// As typed, and absolute in Pa.
        fill_pressure: (Quantity, Absolute),
    },
}

impl Target {
    /// Whether a quantity that is wanted was typed with an uncertainty.
    fn is_uncertain(&self) -> bool {
        let wanted = match self {
            Self::State { temperature, pressure } => [Some(temperature), Some(&pressure.0)],
            Self::Step { step, .. } => [Some(step), None],
        };
        wanted.into_iter().flatten().any(|quantity| quantity.standard_uncertainty().is_some())
    }
}

/// How well this laboratory meets what it sets, as relative standard uncertainties, and what it takes for a disturbance.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Tolerance {
    /// Of the fill pressure.
    pub fill: Option<Quantity>,
    /// Of the shock speed, from shot to shot.
    pub speed: Option<Quantity>,
    /// The change of p5 up to which a wave from the contact surface does not end the uniform time, relative; without it every first wave does.
    pub disturbance: Option<Quantity>,
}

/// A plan as recorded: every quantity exact and in SI units, with its text.
#[derive(Clone, Debug, PartialEq)]
pub struct Plan {
    /// The name; empty where none was given.
    pub name: String,
    /// The test gas.
    pub gas: GasRecord,
    /// The heat capacity that the states are to be computed with.
    pub heat_capacity: HeatCapacityModel,
    /// Species that the record describes.
    pub species: Vec<OwnSpecies>,
    /// Temperature of the fill, K.
    pub temperature: Quantity,
    /// The wanted state.
    pub target: Target,
    /// The driver.
    pub driver: Option<Driver>,
    /// The tube.
    pub tube: Option<Tube>,
    /// Expected attenuation, 1/m.
    pub attenuation: Option<Quantity>,
    /// Measured over ideal Mach number of past shots.
    pub efficiency: Option<Quantity>,
    /// How well the laboratory meets what it sets.
    pub tolerance: Tolerance,
    /// How the mixture is made.
    pub filling: Option<FillingRecord>,
    /// Ambient pressure, Pa, absolute.
    pub ambient: Option<Quantity>,
    /// Doubtful values that the record confirms.
    pub confirmed: Vec<String>,
    /// What the reader of a report must know about the record.
    pub flags: Vec<Flag>,
    /// Every leaf of the file in its order, for the echo.
    pub entries: Vec<Entry>,
    /// Fingerprint of the file: see [`input_digest`].
    pub input_digest: String,
}

const FIELDS: [&str; 19] = [
    "record",
    "name",
    "gas",
    "heat_capacity",
    "species",
    "temperature",
    "target",
    "driver",
    "tube",
    "attenuation",
    "efficiency",
    "tolerance",
    "filling",
    "ambient",
    "date",
    "operator",
    "instruments",
    "notes",
    "confirm",
];

impl Plan {
    /// Reads a record `plan/1` from the bytes of a file, under the rules of [`Shot::read`].
    ///
    /// # Errors
    /// The first mistake found, with its full path, the text as typed and the remedy.
    ///
    /// ```
    /// use endwall::record::{Plan, Target};
    /// let file = r#"{ "record": "plan/1", "gas": { "O2": "1.00 %", "Ar": "balance" }, "heat_capacity": "equilibrium",
    ///   "temperature": "296.2 ± 0.5 K", "target": { "temperature": "1500 K", "pressure": "2.0 bar(a)" } }"#;
    /// let plan = Plan::read(file.as_bytes())?;
    /// assert!(matches!(plan.target, Target::State { .. }));
    /// # Ok::<(), endwall::record::RecordError>(())
    /// ```
    pub fn read(file: &[u8]) -> Result<Self, RecordError> {
        let node = tree::parse(file)?;
        let fields = Fields::new(&node, "")?;
        shot::kind(fields, "plan/1", "a plan has \"record\": \"plan/1\"")?;
        fields.allow(&FIELDS)?;
        let mut reading = Reading::new();
        reading.confirm = shot::confirm(fields, &node)?;
        let mut flags = Vec::new();
        let name = fields.text("name")?.unwrap_or("").to_string();
        let gas = gas::read(fields.required("gas", "{ \"Ar\": \"98.5 %\", … }")?, "gas", &mut reading, &mut flags)?;
        let heat_capacity = gas::heat_capacity(fields.text("heat_capacity")?, &gas, &mut flags)?;
        let species = species::read(fields, &mut reading)?;
        let temperature = fields.required_quantity(&mut reading, "temperature", Dimension::Temperature, "296.2 ± 0.5 K")?;
        optional::doubt_temperature(&temperature, "temperature", &mut reading)?;
        let ambient = optional::ambient(fields, &mut reading)?;
        let target = target(fields, ambient.as_ref(), &mut reading)?;
        let driver = optional::driver(fields, ambient.as_ref(), &mut reading, &mut flags)?;
        let tube = optional::tube(fields, ambient.as_ref(), &mut reading)?;
        let attenuation = optional::attenuation(fields, &mut reading)?;
        let efficiency = efficiency(fields, &mut reading)?;
        let tolerance = tolerance(fields, &mut reading)?;
        let filling = filling::read(fields, &gas, ambient.as_ref(), &mut reading)?;
        optional::free_text(fields)?;
        if let Some(pressure) = driver.as_ref().and_then(|driver| driver.pressure.as_ref()) {
            let text = format!("driver.pressure ({}) is recorded but not used: a plan says what p4 is needed", pressure.0.typed());
            flags.push(Flag::new("not-used", text));
        }
        if target.is_uncertain() {
            let text = "an uncertainty of the target is not used: what is wanted is exact; how well it is met follows from \"tolerance\" and the uncertainties of fill and gas";
            flags.push(Flag::new("target-exact", text));
        }
        if let Some(flag) = hazard::can_burn(&gas, &species, driver.as_ref()) {
            flags.insert(0, flag);
        }
        let entries = read::entries(&node, &reading);
        shot::confirmations(&reading, &entries, &mut flags);
        let plan = Self {
            name,
            gas,
            heat_capacity,
            species,
            temperature,
            target,
            driver,
            tube,
            attenuation,
            efficiency,
            tolerance,
            filling,
            ambient,
            confirmed: reading.answered,
            flags,
            entries,
            input_digest: input_digest(file),
        };
        plan.check_filling()?;
        Ok(plan)
    }

    /// The ambient pressure, Pa.
    pub(super) fn ambient_pressure(&self) -> Option<f64> {
        self.ambient.as_ref().map(|ambient| ambient.value().to_f64())
    }

    /// A shot into this gas at a fill pressure (Pa) and a shock speed (m/s), with the tolerances of the laboratory as standard uncertainties.
    pub(super) fn shot(&self, fill_pressure: f64, shock_speed: f64) -> Result<Shot, RecordError> {
        let typed = |value: f64, unit: &str, relative: &Option<Quantity>, dimension| {
            let spread = relative.as_ref().map_or(String::new(), |relative| {
                let standard = relative.value().to_f64() * value;
                format!(" ± {}", super::format::shortest(standard))
            });
            let text = format!("{}{spread} {unit}", super::format::shortest(value));
            Quantity::parse(&text, dimension).map_err(|error| error.at("target"))
        };
        let pressure = typed(fill_pressure, "Pa", &self.tolerance.fill, Dimension::Pressure)?;
        let speed = typed(shock_speed, "m/s", &self.tolerance.speed, Dimension::Speed)?;
        Ok(Shot::planned(self, pressure, speed))
    }
}

fn target(fields: Fields, ambient: Option<&Quantity>, reading: &mut Reading) -> Result<Target, RecordError> {
    let example = "{ \"temperature\": \"1500 K\", \"pressure\": \"2.0 bar(a)\" }";
    let inner = Fields::new(fields.required("target", example)?, "target")?;
    inner.allow(&["temperature", "pressure", "step", "fill_pressure", "reflected_overpressure"])?;
    let fail = |wrong: &str, remedy: &str| Err(RecordError::new(ErrorKind::Field, "target", "", wrong, remedy));
    let temperature = inner.quantity(reading, "temperature", Dimension::Temperature)?;
    let pressure = optional::pressure(inner, "pressure", ambient, reading)?;
    let step = inner.quantity(reading, "step", Dimension::Pressure)?;
    let overpressure = inner.quantity(reading, "reflected_overpressure", Dimension::Pressure)?;
    let fill_pressure = optional::pressure(inner, "fill_pressure", ambient, reading)?;
    let positive = |path: &str, quantity: &Quantity| {
        if quantity.mark() != Mark::Unmarked {
            let wrong = "a difference of pressures is neither gauge nor absolute";
            return Err(RecordError::new(ErrorKind::Value, path, quantity.typed(), wrong, "leave the mark out"));
        }
        if quantity.value().is_positive() {
            return Ok(());
        }
        Err(RecordError::new(ErrorKind::Value, path, quantity.typed(), "what is wanted is greater than zero", "correct it"))
    };
    match (temperature, pressure, step, overpressure) {
        (Some(temperature), Some(pressure), None, None) => {
            positive("target.temperature", &temperature)?;
            match fill_pressure {
                None => Ok(Target::State { temperature, pressure }),
                Some(_) => fail("the fill pressure follows from temperature and pressure", "leave out target.fill_pressure"),
            }
        }
        (None, None, Some(step), None) => {
            positive("target.step", &step)?;
            match fill_pressure {
                Some(fill_pressure) => Ok(Target::Step { step, fill_pressure }),
                None => fail("a step needs the fill pressure that it starts from", "add \"fill_pressure\": \"100.0 kPa\" to the target"),
            }
        }
        (None, None, None, Some(overpressure)) => {
            positive("target.reflected_overpressure", &overpressure)?;
            // The gas that a blast meets has the pressure of the surroundings.
            let surroundings = ambient.and_then(|ambient| Some((ambient.clone(), ambient.absolute(None)?)));
            match fill_pressure.or(surroundings) {
                Some(fill_pressure) => Ok(Target::Step { step: overpressure, fill_pressure }),
                None => fail("an overpressure counts from the ambient pressure", "add \"ambient\": \"101.3 kPa\" to the record"),
            }
        }
        _ => fail(
            "the target must be a temperature with a pressure, a step with a fill pressure, or a reflected overpressure",
            &format!("write \"target\": {example}"),
        ),
    }
}

fn efficiency(fields: Fields, reading: &mut Reading) -> Result<Option<Quantity>, RecordError> {
    let Some(efficiency) = fields.quantity(reading, "efficiency", Dimension::Fraction)? else { return Ok(None) };
    let value = efficiency.value().to_f64();
    if !(0.3..=1.2).contains(&value) {
        let wrong = "measured over ideal Mach number of past shots: mostly 0.85 to 1";
        return Err(RecordError::new(ErrorKind::Value, "efficiency", efficiency.typed(), wrong, "write it like \"0.93 ± 0.02\""));
    }
    if efficiency.standard_uncertainty().is_some_and(|standard| standard > value / 5.0) {
        let wrong = "the standard uncertainty is more than a fifth of the efficiency";
        return Err(RecordError::new(ErrorKind::Value, "efficiency", efficiency.typed(), wrong, "write it like \"0.93 ± 0.02\""));
    }
    Ok(Some(efficiency))
}

fn tolerance(fields: Fields, reading: &mut Reading) -> Result<Tolerance, RecordError> {
    let Some(node) = fields.get("tolerance") else { return Ok(Tolerance::default()) };
    let inner = Fields::new(node, "tolerance")?;
    inner.allow(&["fill", "speed", "disturbance"])?;
    let mut one = |key: &str| -> Result<Option<Quantity>, RecordError> {
        let Some(spread) = inner.quantity(reading, key, Dimension::Fraction)? else { return Ok(None) };
        if (0.0..0.2).contains(&spread.value().to_f64()) {
            return Ok(Some(spread));
        }
        let wrong = "a relative standard uncertainty of what is set lies between 0 and 20 %";
        Err(RecordError::new(ErrorKind::Value, &inner.path_of(key), spread.typed(), wrong, "write it like \"0.3 %\""))
    };
    let (fill, speed) = (one("fill")?, one("speed")?);
    Ok(Tolerance { fill, speed, disturbance: observation::disturbance(inner, reading)? })
}

#[cfg(test)]
#[path = "plan_tests.rs"]
mod tests;

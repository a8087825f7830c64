//! What driver and tube add to a plan: driver pressure, waves, uniform time, loads and ratings.

use alloc::format;
use alloc::string::ToString;
use alloc::vec::Vec;

use super::check::DEPARTURE;
use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::format::significant;
use super::gas::{Component, GasRecord};
use super::optional::{Driver as DriverRecord, Tube as TubeRecord};
use super::plan::Plan;
use super::plan_report::{LimitLine, PlannedTime, PlannedWave, computed};
use super::quantity::Quantity;
use super::report::ReportQuantity;
use crate::gas::species::named;
use crate::gas::{Gas, HeatCapacityModel, HeatCapacityRatio, Portion, ThermallyPerfectGas, departure_from_ideal};
use crate::number::{Ball, Enclosure, Rational};
use crate::shock::Entry;
use crate::tube::{
    BehindShock, Contact, ContactReturn, Drive, Driver, DriverError, Efficiency, Event, Lengths, TestGas, Tube, WaveDiagram, WaveName,
    end_load, stored_energy,
};

/// Pieces of the one curve of a diagram: more are not seen in a drawing.
const CURVE: u32 = 24;

/// What is found.
#[derive(Default)]
pub(super) struct TubePart {
    pub p4: Option<ReportQuantity>,
    pub p4_band: Option<[f64; 2]>,
    pub time: Option<PlannedTime>,
    pub waves: Vec<PlannedWave>,
    pub end_load: Option<f64>,
    pub stored_energy: Option<f64>,
    pub limits: Vec<LimitLine>,
    pub flags: Vec<Flag>,
}

/// Pressures that act on the tube, Pa, absolute, each with its name.
struct Loads<'a> {
    /// p5, with its expanded uncertainty.
    reflected: f64,
    /// The end wall after a shock came back from the contact surface.
    over_tailored: Option<f64>,
    /// The driver, with p4 at the upper end of its band.
    driver: Option<(&'a Driver, f64)>,
}

impl Plan {
    /// All of it, for a shock of this speed (m/s) whose p5 has this upper end (Pa).
    pub(super) fn tube_part(&self, gas: TestGas<'_>, speed: f64, p5: (f64, f64)) -> Result<TubePart, RecordError> {
        let mut part = TubePart::default();
        let mut over_tailored = None;
        let behind = gas.behind(Entry::ShockSpeed, speed).map_err(|error| no_driver(&error))?;
        let driver = self.driver.as_ref().map(|record| self.driver(record)).transpose()?;
        if let (Some(record), Some(driver)) = (&self.driver, &driver) {
            let drive = driver.for_shock(&behind).map_err(|error| no_driver(&error))?;
            self.driver_pressure(&mut part, driver, &drive, gas, &behind)?;
            part.flags.extend(part.p4.as_ref().and_then(|p4| dense_driver(record, p4.value)));
            let contact = Contact::new(&behind, &drive);
            let met = contact.interaction();
            over_tailored = met.as_ref().ok().map(|met| met.end_wall_pressure.high()).filter(|pressure| *pressure > p5.0);
            self.diagram(&mut part, driver, &behind, &contact)?;
        }
        if let Some(tube) = &self.tube {
            let p4 = part.p4_band.map(|[_, high]| high).or(part.p4.as_ref().map(|p4| p4.value));
            let driver = driver.as_ref().zip(p4);
            self.loads(&mut part, tube, &Loads { reflected: p5.1, over_tailored, driver });
        }
        Ok(part)
    }

    /// The driver of the record: its gas with the heat capacity at its temperature.
    fn driver(&self, record: &DriverRecord) -> Result<Driver, RecordError> {
        let missing = |path: &str, example: &str| {
            let remedy = format!("add it, like {example}");
            RecordError::new(ErrorKind::Field, path, "", "a driver needs its gas and its temperature", remedy)
        };
        let temperature = record.temperature.as_ref().ok_or_else(|| missing("driver.temperature", "\"temperature\": \"295 K\""))?.value();
        let gas = record.gas.as_ref().ok_or_else(|| missing("driver.gas", "\"gas\": { \"He\": \"balance\" }"))?;
        let driver = Driver::new(driver_gas(gas, temperature)?, temperature).map_err(|error| no_driver(&error))?;
        let bores = self.tube.as_ref().and_then(|tube| Some((tube.driver_bore.as_ref()?.value(), tube.driven_bore.as_ref()?.value())));
        let ratio = bores.and_then(|(driver, driven)| driver.checked_div(driven)).and_then(|ratio| ratio.checked_mul(ratio));
        match ratio {
            None => Ok(driver),
            Some(ratio) => driver.with_area_ratio(ratio).map_err(|error| no_driver(&error)),
        }
    }

    fn driver_pressure(
        &self,
        part: &mut TubePart,
        driver: &Driver,
        drive: &Drive,
        gas: TestGas<'_>,
        behind: &BehindShock<'_>,
    ) -> Result<(), RecordError> {
        let Some(stated) = &self.efficiency else {
            part.p4 = Some(computed(drive.pressure.middle(), "Pa", Some(drive.pressure)));
            let text = "no efficiency is given: p4 is that of an ideal tube; real tubes need more (a Mach number 5 to 15 % low is common practice)";
            part.flags.push(Flag::new("ideal-driver", text));
            return Ok(());
        };
        // Both ends at twice the standard uncertainty, like those of p5.
        let efficiency = Efficiency::new(stated.value().to_f64(), 2.0 * stated.standard_uncertainty().unwrap_or(0.0));
        let efficiency = efficiency.map_err(|error| no_driver(&error))?;
        let band = driver.pressure_for_mach(gas, behind.mach().nearest(), efficiency).map_err(|error| at_efficiency(stated, &error))?;
        part.p4 = Some(computed(band.pressure, "Pa", None));
        part.p4_band = (band.high > band.low).then_some([band.low, band.high]);
        Ok(())
    }

    fn diagram(&self, part: &mut TubePart, driver: &Driver, behind: &BehindShock<'_>, contact: &Contact<'_>) -> Result<(), RecordError> {
        let lengths =
            self.tube.as_ref().and_then(|tube| Some((tube.driven_length.as_ref()?.value(), tube.driver_length.as_ref()?.value())));
        let Some((driven, driver_length)) = lengths else { return Ok(()) };
        let speeds = match driver.speeds(behind) {
            Ok(speeds) => speeds,
            Err(error) => {
                part.flags.push(Flag::new("no-wave-diagram", format!("no wave diagram: {error}")));
                return Ok(());
            }
        };
        let contact = contact.contact_return().unwrap_or_else(|_| {
            let text = "the wave that comes back from the contact surface is taken as a sound wave: the heat capacity of the test gas depends on temperature; a returned shock would be faster";
            part.flags.push(Flag::new("returned-wave", text));
            ContactReturn::Wave { speed: speeds.sound_speed_5 }
        });
        let lengths = Lengths { driven: Ball::from(driven), driver: Ball::from(driver_length) };
        let refused = |error: crate::tube::TubeInputError| {
            RecordError::new(ErrorKind::Value, "tube", "", format!("{error}"), "check the lengths of the tube")
        };
        let diagram = WaveDiagram::new(Tube { speeds, lengths, contact }).map_err(refused)?;
        let time = diagram.test_time(0.0).map_err(refused)?;
        part.time = Some(PlannedTime {
            end_wall: computed(time.duration.middle(), "s", Some(time.duration)),
            cause: time.limit.name().to_string(),
            shortest_driver: diagram.shortest_driver(0.0).ok().filter(|length| length.is_proven()).map(Enclosure::middle),
        });
        let text = "ideal tube: the diaphragm opens at once, without boundary layers; both shorten the uniform time. A disturbance counts from its first wave";
        part.flags.push(Flag::new("ideal-waves", text));
        for wave in diagram.waves().into_iter().flatten() {
            let at = |event: Event| [event.position.middle(), event.time.middle()];
            let (from, to) = (at(wave.from), at(wave.to));
            let curved = if wave.name == WaveName::HeadInFan { CURVE } else { 1 };
            let between = (1..curved).map(|point| at(diagram.fan_point(f64::from(point) / f64::from(CURVE))));
            let between = between.filter(|point| point[1] < to[1]).collect();
            part.waves.push(PlannedWave { name: wave.name.name().to_string(), from, to, between });
        }
        Ok(())
    }

    fn loads(&self, part: &mut TubePart, tube: &TubeRecord, loads: &Loads<'_>) {
        let ambient = self.ambient.as_ref().and_then(|ambient| ambient.absolute(None)).map_or(101_325.0, |ambient| ambient.value.to_f64());
        if let Some(bore) = &tube.driven_bore {
            let worst = loads.over_tailored.map_or(loads.reflected, |pressure| pressure.max(loads.reflected));
            part.end_load = end_load(worst, ambient, bore.value()).ok().map(|load| load.steady.high());
        }
        if let (Some((driver, p4)), Some(bore), Some(length)) = (loads.driver, &tube.driver_bore, &tube.driver_length) {
            let area = core::f64::consts::PI / 4.0 * bore.value().to_f64() * bore.value().to_f64();
            let energy = stored_energy(driver.gas().heat_capacity_ratio(), p4, ambient, area * length.value().to_f64());
            part.stored_energy = energy.ok().map(|energy| energy.brode.high());
        }
        for rating in &tube.ratings {
            let limit = rating.pressure.1.value.to_f64();
            let mut line = |load: &str, pressure: f64| {
                let exceeded = pressure > limit;
                part.limits.push(LimitLine { part: rating.part.to_string(), load: load.to_string(), pressure, rating: limit, exceeded });
            };
            if rating.part == "driver" {
                if let Some((_, p4)) = loads.driver {
                    let of = if self.efficiency.is_some() { "p4" } else { "p4 of an ideal tube" };
                    line(&format!("{of}, also where the diaphragm does not burst"), p4);
                }
                continue;
            }
            line("p5", loads.reflected);
            if let Some(pressure) = loads.over_tailored {
                line("end wall after a shock came back from the contact surface", pressure);
            }
        }
    }
}

/// The refusal of the faster ideal shock that a driver must be laid out for.
fn at_efficiency(efficiency: &Quantity, error: &DriverError) -> RecordError {
    let mut refusal = no_driver(error);
    refusal.wrong =
        format!("with the efficiency of {} the driver is laid out for a faster ideal shock: {}", efficiency.typed(), refusal.wrong);
    if matches!(error, DriverError::Shock(_) | DriverError::Gas(_)) {
        refusal.remedy = "take a weaker shock, or leave the efficiency out for the driver pressure of an ideal tube".to_string();
    }
    refusal
}

/// The refusal of a driver, with the options.
fn no_driver(error: &DriverError) -> RecordError {
    let remedy = match error {
        DriverError::TooFast { .. } | DriverError::PressureBeyondRange { .. } => {
            "take a lighter driver gas, a hotter driver or a larger driver bore, or a weaker shock"
        }
        _ => "check gas, temperature and bore of the driver",
    };
    RecordError::new(ErrorKind::Value, "driver", "", format!("{error}"), remedy)
}

/// The species of a driver gas; none for one given by its heat capacity ratio.
fn driver_portions(gas: &GasRecord) -> Result<Vec<Portion<'static>>, RecordError> {
    let GasRecord::Mixture(components) = gas else { return Ok(Vec::new()) };
    let portion = |component: &Component| {
        let species = named(&component.species).ok_or_else(|| {
            let wrong = format!("{} is not built in", component.species);
            RecordError::new(
                ErrorKind::Value,
                "driver.gas",
                "",
                wrong,
                "give species that are built in, or heat_capacity_ratio and molar_mass",
            )
        })?;
        Ok(Portion { species, fraction: component.fraction })
    };
    components.iter().map(portion).collect()
}

/// The flag for a driver so dense that its gas is no ideal one.
fn dense_driver(record: &DriverRecord, pressure: f64) -> Option<Flag> {
    let portions = driver_portions(record.gas.as_ref()?).ok()?;
    let gas = ThermallyPerfectGas::new(&portions).ok()?;
    let departure = departure_from_ideal(&gas, record.temperature.as_ref()?.value().to_f64(), pressure);
    (departure.abs() > DEPARTURE).then(|| {
        let text = format!(
            "the driver gas departs from an ideal gas by {} % at p4 (second virial coefficient, estimated): p4 is off by about that",
            significant(departure * 100.0, 2)
        );
        Flag::new("real-gas-driver", text)
    })
}

/// A driver gas of constant heat capacity: as typed, the exact one of atoms, or that of the species at the temperature of the driver.
fn driver_gas(gas: &GasRecord, temperature: Rational) -> Result<Gas, RecordError> {
    let refused = |wrong: alloc::string::String| {
        RecordError::new(ErrorKind::Value, "driver.gas", "", wrong, "give species that are built in, or heat_capacity_ratio and molar_mass")
    };
    let built = |ratio: Rational, mass: Rational| {
        let ratio = HeatCapacityRatio::new(ratio).map_err(|error| refused(format!("{error}")))?;
        Gas::new(ratio, mass).map_err(|error| refused(format!("{error}")))
    };
    if let Ok(constant) = gas.constant(HeatCapacityModel::Constant) {
        return built(constant.heat_capacity_ratio, constant.molar_mass);
    }
    let portions = driver_portions(gas)?;
    let mixture = ThermallyPerfectGas::new(&portions).map_err(|error| refused(format!("{error}")))?;
    let c = mixture.heat_capacity_at(temperature.to_f64()).map_err(|error| refused(format!("{error}")))?.middle();
    // γ to twelve digits: the driver is a model anyhow, and its γ must be an exact number.
    let ratio = Rational::ratio(libm::rint(c / (c - 1.0) * 1e12) as u128, 1_000_000_000_000).unwrap_or(Rational::ONE);
    built(ratio, Rational::from(mixture.molar_mass().nearest()))
}

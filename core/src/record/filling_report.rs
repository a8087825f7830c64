//! The filling steps of a plan: readings, fractions, and what speaks against them.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use serde::Serialize;

use super::check::DEPARTURE;
use super::driven::AIR;
use super::error::{ErrorKind, RecordError};
use super::filling::{FillingRecord, Vessel};
use super::flag::Flag;
use super::format::significant;
use super::gas::GasRecord;
use super::hazard;
use super::plan::Plan;
use super::plan_report::{LimitLine, computed};
use super::quantity::{Absolute, Quantity};
use super::report::ReportQuantity;
use super::shot::Shot;
use crate::gas::{Condensation, HeatCapacityModel, InputError, Parameter, condensation, departure_from_ideal, second_virial_coefficient};
use crate::number::{Enclosure, Known, Rational};
use crate::shot::{DrivenGas, Filling};

/// One gas let in.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct FillingLine {
    /// The gas.
    pub gas: String,
    /// What it adds to the pressure, Pa.
    pub partial_pressure: ReportQuantity,
    /// The pressure after it, Pa, absolute.
    pub reading: ReportQuantity,
    /// The same on a gauge at the ambient pressure, Pa; `None` where the record does not state that.
    pub gauge_reading: Option<f64>,
    /// Its mole fraction in the vessel, with what the pump left counted in.
    pub fraction: ReportQuantity,
}

/// What the pump left.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct FillingResidual {
    /// Pa, absolute.
    pub pressure: ReportQuantity,
    /// Its mole fraction in the vessel.
    pub fraction: ReportQuantity,
}

/// How the mixture is made.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct FillingReport {
    /// `mixing vessel` or `driven section`.
    pub vessel: &'static str,
    /// K.
    pub temperature: f64,
    /// True for a mixture that can burn: the caution stands before the steps.
    pub can_burn: bool,
    /// `None` where the record states none.
    pub residual: Option<FillingResidual>,
    /// In the order in which the gases are let in.
    pub steps: Vec<FillingLine>,
    /// Relative departure of the mixture's molar volume from that of an ideal gas at the final pressure, estimated.
    pub departure: f64,
}

/// The steps, the final pressure against the rating, and flags.
pub(super) struct FillingPart {
    pub(super) report: FillingReport,
    pub(super) limit: Option<LimitLine>,
    pub(super) flags: Vec<Flag>,
}

/// What acts on the vessel, in a comparison with its rating.
pub(super) const LOAD: &str = "filling, unburnt gas";
/// A partial pressure above this part of the vapour pressure is flagged: walls adsorb, and a cold spot condenses (common practice, no source).
const NEAR_CONDENSING: f64 = 0.5;
/// Share of residual air from which on it is flagged.
const RESIDUAL: f64 = 1e-3;
/// Expanded uncertainty over fraction from which on a step is flagged.
const UNCERTAIN: f64 = 0.1;
/// Partial pressure of a gas without a known virial coefficient from which on its departure is called unknown, Pa.
const UNKNOWN_DEPARTURE: f64 = 10e3;
/// Gases that depart little, and upward, at room temperature.
const LIGHT: [&str; 5] = ["He", "H2", "HD", "D2", "Ne"];
/// Acetylene decomposes without any oxygen; 15 psi gauge is the usual limit in the trade (from memory).
const ACETYLENE: f64 = 205e3;

impl FillingRecord {
    /// The rating that counts, with the name of the part.
    fn rating<'a>(&'a self, plan: &'a Plan) -> Option<(&'static str, &'a (Quantity, Absolute))> {
        let driven = || plan.tube.iter().flat_map(|tube| &tube.ratings).find(|rating| rating.part == "driven");
        match self.vessel {
            Vessel::Mixing => Some(("mixing vessel", self.rating.as_ref()?)),
            Vessel::Driven => driven().map(|rating| (rating.part, &rating.pressure)),
        }
    }

    fn is_stated(&self) -> bool {
        self.gauge.relative.is_some() || self.gauge.absolute.is_some() || self.temperature_scatter.is_some()
    }

    /// Standard uncertainty of a reading, Pa; the first is what the pump left, with its own uncertainty where that is typed.
    fn uncertainty(&self, number: usize, reading: f64, temperature: f64) -> f64 {
        let own = self.residual.as_ref().filter(|_| number == 0).and_then(|(_, absolute)| absolute.standard_uncertainty);
        let value = |quantity: &Option<Quantity>| quantity.as_ref().map_or(0.0, |quantity| quantity.value().to_f64());
        own.unwrap_or_else(|| {
            let proportion = libm::hypot(value(&self.gauge.relative), value(&self.temperature_scatter) / temperature);
            libm::hypot(proportion * reading, value(&self.gauge.absolute))
        })
    }
}

impl Plan {
    /// Refuses a mixture that can burn without the rating of the vessel, and a rating of the driven section in the wrong place.
    pub(super) fn check_filling(&self) -> Result<(), RecordError> {
        let Some(filling) = &self.filling else { return Ok(()) };
        if let (Vessel::Driven, Some((typed, _))) = (filling.vessel, &filling.rating) {
            let wrong = "the driven section is rated for its shots as well as for its filling";
            let remedy = "write it as \"driven\" in tube.ratings";
            return Err(RecordError::new(ErrorKind::Field, "filling.rating", typed.typed(), wrong, remedy));
        }
        if let (Some(why), None) = (hazard::mixture_can_burn(&self.gas, &self.species), filling.rating(self)) {
            let wrong = format!("{why}, and no rating of the vessel is stated");
            let remedy = match filling.vessel {
                Vessel::Mixing => "add \"rating\": \"20 bar(g)\", as marked on the vessel, or mix the gas without its fuel",
                Vessel::Driven => "add \"driven\": \"20 bar(g)\" to tube.ratings, as marked on the tube, or fill the gas without its fuel",
            };
            return Err(RecordError::new(ErrorKind::Field, "filling.rating", "", wrong, remedy));
        }
        Ok(())
    }

    /// Refuses a gas that condenses in the driven section.
    pub(super) fn check_condensation(&self, fill_pressure: f64) -> Result<(), RecordError> {
        let GasRecord::Mixture(components) = &self.gas else { return Ok(()) };
        let temperature = self.temperature.value().to_f64();
        for component in components {
            let partial = component.fraction.to_f64() * fill_pressure;
            let place = Place { name: "driven section", temperature, remedy: "take a lower fill pressure, or a warmer tube" };
            self.condenses(&component.species, partial, &place)?;
        }
        Ok(())
    }

    /// The filling steps, up to the planned fill pressure (Pa) in the driven section.
    pub(super) fn filling_part(&self, shot: &Shot, fill_pressure: Enclosure) -> Result<Option<FillingPart>, RecordError> {
        let Some(record) = &self.filling else { return Ok(None) };
        let exact = |absolute: Absolute| Known::from(absolute.value);
        let pressure = record.pressure.as_ref().map_or(Known::from(fill_pressure), |(_, absolute)| exact(*absolute));
        let residual = record.residual.as_ref().map_or(Known::from(Rational::ZERO), |(_, absolute)| exact(*absolute));
        let temperature = record.temperature.as_ref().unwrap_or(&self.temperature).value().to_f64();
        let fractions: Vec<Rational> = record.order.iter().map(|component| component.fraction).collect();
        let filling = Filling::new(residual, pressure, &fractions).map_err(|error| self.filling_refused(&error))?;
        let uncertainty = |number: usize, reading: f64| record.uncertainty(number, reading, temperature);
        let ambient = self.ambient.as_ref().and_then(|ambient| ambient.absolute(None)).map(|ambient| ambient.value.to_f64());
        let mut steps = Vec::new();
        for (number, component) in record.order.iter().enumerate() {
            let Some(step) = filling.step(number) else { break };
            let [partial_pressure, reading] =
                [step.partial_pressure, step.reading].map(|(nearest, all)| computed(nearest, "Pa", Some(all)));
            let standard = filling.standard_uncertainty(number, uncertainty).filter(|_| record.is_stated());
            steps.push(FillingLine {
                gas: component.species.clone(),
                gauge_reading: ambient.map(|ambient| reading.value - ambient),
                partial_pressure,
                reading,
                fraction: fraction(step.fraction, standard),
            });
        }
        let left = record.residual.as_ref().map(|(_, absolute)| FillingResidual {
            pressure: with_uncertainty(computed(residual.nominal(), "Pa", Some(residual.enclosure())), absolute.standard_uncertainty),
            fraction: fraction(filling.residual_fraction(), Some(filling.residual_uncertainty(uncertainty)).filter(|_| record.is_stated())),
        });
        let mixture = shot.with_gas(HeatCapacityModel::Equilibrium, |gas, _| Ok(departure(gas, temperature, pressure.nominal())))?;
        let report = FillingReport {
            vessel: record.vessel.name(),
            temperature,
            can_burn: hazard::mixture_can_burn(&self.gas, &self.species).is_some(),
            residual: left,
            steps,
            departure: mixture,
        };
        let flags = self.filling_flags(record, &report, fill_pressure.middle())?;
        let upper = pressure.nominal() + 2.0 * uncertainty(fractions.len(), pressure.nominal());
        let limit = record.rating(self).map(|(part, (_, rating))| {
            let rating = rating.value.to_f64();
            LimitLine { part: part.to_string(), load: LOAD.to_string(), pressure: upper, rating, exceeded: upper > rating }
        });
        Ok(Some(FillingPart { report, limit, flags }))
    }

    fn filling_flags(&self, record: &FillingRecord, report: &FillingReport, fill_pressure: f64) -> Result<Vec<Flag>, RecordError> {
        let mut flags = Vec::new();
        flags.extend(meets_undiluted(record, report, &self.species.iter().map(|own| own.name.as_str()).collect::<Vec<_>>()));
        let place = Place {
            name: record.vessel.name(),
            temperature: report.temperature,
            remedy: match record.vessel {
                Vessel::Mixing => "lower filling.pressure, or warm the vessel and state filling.temperature",
                Vessel::Driven => "take a lower fill pressure, or a warmer tube",
            },
        };
        for line in &report.steps {
            let partial = line.partial_pressure.value;
            flags.extend(self.condenses(&line.gas, partial, &place)?);
            flags.extend(gas_flags(line, report.temperature));
        }
        if let Some(left) = report.residual.as_ref().filter(|left| left.fraction.value > RESIDUAL) {
            let text = format!(
                "what the pump left is {} % of the mixture, as air; the states are those of the gas without it",
                significant(100.0 * left.fraction.value, 2)
            );
            flags.push(Flag::new("residual-gas", text));
        }
        let last = report.steps.last().map_or(0.0, |line| line.reading.value);
        if record.vessel == Vessel::Mixing && last < fill_pressure {
            let text = "the mixing vessel is filled to less than the planned fill pressure: it cannot fill the driven section";
            flags.push(Flag::new("vessel-below-fill", text));
        }
        if report.departure.abs() > DEPARTURE {
            let text = format!(
                "the mixture in the {} departs from an ideal gas by {} % (second virial coefficients, estimated): fractions from partial pressures can be off by about that",
                report.vessel,
                significant(100.0 * report.departure, 2)
            );
            flags.push(Flag::new("real-gas-filling", text));
        }
        if !record.is_stated() {
            let text = "the record states no filling.gauge: how well the readings fix the fractions is not known";
            flags.push(Flag::new("gauge-uncertainty-missing", text));
        }
        Ok(flags)
    }

    /// Refuses a gas above its vapour pressure; a flag where it comes near, or where that is not known.
    fn condenses(&self, species: &str, partial: f64, place: &Place) -> Result<Option<Flag>, RecordError> {
        if species == AIR || partial <= 0.0 {
            return Ok(None);
        }
        let stated = self.filling.iter().flat_map(|filling| &filling.vapour_pressures).find(|(name, _)| name == species);
        let known = match stated {
            Some((_, pressure)) => Condensation::Above(pressure.value().to_f64()),
            None => condensation(species, place.temperature),
        };
        let kilopascals = |pressure: f64| format!("{} kPa", significant(pressure / 1e3, 3));
        let limit = match known {
            Condensation::Never => return Ok(None),
            Condensation::Unknown => {
                let text = format!(
                    "the vapour pressure of {species} at {} K is not known: whether it condenses in the {} is not checked; state it under filling.vapour_pressures",
                    significant(place.temperature, 4),
                    place.name
                );
                return Ok(Some(Flag::new("vapour-pressure-unknown", text)));
            }
            Condensation::Above(limit) => limit,
        };
        if partial > limit {
            let path = format!("gas.{species}");
            let typed = self.entries.iter().find(|entry| entry.path == path).map_or("", |entry| entry.typed.as_str());
            let wrong = format!(
                "it would condense: its partial pressure in the {} is {}, its vapour pressure at {} K is {}",
                place.name,
                kilopascals(partial),
                significant(place.temperature, 4),
                kilopascals(limit)
            );
            let remedy = format!("{}, or take less of it: at most {}", place.remedy, kilopascals(limit));
            return Err(RecordError::new(ErrorKind::Value, &path, typed, wrong, remedy));
        }
        Ok((partial > NEAR_CONDENSING * limit).then(|| {
            let text = format!(
                "the partial pressure of {species} in the {} is {} % of its vapour pressure: walls adsorb it, and a cold spot condenses it",
                place.name,
                significant(100.0 * partial / limit, 2)
            );
            Flag::new("near-condensing", text)
        }))
    }

    fn filling_refused(&self, error: &InputError) -> RecordError {
        let path = match error.parameter {
            Parameter::ResidualPressure => "filling.residual",
            Parameter::Pressure => "filling.pressure",
            _ => "gas",
        };
        let typed = self.entries.iter().find(|entry| entry.path == path).map_or("", |entry| entry.typed.as_str());
        RecordError::new(ErrorKind::Value, path, typed, format!("{error}"), "correct it")
    }
}

/// Where a gas could condense.
struct Place {
    name: &'static str,
    temperature: f64,
    remedy: &'static str,
}

/// The flag for a fuel that meets an oxidiser before all of the diluent is in.
fn meets_undiluted(record: &FillingRecord, report: &FillingReport, own: &[&str]) -> Option<Flag> {
    if !report.can_burn {
        return None;
    }
    let oxidiser = |species: &str| hazard::is_oxidiser(species);
    let fuel = |species: &str| hazard::is_fuel(species) || own.contains(&species);
    let first = |wanted: &dyn Fn(&str) -> bool| record.order.iter().position(|component| wanted(&component.species));
    let met = first(&oxidiser)?.max(first(&fuel)?);
    let diluents = record.order.get(met + 1..)?.iter().map(|component| component.species.as_str());
    let later: Vec<&str> = diluents.filter(|species| !oxidiser(species) && !fuel(species)).collect();
    let line = report.steps.get(met)?;
    (!later.is_empty()).then(|| {
        let text = format!(
            "after step {} ({}) fuel and oxidiser are together at {} kPa before {} is in: there the mixture is richer in both than planned; let in between them, {} keeps it from that",
            met + 1,
            line.gas,
            significant(line.reading.value / 1e3, 3),
            later.join(", "),
            later.join(", ")
        );
        Flag::new("undiluted-while-filling", text)
    })
}

/// What is particular to one gas.
fn gas_flags(line: &FillingLine, temperature: f64) -> Vec<Flag> {
    let (gas, partial) = (line.gas.as_str(), line.partial_pressure.value);
    let mut flags = Vec::new();
    let ideal = crate::gas::molar_gas_constant::<f64>() * temperature / partial;
    match second_virial_coefficient(gas, temperature).map(|coefficient| coefficient / ideal) {
        Some(departure) if departure.abs() > DEPARTURE => {
            let text = format!(
                "{gas} departs from an ideal gas by {} % at its partial pressure (second virial coefficient, estimated): its fraction is off by about that",
                significant(100.0 * departure, 2)
            );
            flags.push(Flag::new("real-gas-filling", text));
        }
        None if partial > UNKNOWN_DEPARTURE && gas != AIR && !LIGHT.contains(&gas) => {
            let text = format!("how far {gas} departs from an ideal gas at its partial pressure is not known, and not checked");
            flags.push(Flag::new("real-gas-unknown", text));
        }
        _ => {}
    }
    if gas == "NO2" {
        let text = "NO2 pairs to N2O4 at room temperature, so that its partial pressure tells less than there is of it: fractions from partial pressures do not hold";
        flags.push(Flag::new("pairs-of-no2", text));
    }
    if gas == "C2H2" && partial > ACETYLENE {
        let text = "acetylene above about 1 bar gauge can decompose explosively by itself, without any oxygen";
        flags.push(Flag::new("acetylene", text));
    }
    if line.fraction.expanded.is_some_and(|expanded| expanded > UNCERTAIN * line.fraction.value) {
        let text = format!(
            "the readings fix the fraction of {gas} only to {} % of it (k=2): let it in at a lower pressure, with a finer gauge, or ready mixed with another gas",
            significant(100.0 * line.fraction.expanded.unwrap_or(0.0) / line.fraction.value, 2)
        );
        flags.push(Flag::new("uncertain-fraction", text));
    }
    flags
}

fn departure(gas: DrivenGas<'_>, temperature: f64, pressure: f64) -> f64 {
    match gas {
        DrivenGas::ConstantHeatCapacity { .. } => 0.0,
        DrivenGas::ThermallyPerfect { gas, .. } => departure_from_ideal(&gas, temperature, pressure),
    }
}

fn fraction((nearest, bounds): (f64, Enclosure), standard: Option<f64>) -> ReportQuantity {
    with_uncertainty(computed(nearest, "1", Some(bounds)), standard)
}

fn with_uncertainty(quantity: ReportQuantity, standard: Option<f64>) -> ReportQuantity {
    ReportQuantity {
        standard_uncertainty: standard,
        expanded: standard.map(|standard| 2.0 * standard),
        coverage_factor: standard.map(|_| 2.0),
        ..quantity
    }
}

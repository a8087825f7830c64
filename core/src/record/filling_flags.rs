//! What speaks against filling a mixture as a record asks: condensation, order, departure from the ideal gas, doubtful fractions.

use alloc::format;
use alloc::vec::Vec;

use super::check::DEPARTURE;
use super::driven::AIR;
use super::error::{ErrorKind, RecordError};
use super::filling::{FillingRecord, Vessel};
use super::filling_report::{FillingLine, FillingReport};
use super::flag::Flag;
use super::format::significant;
use super::gas::GasRecord;
use super::hazard;
use super::optional::Driver;
use super::plan::Plan;
use crate::gas::{Condensation, condensation, molar_gas_constant, second_virial_coefficient};

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

impl Plan {
    /// Refuses a gas that condenses in the driven section.
    pub(super) fn check_condensation(&self, fill_pressure: f64) -> Result<(), RecordError> {
        let place = Place {
            name: "driven section",
            path: "gas",
            temperature: self.temperature.value().to_f64(),
            remedy: "take a lower fill pressure, or a warmer tube",
        };
        self.condensing(&self.gas, fill_pressure, &place).map(|_| ())
    }

    /// Refuses a driver gas that condenses at this pressure (Pa); flags for what comes near.
    pub(super) fn condensing_driver(&self, driver: &Driver, pressure: f64) -> Result<Vec<Flag>, RecordError> {
        let (Some(gas), Some(temperature)) = (&driver.gas, &driver.temperature) else { return Ok(Vec::new()) };
        let place = Place {
            name: "driver",
            path: "driver.gas",
            temperature: temperature.value().to_f64(),
            remedy: "take another driver gas, a hotter driver or a weaker shock",
        };
        self.condensing(gas, pressure, &place)
    }

    /// Every species of a gas at its partial pressure.
    fn condensing(&self, gas: &GasRecord, pressure: f64, place: &Place) -> Result<Vec<Flag>, RecordError> {
        let GasRecord::Mixture(components) = gas else { return Ok(Vec::new()) };
        let mut flags = Vec::new();
        for component in components {
            flags.extend(self.condenses(&component.species, component.fraction.to_f64() * pressure, place)?);
        }
        Ok(flags)
    }

    /// Everything that the reader must know of the steps.
    pub(super) fn filling_flags(
        &self,
        record: &FillingRecord,
        report: &FillingReport,
        fill_pressure: f64,
    ) -> Result<Vec<Flag>, RecordError> {
        let mut flags = Vec::new();
        flags.extend(meets_undiluted(record, report, &self.species.iter().map(|own| own.name.as_str()).collect::<Vec<_>>()));
        let place = Place {
            name: record.vessel.name(),
            path: "gas",
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
            let path = format!("{}.{species}", place.path);
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
}

/// Where a gas could condense.
struct Place {
    name: &'static str,
    /// The field that holds its gas.
    path: &'static str,
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
    let ideal = molar_gas_constant::<f64>() * temperature / partial;
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

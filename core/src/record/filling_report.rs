//! The filling steps of a plan: readings, fractions, and what speaks against them.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use serde::Serialize;

use super::error::{ErrorKind, RecordError};
use super::filling::{FillingRecord, Vessel};
use super::flag::Flag;
use super::hazard;
use super::plan::Plan;
use super::plan_report::LimitLine;
use super::quantity::{Absolute, Quantity};
use super::report::{ReportQuantity, computed};
use super::shot::Shot;
use crate::gas::{HeatCapacityModel, InputError, Parameter, departure_from_ideal};
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

impl FillingRecord {
    /// The rating that counts, with the name of the part.
    fn rating<'a>(&'a self, plan: &'a Plan) -> Option<(&'static str, &'a (Quantity, Absolute))> {
        let driven = || plan.tube.iter().flat_map(|tube| &tube.ratings).find(|rating| rating.part == "driven");
        match self.vessel {
            Vessel::Mixing => Some(("mixing vessel", self.rating.as_ref()?)),
            Vessel::Driven => driven().map(|rating| (rating.part, &rating.pressure)),
        }
    }

    /// True where the record says how well a reading is known.
    pub(super) fn is_stated(&self) -> bool {
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
        let ambient = self.ambient_pressure();
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
            pressure: computed(residual.nominal(), "Pa", Some(residual.enclosure()))
                .with_standard_uncertainty(absolute.standard_uncertainty),
            fraction: fraction(filling.residual_fraction(), Some(filling.residual_uncertainty(uncertainty)).filter(|_| record.is_stated())),
        });
        let mixture = shot.with_gas(HeatCapacityModel::Equilibrium, |gas, _| Ok(departure(&gas, temperature, pressure.nominal())))?;
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

fn departure(gas: &DrivenGas<'_>, temperature: f64, pressure: f64) -> f64 {
    match gas {
        DrivenGas::ConstantHeatCapacity { .. } => 0.0,
        DrivenGas::ThermallyPerfect { gas, .. } => departure_from_ideal(gas, temperature, pressure),
    }
}

fn fraction((nearest, bounds): (f64, Enclosure), standard: Option<f64>) -> ReportQuantity {
    computed(nearest, "1", Some(bounds)).with_standard_uncertainty(standard)
}

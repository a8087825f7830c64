//! From a wanted state to what the operator sets.

use alloc::string::String;
use alloc::vec::Vec;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::plan::{Plan, Target};
use super::plan_report::{PlanReport, PlannedFill};
use super::reduce::without_tube;
use super::report::{Report, ReportQuantity, computed};
use super::shot::Shot;
use super::shot_tube::test_gas;
use crate::gas::{Fill, Gas, HeatCapacityRatio, ThermallyPerfectGas};
use crate::number::{Enclosure, Known};
use crate::shock::{Entry, Incident, Output, ThermalError, ThermalFill, ThermalShock};
use crate::shot::{DrivenGas, Reduction};

/// The fill and the shock that reach a target.
#[derive(Clone, Debug, PartialEq)]
pub struct Planned {
    /// The fill pressure p1, Pa: the double nearest to the exact answer, which lies in the enclosure.
    pub fill_pressure: (f64, Enclosure),
    /// The shock speed at the end wall, m/s.
    pub shock_speed: (f64, Enclosure),
    /// The shot with these, to be reduced like one that was fired.
    pub shot: Shot,
}

impl Plan {
    /// Finds the fill pressure and the shock speed for the target.
    ///
    /// For a wanted T5 and p5 the shock follows from T5 alone, and p1 = p5/(p5/p1); both are enclosures of the model's exact answer, and reducing the
    /// planned shot returns the target within the rounding of these two doubles.
    ///
    /// # Errors
    /// A target that no shock reaches, or that leaves the data of the gas.
    ///
    /// ```
    /// let file = r#"{ "record": "plan/1", "gas": { "O2": "1.00 %", "Ar": "balance" }, "heat_capacity": "equilibrium",
    ///   "temperature": "296.2 K", "target": { "temperature": "1500 K", "pressure": "2.0 bar(a)" } }"#;
    /// let planned = endwall::record::Plan::read(file.as_bytes())?.solve()?;
    /// let report = planned.shot.reduce()?;
    /// assert!((report.states.reflected.temperature.value - 1500.0).abs() < 1e-9);
    /// assert!((report.states.reflected.pressure.value - 200e3).abs() < 1e-6);
    /// # Ok::<(), endwall::record::RecordError>(())
    /// ```
    pub fn solve(&self) -> Result<Planned, RecordError> {
        // Any fill pressure serves to find the shock for a temperature.
        let (entry, value, pressure) = match &self.target {
            Target::State { temperature, pressure } => (Entry::ReflectedTemperature, temperature.value(), pressure.1.value),
            Target::Step { step, fill_pressure } => (Entry::Step, step.value(), fill_pressure.1.value),
        };
        let trial = self.shot(pressure.to_f64(), 1000.0)?;
        let temperature = self.temperature.value();
        let found = trial.with_gas(self.heat_capacity, |gas, _| {
            let (ratio, speed) = match gas {
                DrivenGas::ConstantHeatCapacity { heat_capacity_ratio, molar_mass } => {
                    let ratio = HeatCapacityRatio::new(heat_capacity_ratio.value).map_err(|error| self.refused(&error.into()))?;
                    let gas = Gas::new(ratio, molar_mass.value).map_err(|error| self.refused(&error.into()))?;
                    let fill = Fill::new(gas, pressure, temperature).map_err(|error| self.refused(&error.into()))?;
                    let shock = Incident::new(&fill, entry, value).map_err(|error| self.refused(&error.into()))?;
                    (shock.output(Output::ReflectedPressureRatio), (shock.nearest(Output::ShockSpeed), shock.output(Output::ShockSpeed)))
                }
                DrivenGas::ThermallyPerfect { gas, .. } => {
                    let shock = self.thermal(&gas, entry, value.into(), pressure.into())?;
                    (shock.output(Output::ReflectedPressureRatio), (shock.nearest(Output::ShockSpeed), shock.output(Output::ShockSpeed)))
                }
            };
            Ok((ratio, speed))
        });
        let (ratio, shock_speed) = found?;
        let fill_pressure = match &self.target {
            Target::State { pressure, .. } => {
                let enclosure = Known::from(pressure.1.value).enclosure() / ratio;
                (enclosure.middle(), enclosure)
            }
            Target::Step { fill_pressure, .. } => {
                let known = Known::from(fill_pressure.1.value);
                (known.nominal(), known.enclosure())
            }
        };
        let shot = self.shot(fill_pressure.0, shock_speed.0)?;
        Ok(Planned { fill_pressure, shock_speed, shot })
    }

    fn thermal<'a>(
        &self,
        gas: &ThermallyPerfectGas<'a>,
        entry: Entry,
        value: Known,
        pressure: Known,
    ) -> Result<ThermalShock<'a>, RecordError> {
        let fill =
            ThermalFill::new(*gas, self.heat_capacity, pressure, self.temperature.value()).map_err(|error| self.refused(&error.into()))?;
        ThermalShock::new(&fill, entry, value).map_err(|error| self.refused(&error))
    }

    /// The error of a relation with the field of the plan behind it.
    fn refused(&self, error: &ThermalError) -> RecordError {
        use crate::gas::Parameter;
        let path = match error {
            ThermalError::Input(error) => match error.parameter {
                Parameter::FillTemperature => "temperature",
                Parameter::MolarMass | Parameter::HeatCapacityRatio | Parameter::MoleFraction | Parameter::DataRange => "gas",
                Parameter::ReflectedTemperature => "target.temperature",
                Parameter::Step => "target.step",
                _ => "target",
            },
            _ => "target",
        };
        let typed = self.entries.iter().find(|entry| entry.path == path).map_or(String::new(), |entry| entry.typed.clone());
        let remedy = "correct it, or choose another gas or fill temperature";
        RecordError::new(ErrorKind::Value, path, &typed, alloc::format!("{error}"), remedy)
    }
}

impl Plan {
    /// The whole plan: fill and shock, states with the tolerances of the laboratory as uncertainties, and, as far as driver and tube are given, driver
    /// pressure, waves, uniform time, loads and ratings.
    ///
    /// # Errors
    /// As for [`Plan::solve`], and for a driver that cannot drive this shock.
    pub fn report(&self) -> Result<PlanReport, RecordError> {
        let planned = self.solve()?;
        planned
            .shot
            .with_reduction(|reduction, notes| self.report_of(&planned, reduction, without_tube(&planned.shot, reduction, notes)))?
    }

    fn report_of(&self, planned: &Planned, reduction: &Reduction<'_>, report: Report) -> Result<PlanReport, RecordError> {
        let p1 = ReportQuantity { proven: None, ..report.states.fill.pressure.clone() };
        let (nominal, enclosure) = planned.fill_pressure;
        let p1 = ReportQuantity { proven: computed(nominal, "Pa", Some(enclosure)).proven, ..p1 };
        let speed = report.incident.speed.value;
        let farthest = self.tube.iter().flat_map(|tube| &tube.stations).map(|station| station.value().to_f64()).fold(0.0, f64::max);
        let first_station_speed =
            self.attenuation.as_ref().filter(|_| farthest > 0.0).map(|attenuation| speed * (1.0 + attenuation.value().to_f64() * farthest));
        let p5 = &report.states.reflected.pressure;
        let upper = (p5.value, p5.value + p5.expanded.unwrap_or(0.0));
        self.check_condensation(nominal)?;
        let mut part = self.tube_part(test_gas(reduction), speed, upper, (&planned.shot, &report.states))?;
        let filling = self.filling_part(&planned.shot, enclosure)?;
        if let Some(filling) = &filling {
            part.limits.extend(filling.limit.clone());
            part.flags.extend(filling.flags.iter().cloned());
        }
        part.limits.sort_by_key(|line| !line.exceeded);
        let mut flags = Vec::new();
        if part.limits.iter().any(|line| line.exceeded) {
            let text = "a marked rating is exceeded: neither fill the vessel nor fire this shot before that is settled";
            flags.push(Flag::new("rating-exceeded", text));
        }
        flags.extend(part.flags);
        flags.extend(report.flags.iter().cloned());
        flags.retain(|flag| flag.code != "missing-uncertainty" && *flag != Flag::not_used("tube"));
        Ok(PlanReport {
            limits: part.limits,
            fill: PlannedFill { p1, p4: part.p4, p4_band: part.p4_band },
            filling: filling.map(|filling| filling.report),
            incident: report.incident,
            states: report.states,
            reflected: report.reflected,
            step: report.step,
            heat_capacity: report.heat_capacity,
            first_station_speed,
            tailoring: part.tailoring,
            test_time: part.time,
            boundary_layer: part.layers.boundary_layer,
            bifurcation: part.layers.bifurcation,
            waves: part.waves,
            end_load: part.end_load,
            stored_energy: part.stored_energy,
            flags,
            made_by: report.made_by,
        })
    }
}

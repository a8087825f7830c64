//! From a record to its report.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::alternatives::alternatives;
use super::check;
use super::driven::GasNotes;
use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::optional::Wall;
use super::quantity::{Coverage, Mark, Quantity};
use super::report::{
    BudgetLine, Correlation, Fit, FitLine, Incident, LeftOut, MadeBy, Reflected, Report, ReportQuantity, ReportState, Share, States,
    computed,
};
use super::shot::{Shot, Speed};
use crate::gas::{HeatCapacityModel, MixtureChange};
use crate::number::{Enclosure, Known};
use crate::shock::Output;
use crate::shot::{
    Distribution, EndWall, Estimate, Measured, Reduction, ReductionError, Source, SpeedSource, Uncertainty, effective_degrees_of_freedom,
    reduce,
};

impl Shot {
    /// Reduces the shot: fits the arrival times, if there are any, computes the states behind the incident and the reflected
    /// shock with proof, and their uncertainties (JCGM 100:2008).
    ///
    /// A heat capacity ratio and a molar mass without an uncertainty are taken as exact; the report says so. Any other input
    /// without one leaves the uncertainties that it touches unknown.
    ///
    /// # Errors
    /// What the fit or the shock relations refuse, with the field that it comes from and the remedy.
    ///
    /// ```
    /// # let file = r#"{ "record": "shot/1", "gas": { "heat_capacity_ratio": "7/5", "molar_mass": "28.9652 g/mol" },
    /// #   "fill": { "pressure": "100.0 ± 0.1 kPa", "temperature": "295.15 ± 0.5 K" }, "shock_speed": "620 ± 0.93 m/s" }"#;
    /// let report = endwall::record::Shot::read(file.as_bytes())?.reduce()?;
    /// // p5 − p1 by the closed form at γ = 7/5, evaluated apart.
    /// assert!((report.step.value - 949_380.083).abs() < 0.001);
    /// assert!(report.to_json()?.contains("\"step\""));
    /// # Ok::<(), endwall::record::RecordError>(())
    /// ```
    pub fn reduce(&self) -> Result<Report, RecordError> {
        self.with_reduction(|reduction, notes| report(self, reduction, notes))
    }

    /// Calls a function with the reduction behind [`reduce`](Self::reduce), for a Monte Carlo run or further outputs, and with what the gas was made of.
    ///
    /// # Errors
    /// As for [`reduce`](Self::reduce).
    pub fn with_reduction<T>(&self, compute: impl FnOnce(&Reduction<'_>, &GasNotes) -> T) -> Result<T, RecordError> {
        self.with_model(self.heat_capacity, compute)
    }

    /// The same with another choice of heat capacity.
    pub(super) fn with_model<T>(
        &self,
        model: HeatCapacityModel,
        compute: impl FnOnce(&Reduction<'_>, &GasNotes) -> T,
    ) -> Result<T, RecordError> {
        self.with_gas(model, |gas, notes| {
            let stations = self.fit_stations();
            let speed = match &self.speed {
                Speed::Stations(_) => SpeedSource::Stations(&stations, self.fit_settings()),
                Speed::Given(speed) => SpeedSource::Given(measured(speed)),
            };
            let shot = crate::shot::Shot {
                gas,
                pressure: self.absolute_fill_pressure(),
                temperature: measured(&self.fill.temperature),
                speed,
                wall: match &self.wall {
                    None => EndWall::Rigid,
                    Some(Wall::Speed(velocity)) => EndWall::Moving(measured(velocity)),
                    Some(Wall::Impedance(impedance)) => EndWall::Yielding(measured(impedance)),
                },
            };
            let reduction = reduce(&shot).map_err(|error| match error {
                ReductionError::Fit(error) => self.refused_fit(error),
                ReductionError::Input(error) => self.refused(error),
                other => RecordError::new(ErrorKind::Value, "", "", format!("{other}"), ""),
            })?;
            Ok(compute(&reduction, &notes))
        })
    }

    /// The fill pressure with the degrees of freedom of gauge and barometer combined (JCGM 100:2008, G.4).
    fn absolute_fill_pressure(&self) -> Measured {
        let mut pressure = measured(&self.fill.pressure);
        pressure.value = Known::from(self.fill.absolute.value);
        if let (Mark::Gauge, Some(ambient)) = (self.fill.pressure.mark(), &self.ambient) {
            let parts = [pressure.uncertainty, measured(ambient).uncertainty].map(|part| part.unwrap_or(Uncertainty::standard(0.0)));
            let freedom = effective_degrees_of_freedom(&parts.map(|part| (part.standard, part.degrees_of_freedom)));
            pressure.uncertainty = self.fill.absolute.standard_uncertainty.map(|standard| Uncertainty {
                standard,
                degrees_of_freedom: freedom.unwrap_or(f64::INFINITY),
                distribution: Distribution::Normal,
            });
        }
        pressure
    }
}

/// A typed quantity as an input of the reduction.
fn measured(quantity: &Quantity) -> Measured {
    let uncertainty = quantity.uncertainty().map(|typed| Uncertainty {
        standard: typed.standard,
        degrees_of_freedom: typed.degrees_of_freedom.unwrap_or(f64::INFINITY),
        distribution: if typed.coverage == Coverage::Limits { Distribution::Rectangular } else { Distribution::Normal },
    });
    Measured { value: Known::from(quantity.value()), uncertainty }
}

/// The report of a shot from its reduction.
pub(super) fn report(shot: &Shot, reduction: &Reduction<'_>, notes: &GasNotes) -> Report {
    let mut report = without_tube(shot, reduction, notes);
    shot.add_tube(reduction, &mut report);
    report
}

/// The same without what driver and tube add.
pub(super) fn without_tube(shot: &Shot, reduction: &Reduction<'_>, notes: &GasNotes) -> Report {
    let shown = [
        (Output::Density1, "kg/m3"),
        (Output::SoundSpeed1, "m/s"),
        (Output::Pressure2, "Pa"),
        (Output::Temperature2, "K"),
        (Output::Density2, "kg/m3"),
        (Output::SoundSpeed2, "m/s"),
        (Output::GasSpeed2, "m/s"),
        (Output::Pressure5, "Pa"),
        (Output::Temperature5, "K"),
        (Output::Density5, "kg/m3"),
        (Output::SoundSpeed5, "m/s"),
        (Output::Step, "Pa"),
        (Output::ShockSpeed, "m/s"),
        (Output::Mach, "1"),
        (Output::ReflectedSpeed, "m/s"),
        (Output::ReflectedMach, "1"),
    ];
    let [
        density_1,
        sound_speed_1,
        pressure_2,
        temperature_2,
        density_2,
        sound_speed_2,
        gas_speed_2,
        pressure_5,
        temperature_5,
        density_5,
        sound_speed_5,
        step,
        speed,
        mach,
        reflected_speed,
        reflected_mach,
    ] = figures(reduction, shown);
    let states = States {
        fill: ReportState {
            pressure: figure(&reduction.fill_pressure(), "Pa"),
            temperature: figure(&reduction.fill_temperature(), "K"),
            density: density_1,
            sound_speed: sound_speed_1,
            gas_speed: at_rest(),
        },
        incident: ReportState {
            pressure: pressure_2,
            temperature: temperature_2,
            density: density_2,
            sound_speed: sound_speed_2,
            gas_speed: gas_speed_2,
        },
        reflected: ReportState {
            pressure: pressure_5,
            temperature: temperature_5,
            density: density_5,
            sound_speed: sound_speed_5,
            gas_speed: if matches!(reduction.wall(), EndWall::Rigid) { at_rest() } else { figure(&reduction.wall_velocity(), "m/s") },
        },
    };
    let mut flags = shot.flags.clone();
    flags.extend(notes.flags.iter().cloned());
    flags.extend(check::result(shot, reduction, &states, &step));
    Report {
        incident: Incident { speed, mach, attenuation: reduction.fit().map(attenuation) },
        states,
        reflected: Reflected { speed: reflected_speed, mach: reflected_mach },
        step,
        heat_capacity: alternatives(shot, reduction),
        fit: reduction.fit().map(|fit| fit_lines(shot, fit)),
        budget: budget(reduction),
        correlation: Correlation { temperature_pressure: reduction.correlation(Output::Temperature5, Output::Pressure5) },
        test_time: None,
        boundary_layer: None,
        bifurcation: None,
        flags,
        made_by: MadeBy::this_version(shot, &notes.source),
    }
}

/// Outputs with their units, as they are reported.
pub(super) fn figures<const N: usize>(reduction: &Reduction<'_>, outputs: [(Output, &'static str); N]) -> [ReportQuantity; N] {
    let mut estimates = reduction.estimates(outputs.map(|(output, _)| output)).into_iter();
    outputs.map(|(output, unit)| figure(&estimates.next().unwrap_or_else(|| reduction.estimate(output)), unit))
}

pub(super) fn figure(estimate: &Estimate, unit: &'static str) -> ReportQuantity {
    let finite = |value: Option<f64>| value.filter(|value| value.is_finite());
    ReportQuantity {
        value: estimate.value,
        unit,
        // What could not be proven claims nothing.
        proven: estimate.proven.filter(|bounds: &Enclosure| bounds.is_proven()).map(|bounds| [bounds.low(), bounds.high()]),
        standard_uncertainty: finite(estimate.standard_uncertainty),
        expanded: finite(estimate.expanded),
        coverage_factor: finite(estimate.coverage_factor),
    }
}

/// Gas at rest: zero by the statement of the problem, so that no uncertainty belongs to it.
fn at_rest() -> ReportQuantity {
    ReportQuantity { value: 0.0, unit: "m/s", proven: Some([0.0, 0.0]), standard_uncertainty: None, expanded: None, coverage_factor: None }
}

/// The fitted attenuation. The times' uncertainties are stated, not estimated from their scatter: infinite degrees of freedom, k = 2.
fn attenuation(fit: &crate::shot::Fit) -> ReportQuantity {
    computed(fit.attenuation, "1/m", None).with_standard_uncertainty(fit.attenuation_uncertainty())
}

fn fit_lines(shot: &Shot, fit: &crate::shot::Fit) -> Fit {
    let name = |at: usize| station_name(shot, at);
    let line = |station: &crate::shot::StationFit| FitLine {
        name: name(station.station),
        residual: station.residual,
        standardised: station.standardised,
    };
    let left_out = |station: &crate::shot::StationFit| {
        let refit = station.without?;
        Some(LeftOut { name: name(station.station), speed: refit.shock_speed, chi_squared: refit.chi_squared })
    };
    Fit {
        stations: fit.stations().iter().map(line).collect(),
        chi_squared: fit.chi_squared,
        degrees_of_freedom: u32::try_from(fit.degrees_of_freedom).unwrap_or(u32::MAX),
        speed_attenuation_correlation: fit.correlation(),
        without: fit.stations().iter().filter_map(left_out).collect(),
    }
}

/// The name of a station by its place in the record.
pub(super) fn station_name(shot: &Shot, at: usize) -> String {
    match &shot.speed {
        Speed::Stations(stations) => stations.get(at).map_or(String::new(), |station| station.name.clone()),
        Speed::Given(_) => String::new(),
    }
}

/// One line for each input with an uncertainty; inputs taken as exact have none, and all changes of the composition form one.
fn budget(reduction: &Reduction<'_>) -> Vec<BudgetLine> {
    let shares = [Output::Temperature5, Output::Pressure5, Output::Step].map(|output| reduction.shares(output));
    let stated = reduction.budget().iter().enumerate().filter_map(|(at, line)| Some((at, line.source, line.uncertainty?.standard)));
    let mut lines: Vec<BudgetLine> = Vec::new();
    for (at, source, standard_uncertainty) in stated.filter(|(.., standard)| *standard > 0.0) {
        let [temperature, pressure, step] = shares.map(|shares| shares.and_then(|shares| shares.get(at).copied()));
        let share = Share { temperature, pressure, step };
        let is_composition = matches!(source, Source::Mixture(change) if change != MixtureChange::Data);
        match lines.iter_mut().find(|line| is_composition && line.input == source.name()) {
            Some(line) => {
                line.standard_uncertainty = libm::hypot(line.standard_uncertainty, standard_uncertainty);
                line.share = line.share.plus(&share);
            }
            None => lines.push(BudgetLine {
                input: source.name().to_string(),
                standard_uncertainty,
                share,
                unit: match source {
                    Source::HeatCapacityRatio | Source::Mixture(_) => "1",
                    Source::FillPressure => "Pa",
                    Source::FillTemperature => "K",
                    Source::MolarMass => "kg/mol",
                    Source::EndWall if matches!(reduction.wall(), EndWall::Yielding(_)) => "Pa s/m",
                    Source::Fit(_) | Source::ShockSpeed | Source::EndWall => "m/s",
                },
            }),
        }
    }
    lines
}

/// A flag for what the record states and the reduction leaves aside.
pub(super) fn left_aside(shot: &Shot) -> Vec<Flag> {
    let mut flags = Vec::new();
    let in_fit = ["stations", "attenuation", "clock", "survey"];
    let of_fit = |path: &str| in_fit.iter().any(|field| path.starts_with(field));
    let states_freedom = |entry: &super::Entry| entry.quantity.as_ref().is_some_and(|quantity| quantity.degrees_of_freedom().is_some());
    if let Some(entry) = shot.entries.iter().find(|entry| of_fit(&entry.path) && states_freedom(entry)) {
        let text =
            format!("{} states degrees of freedom, which the fit does not use in this version: it takes them as infinite", entry.path);
        flags.push(Flag::new("not-used", text));
    }
    flags
}

#[cfg(test)]
#[path = "reduce_tests.rs"]
mod tests;

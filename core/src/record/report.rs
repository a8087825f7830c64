//! The report of a shot as data: the object that `endwall reduce FILE --json` prints.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use serde::Serialize;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::shot::Shot;
use super::text;
use super::uniform_time::UniformTime;
use super::wall_layer::{WallLayer, WallLayerCriterion};
use crate::number::Enclosure;

/// A reported quantity, in SI units.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct ReportQuantity {
    /// The double nearest to the exact answer of the model; for a fitted value, the value itself.
    pub value: f64,
    /// The SI unit; `1` where there is none.
    pub unit: &'static str,
    /// Encloses the exact answer of the model at the nominal inputs; left out where nothing of the kind is claimed.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub proven: Option<[f64; 2]>,
    /// Combined standard uncertainty; `None` where the inputs state none.
    pub standard_uncertainty: Option<f64>,
    /// Expanded uncertainty U = k u.
    pub expanded: Option<f64>,
    /// k.
    pub coverage_factor: Option<f64>,
}

/// A quantity that is computed and not measured.
pub(super) fn computed(value: f64, unit: &'static str, proven: Option<Enclosure>) -> ReportQuantity {
    ReportQuantity {
        value,
        unit,
        proven: proven.filter(|bounds| bounds.is_proven()).map(|bounds| [bounds.low(), bounds.high()]),
        standard_uncertainty: None,
        expanded: None,
        coverage_factor: None,
    }
}

impl ReportQuantity {
    /// With a standard uncertainty of infinite degrees of freedom: k = 2.
    pub(super) fn with_standard_uncertainty(self, standard_uncertainty: Option<f64>) -> Self {
        let (expanded, coverage_factor) = (standard_uncertainty.map(|standard| 2.0 * standard), standard_uncertainty.map(|_| 2.0));
        Self { standard_uncertainty, expanded, coverage_factor, ..self }
    }
}

/// A state of the gas.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct ReportState {
    /// Pa.
    pub pressure: ReportQuantity,
    /// K.
    pub temperature: ReportQuantity,
    /// kg/m³.
    pub density: ReportQuantity,
    /// m/s.
    pub sound_speed: ReportQuantity,
    /// In the laboratory frame, along the incident shock, m/s.
    pub gas_speed: ReportQuantity,
}

/// The incident shock at the end wall.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Incident {
    /// m/s.
    pub speed: ReportQuantity,
    /// Relative to the fill.
    pub mach: ReportQuantity,
    /// Relative change of speed with distance, 1/m; `None` without stations.
    pub attenuation: Option<ReportQuantity>,
}

/// The states by the trade's numbers.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct States {
    /// The fill.
    #[serde(rename = "1")]
    pub fill: ReportState,
    /// Behind the incident shock.
    #[serde(rename = "2")]
    pub incident: ReportState,
    /// Behind the reflected shock.
    #[serde(rename = "5")]
    pub reflected: ReportState,
}

/// The reflected shock.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Reflected {
    /// In the laboratory frame, m/s.
    pub speed: ReportQuantity,
    /// Relative to the gas ahead of it.
    pub mach: ReportQuantity,
}

/// One station in the fit.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct FitLine {
    /// Its name.
    pub name: String,
    /// Arrival less fitted arrival, s.
    pub residual: f64,
    /// Residual over its own standard deviation, with leverage; `None` where no check is possible.
    pub standardised: Option<f64>,
}

/// The fit repeated without one station; printed in the text, not in the JSON object.
#[derive(Clone, Debug, PartialEq)]
pub struct LeftOut {
    /// The station that is left out.
    pub name: String,
    /// Shock speed at the end wall, m/s.
    pub speed: f64,
    /// χ² of what remains; `None` where the stations state no uncertainty.
    pub chi_squared: Option<f64>,
}

/// Arrival times to shock speed.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Fit {
    /// One line per station in use, in the order of the file.
    pub stations: Vec<FitLine>,
    /// χ²; `None` where the stations state no uncertainty.
    pub chi_squared: Option<f64>,
    /// Observations less parameters.
    pub degrees_of_freedom: u32,
    /// Correlation of speed and attenuation; printed in the text only.
    #[serde(skip)]
    pub speed_attenuation_correlation: Option<f64>,
    /// The fit without each station; printed in the text only, empty where too few are left.
    #[serde(skip)]
    pub without: Vec<LeftOut>,
}

/// Shares of variance, 0 to 1.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Share {
    /// Of T5.
    #[serde(rename = "5.temperature")]
    pub temperature: Option<f64>,
    /// Of p5.
    #[serde(rename = "5.pressure")]
    pub pressure: Option<f64>,
    /// Of p5 − p1.
    pub step: Option<f64>,
}

impl Share {
    /// The sum, for inputs that form one line.
    pub(super) fn plus(&self, other: &Self) -> Self {
        let sum = |a: Option<f64>, b: Option<f64>| a.zip(b).map(|(a, b)| a + b);
        Self {
            temperature: sum(self.temperature, other.temperature),
            pressure: sum(self.pressure, other.pressure),
            step: sum(self.step, other.step),
        }
    }
}

/// The choice of heat capacity.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct HeatCapacityChoice {
    /// The one with which the states were computed.
    pub chosen: &'static str,
    /// Every choice at the same shock speed, the chosen one among them; empty for a gas given by its heat capacity ratio.
    pub beside: Vec<Alternative>,
    /// Relaxation times of vibration.
    pub relaxation: Vec<Relaxation>,
}

impl HeatCapacityChoice {
    /// The choices and the relaxation times as text, with pressures in the unit in which the shot's fill was typed; empty where there is one choice only.
    pub fn to_text(&self, shot: &Shot) -> String {
        super::text_choices::heat_capacity(self, shot)
    }
}

/// The states for one choice of heat capacity. The spread of the choices is no uncertainty and is not added to one.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Alternative {
    /// The choice.
    pub heat_capacity: &'static str,
    /// T2, K; `None` where this choice has no answer: the states leave the data, or the wave is slower than sound.
    #[serde(rename = "2.temperature")]
    pub temperature_2: Option<ReportQuantity>,
    /// T5, K.
    #[serde(rename = "5.temperature")]
    pub temperature: Option<ReportQuantity>,
    /// p5, Pa.
    #[serde(rename = "5.pressure")]
    pub pressure: Option<ReportQuantity>,
}

/// Vibrational relaxation time of a species by an empirical formula.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Relaxation {
    /// The species.
    pub species: String,
    /// In state 2, s.
    #[serde(rename = "2")]
    pub incident: Option<f64>,
    /// In state 5, s.
    #[serde(rename = "5")]
    pub reflected: Option<f64>,
    /// The formula is known to hold within this factor, up and down.
    pub factor: f64,
}

/// One line of the uncertainty budget; correlated inputs form one line.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct BudgetLine {
    /// The input.
    pub input: String,
    /// Its standard uncertainty, SI.
    pub standard_uncertainty: f64,
    /// What it contributes.
    pub share: Share,
    /// The SI unit of the input; printed in the text only.
    #[serde(skip)]
    pub unit: &'static str,
}

/// Correlation coefficients between outputs.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Correlation {
    /// Of T5 and p5; `None` without uncertainties.
    #[serde(rename = "5.temperature,5.pressure")]
    pub temperature_pressure: Option<f64>,
}

/// How the report came about.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct MadeBy {
    /// Version of this library.
    pub version: String,
    /// The gas data used.
    pub gas_data: String,
    /// Fingerprint of the record file: see [`input_digest`](super::input_digest).
    pub input_digest: String,
    /// Seed of a Monte Carlo run; `None` without one. Below 2⁵³, so that every reader of JSON keeps it.
    pub seed: Option<u64>,
}

impl MadeBy {
    /// This version, with the fingerprint of the shot's file and no Monte Carlo run.
    pub fn this_version(shot: &Shot, gas_data: &str) -> Self {
        Self {
            version: env!("CARGO_PKG_VERSION").to_string(),
            gas_data: gas_data.to_string(),
            input_digest: shot.input_digest.clone(),
            seed: None,
        }
    }
}

/// The report of a shot. Field names and order are those of the JSON object.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Report {
    /// The incident shock.
    pub incident: Incident,
    /// States 1, 2 and 5.
    pub states: States,
    /// The reflected shock.
    pub reflected: Reflected,
    /// p5 − p1, Pa.
    pub step: ReportQuantity,
    /// The heat capacity that was chosen, and what the others would give.
    pub heat_capacity: HeatCapacityChoice,
    /// `None` without stations.
    pub fit: Option<Fit>,
    /// The uncertainty budget.
    pub budget: Vec<BudgetLine>,
    /// Correlation of outputs.
    pub correlation: Correlation,
    /// How long the state at the end wall lasts; `None` without gas and temperature of a driver and the lengths of the tube.
    pub test_time: Option<UniformTime>,
    /// What the boundary layer leaves of it; `None` without bore and length of the driven section, or without a viscosity.
    pub boundary_layer: Option<WallLayer>,
    /// Whether the reflected shock bifurcates; `None` without tube and driver.
    pub bifurcation: Option<WallLayerCriterion>,
    /// Everything that the reader must know; the flags of the record come first.
    pub flags: Vec<Flag>,
    /// How it came about.
    pub made_by: MadeBy,
}

impl Report {
    /// The JSON object, indented. Numbers are the shortest that read back to the same double; what is absent is `null`.
    ///
    /// # Errors
    /// None is known; the JSON writer's own error would be handed on.
    pub fn to_json(&self) -> Result<String, RecordError> {
        serde_json::to_string_pretty(self)
            .map_err(|error| RecordError::new(ErrorKind::Syntax, "", "", format!("the report cannot be written: {error}"), ""))
    }

    /// The report as text for technicians and referees: input as typed and in SI units, fit, states with expanded
    /// uncertainties, budget, correlation, flags, the proven digits of the arithmetic in a section of their own, cautions.
    pub fn to_text(&self, shot: &Shot) -> String {
        text::render(self, shot)
    }
}

#[cfg(test)]
#[path = "report_tests.rs"]
mod tests;

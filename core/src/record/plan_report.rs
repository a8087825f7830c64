//! The report of a plan as data: the object that `endwall plan FILE --json` prints.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use serde::Serialize;

use super::error::{ErrorKind, RecordError};
use super::filling_report::FillingReport;
use super::flag::Flag;
use super::plan::Plan;
use super::plan_text;
use super::report::{HeatCapacityChoice, Incident, MadeBy, Reflected, ReportQuantity, States};
use super::tailoring::PlannedTailoring;
use super::uniform_time::UniformTime;
use super::wall_layer::{WallLayer, WallLayerCriterion};

/// What the operator sets.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PlannedFill {
    /// Driven fill pressure, Pa, absolute.
    pub p1: ReportQuantity,
    /// Driver pressure, Pa, absolute; `None` without a driver.
    pub p4: Option<ReportQuantity>,
    /// Lower and upper end of the driver pressure for twice the standard uncertainty of the efficiency, Pa; `None` without a stated one.
    pub p4_band: Option<[f64; 2]>,
}

/// A wave in distance from the diaphragm (m) and time from its opening (s).
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PlannedWave {
    /// Its name.
    pub name: String,
    /// Where and when it begins.
    pub from: [f64; 2],
    /// Where and when it ends.
    pub to: [f64; 2],
    /// Points on the way of a wave that is no straight line, for a drawing; not in the JSON object.
    #[serde(skip)]
    pub between: Vec<[f64; 2]>,
}

/// A pressure compared with a marked rating.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct LimitLine {
    /// The part of the tube.
    pub part: String,
    /// What acts on it.
    pub load: String,
    /// Its upper end, Pa, absolute.
    pub pressure: f64,
    /// The rating, Pa, absolute.
    pub rating: f64,
    /// True where the pressure exceeds the rating.
    pub exceeded: bool,
}

/// The report of a plan. Field names and order are those of the JSON object.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PlanReport {
    /// Pressures against ratings; exceeded ones first. Empty where no rating was given.
    pub limits: Vec<LimitLine>,
    /// What the operator sets.
    pub fill: PlannedFill,
    /// The steps in which the mixture is made; `None` where the record does not ask for them.
    pub filling: Option<FillingReport>,
    /// The incident shock at the end wall.
    pub incident: Incident,
    /// States 1, 2 and 5.
    pub states: States,
    /// The reflected shock.
    pub reflected: Reflected,
    /// p5 − p1, Pa.
    pub step: ReportQuantity,
    /// The choices of heat capacity side by side.
    pub heat_capacity: HeatCapacityChoice,
    /// Expected shock speed at the first station, m/s; `None` without attenuation and stations.
    pub first_station_speed: Option<f64>,
    /// What the contact surface does with the reflected shock; `None` without a driver.
    pub tailoring: Option<PlannedTailoring>,
    /// `None` without a driver and the lengths of the tube.
    pub test_time: Option<UniformTime>,
    /// What the boundary layer leaves of it; `None` without bore and length of the driven section, or without a viscosity.
    pub boundary_layer: Option<WallLayer>,
    /// Whether the reflected shock bifurcates.
    pub bifurcation: Option<WallLayerCriterion>,
    /// Waves; empty without a driver and the lengths of the tube.
    pub waves: Vec<PlannedWave>,
    /// Load on the end wall, N; `None` without the bore.
    pub end_load: Option<f64>,
    /// Stored energy of the driver, J; `None` without driver and its volume.
    pub stored_energy: Option<f64>,
    /// Everything that the reader must know.
    pub flags: Vec<Flag>,
    /// How it came about.
    pub made_by: MadeBy,
}

impl PlanReport {
    /// The JSON object, indented. Numbers are the shortest that read back to the same double; what is absent is `null`.
    ///
    /// # Errors
    /// None is known; the JSON writer's own error would be handed on.
    pub fn to_json(&self) -> Result<String, RecordError> {
        serde_json::to_string_pretty(self)
            .map_err(|error| RecordError::new(ErrorKind::Syntax, "", "", format!("the report cannot be written: {error}"), ""))
    }

    /// The report as text: exceeded ratings and cautions first, then what to set, what will happen, and the states.
    pub fn to_text(&self, plan: &Plan) -> String {
        plan_text::render(self, plan)
    }
}

//! From the record to the inputs of the floors below.

use alloc::format;
use alloc::vec::Vec;

use super::error::{ErrorKind, RecordError};
use super::optional::Survey;
use super::quantity::Quantity;
use super::shot::{Shot, Speed};
use crate::gas::{Fill, Gas, HeatCapacityRatio, InputError, Parameter};
use crate::number::Rational;
use crate::shot::{Allowance, FitError, FitSettings, Station};

impl Shot {
    /// The driven fill with its gas, exactly as typed.
    ///
    /// # Errors
    /// A gas that this version does not compute (see [`GasRecord::constant`](super::GasRecord::constant)), or a value outside
    /// the domain of the relations.
    ///
    /// ```
    /// # let file = r#"{ "record": "shot/1", "gas": { "heat_capacity_ratio": "5/3", "molar_mass": "39.948 g/mol" },
    /// #   "fill": { "pressure": "8.000 kPa", "temperature": "296.2 K" }, "shock_speed": "950.0 m/s" }"#;
    /// use endwall::record::Shot;
    /// let fill = Shot::read(file.as_bytes())?.driven_fill()?;
    /// assert_eq!(fill.temperature().exact(), "296.2".parse().ok());
    /// # Ok::<(), endwall::record::RecordError>(())
    /// ```
    pub fn driven_fill(&self) -> Result<Fill, RecordError> {
        let gas = self.gas.constant(self.heat_capacity)?;
        let ratio = HeatCapacityRatio::new(gas.heat_capacity_ratio).map_err(|error| self.refused(error))?;
        let gas = Gas::new(ratio, gas.molar_mass).map_err(|error| self.refused(error))?;
        Fill::new(gas, self.fill.absolute.value, self.fill.temperature.value()).map_err(|error| self.refused(error))
    }

    /// The stations of the fit in the order of the file, times counted from the first one and free of delays, so that no
    /// digit of a late clock reading is lost; empty where the speed is given.
    pub fn fit_stations(&self) -> Vec<Station> {
        let Speed::Stations(stations) = &self.speed else { return Vec::new() };
        let start = stations.first().map_or(Rational::ZERO, |first| first.time);
        let convert = |station: &super::Station| Station {
            from_end_wall: station.from_end_wall.value().to_f64(),
            position_uncertainty: station.from_end_wall.standard_uncertainty().unwrap_or(0.0),
            arrival: station.time.checked_sub(start).map_or_else(|| station.time.to_f64() - start.to_f64(), Rational::to_f64),
            time_uncertainty: station.time_uncertainty.unwrap_or(0.0),
            delay: 0.0,
            used: station.used,
        };
        stations.iter().map(convert).collect()
    }

    /// The settings of the fit.
    pub fn fit_settings(&self) -> FitSettings {
        let standard = |quantity: &Quantity| quantity.standard_uncertainty().unwrap_or(0.0);
        let allowance = |quantity: &Quantity| Allowance { value: quantity.value().to_f64(), uncertainty: standard(quantity) };
        let (scale, offset) = match &self.survey {
            None => (0.0, 0.0),
            Some(Survey::Scale(error)) => (standard(error), 0.0),
            Some(Survey::Offset(error)) => (0.0, standard(error)),
        };
        FitSettings {
            attenuation: self.attenuation.as_ref().map(allowance),
            clock_uncertainty: self.clock.as_ref().map_or(0.0, standard),
            survey_scale_uncertainty: scale,
            survey_offset_uncertainty: offset,
            curvature: true,
        }
    }

    /// The error of a relation with the path of the field behind it, and the text as typed.
    pub fn refused(&self, error: InputError) -> RecordError {
        let path = match error.parameter {
            Parameter::HeatCapacityRatio => "gas.heat_capacity_ratio",
            Parameter::MolarMass => "gas.molar_mass",
            Parameter::MoleFraction | Parameter::DataRange => "gas",
            Parameter::FillPressure => "fill.pressure",
            Parameter::FillTemperature => "fill.temperature",
            Parameter::RelativeHumidity => "humidity",
            Parameter::PressureFactor => "measured.pressure_change",
            Parameter::WallSpeed => "wall.speed",
            Parameter::WallImpedance => "wall.impedance",
            _ if matches!(self.speed, Speed::Given(_)) => "shock_speed",
            _ => "stations",
        };
        let typed = self.entries.iter().find(|entry| entry.path == path).map_or("", |entry| entry.typed.as_str());
        let remedy = match path {
            "shock_speed" => "check the digits of the speed, and the gas and the temperature of the fill",
            "stations" => "check the units of distances and times, and the gas and the temperature of the fill",
            _ => "correct it, or the inputs that it is compared with",
        };
        RecordError::new(ErrorKind::Value, path, typed, format!("{error}"), remedy)
    }

    /// The error of the fit with the names of the stations and the remedy.
    pub fn refused_fit(&self, error: FitError) -> RecordError {
        let stations: &[super::Station] = if let Speed::Stations(stations) = &self.speed { stations } else { &[] };
        let name = |at: usize| stations.get(at).map_or("", |station| station.name.as_str());
        let (path, wrong, remedy) = match error {
            FitError::AllowanceNeeded { used, straight_line_speed, bias_per_percent_per_metre } => (
                "attenuation",
                format!(
                    "{used} stations do not show how the shock slows. A straight line gives {straight_line_speed:.2} m/s, too high by {bias_per_percent_per_metre:.2} m/s for each %/m of attenuation"
                ),
                "add an allowance, for example \"attenuation\": \"1.0 ± 0.6 %/m\" (common practice), or a fourth station",
            ),
            FitError::OutOfOrder { farther, nearer } => (
                "stations",
                format!("the shock does not reach {} before {}, which is nearer to the end wall", name(farther), name(nearer)),
                "were two stations swapped?",
            ),
            FitError::DuplicatePosition { first, second, .. } => (
                "stations",
                format!("{} and {} are at the same distance from the end wall", name(first), name(second)),
                "leave one out with \"use\": false and a reason",
            ),
            FitError::UncertaintyMissing { station } => (
                "stations",
                format!("{} has no uncertainty while others have one", name(station)),
                "state an uncertainty for every station, or for none",
            ),
            other => ("stations", format!("{other}"), "correct the stations, or leave some out with \"use\": false and a reason"),
        };
        RecordError::new(ErrorKind::Value, path, "", wrong, remedy)
    }
}

#[cfg(test)]
mod tests {
    use alloc::string::{String, ToString};

    use super::*;
    use crate::shot::fit;

    fn example(file: &str) -> Shot {
        Shot::read(file.as_bytes()).unwrap()
    }

    const ARGON: &str = include_str!("../../../examples/records/argon-b0412.json");
    const SENSOR: &str = include_str!("../../../examples/records/sensor-step-c17.json");

    #[test]
    fn the_examples_can_be_fitted() {
        let argon = example(ARGON);
        let found = fit(&argon.fit_stations(), &argon.fit_settings()).unwrap();
        // Made up for 950 m/s and 1.2 %/m with noise of 0.3 us.
        assert!((found.shock_speed - 950.0).abs() < 3.0 * found.shock_speed_uncertainty().unwrap(), "{}", found.shock_speed);
        assert!((found.attenuation - 0.012).abs() < 3.0 * found.attenuation_uncertainty().unwrap(), "{}", found.attenuation);
        let sensor = example(SENSOR);
        let found = fit(&sensor.fit_stations(), &sensor.fit_settings()).unwrap();
        assert!((found.shock_speed - 702.0).abs() < 3.0 * found.shock_speed_uncertainty().unwrap(), "{}", found.shock_speed);
    }

    #[test]
    fn without_an_allowance_the_straight_line_is_shown() {
        let bare = SENSOR.replacen("  \"attenuation\": \"0.8 ± 0.5 %/m\",\n", "", 1);
        let shot = example(&bare);
        let error = shot.refused_fit(fit(&shot.fit_stations(), &shot.fit_settings()).unwrap_err());
        assert_eq!(error.path, "attenuation");
        assert!(error.to_string().contains("straight line") && error.to_string().contains("± 0.6 %/m"), "{error}");
    }

    #[test]
    fn a_late_clock_loses_no_digit() {
        let early = example(ARGON).fit_stations();
        let mut late = String::from(ARGON);
        for (from, to) in [
            ("0.00 ±", "40000000000.00 ±"),
            ("515.02", "40000000515.02"),
            ("1033.76", "40000001033.76"),
            ("1555.46", "40000001555.46"),
            ("2079.26", "40000002079.26"),
        ] {
            late = late.replacen(from, to, 1);
        }
        assert_eq!(example(&late).fit_stations(), early);
        assert_eq!(early[1].arrival, 515.02e-6);
    }

    #[test]
    fn errors_of_the_relations_get_their_field() {
        let shot = example(ARGON);
        let fill = shot.driven_fill().unwrap();
        let slow = crate::shock::Incident::new(&fill, crate::shock::Entry::ShockSpeed, 300.0).unwrap_err();
        let error = shot.refused(slow);
        assert_eq!(error.path, "stations");
        assert!(error.to_string().contains("sound speed"), "{error}");
    }
}

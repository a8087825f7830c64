//! The driver of a record: its gas, with a constant heat capacity or that of its temperature.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::check::DEPARTURE;
use super::driven::AIR;
use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::format::significant;
use super::gas::{Component, GasRecord};
use super::optional::{Driver as DriverRecord, Tube as TubeRecord};
use crate::gas::species::named;
use crate::gas::{DRY_AIR, Gas, HeatCapacityModel, HeatCapacityRatio, Portion, ThermallyPerfectGas, departure_from_ideal};
use crate::number::Rational;
use crate::tube::{Driver, DriverError};

/// Departure from the ideal gas above which a second virial coefficient says no more than that it is one (common practice, no source).
const NO_GAS: f64 = 0.15;

/// Calls a function with the driver of a record in a tube.
pub(super) fn with_driver<T>(
    record: &DriverRecord,
    tube: Option<&TubeRecord>,
    use_it: impl FnOnce(&Driver<'_>) -> Result<T, RecordError>,
) -> Result<T, RecordError> {
    let missing = |path: &str, example: &str| {
        let remedy = format!("add it, like {example}");
        RecordError::new(ErrorKind::Field, path, "", "a driver needs its gas and its temperature", remedy)
    };
    let temperature = record.temperature.as_ref().ok_or_else(|| missing("driver.temperature", "\"temperature\": \"295 K\""))?.value();
    let gas = record.gas.as_ref().ok_or_else(|| missing("driver.gas", "\"gas\": { \"He\": \"balance\" }"))?;
    let bores = tube.and_then(|tube| tube.driver_bore.as_ref().zip(tube.driven_bore.as_ref()));
    if let Some((driver, _)) = bores.filter(|(driver, driven)| driver.value().to_f64() < driven.value().to_f64()) {
        let wrong = "a driver that is narrower than the driven section is another flow, which is not computed";
        return Err(RecordError::new(ErrorKind::Value, "tube.driver_bore", driver.typed(), wrong, "check both bores"));
    }
    let ratio = bores.and_then(|(driver, driven)| driver.value().checked_div(driven.value())).and_then(|ratio| ratio.checked_mul(ratio));
    let in_tube = |driver: Driver<'_>| match ratio {
        None => use_it(&driver),
        Some(ratio) => use_it(&driver.with_area_ratio(ratio).map_err(|error| no_driver(&error))?),
    };
    if record.heat_capacity != Some(HeatCapacityModel::Equilibrium) {
        return in_tube(Driver::new(driver_gas(gas, temperature)?, temperature).map_err(|error| no_driver(&error))?);
    }
    let portions = driver_portions(gas)?;
    let mixture = ThermallyPerfectGas::new(&portions).map_err(|error| refused(format!("{error}")))?;
    in_tube(Driver::thermally_perfect(&mixture, temperature).map_err(|error| no_driver(&error))?)
}

/// The name of the first gas of a driver of two, both with the heat capacity at T4, and T4 (K).
pub(super) fn two_gases(record: &DriverRecord) -> Option<(String, [Gas; 2], Rational)> {
    let Some(GasRecord::Mixture(components)) = &record.gas else { return None };
    let [first, second] = &components[..] else { return None };
    let temperature = record.temperature.as_ref()?.value();
    let alone = |component: &Component| {
        let pure = Component { fraction: Rational::ONE, balance: true, ..component.clone() };
        driver_gas(&GasRecord::Mixture(alloc::vec![pure]), temperature).ok()
    };
    Some((first.species.clone(), [alone(first)?, alone(second)?], temperature))
}

/// Flags for what is taken of a driver without being said: its heat capacity, the area of its tube.
pub(super) fn assumed(record: &DriverRecord, tube: Option<&TubeRecord>) -> Vec<Flag> {
    let one_bore = tube.filter(|tube| tube.driver_bore.is_some() != tube.driven_bore.is_some()).map(|_| {
        Flag::new(
            "one-bore",
            "only one of tube.driver_bore and tube.driven_bore is given: driver and driven section are taken as equally wide",
        )
    });
    not_chosen(record).into_iter().chain(one_bore).collect()
}

/// Nothing is picked silently: the flag for a driver of molecules whose record does not choose its heat capacity.
fn not_chosen(record: &DriverRecord) -> Option<Flag> {
    let of_molecules = record.gas.as_ref().is_some_and(|gas| matches!(gas, GasRecord::Mixture(_)) && !gas.is_monatomic());
    (of_molecules && record.heat_capacity.is_none()).then(|| {
        let text = "the record does not choose a heat capacity of the driver: it is taken as constant, that at the temperature of the driver; \"equilibrium\" follows the temperature down to where the data end";
        Flag::new("driver-heat-capacity", text)
    })
}

fn refused(wrong: String) -> RecordError {
    RecordError::new(ErrorKind::Value, "driver.gas", "", wrong, "give species that are built in, or heat_capacity_ratio and molar_mass")
}

/// The refusal of a driver, with the options.
pub(super) fn no_driver(error: &DriverError) -> RecordError {
    let remedy = match error {
        DriverError::TooFast { .. } | DriverError::PressureBeyondRange { .. } => {
            "take a lighter driver gas, a hotter driver or a larger driver bore, or a weaker shock"
        }
        DriverError::ExpandsBeyondData { .. } | DriverError::ConstantOnly => {
            "write \"heat_capacity\": \"constant\" in the driver, or take a hotter driver or a weaker shock"
        }
        _ => "check gas, temperature and bore of the driver",
    };
    RecordError::new(ErrorKind::Value, "driver", "", format!("{error}"), remedy)
}

/// The species of a driver gas; none for one given by its heat capacity ratio.
fn driver_portions(gas: &GasRecord) -> Result<Vec<Portion<'static>>, RecordError> {
    let GasRecord::Mixture(components) = gas else { return Ok(Vec::new()) };
    let mut portions = Vec::new();
    for component in components {
        if component.species == AIR {
            for part in &DRY_AIR {
                let fraction =
                    part.fraction.checked_mul(component.fraction).ok_or_else(|| refused("the fractions have too many digits".into()))?;
                portions.push(Portion { species: part.species, fraction });
            }
            continue;
        }
        let species = named(&component.species).ok_or_else(|| refused(format!("{} is not built in", component.species)))?;
        portions.push(Portion { species, fraction: component.fraction });
    }
    Ok(portions)
}

/// The flag for a driver so dense that its gas is no ideal one.
pub(super) fn dense_driver(record: &DriverRecord, pressure: f64) -> Option<Flag> {
    let portions = driver_portions(record.gas.as_ref()?).ok()?;
    let gas = ThermallyPerfectGas::new(&portions).ok()?;
    let departure = departure_from_ideal(&gas, record.temperature.as_ref()?.value().to_f64(), pressure);
    (departure.abs() > DEPARTURE).then(|| {
        let text = format!(
            "the driver gas departs from an ideal gas by {} % at p4 (second virial coefficient, estimated): {}",
            significant(departure * 100.0, 2),
            if departure.abs() > NO_GAS { "the p4 of an ideal gas does not hold" } else { "p4 is off by about that" }
        );
        Flag::new("real-gas-driver", text)
    })
}

/// A driver gas of constant heat capacity: as typed, the exact one of atoms, or that of the species at the temperature of the driver.
fn driver_gas(gas: &GasRecord, temperature: Rational) -> Result<Gas, RecordError> {
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

#[cfg(test)]
#[path = "driver_tests.rs"]
mod tests;

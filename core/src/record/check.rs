//! Doubts about a result: they become flags.

use alloc::format;
use alloc::vec;
use alloc::vec::Vec;

use super::alternatives::{MATTERS, share};
use super::flag::Flag;
use super::format::significant;
use super::quantity::Absolute;
use super::reduce::{left_aside, station_name};
use super::report::{ReportQuantity, States};
use super::shot::Shot;
use crate::gas::species::Shape;
use crate::gas::{HeatCapacityModel, ThermallyPerfectGas, departure_from_ideal, shortenings};
use crate::number::Rational;
use crate::shock::{ThermalShock, Wave};
use crate::shot::{EndWall, Fit, FitFlags, Outlier, Reduction, Solved};

/// Above this a gas that is not monatomic has an appreciable heat capacity of vibration, K.
const VIBRATION: f64 = 600.0;
/// A heat capacity ratio above this belongs to a gas of atoms.
const MONATOMIC: f64 = 1.6;
/// Species that dissociate above about this temperature, K (common practice, no source).
const DISSOCIATION: [(&str, f64); 3] = [("O2", 2500.0), ("CO2", 2500.0), ("N2", 4500.0)];
/// Noble gases ionise above about this temperature, K (common practice, no source).
const IONISATION: f64 = 8000.0;
/// A departure of fill or driver from an ideal gas that is worth a flag (common practice, no source).
pub(super) const DEPARTURE: f64 = 0.005;
/// Above about this pressure the gas is no ideal gas, Pa (common practice, no source).
const REAL_GAS: f64 = 50.0e5;

pub(super) fn result(shot: &Shot, reduction: &Reduction<'_>, states: &States, step: &ReportQuantity) -> Vec<Flag> {
    let mut flags = left_aside(shot);
    if let Some(fit) = reduction.fit() {
        arrival_times(shot, fit, &mut flags);
    }
    validity(reduction, states, &mut flags);
    flags.extend(end_wall(reduction));
    flags.extend(pressure_change(shot, reduction, states));
    compare_measured(shot, states, step, &mut flags);
    flags
}

/// What the fit doubts. Missing uncertainties and a far last station are flagged when the record is read.
fn arrival_times(shot: &Shot, fit: &Fit, flags: &mut Vec<Flag>) {
    let alpha = significant(fit.attenuation * 100.0, 3);
    let doubts = [
        (
            FitFlags::NO_CHECK,
            "fit-unchecked",
            "no degree of freedom is left: the arrival times cannot be checked against each other".into(),
        ),
        (
            FitFlags::SET_DISAGREES,
            "stations-disagree",
            "the arrival times disagree beyond three standard deviations; with one degree of freedom no station can be named".into(),
        ),
        (
            FitFlags::ATTENUATION_NEGATIVE,
            "attenuation-negative",
            format!("the attenuation is {alpha} %/m, below zero by more than two standard uncertainties: a shock that gains speed"),
        ),
        (
            FitFlags::ATTENUATION_LARGE,
            "attenuation-large",
            format!("the attenuation is {alpha} %/m, above 5 %/m by more than two standard uncertainties"),
        ),
    ];
    flags.extend(doubts.into_iter().filter(|(flag, ..)| fit.flags.contains(*flag)).map(|(_, code, text)| Flag::new(code, text)));
    let text = match fit.outlier {
        None => return,
        Some(Outlier::Allowance) => {
            "the attenuation allowance has the largest standardised residual, beyond 3: the times contradict it".into()
        }
        Some(Outlier::Station(at)) => format!(
            "station {} has the largest standardised residual, beyond 3; the fit keeps it until the record leaves it out with a reason",
            station_name(shot, at)
        ),
    };
    flags.push(Flag::new("outlier", text));
}

/// What state 5 is where the wall is not rigid.
fn end_wall(reduction: &Reduction<'_>) -> Option<Flag> {
    if matches!(reduction.wall(), EndWall::Rigid) {
        return None;
    }
    let speed = significant(reduction.wall_velocity().value, 4);
    let kind = match reduction.wave() {
        Wave::Shock => "a shock runs back from it",
        Wave::Expansion => "it recedes faster than the gas, so an expansion runs back from it and state 5 is the gas that follows it",
        Wave::Vacuum => "it recedes so fast that the gas cannot follow: state 5 is a vacuum",
        Wave::Weak => "it moves with the gas: hardly any wave runs back",
    };
    let elastic = match reduction.wall() {
        EndWall::Yielding(_) => ". This holds until the wave in the wall returns from its back face (7 us for 20 mm of steel)",
        _ => "",
    };
    Some(Flag::new("wall-moves", format!("the end wall moves with {speed} m/s along the incident shock: {kind}{elastic}")))
}

/// Where the model ends.
fn validity(reduction: &Reduction<'_>, states: &States, flags: &mut Vec<Flag>) {
    match reduction.solved() {
        Solved::Constant(incident, _) => {
            let ratio = incident.fill().gas().heat_capacity_ratio().enclosure().middle();
            constant_heat_capacity(ratio, states.reflected.temperature.value, flags);
        }
        Solved::Thermal(shock) => composition(shock, states, flags),
    }
    let pressure = states.reflected.pressure.value;
    if pressure > REAL_GAS {
        let text =
            format!("p5 = {} bar: above about 50 bar the gas departs from the ideal gas of the model", significant(pressure / 1e5, 3));
        flags.push(Flag::new("real-gas", text));
    }
}

fn constant_heat_capacity(ratio: f64, temperature: f64, flags: &mut Vec<Flag>) {
    let kelvin = significant(temperature, 4);
    if ratio < MONATOMIC && temperature > VIBRATION {
        let text = format!(
            "the heat capacity is taken as constant, but at T5 = {kelvin} K molecules vibrate: T5 comes out too high, for nitrogen by about 2 % at Mach 2 and 7 % at Mach 3"
        );
        flags.push(Flag::new("constant-heat-capacity", text));
    }
    if ratio >= MONATOMIC && temperature > IONISATION {
        flags.push(ionisation(&kelvin));
    }
}

fn ionisation(kelvin: &str) -> Flag {
    Flag::new("ionisation", format!("T5 = {kelvin} K: above about {IONISATION} K noble gases ionise, which the model leaves out"))
}

/// What the species of a mixture do at the temperatures of the shot.
fn composition(shock: &ThermalShock<'_>, states: &States, flags: &mut Vec<Flag>) {
    let temperature = states.incident.temperature.value.max(states.reflected.temperature.value);
    let kelvin = significant(temperature, 4);
    let gas = shock.fill().gas();
    let present = || gas.portions().iter().filter(|portion| portion.fraction.is_positive()).map(|portion| portion.species);
    let departure = departure_from_ideal(gas, shock.fill().temperature().nominal(), shock.fill().pressure().nominal());
    if departure.abs() > DEPARTURE {
        let text = format!(
            "the fill departs from an ideal gas by {} % (second virial coefficient, estimated): its density, and with it every state, is off by about that",
            significant(departure * 100.0, 2)
        );
        flags.push(Flag::new("real-gas-fill", text));
    }
    let (coldest, hottest) = gas.range();
    if temperature > hottest || states.reflected.temperature.value < coldest {
        let text = format!(
            "{kelvin} K lies outside the data of this gas, {coldest} K to {hottest} K: \"{}\" does not need them, but nothing is known of the gas there",
            shock.fill().model().name()
        );
        flags.push(Flag::new("beyond-data", text));
    }
    for (name, limit) in DISSOCIATION {
        if temperature > limit && share(gas, name) >= MATTERS {
            let text = format!(
                "at {kelvin} K {name} dissociates (above about {limit} K), which the model of a gas of fixed composition leaves out"
            );
            flags.push(Flag::new("dissociation", text));
        }
    }
    let noble = present().any(|species| ["He", "Ne", "Ar", "Kr", "Xe"].contains(&species.name));
    if noble && temperature > IONISATION {
        flags.push(ionisation(&kelvin));
    }
    let vibrates = present().any(|species| species.shape != Shape::Atom);
    if vibrates && shock.fill().model() == HeatCapacityModel::Constant && temperature > VIBRATION {
        let text =
            format!("the heat capacity is taken as that of the fill, but at {kelvin} K molecules vibrate: compare the other choices");
        flags.push(Flag::new("constant-heat-capacity", text));
    }
    flags.extend(shortened_relaxation(gas));
}

/// One flag for each species that shortens the relaxation of others.
fn shortened_relaxation(gas: &ThermallyPerfectGas<'_>) -> Vec<Flag> {
    // Air that leaked in brings a species in twice.
    let mut pairs: Vec<(&str, Vec<&str>)> = Vec::new();
    for remark in shortenings(gas).filter(|remark| share(gas, remark.species) >= MATTERS) {
        match pairs.iter_mut().find(|(by, _)| *by == remark.by) {
            Some((_, shortened)) if shortened.contains(&remark.species) => {}
            Some((_, shortened)) => shortened.push(remark.species),
            None => pairs.push((remark.by, vec![remark.species])),
        }
    }
    let flag = |(by, shortened): (&str, Vec<&str>)| {
        let percent = significant(share(gas, by) * 100.0, 3);
        let text = format!(
            "{by} ({percent} % by mole) can shorten the vibrational relaxation of {} by a factor of 10 to 1000: then the relaxation times of this report are upper limits",
            shortened.join(", ")
        );
        Flag::new("relaxation-shortened", text)
    };
    pairs.into_iter().map(flag).collect()
}

/// The temperature after a measured change of the pressure at the end wall.
fn pressure_change(shot: &Shot, reduction: &Reduction<'_>, states: &States) -> Option<Flag> {
    let change = shot.measured.as_ref()?.pressure_change.as_ref()?;
    let factor = Rational::ONE.checked_add(change.value())?;
    let temperature = states.reflected.temperature.value;
    let later = match reduction.solved() {
        Solved::Constant(incident, _) => incident.fill().gas().heat_capacity_ratio().isentropic_temperature(temperature, factor),
        // With the heat capacity of state 5.
        Solved::Thermal(shock) => shock.heat_capacity_5().isentropic_temperature(temperature, factor),
    };
    let percent = significant(change.value().to_f64() * 100.0, 3);
    let text = match later {
        Ok(later) => format!(
            "after the pressure changed by {percent} % the temperature is {} K, if the change is isentropic; T5 and p5 are those just behind the reflected shock",
            significant(later.middle(), 5)
        ),
        Err(error) => format!("the temperature after the pressure changed by {percent} % is not known: {error}"),
    };
    Some(Flag::new("pressure-change", text))
}

fn compare_measured(shot: &Shot, states: &States, step: &ReportQuantity, flags: &mut Vec<Flag>) {
    let Some(measured) = &shot.measured else { return };
    let rise = measured.rise.as_ref().and_then(|rise| rise.absolute(None));
    let of = |pair: &Option<(super::Quantity, Absolute)>| pair.as_ref().map(|(_, absolute)| *absolute);
    let pairs = [
        ("pressure_2", of(&measured.pressure_2), &states.incident.pressure),
        ("pressure_5", of(&measured.pressure_5), &states.reflected.pressure),
        ("rise", rise, step),
    ];
    for (name, value, computed) in pairs {
        if let Some(value) = value {
            flags.push(comparison(name, value, computed));
        }
    }
}

/// Compared by the difference over its standard uncertainty; both share the fill, which makes the true one a little smaller.
fn comparison(name: &str, measured: Absolute, computed: &ReportQuantity) -> Flag {
    let difference = measured.value.to_f64() - computed.value;
    let percent = format!("{:+.2} %", 100.0 * difference / computed.value);
    let (Some(a), Some(b)) = (measured.standard_uncertainty, computed.standard_uncertainty) else {
        let text = format!("measured.{name} is {percent} from the computed value; without both uncertainties that cannot be judged");
        return Flag::new("measured-not-judged", text);
    };
    let spread = libm::hypot(a, b);
    if difference.abs() > 2.0 * spread {
        let text = format!("measured.{name} is {percent} from the computed value, more than two standard uncertainties of the difference");
        return Flag::new("measured-disagrees", text);
    }
    let text = format!(
        "measured.{name} is {percent} from the computed value, within two standard uncertainties of the difference; a pressure that agrees does not prove the gas or its temperature"
    );
    Flag::new("measured-agrees", text)
}

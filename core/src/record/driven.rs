//! The driven gas of a record, ready to be computed: species found, air and leak put in, uncertainties of the composition as changes of the mixture.

use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::format::significant;
use super::gas::{Component, GasRecord};
use super::leak;
use super::shot::Shot;
use crate::gas::species::{Species, named, table};
use crate::gas::{DRY_AIR, Group, HeatCapacityModel, MixtureChange, Portion, ThermallyPerfectGas, humid_air, water_saturation_pressure};
use crate::number::Rational;
use crate::shot::{DrivenGas, Uncertainty};

/// The name under which a record asks for air.
pub(super) const AIR: &str = "air";

/// Relative standard uncertainty of what heat capacities exceed those of translation and rotation by: published descriptions of the same species differ
/// by about 0.3 % of `c_p` (NASA/TP-2002-211556 against Shomate fits of the JANAF tables), which is about 1 % of the part that vibration contributes.
pub const GAS_DATA: f64 = 0.01;

/// What a gas was made of, for the report.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct GasNotes {
    /// Data and composition in a phrase.
    pub source: String,
    /// What the reader must know.
    pub flags: Vec<Flag>,
}

/// A mixture under construction.
#[derive(Default)]
struct Mixed<'a> {
    portions: Vec<(Species<'a>, Rational)>,
    changes: Vec<(MixtureChange, Uncertainty)>,
    notes: GasNotes,
}

impl Shot {
    /// Calls a function with the driven gas: its species found, air and leak put in, for shocks other than the recorded one.
    ///
    /// # Errors
    /// A species that is unknown, a mixture whose data have no range in common, a humidity without air.
    ///
    /// ```
    /// # let file = r#"{ "record": "shot/1", "gas": { "N2": "balance" }, "heat_capacity": "equilibrium",
    /// #   "fill": { "pressure": "10 kPa", "temperature": "295 K" }, "shock_speed": "1050 m/s" }"#;
    /// use endwall::shock::{Entry, Output, ThermalFill, ThermalShock};
    /// use endwall::shot::DrivenGas;
    /// let shot = endwall::record::Shot::read(file.as_bytes())?;
    /// let mach = shot.with_driven_gas(|gas, notes| {
    ///     assert!(notes.source.starts_with("NASA/TP-2002-211556"));
    ///     let DrivenGas::ThermallyPerfect { gas, model, .. } = gas else { panic!("it is given by its species") };
    ///     let fill = ThermalFill::new(gas, model, 10e3, 295.0).unwrap();
    ///     ThermalShock::new(&fill, Entry::ShockSpeed, 1050.0).unwrap().nearest(Output::Mach)
    /// })?;
    /// assert!((mach - 2.999).abs() < 1e-3); // the speed of sound is 350.1 m/s
    /// # Ok::<(), endwall::record::RecordError>(())
    /// ```
    pub fn with_driven_gas<T>(&self, compute: impl FnOnce(DrivenGas<'_>, &GasNotes) -> T) -> Result<T, RecordError> {
        self.with_gas(self.heat_capacity, |gas, notes| Ok(compute(gas, &notes)))
    }

    /// Calls a function with the driven gas, for a choice of heat capacity.
    ///
    /// # Errors
    /// A species that is unknown, a mixture whose data have no range in common, a humidity without air.
    pub(super) fn with_gas<T>(
        &self,
        model: HeatCapacityModel,
        compute: impl FnOnce(DrivenGas<'_>, GasNotes) -> Result<T, RecordError>,
    ) -> Result<T, RecordError> {
        if let Some((gas, notes)) = self.constant_gas(model)? {
            return compute(gas, notes);
        }
        let GasRecord::Mixture(components) = &self.gas else { return Err(too_long()) };
        let mixed = self.mixed(components)?;
        let portions: Vec<Portion<'_>> =
            mixed.portions.iter().map(|(species, fraction)| Portion { species, fraction: *fraction }).collect();
        let gas = ThermallyPerfectGas::new(&portions).map_err(|error| self.refused(error))?;
        compute(DrivenGas::ThermallyPerfect { gas, model, changes: &mixed.changes }, mixed.notes)
    }

    /// Calls a function with the species of the gas, air and leak put in; `None` for a gas given by its heat capacity ratio.
    pub(super) fn with_portions<T>(&self, compute: impl FnOnce(&[Portion<'_>]) -> T) -> Option<T> {
        let GasRecord::Mixture(components) = &self.gas else { return None };
        let mixed = self.mixed(components).ok()?;
        let portions: Vec<Portion<'_>> =
            mixed.portions.iter().map(|(species, fraction)| Portion { species, fraction: *fraction }).collect();
        Some(compute(&portions))
    }

    /// A gas of constant heat capacity, for which closed forms give the narrowest enclosures: given by its ratio, or a mixture of helium, neon and
    /// argon with `"constant"`.
    fn constant_gas(&self, model: HeatCapacityModel) -> Result<Option<(DrivenGas<'static>, GasNotes)>, RecordError> {
        let by_ratio = matches!(self.gas, GasRecord::Ratio { .. });
        if !by_ratio && (model != HeatCapacityModel::Constant || self.leak.is_some() || self.humidity.is_some() || !self.gas.is_monatomic())
        {
            return Ok(None);
        }
        if let (true, Some(path)) = (by_ratio, self.humidity.as_ref().map(|_| "humidity").or(self.leak.as_ref().map(|_| "leak"))) {
            let wrong = "a gas given by its heat capacity ratio has no composition into which air or water could be put";
            return Err(RecordError::new(ErrorKind::Field, path, "", wrong, "give the gas by its species, or leave the field out"));
        }
        let gas = self.gas.constant(model)?;
        let exact = |value: Rational, uncertainty: Option<f64>| crate::shot::Measured::new(value, uncertainty.unwrap_or(0.0));
        let taken =
            if gas.heat_capacity_ratio_uncertainty.is_none() && gas.molar_mass_uncertainty.is_none() { ", taken as exact" } else { "" };
        let notes = GasNotes { source: format!("{}{taken}", gas.source), flags: Vec::new() };
        let driven = DrivenGas::ConstantHeatCapacity {
            heat_capacity_ratio: exact(gas.heat_capacity_ratio, gas.heat_capacity_ratio_uncertainty),
            molar_mass: exact(gas.molar_mass, gas.molar_mass_uncertainty),
        };
        Ok(Some((driven, notes)))
    }

    fn mixed<'a>(&'a self, components: &'a [Component]) -> Result<Mixed<'a>, RecordError> {
        let mut mixed = Mixed::default();
        let mut groups = Vec::new();
        for component in components {
            let first = mixed.portions.len();
            if component.species == AIR {
                self.add_air(&mut mixed, component.fraction)?;
            } else {
                mixed.portions.push((self.species_named(&component.species)?, component.fraction));
            }
            groups.push(Group { first, count: mixed.portions.len() - first });
        }
        if self.humidity.is_some() && !components.iter().any(|component| component.species == AIR) {
            let remedy = "leave the field out, or name the air: \"gas\": { \"air\": \"balance\" }";
            return Err(RecordError::new(ErrorKind::Field, "humidity", "", "the gas contains no air that could be humid", remedy));
        }
        let balance = components.iter().zip(&groups).find(|(component, _)| component.balance).map(|(_, group)| *group);
        for (component, group) in components.iter().zip(&groups) {
            if let Some(standard) = component.standard_uncertainty.filter(|standard| *standard > 0.0) {
                let change = balance.map_or(MixtureChange::Addition(*group), |less| MixtureChange::Exchange { more: *group, less });
                mixed.changes.push((change, Uncertainty::standard(standard)));
            }
        }
        if components.iter().all(|component| component.standard_uncertainty.is_none()) {
            mixed.notes.source = ", composition taken as exact".into();
        }
        self.add_leak(&mut mixed)?;
        if mixed.portions.iter().any(|(species, _)| species.shape != crate::gas::species::Shape::Atom) {
            mixed.changes.push((MixtureChange::Data, Uncertainty::standard(GAS_DATA)));
        }
        let own = if self.species.is_empty() { "" } else { " and of the record" };
        mixed.notes.source = format!("NASA/TP-2002-211556{own}{}", mixed.notes.source);
        Ok(mixed)
    }

    /// The species that a record means: one of its own, or of the table.
    fn species_named(&self, name: &str) -> Result<Species<'_>, RecordError> {
        if let Some(own) = self.species.iter().find(|own| own.name == name) {
            return Ok(own.species());
        }
        named(name).copied().ok_or_else(|| {
            let mut known: Vec<&str> = table::ALL.iter().map(|species| species.name).collect();
            known.push(AIR);
            let alike = known
                .iter()
                .find(|known| known.eq_ignore_ascii_case(name.trim()))
                .map_or(String::new(), |alike| format!("was {alike} meant? "));
            let remedy = format!("{alike}built in are {}; others are described under \"species\"", known.join(", "));
            RecordError::new(ErrorKind::Value, &format!("gas.{name}"), "", "this species is unknown", remedy)
        })
    }

    /// Dry air, or humid air by the humidity of the record, measured at the temperature of the fill and the ambient pressure.
    fn add_air(&self, mixed: &mut Mixed<'_>, fraction: Rational) -> Result<(), RecordError> {
        let scaled = |part: &Portion<'static>| part.fraction.checked_mul(fraction).ok_or_else(too_long);
        let Some(humidity) = &self.humidity else {
            for part in &DRY_AIR {
                mixed.portions.push((*part.species, scaled(part)?));
            }
            return Ok(());
        };
        let temperature = self.fill.temperature.value().to_f64();
        let (pressure, of) = match &self.ambient {
            Some(ambient) => (ambient.value().to_f64(), "ambient pressure"),
            None => (self.fill.absolute.value.to_f64(), "fill pressure"),
        };
        let relative = humidity.value().to_f64();
        let refused = |error| {
            RecordError::new(
                ErrorKind::Value,
                "humidity",
                humidity.typed(),
                format!("{error}"),
                "check it, the temperature and the ambient pressure",
            )
        };
        let parts = humid_air(temperature, pressure, relative).map_err(refused)?;
        let first = mixed.portions.len();
        for part in &parts {
            mixed.portions.push((*part.species, scaled(part)?));
        }
        let water = Group::one(first + DRY_AIR.len());
        let saturated = water_saturation_pressure(temperature).map_err(refused)? / pressure;
        if let Some(standard) = humidity.standard_uncertainty().filter(|standard| *standard > 0.0) {
            let change = MixtureChange::Exchange { more: water, less: Group { first, count: DRY_AIR.len() } };
            mixed.changes.push((change, Uncertainty::standard(standard * saturated * fraction.to_f64())));
        }
        let text = format!(
            "the air holds {} % of water by mole, from its relative humidity at the temperature of the fill and the {of} (saturation pressure: IAPWS-IF97)",
            significant(100.0 * relative * saturated, 3)
        );
        mixed.notes.flags.push(Flag::new("humid-air", text));
        Ok(())
    }

    /// Air that leaked in takes the place of a part of everything else.
    fn add_leak(&self, mixed: &mut Mixed<'_>) -> Result<(), RecordError> {
        let Some(stated) = &self.leak else { return Ok(()) };
        let (fraction, standard) = stated.fraction(self.fill.absolute.value.to_f64());
        if fraction.is_nan() || fraction >= 0.5 {
            let wrong = format!("{} % of the fill would be air that leaked in", significant(fraction * 100.0, 3));
            return Err(RecordError::new(ErrorKind::Value, "leak", "", wrong, "check the rate, its unit and the waiting time"));
        }
        // Nine decimals keep the products of fractions within exact integers.
        let air = Rational::ratio(libm::rint(fraction * 1e9) as u128, 1_000_000_000).unwrap_or(Rational::ZERO);
        let rest = Rational::ONE.checked_sub(air).ok_or_else(too_long)?;
        for (_, own) in &mut mixed.portions {
            *own = own.checked_mul(rest).ok_or_else(too_long)?;
        }
        let first = mixed.portions.len();
        for part in &DRY_AIR {
            mixed.portions.push((*part.species, part.fraction.checked_mul(air).ok_or_else(too_long)?));
        }
        if standard > 0.0 {
            // The rest shrinks as a whole: one more unit of air takes one unit of the mixture.
            let change = MixtureChange::Exchange { more: Group { first, count: DRY_AIR.len() }, less: Group { first: 0, count: first } };
            mixed.changes.push((change, Uncertainty::standard(standard)));
        }
        mixed.notes.flags.push(Flag::new("leak", leak::text(fraction)));
        Ok(())
    }
}

fn too_long() -> RecordError {
    let wrong = "the fractions have too many digits to be multiplied exactly";
    RecordError::new(ErrorKind::Value, "gas", "", wrong, "type fewer digits")
}

#[cfg(test)]
#[path = "driven_tests.rs"]
mod tests;

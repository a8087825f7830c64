//! The gas of a record: species and fractions, or a heat capacity ratio and a molar mass.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::cmp::Ordering;

use super::error::{ErrorKind, RecordError};
use super::flag::Flag;
use super::quantity::Quantity;
use super::read::{self, Fields, Reading};
use super::tree::Node;
use super::unit::Dimension;
use crate::gas::HeatCapacityModel;
use crate::number::Rational;

/// One species of a mixture.
#[derive(Clone, Debug, PartialEq)]
pub struct Component {
    /// The name as typed.
    pub species: String,
    /// The exact mole fraction, after the balance is taken or the sum normalised.
    pub fraction: Rational,
    /// Its standard uncertainty; `None` where none was typed, and for the balance.
    pub standard_uncertainty: Option<f64>,
    /// True for the species typed as `"balance"`.
    pub balance: bool,
}

/// The gas as recorded.
#[derive(Clone, Debug, PartialEq)]
#[expect(clippy::large_enum_variant, reason = "a record holds one or two of these")]
pub enum GasRecord {
    /// Constant heat capacity, given by two numbers.
    Ratio {
        /// γ.
        heat_capacity_ratio: Quantity,
        /// kg/mol.
        molar_mass: Quantity,
    },
    /// Species and mole fractions, in the order of the file.
    Mixture(Vec<Component>),
}

/// A gas of constant heat capacity, ready to be computed.
#[derive(Clone, Debug, PartialEq)]
pub struct ConstantGas {
    /// γ, exact.
    pub heat_capacity_ratio: Rational,
    /// Standard uncertainty of γ; `None` where none was stated.
    pub heat_capacity_ratio_uncertainty: Option<f64>,
    /// kg/mol, exact.
    pub molar_mass: Rational,
    /// Standard uncertainty of the molar mass, kg/mol; `None` where none was stated.
    pub molar_mass_uncertainty: Option<f64>,
    /// Where the two numbers come from.
    pub source: &'static str,
}

/// Molar masses of the gases whose heat capacity is 5/2 R at any temperature of interest, in units of 1e-7 g/mol: the
/// values of the NASA Glenn data set (B. J. `McBride`, M. J. Zehe, S. Gordon, NASA/TP-2002-211556), which are the standard
/// atomic weights of IUPAC at that time.
const MONATOMIC: [(&str, i64); 3] = [("He", 40_026_020), ("Ne", 201_797_000), ("Ar", 399_480_000)];

impl GasRecord {
    /// The gas as one of constant heat capacity: as typed, or a mixture of helium, neon and argon (γ = 5/3, molar mass
    /// Σ x W) where `heat_capacity` is `"constant"`.
    ///
    /// The uncertainty of a mixture's molar mass is √Σ u²(W − B)², with B that of the balance gas, or of the mixture
    /// where the fractions were normalised.
    ///
    /// # Errors
    /// A species or a `heat_capacity` that this version does not compute, with the remedy.
    pub fn constant(&self, heat_capacity: HeatCapacityModel) -> Result<ConstantGas, RecordError> {
        let components = match self {
            Self::Ratio { heat_capacity_ratio, molar_mass } => {
                return Ok(ConstantGas {
                    heat_capacity_ratio: heat_capacity_ratio.value(),
                    heat_capacity_ratio_uncertainty: heat_capacity_ratio.standard_uncertainty(),
                    molar_mass: molar_mass.value(),
                    molar_mass_uncertainty: molar_mass.standard_uncertainty(),
                    source: "heat capacity ratio and molar mass as typed",
                });
            }
            Self::Mixture(components) => components,
        };
        let unavailable = |path: &str, typed: &str, wrong: &str| {
            let remedy =
                "give the gas as { \"heat_capacity_ratio\": …, \"molar_mass\": … }, or leave it to a report, which computes any species";
            RecordError::new(ErrorKind::Value, path, typed, wrong, remedy)
        };
        if heat_capacity != HeatCapacityModel::Constant {
            return Err(unavailable("heat_capacity", heat_capacity.name(), "a closed form needs a constant heat capacity"));
        }
        let too_long = || unavailable("gas", "", "the fractions have too many digits for an exact molar mass");
        let mut masses = Vec::new();
        let mut mean = Rational::ZERO;
        for component in components {
            let species = component.species.as_str();
            let Some(mass) = monatomic(species) else {
                let wrong = "a closed form takes helium, neon and argon only";
                return Err(unavailable(&format!("gas.{species}"), "", wrong));
            };
            mean = mass.checked_mul(component.fraction).and_then(|part| mean.checked_add(part)).ok_or_else(too_long)?;
            masses.push(mass.to_f64());
        }
        let pairs = || components.iter().zip(&masses);
        let reference = pairs().find(|(component, _)| component.balance).map_or(mean.to_f64(), |(_, mass)| *mass);
        let known = components.iter().any(|component| component.standard_uncertainty.is_some());
        let variance: f64 = pairs()
            .map(|(component, mass)| component.standard_uncertainty.unwrap_or(0.0) * (mass - reference))
            .map(|part| part * part)
            .sum();
        Ok(ConstantGas {
            heat_capacity_ratio: Rational::ratio(5, 3).unwrap_or(Rational::ONE),
            heat_capacity_ratio_uncertainty: None,
            molar_mass: mean,
            molar_mass_uncertainty: known.then(|| libm::sqrt(variance)),
            source: "heat capacity 5/2 R; molar masses of NASA/TP-2002-211556",
        })
    }
}

impl GasRecord {
    /// True for a mixture of gases whose heat capacity is 5/2 R at any temperature of interest.
    pub(super) fn is_monatomic(&self) -> bool {
        match self {
            Self::Ratio { .. } => false,
            Self::Mixture(components) => components.iter().all(|component| monatomic(&component.species).is_some()),
        }
    }
}

/// kg/mol.
fn monatomic(species: &str) -> Option<Rational> {
    let (_, units) = MONATOMIC.iter().find(|(name, _)| *name == species)?;
    Rational::integer(*units).checked_div(Rational::integer(10_000_000_000))
}

/// Reads `gas`; `path` is `gas` or `driver.gas`.
pub(super) fn read(node: &Node, path: &str, reading: &mut Reading, flags: &mut Vec<Flag>) -> Result<GasRecord, RecordError> {
    let fields = Fields::new(node, path)?;
    if fields.get("heat_capacity_ratio").is_some() || fields.get("molar_mass").is_some() {
        return ratio(fields, path, reading);
    }
    if fields.entries().is_empty() {
        let remedy = "write { \"Ar\": \"98.5 %\", … } or { \"heat_capacity_ratio\": \"5/3\", \"molar_mass\": \"39.948 g/mol\" }";
        return Err(RecordError::new(ErrorKind::Field, path, "", "no gas is given", remedy));
    }
    mixture(fields, path, reading, flags)
}

fn ratio(fields: Fields, path: &str, reading: &mut Reading) -> Result<GasRecord, RecordError> {
    fields.allow(&["heat_capacity_ratio", "molar_mass"])?;
    let heat_capacity_ratio = fields.required_quantity(reading, "heat_capacity_ratio", Dimension::Ratio, "5/3")?;
    let molar_mass = fields.required_quantity(reading, "molar_mass", Dimension::MolarMass, "39.948 g/mol")?;
    check_ratio(&heat_capacity_ratio, &format!("{path}.heat_capacity_ratio"), reading)?;
    let at = format!("{path}.molar_mass");
    let grams = molar_mass.value().to_f64() * 1000.0;
    if grams <= 0.0 {
        return Err(RecordError::new(
            ErrorKind::Value,
            &at,
            molar_mass.typed(),
            "a molar mass is greater than zero",
            "argon has 39.948 g/mol",
        ));
    }
    if grams < 1.0 {
        reading.ask(&at, molar_mass.typed(), "no gas is lighter than 1 g/mol; was kg/mol meant?")?;
    }
    if grams > 1000.0 {
        reading.ask(&at, molar_mass.typed(), "no common gas is heavier than 1 kg/mol; was g/mol meant?")?;
    }
    Ok(GasRecord::Ratio { heat_capacity_ratio, molar_mass })
}

fn check_ratio(ratio: &Quantity, path: &str, reading: &mut Reading) -> Result<(), RecordError> {
    let value = ratio.value();
    let one_and_two_thirds = Rational::ratio(5, 3).unwrap_or(Rational::ONE);
    let fail = |wrong: &str| RecordError::new(ErrorKind::Value, path, ratio.typed(), wrong, "write a ratio like 5/3, 7/5 or 1.29");
    if compare(value, Rational::ONE) != Ordering::Greater {
        return Err(fail("a heat capacity ratio is greater than one"));
    }
    if compare(value, Rational::integer(3)) == Ordering::Greater {
        return Err(fail("no gas has a heat capacity ratio above three"));
    }
    if value == one_and_two_thirds {
        return Ok(());
    }
    // From 1.66, cut off instead of rounded, to 1.67.
    if (value.to_f64() - 5.0 / 3.0).abs() < 0.007 {
        return reading.ask(path, ratio.typed(), "was 5/3 meant? A rounded ratio moves every state");
    }
    if compare(value, one_and_two_thirds) == Ordering::Greater {
        return reading.ask(path, ratio.typed(), "no ideal gas exceeds 5/3; is the ratio right?");
    }
    Ok(())
}

/// Exact where 128 bits hold the difference, otherwise by the nearest doubles.
pub(super) fn compare(a: Rational, b: Rational) -> Ordering {
    a.compare(b).unwrap_or_else(|| a.to_f64().total_cmp(&b.to_f64()))
}

fn mixture(fields: Fields, path: &str, reading: &mut Reading, flags: &mut Vec<Flag>) -> Result<GasRecord, RecordError> {
    let mut components: Vec<Component> = Vec::new();
    let mut sum = Rational::ZERO;
    let too_long = |at: &str, typed: &str| {
        RecordError::new(ErrorKind::Value, at, typed, "the fractions have too many digits to be added exactly", "type fewer digits")
    };
    for (species, node) in fields.entries() {
        let at = fields.path_of(species);
        if species.trim().is_empty() || species.chars().count() > 40 {
            return Err(RecordError::new(
                ErrorKind::Field,
                &at,
                node.typed(),
                "this is not the name of a species",
                "write a formula like CH4",
            ));
        }
        if matches!(node, Node::Text(text) if text.trim() == "balance") {
            if let Some(first) = components.iter().find(|component| component.balance) {
                let wrong = format!("{} is the balance already", first.species);
                return Err(RecordError::new(ErrorKind::Value, &at, "balance", wrong, "give this species a fraction"));
            }
            components.push(Component { species: species.clone(), fraction: Rational::ZERO, standard_uncertainty: None, balance: true });
            continue;
        }
        let quantity = read::quantity(reading, node, &at, Dimension::Fraction)?;
        let fraction = quantity.value();
        let fail = |wrong: &str, remedy: &str| RecordError::new(ErrorKind::Value, &at, quantity.typed(), wrong, remedy);
        if fraction.is_negative() {
            return Err(fail("a fraction is zero or more", "correct the sign"));
        }
        if compare(fraction, Rational::ONE) == Ordering::Greater {
            let remedy = if quantity.unit().symbol().is_empty() {
                "was % meant? Write it like \"1.00 %\""
            } else {
                "correct the number or the unit"
            };
            return Err(fail("a fraction is one at most", remedy));
        }
        if quantity.standard_uncertainty().is_some_and(|u| u > fraction.to_f64() && !fraction.is_zero()) {
            reading.ask(
                &at,
                quantity.typed(),
                "the uncertainty exceeds the fraction; for a percentage of the value write \"0.50 ± 2 % %\"",
            )?;
        }
        sum = sum.checked_add(fraction).ok_or_else(|| too_long(&at, quantity.typed()))?;
        components.push(Component {
            species: species.clone(),
            fraction,
            standard_uncertainty: quantity.standard_uncertainty(),
            balance: false,
        });
    }
    let rest = Rational::ONE.checked_sub(sum).ok_or_else(|| too_long(path, ""))?;
    if let Some(balance) = components.iter_mut().find(|component| component.balance) {
        if !rest.is_positive() {
            let wrong = format!("nothing is left for the balance: the other fractions sum to {}", sum.to_f64());
            let at = fields.path_of(&balance.species);
            return Err(RecordError::new(ErrorKind::Value, &at, "balance", wrong, "correct the fractions, or their units"));
        }
        balance.fraction = rest;
    } else if !rest.is_zero() {
        let tolerance = Rational::ratio(1, 1_000_000).unwrap_or(Rational::ZERO);
        if compare(rest.abs(), tolerance) == Ordering::Greater {
            let wrong = format!("the fractions sum to {}, not to one", sum.to_f64());
            let remedy = "correct them within 1e-6, or type one of them as \"balance\"";
            return Err(RecordError::new(ErrorKind::Value, path, "", wrong, remedy));
        }
        for component in &mut components {
            component.fraction = component.fraction.checked_div(sum).ok_or_else(|| too_long(path, ""))?;
        }
        let text = format!("the fractions of {path} sum to {} and were divided by that sum, exactly", sum.to_f64());
        flags.push(Flag::new("fractions-normalised", text));
    }
    Ok(GasRecord::Mixture(components))
}

/// Reads `heat_capacity`. A ratio implies it; a mixture without it gets the full heat capacity, and the report says so.
pub(super) fn heat_capacity(typed: Option<&str>, gas: &GasRecord, flags: &mut Vec<Flag>) -> Result<HeatCapacityModel, RecordError> {
    let path = "heat_capacity";
    let choices = || HeatCapacityModel::ALL.map(|choice| format!("\"{}\"", choice.name())).join(", ");
    let by_ratio = matches!(gas, GasRecord::Ratio { .. });
    let Some(typed) = typed else {
        if by_ratio {
            return Ok(HeatCapacityModel::Constant);
        }
        let text = "the record does not choose a heat capacity: vibration is taken as in equilibrium in every state; the other choices stand beside";
        flags.push(Flag::new("heat-capacity-not-chosen", text));
        return Ok(HeatCapacityModel::Equilibrium);
    };
    let found = HeatCapacityModel::ALL.into_iter().find(|choice| choice.name() == typed);
    match found {
        None => {
            Err(RecordError::new(ErrorKind::Value, path, typed, "this heat capacity is unknown", format!("write one of {}", choices())))
        }
        Some(choice) if by_ratio && choice != HeatCapacityModel::Constant => {
            let wrong = "a gas given by its heat capacity ratio has a constant heat capacity";
            let remedy = "leave the field out or write \"constant\"; give species for the other choices";
            Err(RecordError::new(ErrorKind::Value, path, typed, wrong.to_string(), remedy))
        }
        Some(choice) => Ok(choice),
    }
}

#[cfg(test)]
#[path = "gas_tests.rs"]
mod tests;

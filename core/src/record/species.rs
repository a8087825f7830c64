//! Species that a record brings along.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::error::{ErrorKind, RecordError};
use super::read::{Fields, Reading};
use super::tree::Node;
use super::unit::Dimension;
use crate::gas::RANGES;
use crate::gas::species::{Coefficient, Shape, Species, SpeciesRange, named};
use crate::number::Rational;

/// A species of the record: nine-coefficient polynomials, in the form of [`SpeciesRange`].
#[derive(Clone, Debug, PartialEq)]
pub struct OwnSpecies {
    /// Its name.
    pub name: String,
    /// kg/mol.
    pub molar_mass: Coefficient,
    /// Atom, linear or other.
    pub shape: Shape,
    /// Ranges in rising order.
    pub ranges: Vec<SpeciesRange>,
}

impl OwnSpecies {
    /// As the floors below take it.
    pub fn species(&self) -> Species<'_> {
        Species { name: &self.name, molar_mass: self.molar_mass, shape: self.shape, ranges: &self.ranges }
    }
}

const EXAMPLE: &str = "{ \"from\": \"200 K\", \"to\": \"1000 K\", \"heat_capacity\": [a1, a2, a3, a4, a5, a6, a7], \"enthalpy\": b1 }";

/// Reads `species`: an object from names to `molar_mass`, `shape` and `ranges`.
pub(super) fn read(fields: Fields, reading: &mut Reading) -> Result<Vec<OwnSpecies>, RecordError> {
    let Some(node) = fields.get("species") else { return Ok(Vec::new()) };
    let all = Fields::new(node, "species")?;
    all.entries().iter().map(|(name, node)| one(name, node, &all.path_of(name), reading)).collect()
}

fn one(name: &str, node: &Node, path: &str, reading: &mut Reading) -> Result<OwnSpecies, RecordError> {
    let fields = Fields::new(node, path)?;
    fields.allow(&["molar_mass", "shape", "ranges"])?;
    let fail = |path: &str, typed: &str, wrong: &str, remedy: &str| Err(RecordError::new(ErrorKind::Value, path, typed, wrong, remedy));
    if named(name).is_some() || name == super::driven::AIR {
        return fail(path, name, "a species of this name is built in", "give yours another name, so that nobody takes one for the other");
    }
    let molar_mass = fields.required_quantity(reading, "molar_mass", Dimension::MolarMass, "100.2 g/mol")?;
    let mass = Coefficient::try_from(molar_mass.value());
    let Ok(mass) = mass else {
        return fail(&fields.path_of("molar_mass"), molar_mass.typed(), "the number has too many digits", "type 18 digits at most");
    };
    let shape = match fields.text("shape")? {
        Some("atom") => Shape::Atom,
        Some("linear") => Shape::Linear,
        Some("other") => Shape::Other,
        typed => {
            let wrong = "the shape of the molecule fixes its heat capacity with frozen vibration";
            return fail(&fields.path_of("shape"), typed.unwrap_or(""), wrong, "write \"atom\", \"linear\" or \"other\"");
        }
    };
    let at = fields.path_of("ranges");
    let Some(nodes) = fields.list("ranges")? else {
        return fail(&at, "", "the field is missing", &format!("add \"ranges\": [ {EXAMPLE}, … ]"));
    };
    if nodes.is_empty() || nodes.len() > RANGES {
        return fail(&at, "", &format!("{} ranges are given", nodes.len()), &format!("give one to {RANGES}"));
    }
    let mut ranges = Vec::new();
    for (index, node) in nodes.iter().enumerate() {
        ranges.push(range(node, &format!("{at}[{index}]"), reading)?);
    }
    let own = OwnSpecies { name: name.to_string(), molar_mass: mass, shape, ranges };
    match own.species().check() {
        Ok(()) => Ok(own),
        Err(error) => fail(path, "", &format!("{error}"), "compare every coefficient with its source"),
    }
}

fn range(node: &Node, path: &str, reading: &mut Reading) -> Result<SpeciesRange, RecordError> {
    let fields = Fields::new(node, path)?;
    fields.allow(&["from", "to", "heat_capacity", "enthalpy"])?;
    let low = fields.required_quantity(reading, "from", Dimension::Temperature, "200 K")?.value().to_f64();
    let high = fields.required_quantity(reading, "to", Dimension::Temperature, "1000 K")?.value().to_f64();
    let at = fields.path_of("heat_capacity");
    let nodes = fields.list("heat_capacity")?.unwrap_or(&[]);
    if nodes.len() != 7 {
        let wrong = format!("{} coefficients stand where a1 to a7 are wanted", nodes.len());
        return Err(RecordError::new(
            ErrorKind::Value,
            &at,
            "",
            wrong,
            format!("write the range like {EXAMPLE}; a coefficient that is not there is 0"),
        ));
    }
    let mut heat_capacity = [Coefficient::new(0, 0); 7];
    for (index, (place, node)) in heat_capacity.iter_mut().zip(nodes).enumerate() {
        *place = coefficient(node, &format!("{at}[{index}]"))?;
    }
    let enthalpy = coefficient(fields.required("enthalpy", "-1043.97")?, &fields.path_of("enthalpy"))?;
    Ok(SpeciesRange { low, high, heat_capacity, enthalpy })
}

fn coefficient(node: &Node, path: &str) -> Result<Coefficient, RecordError> {
    let typed = node.typed();
    let number = typed.trim().parse::<Rational>().ok().and_then(|number| Coefficient::try_from(number).ok());
    number.ok_or_else(|| {
        let remedy = "write it with 18 digits at most, like -2.24e+03";
        RecordError::new(ErrorKind::Value, path, typed, "this is not a decimal number", remedy)
    })
}

#[cfg(test)]
#[path = "species_tests.rs"]
mod tests;

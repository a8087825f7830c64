//! The data file of heat capacities, read by itself: `data/nasa_glenn_2002.json`, every number as the exact ratio that its digits are.

use std::collections::BTreeMap;
use std::sync::OnceLock;

use serde_json::Value;

use crate::oracle::{RBig, parse};

/// The polynomials of one range of temperature, in the form that the file states.
#[derive(Clone, Debug, PartialEq)]
pub struct GlennRange {
    /// From this temperature, K.
    pub low: RBig,
    /// To this temperature, K.
    pub high: RBig,
    /// a1 to a7.
    pub a: [RBig; 7],
    /// b1, K.
    pub b: RBig,
}

/// A species of the file.
#[derive(Clone, Debug, PartialEq)]
pub struct GlennSpecies {
    /// Its key.
    pub name: String,
    /// Molar mass, kg/mol.
    pub molar_mass: RBig,
    /// Ranges in rising order.
    pub ranges: Vec<GlennRange>,
}

impl GlennSpecies {
    /// Twice `c_p`/R of translation and rotation by equipartition, from the geometry of the molecule.
    ///
    /// Linear beyond the diatomic ones: O=C=O, N=N=O and H-C≡C-H.
    #[must_use]
    pub fn twice_rigid(&self) -> u64 {
        match self.name.as_str() {
            "Ar" | "H" | "He" | "Kr" | "N" | "Ne" | "O" | "Xe" => 5,
            "CO" | "D2" | "H2" | "HD" | "N2" | "NO" | "O2" | "OH" | "CO2" | "N2O" | "C2H2" => 7,
            _ => 8,
        }
    }
}

fn number(value: &Value) -> RBig {
    parse(value.as_str().expect("a number as text"))
}

fn range(value: &Value) -> GlennRange {
    let list = |key: &str| value[key].as_array().expect("a list").iter().map(number).collect::<Vec<_>>();
    GlennRange {
        low: number(&value["Tmin"]),
        high: number(&value["Tmax"]),
        a: list("a").try_into().expect("seven coefficients"),
        b: list("b")[0].clone(),
    }
}

/// All species of the file by name.
pub fn glenn() -> &'static BTreeMap<String, GlennSpecies> {
    static ALL: OnceLock<BTreeMap<String, GlennSpecies>> = OnceLock::new();
    ALL.get_or_init(|| {
        let file: Value = serde_json::from_str(include_str!("../data/nasa_glenn_2002.json")).expect("a JSON file");
        let species = file["species"].as_object().expect("species by name");
        let read = |(name, value): (&String, &Value)| {
            let grams = number(&value["molar_mass_g_mol"]);
            let ranges = value["ranges"].as_array().expect("ranges").iter().map(range).collect();
            (name.clone(), GlennSpecies { name: name.clone(), molar_mass: grams / RBig::from(1000), ranges })
        };
        species.iter().map(read).collect()
    })
}

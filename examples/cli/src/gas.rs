//! A gas on the command line: "CH4 0.5 %, O2 1 %, Ar balance".

use clap::Args;
use endwall::gas::HeatCapacityModel;
use serde_json::{Map, Value};

use crate::failure::Failure;

/// The gas by its species.
#[derive(Args)]
#[group(skip)]
pub struct Arguments {
    /// Gas by its species and mole fractions, like "CH4 0.5 %, O2 1 %, Ar balance", or by one name, like N2, argon or air; may be repeated,
    /// one part each time. `endwall gases` lists the species
    #[arg(long, value_name = "GAS", conflicts_with = "heat_capacity_ratio", allow_hyphen_values = true)]
    pub gas: Vec<String>,
    /// Heat capacity of the gas behind the shocks: constant (that of the fill), equilibrium, frozen (vibration keeps the energy that it has
    /// in the fill) or "frozen then equilibrium" (behind the reflected shock). Without it equilibrium, and constant where all species are He,
    /// Ne or Ar
    #[arg(long, value_name = "CHOICE", requires = "gas")]
    pub heat_capacity: Option<String>,
}

/// Names for species that go by one.
const NAMES: [(&str, &str); 9] = [
    ("argon", "Ar"),
    ("helium", "He"),
    ("neon", "Ne"),
    ("krypton", "Kr"),
    ("xenon", "Xe"),
    ("nitrogen", "N2"),
    ("oxygen", "O2"),
    ("hydrogen", "H2"),
    ("methane", "CH4"),
];

/// Their heat capacity is 5/2 R at any temperature of interest.
const CONSTANT: [&str; 3] = ["He", "Ne", "Ar"];

/// A mixture as typed: species and the texts of their fractions.
#[derive(Debug, PartialEq)]
pub struct Mixture {
    parts: Vec<(String, String)>,
}

impl Arguments {
    /// The mixture; `None` where no gas is given.
    pub fn mixture(&self) -> Result<Option<Mixture>, Failure> {
        if self.gas.is_empty() { Ok(None) } else { Mixture::parse(&self.gas).map(Some) }
    }

    /// All that was typed, as one text.
    pub fn typed(&self) -> String {
        self.gas.join(", ")
    }

    /// The fields `gas` and `heat_capacity` of a record.
    pub fn put_into(&self, mixture: &Mixture, record: &mut Value) {
        record["gas"] = mixture.json();
        let chosen = match &self.heat_capacity {
            // Words may be joined by hyphens, which need no quotes.
            Some(typed) => typed.trim().replace('-', " "),
            None if mixture.is_constant() => HeatCapacityModel::Constant.name().into(),
            None => return,
        };
        record["heat_capacity"] = chosen.into();
    }
}

impl Mixture {
    fn parse(typed: &[String]) -> Result<Self, Failure> {
        let all = typed.join(", ");
        let refuse = |wrong: String, remedy: &str| Failure::option("gas", wrong, &all, remedy);
        let example = "write it like \"CH4 0.5 %, O2 1 %, Ar balance\"";
        let mut parts: Vec<(String, String)> = Vec::new();
        let texts: Vec<&str> = typed.iter().flat_map(|text| text.split(',')).map(str::trim).collect();
        for text in &texts {
            let (name, fraction) = text.split_once(char::is_whitespace).map_or((*text, ""), |(name, fraction)| (name, fraction.trim()));
            if name.is_empty() {
                return Err(refuse("a part of the gas is empty".into(), example));
            }
            if name.starts_with(|c: char| c.is_ascii_digit() || "+-.".contains(c)) {
                return Err(refuse(
                    format!("\"{text}\" does not begin with a species"),
                    "write the species first, and decimals with a point: \"CH4 0.5 %\"",
                ));
            }
            if text.contains("..") {
                return Err(refuse("a range of fractions is not available".into(), "run the command for each mixture in turn"));
            }
            let species = species(name);
            if parts.iter().any(|(known, _)| *known == species) {
                return Err(refuse(format!("{species} is given twice"), "add its fractions"));
            }
            let fraction = match fraction {
                "" if texts.len() == 1 => "balance",
                "" => return Err(refuse(format!("{species} has no fraction"), "give each species a fraction, or one of them \"balance\"")),
                typed => typed,
            };
            parts.push((species, fraction.into()));
        }
        Ok(Self { parts })
    }

    fn json(&self) -> Value {
        Value::Object(self.parts.iter().map(|(species, fraction)| (species.clone(), Value::from(fraction.as_str()))).collect::<Map<_, _>>())
    }

    fn is_constant(&self) -> bool {
        self.parts.iter().all(|(species, _)| CONSTANT.contains(&species.as_str()))
    }
}

/// The species behind a name; what is none stays as it is.
fn species(name: &str) -> String {
    let known = NAMES.iter().find(|(known, _)| known.eq_ignore_ascii_case(name)).map(|(_, symbol)| *symbol);
    known.unwrap_or(if name.eq_ignore_ascii_case("air") { "air" } else { name }).to_string()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn parsed(typed: &[&str]) -> Result<Vec<(String, String)>, String> {
        let typed: Vec<String> = typed.iter().map(ToString::to_string).collect();
        Mixture::parse(&typed).map(|mixture| mixture.parts).map_err(|failure| failure.to_string())
    }

    fn parts(expected: &[(&str, &str)]) -> Vec<(String, String)> {
        expected.iter().map(|(species, fraction)| ((*species).into(), (*fraction).into())).collect()
    }

    #[test]
    fn parts_are_separated_by_commas_or_options() {
        let expected = Ok(parts(&[("CH4", "0.5 %"), ("O2", "1 %"), ("Ar", "balance")]));
        assert_eq!(parsed(&["CH4 0.5 %, O2 1 %, Ar balance"]), expected);
        assert_eq!(parsed(&["CH4  0.5 %,O2 1 %", " argon balance "]), expected);
        assert_eq!(parsed(&["Nitrogen"]), Ok(parts(&[("N2", "balance")])));
        assert_eq!(parsed(&["Air"]), Ok(parts(&[("air", "balance")])));
        assert_eq!(parsed(&["heptane 2 ppm, N2 balance"]), Ok(parts(&[("heptane", "2 ppm"), ("N2", "balance")])));
    }

    #[test]
    fn what_cannot_be_meant_is_refused() {
        for (typed, said) in [
            ("", "empty"),
            ("Ar balance,", "empty"),
            ("CH4 0,5 %, Ar balance", "\"5 %\" does not begin with a species"),
            ("0.5 % CH4, Ar balance", "write the species first"),
            ("Ar 1 %, argon balance", "Ar is given twice"),
            ("CH4, Ar balance", "CH4 has no fraction"),
            ("CH4 1..2 %, Ar balance", "range of fractions is not available"),
        ] {
            let message = parsed(&[typed]).unwrap_err();
            assert!(message.contains(said) && message.starts_with("--gas: "), "{typed}: {message}");
        }
    }

    #[test]
    fn only_atoms_of_constant_heat_capacity_are_constant_by_themselves() {
        let constant = |typed: &str| Mixture::parse(&[typed.to_string()]).unwrap().is_constant();
        assert!(constant("He 10 %, Ne 10 %, Ar balance") && constant("argon"));
        assert!(!constant("Kr") && !constant("Ar 99 %, N2 1 %"));
    }
}

//! `endwall gases`: the species that are built in.

use clap::Args;
use endwall::gas::DRY_AIR;
use endwall::gas::species::{Shape, Species, table};
use serde::Serialize;

use crate::failure::Failure;
use crate::output::{self, columns, paragraph};

/// Species that are built in, and how to describe one of your own
///
/// Prints name, molar mass, shape and range of temperature of every species, and the composition of air.
#[derive(Args)]
pub struct Arguments {
    /// Print one JSON object with all numbers in SI units instead of the table
    #[arg(long)]
    json: bool,
}

const SOURCE: &str = "NASA/TP-2002-211556";

#[derive(Serialize)]
struct Listing {
    source: &'static str,
    species: Vec<Entry>,
    air: Vec<Part>,
}

#[derive(Serialize)]
struct Entry {
    name: &'static str,
    /// kg/mol.
    molar_mass: f64,
    shape: &'static str,
    /// K.
    range: [f64; 2],
}

#[derive(Serialize)]
struct Part {
    name: &'static str,
    fraction: f64,
}

/// In the words of a record.
fn shape(shape: Shape) -> &'static str {
    match shape {
        Shape::Atom => "atom",
        Shape::Linear => "linear",
        Shape::Other => "other",
    }
}

fn listing() -> Listing {
    let entry = |species: &&'static Species<'static>| {
        let (low, high) = species.range();
        Entry { name: species.name, molar_mass: species.molar_mass.to_f64(), shape: shape(species.shape), range: [low, high] }
    };
    let part = |portion: &endwall::gas::Portion<'static>| Part { name: portion.species.name, fraction: portion.fraction.to_f64() };
    Listing { source: SOURCE, species: table::ALL.iter().map(entry).collect(), air: DRY_AIR.iter().map(part).collect() }
}

/// Runs it.
pub fn run(arguments: &Arguments) -> Result<(), Failure> {
    let listing = listing();
    let text = if arguments.json { serde_json::to_string_pretty(&listing).map_err(Failure::unformatted)? } else { text(&listing) };
    output::print(&text)
}

fn text(listing: &Listing) -> String {
    let mut rows = vec![["species", "molar mass, g/mol", "shape", "from, K", "to, K"].map(String::from).to_vec()];
    for species in &listing.species {
        let [low, high] = species.range;
        // The data have seven decimals at most.
        let mass = format!("{:.7}", species.molar_mass * 1e3);
        rows.push(vec![species.name.into(), aligned(&mass), species.shape.into(), low.to_string(), high.to_string()]);
    }
    let air: Vec<String> = listing.air.iter().map(|part| format!("{} {} %", part.name, hundredfold(part.fraction))).collect();
    let mut page = format!("Species for the gas of a record and for --gas. Data: B. J. McBride, M. J. Zehe, S. Gordon, {SOURCE}.\n\n");
    page.push_str(&columns(&rows));
    for note in [
        format!("\"air\" in place of a species means dry air: {}. A record may state its \"humidity\".", air.join(", ")),
        "The shape fixes the heat capacity with frozen vibration: atom 5/2 R, linear molecule 7/2 R, other 4 R. A mixture has data where all \
         of its species have; outside, an answer is refused and never extrapolated."
            .into(),
        "A record can describe a species of its own with coefficients of the same form, cp/R = a1/T^2 + a2/T + a3 + a4 T + a5 T^2 + a6 T^3 \
         + a7 T^4, and b1 for the enthalpy:"
            .into(),
    ] {
        page.push('\n');
        page.push_str(&paragraph(&note));
        page.push('\n');
    }
    page + EXAMPLE
}

/// An own species as a record has it; the numbers are those of nitrogen.
const EXAMPLE: &str = r#"
  "species": {
    "my gas": {
      "molar_mass": "28.0134 g/mol",
      "shape": "linear",
      "ranges": [
        { "from": "200 K", "to": "1000 K",
          "heat_capacity": [22103.71497, -381.846182, 6.08273836, -0.00853091441, 1.384646189e-05, -9.62579362e-09, 2.519705809e-12],
          "enthalpy": 710.846086 }
      ]
    }
  }
"#;

/// Blanks for zeros at the end, so that the points stay below each other.
fn aligned(number: &str) -> String {
    let short = number.trim_end_matches('0');
    format!("{short:<width$}", width = number.len())
}

/// In percent, free of what the multiplication adds in the last digit.
fn hundredfold(fraction: f64) -> String {
    let text = format!("{:.6}", fraction * 100.0);
    text.trim_end_matches('0').trim_end_matches('.').to_string()
}

//! Options that stand for fields of a record: the reader of records checks them, so that the same doubts are asked in both places.

use endwall::record::{Dimension, ErrorKind, Quantity, RecordError, Shot};

use crate::failure::Failure;

/// What can be confirmed: the option and the field of the record that it stands for.
pub const CONFIRMED: [(&str, &str); 5] = [
    ("heat-capacity-ratio", "gas.heat_capacity_ratio"),
    ("molar-mass", "gas.molar_mass"),
    ("pressure", "fill.pressure"),
    ("temperature", "fill.temperature"),
    ("shock-speed", "shock_speed"),
];

/// The option that stands for a field of the record.
pub fn option_of(path: &str) -> &str {
    match path {
        "ambient" => "ambient",
        "heat_capacity" => "heat-capacity",
        "wall.speed" => "wall-speed",
        "wall.impedance" => "wall-impedance",
        _ if path.starts_with("gas.") && !CONFIRMED.iter().any(|(_, known)| *known == path) => "gas",
        _ => CONFIRMED.iter().find(|(_, known)| *known == path).map_or(path, |(option, _)| option),
    }
}

/// Reads a record that was made of options; `gas` is what was typed for the gas.
pub fn read(record: &serde_json::Value, gas: &str) -> Result<Shot, Failure> {
    let shot = Shot::read(record.to_string().as_bytes()).map_err(|error| refused(&error, gas))?;
    let uncertain_entry =
        shot.entries.iter().find(|entry| entry.quantity.as_ref().is_some_and(|quantity| quantity.uncertainty().is_some()));
    match uncertain_entry {
        Some(entry) => Err(uncertain(option_of(&entry.path), &entry.typed)),
        None => Ok(shot),
    }
}

/// An error of the reader of records, in the words of the command line.
pub fn refused(error: &RecordError, gas: &str) -> Failure {
    let option = option_of(&error.path);
    let remedy = match error.kind {
        ErrorKind::Doubtful => format!("correct it, or state that it is right with --confirm {option}"),
        _ if error.remedy.contains("\"ambient\"") => "add --ambient \"101.3 kPa\", or type the pressure absolute".to_string(),
        _ => error.remedy.replace("others are described under \"species\"", "a record can describe others (endwall gases says how)"),
    };
    let typed = if option == "gas" { gas } else { error.typed.as_str() };
    let species = error.path.strip_prefix("gas.").filter(|_| option == "gas").map_or(String::new(), |species| format!("{species}: "));
    Failure::option(option, species + &error.wrong, typed, remedy)
}

/// A single quantity without an uncertainty.
pub fn exact(option: &str, typed: &str, dimension: Dimension) -> Result<Quantity, Failure> {
    let quantity = Quantity::parse(typed, dimension).map_err(|error| {
        let error = error.at("");
        Failure::option(option, error.wrong, typed, error.remedy)
    })?;
    if quantity.uncertainty().is_some() { Err(uncertain(option, typed)) } else { Ok(quantity) }
}

fn uncertain(option: &str, typed: &str) -> Failure {
    let remedy = "leave the uncertainty out, type a range like \"7.9..8.1 kPa\", or write a record and use endwall reduce";
    Failure::option(option, "a quick look takes no uncertainty", typed, remedy)
}

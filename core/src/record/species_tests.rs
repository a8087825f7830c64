//! Species of a record.

use super::*;
use crate::record::{Report, Shot};

/// Nitrogen of NASA/TP-2002-211556 under another name, as somebody would copy it from a table.
const OWN: &str = r#"{
  "record": "shot/1", "gas": { "my gas": "balance" }, "heat_capacity": "equilibrium",
  "fill": { "pressure": "10.0 ± 0.02 kPa", "temperature": "295 ± 0.5 K" }, "shock_speed": "950 ± 1 m/s",
  "species": { "my gas": { "molar_mass": "28.0134 g/mol", "shape": "linear", "ranges": [
    { "from": "200 K", "to": "1000 K", "enthalpy": 710.846086,
      "heat_capacity": [22103.71497, -381.846182, 6.08273836, -0.00853091441, 1.384646189e-05, -9.62579362e-09, "2.519705809e-12"] },
    { "from": "1000 K", "to": "6000 K", "enthalpy": 12832.10415,
      "heat_capacity": [587712.406, -2239.249073, 6.06694922, -0.00061396855, 1.491806679e-07, -1.923105485e-11, 1.061954386e-15] }
  ] } }
}"#;

fn reduced(file: &str) -> Result<Report, RecordError> {
    Shot::read(file.as_bytes()).and_then(|shot| shot.reduce())
}

fn with(part: &str, by: &str) -> String {
    assert!(OWN.contains(part), "{part}");
    OWN.replacen(part, by, 1)
}

#[test]
fn a_species_of_the_record_is_as_good_as_a_built_in_one() {
    let own = reduced(OWN).unwrap();
    let built_in = reduced(&OWN.replacen("\"my gas\": \"balance\"", "\"N2\": \"balance\"", 1)).unwrap();
    assert_eq!(own.states, built_in.states);
    assert_eq!(own.made_by.gas_data, "NASA/TP-2002-211556 and of the record, composition taken as exact");
    // In a mixture too, and with vibration frozen by its shape.
    let frozen = |gas: &str| {
        let file = OWN.replacen("\"my gas\": \"balance\"", gas, 1).replacen("equilibrium", "frozen", 1);
        reduced(&file).unwrap().states.reflected.temperature.value
    };
    assert_eq!(frozen(r#""my gas": "10 %", "Ar": "balance""#), frozen(r#""N2": "10 %", "Ar": "balance""#));
    let bent = OWN.replacen("equilibrium", "frozen", 1).replacen("linear", "other", 1);
    assert!(reduced(&bent).unwrap().states.reflected.temperature.value < frozen(r#""N2": "balance""#));
}

#[test]
fn what_no_gas_can_be_is_refused_with_its_place() {
    for (part, by, path, said) in [
        ("12832.10415", "12932.10415", "species.my gas", "at 1000 K the heat capacity or the enthalpy jumps"),
        ("6.06694922", "6.16694922", "species.my gas", "compare every coefficient"),
        ("6.08273836", "-6.08273836", "species.my gas", "no heat capacity for which"),
        ("\"from\": \"1000 K\"", "\"from\": \"1001 K\"", "species.my gas", "adjoining; see 1001 K"),
        ("\"linear\"", "\"bent\"", "species.my gas.shape", "\"atom\", \"linear\" or \"other\""),
        ("\"shape\": \"linear\", ", "", "species.my gas.shape", "\"atom\", \"linear\" or \"other\""),
        ("28.0134 g/mol", "28.0134 kg/mol", "species.my gas", "0.0001 and 10 kg/mol"),
        ("28.0134 g/mol", "28.01340000000000000001 g/mol", "species.my gas.molar_mass", "too many digits"),
        ("587712.406, ", "", "species.my gas.ranges[1].heat_capacity", "6 coefficients"),
        ("587712.406", "\"about 6e5\"", "species.my gas.ranges[1].heat_capacity[0]", "not a decimal number"),
        ("587712.406", "5.87712406e99", "species.my gas.ranges[1].heat_capacity[0]", "18 digits"),
        ("\"enthalpy\": 710.846086,", "", "species.my gas.ranges[0].enthalpy", "missing"),
        ("\"from\": \"200 K\"", "\"from\": 200", "species.my gas.ranges[0].from", "no unit"),
        ("\"ranges\"", "\"range\"", "species.my gas.range", "was \"ranges\" meant?"),
        ("{ \"my gas\": {", "{ \"N2\": {", "species.N2", "built in"),
        ("{ \"my gas\": {", "{ \"air\": {", "species.air", "built in"),
        ("\"species\": { \"my gas\"", "\"species\": { \"your gas\"", "gas.my gas", "unknown"),
    ] {
        let error = reduced(&with(part, by)).expect_err(by);
        assert!(error.path == path && error.to_string().contains(said), "{by}: {error}");
    }
    let none = OWN.split("\"ranges\": [").next().unwrap().to_string() + "\"ranges\": [] } } }";
    assert!(reduced(&none).unwrap_err().to_string().contains("0 ranges"));
}

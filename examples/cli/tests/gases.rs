//! The list of species.

mod common;

use common::endwall;
use endwall::gas::species::table;
use serde_json::Value;

#[test]
fn every_species_is_listed_with_its_data() {
    let text = endwall(&["gases"], b"").good();
    let listed: Value = serde_json::from_str(&endwall(&["gases", "--json"], b"").good()).unwrap();
    let species = listed["species"].as_array().unwrap();
    assert_eq!(species.len(), table::ALL.len());
    for (listed, known) in species.iter().zip(table::ALL) {
        assert_eq!(listed["name"], known.name);
        assert_eq!(listed["molar_mass"].as_f64(), Some(known.molar_mass.to_f64()));
        assert_eq!((listed["range"][0].as_f64(), listed["range"][1].as_f64()), (Some(known.range().0), Some(known.range().1)));
        let row: Vec<&str> = text.lines().find(|line| line.split(' ').next() == Some(known.name)).unwrap().split_whitespace().collect();
        let grams: f64 = row[1].parse().unwrap();
        assert!((grams / 1e3 / known.molar_mass.to_f64() - 1.0).abs() < 1e-12, "{row:?}");
        assert_eq!(Value::from(row[2]), listed["shape"]);
        assert_eq!((row[3].parse(), row[4].parse()), (Ok(known.range().0), Ok(known.range().1)));
    }
    for (name, shape) in [("Ar", "atom"), ("CO2", "linear"), ("CH4", "other")] {
        assert_eq!(species.iter().find(|species| species["name"] == name).unwrap()["shape"], shape);
    }
    let air: f64 = listed["air"].as_array().unwrap().iter().map(|part| part["fraction"].as_f64().unwrap()).sum();
    assert!((air - 1.0).abs() < 1e-15 && text.contains("N2 78.084 %, O2 20.9476 %, Ar 0.9365 %, CO2 0.0319 %"), "{text}");
    assert!(text.contains("NASA/TP-2002-211556") && listed["source"] == "NASA/TP-2002-211556");
}

/// What is printed as an example can be copied into a record, and is the nitrogen that it says it is.
#[test]
fn the_example_of_an_own_species_works() {
    let text = endwall(&["gases"], b"").good();
    let example = &text[text.find("  \"species\"").unwrap()..];
    let record = |gas: &str| {
        format!(
            r#"{{ "record": "shot/1", "gas": {{ "{gas}": "balance" }}, "heat_capacity": "equilibrium",
            "fill": {{ "pressure": "8 kPa", "temperature": "296.2 K" }}, "shock_speed": "900 m/s", {example} }}"#
        )
    };
    let states = |gas: &str| {
        let report: Value = serde_json::from_str(&common::reduce(&record(gas), &["--json"]).good()).unwrap();
        report["states"].clone()
    };
    // T5 1024 K is beyond the one range of the example, so the shock is slower.
    let slow = |gas: &str| {
        let record = record(gas).replace("900 m/s", "850 m/s");
        let report: Value = serde_json::from_str(&common::reduce(&record, &["--json"]).good()).unwrap();
        report["states"].clone()
    };
    assert_eq!(slow("my gas"), slow("N2"));
    assert!(states("N2")["5"]["temperature"]["value"].as_f64().unwrap() > 1000.0);
    common::reduce(&record("my gas"), &[]).refused(&["200 K to 1000 K"]);
}

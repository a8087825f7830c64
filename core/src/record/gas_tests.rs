use super::*;
use crate::record::tree;

fn read_gas(json: &str) -> (Result<GasRecord, RecordError>, Vec<Flag>) {
    let node = tree::parse(json.as_bytes()).unwrap();
    let (mut reading, mut flags) = (Reading::new(), Vec::new());
    (read(&node, "gas", &mut reading, &mut flags), flags)
}

fn good(json: &str) -> GasRecord {
    read_gas(json).0.unwrap_or_else(|error| panic!("{json}: {error}"))
}

fn refused(json: &str) -> String {
    read_gas(json).0.expect_err(json).to_string()
}

fn fractions(gas: &GasRecord) -> Vec<Rational> {
    let GasRecord::Mixture(components) = gas else { panic!("mixture") };
    components.iter().map(|component| component.fraction).collect()
}

fn exact(text: &str) -> Rational {
    text.parse().unwrap()
}

#[test]
fn the_balance_is_what_is_left() {
    let gas = good(r#"{ "CH4": "0.50 %", "O2": "1.00 %", "Ar": "balance" }"#);
    assert_eq!(fractions(&gas), [exact("0.005"), exact("0.01"), exact("0.985")]);
    assert!(refused(r#"{ "He": "balance", "Ar": "balance" }"#).contains("gas.Ar: He is the balance already"));
    assert!(refused(r#"{ "He": "100 %", "Ar": "balance" }"#).contains("sum to 1"));
}

#[test]
fn a_bare_number_is_read_by_its_digits() {
    let gas = good(r#"{ "He": 0.1, "Ar": 0.9 }"#);
    assert_eq!(fractions(&gas), [exact("1/10"), exact("9/10")]);
    let GasRecord::Ratio { heat_capacity_ratio, .. } = good(r#"{ "heat_capacity_ratio": 1.4, "molar_mass": "28.0134 g/mol" }"#) else {
        panic!("ratio")
    };
    assert_eq!(heat_capacity_ratio.value(), exact("7/5"));
}

#[test]
fn the_sum_is_one_or_is_made_one_and_said() {
    let (gas, flags) = read_gas(r#"{ "He": "10.00005 %", "Ar": "90.00000 %" }"#);
    let found = fractions(&gas.unwrap());
    assert_eq!(found[0].checked_add(found[1]), Some(Rational::ONE));
    assert_eq!(found[0], exact("0.1000005/1.0000005"));
    assert_eq!(flags[0].code, "fractions-normalised");
    assert!(flags[0].text.contains("1.0000005"));
    assert!(refused(r#"{ "He": "10.0002 %", "Ar": "90 %" }"#).contains("sum to 1.000002"));
    assert!(refused(r#"{ "He": "10 %" }"#).contains("sum to 0.1"));
    // Exactly at the limit is within it.
    assert!(read_gas(r#"{ "He": "10.0001 %", "Ar": "90 %" }"#).0.is_ok());
}

#[test]
fn bad_gases_are_refused_by_name() {
    for (json, part) in [
        ("[]", "gas: a list stands where an object is wanted"),
        ("{}", "no gas is given"),
        (r#"{ "Ar": "-1 %", "He": "balance" }"#, "gas.Ar: a fraction is zero or more"),
        (r#"{ "Ar": "98.5", "He": "balance" }"#, "was % meant?"),
        (r#"{ "Ar": "98.5 kPa" }"#, "kPa is the unit of a pressure"),
        (r#"{ "Ar": { "fraction": "1" } }"#, "gas.Ar: an object stands where a fraction is wanted"),
        (r#"{ "Ar": null }"#, "leave the field out"),
        (r#"{ "": "1" }"#, "not the name of a species"),
        (r#"{ "heat_capacity_ratio": "5/3" }"#, "gas.molar_mass: the field is missing"),
        (r#"{ "heat_capacity_ratio": "5/3", "molar_mas": "39.948 g/mol" }"#, "gas.molar_mas: the field is unknown"),
        (r#"{ "heat_capacity_ratio": "5/3", "molar_mass": 39.948 }"#, "gas.molar_mass: it has no unit"),
        (r#"{ "heat_capacity_ratio": "1", "molar_mass": "39.948 g/mol" }"#, "greater than one"),
        (r#"{ "heat_capacity_ratio": "4", "molar_mass": "39.948 g/mol" }"#, "above three"),
        (r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "0 g/mol" }"#, "greater than zero"),
        (r#"{ "heat_capacity_ratio": "1.667", "molar_mass": "39.948 g/mol" }"#, "was 5/3 meant?"),
        (r#"{ "heat_capacity_ratio": 1.67, "molar_mass": "39.948 g/mol" }"#, "was 5/3 meant?"),
        (r#"{ "heat_capacity_ratio": "1.8", "molar_mass": "39.948 g/mol" }"#, "exceeds 5/3"),
        (r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "39.948 kg/mol" }"#, "was g/mol meant?"),
        (r#"{ "heat_capacity_ratio": "5/3", "molar_mass": "0.039948 g/mol" }"#, "was kg/mol meant?"),
        (r#"{ "Ar": "0.5 ± 2 %", "He": "balance" }"#, "exceeds the fraction"),
    ] {
        let message = refused(json);
        assert!(message.contains(part), "{json}: {message}");
    }
}

#[test]
fn noble_gases_are_computed_and_others_are_not() {
    let argon = good(r#"{ "Ar": "balance" }"#).constant(HeatCapacityModel::Constant).unwrap();
    assert_eq!((argon.heat_capacity_ratio, argon.molar_mass), (exact("5/3"), exact("0.039948")));
    let mixture = good(r#"{ "He": "10 ± 0.1 %", "Ar": "balance" }"#).constant(HeatCapacityModel::Constant).unwrap();
    assert_eq!(mixture.molar_mass, exact("0.0363534602"));
    let expected = 0.001 * (0.039_948 - 0.004_002_602);
    assert!((mixture.molar_mass_uncertainty.unwrap() / expected - 1.0).abs() < 1e-12);
    let other = good(r#"{ "N2": "balance" }"#);
    let message = other.constant(HeatCapacityModel::Constant).unwrap_err().to_string();
    assert!(message.contains("gas.N2") && message.contains("helium, neon and argon only") && message.contains("heat_capacity_ratio"));
    assert!(other.constant(HeatCapacityModel::Equilibrium).unwrap_err().to_string().contains("closed form"));
}

#[test]
fn the_heat_capacity_is_stated_or_implied() {
    let by_ratio = good(r#"{ "heat_capacity_ratio": "7/5", "molar_mass": "28.0134 g/mol" }"#);
    let by_species = good(r#"{ "N2": "balance" }"#);
    assert_eq!(heat_capacity(None, &by_ratio, &mut Vec::new()), Ok(HeatCapacityModel::Constant));
    assert_eq!(heat_capacity(Some("constant"), &by_ratio, &mut Vec::new()), Ok(HeatCapacityModel::Constant));
    assert!(heat_capacity(Some("frozen"), &by_ratio, &mut Vec::new()).unwrap_err().to_string().contains("leave the field out"));
    let mut flags = Vec::new();
    assert_eq!(heat_capacity(None, &by_species, &mut flags), Ok(HeatCapacityModel::Equilibrium));
    assert_eq!(flags[0].code, "heat-capacity-not-chosen");
    assert!(heat_capacity(Some("frosen"), &by_species, &mut Vec::new()).unwrap_err().to_string().contains("\"frozen then equilibrium\""));
    for choice in ["constant", "equilibrium", "frozen", "frozen then equilibrium"] {
        assert_eq!(heat_capacity(Some(choice), &by_species, &mut Vec::new()).unwrap().name(), choice);
    }
}

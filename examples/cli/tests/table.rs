//! Tables of the relations.

mod common;

use common::endwall;

fn table(options: &[&str]) -> common::Run {
    endwall(&[&["table", "--heat-capacity-ratio", "7/5"], options].concat(), b"")
}

fn rows(csv: &str) -> Vec<Vec<String>> {
    csv.lines().map(|line| line.split(',').map(String::from).collect()).collect()
}

#[test]
fn the_digits_are_those_of_the_closed_forms() {
    let csv = table(&["--from", "1.1", "--to", "5", "--step", "0.1", "--csv", "-"]).good();
    let rows = rows(&csv);
    assert_eq!(rows[0].join(","), "M,p2/p1,T2/T1,rho2/rho1,u2/a1,M2,pt2/pt1,M_R,p5/p1,T5/T1,rho5/rho1,U_R/a1");
    assert_eq!(rows.len(), 41);
    for (at, row) in rows.iter().enumerate().skip(1) {
        // Decimals are added exactly.
        assert_eq!(row[0], format!("{}.{}", (at + 10) / 10, (at + 10) % 10));
        let m: f64 = row[0].parse().unwrap();
        let (g, z) = (1.4, m * m - 1.0);
        // Rankine–Hugoniot relations (NACA Report 1135) and their reflected forms in plain doubles.
        let p21 = 1.0 + 2.0 * g * z / (g + 1.0);
        let r21 = (g + 1.0) * m * m / ((g - 1.0) * m * m + 2.0);
        let p51 = p21 * ((g + 1.0) + (3.0 * g - 1.0) * z) / ((g + 1.0) + (g - 1.0) * z);
        let t51 = (1.0 + 2.0 * (g - 1.0) * z / (g + 1.0)) * (1.0 + (3.0 * g - 1.0) * z / (g + 1.0)) / (m * m);
        let mr2 = 1.0 + (g + 1.0) * (p21 - 1.0) / ((g - 1.0) * p21 + g + 1.0);
        let ur = (1.0 + 2.0 * (g - 1.0) * z / (g + 1.0)) / m;
        let total = r21.powf(g / (g - 1.0)) * p21.powf(-1.0 / (g - 1.0));
        let m2 = (((g - 1.0) * m * m + 2.0) / (2.0 * g * m * m - (g - 1.0))).sqrt();
        let wanted = [p21, p21 / r21, r21, 2.0 * z / ((g + 1.0) * m), m2, total, mr2.sqrt(), p51, t51, p51 / t51, ur];
        for (printed, wanted) in row[1..].iter().zip(wanted) {
            let value: f64 = printed.parse().unwrap();
            assert_eq!(printed.trim_start_matches("0.").trim_start_matches('0').replace('.', "").len(), 6, "six digits: {printed}");
            // Half a unit of the sixth digit, and the rounding of the doubles above.
            assert!((value - wanted).abs() <= 0.5e-5 * 10f64.powf(wanted.log10().floor()) + 1e-12 * wanted, "M {m}: {printed} {wanted}");
        }
    }
}

#[test]
fn rational_rows_have_all_their_digits() {
    // By hand from the Rankine–Hugoniot relations for γ 7/5, M 2 and 3: p2/p1 9/2 and 31/3, T2/T1 27/16 and 217/81, ρ2/ρ1 8/3 and 27/7,
    // u2/a1 5/4 and 20/9, p5/p1 15 and 155/3, T5/T1 5/2 and 385/81, ρ5/ρ1 6 and 837/77, U_R/a1 1 and 11/9.
    let rows = rows(&table(&["--from", "2", "--to", "3", "--step", "1", "--digits", "15", "--csv", "-"]).good());
    let wanted: [[(u64, u64); 8]; 2] = [
        [(9, 2), (27, 16), (8, 3), (5, 4), (15, 1), (5, 2), (6, 1), (1, 1)],
        [(31, 3), (217, 81), (27, 7), (20, 9), (155, 3), (385, 81), (837, 77), (11, 9)],
    ];
    for (row, wanted) in rows[1..].iter().zip(wanted) {
        for (printed, (numerator, denominator)) in [1, 2, 3, 4, 8, 9, 10, 11].map(|column| &row[column]).into_iter().zip(wanted) {
            let (whole, decimals) = printed.split_once('.').unwrap();
            // As many digits as are printed, by whole numbers, rounded half up.
            let scale = 10_u128.pow(u32::try_from(decimals.len()).unwrap());
            let (numerator, denominator) = (u128::from(numerator), u128::from(denominator));
            let rounded = (2 * numerator * scale + denominator) / (2 * denominator);
            assert_eq!(format!("{whole}{decimals}").parse::<u128>().unwrap(), rounded, "{printed} {numerator}/{denominator}");
            // One unit in the last place of a double leaves at least this many.
            assert!(whole.len() + decimals.len() >= 14, "{printed}");
        }
    }
}

#[test]
fn no_row_is_lost_to_rounding() {
    // Summed as doubles, 1.1 + 99999 × 0.0001 misses 11.0999.
    let csv = table(&["--from", "1.1", "--to", "11.0999", "--step", "0.0001", "--digits", "3", "--csv", "-"]).good();
    assert_eq!(csv.lines().count(), 100_001);
    assert!(csv.lines().last().unwrap().starts_with("11.0999,"));
}

#[test]
fn the_text_has_the_rows_of_the_csv() {
    let range = ["--from", "1.25", "--to", "2.5", "--step", "0.25", "--digits", "9"];
    let csv = table(&[&range[..], &["--csv", "-"]].concat()).good();
    let text = table(&range).good();
    let tail: Vec<String> = text.lines().rev().take(7).map(|line| line.split_whitespace().collect::<Vec<_>>().join(",")).collect();
    assert_eq!(tail.into_iter().rev().collect::<Vec<_>>(), csv.lines().collect::<Vec<_>>());
    for wanted in ["heat capacity ratio 7/5", "dimensionless", "constant heat capacity", "NACA Report 1135", "Arithmetic: "] {
        assert!(text.contains(wanted), "{wanted}");
    }
}

#[test]
fn a_file_is_written() {
    let file = std::env::temp_dir().join(format!("endwall-table-{}.csv", std::process::id()));
    let name = file.to_str().unwrap();
    let options = ["--from", "2", "--to", "3", "--step", "1", "--csv"];
    table(&[&options[..], &[name]].concat()).good();
    let written = std::fs::read_to_string(&file).unwrap();
    std::fs::remove_file(&file).unwrap();
    assert_eq!(written, table(&[&options[..], &["-"]].concat()).good());
    let nowhere = file.join("no such folder.csv");
    table(&[&options[..], &[nowhere.to_str().unwrap()]].concat()).failed(1, &["no such folder.csv", "cannot be written"]);
}

#[test]
fn bad_ranges_are_refused() {
    let refused = |from: &str, to: &str, step: &str, names: &[&str]| {
        table(&["--from", from, "--to", to, "--step", step]).refused(names);
    };
    refused("1", "5", "0.1", &["--from", "\"1\"", "above 1"]);
    refused("-2", "5", "0.1", &["--from", "-2", "above 1"]);
    refused("NaN", "5", "0.1", &["--from", "NaN", "decimal"]);
    refused("1.1", "inf", "0.1", &["--to", "inf", "decimal"]);
    refused("1.1", "1.0", "0.1", &["--to", "1.0", "larger"]);
    refused("1.1", "5", "0", &["--step", "above zero"]);
    refused("1.1", "5", "-0.1", &["--step", "-0.1", "above zero"]);
    refused("1.1", "5", "1/3", &["--step", "1/3", "decimal"]);
    refused("1.1", "5", "1e-1", &["--step", "1e-1", "decimal"]);
    refused("1.1", "101.1", "0.001", &["--step", "100000 rows"]);
    refused("1.1", "5", "0.00001", &["--step", "100000 rows", "larger step"]);
    refused("1.0000000000001", "5", "1", &["--from", "12 decimals"]);
    refused("1.1", "1000", "1", &["--to", "1000", "999"]);
    let ratio = |typed: &str| {
        endwall(&["table", "--heat-capacity-ratio", typed, "--from", "2", "--to", "3", "--step", "1"], b"").refused(&[
            "--heat-capacity-ratio",
            typed,
            "7/5",
        ]);
    };
    ["1", "0", "-1", "1e9", "x", "7/0", "NaN"].into_iter().for_each(ratio);
    table(&["--from", "2", "--to", "3", "--step", "1", "--digits", "16"]).refused(&["16", "15"]);
}

fn by_species(options: &[&str]) -> common::Run {
    endwall(&[&["table"], options].concat(), b"")
}

const NITROGEN: [&str; 4] = ["--gas", "N2", "--temperature", "295 K"];
const SPEEDS: [&str; 6] = ["--from", "600 m/s", "--to", "1000 m/s", "--step", "100 m/s"];

#[test]
fn a_table_of_speeds_for_a_gas_by_its_species() {
    let csv = by_species(&[&NITROGEN[..], &SPEEDS, &["--digits", "12", "--csv", "-"]].concat()).good();
    let rows = rows(&csv);
    assert_eq!(rows[0].join(","), "U_S/(m/s),M,p2/p1,T2/T1,rho2/rho1,u2/a1,M2,M_R,p5/p1,T5/T1,rho5/rho1,U_R/a1");
    assert_eq!(rows[1..].iter().map(|row| row[0].as_str()).collect::<Vec<_>>(), ["600", "700", "800", "900", "1000"]);
    for row in &rows[1..] {
        let x: Vec<f64> = row.iter().map(|cell| cell.parse().unwrap()).collect();
        let [speed, mach, p2, t2, rho2, u2, m2, m_r, p5, t5, rho5, u_r] = x[..] else { panic!("{row:?}") };
        // Balances of mass and momentum in the frame of each shock, and the gas law: they hold for any heat capacity.
        let sound = speed / mach;
        let scale = sound * sound * 0.028_013_4 / (8.314_462_618_153_24 * 295.0);
        let same = |a: f64, b: f64| assert!((a / b - 1.0).abs() < 1e-10, "{row:?}: {a} {b}");
        same(rho2 * (mach - u2), mach);
        same(p2, 1.0 + scale * mach * u2);
        same(p2, rho2 * t2);
        same(rho5 * u_r, rho2 * (u_r + u2));
        same(p5, p2 + scale * rho2 * (u_r + u2) * u2);
        same(p5, rho5 * t5);
        // M2 and M_R share the sound speed of gas 2.
        same((mach - u2) / m2, (u_r + u2) / m_r);
    }
    // Equilibrium is below the constant heat capacity of the fill, and the same table by Mach number meets that of γ 7/5 there.
    let mach = ["--from", "2", "--to", "3", "--step", "1", "--csv", "-"];
    let by_mach = |choice: &str| by_species(&[&NITROGEN[..], &["--heat-capacity", choice], &mach].concat()).good();
    let cells = |csv: &str, row: usize| csv.lines().nth(row).unwrap().split(',').map(|cell| cell.parse().unwrap()).collect::<Vec<f64>>();
    let (frozen, ratio) = (cells(&by_mach("frozen"), 2), cells(&table(&mach).good(), 2));
    assert_eq!(frozen[1], 3.0);
    // T5/T1 of frozen nitrogen at its own sound speed is within 0.2 % of that for γ 7/5.
    assert!((frozen[9] / ratio[9] - 1.0).abs() < 2e-3, "{frozen:?} {ratio:?}");
    assert!(cells(&by_mach("equilibrium"), 2)[9] < 0.95 * frozen[9]);
}

#[test]
fn the_text_for_a_gas_by_its_species_says_its_model() {
    let text = by_species(&[&NITROGEN[..], &SPEEDS].concat()).good();
    for wanted in ["N2 at 295 K, heat capacity equilibrium", "NASA/TP-2002-211556", "Arithmetic: "] {
        assert!(text.contains(wanted), "{wanted}: {text}");
    }
    assert!(!text.contains("can burn"));
    let burning =
        by_species(&[&["--gas", "CH4 1 %, O2 2 %", "--gas", "Ar balance", "--temperature", "22 degC"], &SPEEDS[..]].concat()).good();
    assert!(burning.lines().nth(1).unwrap().starts_with("Caution: this mixture can burn"), "{burning}");
    // Atoms have their closed forms: γ 5/3.
    let argon = by_species(&["--gas", "argon", "--temperature", "295 K", "--from", "3", "--to", "3", "--step", "1", "--csv", "-"]).good();
    assert!(argon.lines().nth(1).unwrap().contains(",3,11.0000,3.66667,3.00000,"), "{argon}");
}

#[test]
fn bad_tables_of_gases_by_species_are_refused() {
    by_species(&[&["--gas", "N2"], &SPEEDS[..]].concat()).refused(&["--temperature"]);
    by_species(&SPEEDS).refused(&["no gas is given", "--heat-capacity-ratio", "--gas"]);
    table(&SPEEDS).refused(&["--from", "600 m/s", "does not fix the sound speed", "--gas"]);
    table(&["--temperature", "295 K", "--from", "2", "--to", "3", "--step", "1"]).refused(&["--temperature"]);
    let nitrogen = |from: &str, to: &str, step: &str| by_species(&[&NITROGEN[..], &["--from", from, "--to", to, "--step", step]].concat());
    nitrogen("300 m/s", "900 m/s", "100 m/s").refused(&["--from", "300 m/s", "sound speed of the fill", "350.06"]);
    nitrogen("600 m/s", "9000 m/s", "100 m/s").refused(&["--to", "9000 m/s", "200 K to 20000 K", "end the table below "]);
    nitrogen("600 m/s", "900", "100 m/s").refused(&["--to", "900", "no unit"]);
    nitrogen("600", "900 m/s", "100 m/s").refused(&["--to", "900 m/s", "decimal like 1.25"]);
    nitrogen("600 ± 5 m/s", "900 m/s", "100 m/s").refused(&["--from", "endwall reduce"]);
    nitrogen("-600 m/s", "900 m/s", "100 m/s").refused(&["--from", "-600 m/s", "above zero"]);
    nitrogen("600 m/s", "900 m/s", "0 m/s").refused(&["--step", "0 m/s", "above zero"]);
    nitrogen("600 m/s", "900 m/s", "1e1 m/s").refused(&["--step", "1e1 m/s", "decimals is wanted"]);
    nitrogen("600 m/s", "100000 m/s", "10 m/s").refused(&["--to", "99999 m/s"]);
    let with =
        |temperature: &str, options: &[&str]| by_species(&[&["--gas", "N2", "--temperature", temperature], &SPEEDS[..], options].concat());
    with("25 K", &[]).refused(&["--temperature", "was 25 degC meant?", "--confirm temperature"]);
    with("25 K", &["--confirm", "temperature"]).refused(&["--temperature", "25 K", "200 K to 20000 K"]);
    with("295 ± 1 K", &[]).refused(&["--temperature", "295 ± 1 K"]);
    by_species(&[&["--gas", "n2", "--temperature", "295 K"], &SPEEDS[..]].concat()).refused(&["--gas", "was N2 meant?"]);
}

#[test]
fn a_rounded_ratio_is_asked_about() {
    for typed in ["1.66", "1.667", "1.67", "1.7"] {
        let options = ["table", "--heat-capacity-ratio", typed, "--from", "2", "--to", "3", "--step", "1"];
        endwall(&options, b"").refused(&["--heat-capacity-ratio", typed, "5/3", "--confirm heat-capacity-ratio"]);
        endwall(&[&options[..], &["--confirm", "heat-capacity-ratio"]].concat(), b"").good();
    }
}

use alloc::string::ToString;
use alloc::vec::Vec;

use super::*;
use crate::record::{Counted, Dimension, Quantity};

const DEMO: &str = include_str!("../../../examples/records/plan-k0300.json");
const PAST: [&str; 3] = [
    include_str!("../../../examples/records/kinetics-k0301.json"),
    include_str!("../../../examples/records/kinetics-k0302.json"),
    include_str!("../../../examples/records/kinetics-k0303.json"),
];
/// The efficiency of the demo plan.
const PLANNED: f64 = 0.93;
const STATIONS: [f64; 5] = [1.65, 1.25, 0.85, 0.45, 0.05];

fn changed(record: &str, from: &str, to: &str) -> String {
    assert!(record.contains(from), "{from}");
    record.replacen(from, to, 1)
}

fn plan(file: &str) -> Plan {
    Plan::read(file.as_bytes()).unwrap_or_else(|error| panic!("{error}"))
}

/// A shot as this plan has it, with the driver pressure that it sets, in a tube of this efficiency and attenuation (1/m): from the wall back to the stations
/// the time is the integral of dy/(U (1 + α y)), which is ln(1 + α y)/(α U).
fn fired(plan: &Plan, name: &str, efficiency: f64, attenuation: f64) -> String {
    let report = plan.report().unwrap();
    let planned = plan.efficiency.as_ref().map_or(1.0, |planned| planned.value().to_f64());
    let speed = report.incident.speed.value * efficiency / planned;
    let arrival = |y: &f64| 0.01 - libm::log1p(attenuation * y) / (attenuation * speed);
    let station = |y: &f64| format!(r#"{{ "name": "{y}", "from_end_wall": "{y} ± 0.0003 m", "arrival": "{} ± 2.5e-7 s" }}"#, arrival(y));
    let stations: Vec<String> = STATIONS.iter().map(station).collect();
    let field = |name: &str| {
        let start = DEMO.find(&format!("\"{name}\":")).unwrap();
        DEMO[start..].lines().next().unwrap().to_string()
    };
    format!(
        r#"{{ "record": "shot/1", "name": "{name}", {} {}
        "fill": {{ "pressure": "{} ± 6 Pa", "temperature": "296.0 ± 0.5 K" }}, "stations": [{}],
        "driver": {{ "gas": {{ "He": "balance" }}, "pressure": "{} ± 500 Pa(a)", "temperature": "296 ± 0.5 K" }} }}"#,
        field("gas"),
        field("heat_capacity"),
        report.fill.p1.value,
        stations.join(", "),
        report.fill.p4.unwrap().value
    )
}

fn compared(plan: &Plan, records: &[&str]) -> CompareReport {
    let mut comparison = Comparison::new(plan).unwrap();
    for record in records {
        let shot = Shot::read(record.as_bytes()).unwrap_or_else(|error| panic!("{error}"));
        comparison.add(&shot).unwrap_or_else(|error| panic!("{error}"));
    }
    comparison.report()
}

/// The demo plan against one record.
fn alone(record: &str) -> CompareReport {
    compared(&plan(DEMO), &[record])
}

fn refused(records: &[&str], names: &[&str]) {
    let plan = plan(DEMO);
    let mut comparison = Comparison::new(&plan).unwrap();
    let (last, before) = records.split_last().unwrap();
    for record in before {
        comparison.add(&Shot::read(record.as_bytes()).unwrap()).unwrap();
    }
    let error = comparison.add(&Shot::read(last.as_bytes()).unwrap()).expect_err(last).to_string();
    for name in names {
        assert!(error.contains(name), "\"{name}\" is not in: {error}");
    }
}

fn codes(flags: &[Flag]) -> Vec<&str> {
    flags.iter().map(|flag| flag.code.as_str()).collect()
}

fn close(found: f64, expected: f64, relative: f64) {
    assert!((found / expected - 1.0).abs() <= relative, "{found} {expected}");
}

/// Efficiency and attenuation come back, whatever they are, and a shot that does what was planned does not depart from the plan.
#[test]
fn a_shot_of_known_efficiency_and_attenuation_gives_both_again() {
    let wider = changed(DEMO, r#""driver_bore": "81.0 mm""#, r#""driver_bore": "150 mm""#);
    let step =
        changed(DEMO, r#"{ "temperature": "1650 K", "pressure": "2.00 bar(a)" }"#, r#"{ "step": "2 bar", "fill_pressure": "6 kPa" }"#);
    for file in [DEMO, &wider, &step] {
        let plan = plan(file);
        for (efficiency, attenuation) in [(PLANNED, 0.01), (0.85, 0.025), (1.01, 0.003)] {
            let report = compared(&plan, &[&fired(&plan, "A", efficiency, attenuation)]);
            let shot = &report.shots[0];
            close(shot.efficiency.as_ref().unwrap().value, efficiency, 1e-11);
            close(shot.attenuation.as_ref().unwrap().value, attenuation, 1e-7);
            assert!(shot.counts.efficiency && shot.counts.attenuation && shot.counts.setting, "{shot:?}");
            assert!((shot.departure.speed - (efficiency / PLANNED - 1.0)).abs() < 1e-10, "{:?}", shot.departure);
            assert!(shot.departure.driver_pressure.unwrap().abs() < 1e-14 && shot.departure.fill.abs() < 1e-14);
            if efficiency == PLANNED {
                let off = &shot.departure;
                let most = [off.mach, off.temperature, off.pressure, off.step].iter().fold(0.0, |most: f64, off| most.max(off.abs()));
                assert!(most < 1e-9, "{off:?}");
            }
            assert!(shot.ideal_mach.as_ref().unwrap().proven.is_some());
        }
    }
}

/// Three shots around the mean: s is the distance of two neighbours, and that of the next one √(1 + 1/3) of it.
#[test]
fn scatter_that_was_put_in_comes_out() {
    let plan = plan(DEMO);
    let records = [("A", 0.92, 0.012), ("B", 0.94, 0.010), ("C", 0.93, 0.008)].map(|(name, e, a)| fired(&plan, name, e, a));
    let report = compared(&plan, &records.each_ref().map(String::as_str));
    let (efficiency, attenuation) = (report.efficiency.as_ref().unwrap(), report.attenuation.as_ref().unwrap());
    let next = libm::sqrt(4.0 / 3.0);
    for (spread, mean, s) in [(efficiency, 0.93, 0.01), (attenuation, 0.010, 0.002)] {
        close(spread.mean.value, mean, 1e-8);
        close(spread.standard_deviation.unwrap(), s, 1e-6);
        close(spread.next.unwrap(), s * next, 1e-6);
        close(spread.mean.standard_uncertainty.unwrap(), s / libm::sqrt(3.0), 1e-6);
        assert_eq!((spread.shots, spread.degrees_of_freedom), (3, 2));
        // JCGM 100:2008, table G.2: two degrees of freedom, 95.45 % (from memory).
        close(spread.mean.coverage_factor.unwrap(), 4.53, 1e-3);
    }
    let speed = report.speed.as_ref().unwrap();
    close(speed.standard_deviation.unwrap(), 0.01 / PLANNED, 1e-6);
    assert!(speed.mean.value.abs() < 1e-9);
    // The fill was met exactly: what is left is what its gauge is uncertain by, 6 Pa.
    let fill = report.fill.as_ref().unwrap();
    assert!(fill.standard_deviation.unwrap() < 1e-14);
    close(fill.stated.unwrap(), 6.0 / report.plan.fill.value, 1e-12);
    let ready = &report.ready;
    assert_eq!(ready.efficiency.as_deref(), Some("0.930 ± 0.012"));
    assert_eq!(ready.attenuation.as_deref(), Some("1.00 ± 0.23 %/m"));
    assert_eq!(
        ready.tolerance,
        ReadyTolerance { fill: Some("0.10 %".to_string()), speed: Some("1.1 %".to_string()), disturbance: Some("1 %".to_string()) }
    );
    // The plan allows for 0.5 % in speed and 0.3 % in fill.
    let exceeded: Vec<&Flag> = report.flags.iter().filter(|flag| flag.code == "tolerance-exceeded").collect();
    assert!(exceeded.len() == 1 && exceeded[0].text.contains("tolerance.speed says 0.5 %"), "{exceeded:?}");
    // Shots of one and the same tube scatter less than they state.
    let quiet = [("A", 0.93, 0.010), ("B", 0.931, 0.0101)].map(|(name, e, a)| fired(&plan, name, e, a));
    let quiet = compared(&plan, &quiet.each_ref().map(String::as_str));
    assert!(!codes(&quiet.flags).iter().any(|code| matches!(*code, "tolerance-exceeded" | "scatter-exceeds-stated")), "{:?}", quiet.flags);
    // Then the attenuation is as uncertain as each fit of it.
    let (spread, line) = (quiet.attenuation.unwrap(), quiet.ready.attenuation.unwrap());
    let line = Quantity::parse(&line, Dimension::PerLength).unwrap();
    assert!(spread.stated > spread.next);
    close(line.standard_uncertainty().unwrap(), spread.stated.unwrap(), 0.05);
}

/// What is pasted is read again, and the driver pressure of the new plan is the one that makes the wanted shock at the mean efficiency.
#[test]
fn the_lines_go_back_into_the_plan() {
    let demo = plan(DEMO);
    let records = [("A", 0.88, 0.021), ("B", 0.90, 0.022)].map(|(name, e, a)| fired(&demo, name, e, a));
    let report = compared(&demo, &records.each_ref().map(String::as_str));
    let lines = report.ready.lines();
    assert_eq!(lines.len(), 3);
    let kept =
        DEMO.lines().filter(|line| !["efficiency", "attenuation", "tolerance"].iter().any(|field| line.contains(&format!("\"{field}\":"))));
    let file = kept.collect::<Vec<_>>().join("\n");
    let file = changed(&file, "\"notes\"", &format!("{},\n\"notes\"", lines.join(",\n")));
    let again = plan(&file);
    assert_eq!(again.efficiency.as_ref().unwrap().value().to_f64(), 0.89);
    // The new driver pressure is the one at which a tube of that mean reaches the target.
    assert!(again.report().unwrap().fill.p4.unwrap().value > 1.02 * report.plan.driver_pressure.as_ref().unwrap().value);
    let next = compared(&again, &[&fired(&again, "C", 0.89, 0.0215)]);
    close(next.shots[0].efficiency.as_ref().unwrap().value, 0.89, 1e-11);
    assert!(next.shots[0].departure.temperature.abs() < 1e-9, "{:?}", next.shots[0].departure);
    // A third shot is as far from the mean of two as its standard uncertainty says: √(s² + s²/2), s = 0.02/√2.
    close(again.efficiency.unwrap().standard_uncertainty().unwrap(), libm::sqrt(0.0002 * 1.5), 0.05);
    assert!(report.to_text(&demo).contains(&format!("  {},\n  {},\n  {},\n", lines[0], lines[1], lines[2])));
}

#[test]
fn one_shot_has_no_scatter() {
    let report = alone(&fired(&plan(DEMO), "A", 0.9, 0.01));
    for spread in [&report.efficiency, &report.attenuation, &report.speed, &report.fill] {
        let spread = spread.as_ref().unwrap();
        assert_eq!((spread.standard_deviation, spread.next, spread.mean.expanded, spread.degrees_of_freedom), (None, None, None, 0));
    }
    assert!(codes(&report.flags).contains(&"one-shot"));
    // Pasted without its ± it would take the band of p4 from the plan.
    assert!(report.ready.efficiency.is_none() && codes(&report.flags).contains(&"not-ready"));
    assert!(report.ready.attenuation.as_ref().unwrap().starts_with("1.00 ± 0."), "{:?}", report.ready);
    assert_eq!(report.ready.tolerance, ReadyTolerance { disturbance: Some("1 %".to_string()), ..ReadyTolerance::default() });
    let text = report.to_text(&plan(DEMO));
    assert!(
        text.contains("one past shot")
            && text.contains("not known")
            && !text.contains("\"efficiency\":")
            && !text.contains("\"tolerance\":"),
        "{text}"
    );
    // Times without uncertainties give an attenuation that no plan takes.
    let record = fired(&plan(DEMO), "A", 0.9, 0.01).replace(" ± 2.5e-7 s", " s").replace(" ± 0.0003 m", " m");
    let report = alone(&record);
    assert!(report.attenuation.is_some() && report.ready.attenuation.is_none() && codes(&report.flags).contains(&"not-ready"));
}

/// Against the differences that an error of each input makes.
#[test]
fn an_efficiency_is_as_uncertain_as_its_inputs() {
    let record = |fill: f64, speed: f64, pressure: f64, temperature: f64, which: usize| {
        let stated: Vec<String> =
            [20.0, 3.0, 4e3, 5.0].iter().enumerate().map(|(at, u)| if at == which { u.to_string() } else { "1e-9".into() }).collect();
        format!(
            r#"{{ "record": "shot/1", "gas": {{ "heat_capacity_ratio": "7/5", "molar_mass": "28.0134 g/mol" }},
            "fill": {{ "pressure": "{fill} ± {} Pa", "temperature": "296.0 ± 1e-9 K" }}, "shock_speed": "{speed} ± {} m/s",
            "driver": {{ "pressure": "{pressure} ± {} Pa(a)", "temperature": "{temperature} ± {} K" }} }}"#,
            stated[0], stated[1], stated[2], stated[3]
        )
    };
    let found = |record: &str| alone(record).shots[0].efficiency.clone().unwrap();
    for (which, by) in [20.0, 3.0, 4e3, 5.0].into_iter().enumerate() {
        let moved = |sign: f64| {
            let mut inputs = [6e3, 880.0, 150e3, 296.0];
            inputs[which] += sign * by;
            found(&record(inputs[0], inputs[1], inputs[2], inputs[3], which)).value
        };
        let stated = found(&record(6e3, 880.0, 150e3, 296.0, which));
        close(stated.standard_uncertainty.unwrap(), (moved(1.0) - moved(-1.0)).abs() / 2.0, 0.002);
        assert_eq!(stated.coverage_factor, Some(2.0));
    }
    // The ideal Mach number solves the shock tube equation for constant heat capacities (H. W. Liepmann and A. Roshko, Elements of Gasdynamics,
    // chapter 3; from memory), with 4 helium and 1 as typed above.
    let mach = alone(&record(6e3, 880.0, 150e3, 296.0, 0)).shots[0].ideal_mach.as_ref().unwrap().value;
    let sound_ratio = libm::sqrt(1.4 / 28.0134 / (5.0 / 3.0 / 4.002_602));
    let expansion = 1.0 - (2.0 / 3.0) / 2.4 * sound_ratio * (mach - 1.0 / mach);
    close((1.0 + 2.8 / 2.4 * (mach * mach - 1.0)) * libm::pow(expansion, -5.0), 25.0, 1e-12);
    // One that is not stated leaves all unknown, as everywhere.
    let unknown = record(6e3, 880.0, 150e3, 296.0, 0).replace(" ± 1e-9 Pa(a)", " Pa(a)");
    assert_eq!(found(&unknown).standard_uncertainty, None);
}

#[test]
fn a_shot_says_where_it_does_not_count() {
    let shot = fired(&plan(DEMO), "A", 0.92, 0.01);
    let driver = &shot[shot.find("\"driver\"").unwrap()..];
    let counted = |efficiency, attenuation, setting| Counted { efficiency, attenuation, setting };
    let wanted = compared(&plan(DEMO), &[]).plan;
    let (p1, p4) = (wanted.fill.value, wanted.driver_pressure.unwrap().value);
    for (record, code, counts) in [
        (shot.clone(), "", counted(true, true, true)),
        (changed(&shot, &format!(",\n        {driver}"), " }"), "no-efficiency", counted(false, true, true)),
        (changed(&shot, "\"CH4\": \"0.40 %\"", "\"CH4\": \"0.70 %\""), "other-gas", counted(true, true, false)),
        (changed(&shot, "\"CH4\": \"0.40 %\"", "\"CH4\": \"0.59 %\""), "", counted(true, true, true)),
        (changed(&shot, "\"equilibrium\"", "\"frozen\""), "other-heat-capacity", counted(true, true, true)),
        (changed(&shot, "\"He\": \"balance\"", "\"He\": \"95 %\", \"N2\": \"balance\""), "other-driver", counted(true, true, true)),
        (changed(&shot, "\"gas\": { \"He\": \"balance\" }, ", ""), "driver-from-plan", counted(true, true, true)),
        (changed(&shot, "\"stations\"", "\"attenuation\": \"1.0 ± 0.5 %/m\", \"stations\""), "allowance", counted(true, false, true)),
        (
            changed(&shot, "\"stations\"", "\"tube\": { \"driven_bore\": \"70 mm\" }, \"stations\""),
            "other-tube",
            counted(false, false, false),
        ),
        (changed(&shot, "\"stations\"", "\"tube\": { \"driven_bore\": \"81.1 mm\" }, \"stations\""), "", counted(true, true, true)),
        (changed(&shot, &format!("\"{p1}"), &format!("\"{}", p1 * 1.11)), "other-setting", counted(true, true, false)),
        (changed(&shot, &format!("\"{p4} ±"), "\"10000 ±"), "doubtful-efficiency", counted(false, true, false)),
    ] {
        let report = alone(&record);
        let past = &report.shots[0];
        assert!(if code.is_empty() { past.flags.is_empty() } else { codes(&past.flags).contains(&code) }, "{code}: {:?}", past.flags);
        assert_eq!(past.counts, counts, "{code}");
        assert_eq!(
            [report.efficiency.is_some(), report.attenuation.is_some(), report.speed.is_some()],
            [counts.efficiency, counts.attenuation, counts.setting]
        );
        assert!(!codes(&past.report_flags).contains(&"not-used"), "{:?}", past.report_flags);
        let text = report.to_text(&plan(DEMO));
        assert!(text.contains(&format!("[{code}]")) || code.is_empty(), "{text}");
    }
    // A speed has no attenuation.
    let given = format!("{} \"shock_speed\": \"840 ± 1 m/s\" }}", &shot[..shot.find("\"stations\"").unwrap()]);
    let report = alone(&given);
    assert_eq!(codes(&report.shots[0].flags), ["no-efficiency", "no-attenuation"]);
    assert!(report.ready.attenuation.is_none() && codes(&report.flags).contains(&"no-shot"));
    // What the plan has no driver for stays unknown.
    let bare = DEMO.lines().filter(|line| !line.contains("\"driver\": { \"gas\"")).collect::<Vec<_>>().join("\n");
    let unknown = changed(&shot, "\"gas\": { \"He\": \"balance\" }, ", "");
    let report = compared(&plan(&bare), &[&unknown]);
    assert!(report.shots[0].flags[0].text.contains("neither the record nor the plan has driver.gas"), "{:?}", report.shots[0].flags);
}

/// Settings that were meant for another state do not make the scatter of this one.
#[test]
fn only_shots_for_this_state_tell_how_well_it_is_met() {
    let demo = plan(DEMO);
    let hotter = plan(&changed(DEMO, "1650 K", "1900 K"));
    let records = [fired(&demo, "A", 0.93, 0.01), fired(&demo, "B", 0.94, 0.01), fired(&hotter, "C", 0.95, 0.01)];
    let report = compared(&demo, &records.each_ref().map(String::as_str));
    assert_eq!(report.efficiency.unwrap().shots, 3);
    let speed = report.speed.unwrap();
    assert_eq!(speed.shots, 2);
    close(speed.standard_deviation.unwrap(), 0.01 / PLANNED / libm::sqrt(2.0), 1e-6);
}

#[test]
fn what_cannot_be_compared_is_refused() {
    let shot = fired(&plan(DEMO), "A", 0.92, 0.01);
    refused(&[&shot, &shot], &["same record as one before it, shot A", "fnv1a64:", "name each shot once"]);
    let p4 = plan(DEMO).report().unwrap().fill.p4.unwrap().value;
    let low = changed(&shot, &format!("\"{p4} ± 500"), "\"5000 ± 50");
    refused(&[&low], &["driver.pressure", "5000 ± 50 Pa(a)", "not above that of the fill", "(g) and (a)"]);
    refused(&[&changed(&shot, "\"He\"", "\"helium\"")], &["driver.gas", "helium"]);
    let narrow = "\"tube\": { \"driven_bore\": \"81 mm\", \"driver_bore\": \"80.5 mm\" }, \"stations\"";
    refused(&[&changed(&shot, "\"stations\"", narrow)], &["tube.driver_bore", "narrower"]);
    // An edited copy is another file of the same name.
    let report = compared(&plan(DEMO), &[&shot, &changed(&shot, "296 ± 0.5 K", "296.0 ± 0.5 K")]);
    assert_eq!(codes(&report.shots[1].flags), ["same-name"]);
    // A plan that cannot be computed is refused by itself.
    let plan = plan(&changed(DEMO, "1650 K", "16500 K"));
    assert_eq!(Comparison::new(&plan).unwrap_err().kind, ErrorKind::Value);
}

/// What goes beyond a plan is not offered to it.
#[test]
fn lines_that_a_plan_refuses_are_left_out() {
    let demo = plan(DEMO);
    let records = [fired(&demo, "A", 0.5, 0.01), fired(&demo, "B", 0.95, 0.01)];
    let report = compared(&demo, &records.each_ref().map(String::as_str));
    assert_eq!((&report.ready.efficiency, &report.ready.tolerance.speed), (&None, &None));
    let flag = report.flags.iter().find(|flag| flag.code == "not-ready").unwrap();
    assert!(flag.text.contains("efficiency, tolerance.speed"), "{}", flag.text);
    assert!(codes(&report.flags).contains(&"scatter-exceeds-stated"));
}

#[test]
fn the_text_names_shots_lines_and_cautions() {
    let demo = plan(DEMO);
    let report = compared(&demo, &PAST);
    let text = report.to_text(&demo);
    let place = |words: &str| text.find(words).unwrap_or_else(|| panic!("{words}: {text}"));
    assert!(place("[can-burn]") < place("wanted ") && text.matches("[can-burn]").count() == 1);
    for name in ["K-0301", "K-0302", "K-0303"] {
        assert!(text.lines().any(|line| line.starts_with(name) && line.matches('%').count() >= 5), "{text}");
    }
    let flat = text.split_whitespace().collect::<Vec<_>>().join(" ");
    assert!(flat.contains("No number here authorises a shot.") && flat.contains("Ratings are not checked"));
    // Two degrees of freedom.
    assert!(flat.contains("95 % would need 4.5 times"), "{text}");
    for shot in &report.shots {
        assert!(text.contains(&shot.input_digest));
    }
    let step =
        changed(DEMO, r#"{ "temperature": "1650 K", "pressure": "2.00 bar(a)" }"#, r#"{ "step": "2 bar", "fill_pressure": "6 kPa" }"#);
    let step = plan(&step);
    assert!(compared(&step, &PAST).to_text(&step).lines().any(|line| line.starts_with("shot ") && line.ends_with("step")));
}

/// The invented shots were made with efficiencies 0.921, 0.934 and 0.926 and attenuations of 1.35, 1.15 and 1.45 %/m, and noise of 0.15 us.
#[test]
fn the_demo_shots_give_what_they_were_made_with() {
    let report = compared(&plan(DEMO), &PAST);
    for (shot, (efficiency, attenuation)) in report.shots.iter().zip([(0.921, 0.0135), (0.934, 0.0115), (0.926, 0.0145)]) {
        let off = |found: &ReportQuantity, made: f64| (found.value - made).abs() / found.standard_uncertainty.unwrap();
        assert!(off(shot.efficiency.as_ref().unwrap(), efficiency) < 1.0, "{shot:?}");
        assert!(off(shot.attenuation.as_ref().unwrap(), attenuation) < 2.0, "{shot:?}");
        assert!(shot.flags.is_empty(), "{:?}", shot.flags);
    }
}

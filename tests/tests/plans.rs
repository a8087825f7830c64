//! Plans: against plain doubles of the same steps, and back again by the reduction of the planned shot; the driver there and back.

mod common;

use common::property::check;
use common::thermal::air;
use endwall::gas::{Fill, Gas, HeatCapacityModel, HeatCapacityRatio, ThermallyPerfectGas};
use endwall::number::{Ball, Enclosure, Rational};
use endwall::record::Plan;
use endwall::shock::{Entry, Incident, Output, ThermalFill, ThermalShock};
use endwall::tube::{BehindShock, Contact, Driver, DriverError, Efficiency, Event, Lengths, Limit, TestGas, Tube, WaveDiagram};
use endwall_tests::plain_plan::{PlainGas, PlainPlan, Wanted};
use endwall_tests::tolerances::{PLAIN_PLAN, PLANNED_SHOT};
use proptest::prelude::{Just, Strategy, prop_oneof};
use proptest::test_runner::TestCaseError;
use proptest::{prop_assert, prop_assert_eq};

/// γ as a ratio, and molar mass in mg/mol.
type Typed = ((u32, u32), u32);

fn gas((ratio, mass): Typed) -> Gas {
    let ratio = HeatCapacityRatio::ratio(ratio.0, ratio.1).expect("in the domain");
    Gas::new(ratio, Rational::ratio(u128::from(mass), 1_000_000).expect("not zero")).expect("in the domain")
}

fn plain(((n, d), mass): Typed) -> PlainGas {
    PlainGas { gamma: f64::from(n) / f64::from(d), molar_mass: f64::from(mass) / 1e6 }
}

fn test_gas() -> impl Strategy<Value = Typed> {
    (prop_oneof![Just((5, 3)), Just((7, 5)), Just((9, 7)), Just((6, 5))], 10_000u32..130_000)
}

fn driver_gas() -> impl Strategy<Value = Typed> {
    prop_oneof![Just(((5, 3), 4_003)), Just(((7, 5), 2_016)), Just(((5, 3), 20_180)), Just(((7, 5), 28_013)), Just(((3, 2), 8_000))]
}

/// An error of the library where there should be an answer.
fn fail(error: impl std::fmt::Display) -> TestCaseError {
    TestCaseError::fail(error.to_string())
}

/// The relative difference of a plain value, and the strength of the shock for which it stands.
fn close(name: &str, plain: f64, proven: f64, scale: f64) -> Result<(), TestCaseError> {
    prop_assert!((plain - proven).abs() <= PLAIN_PLAN * scale, "{name}: plain {plain:e}, proven {proven:e}");
    Ok(())
}

/// Every number of the plan, with proof and without.
fn compare(wanted: &Wanted, typed: [Typed; 2], plan: &PlainPlan) -> Result<(), TestCaseError> {
    let [temperature_5, pressure_5] = wanted.target;
    let temperature = wanted.test_gas.1;
    let trial = Fill::new(gas(typed[0]), pressure_5, temperature).map_err(fail)?;
    let shock = Incident::new(&trial, Entry::ReflectedTemperature, temperature_5).map_err(fail)?;
    let fill_pressure = (Enclosure::from(pressure_5) / shock.output(Output::ReflectedPressureRatio)).middle();
    let fill = Fill::new(gas(typed[0]), fill_pressure, temperature).map_err(fail)?;
    let shock = Incident::new(&fill, Entry::ShockSpeed, shock.nearest(Output::ShockSpeed)).map_err(fail)?;
    let near = |name: &str, plain: f64, proven: f64| close(name, plain, proven, proven.abs());
    near("p1", plan.fill_pressure, fill_pressure)?;
    let speeds = [Output::ShockSpeed, Output::Mach, Output::GasSpeed2, Output::ReflectedSpeed];
    for (output, plain) in speeds.into_iter().zip(plan.speeds) {
        near("speed", plain, shock.nearest(output))?;
    }
    let behind = BehindShock::from(&shock);
    let driver = Driver::new(gas(typed[1]), wanted.driver.1).map_err(fail)?;
    let drive = driver.for_shock(&behind).map_err(fail)?;
    for (state, plain) in [shock.state_2(), shock.state_5(), drive.state_3].into_iter().zip(plan.states) {
        near("pressure", plain.pressure, state.pressure.middle())?;
        near("temperature", plain.temperature, state.temperature.middle())?;
        near("density", plain.density, state.density.middle())?;
        near("sound speed", plain.sound_speed, state.sound_speed.middle())?;
    }
    near("p4", plan.driver_pressures[0], drive.pressure.middle())?;
    let efficiency = Efficiency::new(wanted.efficiency[0], wanted.efficiency[1]).map_err(fail)?;
    let band = driver.pressure_for_mach(TestGas::from(&fill), shock.nearest(Output::Mach), efficiency).map_err(fail)?;
    for (plain, proven) in plan.driver_pressures[1..].iter().zip([band.low, band.pressure, band.high]) {
        near("p4 at the efficiency", *plain, proven)?;
    }
    let contact = Contact::new(&behind, &drive);
    let met = contact.interaction().map_err(fail)?;
    let plain = &plan.meeting;
    close("mismatch", plain.mismatch, contact.mismatch().nearest(), 1.0 + plain.mismatch.abs())?;
    near("pressure at the contact surface", plain.pressure, met.pressure.middle())?;
    close("contact speed", plain.contact_speed, met.contact_speed.middle(), plan.speeds[2])?;
    let transmitted = [met.transmitted_mach, met.transmitted_speed, met.transmitted_sound_speed];
    for (plain, proven) in plain.transmitted.into_iter().zip(transmitted) {
        near("transmitted shock", plain, proven.middle())?;
    }
    for (plain, proven) in plain.returned.into_iter().zip([met.returned_mach, met.returned_speed]) {
        near("returned wave", plain, proven.middle())?;
    }
    near("end wall after the returned wave", plain.end_wall_pressure, met.end_wall_pressure.middle())?;
    let speeds = driver.speeds(&behind).map_err(fail)?;
    let lengths = Lengths { driven: Ball::from(wanted.lengths[0]), driver: Ball::from(wanted.lengths[1]) };
    let tube = Tube { speeds, lengths, contact: contact.contact_return().map_err(fail)? };
    let diagram = WaveDiagram::new(tube).map_err(fail)?;
    let crossings = [tube.contact_meeting(), tube.head_leaves_fan(), tube.head_meets_contact(), tube.head_meets_reflected_shock()]
        .map(Event::enclosure);
    for ([place, time], proven) in plan.crossings.into_iter().zip(crossings) {
        close("place of a crossing", place, proven.position.middle(), wanted.lengths[0] + wanted.lengths[1])?;
        near("time of a crossing", time, proven.time.middle())?;
    }
    near("shortest driver", plan.shortest_driver, diagram.shortest_driver(0.0).map_err(fail)?.middle())?;
    let time = diagram.test_time(0.0).map_err(fail)?;
    near("start", plan.uniform[0], time.start.middle())?;
    if time.limit == Limit::IncidentOvertaken {
        prop_assert!(plan.uniform[1] <= plan.uniform[0] && !plan.by_contact);
        return Ok(());
    }
    near("end", plan.uniform[1], time.end.middle())?;
    prop_assert_eq!(plan.by_contact, time.limit == Limit::ContactReturn);
    Ok(())
}

#[test]
fn a_plan_in_plain_doubles_has_the_same_numbers() {
    let inputs = (test_gas(), driver_gas(), 250.0f64..450.0, 0.02f64..3.0, 1e4f64..1e7, 280.0f64..600.0, 2.0f64..12.0, 0.5f64..12.0);
    let (kinds, driven) = (std::cell::Cell::new([0; 2]), std::cell::Cell::new(0));
    check(41, 500, &inputs, |(test_gas, driver, temperature, excess, pressure, driver_temperature, driven_length, driver_length)| {
        let wanted = Wanted {
            test_gas: (plain(test_gas), temperature),
            target: [temperature * (1.0 + excess), pressure],
            driver: (plain(driver), driver_temperature),
            lengths: [driven_length, driver_length],
            efficiency: [0.9, 0.02],
        };
        let plan = wanted.plan();
        // The ideal shock that an efficiency asks for may be beyond the driver.
        if !plan.driver_pressures.iter().all(|pressure| pressure.is_finite()) {
            return Ok(());
        }
        driven.set(driven.get() + 1);
        let kind = usize::from(plan.by_contact);
        let mut seen = kinds.get();
        seen[kind] += 1;
        kinds.set(seen);
        compare(&wanted, [test_gas, driver], &plan)
    });
    println!("{} plans with a driver that is fast enough, ended by the head and by the contact surface: {:?}", driven.get(), kinds.get());
    assert!(kinds.get().into_iter().all(|count| count > 50), "{:?}", kinds.get());
}

/// A planned shot: the target, and what its reduction gives.
fn returns(
    plan: &Plan,
    target: [f64; 2],
    reduce: impl Fn(Enclosure, Enclosure) -> Result<[Enclosure; 2], TestCaseError>,
) -> Result<(), TestCaseError> {
    let planned = plan.solve().map_err(fail)?;
    let (fill_pressure, shock_speed) = (planned.fill_pressure.1, planned.shock_speed.1);
    // The exact answer of the plan lies in both enclosures, so the target lies in their image.
    for (wanted, found) in target.into_iter().zip(reduce(fill_pressure, shock_speed)?) {
        prop_assert!(found.is_proven() && found.contains(wanted), "{wanted} is not in {found:?}");
        prop_assert!(found.width() <= PLANNED_SHOT * wanted, "{found:?}");
    }
    let report = planned.shot.reduce().map_err(fail)?;
    let state = &report.states.reflected;
    for (wanted, found) in target.into_iter().zip([state.temperature.value, state.pressure.value]) {
        prop_assert!((found / wanted - 1.0).abs() <= PLANNED_SHOT, "{found} for {wanted}");
    }
    Ok(())
}

fn record(gas: &str, model: &str, temperature: f64, target: [f64; 2]) -> Result<Plan, TestCaseError> {
    let [temperature_5, pressure_5] = target;
    let file = format!(
        r#"{{ "record": "plan/1", "gas": {gas}{model}, "temperature": "{temperature} K",
           "target": {{ "temperature": "{temperature_5} K", "pressure": "{pressure_5} Pa" }}, "confirm": ["temperature", "target.pressure"] }}"#
    );
    Plan::read(file.as_bytes()).map_err(fail)
}

/// T1, T5/T1 − 1 and p5.
fn target() -> impl Strategy<Value = (f64, [f64; 2])> {
    let excess = prop_oneof![(-3.0f64..0.0).prop_map(|power| 10f64.powf(power)), 0.5f64..8.0];
    (273.5f64..400.0, excess, 1e4f64..1e7)
        .prop_map(|(temperature, excess, pressure)| (temperature, [temperature * (1.0 + excess), pressure]))
}

#[test]
fn reducing_a_planned_shot_returns_the_target() {
    check(42, 200, &(test_gas(), target()), |(typed, (temperature, target))| {
        let ((n, d), mass) = typed;
        let described = format!(r#"{{ "heat_capacity_ratio": "{n}/{d}", "molar_mass": "{mass}e-6 kg/mol" }}"#);
        let plan = record(&described, "", temperature, target)?;
        returns(&plan, target, |pressure, speed| {
            let fill = Fill::new(gas(typed), pressure, temperature).map_err(fail)?;
            let shock = Incident::new(&fill, Entry::ShockSpeed, speed).map_err(fail)?;
            Ok([shock.output(Output::Temperature5), shock.output(Output::Pressure5)])
        })
    });
}

#[test]
fn reducing_a_planned_shot_into_a_real_gas_returns_the_target() {
    let gases: [(&str, &[(&str, &str)]); 3] = [
        (r#"{ "CO2": "3 %", "Ar": "balance" }"#, &[("CO2", "0.03"), ("Ar", "0.97")]),
        (r#"{ "N2": "balance" }"#, &[("N2", "1")]),
        (r#"{ "N2": "79 %", "O2": "21 %" }"#, &[("N2", "0.79"), ("O2", "0.21")]),
    ];
    let models = [("equilibrium", HeatCapacityModel::Equilibrium), ("frozen", HeatCapacityModel::Frozen)];
    check(43, 40, &(0usize..3, 0usize..2, target()), |(gas, model, (temperature, target))| {
        let ((described, portions), (name, model)) = (gases[gas], models[model]);
        let plan = record(described, &format!(r#", "heat_capacity": "{name}""#), temperature, target)?;
        let portions: Vec<_> = portions.iter().map(|(name, fraction)| (*name, (*fraction).to_owned())).collect();
        let portions = common::thermal::portions(&portions);
        let gas = ThermallyPerfectGas::new(&portions).map_err(fail)?;
        returns(&plan, target, |pressure, speed| {
            let fill = ThermalFill::new(gas, model, pressure, temperature).map_err(fail)?;
            let shock = ThermalShock::new(&fill, Entry::ShockSpeed, speed).map_err(fail)?;
            Ok([shock.output(Output::Temperature5), shock.output(Output::Pressure5)])
        })
    });
}

/// From M to p4 to M, up to a millionth of a millionth below the Mach number that no driver pressure reaches.
#[test]
fn the_driver_pressure_leads_back_to_the_mach_number() {
    let areas = prop_oneof![Just("1"), Just("1.5"), Just("4")];
    // A fill pressure so low that p4 stays in its range even there.
    let inputs = (test_gas(), driver_gas(), 250.0f64..600.0, areas, prop_oneof![0.0f64..1.0, 1.0f64..12.0], -35.0f64..-30.0);
    let nearest = std::cell::Cell::new(0.0f64);
    check(44, 150, &inputs, |(test_gas, driver, temperature, area, below, power)| {
        let fill = Fill::new(gas(test_gas), 10f64.powf(power), 295.0).map_err(fail)?;
        let driver =
            Driver::new(gas(driver), temperature).and_then(|driver| driver.with_area_ratio(area.parse::<Rational>().expect("exact")));
        let (driver, test_gas) = (driver.map_err(fail)?, TestGas::from(&fill));
        let limit = driver.greatest_mach(test_gas).expect("a limit");
        let excess = (limit - 1.0) * (1.0 - 10f64.powf(-below));
        prop_assert!(excess < limit - 1.0);
        let drive = driver.for_shock(&test_gas.behind(Entry::MachExcess, excess).map_err(fail)?).map_err(fail)?;
        let back = driver.mach_excess(test_gas, drive.pressure).map_err(fail)?;
        prop_assert!(back.contains(excess) && back.width() <= 1e-14 * excess * (1.0 + 1.0 / excess), "{excess} is not in {back:?}");
        // From p4 to M to p4.
        let pressure = drive.pressure.middle();
        let found = driver.mach_excess(test_gas, pressure).map_err(fail)?;
        match driver.for_shock(&test_gas.behind(Entry::MachExcess, found).map_err(fail)?) {
            Ok(again) => prop_assert!(again.pressure.contains(pressure), "{pressure:e} is not in {:?}", again.pressure),
            // One more bit may be above the limit.
            Err(DriverError::TooFast { .. } | DriverError::PressureBeyondRange { .. }) => prop_assert!(below > 10.0),
            Err(error) => return Err(fail(error)),
        }
        nearest.set(nearest.get().max(below));
        Ok(())
    });
    println!("nearest to the limit: 10^-{:.1} of it", nearest.get());
    assert!(nearest.get() > 11.5);
}

/// The same in a gas whose heat capacity depends on temperature.
#[test]
fn the_driver_pressure_leads_back_to_the_mach_number_in_air() {
    let described = common::thermal::portions(&air());
    let gas_of_fill = ThermallyPerfectGas::new(&described).expect("air");
    check(45, 20, &(driver_gas(), 250.0f64..600.0, 0.001f64..3.0), |(driver, temperature, excess)| {
        let fill = ThermalFill::new(gas_of_fill, HeatCapacityModel::Equilibrium, 5e3, 295.0).map_err(fail)?;
        let test_gas = TestGas::from(&fill);
        let driver = Driver::new(gas(driver), temperature).map_err(fail)?;
        let drive = match driver.for_shock(&test_gas.behind(Entry::MachExcess, excess).map_err(fail)?) {
            Err(DriverError::TooFast { .. }) => return Ok(()),
            drive => drive.map_err(fail)?,
        };
        let back = driver.mach_excess(test_gas, drive.pressure).map_err(fail)?;
        prop_assert!(back.contains(excess) && back.width() <= 1e-14 * (1.0 + excess), "{excess} is not in {back:?}");
        Ok(())
    });
}

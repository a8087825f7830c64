extern crate std;

use super::*;
use crate::gas::species::{named, table};
use crate::gas::{Fill, HeatCapacityModel, HeatCapacityRatio, molar_gas_constant};
use crate::shock::{Incident, ThermalFill};
use crate::tube::pure_gases::{argon, exact, gas, helium, hydrogen, nitrogen, pure};
use crate::tube::{Contact, Unproven};

fn fill(gas: Gas) -> Fill {
    Fill::new(gas, 10e3, 295.0).unwrap()
}

/// An enclosure of 2 ulp at most that holds a number of twenty digits, to one more rounding.
fn holds(bounds: Enclosure, value: f64) -> bool {
    bounds.is_proven() && bounds.width_in_ulp() <= 2 && bounds.low().next_down() <= value && value <= bounds.high().next_up()
}

/// Computed from the same relations (Alpher and White with both Mach numbers as unknowns) in 40-digit arithmetic, outside this code.
#[test]
fn pressure_ratios_of_an_independent_calculation() {
    for (driver, temperature, test_gas, mach, area, ratio) in [
        (helium(), 295.0, nitrogen(), "2", "1", 9.811_415_342_931_778),
        (helium(), 295.0, argon(), "2", "1", 8.934_651_331_701_806),
        (helium(), 295.0, nitrogen(), "2", "2.25", 7.082_796_232_546_701),
        (helium(), 295.0, nitrogen(), "4", "2.25", 100.205_078_282_061_42),
        (hydrogen(), 300.0, argon(), "1.5", "4", 2.743_394_394_700_443),
        (hydrogen(), 300.0, argon(), "9", "1", 1_566.729_748_436_394_8),
    ] {
        let fill = fill(test_gas);
        let driver = Driver::new(driver, temperature).unwrap().with_area_ratio(exact(area)).unwrap();
        let drive = driver.for_shock(&TestGas::from(&fill).behind(Entry::Mach, exact(mach)).unwrap()).unwrap();
        assert!(holds(drive.pressure_ratio, ratio), "{mach} {area} {:?} {ratio}", drive.pressure_ratio);
        assert_eq!(drive.is_sonic, drive.mach_3.low() > 1.0);
        for bounds in [drive.pressure, drive.state_3.temperature, drive.state_3.density, drive.state_3.sound_speed, drive.mach_3] {
            assert!(bounds.width_in_ulp() <= 2, "{bounds:?}");
        }
    }
}

/// Taking the flow through the change of area for sonic where it is not leaves the pressure low: 8.6 % here (the same independent calculation).
#[test]
fn subsonic_flow_through_the_change_of_area_needs_more_pressure() {
    let fill = fill(nitrogen());
    let behind = TestGas::from(&fill).behind(Entry::Mach, 2.0).unwrap();
    let driver = Driver::new(helium(), 295.0).unwrap().with_area_ratio(exact("2.25")).unwrap();
    let drive = driver.for_shock(&behind).unwrap();
    let point = driver.corner(&behind, false);
    // a3/a4 = g − h u2/a4, where the greatest gas speed is g a4/h.
    let (gamma, h) = (point.gamma(), point.gamma().d / point.gamma().q.doubled());
    let sonic_ratio = (point.greatest_gas_speed().unwrap() - point.gas_speed) * h / point.sound_speed();
    let expansion = sonic_ratio.pow(gamma.ratio().doubled() / gamma.d);
    let as_if_sonic = (point.pressure / expansion).nearest() / drive.pressure.middle();
    assert!(!drive.is_sonic && (as_if_sonic - 0.914_245).abs() < 1e-6, "{as_if_sonic}");
}

/// E. F. Toro, Riemann Solvers and Numerical Methods for Fluid Dynamics, 3rd ed. (2009), section 4.3.3, tests 1 (Sod) and 3 (from memory; digits recomputed).
#[test]
fn published_riemann_problems() {
    for (left_pressure, right_density, right_pressure, star, speed, density, shock_speed) in [
        (1.0, 0.125, 0.1, 0.303_130_178_050_646_8, 0.927_452_620_048_949_9, 0.426_319_428_178, 1.752_155_732_03),
        (1000.0, 1.0, 0.01, 460.893_787_491_383_5, 19.597_451_388_723_05, 0.575_062_298_477, 23.517_536_966_9),
    ] {
        // The densities of the problem, as temperatures.
        let air = gas(7, 5, "0.029");
        let temperature = |pressure: f64, density: f64| pressure * 0.029 / (molar_gas_constant::<f64>() * density);
        let fill = Fill::new(air, right_pressure, temperature(right_pressure, right_density)).unwrap();
        let driver = Driver::new(air, temperature(left_pressure, 1.0)).unwrap();
        let excess = driver.mach_excess(TestGas::from(&fill), left_pressure).unwrap();
        assert!(excess.width_in_ulp() <= 2, "{excess:?}");
        let behind = TestGas::from(&fill).behind(Entry::MachExcess, excess.middle()).unwrap();
        let state = driver.for_shock(&behind).unwrap().state_3;
        let shock = Incident::new(&fill, Entry::MachExcess, excess.middle()).unwrap().output(Output::ShockSpeed);
        for (found, wanted, digits) in
            [(state.pressure, star, 1e-14), (state.gas_speed, speed, 1e-14), (state.density, density, 2e-12), (shock, shock_speed, 3e-12)]
        {
            assert!((found.middle() / wanted - 1.0).abs() < digits, "{found:?} {wanted}");
        }
    }
}

/// M − 1/M = (γ1 + 1)/(γ4 − 1) · a4/a1 is never passed, and infinite pressure is needed to reach it.
#[test]
fn the_limit_of_a_driver() {
    let fill = fill(nitrogen());
    let gas = TestGas::from(&fill);
    let driver = Driver::new(nitrogen(), 295.0).unwrap();
    let limit = driver.greatest_mach(gas).unwrap();
    // 2.4/0.4 = 6: M = 3 + √10.
    assert!((limit - (3.0 + libm::sqrt(10.0))).abs() < 1e-15);
    let near = |mach: f64| driver.for_shock(&gas.behind(Entry::Mach, mach).unwrap());
    assert!(near(limit - 0.1).unwrap().pressure_ratio.low() > 1e10);
    let Err(DriverError::TooFast { gas_speed, limit: fastest, greatest_mach }) = near(limit + 0.1) else { panic!() };
    assert!(gas_speed > fastest && greatest_mach == Some(limit));
    // Close to the limit the pressure leaves the range of a double, and its logarithm does not.
    let Err(DriverError::PressureBeyondRange { decimal_logarithm, greatest_mach }) = near(limit * (1.0 - 1e-15)) else { panic!() };
    assert!(decimal_logarithm > 80.0 && decimal_logarithm < 130.0 && greatest_mach == Some(limit));
    // A larger driver reaches more.
    let larger = driver.with_area_ratio(4.0).unwrap().greatest_mach(gas).unwrap();
    assert!(larger > limit + 0.3, "{larger}");
    let text = std::format!("{}", near(10.0).unwrap_err());
    assert!(text.contains("Mach 6.1623") && text.contains("vacuum"), "{text}");
}

#[test]
fn there_and_back() {
    for (driver, test_gas) in [(helium(), nitrogen()), (hydrogen(), argon()), (argon(), nitrogen())] {
        let fill = fill(test_gas);
        let gas = TestGas::from(&fill);
        for area in ["1", "1.5", "9"] {
            let driver = Driver::new(driver, 300.0).unwrap().with_area_ratio(exact(area)).unwrap();
            let limit = driver.greatest_mach(gas).unwrap() - 1.0;
            for part in [1e-9, 1e-4, 0.02, 0.2, 0.5, 0.8, 0.97] {
                let excess = part * limit;
                let drive = driver.for_shock(&gas.behind(Entry::MachExcess, excess).unwrap()).unwrap();
                assert!(drive.pressure.width_in_ulp() <= 2, "{area} {excess} {:?}", drive.pressure);
                // Both ends of p4 bracket the Mach number.
                let found = driver.mach_excess(gas, drive.pressure).unwrap();
                assert!(found.contains(excess), "{area} {excess} {found:?}");
                let one = driver.mach_excess(gas, drive.pressure.low()).unwrap();
                assert!(one.width_in_ulp() <= 2, "{area} {excess} {one:?}");
                let rounding = 4e-16 * (1.0 + 1.0 / excess);
                assert!((one.middle() / excess - 1.0).abs() < rounding, "{area} {excess} {one:?}");
            }
        }
    }
}

#[test]
fn a_thermally_perfect_test_gas_uses_its_own_state_2() {
    let portions = pure(&table::N2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let driver = Driver::new(helium(), 295.0).unwrap();
    for mach in [1.2, 2.0, 3.3] {
        let thermal = |model| ThermalFill::new(gas, model, 10e3, 295.0).unwrap();
        let (real, constant) = (thermal(HeatCapacityModel::Equilibrium), thermal(HeatCapacityModel::Constant));
        let drive = |fill| driver.for_shock(&TestGas::from(fill).behind(Entry::Mach, mach).unwrap()).unwrap();
        let (of_real, of_constant) = (drive(&real), drive(&constant));
        assert!(of_real.pressure.width_in_ulp() <= 2 && of_real.pressure_ratio.width_in_ulp() <= 2);
        let difference = of_real.pressure.middle() / of_constant.pressure.middle() - 1.0;
        assert!(difference.abs() > 1e-5 && difference.abs() < 0.03, "{mach} {difference}");
        let back = driver.mach_excess(TestGas::from(&real), of_real.pressure.middle()).unwrap();
        assert!(back.width_in_ulp() <= 2 && (back.middle() / (mach - 1.0) - 1.0).abs() < 1e-14, "{mach} {back:?}");
    }
    // Data of the test gas that end below what the driver reaches are named.
    let cold = pure(&table::CO2);
    let gas = ThermallyPerfectGas::new(&cold).unwrap();
    let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 1.0, 295.0).unwrap();
    let hot = Driver::new(hydrogen(), 6000.0).unwrap();
    let error = hot.mach_excess(TestGas::from(&fill), 1e9).unwrap_err();
    assert!(matches!(error, DriverError::Gas(error) if matches!(error.rule, Rule::HeatsBeyondData(..))), "{error}");
}

/// The hull of tolerances holds what their points give.
#[test]
fn tolerances_of_temperature_area_and_shock() {
    let fill = fill(nitrogen());
    let around = |x: f64| Enclosure::new(x * 0.99, x * 1.01).unwrap();
    let points = |x: f64| [x * 0.99, x, x * 1.01];
    for area in [2.0, 30.0] {
        let wide = Driver::new(helium(), around(295.0)).unwrap().with_area_ratio(around(area)).unwrap();
        let wide = wide.for_shock(&TestGas::from(&fill).behind(Entry::Mach, around(2.5)).unwrap()).unwrap();
        let mut hull: Option<Enclosure> = None;
        for temperature in points(295.0) {
            for area in points(area) {
                for mach in points(2.5) {
                    let driver = Driver::new(helium(), temperature).unwrap().with_area_ratio(area).unwrap();
                    let drive = driver.for_shock(&TestGas::from(&fill).behind(Entry::Mach, mach).unwrap()).unwrap();
                    assert!(wide.pressure.encloses(drive.pressure));
                    assert!(wide.state_3.temperature.encloses(drive.state_3.temperature));
                    assert!(wide.state_3.density.encloses(drive.state_3.density));
                    assert!(wide.state_3.sound_speed.encloses(drive.state_3.sound_speed));
                    assert!(wide.mach_3.encloses(drive.mach_3));
                    hull = Some(hull.map_or(drive.pressure, |hull| hull.hull(drive.pressure)));
                }
            }
        }
        let over = wide.pressure.width() / hull.unwrap().width() - 1.0;
        assert!(over < 1e-3, "{over}");
    }
}

#[test]
fn what_is_no_driver_is_refused() {
    let driver = Driver::new(helium(), 295.0).unwrap();
    assert!(matches!(
        Driver::new(helium(), -1.0),
        Err(DriverError::Driver { input: DriverInput::Temperature, rule: Rule::Above(0.0), .. })
    ));
    assert!(matches!(driver.with_area_ratio(0.99), Err(DriverError::Driver { rule: Rule::Between(..), .. })));
    let fill = fill(nitrogen());
    let gas = TestGas::from(&fill);
    let error = driver.mach_excess(gas, 10e3).unwrap_err();
    assert_eq!(error, DriverError::Driver { input: DriverInput::Pressure, value: 10e3, rule: Rule::Above(10e3) });
    assert!(driver.mach_excess(gas, f64::NAN).is_err());
    let tolerance = Driver::new(helium(), Enclosure::new(294.0, 296.0).unwrap()).unwrap();
    assert!(matches!(tolerance.mach_excess(gas, 98e3), Err(DriverError::Driver { rule: Rule::Exact, .. })));
    // So little above 1 that two digits are left is still proven; to all digits 1 is not.
    assert!(driver.with_area_ratio(exact("1.00000001")).unwrap().mach_excess(gas, 98e3).is_ok());
    let equal = driver.with_area_ratio(exact("1.00000000000000000000000000000001")).unwrap();
    assert!(matches!(equal.mach_excess(gas, 98e3), Err(DriverError::NotProven(Unproven::AreaChange))));
}

/// Helium has c = 5/2 by its polynomial, and then a thermally perfect driver is the closed form, forward and back.
#[test]
fn a_thermally_perfect_driver_of_constant_heat_capacity() {
    let portions = pure(&table::HE);
    let thermally_perfect = ThermallyPerfectGas::new(&portions).unwrap();
    let fill = fill(nitrogen());
    let test_gas = TestGas::from(&fill);
    let constant = Gas::new(HeatCapacityRatio::ratio(5, 3).unwrap(), thermally_perfect.molar_mass().enclosure()).unwrap();
    for (temperature, mach) in [(600.0, 1.001), (600.0, 2.0), (900.0, 3.0), (5000.0, 7.0)] {
        let thermal = Driver::thermally_perfect(&thermally_perfect, temperature).unwrap();
        let behind = test_gas.behind(Entry::Mach, mach).unwrap();
        let (own, closed) = (thermal.for_shock(&behind).unwrap(), Driver::new(constant, temperature).unwrap().for_shock(&behind).unwrap());
        for (own, closed) in [
            (own.pressure, closed.pressure),
            (own.pressure_ratio, closed.pressure_ratio),
            (own.state_3.temperature, closed.state_3.temperature),
            (own.state_3.density, closed.state_3.density),
            (own.state_3.sound_speed, closed.state_3.sound_speed),
            (own.mach_3, closed.mach_3),
        ] {
            assert!(own.overlaps(closed) && own.width_in_ulp() <= 2, "{temperature} {mach} {own:?} {closed:?}");
        }
        assert_eq!(own.is_sonic, closed.is_sonic);
        let (own, closed) = (Contact::new(&behind, &own), Contact::new(&behind, &closed));
        assert_eq!(own.tailoring(), closed.tailoring());
        let (own_pressure, closed) = (own.interaction().unwrap().pressure, closed.interaction().unwrap().pressure);
        assert!(own_pressure.overlaps(closed) && own_pressure.width_in_ulp() <= 2, "{own_pressure:?} {closed:?}");
        let back = thermal.mach_excess(test_gas, thermal.for_shock(&behind).unwrap().pressure.middle()).unwrap();
        assert!(back.width_in_ulp() <= 2 && (back.middle() / (mach - 1.0) - 1.0).abs() < 1e-12, "{back:?}");
    }
    let tailored = |driver: Driver<'_>| driver.tailored_mach(test_gas).unwrap().mach.middle();
    let own = tailored(Driver::thermally_perfect(&thermally_perfect, 600.0).unwrap());
    let closed = tailored(Driver::new(gas(5, 3, "0.004002602"), 600.0).unwrap());
    assert!((own / closed - 1.0).abs() < 1e-9, "{own} {closed}");
}

/// T3 and p4/p1, and p, contact speed and end-wall pressure over p1 after the reflected shock has met the contact surface: conservation laws and integrals
/// (tanh-sinh quadrature) of the published polynomials in 30-digit arithmetic, outside this code. Every gas has the heat capacity of its data.
#[test]
fn real_drivers_of_an_independent_calculation() {
    for (test_gas, t1, speed, driver, t4, answers) in REAL {
        let (of_test_gas, of_driver) = (pure(named(test_gas).unwrap()), pure(named(driver).unwrap()));
        let driver_gas = ThermallyPerfectGas::new(&of_driver).unwrap();
        let gas = ThermallyPerfectGas::new(&of_test_gas).unwrap();
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 1.0, exact(t1)).unwrap();
        let behind = TestGas::from(&fill).behind(Entry::ShockSpeed, exact(speed)).unwrap();
        let driver = Driver::thermally_perfect(&driver_gas, exact(t4)).unwrap();
        let drive = driver.for_shock(&behind).unwrap();
        let met = Contact::new(&behind, &drive).interaction().unwrap();
        let found = [drive.state_3.temperature, drive.pressure_ratio, met.pressure, met.contact_speed, met.end_wall_pressure];
        for (own, answer) in found.into_iter().zip(answers) {
            assert!(own.overlaps(Enclosure::from(exact(answer))) && own.width_in_ulp() <= 2, "{test_gas} {own:?} {answer}");
        }
    }
}

#[test]
fn a_driver_gas_is_not_taken_below_its_data() {
    let portions = pure(&table::N2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let fill = fill(nitrogen());
    let test_gas = TestGas::from(&fill);
    let driver = Driver::thermally_perfect(&gas, 300.0).unwrap();
    let error = driver.for_shock(&test_gas.behind(Entry::Mach, 2.0).unwrap()).unwrap_err();
    let DriverError::ExpandsBeyondData { coldest: 200.0, gas_speed, limit, greatest_mach: Some(mach) } = error else { panic!("{error}") };
    assert!(gas_speed > limit && mach > 1.69 && mach < 1.71, "{error}");
    // Up to there it works, and beyond it neither way gives a number.
    let near = driver.for_shock(&test_gas.behind(Entry::Mach, mach * (1.0 - 1e-9)).unwrap()).unwrap();
    assert!((near.state_3.temperature.middle() - 200.0).abs() < 1e-4);
    assert!(matches!(driver.mach_excess(test_gas, 1e6), Err(DriverError::ExpandsBeyondData { .. })));
    assert!(matches!(driver.with_area_ratio(2.0), Err(DriverError::ConstantOnly)));
    assert!(matches!(driver.speeds(&test_gas.behind(Entry::Mach, 1.2).unwrap()), Err(DriverError::ConstantOnly)));
    assert!(Driver::thermally_perfect(&gas, 199.0).is_err());
    assert!(Driver::thermally_perfect(&gas, Enclosure::new(299.0, 301.0).unwrap()).is_err());
}

type Real = (&'static str, &'static str, &'static str, &'static str, &'static str, [&'static str; 5]);

/// Test gas, T1, shock speed, driver gas, T4, and T3, p4/p1, p/p1, contact speed, end-wall pressure over p1.
const REAL: [Real; 3] = [
    (
        "N2",
        "295",
        "700",
        "N2",
        "1200",
        [
            "957.8090109729414086340092",
            "11.04892915270472061078008",
            "12.4498366103623872576333",
            "-72.3743695989340822880886",
            "10.2971697931954201711863",
        ],
    ),
    (
        "CO2",
        "300",
        "500",
        "N2",
        "600",
        [
            "461.5266529146264082709473",
            "9.654541747997234915172766",
            "10.4549111743268040921271",
            "-34.8456583237956235520738",
            "9.24513517736178070061865",
        ],
    ),
    (
        "Ar",
        "295",
        "700",
        "N2",
        "2500",
        [
            "2196.772598785403273320697",
            "10.10885453194910526764747",
            "12.4735170760374169877126",
            "-168.192370799607687153698",
            "7.54997414556001944518164",
        ],
    ),
];

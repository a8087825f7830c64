//! Checks of the waves into a thermally perfect gas: 40-digit answers, the closed forms, conservation, weak waves and the ends of the data.

use super::super::side::ContactSide;
use super::*;
use crate::gas::species::{named, table};
use crate::gas::{Fill, Gas, HeatCapacityModel, HeatCapacityRatio};
use crate::number::{Enclosure, Known};
use crate::shock::{Entry, ThermalFill};
use crate::tube::pure_gases::{exact, helium, pure};
use crate::tube::{Contact, Driver, Interaction, Tailoring, TestGas};

/// What follows a shock driven by helium of temperature T4.
fn met(gas: TestGas<'_>, entry: Entry, value: impl Into<Known>, t4: &str) -> Interaction {
    let behind = gas.behind(entry, value).unwrap();
    let driver = Driver::new(helium(), exact(t4)).unwrap();
    Contact::new(&behind, &driver.for_shock(&behind).unwrap()).interaction().unwrap()
}

#[test]
fn waves_are_those_of_forty_digits() {
    // The conservation laws and the integrals (tanh-sinh quadrature) of the published polynomials, solved by bracketing in 40-digit arithmetic, outside this
    // code: pressures over p1.
    for (name, t1, speed, wave, pressure, contact_speed, end_wall) in [
        (
            "N2",
            "295",
            "1000",
            Tailoring::Expansion,
            "40.40842082355777647017434",
            "-57.53002749859328354037738",
            "36.0934651489532811868331",
        ),
        ("N2", "295", "1400", Tailoring::Shock, "137.5766276225153843408835", "123.1732567316914937089826", "163.8315220720135527115961"),
        (
            "CO2",
            "300",
            "1250",
            Tailoring::Expansion,
            "205.5573143800398070128939",
            "-20.23319241287362329805585",
            "197.6961724847719467185683",
        ),
        (
            "CO2",
            "300",
            "700",
            Tailoring::Expansion,
            "24.55557961053657960987667",
            "-143.4357002043213324858325",
            "15.93579317807068917301607",
        ),
    ] {
        let portions = pure(named(name).unwrap());
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 1.0, exact(t1)).unwrap();
        let found = met(TestGas::from(&fill), Entry::ShockSpeed, exact(speed), t1);
        assert_eq!(found.returned, wave, "{name} {speed}");
        for (own, answer) in [(found.pressure, pressure), (found.contact_speed, contact_speed), (found.end_wall_pressure, end_wall)] {
            assert!(own.overlaps(Enclosure::from(exact(answer))), "{name} {speed} {own:?} {answer}");
            assert!(own.width_in_ulp() <= 2, "{name} {speed} {own:?}");
        }
        for own in [found.transmitted_mach, found.transmitted_speed, found.returned_mach, found.returned_speed] {
            assert!(own.width_in_ulp() <= 2, "{name} {speed} {own:?}");
        }
        if wave == Tailoring::Shock {
            assert!(found.returned_mach.low() > 1.0 && found.end_wall_pressure.low() > found.pressure.high());
        }
    }
}

/// Helium has c = 5/2 by its polynomial, and then everything is the closed form.
#[test]
fn constant_heat_capacity_is_the_closed_form() {
    let portions = pure(&table::HE);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let thermal = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 300.0).unwrap();
    let mass = gas.molar_mass().enclosure();
    let constant = Fill::new(Gas::new(HeatCapacityRatio::ratio(5, 3).unwrap(), mass).unwrap(), 10e3, 300.0).unwrap();
    // A hot driver makes it under-tailored and over-tailored.
    for (t4, mach) in [("300", 1.2), ("300", 1.7), ("2000", 1.5), ("5000", 2.5)] {
        let own = met(TestGas::from(&thermal), Entry::Mach, mach, t4);
        let closed = met(TestGas::from(&constant), Entry::Mach, mach, t4);
        assert_eq!(own.returned, closed.returned);
        for (own, closed) in [
            (own.pressure, closed.pressure),
            (own.contact_speed, closed.contact_speed),
            (own.transmitted_mach, closed.transmitted_mach),
            (own.transmitted_speed, closed.transmitted_speed),
            (own.transmitted_sound_speed, closed.transmitted_sound_speed),
            (own.returned_mach, closed.returned_mach),
            (own.returned_speed, closed.returned_speed),
            (own.end_wall_pressure, closed.end_wall_pressure),
        ] {
            assert!(own.overlaps(closed), "{t4} {mach} {own:?} {closed:?}");
        }
    }
}

/// Weak waves are sound: Δu = a y/γ to first order, for shock and expansion.
#[test]
fn weak_waves_are_sound() {
    for name in ["N2", "CO2", "SF6", "H2", "Ar"] {
        let portions = pure(named(name).unwrap());
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let side = ThermalSide::new(&gas, Ball::from(650.0));
        for (y, is_shock) in [(1e-7, true), (-1e-7, false)] {
            let speed = side.speed(Dual::variable(Ball::from(y), 0), is_shock);
            let sound = side.sound_speed() / side.gamma().value();
            assert!((speed.value() / (sound * Ball::from(y)) - Ball::whole(1)).magnitude() < 1e-7, "{name} {y} {speed:?}");
            let [slope] = speed.slopes();
            assert!((slope / sound - Ball::whole(1)).magnitude() < 3e-7, "{name} {y} {slope:?}");
            assert!(speed.value().radius() < 1e-18 * speed.value().magnitude(), "{name} {y} {speed:?}");
        }
    }
}

/// The slope of the speed is that of its differences, and energy is conserved across the shock.
#[test]
fn slopes_and_energy() {
    for species in table::ALL {
        let portions = pure(species);
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        for (temperature, ys) in [(310.0, [0.05, 0.8, 6.0]), (1200.0, [0.05, 0.4, 2.0])] {
            let side = ThermalSide::new(&gas, Ball::from(temperature));
            for y in ys {
                for (y, is_shock) in [(y, true), (-y / (1.0 + y) * 0.6, false)] {
                    let at = |y: f64| side.speed(Dual::variable(Ball::from(y), 0), is_shock);
                    let (found, step) = (at(y), y * 1e-6);
                    let difference = (at(y + step).value() - at(y - step).value()) / Ball::from(2.0 * step);
                    let [slope] = found.slopes();
                    assert!(
                        is_shock || temperature > 1000.0 || found.value().radius().is_infinite() || found.value().is_certainly_negative()
                    );
                    if found.value().radius().is_finite() {
                        assert!((difference / slope - Ball::whole(1)).magnitude() < 1e-9, "{} {temperature} {y} {slope:?}", species.name);
                    }
                }
                let Some(change) = side.shocked(Ball::from(y)) else { panic!("{} {temperature} {y}", species.name) };
                // h′ − h = ½(p′ − p)(1/ρ + 1/ρ′), over R T/W.
                let y = Ball::from(y);
                let rise = side.heat_capacity.rise(side.range, side.temperature, change.excess, change.to);
                let work = y * (Ball::whole(1) + (Ball::whole(1) + change.excess) / (Ball::whole(1) + y)) / Ball::whole(2);
                assert!((rise - work).enclosure().contains(0.0), "{} {temperature}", species.name);
                assert!(change.excess.radius() < 1e-18 * change.excess.magnitude());
            }
        }
    }
}

#[test]
fn a_wall_stops_the_gas() {
    let portions = pure(&table::CO2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let side = ThermalSide::new(&gas, Ball::from(700.0));
    for y in [1e-4, 0.3, 4.0] {
        let speed = side.speed(Dual::variable(Ball::from(y), 0), true).value();
        let ratio = side.stopped(speed).unwrap();
        assert!((ratio - Ball::whole(1) - Ball::from(y)).magnitude() < 1e-17 * y, "{y} {ratio:?}");
        let (shock, behind) = ContactSide::Thermal(side).behind_shock(Ball::from(y)).unwrap();
        assert!(
            (shock - side.sound_speed()).is_certainly_positive() && (behind.sound_speed() - side.sound_speed()).is_certainly_positive()
        );
    }
}

#[test]
fn outside_the_data_nothing_is_said() {
    let portions = pure(&table::N2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let side = ThermalSide::new(&gas, Ball::from(300.0));
    assert!(side.shocked(Ball::from(1e5)).is_none());
    assert!(side.expanded_twice(Ball::from(-0.9)).is_none());
    assert!(side.speed(Dual::variable(Ball::from(-0.9), 0), false).value().radius().is_infinite());
}

#[test]
fn weak_waves_come_back_from_a_nearly_tailored_contact_surface() {
    let portions = pure(&table::N2);
    let gas = ThermallyPerfectGas::new(&portions).unwrap();
    let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 295.0).unwrap();
    let test_gas = TestGas::from(&fill);
    let driver = Driver::new(helium(), 295.0).unwrap();
    let tailored = driver.tailored_mach(test_gas).unwrap().mach_excess.middle();
    for off in [1e-4, 1e-6, 1e-8, 1e-10, 1e-12, 1e-14] {
        for excess in [tailored * (1.0 - off), tailored * (1.0 + off)] {
            let behind = test_gas.behind(Entry::MachExcess, excess).unwrap();
            let contact = Contact::new(&behind, &driver.for_shock(&behind).unwrap());
            let found = contact.interaction().unwrap_or_else(|error| panic!("{off} {error} {:?}", contact.mismatch()));
            let change =
                found.end_wall_pressure.middle() / behind.reflected_over_incident_pressure().nearest() / behind.pressure().nearest() - 1.0;
            assert!(change.abs() < 3.0 * off, "{off} {change}");
        }
    }
}

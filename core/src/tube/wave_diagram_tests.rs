//! Checks of the wave diagram: the path through the fan, the speed of every wave, widths, limits, tolerances and every refusal.

extern crate std;
use super::super::test_time::Limit;
use super::super::waves::{Lengths, TubeSpeeds};
use super::*;
use crate::gas::Gamma;
use crate::number::Semifield;
use std::println;

/// γ 7/5 at M 2 in units of a1 = 400 m/s: u2 = 5/4, a2 = √(27/16), `U_R` = 1, a5 = √(5/2).
fn tube(a4: f64, driver: f64, contact: ContactReturn) -> Tube<Ball> {
    let speed = Ball::from;
    let speeds = TubeSpeeds {
        incident_shock: speed(800.0),
        gas_speed: speed(500.0),
        sound_speed_2: speed(400.0 * 27f64.sqrt() / 4.0),
        reflected_shock: speed(400.0),
        sound_speed_5: speed(A5),
        sound_speed_4: speed(a4),
        driver_gamma: Gamma { d: Ball::whole(2), q: Ball::whole(3) },
    };
    Tube { speeds, lengths: Lengths { driven: speed(6.0), driver: speed(driver) }, contact }
}

const A5: f64 = 632.455_532_033_675_9;

fn wave(speed: f64) -> ContactReturn {
    ContactReturn::Wave { speed: Ball::from(speed) }
}

fn tailored(shock: f64) -> ContactReturn {
    ContactReturn::Tailored { transmitted_shock: Ball::from(shock), sound_speed: Ball::from(1200.0) }
}

fn diagram(a4: f64, driver: f64, contact: ContactReturn) -> WaveDiagram {
    WaveDiagram::new(tube(a4, driver, contact)).unwrap()
}

/// The path of the reflected head, dx/dt = u + a in the centred fan, by fourth-order steps in plain arithmetic.
#[test]
fn the_way_through_the_fan_is_that_of_the_characteristic() {
    let (a4, length, u2) = (1000.0, 2.0, 500.0);
    let diagram = diagram(a4, length, wave(A5));
    // x/t = u − a and u + 3a = 3a4 for γ4 = 5/3: u + a in terms of x/t.
    let slope = |x: f64, t: f64| {
        let a = (3.0 * a4 - x / t) / 4.0;
        3.0 * (a4 - a) + a
    };
    let (mut x, mut t) = (-length, length / a4);
    let end = diagram.fan_point(1.0);
    let steps = 4000;
    let h = (end.time.middle() - t) / f64::from(steps);
    for _ in 0..steps {
        let k1 = slope(x, t);
        let k2 = slope(x + h * k1 / 2.0, t + h / 2.0);
        let k3 = slope(x + h * k2 / 2.0, t + h / 2.0);
        let k4 = slope(x + h * k3, t + h);
        x += h * (k1 + 2.0 * k2 + 2.0 * k3 + k4) / 6.0;
        t += h;
    }
    assert!((end.position.middle() - x).abs() < 1e-11, "{x} {end:?}");
    // There the gas has the speed of the contact surface.
    let a3 = a4 - u2 / 3.0;
    assert!((x / t - (u2 - a3)).abs() < 1e-8);
    let direct = diagram.wave(WaveName::HeadInFan).unwrap().to;
    assert!(direct.time.overlaps(end.time) && direct.position.overlaps(end.position));
    assert!(diagram.fan_point(0.0).position.contains(-length));
    assert_eq!(diagram.fan_point(f64::NAN), diagram.fan_point(0.0));
}

/// Every straight wave has the speed that it should have: the slope of the line between its ends, as an enclosure, contains it.
#[test]
fn waves_have_their_speeds() {
    let mut seen = std::collections::BTreeMap::new();
    let cases = [
        (wave(A5), 0.3),
        (wave(A5), 1.0),
        (wave(700.0), 2.0),
        (wave(A5), 3.0),
        (wave(A5), 4.0),
        (wave(A5), 9.0),
        (wave(A5), 20.0),
        (tailored(600.0), 1.0),
        (tailored(600.0), 4.0),
        (tailored(600.0), 9.0),
        (tailored(600.0), 40.0),
    ];
    for (contact, driver) in cases {
        let diagram = diagram(1000.0, driver, contact);
        let returned = match contact {
            ContactReturn::Wave { speed } => speed.nearest(),
            ContactReturn::Tailored { .. } => 0.0,
        };
        let speeds = &diagram.tube().speeds;
        let (a2, a3) = (speeds.sound_speed_2.nearest(), speeds.sound_speed_3().nearest());
        for wave in diagram.waves().into_iter().flatten() {
            *seen.entry(wave.name.name()).or_insert(0) += 1;
            let speed = match wave.name {
                WaveName::IncidentShock => 800.0,
                WaveName::ContactSurface => 500.0,
                WaveName::ExpansionHead => -1000.0,
                WaveName::ExpansionTail => 500.0 - a3,
                WaveName::HeadInFan => continue,
                WaveName::HeadInDriverGas => 500.0 + a3,
                WaveName::HeadInDrivenGas => 500.0 + a2,
                WaveName::ReflectedShock => -400.0,
                WaveName::ReturnedWave => returned,
                WaveName::TransmittedShock => -600.0,
                WaveName::DisturbanceToContact => 1200.0,
                WaveName::DisturbanceToEndWall => A5,
            };
            let found = (wave.to.position - wave.from.position) / (wave.to.time - wave.from.time);
            let margin = Enclosure::new(-1e-9, 1e-9).unwrap();
            assert!((found + margin).contains(speed) && found.width() < 1e-9 * speed.abs() + 1e-8, "{driver} {wave:?} {found:?} {speed}");
            assert!(wave.from.time.certainly_less(wave.to.time), "{wave:?}");
        }
    }
    println!("{seen:?}");
    assert_eq!(seen.len(), WAVES);
}

#[test]
fn crossings_are_proven_to_two_ulp() {
    let mut widest = 0;
    for driver in [0.3, 1.1, 2.7, 4.3, 9.1, 30.7] {
        for contact in [wave(A5), wave(700.3), tailored(613.7)] {
            let diagram = diagram(1007.3, driver, contact);
            for wave in diagram.waves().into_iter().flatten() {
                for end in [wave.from, wave.to] {
                    assert!(end.time.is_proven() && end.position.is_proven());
                    widest = widest.max(end.time.width_in_ulp()).max(end.position.width_in_ulp());
                }
            }
            for place in [0.0, 0.02, 0.3] {
                let time = diagram.test_time(place).unwrap();
                widest = widest.max(time.duration.width_in_ulp()).max(time.start.width_in_ulp()).max(time.end.width_in_ulp());
                widest = widest.max(diagram.shortest_driver(place).unwrap().width_in_ulp());
            }
        }
    }
    println!("widest {widest} ulp");
    assert!(widest <= 2, "{widest}");
}

/// A driver a little longer than the shortest is not the limit, one a little shorter is, at every station and for each kind of contact surface.
#[test]
fn the_shortest_driver_is_where_the_limit_changes() {
    for place in [0.0, 0.05, 0.5] {
        for (contact, beyond) in [(wave(A5), Limit::ContactReturn), (wave(750.0), Limit::ContactReturn), (tailored(600.0), Limit::FanTail)]
        {
            let shortest = diagram(1000.0, 1.0, contact).shortest_driver(place).unwrap();
            let longer = diagram(1000.0, shortest.high() * (1.0 + 1e-12), contact).test_time(place).unwrap();
            let shorter = diagram(1000.0, shortest.low() * (1.0 - 1e-12), contact).test_time(place).unwrap();
            assert_eq!((longer.limit, shorter.limit), (beyond, Limit::ExpansionHead), "{place} {contact:?}");
            assert!((longer.duration.middle() / shorter.duration.middle() - 1.0).abs() < 1e-11);
            // Longer still gives nothing more.
            let far = diagram(1000.0, shortest.high() * 3.0, contact).test_time(place).unwrap();
            assert_eq!((far.limit, far.duration), (beyond, longer.duration));
        }
    }
}

/// A head that passes the contact surface before the reflected shock gets there does not care what that surface does later.
#[test]
fn an_early_head_ignores_the_contact_surface() {
    for driver in [1.0, 2.0, 3.4] {
        let (by_wave, by_tailored) = (diagram(1000.0, driver, wave(A5)), diagram(1000.0, driver, tailored(600.0)));
        for place in [0.0, 0.05] {
            assert_eq!(by_wave.test_time(place), by_tailored.test_time(place));
            assert_eq!(by_wave.test_time(place).unwrap().limit, if driver < 1.5 { Limit::IncidentOvertaken } else { Limit::ExpansionHead });
        }
    }
}

#[test]
fn a_short_driver_overtakes_the_incident_shock() {
    let least = diagram(1000.0, 1.0, wave(A5)).tube().shortest_driver_without_overtaking().enclosure();
    let short = diagram(1000.0, least.low() * 0.999_999, wave(A5));
    assert_eq!(short.test_time(0.0).unwrap().limit, Limit::IncidentOvertaken);
    assert_eq!(short.test_time(0.0).unwrap().duration, Enclosure::from(0.0));
    assert!(short.wave(WaveName::ReflectedShock).is_none());
    // The shock's last point lies before the end wall.
    let shock = short.wave(WaveName::IncidentShock).unwrap().to;
    assert!(shock.position.certainly_less(Enclosure::from(6.0)) && shock.position.low() > 5.999);
    let long = diagram(1000.0, least.high() * 1.000_001, wave(A5));
    assert_eq!(long.test_time(0.0).unwrap().limit, Limit::ExpansionHead);
    assert_eq!(long.test_time(0.1).unwrap().limit, Limit::ExpansionPassed);
}

/// The contact surface stops the reflected shock 1 m from the wall.
#[test]
fn a_station_beyond_the_contact_surface_has_no_time() {
    let long = diagram(1000.0, 10.0, wave(A5));
    assert!(long.test_time(0.999).unwrap().duration.low() > 0.0);
    let beyond = long.test_time(1.001).unwrap();
    assert_eq!((beyond.limit, beyond.duration), (Limit::ContactPassed, Enclosure::from(0.0)));
    // The exact place: no time, and no false certainty.
    let there = long.test_time(1.0).unwrap();
    assert!(there.duration.contains(0.0) && there.duration.high() < 1e-15);
    assert_eq!(long.shortest_driver(1.0).unwrap_err().input, TubeInput::FromEndWall);
}

/// Wide inputs give wide answers that hold those of every point inside, whichever wave is first.
#[test]
fn tolerances_hold_their_points() {
    let shortest = diagram(1000.0, 1.0, wave(A5)).shortest_driver(0.0).unwrap().middle();
    let mut wide = tube(1000.0, 1.0, wave(A5));
    wide.lengths.driver = Ball::around(Enclosure::new(shortest * 0.98, shortest * 1.02).unwrap());
    let range = WaveDiagram::new(wide).unwrap().test_time(0.0).unwrap();
    assert_eq!(range.limit, Limit::Undecided);
    for part in [0.98, 0.99, 1.0, 1.01, 1.02] {
        let point = diagram(1000.0, shortest * part, wave(A5)).test_time(0.0).unwrap();
        assert!(range.duration.encloses(point.duration), "{part} {point:?} {range:?}");
    }
}

#[test]
fn speeds_that_no_tube_has_are_refused() {
    let refused = |change: &dyn Fn(&mut Tube<Ball>)| {
        let mut tube = tube(1000.0, 3.0, wave(A5));
        change(&mut tube);
        WaveDiagram::new(tube).unwrap_err().input
    };
    let slow = Ball::from(100.0);
    assert_eq!(refused(&|tube| tube.lengths.driven = Ball::from(-6.0)), TubeInput::DrivenLength);
    assert_eq!(refused(&|tube| tube.lengths.driver = Ball::from(f64::NAN)), TubeInput::DriverLength);
    assert_eq!(refused(&|tube| tube.speeds.incident_shock = slow), TubeInput::IncidentShock);
    assert_eq!(refused(&|tube| tube.speeds.sound_speed_2 = slow), TubeInput::SoundSpeed2);
    // The gas would have to be faster than helium can expand.
    assert_eq!(refused(&|tube| tube.speeds.sound_speed_4 = slow), TubeInput::GasSpeed2);
    assert_eq!(refused(&|tube| tube.contact = wave(100.0)), TubeInput::ReturnedWave);
    assert_eq!(refused(&|tube| tube.contact = tailored(100.0)), TubeInput::TransmittedShock);
    assert_eq!(refused(&|tube| tube.speeds.driver_gamma.d = Ball::from(0.0)), TubeInput::DriverHeatCapacityRatio);
    let station = diagram(1000.0, 3.0, wave(A5)).test_time(7.0).unwrap_err();
    assert_eq!((station.input, station.rule), (TubeInput::FromEndWall, Rule::Between(0.0, 6.0)));
}

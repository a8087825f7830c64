//! The wave diagram against a finite-volume run of a whole tube, driver and driven section, which knows the conservation laws only: when does the
//! uniform time at the end wall end?

use endwall::gas::Gamma;
use endwall::number::{Ball, Positive, Semifield};
use endwall::tube::{ContactReturn, Lengths, Limit, TestTime, Tube, TubeSpeeds, WaveDiagram};
use endwall_tests::euler::{Primitive, end_wall_pressure};
use endwall_tests::tolerances::EULER_ARRIVAL_TIMES_CELLS;

/// γ 7/5 in both sections, M 2, in units of a1, p1 and L1: u2 = 5/4, p2 = 9/2, `U_R` = 1, a2 = √(27/16), a5 = √(5/2), p5 = 15.
const GAMMA: f64 = 1.4;
const GAS_SPEED: f64 = 1.25;
const PRESSURE_2: f64 = 4.5;
const PRESSURE_5: f64 = 15.0;

fn sound_speed_2() -> Ball {
    (Ball::whole(27) / Ball::whole(16)).sqrt()
}

fn sound_speed_5() -> Ball {
    (Ball::whole(5) / Ball::whole(2)).sqrt()
}

fn diagram(driver_sound_speed: Ball, driver_length: f64, contact: ContactReturn) -> TestTime {
    let speeds = TubeSpeeds {
        incident_shock: Ball::whole(2),
        gas_speed: Ball::from(GAS_SPEED),
        sound_speed_2: sound_speed_2(),
        reflected_shock: Ball::whole(1),
        sound_speed_5: sound_speed_5(),
        sound_speed_4: driver_sound_speed,
        driver_gamma: Gamma { d: Ball::whole(2), q: Ball::whole(5) },
    };
    let lengths = Lengths { driven: Ball::whole(1), driver: Ball::from(driver_length) };
    WaveDiagram::new(Tube { speeds, lengths, contact }).and_then(|diagram| diagram.test_time(0.0)).expect("a tube")
}

/// When the pressure at the end wall begins to leave p5 toward `p5(1 + change)`, from the times at which it has changed by half of that and by all.
fn arrival(driver_sound_speed: f64, driver_length: f64, cells: usize, (from, until): (f64, f64), change: f64) -> f64 {
    let expanded = driver_sound_speed - 0.2 * GAS_SPEED;
    let pressure = PRESSURE_2 * (driver_sound_speed / expanded).powi(7);
    let driver = Primitive { density: GAMMA * pressure / driver_sound_speed.powi(2), velocity: 0.0, pressure };
    let driven = Primitive { density: GAMMA, velocity: 0.0, pressure: 1.0 };
    let total = 1.0 + driver_length;
    let history = end_wall_pressure(GAMMA, [driver, driven], driver_length / total, cells, until / total);
    let crossed = |part: f64| {
        let level = PRESSURE_5 * part * change;
        let beyond = |(time, pressure): &&(f64, f64)| time * total > from && (pressure - PRESSURE_5) / level > 1.0;
        history.iter().find(beyond).expect("the pressure changes").0 * total
    };
    2.0 * crossed(0.5) - crossed(1.0)
}

/// The run meets the end of the uniform time that the diagram proves, the better the finer the grid.
fn check(found: impl Fn(usize) -> f64, expected: &TestTime, limit: Limit) {
    assert_eq!(expected.limit, limit);
    for cells in [500, 1000, 1500] {
        let found = found(cells);
        let error = found / expected.end.middle() - 1.0;
        println!(
            "{limit:?}, {cells} cells: {found:.4} for {:.4}, relative error times cells {:.2}",
            expected.end.middle(),
            error * cells as f64
        );
        assert!(error.abs() < EULER_ARRIVAL_TIMES_CELLS / cells as f64, "{found} for {expected:?}");
    }
}

#[test]
fn the_head_of_a_short_driver_arrives() {
    let contact = ContactReturn::Wave { speed: sound_speed_5() };
    let expected = diagram(Ball::whole(3), 0.5, contact);
    check(|cells| arrival(3.0, 0.5, cells, (0.56, 0.8), -0.04), &expected, Limit::ExpansionHead);
}

/// With a3 = a2 the contact surface parts two equal gases, so that it is tailored: the shock goes on as it was.
fn tailored(driver_length: f64) -> (f64, TestTime) {
    let driver_sound_speed = sound_speed_2() + Ball::from(0.25);
    let contact = ContactReturn::Tailored { transmitted_shock: Ball::whole(1), sound_speed: sound_speed_5() };
    (driver_sound_speed.nearest(), diagram(driver_sound_speed, driver_length, contact))
}

#[test]
fn the_head_comes_through_a_tailored_contact_surface() {
    let (sound_speed, expected) = tailored(1.2);
    check(|cells| arrival(sound_speed, 1.2, cells, (1.4, 2.4), -0.04), &expected, Limit::ExpansionHead);
}

/// What the fan's tail sends back is a slow rise of the pressure by about one per cent, which bends: only its beginning tells.
#[test]
fn the_tail_of_the_fan_ends_the_time_of_a_long_driver() {
    let (sound_speed, expected) = tailored(2.4);
    check(|cells| arrival(sound_speed, 2.4, cells, (2.0, 2.5), 0.001), &expected, Limit::FanTail);
}

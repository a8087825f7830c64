//! A shock reflects off a closed end on a grid, which knows the conservation laws only, and the exact answer of the
//! oracle: the error must fall with the size of the cells.

use endwall_tests::euler::{Plateau, Primitive, reflect};
use endwall_tests::oracle::{RBig, Real, incident, ratio, reflected};
use endwall_tests::tolerances::{EULER_CONVERGENCE, EULER_PRESSURE_TIMES_CELLS, EULER_SPEED_TIMES_CELLS, EULER_TEMPERATURE_TIMES_CELLS};

/// Relative errors of a run: pressure, temperature, density of state 5, and the speed of the reflected shock.
struct Errors {
    pressure: f64,
    temperature: f64,
    density: f64,
    reflected_speed: f64,
}

/// Runs in units of p1, ρ1 and √(p1/ρ1), in which a1 = √γ.
fn run(heat_capacity_ratio: &RBig, mach: &RBig, cells: usize) -> Errors {
    let gamma = heat_capacity_ratio.to_f64().value();
    let sound_speed = gamma.sqrt();
    let ahead = incident(heat_capacity_ratio, &Real::Rational(mach.clone()));
    let state_1 = Primitive { density: 1.0, velocity: 0.0, pressure: 1.0 };
    let state_2 =
        Primitive { density: ahead.density.to_f64(), velocity: ahead.gas_speed.to_f64() * sound_speed, pressure: ahead.pressure.to_f64() };
    let Plateau { pressure, density, temperature, velocity, reflected_speed, incident_speed } = reflect(gamma, state_1, state_2, cells);

    // The start is a single shock of the intended speed, and the gas at the wall is at rest.
    let shock_speed = mach.to_f64().value() * sound_speed;
    let limit = EULER_SPEED_TIMES_CELLS / f64::from(u32::try_from(cells).expect("few cells"));
    assert!((incident_speed / shock_speed - 1.0).abs() < limit, "incident {incident_speed} for {shock_speed}");
    assert!(velocity.abs() < limit * state_2.velocity, "gas near the wall moves with {velocity}");

    let exact = reflected(heat_capacity_ratio, &ahead);
    let error = |found: f64, truth: &Real| (found / truth.to_f64() - 1.0).abs();
    Errors {
        pressure: error(pressure, &exact.pressure),
        temperature: error(temperature, &exact.temperature),
        density: error(density, &exact.density),
        reflected_speed: error(reflected_speed / sound_speed, &exact.speed),
    }
}

fn converges(heat_capacity_ratio: &RBig, mach: &RBig) {
    let grids = [100u32, 200, 400];
    let runs = grids.map(|cells| run(heat_capacity_ratio, mach, cells as usize));
    let total = |errors: &Errors| errors.pressure + errors.temperature + errors.density + errors.reflected_speed;
    let (coarse, fine) = (total(&runs[0]), total(&runs[2]));
    assert!(fine < EULER_CONVERGENCE * coarse, "no convergence: {coarse} on {} cells, {fine} on {}", grids[0], grids[2]);
    for (cells, errors) in grids.iter().zip(&runs) {
        let Errors { pressure, temperature, density, reflected_speed } = errors;
        println!(
            "γ {heat_capacity_ratio} M {mach} cells {cells}: p5 {pressure:.1e} T5 {temperature:.1e} ρ5 {density:.1e} U_R {reflected_speed:.1e}"
        );
        let cells = f64::from(*cells);
        assert!(*pressure < EULER_PRESSURE_TIMES_CELLS / cells, "p5 off by {pressure} on {cells} cells");
        assert!(*temperature < EULER_TEMPERATURE_TIMES_CELLS / cells, "T5 off by {temperature} on {cells} cells");
        assert!(*density < EULER_TEMPERATURE_TIMES_CELLS / cells, "ρ5 off by {density} on {cells} cells");
        assert!(*reflected_speed < EULER_SPEED_TIMES_CELLS / cells, "U_R off by {reflected_speed} on {cells} cells");
    }
}

#[test]
fn air_at_mach_2() {
    converges(&ratio(7, 5), &ratio(2, 1));
}

#[test]
fn argon_at_mach_3() {
    converges(&ratio(5, 3), &ratio(3, 1));
}

#[test]
fn weak_shock_in_carbon_dioxide() {
    converges(&ratio(9, 7), &ratio(13, 10));
}

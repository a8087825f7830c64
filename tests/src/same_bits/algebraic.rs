//! Direct and inverse problems of the shock.

use super::{Fingerprint, over_binades, whole};
use endwall::gas::{Fill, Gas, HeatCapacityRatio};
use endwall::number::{Enclosure, Known, Rational};
use endwall::shock::{Entry, Incident, MovingShock, Output, Ratios, State};
use endwall::shot::Generator;

/// γ − 1 a ratio of small whole numbers from 1/40 to 3.
fn heat_capacity_ratio(generator: &mut Generator) -> Option<HeatCapacityRatio> {
    let denominator = whole(generator, 1, 40);
    HeatCapacityRatio::ratio(denominator + whole(generator, 1, 3 * denominator), denominator).ok()
}

/// A decimal of up to seven digits, as typed.
fn decimal(generator: &mut Generator, low: u32, high: u32, power_of_ten: u32) -> Option<Rational> {
    Rational::ratio(u128::from(whole(generator, low, high)), 10_u128.pow(power_of_ten))
}

fn fill(generator: &mut Generator) -> Option<Fill> {
    let gas = Gas::new(heat_capacity_ratio(generator)?, decimal(generator, 2_000, 150_000, 6)?).ok()?;
    Fill::new(gas, decimal(generator, 100, 5_000_000, 1)?, decimal(generator, 2_000, 5_000, 1)?).ok()
}

/// M − 1: a double, or one in four times a small ratio of whole numbers, for which answers are often doubles.
fn strength(generator: &mut Generator, low: i32, high: i32) -> Known {
    if whole(generator, 0, 3) == 0 {
        let ratio = Rational::ratio(u128::from(whole(generator, 1, 60)), u128::from(whole(generator, 1, 16)));
        ratio.map_or(Known::from(1.0), Known::from)
    } else {
        Known::from(over_binades(generator, low, high))
    }
}

/// The nine ratios of four shocks, together and one by one.
pub fn ratios(generator: &mut Generator, fingerprint: &mut Fingerprint) {
    let small = heat_capacity_ratio(generator).and_then(HeatCapacityRatio::small);
    let strengths: [f64; 4] = core::array::from_fn(|_| strength(generator, -60, 20).nominal());
    let Some(small) = small else { return };
    for bound in Ratios::bounds(small, &strengths).iter().flatten().flatten().flatten() {
        fingerprint.add(*bound);
    }
    for all in strengths.iter().filter_map(|strength| Ratios::from_mach_excess(small, *strength)) {
        fingerprint.add_enclosure(all.pressure);
        fingerprint.add_enclosure(all.reflected_mach);
        fingerprint.add_enclosure(all.reflected_temperature);
    }
}

fn state(fingerprint: &mut Fingerprint, state: &State) {
    for value in [state.pressure, state.temperature, state.density, state.sound_speed, state.gas_speed] {
        fingerprint.add_enclosure(value);
    }
}

/// Every output of a shock, its reflections from moving and yielding walls, a shock into moving gas, and the outputs over a tolerance.
pub fn outputs(generator: &mut Generator, fingerprint: &mut Fingerprint) {
    let fill = fill(generator);
    let (strength, wall_speed) = (strength(generator, -30, 4), over_binades(generator, 0, 10));
    let Some((fill, shock)) = fill.and_then(|fill| Some((fill, Incident::new(&fill, Entry::MachExcess, strength).ok()?))) else { return };
    for output in Output::ALL {
        fingerprint.add_enclosure(shock.output(output));
        fingerprint.add(shock.nearest(output));
    }
    fingerprint.add_enclosure(shock.total_pressure_ratio());
    fingerprint.add_enclosure(shock.total_pressure_loss());
    let reflections =
        [shock.reflected_from_wall(wall_speed), shock.reflected_from_wall(-wall_speed), shock.reflected_from_yielding_wall(4e5)];
    for reflection in reflections.into_iter().flatten() {
        state(fingerprint, &reflection.state);
        fingerprint.add_enclosure(reflection.front_speed);
        fingerprint.add_enclosure(reflection.mach);
    }
    if let Ok(moving) = MovingShock::new(&fill, wall_speed, wall_speed + 4_000.0) {
        state(fingerprint, &moving.state_behind());
    }
    let tolerance = Enclosure::new(strength.nominal() * 0.99, strength.nominal() * 1.01);
    if let Some(shock) = tolerance.and_then(|tolerance| Incident::new(&fill, Entry::MachExcess, tolerance).ok()) {
        for output in [Output::Pressure5, Output::Temperature5, Output::ReflectedSpeed] {
            fingerprint.add_enclosure(shock.output(output));
        }
    }
}

/// A shock from each quantity that can fix it.
pub fn inverses(generator: &mut Generator, fingerprint: &mut Fingerprint) {
    let fill = fill(generator);
    let strength = strength(generator, -20, 4);
    let Some((fill, direct)) = fill.and_then(|fill| Some((fill, Incident::new(&fill, Entry::MachExcess, strength).ok()?))) else { return };
    for entry in Entry::ALL {
        let value = direct.nearest(entry.output());
        let Ok(shock) = Incident::new(&fill, entry, value) else {
            fingerprint.add(value);
            continue;
        };
        for output in [Output::MachExcess, Output::Mach, Output::ShockSpeed, Output::Pressure5, Output::Temperature5, Output::Density2] {
            fingerprint.add_enclosure(shock.output(output));
        }
    }
}

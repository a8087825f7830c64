//! Published and exactly calculated values against the library itself. Sources, digits and tolerances stand in the files in `data/`.

mod common;

use common::is_optimal;
use endwall::gas::{Fill, Gas, HeatCapacityRatio};
use endwall::number::{Enclosure, Known, Rational};
use endwall::shock::{Entry, Incident, MovingShock, Output, Ratios};
use endwall_tests::data::{self, Row};
use endwall_tests::oracle::Real;
use endwall_tests::tolerances::{BIFURCATION_ROOT, RIEMANN_CALCULATED, STRONG_LIMIT_NEXT_TERM, TABLE_LAST_DIGITS, WEAK_LIMIT_NEXT_TERM};

fn read(text: &str) -> Rational {
    text.parse().unwrap_or_else(|error| panic!("{text}: {error}"))
}

fn gas(heat_capacity_ratio: &str, molar_mass: impl Into<Known>) -> Gas {
    Gas::new(HeatCapacityRatio::new(read(heat_capacity_ratio)).expect("in the domain"), molar_mass).expect("in the domain")
}

/// The shock in some fill, for dimensionless outputs.
fn shock(heat_capacity_ratio: &str, entry: Entry, value: impl Into<Known>) -> Incident {
    let fill = Fill::new(gas(heat_capacity_ratio, read("0.028")), 1.0, 300.0).expect("a fill");
    Incident::new(&fill, entry, value).expect("a shock")
}

/// An enclosure and a printed value: they differ by rounding of the table alone.
fn printed(row: &Row, column: &str, found: Enclosure) {
    let allowed = TABLE_LAST_DIGITS * row.last_digit(column);
    let error = (found.middle() - row.f64(column)).abs();
    assert!(found.is_proven() && error <= allowed, "{column}: {found} for {}", row.text(column));
}

#[test]
fn normal_shock_table() {
    for row in data::normal_shock_table().rows() {
        let mach = read(row.text("mach"));
        let shock = shock("7/5", Entry::Mach, mach);
        printed(&row, "mach_behind", shock.output(Output::MachBehind));
        printed(&row, "pressure_ratio", shock.output(Output::PressureRatio));
        printed(&row, "density_ratio", shock.output(Output::DensityRatio));
        printed(&row, "temperature_ratio", shock.output(Output::TemperatureRatio));
        printed(&row, "total_pressure_ratio", shock.total_pressure_ratio());
        // p1/pt2 = (p1/pt1)/(pt2/pt1), the first by the isentropic relation of the report.
        let ahead = (1.0 + 0.2 * row.f64("mach").powi(2)).powf(-3.5);
        printed(&row, "pressure_over_total_behind", Enclosure::from(ahead) / shock.total_pressure_ratio());
        let lost = shock.total_pressure_loss();
        assert!((lost + shock.total_pressure_ratio()).contains(1.0));
    }
}

#[test]
fn rational_rows_are_met_to_the_last_bit() {
    let mut exact = 0;
    for row in data::reflected_shock_exact().rows() {
        let (gamma, mach) = (row.text("heat_capacity_ratio"), read(row.text("mach")));
        let shock = shock(gamma, Entry::Mach, mach);
        let columns = [
            ("pressure_21", Output::PressureRatio),
            ("density_21", Output::DensityRatio),
            ("temperature_21", Output::TemperatureRatio),
            ("pressure_51", Output::ReflectedPressureRatio),
            ("temperature_51", Output::ReflectedTemperatureRatio),
            ("density_51", Output::ReflectedDensityRatio),
            // The Mach number of the wall layer in the frame of the reflected shock, with the gas there at the temperature of the fill.
            ("reflected_speed", Output::ReflectedSpeedRatio),
            ("gas_speed", Output::GasSpeedRatio),
        ];
        for (column, output) in columns {
            let (found, fraction) = (shock.output(output), row.exact(column));
            let is_double = Real::from_f64(fraction.to_f64().value()).as_rational() == Some(&fraction);
            assert!(is_optimal(found, &Real::Rational(fraction)), "{column} of {gamma} {}: {found:?}", row.text("mach"));
            assert_eq!(found.width_in_ulp(), u64::from(!is_double), "{column} of {gamma} {}", row.text("mach"));
            exact += u32::from(is_double);
        }
        let squared = Real::Rational(row.exact("reflected_mach_squared"));
        assert!(is_optimal(shock.output(Output::ReflectedMach), &squared.sqrt()));
        // The other way to the same numbers.
        let nine = Ratios::from_mach(HeatCapacityRatio::new(read(gamma)).expect("in the domain"), row.f64("mach")).expect("a shock");
        let listed = [
            nine.pressure,
            nine.density,
            nine.temperature,
            nine.reflected_pressure,
            nine.reflected_temperature,
            nine.reflected_density,
            nine.reflected_speed,
            nine.gas_speed,
        ];
        for ((_, output), nine) in columns.into_iter().zip(listed) {
            assert_eq!(shock.output(output), nine, "{output:?} of {gamma} {}", row.text("mach"));
        }
        // And back: every column, typed as the fraction that it is, gives the Mach number exactly.
        for (column, entry) in [
            ("pressure_21", Entry::PressureRatio),
            ("density_21", Entry::DensityRatio),
            ("temperature_21", Entry::TemperatureRatio),
            ("pressure_51", Entry::ReflectedPressureRatio),
            ("temperature_51", Entry::ReflectedTemperatureRatio),
        ] {
            let back = self::shock(gamma, entry, read(row.text(column))).output(Output::Mach);
            assert_eq!(back, Enclosure::from(row.f64("mach")), "{column} of {gamma} {}", row.text("mach"));
        }
    }
    println!("{exact} answers are doubles");
    assert!(exact > 50);
}

#[test]
fn limits_of_strong_and_weak_shocks() {
    for row in data::shock_limits().rows() {
        let gamma = row.text("heat_capacity_ratio");
        let text = row.text("value");
        let limit = match text.strip_prefix("sqrt(").and_then(|rest| rest.strip_suffix(')')) {
            Some(square) => Real::Rational(endwall_tests::oracle::parse(square)).sqrt().to_f64(),
            None => row.f64("value"),
        };
        let name = row.text("limit");
        let (strengths, allowed): (&[f64], fn(f64) -> f64) = if name == "weak_step_ratio" {
            (&[1e-3, 1e-6, 1e-9, 1e-12], |excess| WEAK_LIMIT_NEXT_TERM * excess)
        } else {
            (&[1e2, 1e4, 1e6], |excess| STRONG_LIMIT_NEXT_TERM / (excess * excess))
        };
        for &excess in strengths {
            let shock = shock(gamma, Entry::MachExcess, excess);
            let value = |output: Output| shock.output(output).middle();
            let squared = value(Output::Mach).powi(2);
            let found = match name {
                "density_21" => value(Output::DensityRatio),
                "pressure_52" => value(Output::ReflectedOverIncidentPressure),
                "density_52" => value(Output::ReflectedDensityRatio) / value(Output::DensityRatio),
                "temperature_52" => value(Output::ReflectedTemperatureRatio) / value(Output::TemperatureRatio),
                "reflected_mach" => value(Output::ReflectedMach),
                "reflected_speed_over_shock_speed" => value(Output::ReflectedSpeed) / value(Output::ShockSpeed),
                "temperature_51_over_mach_squared" => value(Output::ReflectedTemperatureRatio) / squared,
                "pressure_51_over_mach_squared" => value(Output::ReflectedPressureRatio) / squared,
                "mach_behind" => value(Output::MachBehind),
                "weak_step_ratio" => value(Output::ReflectionCoefficient),
                other => panic!("no limit {other}"),
            };
            let error = (found / limit - 1.0).abs();
            assert!(error < allowed(excess) + 4.0 * f64::EPSILON, "{name} of {gamma} at {excess:e}: {found} for {limit}");
        }
    }
}

#[test]
fn weak_shocks_lose_little_total_pressure() {
    for row in data::weak_shock_loss().rows() {
        printed(&row, "loss", shock("7/5", Entry::MachExcess, read(row.text("mach_excess"))).total_pressure_loss());
    }
}

#[test]
fn blast_relation() {
    for row in data::blast_reflection().rows() {
        // In units of the ambient pressure, which is 1 Pa here.
        let shock = shock("7/5", Entry::PressureRise, read(row.text("incident_overpressure_over_ambient")));
        let truth = Real::Rational(row.exact("reflected_overpressure_over_ambient"));
        for output in [Output::ReflectedPressureExcess, Output::Step] {
            let found = shock.output(output);
            assert!(is_optimal(found, &truth), "{found:?} for {}", row.text("reflected_overpressure_over_ambient"));
        }
    }
}

/// The standard of 1976 has its own gas constant R* = 8.31432 J/(mol K). The library has that of the SI of 2019, fixed; a molar mass larger by
/// the ratio of the two gives the same R/W, exactly.
#[test]
fn speed_of_sound_of_the_standard_atmosphere() {
    for row in data::standard_atmosphere().rows() {
        let ours = read("8.31446261815324");
        let molar_mass = read(row.text("molar_mass"));
        let scaled = molar_mass.checked_mul(ours).and_then(|x| x.checked_div(read(row.text("gas_constant")))).expect("few digits");
        let temperature = read(row.text("temperature"));
        printed(&row, "sound_speed", gas("7/5", scaled).sound_speed(temperature).expect("in the domain"));
        // Without it the value is 8.6e-6 higher, which the digits show.
        let unscaled = gas("7/5", molar_mass).sound_speed(temperature).expect("in the domain").middle();
        assert!((unscaled / row.f64("sound_speed") - 1.0 - 8.6e-6).abs() < 5e-7, "{unscaled}");
    }
}

/// The shocks of the Riemann problems: the library's jump at p*/p, and the moving shock of the listed speed.
#[test]
fn shocks_of_riemann_problems() {
    let mut shocks = 0;
    for row in data::riemann_star_states().rows() {
        for (name, direction) in [("left", -1.0), ("right", 1.0)] {
            if row.text(&format!("{name}_wave")) != "shock" {
                continue;
            }
            shocks += 1;
            let side = |column: &str| row.f64(&format!("{name}_{column}"));
            let (density, velocity, pressure) = (side("density"), side("velocity"), side("pressure"));
            // Consistent units read as SI: a temperature that gives this density at this pressure.
            let temperature = pressure * 0.028 / (8.314_462_618_153_24 * density);
            let fill = Fill::new(gas("7/5", 0.028), pressure, temperature).expect("a fill");
            let star = (row.f64("star_pressure"), row.f64("star_velocity"), row.f64(&format!("star_density_{name}")));
            let near = |what: &str, found: Enclosure, value: f64, digit: f64| {
                let allowed = (RIEMANN_CALCULATED * value.abs()).max(digit * TABLE_LAST_DIGITS);
                assert!((found.middle() - value).abs() < allowed, "{} {name} {what}: {found} for {value}", row.text("case"));
            };
            let density_digit = row.last_digit(&format!("star_density_{name}"));
            let speed_column = format!("{name}_head");
            // By the pressure ratio.
            let jump = Incident::new(&fill, Entry::PressureRatio, star.0 / pressure).expect("a shock");
            near("density", jump.output(Output::Density2), star.2, density_digit);
            let speed = jump.output(Output::ShockSpeed) + Enclosure::from(direction * velocity);
            near("shock speed", speed, direction * row.f64(&speed_column), row.last_digit(&speed_column));
            near("gas speed", jump.output(Output::GasSpeed2) + Enclosure::from(direction * velocity), direction * star.1, 0.0);
            // By the speed in the laboratory.
            let moving = MovingShock::new(&fill, direction * velocity, direction * row.f64(&speed_column)).expect("a shock");
            let behind = moving.state_behind();
            near("pressure", behind.pressure, star.0, 0.0);
            near("density", behind.density, star.2, density_digit);
            near("gas speed", behind.gas_speed, direction * star.1, 0.0);
        }
    }
    assert_eq!(shocks, 6);
}

/// The criterion for bifurcation changes its answer at the listed Mach numbers, with the numbers of the library.
#[test]
fn bounds_of_bifurcation() {
    for row in data::bifurcation().rows() {
        let gamma = row.f64("heat_capacity_ratio");
        let margin = |mach: f64| {
            let shock = shock(row.text("heat_capacity_ratio"), Entry::Mach, mach);
            let layer = shock.output(Output::ReflectedSpeedRatio).middle();
            let total = |mach: f64| (1.0 + 0.5 * (gamma - 1.0) * mach * mach).powf(gamma / (gamma - 1.0));
            let stagnation = if layer <= 1.0 {
                total(layer)
            } else {
                let across = self::shock(row.text("heat_capacity_ratio"), Entry::Mach, layer);
                across.output(Output::PressureRatio).middle() * total(across.output(Output::MachBehind).middle())
            };
            stagnation - shock.output(Output::ReflectedOverIncidentPressure).middle()
        };
        for (column, sign) in [("lower_mach", 1.0), ("upper_mach", -1.0)] {
            let root = row.f64(column);
            let (before, after) = (margin(root * (1.0 - BIFURCATION_ROOT)), margin(root * (1.0 + BIFURCATION_ROOT)));
            assert!(sign * before > 0.0 && sign * after < 0.0, "{column}: {before} {after}");
        }
    }
}

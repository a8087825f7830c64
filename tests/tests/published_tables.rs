//! The tables that do not concern the reflected shock, recomputed from their own definitions: a wrong digit in a file
//! must not become a wrong test of the library.

use endwall_tests::data;
use endwall_tests::oracle::{Driver, Real, driver_pressure_ratio, incident, jump, parse, ratio, reflected, reflected_from_yielding_wall};
use endwall_tests::tolerances::{
    BIFURCATION_ROOT, JCGM_LAST_DIGITS, ORACLE_SELF, RIEMANN_CALCULATED, RIEMANN_PRINTED, TABLE_LAST_DIGITS, TAILORING,
};

/// One side of a Riemann problem: gas of ratio 7/5 on which a wave brings the pressure `star`.
struct Side {
    density: f64,
    velocity: f64,
    pressure: f64,
    star: f64,
    /// −1 for the left wave, 1 for the right one.
    direction: f64,
}

impl Side {
    /// Velocity and density behind the wave, and the speeds of its head and tail (E. F. Toro's book, chapter 4).
    fn wave(&self) -> (f64, f64, f64, f64) {
        let Self { density, velocity, pressure, star, direction } = *self;
        let gamma: f64 = 1.4;
        let sound = (gamma * pressure / density).sqrt();
        let ratio = star / pressure;
        if ratio > 1.0 {
            let mach = ((ratio * (gamma + 1.0) + gamma - 1.0) / (2.0 * gamma)).sqrt();
            let behind = density * (gamma + 1.0) * mach * mach / ((gamma - 1.0) * mach * mach + 2.0);
            let shock = velocity + direction * mach * sound;
            (velocity + direction * mach * sound * (1.0 - density / behind), behind, shock, shock)
        } else {
            let slowed = sound * ratio.powf((gamma - 1.0) / (2.0 * gamma));
            let star_velocity = velocity - direction * 2.0 / (gamma - 1.0) * (sound - slowed);
            (star_velocity, density * ratio.powf(1.0 / gamma), velocity + direction * sound, star_velocity + direction * slowed)
        }
    }
}

#[test]
fn riemann_star_states_solve_their_problems() {
    for row in data::riemann_star_states().rows() {
        let star = row.f64("star_pressure");
        let velocity = row.f64("star_velocity");
        for (name, direction) in [("left", -1.0), ("right", 1.0)] {
            let side = |column: &str| row.f64(&format!("{name}_{column}"));
            let side = Side { density: side("density"), velocity: side("velocity"), pressure: side("pressure"), star, direction };
            let (u, density, head, tail) = side.wave();
            // Speeds are compared on the scale of the sound speeds, since a star velocity may be zero.
            let scale = 1.0 + (1.4 * star.max(side.pressure) / density.min(side.density)).sqrt();
            let near = |found: f64, column: &str| {
                let allowed = (RIEMANN_CALCULATED * scale).max(TABLE_LAST_DIGITS * row.last_digit(column));
                let error = (found - row.f64(column)).abs();
                assert!(error < allowed, "{} {column}: {found} for {}", row.text("case"), row.text(column));
            };
            assert!((u - velocity).abs() < RIEMANN_CALCULATED * scale, "{}: {name} gives {u}", row.text("case"));
            near(density, &format!("star_density_{name}"));
            near(head, &format!("{name}_head"));
            near(tail, &format!("{name}_tail"));
            assert_eq!(row.text(&format!("{name}_wave")), if star > side.pressure { "shock" } else { "rarefaction" });
        }
        for (printed, value) in [("printed_star_pressure", star), ("printed_star_velocity", velocity)] {
            if !row.text(printed).is_empty() {
                let allowed = (RIEMANN_PRINTED * value.abs()).max(TABLE_LAST_DIGITS * row.last_digit(printed));
                assert!((row.f64(printed) - value).abs() < allowed, "{} {printed}", row.text("case"));
            }
        }
    }
}

#[test]
fn bifurcation_bounds_are_roots_of_the_criterion() {
    for row in data::bifurcation().rows() {
        let gamma = row.exact("heat_capacity_ratio");
        let minus = &gamma - ratio(1, 1);
        // p_stagnation/p2 of the wall layer less p5/p2.
        let margin = |mach: f64| {
            let ahead = incident(&gamma, &Real::from_f64(mach));
            let back = reflected(&gamma, &ahead);
            let total = |squared: &Real| (Real::int(1) + Real::Rational(&minus / ratio(2, 1)) * squared).pow(&(&gamma / &minus), 600);
            let squared = back.speed.square();
            let stagnation = if back.speed.to_f64() <= 1.0 {
                total(&squared)
            } else {
                let across = jump(&gamma, &squared);
                across.pressure * total(&across.mach_behind_squared)
            };
            (stagnation - back.pressure_over_2).to_f64()
        };
        for (column, falls) in [("lower_mach", true), ("upper_mach", false)] {
            let root = row.f64(column);
            let (before, after) = (margin(root * (1.0 - BIFURCATION_ROOT)), margin(root * (1.0 + BIFURCATION_ROOT)));
            assert!(if falls { before > 0.0 && after < 0.0 } else { before < 0.0 && after > 0.0 }, "{column}: {before} {after}");
        }
    }
}

#[test]
fn tailored_cases_stand_still() {
    use endwall_tests::oracle::contact_balance;
    let molar_mass = |name: &str| match name {
        "He" => parse("0.004002602"),
        "H2" => parse("0.00201588"),
        "N2" => parse("0.0280134"),
        "air" => parse("0.0289651"),
        "Ar" => parse("0.039948"),
        other => panic!("no molar mass of {other}"),
    };
    for row in data::tailoring().rows() {
        let (gamma, gamma_4) = (row.exact("driven_heat_capacity_ratio"), row.exact("driver_heat_capacity_ratio"));
        let squared = &gamma_4 * molar_mass(row.text("driven")) / (&gamma * molar_mass(row.text("driver")));
        let driver = Driver { heat_capacity_ratio: gamma_4, sound_speed: Real::Rational(squared).sqrt() };
        let at = |mach: f64| {
            let ahead = incident(&gamma, &Real::from_f64(mach));
            let balance = contact_balance(&driver, &ahead, &reflected(&gamma, &ahead)).expect("below the limit");
            (balance.to_f64(), driver_pressure_ratio(&driver, &ahead).expect("below the limit").to_f64())
        };
        let mach = row.f64("mach");
        let (below, above) = (at(mach * (1.0 - TAILORING)).0, at(mach * (1.0 + TAILORING)).0);
        assert!(below * above < 0.0, "{} into {}: {below} {above}", row.text("driver"), row.text("driven"));
        let pressure = at(mach).1;
        let allowed = 10.0 * TAILORING * pressure;
        assert!((pressure - row.f64("driver_pressure_over_fill")).abs() < allowed, "{pressure}");
    }
}

#[test]
fn yielding_wall_carries_its_load() {
    let gamma = ratio(7, 5);
    let ahead = incident(&gamma, &Real::int(2));
    // From about steel under a laboratory fill to a wall as light as a gas.
    for impedance in [ratio(1_000_000, 1), ratio(300, 7), ratio(1, 1)] {
        let (speed, back) = reflected_from_yielding_wall(&gamma, &ahead, &impedance);
        let load = &back.pressure_excess / Real::Rational(impedance);
        assert!(load.relative_difference(&speed) < ORACLE_SELF, "{} {}", load.to_f64(), speed.to_f64());
        assert!(back.pressure.cmp_f64(15.0).is_lt() && speed.signum() > 0);
    }
}

#[test]
fn student_factors_enclose_their_fraction() {
    for row in data::student_t().rows() {
        let freedom = row.f64("degrees_of_freedom");
        for (column, fraction) in [("p_68_27", 0.6827), ("p_90", 0.90), ("p_95", 0.95), ("p_95_45", 0.9545), ("p_99", 0.99)] {
            let half = TABLE_LAST_DIGITS * row.last_digit(column);
            let value = row.f64(column);
            let (low, high) = (student_fraction(freedom, value - half), student_fraction(freedom, value + half));
            assert!(low < fraction && fraction < high, "{column} for {freedom}: {low} to {high}");
        }
    }
}

/// Fraction of Student's distribution within ± t, by Simpson's rule over the angle atan(t/√ν), where the density is a
/// power of the cosine.
fn student_fraction(freedom: f64, t: f64) -> f64 {
    let area = |end: f64| {
        let steps = 4_000u32;
        let width = end / f64::from(steps);
        let value = |k: u32| (f64::from(k) * width).cos().powf(freedom - 1.0);
        let weight = |k: u32| {
            if k == 0 || k == steps {
                1.0
            } else if k % 2 == 1 {
                4.0
            } else {
                2.0
            }
        };
        width / 3.0 * (0..=steps).map(|k| weight(k) * value(k)).sum::<f64>()
    };
    area((t / freedom.sqrt()).atan()) / area(core::f64::consts::FRAC_PI_2)
}

/// A printed result of JCGM 100 against the value from its data.
fn printed(example: &str, quantity: &str, found: f64) {
    let table = data::jcgm_100_results();
    let row = table
        .rows()
        .find(|row| row.text("example") == example && row.text("quantity") == quantity)
        .unwrap_or_else(|| panic!("no {quantity} in {example}"));
    let units = (row.f64("value") - found).abs() / row.last_digit("value");
    assert!(units < JCGM_LAST_DIGITS, "{example} {quantity}: {found}");
}

#[test]
fn jcgm_100_straight_line() {
    let table = data::jcgm_100_h3();
    let points: Vec<_> = table.rows().map(|row| (row.f64("reading") - 20.0, row.f64("correction"))).collect();
    let count = points.len() as f64;
    let sum = |pick: &dyn Fn(f64, f64) -> f64| points.iter().map(|(x, y)| pick(*x, *y)).sum::<f64>();
    let (x, y, xx, xy) = (sum(&|x, _| x), sum(&|_, y| y), sum(&|x, _| x * x), sum(&|x, y| x * y));
    let determinant = count * xx - x * x;
    let (y1, y2) = ((y * xx - xy * x) / determinant, (count * xy - y * x) / determinant);
    let variance = sum(&|x, y| (y - y1 - y2 * x).powi(2)) / (count - 2.0);
    let (u1, u2) = ((variance * xx / determinant).sqrt(), (variance * count / determinant).sqrt());
    let r = -x / (count * xx).sqrt();
    let u30 = (u1 * u1 + 100.0 * u2 * u2 + 20.0 * r * u1 * u2).sqrt();
    for (quantity, found) in [
        ("y1", y1),
        ("u(y1)", u1),
        ("y2", y2),
        ("u(y2)", u2),
        ("r(y1;y2)", r),
        ("s", variance.sqrt()),
        ("b(30)", y1 + 10.0 * y2),
        ("u(b(30))", u30),
    ] {
        printed("H.3", quantity, found);
    }
}

#[test]
fn jcgm_100_correlated_results() {
    let table = data::jcgm_100_h2();
    let columns = ["potential_volt", "current_milliampere", "phase_radian"];
    let series = columns.map(|column| table.rows().map(|row| row.f64(column)).collect::<Vec<_>>());
    let mean = |values: &[f64]| values.iter().sum::<f64>() / values.len() as f64;
    let [potential, current, phase] = [0, 1, 2].map(|k: usize| mean(&series[k]));
    let covariance = |a: usize, b: usize| {
        let (ma, mb) = (mean(&series[a]), mean(&series[b]));
        let sum: f64 = series[a].iter().zip(&series[b]).map(|(x, y)| (x - ma) * (y - mb)).sum();
        let count = series[a].len() as f64;
        sum / (count * (count - 1.0))
    };
    let impedance = potential / current * 1e3;
    let (resistance, reactance) = (impedance * phase.cos(), impedance * phase.sin());
    // Slopes with respect to potential, current and phase.
    let slopes = [
        [resistance / potential, -resistance / current, -reactance],
        [reactance / potential, -reactance / current, resistance],
        [impedance / potential, -impedance / current, 0.0],
    ];
    let joint = |a: usize, b: usize| {
        let mut sum = 0.0;
        for k in 0..3 {
            for l in 0..3 {
                sum += slopes[a][k] * covariance(k, l) * slopes[b][l];
            }
        }
        sum
    };
    for (place, (name, value)) in [("R", resistance), ("X", reactance), ("Z", impedance)].into_iter().enumerate() {
        printed("H.2", name, value);
        printed("H.2", &format!("u({name})"), joint(place, place).sqrt());
    }
    for (name, a, b) in [("r(R;X)", 0, 1), ("r(R;Z)", 0, 2), ("r(X;Z)", 1, 2)] {
        printed("H.2", name, joint(a, b) / (joint(a, a) * joint(b, b)).sqrt());
    }
}

#[test]
fn units_agree_with_their_printed_sizes() {
    for row in data::units().rows() {
        if !row.text("printed").is_empty() {
            let error = (row.f64("printed") - row.f64("size")).abs();
            assert!(error < TABLE_LAST_DIGITS * row.last_digit("printed"), "{}", row.text("unit"));
        }
    }
}

//! The oracle against exact and published values: it must be right before anything is measured with it.

use core::cmp::Ordering;

use endwall_tests::data;
use endwall_tests::oracle::{
    Fill, Known, Measured, RBig, Real, compare_mach, compare_mach_excess, contains, elementary, exact, incident, jump, mach_from, optimal,
    parse, power_of_two, ratio, reflected, reflected_from_moving_wall, total_pressure_loss, total_pressure_ratio, ulp_width,
};
use endwall_tests::random::{Random, extreme_strengths, random};
use endwall_tests::tolerances::{ORACLE_SELF, STRONG_LIMIT_NEXT_TERM, TABLE_LAST_DIGITS, WEAK_LIMIT_NEXT_TERM};

fn rational(value: &Real) -> &RBig {
    value.as_rational().unwrap_or_else(|| panic!("not found to be rational: {value:?}"))
}

fn close(found: &Real, truth: &Real) {
    let error = found.relative_difference(truth);
    assert!(error < ORACLE_SELF, "{} for {}, off by {error:e}", found.to_f64(), truth.to_f64());
}

#[test]
fn rational_rows_are_reproduced_exactly() {
    for row in data::reflected_shock_exact().rows() {
        let gamma = row.exact("heat_capacity_ratio");
        let ahead = incident(&gamma, &Real::Rational(row.exact("mach")));
        let back = reflected(&gamma, &ahead);
        let mach = back.mach.as_ref().expect("a shock");
        for (column, value) in [
            ("pressure_21", &ahead.pressure),
            ("density_21", &ahead.density),
            ("temperature_21", &ahead.temperature),
            ("gas_speed", &ahead.gas_speed),
            ("pressure_51", &back.pressure),
            ("temperature_51", &back.temperature),
            ("density_51", &back.density),
            ("reflected_speed", &back.speed),
            ("reflected_mach_squared", &mach.square()),
        ] {
            assert_eq!(rational(value), &row.exact(column), "{column} at {} {}", row.text("heat_capacity_ratio"), row.text("mach"));
        }
    }
}

#[test]
fn conservation_holds_across_both_shocks() {
    // Mass, momentum and energy in the frame of each shock, exactly, for random cases.
    for case in random(11).take(300) {
        let gamma = case.heat_capacity_ratio.exact();
        let ahead = incident(&gamma, &Real::Rational(case.mach()));
        let back = reflected(&gamma, &ahead);
        // Units of p1 and ρ1: a1² = γ.
        let enthalpy = |p: &Real, rho: &Real| Real::Rational(&gamma / (&gamma - RBig::ONE)) * p / rho;
        let squared = |speed: &Real| Real::Rational(gamma.clone()) * speed.square();
        let one = Real::int(1);
        let balance = |[p, rho, w]: [&Real; 3], [q, sigma, v]: [&Real; 3]| {
            let zero = |value: Real| assert_eq!(rational(&value), &RBig::ZERO, "{case:?}");
            zero(rho * w - sigma * v);
            zero(p + rho * squared(w) - (q + sigma * squared(v)));
            let half = Real::Rational(ratio(1, 2));
            zero(enthalpy(p, rho) + &half * squared(w) - (enthalpy(q, sigma) + &half * squared(v)));
        };
        balance([&one, &one, &ahead.mach], [&ahead.pressure, &ahead.density, &(&ahead.mach - &ahead.gas_speed)]);
        balance([&ahead.pressure, &ahead.density, &(&back.speed + &ahead.gas_speed)], [&back.pressure, &back.density, &back.speed]);
    }
}

#[test]
fn normal_shock_table_is_met() {
    for row in data::normal_shock_table().rows() {
        let squared = Real::Rational(row.exact("mach")).square();
        let gamma = ratio(7, 5);
        let across = jump(&gamma, &squared);
        let total = total_pressure_ratio(&gamma, &squared);
        let total_2 = (Real::int(1) + Real::Rational(ratio(1, 5)) * &across.mach_behind_squared).pow(&ratio(7, 2), 600);
        for (column, value) in [
            ("mach_behind", &across.mach_behind_squared.sqrt()),
            ("pressure_ratio", &across.pressure),
            ("density_ratio", &across.density),
            ("temperature_ratio", &across.temperature),
            ("total_pressure_ratio", &total),
            ("pressure_over_total_behind", &(Real::int(1) / (&across.pressure * total_2))),
        ] {
            let units = (value.to_f64() - row.f64(column)).abs() / row.last_digit(column);
            assert!(units < TABLE_LAST_DIGITS, "{column} at M {}: {}", row.text("mach"), value.to_f64());
        }
    }
}

#[test]
fn limits_are_approached() {
    for row in data::shock_limits().rows() {
        let gamma = row.exact("heat_capacity_ratio");
        let text = row.text("value");
        let value = match text.strip_prefix("sqrt(") {
            Some(inner) => Real::Rational(parse(inner.trim_end_matches(')'))).sqrt(),
            None => Real::Rational(parse(text)),
        };
        let weak = row.text("limit") == "weak_step_ratio";
        let mach = if weak { ratio(1_000_001, 1_000_000) } else { ratio(1_000_000, 1) };
        let ahead = incident(&gamma, &Real::Rational(mach.clone()));
        let back = reflected(&gamma, &ahead);
        let squared = Real::Rational(&mach * &mach);
        let found = match row.text("limit") {
            "density_21" => ahead.density,
            "pressure_52" => back.pressure_over_2,
            "density_52" => back.density_over_2,
            "temperature_52" => back.temperature_over_2,
            "reflected_mach" => back.mach.expect("a shock"),
            "reflected_speed_over_shock_speed" => back.speed / &ahead.mach,
            "temperature_51_over_mach_squared" => back.temperature / squared,
            "pressure_51_over_mach_squared" => back.pressure / squared,
            "mach_behind" => jump(&gamma, &squared).mach_behind_squared.sqrt(),
            "weak_step_ratio" => back.pressure_excess / ahead.pressure_excess,
            other => panic!("unknown limit {other}"),
        };
        let allowed = if weak { WEAK_LIMIT_NEXT_TERM * 1e-6 } else { STRONG_LIMIT_NEXT_TERM * 1e-12 };
        let error = found.relative_difference(&value);
        assert!(error < allowed, "{} {}: {} for {text}", row.text("limit"), row.text("heat_capacity_ratio"), found.to_f64());
    }
}

#[test]
fn total_pressure_loss_of_weak_shocks() {
    for row in data::weak_shock_loss().rows() {
        let mach = Real::Rational(row.exact("mach_excess") + RBig::ONE);
        let loss = total_pressure_loss(&ratio(7, 5), &mach.square());
        let units = (loss.to_f64() - row.f64("loss")).abs() / row.last_digit("loss");
        assert!(units < TABLE_LAST_DIGITS, "{:e} for {}", loss.to_f64(), row.text("loss"));
    }
    // The leading term 16γ/(3(γ+1)²)(M−1)³ where a thousand bits are needed to see it.
    let excess = power_of_two(-240);
    for gamma in [ratio(7, 5), ratio(5, 3), exact(1.4)] {
        let loss = total_pressure_loss(&gamma, &Real::Rational(&excess + RBig::ONE).square());
        let plus = &gamma + RBig::ONE;
        let leading = ratio(16, 3) * &gamma / (&plus * &plus) * &excess * &excess * &excess;
        close(&loss, &Real::Rational(leading));
    }
}

#[test]
fn blast_relation_is_the_reflected_shock() {
    for row in data::blast_reflection().rows() {
        let gamma = ratio(7, 5);
        let incident_step = Real::Rational(row.exact("incident_overpressure_over_ambient"));
        // The strength is the square root of a ratio here, found from the overpressure by the jump relation.
        let squared = &incident_step * Real::Rational(ratio(6, 7)) + Real::int(1);
        let back = reflected(&gamma, &incident(&gamma, &squared.sqrt()));
        assert_eq!(rational(&back.pressure_excess), &row.exact("reflected_overpressure_over_ambient"));
    }
}

#[test]
fn standard_atmosphere_sound_speeds() {
    let constant = endwall_tests::oracle::molar_gas_constant();
    for row in data::standard_atmosphere().rows() {
        let fill = Fill {
            heat_capacity_ratio: ratio(7, 5),
            molar_mass: row.exact("molar_mass"),
            pressure: ratio(101_325, 1),
            temperature: row.exact("temperature"),
        };
        let speed = Real::Rational(fill.sound_speed_squared() * row.exact("gas_constant") / &constant).sqrt();
        let units = (speed.to_f64() - row.f64("sound_speed")).abs() / row.last_digit("sound_speed");
        assert!(units < TABLE_LAST_DIGITS, "{} for {}", speed.to_f64(), row.text("sound_speed"));
    }
}

#[test]
fn inverses_return_to_where_they_came_from() {
    for case in random(5).take(10) {
        let (gamma, mach) = (case.heat_capacity_ratio.exact(), Real::Rational(case.mach()));
        for known in Known::ALL {
            let found = mach_from(known, &gamma, &known.at(&gamma, &mach));
            close(&found.mach_excess, &Real::Rational(case.mach_excess.exact()));
            close(&found.mach, &mach);
        }
    }
}

#[test]
fn inverses_recognise_a_double() {
    for excess in [1.0, 0.5, 2f64.powi(-30), 2f64.powi(-60), 2f64.powi(-200), 1e-5, 4095.0] {
        for known in Known::ALL {
            let gamma = ratio(7, 5);
            let target = known.at(&gamma, &Real::Rational(exact(excess) + RBig::ONE));
            let found = mach_from(known, &gamma, &target);
            assert!(optimal(excess, excess, &found.mach_excess), "{known:?} at {excess:e}");
            let versus = |trial: f64| compare_mach_excess(known, &gamma, &target, &exact(trial));
            assert_eq!(
                [excess.next_down(), excess, excess.next_up()].map(versus),
                [Ordering::Greater, Ordering::Equal, Ordering::Less],
                "{known:?} at {excess:e}"
            );
            assert_eq!(compare_mach(known, &gamma, &target, &RBig::ONE), Ordering::Greater);
        }
    }
}

#[test]
fn inverse_with_units() {
    // γ 7/5, M 2: p5/p1 = 15, T5/T1 = 5/2, p2/p1 = 9/2, T2/T1 = 27/16.
    let fill =
        Fill { heat_capacity_ratio: ratio(7, 5), molar_mass: parse("0.0280134"), pressure: parse("32990"), temperature: parse("296.2") };
    for measured in [
        Measured::Pressure2(&fill.pressure * parse("4.5")),
        Measured::PressureStep2(&fill.pressure * parse("3.5")),
        Measured::Temperature2(&fill.temperature * parse("27/16")),
        Measured::Pressure5(&fill.pressure * parse("15")),
        Measured::PressureStep5(&fill.pressure * parse("14")),
        Measured::Temperature5(&fill.temperature * parse("2.5")),
    ] {
        let found = fill.mach_from(&measured);
        assert_eq!(rational(&found.mach), &RBig::from(2), "{measured:?}");
    }
    let speed = parse("812.5");
    let found = fill.mach_from(&Measured::GasSpeed2(speed.clone()));
    close(&fill.shot(&found.mach).state_2.gas_speed, &Real::Rational(speed));
}

#[test]
fn shot_with_units_keeps_its_promises() {
    let fill =
        Fill { heat_capacity_ratio: ratio(5, 3), molar_mass: parse("0.039948"), pressure: parse("8000"), temperature: parse("296.2") };
    let shot = fill.shot_at_speed(&parse("950"));
    assert_eq!(rational(&shot.shock_speed), &RBig::from(950));
    // Rational although the Mach number is not: each depends on its square only, or is a multiple of U_S.
    for value in [&shot.state_5.pressure, &shot.state_5.temperature, &shot.step, &shot.reflected_speed, &shot.state_2.gas_speed] {
        rational(value);
    }
    for state in [&shot.state_1, &shot.state_2, &shot.state_5] {
        // p = ρ R T / W and a² = γ p / ρ
        let specific = endwall_tests::oracle::molar_gas_constant() / &fill.molar_mass;
        close(&state.pressure, &(&state.density * Real::Rational(specific) * &state.temperature));
        close(&state.sound_speed.square(), &(Real::Rational(ratio(5, 3)) * &state.pressure / &state.density));
    }
}

#[test]
fn moving_wall_joins_shock_and_expansion() {
    let gamma = ratio(7, 5);
    let ahead = incident(&gamma, &Real::int(3));
    let at = |wall_speed: &Real| reflected_from_moving_wall(&gamma, &ahead, wall_speed);
    // Wall with the gas: no wave.
    let still = at(&ahead.gas_speed);
    assert_eq!(rational(&still.pressure_over_2), &RBig::ONE);
    assert_eq!(rational(&still.mach.expect("a wave of no strength")), &RBig::ONE);
    // A little slower and a little faster: both waves are acoustic, p − p2 = ± ρ2 a2 du to second order.
    let small = Real::Rational(power_of_two(-40));
    let slower = at(&(&ahead.gas_speed - &small));
    let faster = at(&(&ahead.gas_speed + &small));
    let acoustic = Real::Rational(gamma.clone()) * &small / &ahead.sound_speed;
    for (wave, sign) in [(&slower, 1), (&faster, -1)] {
        let change = (&wave.pressure_over_2 - Real::int(1)) / &acoustic;
        assert!(change.relative_difference(&Real::int(sign)) < 1e-11, "{}", change.to_f64());
    }
    assert!(faster.mach.is_none());
    // The expansion is isentropic: p ρ^-γ stays, and T = p/ρ.
    let wave = at(&(&ahead.gas_speed * Real::Rational(ratio(3, 2))));
    close(&wave.pressure_over_2, &wave.density_over_2.pow(&gamma, 800));
    close(&wave.temperature_over_2, &(&wave.pressure_over_2 / &wave.density_over_2));
    // A wall that the shock pushes: the gas behind the reflected shock moves with it (momentum across the shock).
    let pushed = at(&Real::Rational(ratio(1, 3)));
    let velocity = &ahead.gas_speed - Real::Rational(ratio(1, 3));
    let flow = &ahead.density * (&pushed.speed + &ahead.gas_speed) * velocity * Real::Rational(gamma.clone());
    close(&(&pushed.pressure - &ahead.pressure), &flow);
}

#[test]
fn elementary_functions_against_printed_digits_and_identities() {
    // ln 2, e and ln 10 to sixty digits (Abramowitz and Stegun, Handbook of Mathematical Functions, table 1.1, and
    // common knowledge; from memory).
    let two = RBig::from(2);
    for (found, digits) in [
        (elementary::ln(&two), "0.693147180559945309417232121458176568075500134360255254120680009"),
        (elementary::exp(&RBig::ONE), "2.71828182845904523536028747135266249775724709369995957496696763"),
        (elementary::ln(&RBig::from(10)), "2.30258509299404568401799145468436420760110148862877297603332790"),
    ] {
        close(&found, &Real::Rational(parse(digits)));
    }
    let mut random = Random::new(21);
    for _ in 0..40 {
        let (x, y) = (exact(random.over_binades(-300, 8)), exact(random.over_binades(-4, 3)));
        close(&elementary::exp(&x), &(Real::int(1) / elementary::exp(&-x.clone())));
        close(&(elementary::log1p_over(&x) * Real::Rational(x.clone())), &elementary::ln(&(&x + RBig::ONE)));
        close(&(elementary::expm1_over(&x) * Real::Rational(x.clone()) + Real::int(1)), &elementary::exp(&x));
        close(&elementary::pow(&y, &x), &elementary::pow(&y, &-x.clone()).pow(&RBig::from(-1), 900));
        close(&elementary::ln(&(&x * &y)), &(elementary::ln(&x) + elementary::ln(&y)));
    }
    assert_eq!(rational(&elementary::pow(&ratio(9, 4), &ratio(3, 2))), &ratio(27, 8));
    assert_eq!(rational(&elementary::ln(&RBig::ONE)), &RBig::ZERO);
}

#[test]
fn comparisons_with_doubles() {
    let third = Real::Rational(ratio(1, 3));
    let (below, above) = ((1.0f64 / 3.0), (1.0f64 / 3.0).next_up());
    assert!(contains(below, above, &third) && optimal(below, above, &third));
    assert!(!contains(above, above.next_up(), &third) && !optimal(below.next_down(), above, &third));
    let root = Real::int(2).sqrt();
    let nearest = 2f64.sqrt();
    assert!(optimal(nearest.next_down(), nearest, &root) != optimal(nearest, nearest.next_up(), &root));
    assert!(optimal(3.0, 3.0, &Real::int(9).sqrt()) && !optimal(3.0, 3.0f64.next_up(), &Real::int(9).sqrt()));
    assert_eq!((ulp_width(1.0, 1.0), ulp_width(-0.0, 0.0), ulp_width(-f64::from_bits(1), f64::from_bits(1))), (0, 0, 2));
    assert!(contains(f64::NEG_INFINITY, f64::INFINITY, &root));
    // An excess of 2^-200 over one is seen.
    for strength in extreme_strengths() {
        let gamma = ratio(7, 5);
        let back = reflected(&gamma, &incident(&gamma, &Real::Rational(&strength + RBig::ONE)));
        let mach = back.mach_excess.expect("a shock");
        let value = mach.to_f64();
        assert!(value > 0.0 && contains(value.next_down(), value.next_up(), &mach));
    }
}

#[test]
#[should_panic(expected = "do not tell the truth")]
fn an_undecided_comparison_panics() {
    // (e^1)·(e^-1) is one, but only its digits say so.
    let one = elementary::exp(&RBig::ONE) * elementary::exp(&RBig::from(-1));
    let _ = contains(1.0, 1.0, &one);
}

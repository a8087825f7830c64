//! Laws that must hold for every input, on generated cases with a fixed seed.

mod common;

use common::property::check;
use endwall::gas::{Fill, Gamma, Gas, HeatCapacityRatio, InputError, Parameter};
use endwall::number::{Ball, Dual, Enclosure, Known, Rational, Semifield, Signed};
use endwall::shock::{Entry, Flow, Incident, Jump, MovingShock, Output, Problem, Ratios, State};
use endwall::shot::{FitSettings, Station, fit};
use endwall_tests::tolerances::{CONSERVATION_ROUNDINGS, DIFFERENCE_QUOTIENT, SLOPE};
use proptest::prelude::{Just, Strategy, any, prop_oneof};
use proptest::test_runner::TestCaseError;
use proptest::{prop_assert, prop_assert_eq};

/// γ as an exact ratio of hundredths, of the trade, or a double.
fn heat_capacity_ratio() -> impl Strategy<Value = Rational> {
    let ratio = |n: u128, d: u128| Rational::ratio(n, d).expect("not zero");
    prop_oneof![
        Just(ratio(7, 5)),
        Just(ratio(5, 3)),
        Just(ratio(9, 7)),
        (101u128..300).prop_map(move |n| ratio(n, 100)),
        (1.01f64..3.0).prop_map(Rational::from),
    ]
}

/// A fill with numbers of the trade.
fn fill() -> impl Strategy<Value = Fill> {
    (heat_capacity_ratio(), 1u32..200, 10.0f64..5e5, 150.0f64..800.0).prop_map(|(gamma, mass, pressure, temperature)| {
        let mass = Rational::ratio(u128::from(mass), 1000).expect("not zero");
        let gas = Gas::new(HeatCapacityRatio::new(gamma).expect("in the domain"), mass).expect("in the domain");
        Fill::new(gas, pressure, temperature).expect("in the domain")
    })
}

/// M − 1 over eighteen powers of ten.
fn strength() -> impl Strategy<Value = f64> {
    prop_oneof![(-12.0f64..6.0).prop_map(|power| 10f64.powf(power)), 0.01f64..9.0]
}

fn shock() -> impl Strategy<Value = Incident> {
    (fill(), strength()).prop_map(|(fill, excess)| Incident::new(&fill, Entry::MachExcess, excess).expect("a shock"))
}

/// Mass, momentum and energy flux of a state with speed w relative to the shock: three sums of positive terms.
fn fluxes(state: State, speed: Enclosure, enthalpy: Enclosure) -> [Enclosure; 3] {
    let mass = state.density * speed;
    let momentum = state.pressure + state.density * speed.squared();
    let energy = enthalpy * state.pressure / state.density + speed.squared() / Enclosure::whole(2);
    [mass, momentum, energy]
}

#[test]
fn mass_momentum_and_energy_are_conserved() {
    check(1, 5_000, &shock(), |shock| {
        let gamma = shock.fill().gas().heat_capacity_ratio().enclosure();
        // γ/(γ−1) by exact integers: near γ 1 the difference of two doubles would lose what the test looks for.
        let exact = shock.fill().gas().heat_capacity_ratio().known().exact().expect("a ratio");
        let quotient = exact.checked_sub(Rational::ONE).and_then(|less_one| exact.checked_div(less_one));
        let enthalpy = Enclosure::from(quotient.expect("few bits"));
        let [one, two, five] = [shock.state_1(), shock.state_2(), shock.state_5()];
        let (speed, back) = (shock.output(Output::ShockSpeed), shock.output(Output::ReflectedSpeed));
        let rest = shock.output(Output::ShockFrameSpeed2);
        let plain = |x: Enclosure| x.middle();
        let pairs = [
            // Frames of the shocks.
            (fluxes(one, speed, enthalpy), fluxes(two, rest, enthalpy)),
            (fluxes(two, two.gas_speed + back, enthalpy), fluxes(five, back, enthalpy)),
        ];
        for (ahead, behind) in pairs {
            for (ahead, behind) in ahead.into_iter().zip(behind) {
                prop_assert!(ahead.is_proven() && ahead.overlaps(behind), "{ahead:?} {behind:?}");
                let bound = CONSERVATION_ROUNDINGS * f64::EPSILON * plain(ahead).max(plain(behind));
                prop_assert!((plain(ahead) - plain(behind)).abs() <= bound, "{ahead:?} {behind:?}");
            }
        }
        // Laboratory frame, where the shock sweeps up gas: speed times jump of a density is the jump of its flux.
        let half = |x: Enclosure| x / Enclosure::whole(2);
        let inner = Enclosure::whole(1) / (gamma - Enclosure::whole(1));
        let energy = |state: State| inner * state.pressure + half(state.density * state.gas_speed.squared());
        let jump = |front: Enclosure, a: [Enclosure; 2], b: [Enclosure; 2]| {
            let zero = front * (b[0] - a[0]) - (b[1] - a[1]);
            zero.is_proven() && zero.contains(0.0)
        };
        for (front, a, b) in [(speed, one, two), (-back, two, five)] {
            let densities = |state: State| [state.density, state.density * state.gas_speed];
            let momenta = |state: State| [state.density * state.gas_speed, state.pressure + state.density * state.gas_speed.squared()];
            let energies = |state: State| [energy(state), state.gas_speed * (energy(state) + state.pressure)];
            prop_assert!(jump(front, densities(a), densities(b)), "mass");
            prop_assert!(jump(front, momenta(a), momenta(b)), "momentum");
            prop_assert!(jump(front, energies(a), energies(b)), "energy");
        }
        Ok(())
    });
}

#[test]
fn entropy_rises_across_both_shocks() {
    check(2, 2_000, &shock(), |shock| {
        // pt2/pt1 = exp(−Δs/R): a loss is a rise of entropy. For γ near 1 and very strong shocks nothing of the total pressure is left.
        prop_assert!(shock.total_pressure_loss().low() > 0.0 || !shock.total_pressure_loss().is_proven());
        prop_assert!(shock.total_pressure_ratio().high() < 1.0 || shock.output(Output::MachExcess).low() < 1e-4);
        let reflected = Incident::new(shock.fill(), Entry::MachExcess, shock.output(Output::ReflectedMachExcess));
        let reflected = reflected.map_err(|error| TestCaseError::fail(error.to_string()))?;
        prop_assert!(reflected.total_pressure_loss().low() > 0.0, "{:?}", reflected.total_pressure_loss());
        // The ratios across the reflected shock are those of a stationary one of its Mach number.
        prop_assert!(reflected.output(Output::PressureRatio).overlaps(shock.output(Output::ReflectedOverIncidentPressure)));
        prop_assert!(reflected.output(Output::DensityRatio).overlaps(shock.state_5().density / shock.state_2().density));
        Ok(())
    });
}

#[test]
fn every_entry_finds_its_shock_again() {
    let inputs = (fill(), 0.001f64..20.0);
    check(3, 300, &inputs, |(fill, excess)| {
        let direct = Incident::new(&fill, Entry::MachExcess, excess).expect("a shock");
        for entry in Entry::ALL {
            let given = direct.output(entry.output());
            let back = Incident::new(&fill, entry, given).map_err(|error| TestCaseError::fail(format!("{entry:?}: {error}")))?;
            prop_assert!(back.output(Output::MachExcess).contains(excess), "{entry:?}: {given:?} {:?}", back.output(Output::MachExcess));
            // And at the nearest double, where the answer is as far off as the double.
            let near = Incident::new(&fill, entry, given.middle()).map_err(|error| TestCaseError::fail(format!("{entry:?}: {error}")))?;
            prop_assert!(back.output(Output::MachExcess).overlaps(near.output(Output::MachExcess)), "{entry:?}");
        }
        Ok(())
    });
}

/// Outputs that grow with the shock at given fill.
const GROWING: [Output; 14] = [
    Output::ShockSpeed,
    Output::PressureRatio,
    Output::PressureExcess,
    Output::DensityRatio,
    Output::DensityExcess,
    Output::TemperatureRatio,
    Output::GasSpeed2,
    Output::ReflectedPressureRatio,
    Output::Step,
    Output::ReflectionCoefficient,
    Output::ReflectedDensityExcess,
    Output::ReflectedTemperatureExcess,
    Output::ReflectedMachExcess,
    Output::SoundSpeed5,
];

#[test]
fn stronger_shocks_give_more() {
    let inputs = (fill(), strength(), 1.000_001f64..3.0);
    check(4, 3_000, &inputs, |(fill, excess, more)| {
        let [weak, strong] = [excess, more * excess].map(|excess| Incident::new(&fill, Entry::MachExcess, excess).expect("a shock"));
        for output in GROWING {
            let (less, more) = (weak.output(output), strong.output(output));
            prop_assert!(less.low() <= more.low() && less.high() <= more.high(), "{output:?} {less:?} {more:?}");
        }
        let (less, more) = (weak.output(Output::MachBehind), strong.output(Output::MachBehind));
        prop_assert!(more.low() <= less.low() && more.high() <= less.high());
        // Bounds that no shock passes.
        let gamma = fill.gas().heat_capacity_ratio().enclosure();
        let limit = (gamma + Enclosure::whole(1)) / (gamma - Enclosure::whole(1));
        prop_assert!(strong.output(Output::DensityRatio).low() < limit.high());
        prop_assert!(less.high() <= 1.0 && strong.output(Output::Mach).low() >= 1.0);
        // The end wall at least doubles the pressure rise.
        prop_assert!(weak.output(Output::ReflectionCoefficient).low() >= 2.0);
        Ok(())
    });
}

/// Value and slopes of an output with respect to entry, γ, p1, T1, W.
fn slopes<S: Signed>(entry: Entry, shock: &Incident, inputs: [S; 5], output: Output) -> Dual<S, 5> {
    let mut place = 0;
    let [value, gamma, pressure, temperature, molar_mass] = inputs.map(|input| {
        place += 1;
        Dual::variable(input, place - 1)
    });
    let gamma = Gamma::from_excess(gamma);
    let problem = Problem { gamma, pressure, temperature, molar_mass, entry: value };
    let z = problem.mach_squared_excess(entry, shock.branch());
    Flow::new(Jump::new(gamma, z), gamma, pressure, temperature, molar_mass).evaluate(output)
}

#[test]
fn slopes_are_those_of_the_relations() {
    let inputs = (1.05f64..1.67, 0.5f64..6.0, 1e3f64..1e5, 200.0f64..500.0, 0.004f64..0.1);
    check(5, 60, &inputs, |(gamma, excess, pressure, temperature, molar_mass)| {
        // γ − 1 is the input of the relations: take it as a double that γ holds exactly.
        let less_one = gamma - 1.0;
        let gamma = 1.0 + less_one;
        let make = |[value, less_one, pressure, temperature, molar_mass]: [f64; 5], entry: Entry| {
            let gamma = Rational::from(less_one).checked_add(Rational::ONE).expect("few bits");
            let gas = Gas::new(HeatCapacityRatio::new(gamma).expect("in the domain"), molar_mass).expect("in the domain");
            Incident::new(&Fill::new(gas, pressure, temperature).expect("a fill"), entry, value).expect("a shock")
        };
        let less_one = gamma - 1.0;
        let direct = make([excess, less_one, pressure, temperature, molar_mass], Entry::MachExcess);
        for entry in Entry::ALL {
            let point = [direct.output(entry.output()).middle(), less_one, pressure, temperature, molar_mass];
            let shock = make(point, entry);
            for output in Output::ALL {
                let plain = slopes::<f64>(entry, &shock, point, output);
                let proven = slopes::<Ball>(entry, &shock, point.map(Ball::from), output);
                let value = proven.value().enclosure();
                prop_assert!(value.overlaps(shock.output(output)), "{entry:?} {output:?}: {value:?} {:?}", shock.output(output));
                // Slopes are judged on the scale of the value over the input: they may vanish.
                for (k, input) in point.into_iter().enumerate() {
                    let slope = proven.slopes()[k].enclosure();
                    let scale = shock.output(output).high().abs() / input;
                    prop_assert!(slope.is_proven() && slope.width() <= SLOPE * scale.max(slope.high().abs()), "{entry:?} {output:?} {k}");
                    let error = (plain.slopes()[k] - slope.middle()).abs();
                    prop_assert!(
                        error <= 100.0 * SLOPE * scale.max(slope.high().abs()),
                        "{entry:?} {output:?} {k}: {error:e} of {slope:?}"
                    );
                }
            }
            // A difference quotient of proven values along one input in turn.
            for k in 0..5 {
                let step = 1e-5 * point[k];
                let [mut below, mut above] = [point, point];
                below[k] -= step;
                above[k] += step;
                let (low, high) = (make(below, entry), make(above, entry));
                let distance = Enclosure::from(above[k]) - Enclosure::from(below[k]);
                for output in [Output::Temperature5, Output::Pressure5, Output::ReflectedMachExcess, Output::GasSpeed2, Output::Step] {
                    let quotient = (high.output(output) - low.output(output)) / distance;
                    let slope = slopes::<Ball>(entry, &shock, point.map(Ball::from), output).slopes()[k].enclosure();
                    let scale = (shock.output(output).high() / point[k]).max(slope.high().abs());
                    let error = (quotient.middle() - slope.middle()).abs();
                    prop_assert!(error <= DIFFERENCE_QUOTIENT * scale * 10.0, "{entry:?} {output:?} {k}: {quotient:?} {slope:?}");
                }
            }
        }
        Ok(())
    });
}

/// Any double: specials, ordinary ones, and all bit patterns.
fn anything() -> impl Strategy<Value = f64> {
    let special = vec![
        0.0,
        -0.0,
        f64::NAN,
        f64::INFINITY,
        f64::NEG_INFINITY,
        f64::MAX,
        f64::MIN,
        f64::MIN_POSITIVE,
        5e-324,
        -5e-324,
        1e-310,
        1.0,
        1.0f64.next_up(),
        1.0f64.next_down(),
        -1.0,
        2f64.powi(200),
        2f64.powi(-200),
        2f64.powi(64),
    ];
    prop_oneof![proptest::sample::select(special), any::<u64>().prop_map(f64::from_bits), 0.5f64..1e4, -1e4f64..0.0]
}

/// No panic, and an enclosure in order.
fn is_sound(found: Enclosure) -> bool {
    found.low() <= found.high()
}

#[test]
fn no_input_panics_and_errors_name_it() {
    let inputs = (fill(), anything());
    check(6, 4_000, &inputs, |(fill, value)| {
        for entry in Entry::ALL {
            match Incident::new(&fill, entry, value) {
                Ok(shock) => {
                    prop_assert!(value.is_finite() && value > 0.0);
                    for output in Output::ALL {
                        prop_assert!(is_sound(shock.output(output)) && !shock.nearest(output).is_nan(), "{entry:?} {value:e} {output:?}");
                    }
                }
                Err(InputError { parameter, value: named, .. }) => {
                    // The entry itself, or the strength that it leads to.
                    prop_assert!(
                        parameter == entry.parameter() || parameter == Parameter::MachExcess,
                        "{entry:?} {value:e}: {parameter:?}"
                    );
                    if !value.is_finite() || value <= 0.0 {
                        prop_assert_eq!(parameter, entry.parameter());
                    }
                    if parameter == entry.parameter() && entry != Entry::MachExcess {
                        prop_assert!(named.to_bits() == value.to_bits() || named == value || value.is_nan() && named.is_nan());
                    }
                }
            }
        }
        Ok(())
    });
}

#[test]
fn no_fill_panics() {
    let inputs = (anything(), anything(), anything(), anything(), anything());
    check(7, 20_000, &inputs, |(gamma, mass, pressure, temperature, value)| {
        let gamma = match HeatCapacityRatio::new(gamma) {
            Ok(gamma) => gamma,
            Err(error) => {
                prop_assert_eq!(error.parameter, Parameter::HeatCapacityRatio);
                prop_assert!(error.to_string().contains("heat-capacity ratio"));
                HeatCapacityRatio::ratio(7, 5).expect("in the domain")
            }
        };
        let gas = match Gas::new(gamma, mass) {
            Ok(gas) => gas,
            Err(error) => {
                prop_assert_eq!(error.parameter, Parameter::MolarMass);
                Gas::new(gamma, 0.028).expect("in the domain")
            }
        };
        let fill = Fill::new(gas, pressure, temperature);
        let Ok(fill) = fill else {
            let error = fill.expect_err("seen");
            let pressure_is_wrong = !(2f64.powi(-200)..=2f64.powi(200)).contains(&pressure);
            let expected = if pressure_is_wrong { Parameter::FillPressure } else { Parameter::FillTemperature };
            prop_assert_eq!(error.parameter, expected);
            prop_assert!(error.to_string().len() > 20);
            return Ok(());
        };
        for entry in Entry::ALL {
            if let Ok(shock) = Incident::new(&fill, entry, value) {
                for output in Output::ALL {
                    prop_assert!(is_sound(shock.output(output)));
                }
            }
        }
        let _ = MovingShock::new(&fill, pressure, value).map(|shock| shock.state_behind());
        Ok(())
    });
}

#[test]
fn no_tolerance_wall_or_station_panics() {
    let inputs = (fill(), anything(), anything(), anything(), 0.001f64..9.0);
    check(8, 3_000, &inputs, |(fill, a, b, c, excess)| {
        // Any two numbers in order are a tolerance.
        if let Some(value) = Enclosure::new(a.min(b), a.max(b)) {
            for entry in [Entry::ShockSpeed, Entry::DensityRatio, Entry::ReflectedTemperature] {
                if let Ok(shock) = Incident::new(&fill, entry, Known::from(value)) {
                    prop_assert!(is_sound(shock.output(Output::Temperature5)) && is_sound(shock.output(Output::ReflectedMach)));
                }
            }
        }
        let shock = Incident::new(&fill, Entry::MachExcess, excess).expect("a shock");
        match shock.reflected_from_wall(c) {
            Ok(reflection) => {
                prop_assert!(c.is_finite());
                prop_assert!(
                    is_sound(reflection.state.pressure) && is_sound(reflection.state.temperature) && is_sound(reflection.front_speed)
                );
                prop_assert!(is_sound(reflection.state.density) && is_sound(reflection.state.sound_speed) && is_sound(reflection.mach));
            }
            Err(error) => prop_assert_eq!(error.parameter, Parameter::WallSpeed),
        }
        let small = fill.gas().heat_capacity_ratio().small();
        if let Some(ratios) = small.and_then(|gamma| Ratios::from_mach_excess(gamma, a)) {
            prop_assert!(is_sound(ratios.reflected_temperature));
        }
        let station = |from_end_wall, arrival, uncertainty| Station {
            from_end_wall,
            position_uncertainty: uncertainty,
            arrival,
            time_uncertainty: 3e-7,
            delay: 0.0,
            used: true,
        };
        let stations =
            [station(1.6, 0.0, c.abs()), station(a, b, 3e-4), station(0.8, 8e-4, 3e-4), station(b, c, 0.0), station(0.1, 16e-4, a)];
        if let Ok(found) = fit(&stations, &FitSettings::default()) {
            prop_assert!(found.shock_speed.is_finite());
        }
        Ok(())
    });
}

//! Checks of the fit: exact synthetic shots, the covariance against the scatter of simulated shots, and every refusal and flag.

extern crate std;
use super::*;
use crate::shot::fit_result::FitSource;
use crate::shot::random::Generator;
use std::vec::Vec;

/// Exact arrival times of a shock with this speed at the wall and attenuation, by the model's own equation.
fn shot(positions: &[f64], speed: f64, attenuation: f64, at_wall: f64) -> Vec<Station> {
    let travel = |y: f64| {
        if attenuation == 0.0 { y / speed } else { libm::log1p(attenuation * y) / (attenuation * speed) }
    };
    let station = |&y: &f64| Station {
        from_end_wall: y,
        position_uncertainty: 3e-4,
        arrival: at_wall - travel(y),
        time_uncertainty: 3e-7,
        delay: 0.0,
        used: true,
    };
    positions.iter().map(station).collect()
}

/// Evenly spaced positions from `first` down to `last`.
fn positions(count: usize, first: f64, last: f64) -> Vec<f64> {
    (0..count).map(|i| first + (last - first) * i as f64 / (count - 1) as f64).collect()
}

const FIVE: [f64; 5] = [1.65, 1.25, 0.85, 0.45, 0.05];
const SLOWS: Allowance = Allowance { value: 0.010, uncertainty: 0.006 };

fn with_allowance(allowance: Allowance) -> FitSettings {
    FitSettings { attenuation: Some(allowance), ..FitSettings::default() }
}

#[test]
fn exact_shots_are_recovered() {
    for count in [4, 5, 7, 16] {
        for (first, last) in [(1.65, 0.05), (10.0, 0.0), (6.0, 0.2)] {
            for speed in [300.0, 950.0, 5000.0] {
                for attenuation in [-0.02, -1e-4, 0.0, 1e-9, 0.012, 0.05, 0.1] {
                    let stations = shot(&positions(count, first, last), speed, attenuation, 0.0);
                    let fit = fit(&stations, &FitSettings::default()).unwrap();
                    let label = (count, first, speed, attenuation, fit.shock_speed, fit.attenuation);
                    assert!((fit.shock_speed / speed - 1.0).abs() < 1e-9, "{label:?}");
                    assert!((fit.attenuation - attenuation).abs() < 1e-8, "{label:?}");
                    assert!(fit.arrival_at_wall.abs() < 1e-12, "{label:?}");
                    assert!(fit.chi_squared.unwrap() < 1e-10);
                }
            }
        }
    }
}

/// The same shot with a time axis that starts elsewhere, stations in another order, channel delays, and unused stations between.
#[test]
fn order_origin_and_delays_do_not_matter() {
    let mut stations = shot(&FIVE, 950.0, 0.012, 2e-3);
    stations[1].arrival += 3e-7;
    let plain = fit(&stations, &FitSettings::default()).unwrap();
    for (i, s) in stations.iter_mut().enumerate() {
        s.delay = 1e-6 * i as f64;
        s.arrival += s.delay;
    }
    stations.reverse();
    let dead = Station { arrival: f64::NAN, used: false, ..stations[0] };
    stations.insert(2, dead);
    let other = fit(&stations, &FitSettings::default()).unwrap();
    assert!((plain.shock_speed - other.shock_speed).abs() < 1e-6);
    assert!((plain.attenuation - other.attenuation).abs() < 1e-9);
    let indices: Vec<usize> = other.stations().iter().map(|s| s.station).collect();
    assert_eq!(indices, [0, 1, 3, 4, 5]);
}

/// The example record of the design: near 950 m/s and 1.2 %/m, strongly anti-correlated.
#[test]
fn example_record() {
    let mut stations = shot(&FIVE, 950.0, 0.012, 0.0);
    for (s, microseconds) in stations.iter_mut().zip([0.0, 413.852, 829.667, 1247.461, 1667.255]) {
        s.arrival = microseconds * 1e-6;
    }
    let fit = fit(&stations, &FitSettings::default()).unwrap();
    assert!((fit.shock_speed - 950.0).abs() < 1.0, "{fit:?}");
    assert!((fit.attenuation - 0.012).abs() < 0.001);
    let c = fit.observation_covariance().unwrap();
    let r = c[1][2] / libm::sqrt(c[1][1] * c[2][2]);
    assert!((r + 0.96).abs() < 0.01, "{r}");
    assert!(fit.flags.is_empty() && fit.outlier.is_none() && fit.degrees_of_freedom == 2);
    let h: f64 = fit.stations().iter().map(|s| s.leverage).sum();
    assert!((h - 3.0).abs() < 1e-12);
}

/// Scatter of simulated shots against the covariance of one fit: 20 000 shots, so standard deviations are known within 0.5 %.
#[test]
fn covariance_agrees_with_simulated_shots() {
    let exact = shot(&FIVE, 950.0, 0.012, 0.0);
    for allowance in [None, Some(Allowance { value: 0.012, uncertainty: 0.0006 })] {
        let settings = FitSettings { attenuation: allowance, curvature: false, ..FitSettings::default() };
        let want = fit(&exact, &settings).unwrap().observation_covariance().unwrap();
        let mut generator = Generator::new(4);
        let n = 20_000;
        let (mut mean, mut products) = ([0.0; 3], [[0.0; 3]; 3]);
        for k in 1..=n {
            let mut stations = exact.clone();
            for s in &mut stations {
                s.arrival += s.time_uncertainty * generator.normal();
                s.from_end_wall += s.position_uncertainty * generator.normal();
            }
            let mut drawn = settings;
            if let Some(a) = &mut drawn.attenuation {
                a.value += a.uncertainty * generator.normal();
            }
            let f = fit(&stations, &drawn).unwrap();
            let x = [f.arrival_at_wall, f.shock_speed, f.attenuation];
            let old: Vec<f64> = x.iter().zip(&mean).map(|(x, m)| x - m).collect();
            for i in 0..3 {
                mean[i] += old[i] / f64::from(k);
            }
            for i in 0..3 {
                for j in 0..3 {
                    products[i][j] += old[i] * (x[j] - mean[j]) / f64::from(n - 1);
                }
            }
        }
        for i in 0..3 {
            for j in 0..3 {
                let unit = libm::sqrt(want[i][i] * want[j][j]);
                assert!((products[i][j] - want[i][j]).abs() < 0.03 * unit, "{i} {j} {products:?} {want:?}");
            }
        }
        assert!((mean[1] - 950.0).abs() < 5.0 * libm::sqrt(want[1][1] / f64::from(n)));
    }
}

/// Common errors: a shot with the error put in, against the line that the fit states for it.
#[test]
fn common_errors_move_the_result_as_stated() {
    let exact = shot(&FIVE, 950.0, 0.012, 0.0);
    let error = 1e-4;
    // An allowance that agrees: the linearised problem is then exact to first order.
    let settings = FitSettings {
        attenuation: Some(Allowance { value: 0.012, uncertainty: 0.006 }),
        clock_uncertainty: error,
        survey_scale_uncertainty: error,
        survey_offset_uncertainty: error,
        ..FitSettings::default()
    };
    let plain = fit(&exact, &settings).unwrap();
    let reference = exact[4].arrival;
    let shifted = |change: &dyn Fn(&mut Station)| {
        let mut stations = exact.clone();
        stations.iter_mut().for_each(change);
        fit(&stations, &settings).unwrap()
    };
    for (source, moved) in [
        (FitSource::Clock, shifted(&|s| s.arrival = reference + (s.arrival - reference) * (1.0 + error))),
        (FitSource::SurveyScale, shifted(&|s| s.from_end_wall *= 1.0 + error)),
        (FitSource::SurveyOffset, shifted(&|s| s.from_end_wall += error)),
    ] {
        let line = plain.lines().iter().find(|l| l.source == source).unwrap();
        let steps =
            [moved.arrival_at_wall - plain.arrival_at_wall, moved.shock_speed - plain.shock_speed, moved.attenuation - plain.attenuation];
        for (i, step) in steps.iter().enumerate() {
            let want = libm::sqrt(line.covariance[i][i]);
            assert!((step.abs() - want).abs() < 2e-3 * want + 1e-13, "{source:?} {i}: {step} {want}");
        }
    }
    let by_clock = plain.lines()[3].shock_speed_uncertainty();
    assert!((by_clock / 950.0 - error).abs() < 1e-6);
}

/// The lines add up to the covariance, and the allowance is one of them.
#[test]
fn lines_add_up() {
    let stations = shot(&FIVE, 950.0, 0.012, 0.0);
    let settings = FitSettings { attenuation: Some(SLOWS), clock_uncertainty: 2e-5, ..FitSettings::default() };
    let fit = fit(&stations, &settings).unwrap();
    let total: f64 = fit.lines().iter().map(|l| l.covariance[1][1]).sum();
    assert!((total / fit.covariance().unwrap()[1][1] - 1.0).abs() < 1e-14);
    let allowance = fit.lines()[2];
    assert!(allowance.shock_speed_uncertainty() > 0.0);
    assert!(allowance.covariance[2][2] < fit.observation_covariance().unwrap()[2][2]);
}

/// A profile with a quadratic term, integrated numerically: the curvature line is the shift of the speed over sqrt(3).
#[test]
fn curvature_line_sees_a_curved_profile() {
    let (speed, a, b) = (950.0, 0.012, 0.004);
    let travel = |y: f64| {
        let n = 2000;
        let f = |s: f64| 1.0 / (speed * (1.0 + a * s + b * s * s));
        let h = y / f64::from(n);
        (0..n).map(|i| h * f(h * (f64::from(i) + 0.5))).sum::<f64>()
    };
    let mut stations = shot(&positions(8, 2.0, 0.05), speed, a, 0.0);
    for s in &mut stations {
        s.arrival = -travel(s.from_end_wall);
    }
    let fit = fit(&stations, &FitSettings::default()).unwrap();
    let shift = (fit.shock_speed - speed).abs();
    let line = fit.lines()[6].shock_speed_uncertainty() * 3.0_f64.sqrt();
    assert!(shift > 1.0 && (line / shift - 1.0).abs() < 0.02, "{shift} {line}");
    let four = super::fit(&stations[..4], &FitSettings::default()).unwrap();
    assert_eq!(four.lines()[6].shock_speed_uncertainty(), 0.0);
}

#[test]
fn few_stations_need_the_allowance() {
    let two = shot(&[0.85, 0.05], 950.0, 0.012, 0.0);
    let Err(FitError::AllowanceNeeded { used: 2, straight_line_speed, bias_per_percent_per_metre }) = fit(&two, &FitSettings::default())
    else {
        panic!()
    };
    // The true speed is the straight line's less the bias.
    assert!((straight_line_speed - 1.2 * bias_per_percent_per_metre - 950.0).abs() < 0.1);
    assert!((bias_per_percent_per_metre - 4.3).abs() < 0.1);
    let exact = fit(&two, &with_allowance(Allowance { value: 0.012, uncertainty: 0.006 })).unwrap();
    assert!((exact.shock_speed - 950.0).abs() < 1e-6 && exact.degrees_of_freedom == 0);
    assert!(exact.flags.contains(FitFlags::NO_CHECK));
    assert!(exact.stations().iter().all(|s| s.standardised.is_none() && s.without.is_none()));
    // The allowance's share: 0.006 1/m moves the speed by about 0.6 of the bias for 1 %/m.
    let line = exact.lines()[2].shock_speed_uncertainty();
    assert!((line / (0.6 * bias_per_percent_per_metre) - 1.0).abs() < 0.02, "{line}");
}

/// A held attenuation and one with a tiny uncertainty are the same fit, and give the same lines.
#[test]
fn held_is_the_limit_of_observed() {
    let stations = shot(&FIVE[1..], 950.0, 0.012, 0.0);
    let held = fit(&stations, &with_allowance(Allowance { value: 0.010, uncertainty: 0.0 })).unwrap();
    let tight = fit(&stations, &with_allowance(Allowance { value: 0.010, uncertainty: 1e-9 })).unwrap();
    assert!((held.shock_speed - tight.shock_speed).abs() < 1e-6);
    assert_eq!(held.degrees_of_freedom, tight.degrees_of_freedom);
    assert!((held.chi_squared.unwrap() - tight.chi_squared.unwrap()).abs() < 1e-6);
    let (a, b) = (held.covariance().unwrap()[1][1], tight.covariance().unwrap()[1][1]);
    assert!((a / b - 1.0).abs() < 1e-4, "{a} {b}");
    assert!((held.attenuation - 0.010).abs() < 1e-15);
    assert_eq!(held.allowance.unwrap().leverage.round(), 1.0);

    // The allowance line of a held attenuation is the shift of the speed when the value moves by its uncertainty.
    let mut bare = stations.clone();
    for s in &mut bare {
        (s.time_uncertainty, s.position_uncertainty) = (0.0, 0.0);
    }
    let at = |value| fit(&bare, &with_allowance(Allowance { value, uncertainty: 1e-4 })).unwrap();
    let line = at(0.010).lines()[2].shock_speed_uncertainty();
    let shift = at(0.0101).shock_speed - at(0.010).shock_speed;
    assert!((line / shift.abs() - 1.0).abs() < 1e-3, "{line} {shift}");
    let together = at(0.010).lines()[2].covariance[1][2];
    assert!((together / (shift * 1e-4) - 1.0).abs() < 1e-3, "{together} {shift}");
}

#[test]
fn outliers_are_named_or_the_set_is_flagged() {
    let mut six = shot(&positions(6, 2.05, 0.05), 950.0, 0.012, 0.0);
    six[2].arrival += 5e-6;
    let f = fit(&six, &FitSettings::default()).unwrap();
    assert_eq!(f.outlier, Some(Outlier::Station(2)));
    assert!(f.flags.contains(FitFlags::OUTLIER));
    let without = f.stations()[2].without.unwrap();
    assert!((without.shock_speed - 950.0).abs() < 1e-6 && without.chi_squared.unwrap() < 1e-10);
    assert!((without.attenuation - 0.012).abs() < 1e-8);
    // Leave-one-out identity of linear least squares: the drop of chi-squared is the standardised residual squared.
    for s in f.stations() {
        let drop = f.chi_squared.unwrap() - s.without.unwrap().chi_squared.unwrap();
        assert!((drop - s.standardised.unwrap().powi(2)).abs() < 1e-4 * f.chi_squared.unwrap());
    }

    let mut four = shot(&positions(4, 1.25, 0.05), 950.0, 0.012, 0.0);
    four[1].arrival += 5e-6;
    let f = fit(&four, &FitSettings::default()).unwrap();
    assert_eq!((f.degrees_of_freedom, f.outlier), (1, None));
    assert!(f.flags.contains(FitFlags::SET_DISAGREES) && !f.flags.contains(FitFlags::OUTLIER));
    let sizes: Vec<f64> = f.stations().iter().map(|s| s.standardised.unwrap().abs()).collect();
    assert!(sizes.iter().all(|s| (s / sizes[0] - 1.0).abs() < 1e-6), "{sizes:?}");
    assert!((sizes[0].powi(2) / f.chi_squared.unwrap() - 1.0).abs() < 1e-6);
    assert!(f.stations().iter().all(|s| s.without.is_none()));

    // Ten good stations and an allowance far off: the allowance is the odd one out.
    let ten = shot(&positions(10, 3.0, 0.05), 950.0, 0.012, 0.0);
    let f = fit(&ten, &with_allowance(Allowance { value: 0.05, uncertainty: 0.001 })).unwrap();
    assert_eq!(f.outlier, Some(Outlier::Allowance));
}

#[test]
fn doubtful_shots_are_flagged() {
    let flags = |stations: &[Station]| fit(stations, &FitSettings::default()).unwrap().flags;
    assert!(flags(&shot(&positions(8, 4.0, 0.05), 950.0, -0.02, 0.0)).contains(FitFlags::ATTENUATION_NEGATIVE));
    assert!(flags(&shot(&positions(8, 4.0, 0.05), 950.0, 0.08, 0.0)).contains(FitFlags::ATTENUATION_LARGE));
    assert!(flags(&shot(&positions(8, 4.0, 0.31), 950.0, 0.012, 0.0)).contains(FitFlags::LAST_STATION_FAR));
    assert!(flags(&shot(&positions(8, 4.0, 0.29), 950.0, 0.012, 0.0)).is_empty());
    let mut bare = shot(&FIVE, 950.0, 0.012, 0.0);
    for s in &mut bare {
        (s.time_uncertainty, s.position_uncertainty) = (0.0, 0.0);
    }
    let f = fit(&bare, &FitSettings::default()).unwrap();
    assert_eq!(f.flags, FitFlags::UNCERTAINTY_MISSING);
    assert!((f.shock_speed - 950.0).abs() < 1e-6);
    assert!(f.covariance().is_none() && f.chi_squared.is_none() && f.correlation().is_none());
    bare[3].time_uncertainty = 1e-7;
    assert_eq!(fit(&bare, &FitSettings::default()), Err(FitError::UncertaintyMissing { station: 0 }));
}

#[test]
fn bad_settings_are_named() {
    let stations = shot(&FIVE, 950.0, 0.012, 0.0);
    let settings = FitSettings { clock_uncertainty: -1e-6, ..FitSettings::default() };
    let want = FitError::Setting { field: FitField::ClockUncertainty, value: -1e-6 };
    assert_eq!(fit(&stations, &settings), Err(want));
    let nan = with_allowance(Allowance { value: f64::NAN, uncertainty: 0.1 });
    assert!(matches!(fit(&stations, &nan), Err(FitError::Setting { field: FitField::AllowanceValue, .. })));
    let many = shot(&positions(17, 5.0, 0.0), 950.0, 0.0, 0.0);
    assert_eq!(fit(&many, &FitSettings::default()), Err(FitError::TooManyStations { used: 17 }));
    let still = with_allowance(Allowance { value: -0.9, uncertainty: 0.0 });
    assert_eq!(fit(&stations, &still), Err(FitError::NoSolution));
}

/// Nonsense in, a result or an error out: no panic, and nothing that is not finite.
#[test]
fn random_input_never_panics() {
    let mut generator = Generator::new(5);
    let mut results = 0;
    for _ in 0..5000 {
        let count = 2 + (generator.next_u64() % 15) as usize;
        let mut y: Vec<f64> = (0..count).map(|_| libm::exp(3.0 * generator.normal())).collect();
        let mut t: Vec<f64> = (0..count).map(|_| libm::exp(3.0 * generator.normal())).collect();
        y.sort_by(f64::total_cmp);
        t.sort_by(f64::total_cmp);
        let stations: Vec<Station> = (0..count)
            .map(|i| Station {
                from_end_wall: y[count - 1 - i],
                position_uncertainty: libm::exp(9.0 * generator.normal()),
                arrival: t[i],
                time_uncertainty: libm::exp(9.0 * generator.normal()),
                delay: 0.0,
                used: true,
            })
            .collect();
        let allowance = Allowance { value: 0.1 * generator.normal(), uncertainty: generator.uniform() };
        let settings = FitSettings { attenuation: (count % 2 == 0).then_some(allowance), ..FitSettings::default() };
        if let Ok(fit) = fit(&stations, &settings) {
            results += 1;
            assert!(fit.shock_speed > 0.0 && fit.covariance().unwrap().iter().flatten().all(|x| x.is_finite()));
        }
    }
    assert!(results > 500, "{results}");
}

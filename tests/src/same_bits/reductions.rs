//! Whole reductions: arrival times to states with their uncertainties.

use super::{Fingerprint, over_binades, whole};
use endwall::number::{Enclosure, Rational};
use endwall::shock::Output;
use endwall::shot::{
    DrivenGas, EndWall, FitSettings, Generator, Measured, MonteCarloSettings, Reduction, Shot, SpeedSource, Station, reduce,
};

/// Everything that a reduction tells.
pub fn add_reduction(fingerprint: &mut Fingerprint, reduction: &Reduction<'_>) {
    if let Some(fit) = reduction.fit() {
        for value in [fit.shock_speed, fit.attenuation, fit.arrival_at_wall] {
            fingerprint.add(value);
        }
        for value in [fit.chi_squared, fit.shock_speed_uncertainty(), fit.attenuation_uncertainty(), fit.correlation()] {
            fingerprint.add_option(value);
        }
    }
    for output in Output::ALL {
        let estimate = reduction.estimate(output);
        fingerprint.add(estimate.value);
        fingerprint.add_option(estimate.proven.map(Enclosure::low));
        fingerprint.add_option(estimate.proven.map(Enclosure::high));
        for value in [estimate.standard_uncertainty, estimate.degrees_of_freedom, estimate.coverage_factor, estimate.expanded] {
            fingerprint.add_option(value);
        }
        for slope in reduction.sensitivities(output).into_iter().take(reduction.budget().len()) {
            fingerprint.add(slope);
        }
    }
}

/// Five stations 0.4 m apart, the shock near 800 m/s and slowing down, arrival times in whole nanoseconds.
pub fn reduction(generator: &mut Generator, fingerprint: &mut Fingerprint) {
    let mut nanoseconds = 0;
    let pace = whole(generator, 300_000, 600_000);
    let stations: [Station; 5] = core::array::from_fn(|index| {
        let station = Station {
            from_end_wall: 1.65 - 0.4 * index as f64,
            position_uncertainty: 3e-4,
            arrival: f64::from(nanoseconds) * 1e-9,
            time_uncertainty: 3e-7,
            delay: 0.0,
            used: true,
        };
        nanoseconds += pace + 1_500 * index as u32 + whole(generator, 0, 600);
        station
    });
    let typed = |whole_number: u32, power: u32| Rational::ratio(u128::from(whole_number), 10_u128.pow(power)).unwrap_or(Rational::ONE);
    let shot = Shot {
        gas: DrivenGas::ConstantHeatCapacity {
            heat_capacity_ratio: Measured::new(typed(whole(generator, 1_300, 1_667), 3), 1e-4),
            molar_mass: Measured::exact(typed(whole(generator, 28_000, 131_000), 6)),
        },
        pressure: Measured::new(typed(whole(generator, 10_000, 1_000_000), 1), 20.0),
        temperature: Measured::new(typed(whole(generator, 2_900, 3_000), 1), 0.5),
        speed: SpeedSource::Stations(&stations, FitSettings::default()),
        wall: if whole(generator, 0, 1) == 0 {
            EndWall::Rigid
        } else {
            EndWall::Moving(Measured::new(over_binades(generator, -4, 3), 0.1))
        },
    };
    let Ok(reduction) = reduce(&shot) else {
        fingerprint.add(f64::from(nanoseconds));
        return;
    };
    add_reduction(fingerprint, &reduction);
    let settings = MonteCarloSettings { max_trials: 400, digits: 1, level: 0.95, ..Default::default() };
    let mut buffer = [0.0; 400];
    if let Ok(run) = reduction.monte_carlo(&[Output::Temperature5], generator.next_u64(), &settings, &mut buffer, &mut |_| true) {
        for output in run.outputs() {
            for value in [output.mean, output.standard_uncertainty, output.low, output.high] {
                fingerprint.add(value);
            }
        }
    }
}

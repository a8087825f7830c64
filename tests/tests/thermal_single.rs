//! Single precision: how far T5 and p5 in `f32` lie from double precision, for every species of the table, Mach 1.02 to 6.

use endwall::gas::species::table;
use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
use endwall::number::Rational;
use endwall::shock::{Entry, Output, ThermalFill, ThermalShock};

/// Shock speeds of each gas.
const SPEEDS: u32 = 400;

/// The largest relative difference of T5 and of p5, below and above this temperature: beyond 6000 K the polynomials are sums of terms that are up to a
/// hundred times as large as the heat capacity.
const HOT: f64 = 6000.0;

fn worst(name: &str, model: HeatCapacityModel) -> [[f64; 2]; 2] {
    let species = endwall::gas::species::named(name).expect("a species of the table");
    let portions = [Portion { species, fraction: Rational::ONE }];
    let gas = ThermallyPerfectGas::new(&portions).expect("a gas");
    let temperature = species.range().0.max(295.0);
    let fill = ThermalFill::new(gas, model, 10e3, temperature).expect("a fill");
    let sound_speed = ThermalShock::new(&fill, Entry::Mach, 2.0).expect("a shock").nearest(Output::SoundSpeed1);
    let (single, double) = (fill.plain(|x| x as f32), fill.plain(|x| x));
    let mut worst = [[0.0f64; 2]; 2];
    for step in 0..=SPEEDS {
        let mach = 1.02 * (6.0f64 / 1.02).powf(f64::from(step) / f64::from(SPEEDS));
        let speed = (mach * sound_speed) as f32;
        // Both leave the data together, but for the last speed before.
        let (Some(single), Some(double)) = (single.reflected(speed, 0.0), double.reflected(f64::from(speed), 0.0)) else { continue };
        let place = usize::from(double.flow().evaluate(Output::Temperature5) > HOT);
        for (worst, output) in worst[place].iter_mut().zip([Output::Temperature5, Output::Pressure5]) {
            let ratio = f64::from(single.flow().evaluate(output)) / double.flow().evaluate(output);
            *worst = worst.max((ratio - 1.0).abs());
        }
    }
    worst
}

#[test]
fn single_precision_is_as_good_as_stated() {
    let mut most = [[0.0f64; 2]; 2];
    for species in table::ALL {
        for model in HeatCapacityModel::ALL {
            let own = worst(species.name, model);
            for (most, own) in most.iter_mut().flatten().zip(own.iter().flatten()) {
                *most = most.max(*own);
            }
        }
    }
    let [[temperature, pressure], [hot_temperature, hot_pressure]] = most;
    println!("T5 {temperature:.1e}, p5 {pressure:.1e}; above {HOT} K: T5 {hot_temperature:.1e}, p5 {hot_pressure:.1e}");
    // Stated in the documentation of `PlainFill`.
    assert!(temperature < 1e-6 && pressure < 1e-6, "{most:?}");
    assert!(hot_temperature < 6e-6 && hot_pressure < 3e-6, "{most:?}");
}

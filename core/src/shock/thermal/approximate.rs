//! The plain solution, for f64 and f32.

use super::stage::{Stage, residual, residual_slope};
use crate::gas::HeatCapacity;
use crate::number::Elementary;

/// Steps, at most: a bracketed Newton iteration takes 4 to 8.
pub(super) const STEPS: u32 = 120;

/// What the iteration finds.
#[derive(Clone, Copy)]
pub(super) struct Approximation<S> {
    pub compression: S,
    /// c̄ at it.
    pub mean: S,
    /// x at it.
    pub excess: S,
    /// The range of the temperature behind.
    pub to: usize,
    /// The number of steps taken.
    pub steps: u32,
}

impl<S: Elementary> Approximation<S> {
    fn new(stage: &impl Stage<S>, compression: S, mean: S, to: usize, steps: u32) -> Self {
        Self { compression, mean, excess: stage.energy_excess(compression, mean), to, steps }
    }
}

/// A compression that solves the equation of the stage to the accuracy of the kind of number; `None` where the temperature behind leaves the data.
///
/// Newton's iteration inside a bracket, which is halved where a step would leave it or the temperature leaves the data. `start` is the answer for
/// constant heat capacity.
pub(super) fn approximate<S: Elementary + Into<f64>>(
    stage: &impl Stage<S>,
    heat_capacity: &HeatCapacity<S>,
    from: usize,
    temperature: S,
    start: S,
) -> Option<Approximation<S>> {
    let (coldest, hottest) = heat_capacity.range();
    let (one, two) = (S::whole(1), S::whole(2));
    let (mut low, mut high) = (S::whole(0), one);
    let mut e = start;
    // Below this a step no longer matters: Newton's next one would be its square.
    let small = {
        let unit: f64 = ((one + S::whole(1) / S::whole(1 << 30)) - one).into();
        if unit > 0.0 { 1e-8 } else { 1e-4 }
    };
    for step in 1..=STEPS {
        let (below, at, above): (f64, f64, f64) = (low.into(), e.into(), high.into());
        if !(at > below && at < above) {
            e = (low + high) / two;
        }
        let excess = stage.temperature_excess(e);
        let behind = temperature + temperature * excess;
        let kelvin: f64 = behind.into();
        if kelvin > hottest || kelvin < coldest {
            // Too hot for the data is too little compression, too cold too much.
            (low, high) = if kelvin > hottest { (e, high) } else { (low, e) };
            e = (low + high) / two;
            continue;
        }
        let to = heat_capacity.index_at(kelvin);
        let mean = heat_capacity.mean(from, temperature, excess, to);
        let value = residual(stage, e, mean);
        let own: f64 = excess.into();
        // Of two ranges the jump between them counts.
        let mean_slope = if own.abs() > 1e-3 || from != to {
            (heat_capacity.value(to, behind) - mean) / excess
        } else {
            heat_capacity.scaled_slope(from, temperature) / two
        };
        let slope = residual_slope(stage, e, mean, mean_slope);
        let sign: f64 = value.into();
        if sign == 0.0 {
            return Some(Approximation::new(stage, e, mean, to, step));
        }
        (low, high) = if sign > 0.0 { (e, high) } else { (low, e) };
        let next = e - value / slope;
        let (moved, size): (f64, f64) = ((next - e).into(), next.into());
        if moved.abs() <= small * size {
            let [_, _, excess_slope] = stage.slopes(e);
            let mean = mean + mean_slope * excess_slope * (next - e);
            return Some(Approximation::new(stage, next, mean, to, step));
        }
        e = next;
    }
    // Near the weakest shock rounding hides the root: what is left of the bracket is it as well as plain digits tell.
    let excess = stage.temperature_excess(e);
    let kelvin: f64 = (temperature + temperature * excess).into();
    let to = heat_capacity.index_at(kelvin);
    (kelvin <= hottest && kelvin >= coldest)
        .then(|| Approximation::new(stage, e, heat_capacity.mean(from, temperature, excess, to), to, STEPS))
}

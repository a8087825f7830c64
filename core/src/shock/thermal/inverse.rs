//! Inverse problems: the shock for which a quantity behind it has a given value.

use super::ThermalError;
use super::certify::Problem;
use super::flow::{ThermalFlow, reflected_stage};
use super::plain::PlainShock;
use super::setting::Setting;
use super::shock::{Flows, hull, solve};
use super::slopes::flow_with_slopes;
use super::stage::GivenSpeed;
use crate::gas::{InputError, Rule};
use crate::number::{Ball, Dual, Semifield};
use crate::shock::{Entry, Output};

/// M − 1 is searched between these.
const EXCESS: (f64, f64) = (1e-12, 1e3);
/// Plain steps, at most.
const SEARCH: u32 = 120;
/// Newton steps with proof, at most.
const STEPS: u32 = 10;
/// M − 1 is wanted this well, relative.
const NARROW: f64 = 1e-21;

/// The quantity that an entry fixes, as an excess that vanishes with the shock, and its value; `None` for entries that are no inverse problem or have
/// no unique answer.
fn target(setting: &Setting<Ball>, entry: Entry, value: Ball) -> Option<(Output, Ball)> {
    let one = Ball::whole(1);
    let over = |whole: Ball| (value - whole) / whole;
    Some(match entry {
        Entry::PressureRatio => (Output::PressureExcess, value - one),
        Entry::PressureRise => (Output::PressureExcess, value / setting.pressure),
        Entry::TemperatureRatio => (Output::TemperatureExcess, value - one),
        Entry::GasSpeed => (Output::GasSpeed2, value),
        Entry::ReflectedPressureRatio => (Output::ReflectedPressureExcess, value - one),
        Entry::ReflectedPressure => (Output::ReflectedPressureExcess, over(setting.pressure)),
        Entry::Step => (Output::ReflectedPressureExcess, value / setting.pressure),
        Entry::ReflectedTemperatureRatio => (Output::ReflectedTemperatureExcess, value - one),
        Entry::ReflectedTemperature => (Output::ReflectedTemperatureExcess, over(setting.temperature)),
        Entry::ShockSpeed | Entry::Mach | Entry::MachExcess | Entry::DensityRatio => return None,
    })
}

/// Solves an inverse problem: M − 1 by a bracketed secant in f64, then by interval Newton about it, each of whose steps solves both shocks with proof.
///
/// The answer exists, and is the only one in the interval of the last step. That these quantities rise with the shock speed over the whole
/// range follows for state 2 from the criterion of the species; for state 5 it is what tests show.
pub(super) fn inverse(setting: &Setting<Ball>, entry: Entry, value: Ball, flows: &mut Flows) -> Result<[u32; 2], ThermalError> {
    let parameter = entry.parameter();
    let refuse = |rule| ThermalError::Input(InputError { parameter, value: value.nearest(), rule });
    let (output, target) = target(setting, entry, value).ok_or(ThermalError::NotUnique(parameter))?;
    if !target.is_certainly_positive() {
        let least = match entry {
            Entry::ReflectedPressure => setting.pressure.nearest(),
            Entry::ReflectedTemperature => setting.temperature.nearest(),
            Entry::PressureRise | Entry::Step | Entry::GasSpeed => 0.0,
            _ => 1.0,
        };
        return Err(refuse(Rule::Above(least)));
    }
    let plain = setting.map(Ball::nearest);
    let first = setting.first();
    let (low, high) = setting.reflected.range();
    let mut e = search(&plain, output, target.nearest()).ok_or(refuse(Rule::HeatsBeyondData(low, high)))?;
    let mut reach = e.abs() * f64::from_bits((1023 - 44) << 52);
    for _ in 0..STEPS {
        let at = Ball::from(e);
        let stage = setting.at_mach_excess(at);
        let steps = solve(setting, &stage, parameter, value.nearest(), flows)?;
        let around = at.widened(reach);
        // The Newton step of each solution; of several, beside a joint, one leads to the answer.
        let step_of = |flow: &ThermalFlow<Ball>| {
            let slope = slope_over(setting, first, output, around, flow);
            slope.map_or(Ball::UNKNOWN, |slope| at - (flow.evaluate(output) - target) / slope)
        };
        let found = match flows {
            [Some(flow), None, ..] => step_of(flow),
            _ => Ball::around(hull(flows, step_of)),
        };
        let Some(found) = Some(found).filter(|found| found.radius().is_finite()) else {
            // Too wide an interval for the shocks to be solved over it.
            reach /= 16.0;
            continue;
        };
        if around.enclosure().encloses_strictly(found.enclosure()) {
            if found.radius() <= NARROW * e || flows.iter().flatten().count() > 1 {
                let ranges = |flows: &Flows| flows.map(|flow| flow.map(|flow| flow.ranges()));
                let used = ranges(flows);
                solve(setting, &setting.at_mach_excess(found), parameter, value.nearest(), flows)?;
                // A polynomial that led across its joint did not lead to the answer.
                if ranges(flows) == used {
                    return Ok(steps);
                }
            }
            reach = 2.0 * ((found.nearest() - e).abs() + found.radius());
        } else {
            reach = 4.0 * ((found.nearest() - e).abs() + found.radius());
        }
        if !(reach < 0.01 * e && found.nearest() > 0.0) {
            break;
        }
        e = found.nearest();
        reach = reach.max(e * f64::from_bits((1023 - 60) << 52));
    }
    Err(ThermalError::Existence { temperature: plain.temperature })
}

/// An enclosure of d(output)/d(M − 1) over an interval of M − 1, with the polynomials of a solution in its middle.
fn slope_over(setting: &Setting<Ball>, first: usize, output: Output, around: Ball, flow: &ThermalFlow<Ball>) -> Option<Ball> {
    let ([approximate, reflected], ranges) = (flow.compressions(), flow.ranges());
    let stage = setting.at_mach_excess(around);
    let incident = Problem { stage, heat_capacity: &setting.incident, from: first, temperature: setting.temperature };
    let compression = incident.newton(approximate, ranges.second)?.compression;
    let (stage, behind, _) = reflected_stage(setting, &stage, ranges, compression);
    let reflection = Problem { stage, heat_capacity: &setting.reflected, from: ranges.ahead, temperature: behind };
    let reflected = reflection.newton(reflected, ranges.fifth)?.compression;
    let variables = setting.map(Dual::<Ball, 1>::constant);
    let stage = variables.at_mach_excess(Dual::variable(around, 0));
    let [slope] = flow_with_slopes(&variables, &stage, ranges, [compression, reflected]).evaluate(output).slopes();
    Some(slope)
}

/// M − 1 in f64: secant steps in the logarithms of M − 1 and of the quantity, every third step a bisection.
fn search(plain: &Setting<f64>, output: Output, target: f64) -> Option<f64> {
    let at = |logarithm: f64| -> Option<f64> {
        let stage: GivenSpeed<f64> = plain.at_mach_excess(libm::exp(logarithm));
        let value = PlainShock::new(plain, &stage)?.flow().evaluate(output);
        (value > 0.0).then(|| libm::log(value / target))
    };
    let (mut low, mut high) = (libm::log(EXCESS.0), libm::log(EXCESS.1));
    // Too weak for plain digits counts as below, beyond the data as above.
    let (mut f_low, mut f_high): (Option<f64>, Option<f64>) = (None, None);
    for step in 0..SEARCH {
        let secant = f_low.zip(f_high).map(|(below, above)| low - below * (high - low) / (above - below));
        let middle = low + (high - low) / 2.0;
        let next = secant.filter(|next| step % 3 != 2 && *next > low && *next < high).unwrap_or(middle);
        if !(next > low && next < high) {
            break;
        }
        match at(next) {
            Some(value) if value.abs() < 1e-15 => return Some(libm::exp(next)),
            Some(value) if value < 0.0 => (low, f_low) = (next, Some(value)),
            Some(value) => (high, f_high) = (next, Some(value)),
            None if next > -14.0 => (high, f_high) = (next, None),
            None => (low, f_low) = (next, None),
        }
    }
    let reached = f_low.is_some() && f_high.is_some();
    reached.then(|| libm::exp(low + (high - low) / 2.0))
}

#[cfg(test)]
#[path = "inverse_tests.rs"]
mod tests;

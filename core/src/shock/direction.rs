//! In which direction each output moves with each input, at a fixed heat-capacity ratio: proven by hand, so that a box of tolerances is bounded at
//! its corners and only the rest has to be subdivided.
//!
//! **In the strength.** With G = γ+1 and z = M² − 1, at fixed γ: p2/p1 = 1 + 2γz/G; ρ2/ρ1 = 1 + 2/(G/z + γ−1); T2/T1 − 1 = 2(γ−1)·z/(1+z)·(G+γz)/G²;
//! u2/a1 = 2(M − 1/M)/G; p5/p2 = 1 + 2γ/(G/z + γ−1); the coefficient (p5−p1)/(p2−p1) = (2G + (3γ−1)z)/(G + (γ−1)z), whose slope has the sign of
//! (3γ−1) − 2(γ−1) > 0; ρ5/ρ2 = γP/((γ−1)P + 1) increases with P = p2/p1; T5/T1 − 1 = 2(γ−1)·z/(1+z)·(2G + (3γ−1)z)/G²; `M_R`² = 1 + G/(G/z + γ−1): all
//! increase with z, M2² = B/A = 1/`M_R`² and the total-pressure ratio (entropy rises) decrease. Only the two speeds
//! U − u2 = a1·(2/M + (γ−1)M)/G and `U_R` = a1·((3−γ)/M + 2(γ−1)M)/G have a minimum in M.
//!
//! **In the fill, at fixed strength**: pressures ∝ p1; densities ∝ p1·W/T1; temperatures ∝ T1; speeds ∝ √(T1/W).
//!
//! **The strength in the fill, at fixed entry**: z increases with every entry. A pressure or a step needs a stronger shock in a thinner gas; a speed
//! or a temperature in a colder one; a speed in a heavier one.
//!
//! Where the last two oppose each other the sign follows from the relation at fixed entry, see [`opposed`], or the input is subdivided.

use super::entry::Entry;
use super::output::Output;
use Direction::{Down, Up};

/// The inputs beside the entry and γ.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum FillInput {
    Pressure,
    Temperature,
    MolarMass,
}

/// An output grows or falls with an input.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Direction {
    Up,
    Down,
}

impl Direction {
    const fn times(self, other: Self) -> Self {
        if matches!((self, other), (Up, Up) | (Down, Down)) { Up } else { Down }
    }
}

/// How an output depends on one thing.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Dependence {
    No,
    In(Direction),
    Unknown,
}

/// An output with the entry; `None` where the output has a minimum.
pub(super) fn with_entry(output: Output) -> Option<Direction> {
    match in_strength(output) {
        Dependence::In(direction) => Some(direction),
        // Any end will do.
        Dependence::No => Some(Up),
        Dependence::Unknown => None,
    }
}

/// The direction with an input of the fill at a fixed entry, for all γ up to `gamma_high`; `None` where it is not known.
pub(super) fn with_fill(entry: Entry, output: Output, input: FillInput, gamma_high: f64) -> Option<Direction> {
    let direct = in_fill(output, input);
    let through_strength = match (in_strength(output), strength_in_fill(entry, input)) {
        (Dependence::No, _) | (_, None) => Dependence::No,
        (Dependence::In(f), Some(z)) => Dependence::In(f.times(z)),
        (Dependence::Unknown, Some(_)) => Dependence::Unknown,
    };
    match (direct, through_strength) {
        // Any end will do.
        (None, Dependence::No) => Some(Up),
        (Some(direction), Dependence::No) | (None, Dependence::In(direction)) => Some(direction),
        (Some(a), Dependence::In(b)) if a == b => Some(a),
        _ if with_strength(entry, output) => direct.map(|own| own.times(Down)),
        _ if opposed(entry, output, gamma_high) => direct,
        _ => None,
    }
}

/// True where an output follows the strength although the fill's own direction opposes it, at a fixed entry.
///
/// u2 = 2(U² − a1²)/(GU) falls with a1 at a given shock speed; p5 − p1 is p2 − p1 times the coefficient.
fn with_strength(entry: Entry, output: Output) -> bool {
    matches!((entry, output), (Entry::ShockSpeed, Output::GasSpeed2) | (Entry::PressureRise, Output::Step))
}

/// The direction with γ where the Mach number is given; `None` where it is not known or there is none.
///
/// At fixed M: γ/(γ+1) and (γ−1)/(γ+1) increase, so p2/p1, C/G and D/G do, and with (γ−1 + 2/M²)/(γ+1) also T2/T1 and T5/T1, which are
/// products of these; 1/ρ2/ρ1 is the last of them; ∂(B/A)/∂γ has the sign of 2z²; √γ/(γ+1) decreases, thus u2; ((3−γ)/M + 2(γ−1)M)/(γ+1) has the
/// slope 4(M − 1/M)/(γ+1)², ((γ−1)M + 2/M)/(γ+1) half of it; and a1 increases.
pub(super) fn with_gamma(entry: Entry, output: Output) -> Option<Direction> {
    if !matches!(entry, Entry::Mach | Entry::MachExcess) {
        return None;
    }
    match output {
        Output::ShockSpeed
        | Output::SoundSpeed1
        | Output::PressureRatio
        | Output::PressureExcess
        | Output::Pressure2
        | Output::PressureRise
        | Output::TemperatureRatio
        | Output::TemperatureExcess
        | Output::Temperature2
        | Output::SoundSpeed2
        | Output::MachBehind
        | Output::ShockFrameSpeed2
        | Output::ReflectedTemperatureRatio
        | Output::ReflectedTemperatureExcess
        | Output::Temperature5
        | Output::SoundSpeed5
        | Output::ReflectedSpeed
        | Output::ReflectedSpeedRatio => Some(Up),
        Output::DensityRatio
        | Output::DensityExcess
        | Output::Density2
        | Output::GasSpeed2
        | Output::GasSpeedRatio
        | Output::ReflectedMach
        | Output::ReflectedMachExcess => Some(Down),
        _ => None,
    }
}

/// True where an output follows the fill's own direction although the strength opposes it (or has no direction), at a fixed entry.
///
/// *Shock speed given*, w = a1²/U² ∝ T1/W: T2 ∝ (2γ − (γ−1)w)(γ−1 + 2w), whose slope in w is least at w = 1, where it is 4 − (γ−1)² ≥ 0 for γ ≤ 3;
/// T5 ∝ (3γ−1 − 2(γ−1)w)(2(γ−1) + (3−γ)w), whose slope at w = 1 is (5−3γ)(1+γ) ≥ 0 for γ ≤ 5/3 (beyond, T5 has a maximum); sound speeds
/// follow the temperatures; U − u2 = ((γ−1)U² + 2a1²)/(GU); `U_R` = (2(γ−1)U² + (3−γ)a1²)/(GU), γ ≤ 3.
///
/// *Gas speed given*: U = Gu/4 + √((Gu/4)² + a1²); a2² = a1² + (γ−1)(Uu − u²/2); `U_R` = (G/4 − 1)u + √((Gu/4)² + a2²);
/// a5² = a2² + (γ−1)(u²/2 + u·`U_R`): each increases with a1², and temperatures with the sound speeds at fixed W.
///
/// *p2 − p1 given*: p2 = p1 + Δ; ρ2 ∝ (1+z)/(z(G + (γ−1)z)) at fixed Δ, which decreases with z. *p5 or p5 − p1 given*: p2 = p5/(C/B), where C/B
/// increases with z; p2 − p1 is the step over the coefficient. *T5 given*: T2 = T5/(T5/T2), likewise.
fn opposed(entry: Entry, output: Output, gamma_high: f64) -> bool {
    match (entry, output) {
        (Entry::ShockSpeed, Output::Temperature2 | Output::SoundSpeed2 | Output::ReflectedSpeed) => gamma_high <= 3.0,
        // The double nearest 5/3 is below it.
        (Entry::ShockSpeed, Output::Temperature5 | Output::SoundSpeed5) => gamma_high <= 5.0 / 3.0,
        (Entry::ShockSpeed, Output::ShockFrameSpeed2)
        | (
            Entry::GasSpeed,
            Output::ShockSpeed
            | Output::Temperature2
            | Output::SoundSpeed2
            | Output::ShockFrameSpeed2
            | Output::Temperature5
            | Output::SoundSpeed5
            | Output::ReflectedSpeed,
        )
        | (Entry::PressureRise, Output::Density2)
        | (Entry::Step | Entry::ReflectedPressure, Output::Pressure2)
        | (Entry::Step, Output::PressureRise)
        | (Entry::ReflectedTemperature, Output::Temperature2 | Output::SoundSpeed2) => true,
        _ => false,
    }
}

/// z with an input of the fill, at a fixed entry.
fn strength_in_fill(entry: Entry, input: FillInput) -> Option<Direction> {
    match (entry, input) {
        (Entry::PressureRise | Entry::Step | Entry::ReflectedPressure, FillInput::Pressure)
        | (Entry::ShockSpeed | Entry::GasSpeed | Entry::ReflectedTemperature, FillInput::Temperature) => Some(Down),
        (Entry::ShockSpeed | Entry::GasSpeed, FillInput::MolarMass) => Some(Up),
        _ => None,
    }
}

/// An output with an input of the fill, at a fixed strength.
fn in_fill(output: Output, input: FillInput) -> Option<Direction> {
    match output {
        Output::Pressure2 | Output::PressureRise | Output::Pressure5 | Output::Step => (input == FillInput::Pressure).then_some(Up),
        Output::Temperature2 | Output::Temperature5 => (input == FillInput::Temperature).then_some(Up),
        Output::Density1 | Output::Density2 | Output::Density5 => Some(if input == FillInput::Temperature { Down } else { Up }),
        Output::ShockSpeed
        | Output::SoundSpeed1
        | Output::SoundSpeed2
        | Output::SoundSpeed5
        | Output::GasSpeed2
        | Output::ShockFrameSpeed2
        | Output::ReflectedSpeed => match input {
            FillInput::Pressure => None,
            FillInput::Temperature => Some(Up),
            FillInput::MolarMass => Some(Down),
        },
        _ => None,
    }
}

/// An output with z, at fixed γ and fill.
fn in_strength(output: Output) -> Dependence {
    match output {
        Output::Density1 | Output::SoundSpeed1 => Dependence::No,
        Output::ShockFrameSpeed2 | Output::ReflectedSpeed | Output::ReflectedSpeedRatio => Dependence::Unknown,
        Output::MachBehind => Dependence::In(Down),
        _ => Dependence::In(Up),
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use crate::gas::Gamma;
    use crate::number::Dual;
    use crate::shock::{Flow, Jump, Problem};

    /// Slopes of an output with respect to the entry, γ − 1, p1, T1 and W, each times its input, where the entry is that of a shock of M² − 1 = z.
    fn slopes(entry: Entry, output: Output, gamma: f64, z: f64) -> [f64; 5] {
        let (excess, pressure, temperature, molar_mass) = (gamma - 1.0, 2e4, 300.0, 0.03);
        let plain = Gamma::from_excess(excess);
        let value = Flow::new(Jump::new(plain, z), plain, pressure, temperature, molar_mass).evaluate(entry.output());
        let inputs = [value, excess, pressure, temperature, molar_mass];
        let variable = |at: usize| Dual::<f64, 5>::variable(inputs[at], at);
        let problem = Problem {
            entry: variable(0),
            gamma: Gamma::from_excess(variable(1)),
            pressure: variable(2),
            temperature: variable(3),
            molar_mass: variable(4),
        };
        let branch = Problem { entry: value, gamma: plain, pressure, temperature, molar_mass }.branch(entry);
        let z = problem.mach_squared_excess(entry, branch);
        let flow = Flow::new(Jump::new(problem.gamma, z), problem.gamma, problem.pressure, problem.temperature, problem.molar_mass);
        let result = flow.evaluate(output);
        core::array::from_fn(|at| result.slopes()[at] * inputs[at] / result.value())
    }

    /// Every direction that is claimed, against the slopes at strengths from M = 1.005 to 100 and γ from 1.001 to 20.
    #[test]
    fn every_claimed_direction_has_the_sign_of_its_slope() {
        let mut claims = 0;
        for entry in Entry::ALL {
            for output in Output::ALL.into_iter().filter(|output| *output != entry.output()) {
                for gamma in [1.001, 1.05, 1.2, 1.4, 1.6, 1.666, 1.8, 2.5, 2.99, 3.5, 6.0, 20.0] {
                    for z in [0.01, 0.1, 0.3, 1.0, 3.0, 10.0, 30.0, 100.0, 1e4] {
                        let slopes = slopes(entry, output, gamma, z);
                        let fill = |input| with_fill(entry, output, input, gamma);
                        let directions = [
                            with_entry(output),
                            with_gamma(entry, output),
                            fill(FillInput::Pressure),
                            fill(FillInput::Temperature),
                            fill(FillInput::MolarMass),
                        ];
                        for (at, (direction, slope)) in directions.into_iter().zip(slopes).enumerate() {
                            let Some(direction) = direction else { continue };
                            claims += 1;
                            let along = if direction == Up { slope } else { -slope };
                            // What rounding leaves of a slope that is zero.
                            assert!(along > -1e-8, "{entry:?} {output:?} input {at}, γ {gamma}, z {z}: {direction:?} but {slope}");
                        }
                    }
                }
            }
        }
        assert!(claims > 100_000, "{claims}");
    }
}

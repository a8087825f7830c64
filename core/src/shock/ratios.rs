//! The dimensionless direct problem at once and fast: nine ratios from γ and M − 1.

use super::relations::Jump;
use crate::gas::{Gamma, HeatCapacityRatio, InputError, Parameter, Rule, SmallRatio};
use crate::number::{Counted, Enclosure, Exact, Positive, Semifield};

/// The nine ratios of the incident and the reflected shock, each the optimal enclosure.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Ratios {
    /// p2/p1.
    pub pressure: Enclosure,
    /// T2/T1.
    pub temperature: Enclosure,
    /// ρ2/ρ1.
    pub density: Enclosure,
    /// u2/a1.
    pub gas_speed: Enclosure,
    /// Mach number of the reflected shock relative to the gas ahead of it.
    pub reflected_mach: Enclosure,
    /// p5/p1.
    pub reflected_pressure: Enclosure,
    /// T5/T1.
    pub reflected_temperature: Enclosure,
    /// ρ5/ρ1.
    pub reflected_density: Enclosure,
    /// Reflected shock speed in the laboratory over a1.
    pub reflected_speed: Enclosure,
}

/// The nine ratios in any kind of number, from γ and e = M − 1; `reflected_mach` is returned as its square.
///
/// Inlined, so that proof counts fold into constants.
#[inline(always)]
pub fn nine_ratios<S: Semifield>(gamma: Gamma<S>, mach_excess: S) -> [S; 9] {
    let jump = Jump::from_mach_excess(gamma, mach_excess);
    let mach = S::whole(1) + mach_excess;
    [
        jump.pressure_ratio(),
        jump.temperature_ratio(),
        jump.density_ratio(),
        jump.gas_speed(mach),
        jump.reflected_mach_squared(),
        jump.reflected_pressure_ratio(),
        jump.reflected_temperature_ratio(),
        jump.reflected_density_ratio(),
        jump.reflected_speed(mach),
    ]
}

impl Ratios {
    /// All nine ratios for e = M − 1, any e from 2⁻²⁰⁰ to 2⁶⁴; `None` outside. The optimal enclosures, hence the same bits on every machine.
    ///
    /// About twice the time of careful plain f64 where the hardware has a fused multiply-add that the build may use.
    ///
    /// ```
    /// use endwall::gas::HeatCapacityRatio;
    /// use endwall::number::Enclosure;
    /// use endwall::shock::Ratios;
    /// let diatomic = HeatCapacityRatio::ratio(7, 5)?.small().unwrap();
    /// let ratios = Ratios::from_mach_excess(diatomic, 1.0).unwrap();
    /// assert_eq!(ratios.reflected_pressure, Enclosure::from(15.0));
    /// assert!(ratios.reflected_mach.contains(3f64.sqrt()) && ratios.reflected_mach.width_in_ulp() == 1);
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    #[inline(always)]
    pub fn from_mach_excess(gamma: SmallRatio, mach_excess: f64) -> Option<Self> {
        if !is_inside(gamma, mach_excess) {
            return None;
        }
        let bounds = neighbours(gamma, mach_excess);
        // One branch for all nine.
        if bounds.proven { Some(Self::between(bounds.low, bounds.high)) } else { Some(Self::settled(gamma, mach_excess)) }
    }

    /// The lower and the upper bounds of all nine ratios, in the order of [`nine_ratios`] (with `reflected_mach` itself), for N shocks into one gas:
    /// `bounds[0][4][k]` and `bounds[1][4][k]` enclose the Mach number of the k-th reflected shock. The same bits as
    /// [`Ratios::from_mach_excess`] in a fraction of the time, since a compiler can take several shocks at once; `None` if any is outside.
    ///
    /// ```
    /// use endwall::gas::HeatCapacityRatio;
    /// use endwall::shock::Ratios;
    /// let monatomic = HeatCapacityRatio::ratio(5, 3)?.small().unwrap();
    /// let strengths = [0.1, 0.3, 1.0, 2.0];
    /// let [low, high] = Ratios::bounds(monatomic, &strengths).unwrap();
    /// let last = Ratios::from_mach_excess(monatomic, 2.0).unwrap();
    /// assert_eq!((low[5][3], high[5][3]), (last.reflected_pressure.low(), last.reflected_pressure.high()));
    /// assert!(Ratios::bounds(monatomic, &[1.0, -1.0]).is_none());
    /// # Ok::<(), endwall::gas::InputError>(())
    /// ```
    #[inline(always)]
    pub fn bounds<const N: usize>(gamma: SmallRatio, mach_excesses: &[f64; N]) -> Option<[[[f64; N]; 9]; 2]> {
        if !mach_excesses.iter().all(|excess| is_inside(gamma, *excess)) {
            return None;
        }
        // Ratio by ratio, so that neighbours in memory are one ratio of several shocks, as vector instructions want it.
        let mut bounds = [[[0.0; N]; 9]; 2];
        let mut proven = true;
        for (place, excess) in mach_excesses.iter().enumerate() {
            let one = neighbours(gamma, *excess);
            store(&mut bounds, place, [one.low, one.high]);
            proven &= one.proven;
        }
        if !proven {
            settle_all(gamma, mach_excesses, &mut bounds);
        }
        Some(bounds)
    }

    /// The lower and the upper bounds, in the order of [`nine_ratios`].
    fn both_bounds(&self) -> [[f64; 9]; 2] {
        let Self {
            pressure,
            temperature,
            density,
            gas_speed,
            reflected_mach,
            reflected_pressure,
            reflected_temperature,
            reflected_density,
            reflected_speed,
        } = self;
        let all = [
            pressure,
            temperature,
            density,
            gas_speed,
            reflected_mach,
            reflected_pressure,
            reflected_temperature,
            reflected_density,
            reflected_speed,
        ];
        [all.map(|ratio| ratio.low()), all.map(|ratio| ratio.high())]
    }

    /// The nine ratios where a pair cannot tell an answer from a double: integers decide. Rare, so kept out of the fast path.
    #[cold]
    #[inline(never)]
    fn settled(gamma: SmallRatio, mach_excess: f64) -> Self {
        let (d, q) = gamma.parts();
        let [p2, t2, r2, u2, mach, p5, t5, r5, speed] = counted(gamma, mach_excess);
        let [e_p2, e_t2, e_r2, e_u2, e_mach_squared, e_p5, e_t5, e_r5, e_speed] =
            nine_ratios(Gamma { d: Exact::from(d), q: Exact::from(q) }, Exact::from(mach_excess));
        Self {
            pressure: p2.optimal(|| e_p2),
            temperature: t2.optimal(|| e_t2),
            density: r2.optimal(|| e_r2),
            gas_speed: u2.optimal(|| e_u2),
            reflected_mach: mach.optimal_root(|| e_mach_squared),
            reflected_pressure: p5.optimal(|| e_p5),
            reflected_temperature: t5.optimal(|| e_t5),
            reflected_density: r5.optimal(|| e_r5),
            reflected_speed: speed.optimal(|| e_speed),
        }
    }

    /// The nine ratios from their bounds.
    #[inline(always)]
    fn between(low: [f64; 9], high: [f64; 9]) -> Self {
        Self {
            pressure: Enclosure::ordered(low[0], high[0]),
            temperature: Enclosure::ordered(low[1], high[1]),
            density: Enclosure::ordered(low[2], high[2]),
            gas_speed: Enclosure::ordered(low[3], high[3]),
            reflected_mach: Enclosure::ordered(low[4], high[4]),
            reflected_pressure: Enclosure::ordered(low[5], high[5]),
            reflected_temperature: Enclosure::ordered(low[6], high[6]),
            reflected_density: Enclosure::ordered(low[7], high[7]),
            reflected_speed: Enclosure::ordered(low[8], high[8]),
        }
    }

    /// All nine ratios for a Mach number, with errors that say what is wrong.
    ///
    /// # Errors
    /// [`InputError`] unless γ is an exact ratio of integers below 2⁵³ and 1 < M ≤ 2⁵³.
    pub fn from_mach(gamma: HeatCapacityRatio, mach: f64) -> Result<Self, InputError> {
        let small = gamma.small().ok_or(InputError {
            parameter: Parameter::HeatCapacityRatio,
            value: gamma.known().nominal(),
            rule: Rule::Digits,
        })?;
        let limit = 9_007_199_254_740_992.0;
        let refuse = InputError { parameter: Parameter::Mach, value: mach, rule: Rule::Between(1.0, limit) };
        if !(mach > 1.0 && mach <= limit) {
            return Err(refuse);
        }
        // Exact: the difference of a double up to 2⁵³ and 1 is a double.
        Self::from_mach_excess(small, mach - 1.0).ok_or(refuse)
    }
}

/// The powers of two between which d, q and M − 1 must lie.
const D_RANGE: (i32, i32) = (-20, 8);
const Q_RANGE: (i32, i32) = (0, 1);
const EXCESS_RANGE: (i32, i32) = (-Counted::ENTRY, 64);

/// True if the ratios are proven for these inputs.
#[inline(always)]
fn is_inside(gamma: SmallRatio, mach_excess: f64) -> bool {
    let (d, q) = gamma.parts();
    Counted::is_within(d, D_RANGE.0, D_RANGE.1)
        && Counted::is_within(q, Q_RANGE.0, Q_RANGE.1)
        && Counted::is_within(mach_excess, EXCESS_RANGE.0, EXCESS_RANGE.1)
}

/// The nine ratios as pairs, for inputs that are [inside](is_inside).
#[inline(always)]
fn counted(gamma: SmallRatio, mach_excess: f64) -> [Counted; 9] {
    let (d, q) = gamma.parts();
    let gamma = Gamma { d: Counted::inside(d, D_RANGE.0, D_RANGE.1), q: Counted::inside(q, Q_RANGE.0, Q_RANGE.1) };
    let [p2, t2, r2, u2, mach_squared, p5, t5, r5, speed] =
        nine_ratios(gamma, Counted::inside(mach_excess, EXCESS_RANGE.0, EXCESS_RANGE.1));
    [p2, t2, r2, u2, mach_squared.sqrt(), p5, t5, r5, speed]
}

/// Two neighbouring doubles for each of the nine ratios, and whether all are proven to bracket theirs.
struct Bounds {
    low: [f64; 9],
    high: [f64; 9],
    proven: bool,
}

/// The bounds for inputs that are [inside](is_inside), without a branch.
#[inline(always)]
fn neighbours(gamma: SmallRatio, mach_excess: f64) -> Bounds {
    let [p2, t2, r2, u2, mach, p5, t5, r5, speed] = counted(gamma, mach_excess);
    // Written out: `array::map` is not always inlined, and the counts would be carried along at run time.
    let (p2, t2, r2) = (p2.neighbours(), t2.neighbours(), r2.neighbours());
    let (u2, mach, p5) = (u2.neighbours(), mach.neighbours(), p5.neighbours());
    let (t5, r5, speed) = (t5.neighbours(), r5.neighbours(), speed.neighbours());
    Bounds {
        low: [p2.0, t2.0, r2.0, u2.0, mach.0, p5.0, t5.0, r5.0, speed.0],
        high: [p2.1, t2.1, r2.1, u2.1, mach.1, p5.1, t5.1, r5.1, speed.1],
        proven: p2.2 & t2.2 & r2.2 & u2.2 & mach.2 & p5.2 & t5.2 & r5.2 & speed.2,
    }
}

/// Puts the bounds of one shock in their place.
#[inline(always)]
fn store<const N: usize>(bounds: &mut [[[f64; N]; 9]; 2], place: usize, of_one: [[f64; 9]; 2]) {
    for (rows, values) in bounds.iter_mut().zip(of_one) {
        for (row, value) in rows.iter_mut().zip(values) {
            if let Some(cell) = row.get_mut(place) {
                *cell = value;
            }
        }
    }
}

/// One shock after the other, where for one of them integers must decide.
#[cold]
#[inline(never)]
fn settle_all<const N: usize>(gamma: SmallRatio, mach_excesses: &[f64; N], bounds: &mut [[[f64; N]; 9]; 2]) {
    for (place, excess) in mach_excesses.iter().enumerate() {
        if !neighbours(gamma, *excess).proven {
            store(bounds, place, Ratios::settled(gamma, *excess).both_bounds());
        }
    }
}

/// The error counts of the nine ratios as the formulas themselves derive them, in units of u² = 2⁻¹⁰⁶ of the value, and the bound on their
/// exponents: with these the documentation page "How it is proven" is checked.
pub fn error_counts() -> Option<[(u32, (i32, i32)); 9]> {
    let one = HeatCapacityRatio::ratio(2, 1).ok()?.small()?;
    let [p2, t2, r2, u2, mach, p5, t5, r5, speed] = counted(one, 1.0);
    Some([p2, t2, r2, u2, mach, p5, t5, r5, speed].map(|ratio| (ratio.error_count(), ratio.range())))
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use std::{format, println};

    #[test]
    fn the_documented_counts_are_those_of_the_formulas() {
        let page = include_str!("../how_it_is_proven.md");
        let names = ["p2/p1", "T2/T1", "ρ2/ρ1", "u2/a1", "`M_R`", "p5/p1", "T5/T1", "ρ5/ρ1", "`U_R`/a1"];
        for (name, (count, (low, high))) in names.iter().zip(error_counts().unwrap()) {
            let row = format!("| {name} | {count} | {low} to {high} |");
            println!("{row}");
            assert!(page.contains(&row), "{row}");
        }
    }

    /// Single precision is within 8 units of 2⁻²⁴ (4.8e-7, worst seen 6.1) of the same formulas in double precision, at every strength.
    #[test]
    fn single_precision_keeps_its_digits() {
        let mut worst = 0.0_f64;
        for (d, q) in [(2.0_f32, 5.0), (2.0, 3.0), (2.0, 7.0)] {
            let mut e = 1e-6_f32;
            while e < 29.0 {
                let single = nine_ratios(Gamma { d, q }, e);
                let double = nine_ratios(Gamma { d: f64::from(d), q: f64::from(q) }, f64::from(e));
                for (single, double) in single.into_iter().zip(double) {
                    worst = worst.max((f64::from(single) / double - 1.0).abs());
                }
                e *= 1.0009;
            }
        }
        println!("single precision: worst relative error {:.2} of 2^-24", worst * 2f64.powi(24));
        assert!(worst < 8.0 * 2f64.powi(-24), "{worst}");
    }

    #[test]
    fn exact_answers_have_no_width() {
        let gamma = HeatCapacityRatio::ratio(5, 3).unwrap();
        let ratios = Ratios::from_mach(gamma, 3.0).unwrap();
        assert_eq!(ratios.pressure, Enclosure::from(11.0));
        assert_eq!(ratios.density, Enclosure::from(3.0));
        assert_eq!(ratios.gas_speed, Enclosure::from(2.0));
        assert_eq!(ratios.reflected_pressure.width_in_ulp(), 1);
        assert!(ratios.reflected_temperature.contains(65.0 / 9.0));
    }
}

//! Heat capacity and enthalpy of a mixture, by its ranges of temperature.

use super::super::real::{Float, float};
use crate::glenn::{GlennRange, GlennSpecies};
use dashu_ratio::RBig;

/// A mixture of species of the data file with exact mole fractions.
#[derive(Clone, Debug)]
pub struct ThermalGas {
    portions: Vec<(&'static GlennSpecies, RBig)>,
    ranges: Vec<GlennRange>,
}

/// A heat capacity as a function of temperature in floats of one precision. All in units of the gas constant.
#[derive(Clone, Debug)]
pub struct Law {
    pieces: Vec<Piece>,
    precision: usize,
}

#[derive(Clone, Debug)]
struct Piece {
    low: Float,
    /// `None` for one without end.
    high: Option<Float>,
    heat_capacity: [Float; 7],
    /// Coefficients of h: of 1/T, ln T, T, T², … T⁵ and the constant.
    enthalpy: [Float; 8],
}

impl ThermalGas {
    /// The mixture.
    #[must_use]
    pub fn new(portions: Vec<(&'static GlennSpecies, RBig)>) -> Self {
        let ends = |which: fn(&GlennRange) -> &RBig| {
            portions.iter().flat_map(|(species, _)| &species.ranges).map(|range| which(range).clone()).collect::<Vec<_>>()
        };
        let first = |(species, _): &(&GlennSpecies, RBig)| species.ranges[0].low.clone();
        let last = |(species, _): &(&GlennSpecies, RBig)| species.ranges.last().expect("a range").high.clone();
        let low = portions.iter().map(first).max().expect("a species");
        let high = portions.iter().map(last).min().expect("a species");
        let mut joints: Vec<_> = ends(|range| &range.low).into_iter().chain(ends(|range| &range.high)).collect();
        joints.retain(|joint| *joint >= low && *joint <= high);
        joints.sort();
        joints.dedup();
        let ranges = joints
            .windows(2)
            .map(|pair| {
                // What covers the whole of it.
                let of = |species: &'static GlennSpecies| {
                    species.ranges.iter().find(|range| range.low <= pair[0] && pair[1] <= range.high).expect("a covered range")
                };
                let sum = |part: &dyn Fn(&GlennRange) -> RBig| {
                    portions.iter().fold(RBig::ZERO, |sum, (species, fraction)| sum + fraction * part(of(species)))
                };
                GlennRange {
                    low: pair[0].clone(),
                    high: pair[1].clone(),
                    a: core::array::from_fn(|k| sum(&|range| range.a[k].clone())),
                    b: sum(&|range| range.b.clone()),
                }
            })
            .collect();
        Self { portions, ranges }
    }

    /// Molar mass, kg/mol.
    #[must_use]
    pub fn molar_mass(&self) -> RBig {
        self.portions.iter().fold(RBig::ZERO, |sum, (species, fraction)| sum + fraction * &species.molar_mass)
    }

    /// Lowest and highest temperature of the data, K.
    #[must_use]
    pub fn limits(&self) -> (RBig, RBig) {
        (self.ranges[0].low.clone(), self.ranges.last().expect("a range").high.clone())
    }

    /// The ranges.
    #[must_use]
    pub fn ranges(&self) -> &[GlennRange] {
        &self.ranges
    }

    /// The exact `c_p`/R at an exact temperature; a joint belongs to the range below.
    #[must_use]
    pub fn heat_capacity(&self, temperature: &RBig) -> RBig {
        exact_heat_capacity(&self.ranges, temperature)
    }

    /// That with vibration frozen: translation and rotation, for each species no more than its full one at the temperature of the fill.
    #[must_use]
    pub fn frozen_heat_capacity(&self, temperature: &RBig) -> RBig {
        self.portions.iter().fold(RBig::ZERO, |sum, (species, fraction)| {
            let rigid = RBig::from(species.twice_rigid()) / RBig::from(2);
            sum + fraction * rigid.min(exact_heat_capacity(&species.ranges, temperature))
        })
    }

    /// The full heat capacity.
    #[must_use]
    pub fn law(&self, precision: usize) -> Law {
        let pieces = self.ranges.iter().map(|range| {
            let [a1, a2, a3, a4, a5, a6, a7] = &range.a;
            let over = |a: &RBig, n: i32| a / RBig::from(n);
            let enthalpy = [-a1, a2.clone(), a3.clone(), over(a4, 2), over(a5, 3), over(a6, 4), over(a7, 5), range.b.clone()];
            Piece {
                low: float(&range.low, precision),
                high: Some(float(&range.high, precision)),
                heat_capacity: range.a.each_ref().map(|a| float(a, precision)),
                enthalpy: enthalpy.each_ref().map(|a| float(a, precision)),
            }
        });
        Law { pieces: pieces.collect(), precision }
    }
}

fn exact_heat_capacity(ranges: &[GlennRange], temperature: &RBig) -> RBig {
    let range = ranges.iter().find(|range| *temperature <= range.high).expect("a temperature of the data");
    let mut power = RBig::ONE / (temperature * temperature);
    range.a.iter().fold(RBig::ZERO, |mut sum, a| {
        sum += a * &power;
        power *= temperature;
        sum
    })
}

impl Law {
    /// The same heat capacity at all temperatures.
    #[must_use]
    pub fn constant(value: &RBig, precision: usize) -> Self {
        let zero = || float(&RBig::ZERO, precision);
        let c = || float(value, precision);
        let piece = Piece {
            low: zero(),
            high: None,
            heat_capacity: [zero(), zero(), c(), zero(), zero(), zero(), zero()],
            enthalpy: [zero(), zero(), c(), zero(), zero(), zero(), zero(), zero()],
        };
        Self { pieces: vec![piece], precision }
    }

    /// Number of pieces.
    #[must_use]
    pub fn pieces(&self) -> usize {
        self.pieces.len()
    }

    /// Bits of its floats.
    #[must_use]
    pub fn precision(&self) -> usize {
        self.precision
    }

    /// Ends of a piece; the upper one `None` where there is none.
    #[must_use]
    pub fn ends(&self, piece: usize) -> (&Float, Option<&Float>) {
        (&self.pieces[piece].low, self.pieces[piece].high.as_ref())
    }

    /// The piece that a temperature belongs to: a joint belongs to the lower one.
    #[must_use]
    pub fn piece_of(&self, temperature: &Float) -> usize {
        let within = |piece: &Piece| piece.high.as_ref().is_none_or(|high| temperature <= high);
        self.pieces.iter().position(within).unwrap_or(self.pieces.len() - 1)
    }

    /// `c_p`/R by the polynomial of a piece.
    #[must_use]
    pub fn heat_capacity(&self, piece: usize, temperature: &Float) -> Float {
        let [a1, a2, a3, a4, a5, a6, a7] = &self.pieces[piece].heat_capacity;
        let t = temperature;
        a1 / (t * t) + a2 / t + a3 + a4 * t + a5 * t * t + a6 * t * t * t + a7 * t * t * t * t
    }

    /// h/R by the polynomial of a piece, K.
    #[must_use]
    pub fn enthalpy(&self, piece: usize, temperature: &Float) -> Float {
        let [inverse, logarithm, one, two, three, four, five, constant] = &self.pieces[piece].enthalpy;
        let t = temperature;
        let rational = inverse / t + t * (one + t * (two + t * (three + t * (four + t * five)))) + constant;
        if logarithm.repr().is_zero() { rational } else { rational + logarithm * t.ln() }
    }
}

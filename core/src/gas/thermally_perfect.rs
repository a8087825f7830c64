//! Thermally perfect gases: ideal gases whose heat capacity depends on temperature, pure or mixed.

use super::error::{InputError, Parameter, Rule};
use super::heat_capacity::HeatCapacity;
use super::species::{Coefficient, Species, SpeciesRange};
use crate::number::{Ball, Elementary, Enclosure, Rational, Semifield};

/// With which heat capacity the states behind the shocks are computed. "Frozen" and "equilibrium" are meant for the vibration of molecules.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum HeatCapacityModel {
    /// That of the fill at T1, throughout.
    Constant,
    /// The full heat capacity at every temperature: vibration in equilibrium in every state.
    Equilibrium,
    /// Translation and rotation only, but no more than the full one at T1: vibration keeps the energy that it had in the fill.
    Frozen,
    /// Frozen behind the incident shock, the full one behind the reflected shock; state 2 carries the frozen enthalpy.
    FrozenThenEquilibrium,
}

impl HeatCapacityModel {
    /// All four.
    pub const ALL: [Self; 4] = [Self::Constant, Self::Equilibrium, Self::Frozen, Self::FrozenThenEquilibrium];

    /// The words for it in records and reports.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Constant => "constant",
            Self::Equilibrium => "equilibrium",
            Self::Frozen => "frozen",
            Self::FrozenThenEquilibrium => "frozen then equilibrium",
        }
    }
}

/// A species and its mole fraction in a mixture.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Portion<'a> {
    /// The species.
    pub species: &'a Species<'a>,
    /// Its exact mole fraction.
    pub fraction: Rational,
}

/// An ideal gas whose heat capacity is the mole-fraction mean of its species', as a function of temperature.
///
/// Coefficients are the exact sums of the exact decimals of the data, held to 2⁻¹⁰⁰. The range of temperature is the intersection of the species'.
///
/// ```
/// use endwall::gas::species::table;
/// use endwall::gas::{Portion, ThermallyPerfectGas};
/// let exact = |text: &str| text.parse().unwrap();
/// let portions = [
///     Portion { species: &table::O2, fraction: exact("0.01") },
///     Portion { species: &table::AR, fraction: exact("0.99") },
/// ];
/// let gas = ThermallyPerfectGas::new(&portions)?;
/// assert!(gas.molar_mass().enclosure().contains(0.039868508));
/// // c_p/R of argon is 5/2, of oxygen 3.53 at 300 K (NASA/TP-2002-211556).
/// assert!((gas.heat_capacity_at(300.0)?.middle() - 2.5103).abs() < 1e-4);
/// assert!(gas.heat_capacity_at(199.0).is_err());
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct ThermallyPerfectGas<'a> {
    portions: &'a [Portion<'a>],
    heat_capacity: HeatCapacity<Ball>,
    molar_mass: Ball,
}

impl<'a> ThermallyPerfectGas<'a> {
    /// The mixture of these species. Of species of your own, [`Species::check`] must have been asked: mixtures of species that pass it have unique
    /// shocks.
    ///
    /// # Errors
    /// [`InputError`] for fractions that are negative or do not sum exactly to one, and where the species have no range of temperature in common, or
    /// more than [`RANGES`](super::RANGES) of them.
    pub fn new(portions: &'a [Portion<'a>]) -> Result<Self, InputError> {
        let refuse = |value, rule| InputError { parameter: Parameter::MoleFraction, value, rule };
        let mut sum = Some(Rational::ZERO);
        let mut total = Ball::whole(0);
        let mut molar_mass = Ball::whole(0);
        for portion in portions {
            let fraction = portion.fraction;
            if !fraction.is_finite() {
                return Err(refuse(fraction.to_f64(), Rule::Finite));
            }
            if fraction.is_negative() {
                return Err(refuse(fraction.to_f64(), Rule::Between(0.0, 1.0)));
            }
            sum = sum.and_then(|sum| sum.checked_add(fraction));
            total = total + Ball::from(fraction);
            molar_mass = molar_mass + Ball::from(fraction) * portion.species.molar_mass.ball();
        }
        // Where integers do not hold the exact sum, the ball does to 2⁻¹⁰⁰.
        let sums_to_one = sum.map_or(total.enclosure().contains(1.0) && total.radius() < 1e-20, |sum| sum == Rational::ONE);
        if !sums_to_one {
            let first = portions.first().map_or(0.0, |portion| portion.fraction.to_f64());
            return Err(refuse(first, Rule::SumToOne(total.nearest())));
        }
        let fraction = |portion: &Portion<'_>| Ball::from(portion.fraction);
        Ok(Self { portions, heat_capacity: mixed(portions, |at| portions.get(at).map_or(Ball::UNKNOWN, fraction))?, molar_mass })
    }

    /// The species and their fractions.
    pub fn portions(&self) -> &'a [Portion<'a>] {
        self.portions
    }

    /// W, kg/mol.
    pub fn molar_mass(&self) -> Ball {
        self.molar_mass
    }

    /// The full heat capacity as a function of temperature.
    pub fn heat_capacity(&self) -> &HeatCapacity<Ball> {
        &self.heat_capacity
    }

    /// The temperatures between which the heat capacity of every species is known, K.
    pub fn range(&self) -> (f64, f64) {
        self.heat_capacity.range()
    }

    /// An enclosure of `c_p`/R at a temperature in K.
    ///
    /// # Errors
    /// [`InputError`] with the range of the data for a temperature outside it.
    pub fn heat_capacity_at(&self, temperature: f64) -> Result<Enclosure, InputError> {
        self.check_temperature(Parameter::FillTemperature, temperature)?;
        let index = self.heat_capacity.index_at(temperature);
        Ok(self.heat_capacity.value(index, Ball::from(temperature)).enclosure())
    }

    /// That a temperature lies in the range of the data.
    pub(crate) fn check_temperature(&self, parameter: Parameter, temperature: f64) -> Result<(), InputError> {
        let (low, high) = self.range();
        if (low..=high).contains(&temperature) {
            Ok(())
        } else {
            Err(InputError { parameter, value: temperature, rule: Rule::DataRange(low, high) })
        }
    }

    /// `c_p`/R with vibration frozen: for each species that of translation and rotation, but not above the full one at the temperature of the fill
    /// (the rotation of hydrogen is not full at room temperature).
    pub fn frozen_heat_capacity(&self, fill_temperature: Ball) -> Ball {
        self.portions
            .iter()
            .fold(Ball::whole(0), |sum, portion| sum + Ball::from(portion.fraction) * portion.species.frozen(fill_temperature).0)
    }
}

/// The ranges common to all species, with the weighted sums of coefficients and jumps.
fn mixed(portions: &[Portion<'_>], weight: impl Fn(usize) -> Ball) -> Result<HeatCapacity<Ball>, InputError> {
    let species = || portions.iter().map(|portion| portion.species);
    let low = species().fold(0.0f64, |low, species| low.max(species.range().0));
    let high = species().fold(f64::INFINITY, |high, species| high.min(species.range().1));
    let refuse = |rule| InputError { parameter: Parameter::DataRange, value: low, rule };
    if !(low > 0.0 && low < high && high < f64::INFINITY) {
        return Err(refuse(Rule::Below(high)));
    }
    let sum = |term: &dyn Fn(&Species<'_>) -> Ball| {
        species().enumerate().fold(Ball::whole(0), |sum, (at, species)| sum + weight(at) * term(species))
    };
    let mut start = low;
    let mut all: Option<HeatCapacity<Ball>> = None;
    while start < high {
        let ends = species().flat_map(|species| species.ranges).map(|range| range.high).filter(|end| *end > start);
        let end = ends.fold(high, f64::min);
        let coefficients = core::array::from_fn(|at| {
            sum(&|species| {
                let own = species.range_above(start).and_then(|range| range.heat_capacity.get(at).copied());
                own.map_or(Ball::UNKNOWN, Coefficient::ball)
            })
        });
        let jump = if all.is_some() {
            let temperature = Ball::from(start);
            let logarithm = temperature.ln();
            sum(&|species| species.jump(start, temperature, logarithm))
        } else {
            Ball::whole(0)
        };
        let next = HeatCapacity::range_of(start, end, jump, coefficients);
        let joined = match &all {
            None => Some(next),
            Some(below) => below.followed_by(&next),
        };
        all = Some(joined.ok_or(refuse(Rule::Ranges))?);
        start = end;
    }
    all.ok_or(refuse(Rule::Below(high)))
}

impl<'a> Species<'a> {
    /// The range that a temperature belongs to; a joint belongs to the lower one.
    fn range_at(&self, temperature: f64) -> Option<&'a SpeciesRange> {
        self.ranges.iter().find(|range| temperature <= range.high).filter(|range| range.low <= temperature)
    }

    /// The range just above a temperature.
    fn range_above(&self, temperature: f64) -> Option<&'a SpeciesRange> {
        self.ranges.iter().find(|range| range.low <= temperature && temperature < range.high)
    }

    /// h/R just above a temperature less h/R at it, K: zero but at a joint.
    fn jump(&self, at: f64, temperature: Ball, logarithm: Ball) -> Ball {
        let (Some(below), Some(above)) = (self.range_at(at), self.range_above(at)) else { return Ball::UNKNOWN };
        if core::ptr::eq(below, above) {
            return Ball::whole(0);
        }
        above.enthalpy_at(temperature, logarithm) - below.enthalpy_at(temperature, logarithm)
    }

    /// `c_p`/R with vibration frozen, and its slope, over a range of the temperature of the fill.
    fn frozen_over(&self, fill_temperature: Enclosure) -> (Enclosure, Enclosure) {
        let rigid = Enclosure::whole(self.shape.twice_frozen_heat_capacity()) / Enclosure::whole(2);
        let Some(range) = self.range_at(fill_temperature.middle()) else { return (Enclosure::UNKNOWN, Enclosure::UNKNOWN) };
        let polynomial = range.polynomial(Ball::whole(0)).map(Ball::enclosure);
        let full = polynomial.value(0, fill_temperature);
        let slope = polynomial.scaled_slope(0, fill_temperature) / fill_temperature;
        if full.low() >= rigid.high() {
            (rigid, Enclosure::whole(0))
        } else if full.high() <= rigid.low() {
            (full, slope)
        } else {
            // The lesser of both, which has a kink.
            (Enclosure::ordered(full.low(), full.high().min(rigid.high())), slope.hull(Enclosure::whole(0)))
        }
    }

    /// `c_p`/R with vibration frozen at a temperature of the fill.
    fn frozen(&self, fill_temperature: Ball) -> (Ball, Option<&'a SpeciesRange>) {
        let rigid = Ball::whole(self.shape.twice_frozen_heat_capacity()).halved();
        let range = self.range_at(fill_temperature.side());
        let full = range.map_or(Ball::UNKNOWN, |range| range.polynomial(Ball::whole(0)).value(0, fill_temperature));
        if (rigid - full).is_certainly_positive() { (full, range) } else { (rigid, None) }
    }
}

/// Neighbouring portions of a mixture that keep their proportions: one species, or the gases of air.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Group {
    /// The first portion.
    pub first: usize,
    /// How many.
    pub count: usize,
}

impl Group {
    /// One portion.
    pub const fn one(at: usize) -> Self {
        Self { first: at, count: 1 }
    }

    fn contains(self, at: usize) -> bool {
        at >= self.first && at - self.first < self.count
    }
}

/// A change of a mixture for which the change of the states is asked.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum MixtureChange {
    /// A larger fraction of one group at the cost of another: the balance gas.
    Exchange {
        /// Which grows.
        more: Group,
        /// Which shrinks.
        less: Group,
    },
    /// More of this group, with all fractions divided by their sum again.
    Addition(Group),
    /// A relative change of what the heat capacities of all species exceed those of translation and rotation by: how well the data are known.
    Data,
}

/// Derivatives of a gas with respect to a change.
#[derive(Clone, Copy, Debug)]
pub(crate) struct GasSlopes<S> {
    pub full: HeatCapacity<S>,
    pub frozen: S,
    pub molar_mass: S,
}

impl GasSlopes<Ball> {
    /// In plain f64.
    pub(crate) fn plain(&self) -> GasSlopes<f64> {
        GasSlopes { full: self.full.map(Ball::nearest), frozen: self.frozen.nearest(), molar_mass: self.molar_mass.nearest() }
    }
}

impl ThermallyPerfectGas<'_> {
    /// How heat capacity and molar mass answer to a change, per unit of the change, for a fill of this temperature.
    pub(crate) fn slopes(&self, change: MixtureChange, fill_temperature: Ball) -> Option<GasSlopes<Ball>> {
        let zero = || Ball::whole(0);
        let one = || Ball::whole(1);
        let fraction = |at: usize| self.portions.get(at).map_or(zero(), |portion| Ball::from(portion.fraction));
        // The part of a portion in one unit of its group.
        let part = |group: Group, at: usize| {
            if !group.contains(at) {
                return zero();
            }
            if group.count == 1 {
                return one();
            }
            let whole = (group.first..group.first.saturating_add(group.count).min(self.portions.len())).map(fraction);
            fraction(at) / whole.fold(zero(), |sum, own| sum + own)
        };
        let weight = |at: usize| match change {
            MixtureChange::Exchange { more, less } => part(more, at) - part(less, at),
            MixtureChange::Addition(more) => part(more, at) - fraction(at),
            MixtureChange::Data => fraction(at),
        };
        let sum = |term: &dyn Fn(&Species<'_>) -> Ball| {
            self.portions.iter().enumerate().fold(zero(), |sum, (at, portion)| sum + weight(at) * term(portion.species))
        };
        let full = mixed(self.portions, weight).ok()?;
        if change == MixtureChange::Data {
            let rigid = sum(&|species| Ball::whole(species.shape.twice_frozen_heat_capacity()).halved());
            return Some(GasSlopes { full: full.less_constant(rigid), frozen: zero(), molar_mass: zero() });
        }
        let frozen = sum(&|species| species.frozen(fill_temperature).0);
        Some(GasSlopes { full, frozen, molar_mass: sum(&|species| species.molar_mass.ball()) })
    }

    /// The frozen heat capacity and its slope with the temperature of the fill, 1/K, over a range of that temperature inside one polynomial.
    pub(crate) fn frozen_over(&self, fill_temperature: Enclosure) -> (Enclosure, Enclosure) {
        let zero = || Enclosure::whole(0);
        self.portions.iter().fold((zero(), zero()), |(value, slope), portion| {
            let fraction = Ball::from(portion.fraction).enclosure();
            let (own, own_slope) = portion.species.frozen_over(fill_temperature);
            (value + fraction * own, slope + fraction * own_slope)
        })
    }

    /// d`c_p`/dT of the frozen heat capacity with the temperature of the fill, times T/R: of the species whose full heat capacity is the lesser.
    pub(crate) fn frozen_scaled_slope(&self, fill_temperature: Ball) -> Ball {
        self.portions.iter().fold(Ball::whole(0), |sum, portion| {
            let own = portion
                .species
                .frozen(fill_temperature)
                .1
                .map_or(Ball::whole(0), |range| range.polynomial(Ball::whole(0)).scaled_slope(0, fill_temperature));
            sum + Ball::from(portion.fraction) * own
        })
    }
}

#[cfg(test)]
mod tests {
    use super::super::species::table;
    use super::*;

    fn exact(text: &str) -> Rational {
        text.parse().unwrap()
    }

    #[test]
    fn ranges_are_those_in_common() {
        let portions = [Portion { species: &table::HD, fraction: exact("0.5") }, Portion { species: &table::CH4, fraction: exact("0.5") }];
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        assert_eq!(gas.range(), (298.15, 6000.0));
        assert!(gas.heat_capacity().joints().eq([1000.0]));
    }

    #[test]
    fn the_mean_is_continuous_where_both_temperatures_meet_and_across_joints() {
        let portions = [Portion { species: &table::N2, fraction: exact("1") }];
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let c = gas.heat_capacity();
        let at = |t: f64| Ball::from(t);
        let near = c.mean(0, at(500.0), at(1e-14), 0).nearest();
        assert!((near - c.value(0, at(500.0)).nearest()).abs() < 1e-13);
        // From 900 K to 1100 K in two steps, with the jump between.
        let whole = c.mean(0, at(900.0), at(200.0) / at(900.0), 1) * at(200.0);
        let parts = c.mean(0, at(900.0), at(100.0) / at(900.0), 0) * at(100.0) + c.mean(1, at(1000.0), at(0.1), 1) * at(100.0);
        let jump = (whole - parts).nearest();
        assert!(jump != 0.0 && jump.abs() < 9e-5, "{jump}");
        // The same from the other end.
        let back = c.mean(1, at(1100.0), at(-200.0) / at(1100.0), 0) * at(200.0);
        assert!((back - whole).enclosure().contains(0.0));
    }

    #[test]
    fn frozen_hydrogen_stays_below_its_full_heat_capacity() {
        let portions = [Portion { species: &table::H2, fraction: exact("1") }];
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let frozen = gas.frozen_heat_capacity(Ball::from(295.0)).nearest();
        assert!(frozen < 3.5 && frozen > 3.4, "{frozen}");
        let nitrogen = [Portion { species: &table::N2, fraction: exact("1") }];
        assert_eq!(ThermallyPerfectGas::new(&nitrogen).unwrap().frozen_heat_capacity(Ball::from(295.0)).nearest(), 3.5);
    }

    #[test]
    fn fractions_must_sum_to_one() {
        let portions = [Portion { species: &table::N2, fraction: exact("0.99") }];
        assert_eq!(ThermallyPerfectGas::new(&portions).unwrap_err().rule, Rule::SumToOne(0.99));
        assert!(ThermallyPerfectGas::new(&[]).is_err());
    }
}

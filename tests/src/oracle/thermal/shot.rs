//! Incident and reflected shock: the jumps of pressure and density that the enthalpy allows, and the speeds that fit them.
//!
//! Across either shock (a ahead, b behind) hb − ha = ½ (pb − pa)(1/ρa + 1/ρb) and p = ρ R T. With P = pb/pa, τ = Tb/Ta and
//! H = (hb − ha)/(R Ta) that is 2H = (P − 1)(1 + τ/P), which gives P for a temperature behind. The speed then has to fit:
//! (ρa U)² (1/ρa − 1/ρb) = pb − pa for the incident shock of speed U, u2² = (p5 − p2)(1/ρ2 − 1/ρ5) for the reflected one.

use super::super::real::{Float, Real, float};
use super::super::shot::{State, molar_gas_constant};
use super::gas::{Law, ThermalGas};
use super::root::{Look, search};
use dashu_base::SquareRoot;
use dashu_ratio::RBig;

/// Bits of the search.
const COARSE: usize = 128;
/// Bits of the answer while it is worked out, and four times the bits that a weak shock takes away.
const FINE: usize = 400;
/// The temperature behind is proven to 2^-this.
const PROVEN: isize = 300;
/// Right bits that are claimed of an answer.
const CLAIMED: i64 = 260;

/// With which heat capacity the states are worked out.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ThermalModel {
    /// That of the fill.
    Constant,
    /// The full one.
    Equilibrium,
    /// Translation and rotation.
    Frozen,
    /// Translation and rotation behind the incident shock, the full one behind the reflected one.
    FrozenThenEquilibrium,
}

/// A fill and a model.
#[derive(Clone, Debug)]
pub struct ThermalProblem {
    /// The gas.
    pub gas: ThermalGas,
    /// The model.
    pub model: ThermalModel,
    /// p1, Pa.
    pub pressure: RBig,
    /// T1, K.
    pub temperature: RBig,
    /// Whether to look so closely that a second solution is found that a jump of the enthalpy makes.
    pub closely: bool,
}

/// Why there is no shot.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ThermalRefusal {
    /// The shock is not faster than sound.
    Subsonic,
    /// The gas behind the incident shock is hotter than the data reach.
    BeyondData2,
    /// The gas behind the reflected shock is.
    BeyondData5,
}

/// A whole shot. State 1 has the sound speed of the model.
#[derive(Clone, Debug)]
pub struct ThermalShot {
    /// U, m/s.
    pub shock_speed: Real,
    /// U/a1.
    pub mach: Real,
    /// `U_R`, m/s, away from the wall.
    pub reflected_speed: Real,
    /// States 1, 2 and 5.
    pub states: [State; 3],
    /// `c_p`/R of the model in them.
    pub heat_capacities: [Real; 3],
}

/// The shots of a problem.
#[derive(Clone, Debug)]
pub struct ThermalAnswer {
    /// One, or where a jump of the enthalpy of the data allows several, all that an enclosure has to hold; none where a jump leaves a weak shock without
    /// solution.
    pub shots: Vec<ThermalShot>,
    /// Whether the conservation laws hold for another jump too, behind which the gas is faster than sound; only a jump of the data makes one.
    pub supersonic: bool,
}

/// One gas state while it is worked out: p/p1, T, h/R and the speed.
struct Ahead {
    pressure: Float,
    temperature: Float,
    enthalpy: Float,
}

impl Ahead {
    fn rounded(&self, precision: usize) -> Self {
        let round = |x: &Float| x.clone().with_precision(precision).value();
        Self { pressure: round(&self.pressure), temperature: round(&self.temperature), enthalpy: round(&self.enthalpy) }
    }

    /// P and τ for a temperature behind, from the energy.
    fn ratios(&self, law: &Law, piece: usize, behind: &Float) -> (Float, Float) {
        let tau = behind / &self.temperature;
        let twice = Float::from(2) * (law.enthalpy(piece, behind) - &self.enthalpy) / &self.temperature;
        // P² − (2H + 1 − τ) P − τ = 0 has one positive root.
        let linear = twice + Float::ONE - &tau;
        let pressure = (&linear + (&linear * &linear + Float::from(4) * &tau).sqrt()) / Float::from(2);
        (pressure, tau)
    }
}

fn claimed(value: &Float) -> Real {
    if value.repr().is_zero() { Real::int(0) } else { Real::approximate(value.clone(), CLAIMED) }
}

impl ThermalProblem {
    /// `c_p`/R ahead of the incident shock, exactly.
    #[must_use]
    pub fn heat_capacity_1(&self) -> RBig {
        match self.model {
            ThermalModel::Constant | ThermalModel::Equilibrium => self.gas.heat_capacity(&self.temperature),
            ThermalModel::Frozen | ThermalModel::FrozenThenEquilibrium => self.gas.frozen_heat_capacity(&self.temperature),
        }
    }

    /// Heat capacities across both shocks.
    fn laws(&self, c: &RBig, precision: usize) -> [Law; 2] {
        let constant = || Law::constant(c, precision);
        let twice = |law: Law| [law.clone(), law];
        match self.model {
            ThermalModel::Constant | ThermalModel::Frozen => twice(constant()),
            ThermalModel::Equilibrium => twice(self.gas.law(precision)),
            ThermalModel::FrozenThenEquilibrium => [constant(), self.gas.law(precision)],
        }
    }

    /// R/W, J/(kg K).
    fn specific_gas_constant(&self) -> RBig {
        molar_gas_constant() / self.gas.molar_mass()
    }

    /// U²/(R T1) at a Mach number.
    fn m_at_mach(c: &RBig, mach: &RBig) -> RBig {
        c / (c - RBig::ONE) * mach * mach
    }

    /// U²/(R T1) at a speed, m/s.
    fn m_at_speed(&self, speed: &RBig) -> RBig {
        speed * speed / (self.specific_gas_constant() * &self.temperature)
    }

    /// The shots of this Mach number.
    ///
    /// # Errors
    /// [`ThermalRefusal`]
    pub fn at_mach(&self, mach: &RBig) -> Result<ThermalAnswer, ThermalRefusal> {
        let c = self.heat_capacity_1();
        self.shots(&c, &Self::m_at_mach(&c, mach))
    }

    /// The shots of this speed, m/s.
    ///
    /// # Errors
    /// [`ThermalRefusal`]
    pub fn at_speed(&self, speed: &RBig) -> Result<ThermalAnswer, ThermalRefusal> {
        self.shots(&self.heat_capacity_1(), &self.m_at_speed(speed))
    }

    /// M of the shock behind which the gas has this temperature (by the polynomial that it belongs to): explicit.
    #[must_use]
    pub fn mach_for_temperature_2(&self, temperature: &RBig) -> Float {
        let c = self.heat_capacity_1();
        let [law, _] = self.laws(&c, FINE);
        let t1 = float(&self.temperature, FINE);
        let behind = float(temperature, FINE);
        let enthalpy = law.enthalpy(law.piece_of(&t1), &t1);
        let ahead = Ahead { pressure: float(&RBig::ONE, FINE), temperature: t1, enthalpy };
        let (pressure, tau) = ahead.ratios(&law, law.piece_of(&behind), &behind);
        let m = &pressure * (&pressure - Float::ONE) / (&pressure - tau);
        (m / float(&(&c / (&c - RBig::ONE)), FINE)).sqrt()
    }

    fn shots(&self, c: &RBig, m: &RBig) -> Result<ThermalAnswer, ThermalRefusal> {
        let sound = Self::m_at_mach(c, &RBig::ONE);
        if *m <= sound {
            return Err(ThermalRefusal::Subsonic);
        }
        // Bits that the weakness of the shock takes away.
        let weak = float(&(m / &sound - RBig::ONE), 64).to_f64().value().log2().min(0.0).abs().ceil() as isize;
        let more = 4 * weak as usize;
        let [coarse, reflected_coarse] = self.laws(c, COARSE + more);
        let [fine, reflected_fine] = self.laws(c, FINE + more);
        let digits = fine.precision();
        let (m_coarse, m_fine) = (float(m, coarse.precision()), float(m, digits));
        let t1 = float(&self.temperature, digits);
        let first = fine.piece_of(&t1);
        let ahead = Ahead { pressure: float(&RBig::ONE, digits), enthalpy: fine.enthalpy(first, &t1), temperature: t1.clone() };
        let start = float(&self.temperature, coarse.precision());
        let ahead_coarse = Ahead { pressure: ahead.pressure.clone(), enthalpy: coarse.enthalpy(first, &start), temperature: start.clone() };
        // Fewer digits are told by the precision of the law.
        let incident = |law: &Law, piece: usize, behind: &Float| {
            let (ahead, m) = if law.precision() == digits { (&ahead, &m_fine) } else { (&ahead_coarse, &m_coarse) };
            let (pressure, tau) = ahead.ratios(law, piece, behind);
            &pressure * (&pressure - Float::ONE) - m * (pressure - tau)
        };
        let look = Look { nearest: weak + 48, closely: self.closely, proven: PROVEN };
        let found = search(&coarse, &fine, first, &start, &incident, look);
        if found.all().next().is_none() && found.beyond {
            return Err(ThermalRefusal::BeyondData2);
        }
        let (mut shots, mut supersonic) = (Vec::new(), found.falls);
        for (piece, t2) in found.all() {
            let (p2, _) = ahead.ratios(&fine, *piece, t2);
            let scale = float(&(self.specific_gas_constant() * &self.temperature), digits);
            let speed = (&m_fine * &scale).sqrt();
            // ρ1 U = ρ2 (U − u2), ρ1/ρ2 = τ/P.
            let gas_speed = &speed - &speed * t2 / (&t1 * &p2);
            let state_2 = Ahead { pressure: p2, temperature: t2.clone(), enthalpy: fine.enthalpy(*piece, t2) };
            // The enthalpy that state 2 carries, counted as the heat capacity of the reflected shock counts it.
            let state_2 = if self.model == ThermalModel::FrozenThenEquilibrium {
                let of_fill = reflected_fine.enthalpy(reflected_fine.piece_of(&t1), &t1);
                Ahead { enthalpy: &of_fill + (&state_2.enthalpy - &ahead.enthalpy), ..state_2 }
            } else {
                state_2
            };
            let k = &gas_speed * &gas_speed * &t1 / (&scale * t2);
            let c2 = fine.heat_capacity(*piece, t2);
            let c1 = fine.heat_capacity(first, &t1);
            let (reflections, falls) = self.reflected(&reflected_coarse, &reflected_fine, &state_2, *piece, &k, look)?;
            supersonic |= falls;
            for (piece, state_5) in reflections {
                let c5 = reflected_fine.heat_capacity(piece, &state_5.temperature);
                // At rest: ρ2 (u2 + U_R) = ρ5 U_R.
                let density = &state_5.pressure * t2 / (&state_2.pressure * &state_5.temperature);
                let reflected_speed = &gas_speed / (density - Float::ONE);
                shots.push(self.assemble(&speed, &reflected_speed, &gas_speed, [&ahead, &state_2, &state_5], [&c1, &c2, &c5]));
            }
        }
        Ok(ThermalAnswer { shots, supersonic })
    }

    fn reflected(
        &self,
        coarse: &Law,
        fine: &Law,
        ahead: &Ahead,
        piece: usize,
        k: &Float,
        look: Look,
    ) -> Result<(Vec<(usize, Ahead)>, bool), ThermalRefusal> {
        let rounded = ahead.rounded(coarse.precision());
        let residual = |law: &Law, piece: usize, behind: &Float| {
            let ahead = if law.precision() == fine.precision() { ahead } else { &rounded };
            let (pressure, tau) = ahead.ratios(law, piece, behind);
            // No shock without a rise of the pressure: keeps the expansion, which solves the same equations, out.
            if pressure <= Float::ONE {
                return -(k * pressure);
            }
            (&pressure - Float::ONE) * (&pressure - tau) - k * pressure
        };
        // Where vibration takes up energy behind the reflected shock only, the gas may become cooler.
        let (first, start) = if self.model == ThermalModel::FrozenThenEquilibrium {
            let start = float(&self.temperature, coarse.precision());
            (coarse.piece_of(&start), start)
        } else {
            (piece, rounded.temperature.clone())
        };
        let found = search(coarse, fine, first, &start, &residual, look);
        if found.all().next().is_none() && found.beyond {
            return Err(ThermalRefusal::BeyondData5);
        }
        let state = |(piece, t5): &(usize, Float)| {
            let (ratio, _) = ahead.ratios(fine, *piece, t5);
            let enthalpy = fine.enthalpy(*piece, t5);
            (*piece, Ahead { pressure: &ahead.pressure * ratio, temperature: t5.clone(), enthalpy })
        };
        Ok((found.all().map(state).collect(), found.falls))
    }

    fn assemble(&self, speed: &Float, reflected: &Float, gas_speed: &Float, states: [&Ahead; 3], c: [&Float; 3]) -> ThermalShot {
        let r = float(&self.specific_gas_constant(), FINE);
        let p1 = float(&self.pressure, FINE);
        let rest = float(&RBig::ZERO, FINE);
        let speeds = [&rest, gas_speed, &rest];
        let state = |k: usize| {
            let (pressure, temperature) = (&states[k].pressure * &p1, &states[k].temperature);
            State {
                density: claimed(&(&pressure / (&r * temperature))),
                sound_speed: claimed(&(c[k] / (c[k] - Float::ONE) * &r * temperature).sqrt()),
                gas_speed: claimed(speeds[k]),
                pressure: claimed(&pressure),
                temperature: claimed(temperature),
            }
        };
        let states = [0, 1, 2].map(state);
        ThermalShot {
            mach: claimed(speed) / &states[0].sound_speed,
            shock_speed: claimed(speed),
            reflected_speed: claimed(reflected),
            states,
            heat_capacities: c.map(claimed),
        }
    }
}

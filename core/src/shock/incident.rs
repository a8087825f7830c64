//! The incident shock into a fill, and its reflection from a rigid wall, as enclosures.

use super::entry::{Branch, Entry, Problem};
use super::output::{Flow, Form, Output};
use super::relations::{Jump, mach_excess};
use super::state::State;
use crate::gas::{Fill, Gamma, InputError, Parameter, Rule, positive};
use crate::number::{Ball, Counted, Enclosure, Exact, Known, Positive, Rational, Semifield};

/// M is at most 2⁶⁴, M − 1 at least 2⁻²⁰⁰: within these the counted proof excludes overflow and underflow.
const MACH_EXPONENT: i32 = 64;
/// M² − 1 then lies within these powers of two.
const Z_RANGE: (i32, i32) = (-Counted::ENTRY + 1, 2 * MACH_EXPONENT + 1);

/// An incident shock into gas at rest, with everything that follows from it: state 2, the reflected shock and state 5.
///
/// Build it from any one of thirteen quantities with [`Incident::new`]. Inputs may be exact (a double, an exact decimal, a ratio) or
/// enclosures (tolerances).
///
/// **Exact inputs.** From M, M − 1, the shock speed, p2/p1, p2 − p1 or ρ2/ρ1 every output is *optimal*: the exact answer if it is a double,
/// else the two doubles that bracket it. From T2/T1, the gas speed or a quantity of state 5 the Mach number is optimal and
/// the others are, unless the answer lies within about 2⁻⁹⁵ of a double: then the enclosure has 2 ulp.
///
/// **Tolerances.** An enclosure of the range of each output over the box of all inputs, by proven monotonicity or subdivision (over-width at most
/// 1 %, measured).
///
/// Model: ideal gas of constant heat capacity, normal shock, Rankine–Hugoniot relations (NACA Report 1135, equations 93 to 99), gas at rest at
/// the wall. Domain: M up to 2⁶⁴, M − 1 from 2⁻²⁰⁰, pressures and temperatures within 2^±200.
///
/// ```
/// use endwall::gas::{Fill, Gas, HeatCapacityRatio};
/// use endwall::number::Enclosure;
/// use endwall::shock::{Entry, Incident, Output};
/// let nitrogen = Gas::new(HeatCapacityRatio::ratio(7, 5)?, 0.0280134)?;
/// let fill = Fill::new(nitrogen, 10_000.0, 296.0)?;
/// let shock = Incident::new(&fill, Entry::Mach, 2.0)?;
/// assert_eq!(shock.output(Output::Pressure5), Enclosure::from(150_000.0)); // p5/p1 = 15 exactly
/// assert_eq!(shock.output(Output::Temperature5), Enclosure::from(740.0)); // T5/T1 = 5/2 exactly
/// let measured = Incident::new(&fill, Entry::ShockSpeed, 700.0)?;
/// assert_eq!(measured.output(Output::Temperature5).width_in_ulp(), 1);
/// # Ok::<(), endwall::gas::InputError>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct Incident {
    fill: Fill,
    entry: Entry,
    value: Known,
    /// What the strength is computed from: the entry, or M − 1 where that turned out to be a double.
    basis: (Entry, Known),
    branch: Branch,
    strength: Strength,
}

/// How the strength of the shock is known.
#[derive(Clone, Copy, Debug)]
enum Strength {
    /// All inputs exact and z a rational function of them, as a pair where it is in its range: counted pairs, integers in doubt.
    Rational { z: Option<Counted> },
    /// All inputs exact, z the root of a quadratic.
    Algebraic { z: Ball, mach: Enclosure, mach_excess: Enclosure },
    /// Some input is a tolerance.
    Box,
}

impl Incident {
    /// The shock into `fill` for which the quantity `entry` has this value (SI units).
    ///
    /// # Errors
    /// [`InputError`] for a value that is not finite, that no shock has (a shock speed not above the sound speed, a ratio not above 1, a density
    /// ratio of (γ+1)/(γ−1) or more), or that is outside the domain.
    pub fn new(fill: &Fill, entry: Entry, value: impl Into<Known>) -> Result<Self, InputError> {
        let value = value.into();
        positive(entry.parameter(), value)?;
        let shock = Self { fill: *fill, entry, value, basis: (entry, value), branch: Branch::PositiveLinear, strength: Strength::Box };
        shock.check_limits()?;
        let shock = if shock.is_exact() { shock.solved() } else { Self { branch: shock.nominal().branch(entry), ..shock } };
        shock.check_mach()?;
        Ok(shock)
    }

    /// The fill.
    pub fn fill(&self) -> &Fill {
        &self.fill
    }

    /// The quantity that fixed the strength, and its value.
    pub fn entry(&self) -> (Entry, Known) {
        (self.entry, self.value)
    }

    /// An enclosure of one output.
    pub fn output(&self, output: Output) -> Enclosure {
        if output == self.entry.output() {
            return self.value.enclosure();
        }
        match self.strength {
            Strength::Rational { z } => self.counted(output, z).unwrap_or_else(|| self.ball(output).enclosure()),
            Strength::Algebraic { mach, .. } if output == Output::Mach => mach,
            Strength::Algebraic { mach_excess, .. } if output == Output::MachExcess => mach_excess,
            Strength::Algebraic { .. } => self.ball(output).enclosure(),
            Strength::Box => self.range(output),
        }
    }

    /// The double nearest to the exact answer at the nominal inputs (one of its two neighbours where the answer is half-way between to 2⁻⁹⁵).
    pub fn nearest(&self, output: Output) -> f64 {
        if output == self.entry.output() {
            return self.value.nominal();
        }
        let bounds = self.output(output);
        let nearest = if self.is_exact() { self.ball(output).nearest() } else { bounds.middle() };
        nearest.clamp(bounds.low(), bounds.high())
    }

    /// State 1, the fill.
    pub fn state_1(&self) -> State {
        State {
            pressure: self.fill.pressure().enclosure(),
            temperature: self.fill.temperature().enclosure(),
            density: self.output(Output::Density1),
            sound_speed: self.output(Output::SoundSpeed1),
            gas_speed: Enclosure::whole(0),
        }
    }

    /// State 2, behind the incident shock.
    pub fn state_2(&self) -> State {
        State::behind_incident_shock(|output| self.output(output))
    }

    /// State 5, at rest behind the shock that reflects off a rigid wall.
    pub fn state_5(&self) -> State {
        State::behind_reflected_shock(|output| self.output(output), Enclosure::whole(0))
    }

    /// The nominal inputs in plain f64.
    pub fn nominal(&self) -> Problem<f64> {
        Problem {
            gamma: Gamma::from_excess(self.fill.gas().heat_capacity_ratio().excess().nominal()),
            pressure: self.fill.pressure().nominal(),
            temperature: self.fill.temperature().nominal(),
            molar_mass: self.fill.gas().molar_mass().nominal(),
            entry: self.basis.1.nominal(),
        }
    }

    /// Which form of a quadratic's root the nominal inputs take.
    pub fn branch(&self) -> Branch {
        self.branch
    }

    /// All inputs: the entry, γ − 1, p1, T1, W.
    pub(super) fn inputs(&self) -> [Known; 5] {
        let gas = self.fill.gas();
        [self.basis.1, gas.heat_capacity_ratio().excess(), self.fill.pressure(), self.fill.temperature(), gas.molar_mass()]
    }

    pub(super) fn is_exact(&self) -> bool {
        self.inputs().iter().all(|input| input.exact().is_some())
    }

    fn refuse(&self, rule: Rule) -> InputError {
        InputError { parameter: self.entry.parameter(), value: self.value.nominal(), rule }
    }

    /// What the entry must exceed or stay below for a shock to exist, over all of a tolerance.
    fn check_limits(&self) -> Result<(), InputError> {
        let bounds = self.value.enclosure();
        let least = match self.entry {
            Entry::Mach
            | Entry::PressureRatio
            | Entry::DensityRatio
            | Entry::TemperatureRatio
            | Entry::ReflectedPressureRatio
            | Entry::ReflectedTemperatureRatio => Known::from(Rational::ONE),
            Entry::ReflectedPressure => self.fill.pressure(),
            Entry::ReflectedTemperature => self.fill.temperature(),
            Entry::ShockSpeed => return self.check_shock_speed(),
            Entry::MachExcess | Entry::PressureRise | Entry::GasSpeed | Entry::Step => return Ok(()),
        };
        // An exact input may exceed an exact limit by less than a double can tell.
        let above = match (self.value.exact(), least.exact()) {
            (Some(value), Some(least)) => Exact::from(value).compare(&Exact::from(least)) == Some(core::cmp::Ordering::Greater),
            _ => least.enclosure().certainly_less(bounds),
        };
        if !above {
            return Err(self.refuse(Rule::Above(least.nominal())));
        }
        if self.entry == Entry::DensityRatio {
            // (γ+1)/(γ−1) = 1 + 2/(γ−1).
            let excess = self.fill.gas().heat_capacity_ratio().excess().enclosure();
            let limit = Enclosure::whole(1) + Enclosure::whole(2) / excess;
            if !bounds.certainly_less(limit) {
                return Err(self.refuse(Rule::Below(limit.middle())));
            }
        }
        Ok(())
    }

    fn check_shock_speed(&self) -> Result<(), InputError> {
        let sound_speed = self.fill.gas().sound_speed(self.fill.temperature())?;
        let certain = sound_speed.certainly_less(self.value.enclosure());
        let exact = || {
            let problem = self.exact_problem()?;
            let square = crate::gas::sound_speed_squared(problem.gamma, problem.temperature, problem.molar_mass);
            Some(problem.entry.squared().compare(&square)? == core::cmp::Ordering::Greater)
        };
        if certain || exact() == Some(true) { Ok(()) } else { Err(self.refuse(Rule::AboveSoundSpeed(sound_speed.middle()))) }
    }

    /// M must be proven to lie between 1 and 2⁶⁴, M − 1 to be at least 2⁻²⁰⁰.
    fn check_mach(&self) -> Result<(), InputError> {
        let excess = self.output(Output::MachExcess);
        let (least, greatest) = (Ball::SMALLEST_ENTRY, 18_446_744_073_709_551_616.0);
        if excess.is_proven() && excess.low() >= least && excess.high() <= greatest {
            Ok(())
        } else {
            let excess = excess.middle();
            Err(InputError { parameter: Parameter::MachExcess, value: excess, rule: Rule::Between(least, greatest) })
        }
    }

    /// The inputs as integer fractions, where all are exact.
    fn exact_problem(&self) -> Option<Problem<Exact>> {
        let [entry, _, pressure, temperature, molar_mass] = self.inputs();
        Some(Problem {
            gamma: self.fill.gas().heat_capacity_ratio().exact()?,
            pressure: Exact::from(pressure.exact()?),
            temperature: Exact::from(temperature.exact()?),
            molar_mass: Exact::from(molar_mass.exact()?),
            entry: Exact::from(entry.exact()?),
        })
    }

    /// The inputs as balls.
    pub(super) fn ball_problem(&self) -> Problem<Ball> {
        let [entry, excess, pressure, temperature, molar_mass] = self.inputs().map(Known::ball);
        Problem { gamma: Gamma::from_excess(excess), pressure, temperature, molar_mass, entry }
    }

    /// z by balls, from an excess that integers formed where they hold it: near the weakest shock nearly all digits of a ratio cancel.
    fn ball_z(&self) -> Ball {
        let (entry, value) = self.basis;
        let problem = self.ball_problem();
        let exact = || self.exact_problem()?.exact_relative_excess(entry, value.exact()?)?.counted(-900, 900);
        let excess = exact().map_or_else(|| problem.relative_excess(entry), Ball::from);
        problem.mach_squared_excess_from(entry, self.branch, excess)
    }

    /// An output at a point, as a ball.
    pub(crate) fn ball(&self, output: Output) -> Ball {
        self.ball_flow().evaluate(output)
    }

    /// All of them.
    pub(crate) fn ball_flow(&self) -> Flow<Ball> {
        let problem = self.ball_problem();
        Flow::new(Jump::new(problem.gamma, self.z()), problem.gamma, problem.pressure, problem.temperature, problem.molar_mass)
    }

    /// The shock that the same quantity fixes in another exact fill.
    pub(super) fn with_inputs(&self, fill: Fill, value: Known) -> Self {
        Self { fill, value, basis: (self.entry, value), ..*self }.solved()
    }

    /// The same shock with its strength computed, for exact inputs.
    fn solved(self) -> Self {
        if let Some(jump) = self.exact_jump() {
            return Self { strength: rational(&jump), ..self };
        }
        let this = Self { branch: self.nominal().branch(self.entry), ..self };
        let z = this.ball_z();
        let excess = mach_excess(z);
        let mach_excess = this.settled(excess.enclosure(), Some);
        if mach_excess.is_exact() {
            let this = Self { basis: (Entry::MachExcess, Known::from(mach_excess.low())), ..this };
            return Self { strength: this.exact_jump().map_or(Strength::Rational { z: None }, |jump| rational(&jump)), ..this };
        }
        let mach = this.settled((excess + Ball::whole(1)).enclosure(), |mach| mach.checked_sub(Rational::ONE));
        Self { strength: Strength::Algebraic { z, mach, mach_excess }, ..this }
    }

    /// Where a ball leaves three doubles for a Mach number, the direct relation at the middle one decides in integers.
    fn settled(&self, three: Enclosure, excess: impl Fn(Rational) -> Option<Rational>) -> Enclosure {
        if three.width_in_ulp() != 2 {
            return three;
        }
        let middle = three.low().next_up();
        let order = || {
            let candidate = Exact::from(excess(Rational::from(middle))?);
            self.exact_problem()?.order_of_mach_excess(self.entry, self.value.exact()?, &candidate)
        };
        three.split_at(middle, order())
    }

    fn exact_jump(&self) -> Option<Jump<Exact>> {
        let (entry, value) = self.basis;
        self.exact_problem()?.jump(entry, value.exact()?)
    }

    /// One output by counted pairs, the last bit by integers.
    fn counted(&self, output: Output, z: Option<Counted>) -> Option<Enclosure> {
        let entry = |x: Known| Counted::from_rational(x.exact()?, -Counted::ENTRY, Counted::ENTRY);
        let gamma = self.fill.gas().heat_capacity_ratio().counted()?;
        let jump = match self.basis {
            (basis @ (Entry::MachExcess | Entry::Mach), value) => {
                let value = value.exact()?;
                let excess = if basis == Entry::Mach { value.checked_sub(Rational::ONE)? } else { value };
                Jump::from_mach_excess(gamma, Counted::from_rational(excess, -Counted::ENTRY, MACH_EXPONENT)?)
            }
            _ => Jump::new(gamma, z?),
        };
        let [_, _, pressure, temperature, molar_mass] = self.inputs();
        let flow = Flow::new(jump, gamma, entry(pressure)?, entry(temperature)?, entry(molar_mass)?);
        let exact = || {
            let problem = self.exact_problem()?;
            let flow = Flow::new(self.exact_jump()?, problem.gamma, problem.pressure, problem.temperature, problem.molar_mass);
            Some(flow.form(output))
        };
        Some(settle(flow.form(output), exact))
    }

    /// z = M² − 1 at a point.
    pub(super) fn z(&self) -> Ball {
        match self.strength {
            Strength::Algebraic { z, .. } => z,
            Strength::Rational { z: Some(z) } => Ball::from(z),
            _ => self.ball_z(),
        }
    }
}

/// The strength of a jump that integers formed.
fn rational(jump: &Jump<Exact>) -> Strength {
    Strength::Rational { z: jump.mach_squared_excess().counted(Z_RANGE.0, Z_RANGE.1) }
}

/// The optimal enclosure of a counted output.
fn settle(form: Form<Counted>, exact: impl FnOnce() -> Option<Form<Exact>>) -> Enclosure {
    let inner = || match exact() {
        Some(Form::Value(x) | Form::Root(x) | Form::RootExcess(x)) => x,
        None => Exact::INDEFINITE,
    };
    match form {
        Form::Value(x) => x.optimal(inner),
        Form::Root(x) => x.sqrt().optimal_root(inner),
        // √(1+x) − 1 and a double e compare as 1 + x and (1 + e)².
        Form::RootExcess(x) => mach_excess(x).optimal_by(|middle| {
            let one = Exact::whole(1);
            (one + inner()).compare(&(one + Exact::from(middle)).squared())
        }),
    }
}

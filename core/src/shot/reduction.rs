//! Reduction of a shot: arrival times or a shock speed, and a fill, to the states with their uncertainties.

use super::fit::{FitSettings, fit};
use super::fit_error::FitError;
use super::fit_result::{Fit, FitSource};
use super::station::Station;
use crate::gas::{Fill, Gas, HeatCapacityModel, HeatCapacityRatio, InputError, MixtureChange, Parameter, Rule, ThermallyPerfectGas};
use crate::number::{Enclosure, Known};
use crate::shock::{Entry, Incident, Output, ThermalError, ThermalFill, ThermalShock, WallReflection, Wave};
use core::fmt;

/// Lines of a budget, at most: seven of a fit (or one of a given speed), p1, T1, wall, and γ and W or the changes of a mixture.
pub(super) const LINES: usize = 24;
/// Uncertain changes of a mixture, at most.
pub const MAX_CHANGES: usize = LINES - 10;
/// Inputs of the model: shock speed, γ − 1, p1, T1, W, wall velocity or impedance. The Mach number is not one of them.
pub(super) const VARIABLES: usize = 6;

/// The shape of what is known about an input, for the Monte Carlo check.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Distribution {
    /// Normal.
    #[default]
    Normal,
    /// Rectangular between limits: half-width √3 standard uncertainties.
    Rectangular,
}

/// The standard uncertainty of an input (JCGM 100:2008, 2.3.1), in the unit of the input.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Uncertainty {
    /// Standard uncertainty, zero or more.
    pub standard: f64,
    /// Degrees of freedom, one or more; infinite where it was stated and not estimated. With anything else no uncertainty is handed out.
    pub degrees_of_freedom: f64,
    /// Shape.
    pub distribution: Distribution,
}

impl Uncertainty {
    /// A stated standard uncertainty of a normal distribution.
    pub const fn standard(standard: f64) -> Self {
        Self { standard, degrees_of_freedom: f64::INFINITY, distribution: Distribution::Normal }
    }
}

/// A measured input: its nominal value, and its standard uncertainty if one was stated.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Measured {
    /// Nominal value, SI.
    pub value: Known,
    /// Standard uncertainty; `None` where none was stated.
    pub uncertainty: Option<Uncertainty>,
}

impl Measured {
    /// A value with a stated standard uncertainty.
    pub fn new(value: impl Into<Known>, standard_uncertainty: f64) -> Self {
        Self { value: value.into(), uncertainty: Some(Uncertainty::standard(standard_uncertainty)) }
    }

    /// A value taken as exact.
    pub fn exact(value: impl Into<Known>) -> Self {
        Self::new(value, 0.0)
    }
}

/// Where the shock speed comes from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum SpeedSource<'a> {
    /// Arrival times, which are fitted.
    Stations(&'a [Station], FitSettings),
    /// A shock speed at the end wall, m/s.
    Given(Measured),
}

/// The end wall.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub enum EndWall {
    /// At rest.
    #[default]
    Rigid,
    /// Moves with this velocity along the incident direction, m/s.
    Moving(Measured),
    /// Yields elastically: its face moves with (p5 − p1)/Z for this acoustic impedance Z, Pa·s/m.
    Yielding(Measured),
}

/// The driven gas.
#[derive(Clone, Copy, Debug)]
#[expect(clippy::large_enum_variant, reason = "a shot holds one of them, and there is no heap")]
pub enum DrivenGas<'a> {
    /// Of constant heat capacity.
    ConstantHeatCapacity {
        /// γ.
        heat_capacity_ratio: Measured,
        /// kg/mol.
        molar_mass: Measured,
    },
    /// Of species with temperature-dependent heat capacity.
    ThermallyPerfect {
        /// The species and their fractions.
        gas: ThermallyPerfectGas<'a>,
        /// The heat capacity across the shocks.
        model: HeatCapacityModel,
        /// How uncertain the mixture is: independent changes with their standard uncertainties, at most [`MAX_CHANGES`].
        changes: &'a [(MixtureChange, Uncertainty)],
    },
}

/// What is known of a shot.
#[derive(Clone, Copy, Debug)]
pub struct Shot<'s, 'g> {
    /// Driven gas.
    pub gas: DrivenGas<'g>,
    /// Fill pressure p1, Pa, absolute.
    pub pressure: Measured,
    /// Fill temperature T1, K.
    pub temperature: Measured,
    /// Incident shock.
    pub speed: SpeedSource<'s>,
    /// End wall.
    pub wall: EndWall,
}

/// Why a shot cannot be reduced.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ReductionError {
    /// The arrival times cannot be fitted.
    Fit(FitError),
    /// An input of the shock relations was refused.
    Input(InputError),
    /// The shock has no proven answer.
    Shock(ThermalError),
    /// The mixture has more uncertain changes than [`MAX_CHANGES`]; this many.
    Changes(usize),
    /// A stated standard uncertainty is negative or not a number.
    Uncertainty {
        /// Of which input.
        source: Source,
        /// Its value.
        value: f64,
    },
}

impl fmt::Display for ReductionError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Fit(error) => error.fmt(f),
            Self::Input(error) => error.fmt(f),
            Self::Shock(error) => error.fmt(f),
            Self::Changes(count) => write!(f, "{count} uncertain fractions are more than a budget holds, {MAX_CHANGES}"),
            Self::Uncertainty { source, value } => {
                write!(f, "standard uncertainty {value} of the {} must be zero or more", source.name())
            }
        }
    }
}

impl core::error::Error for ReductionError {}

impl From<FitError> for ReductionError {
    fn from(error: FitError) -> Self {
        Self::Fit(error)
    }
}

impl From<InputError> for ReductionError {
    fn from(error: InputError) -> Self {
        Self::Input(error)
    }
}

impl From<ThermalError> for ReductionError {
    fn from(error: ThermalError) -> Self {
        match error {
            ThermalError::Input(error) => Self::Input(error),
            other => Self::Shock(other),
        }
    }
}

/// What a line of the budget is about.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub enum Source {
    /// A part of the fitted shock speed.
    Fit(FitSource),
    /// A given shock speed.
    ShockSpeed,
    /// Heat-capacity ratio.
    HeatCapacityRatio,
    /// Fill pressure.
    FillPressure,
    /// Fill temperature.
    FillTemperature,
    /// Molar mass.
    MolarMass,
    /// Velocity or impedance of the end wall.
    EndWall,
    /// A change of the mixture.
    Mixture(MixtureChange),
}

impl Source {
    /// The name in a budget.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Fit(FitSource::ArrivalTimes) => "arrival times",
            Self::Fit(FitSource::StationPositions) => "station positions",
            Self::Fit(FitSource::Allowance) => "attenuation allowance",
            Self::Fit(FitSource::Clock) => "clock rate",
            Self::Fit(FitSource::SurveyScale) => "survey scale",
            Self::Fit(FitSource::SurveyOffset) => "survey offset",
            Self::Fit(FitSource::Curvature) => "curvature of the speed profile",
            Self::ShockSpeed => "shock speed",
            Self::HeatCapacityRatio => "heat-capacity ratio",
            Self::FillPressure => "fill pressure",
            Self::FillTemperature => "fill temperature",
            Self::MolarMass => "molar mass",
            Self::EndWall => "end wall",
            Self::Mixture(MixtureChange::Data) => "gas data",
            Self::Mixture(_) => "composition",
        }
    }

    /// The input of the model on which it acts.
    pub(super) const fn variable(self) -> usize {
        match self {
            Self::Fit(_) | Self::ShockSpeed => 0,
            Self::HeatCapacityRatio => 1,
            Self::FillPressure => 2,
            Self::FillTemperature => 3,
            Self::MolarMass => 4,
            // Mixtures have slopes of their own.
            Self::EndWall | Self::Mixture(_) => 5,
        }
    }
}

/// One line of the uncertainty budget.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct BudgetLine {
    /// What it is about.
    pub source: Source,
    /// Its standard uncertainty, in the unit of the input on which it acts (m/s for all lines of the shock speed); `None` if not stated.
    pub uncertainty: Option<Uncertainty>,
}

/// One result: the nominal value, what is proven of it, and how well it is known. Three different things.
#[derive(Clone, Copy, Debug, PartialEq)]
#[cfg_attr(feature = "serde", derive(serde::Serialize))]
pub struct Estimate {
    /// The double nearest to the model's exact answer at the nominal inputs.
    pub value: f64,
    /// The enclosure of that answer; `None` for what is fitted and not computed by a proven relation.
    pub proven: Option<Enclosure>,
    /// Combined standard uncertainty (JCGM 100:2008, equation 10); `None` if an input that matters states none.
    pub standard_uncertainty: Option<f64>,
    /// Effective degrees of freedom (Welch–Satterthwaite, JCGM 100:2008, equation G.2b).
    pub degrees_of_freedom: Option<f64>,
    /// Coverage factor for 95.45 %: 2 for many degrees of freedom, else from the t-distribution.
    pub coverage_factor: Option<f64>,
    /// Expanded uncertainty.
    pub expanded: Option<f64>,
}

/// The shocks of a shot.
#[derive(Clone, Copy, Debug)]
#[expect(clippy::large_enum_variant, reason = "a reduction holds one of them, and there is no heap")]
pub enum Solved<'a> {
    /// Into a gas of constant heat capacity; the reflection where the wall is not rigid.
    Constant(Incident, Option<WallReflection>),
    /// Into a thermally perfect gas.
    Thermal(ThermalShock<'a>),
}

/// A reduced shot.
#[derive(Clone, Copy, Debug)]
pub struct Reduction<'a> {
    solved: Solved<'a>,
    wall: EndWall,
    fit: Option<Fit>,
    lines: [BudgetLine; LINES],
    used: usize,
}

/// Reduces a shot: fits the arrival times if there are any, solves the incident and the reflected shock at the nominal inputs with proof, and
/// sets up the law of propagation of uncertainty (JCGM 100:2008, 5.1) with sensitivities at fixed shock speed.
///
/// # Errors
/// [`ReductionError`] names the input.
///
/// ```
/// use endwall::number::Rational;
/// use endwall::shock::Output;
/// use endwall::shot::{DrivenGas, EndWall, Measured, Shot, SpeedSource, reduce};
/// let exact = |text: &str| text.parse::<Rational>().unwrap();
/// let shot = Shot {
///     gas: DrivenGas::ConstantHeatCapacity {
///         heat_capacity_ratio: Measured::exact(exact("7/5")),
///         molar_mass: Measured::exact(exact("0.0289652")),
///     },
///     pressure: Measured::new(exact("100e3"), 100.0),
///     temperature: Measured::new(exact("295.15"), 0.5),
///     speed: SpeedSource::Given(Measured::new(exact("620"), 0.93)),
///     wall: EndWall::Rigid,
/// };
/// let reduction = reduce(&shot)?;
/// let step = reduction.estimate(Output::Step);
/// assert!((step.value - 949.38e3).abs() < 10.0);
/// assert_eq!(step.coverage_factor, Some(2.0));
/// // The shock speed contributes most: 5.47 kPa.
/// assert!((step.standard_uncertainty.unwrap() - 6.34e3).abs() < 20.0);
/// # Ok::<(), endwall::shot::ReductionError>(())
/// ```
pub fn reduce<'g>(shot: &Shot<'_, 'g>) -> Result<Reduction<'g>, ReductionError> {
    let (fitted, speed) = match shot.speed {
        SpeedSource::Stations(stations, settings) => {
            let fitted = fit(stations, &settings)?;
            (Some(fitted), Known::from(fitted.shock_speed))
        }
        SpeedSource::Given(measured) => (None, measured.value),
    };
    let mut reduction = Reduction {
        solved: solve(shot, speed)?,
        wall: shot.wall,
        fit: fitted,
        lines: [BudgetLine { source: Source::ShockSpeed, uncertainty: None }; LINES],
        used: 0,
    };
    match (&fitted, shot.speed) {
        (Some(fitted), _) => {
            // Without uncertainties of the stations the lines are zero for want of knowledge.
            let known = fitted.covariance().is_some();
            for line in fitted.lines() {
                let uncertainty = known.then(|| Uncertainty::standard(line.shock_speed_uncertainty()));
                reduction.add(Source::Fit(line.source), uncertainty)?;
            }
        }
        (None, SpeedSource::Given(measured)) => reduction.add(Source::ShockSpeed, measured.uncertainty)?,
        (None, SpeedSource::Stations(..)) => {}
    }
    reduction.add(Source::FillPressure, shot.pressure.uncertainty)?;
    reduction.add(Source::FillTemperature, shot.temperature.uncertainty)?;
    match shot.gas {
        DrivenGas::ConstantHeatCapacity { heat_capacity_ratio, molar_mass } => {
            reduction.add(Source::HeatCapacityRatio, heat_capacity_ratio.uncertainty)?;
            reduction.add(Source::MolarMass, molar_mass.uncertainty)?;
        }
        DrivenGas::ThermallyPerfect { changes, .. } => {
            if changes.len() > MAX_CHANGES {
                return Err(ReductionError::Changes(changes.len()));
            }
            for (change, uncertainty) in changes {
                reduction.add(Source::Mixture(*change), Some(*uncertainty))?;
            }
        }
    }
    if let EndWall::Moving(wall) | EndWall::Yielding(wall) = shot.wall {
        reduction.add(Source::EndWall, wall.uncertainty)?;
    }
    Ok(reduction)
}

/// The shocks at the nominal inputs.
fn solve<'g>(shot: &Shot<'_, 'g>, speed: Known) -> Result<Solved<'g>, ReductionError> {
    match shot.gas {
        DrivenGas::ConstantHeatCapacity { heat_capacity_ratio, molar_mass } => {
            let gas = Gas::new(HeatCapacityRatio::new(heat_capacity_ratio.value)?, molar_mass.value)?;
            let fill = Fill::new(gas, shot.pressure.value, shot.temperature.value)?;
            let incident = Incident::new(&fill, Entry::ShockSpeed, speed)?;
            let reflection = match shot.wall {
                EndWall::Rigid => None,
                EndWall::Moving(velocity) => Some(incident.reflected_from_wall(velocity.value)?),
                EndWall::Yielding(impedance) => Some(incident.reflected_from_yielding_wall(impedance.value)?),
            };
            Ok(Solved::Constant(incident, reflection))
        }
        DrivenGas::ThermallyPerfect { gas, model, .. } => {
            let fill = ThermalFill::new(gas, model, shot.pressure.value, shot.temperature.value)?;
            let shock = ThermalShock::new(&fill, Entry::ShockSpeed, speed)?;
            Ok(Solved::Thermal(match shot.wall {
                EndWall::Rigid => shock,
                EndWall::Moving(velocity) => {
                    let reflected = shock.reflected_from_wall(velocity.value)?;
                    shocked(&reflected, velocity.value)?;
                    reflected
                }
                EndWall::Yielding(impedance) => shock.reflected_from_yielding_wall(impedance.value)?,
            }))
        }
    }
}

/// Slopes are not taken through an expansion of a thermally perfect gas: a wall that recedes faster than such a gas is refused here.
fn shocked(shock: &ThermalShock<'_>, wall_speed: Known) -> Result<(), InputError> {
    if shock.wave() == Wave::Shock {
        return Ok(());
    }
    let rule = Rule::Below(shock.output(Output::GasSpeed2).low());
    Err(InputError { parameter: Parameter::WallSpeed, value: wall_speed.nominal(), rule })
}

impl<'a> Reduction<'a> {
    fn add(&mut self, source: Source, uncertainty: Option<Uncertainty>) -> Result<(), ReductionError> {
        let refused = |stated: &Uncertainty| !(stated.standard >= 0.0 && stated.standard.is_finite());
        if let Some(stated) = uncertainty.filter(refused) {
            return Err(ReductionError::Uncertainty { source, value: stated.standard });
        }
        if let Some(line) = self.lines.get_mut(self.used) {
            *line = BudgetLine { source, uncertainty };
            self.used += 1;
        }
        Ok(())
    }

    /// The shocks at the nominal inputs.
    pub fn solved(&self) -> &Solved<'a> {
        &self.solved
    }

    /// The shock into a gas of constant heat capacity, if it is one.
    pub fn incident(&self) -> Option<&Incident> {
        match &self.solved {
            Solved::Constant(incident, _) => Some(incident),
            Solved::Thermal(_) => None,
        }
    }

    /// The shock into a thermally perfect gas, if it is one.
    pub fn thermal(&self) -> Option<&ThermalShock<'a>> {
        match &self.solved {
            Solved::Constant(..) => None,
            Solved::Thermal(shock) => Some(shock),
        }
    }

    /// The fit of the arrival times, if there were any.
    pub fn fit(&self) -> Option<&Fit> {
        self.fit.as_ref()
    }

    /// The lines of the budget.
    pub fn budget(&self) -> &[BudgetLine] {
        self.lines.get(..self.used).unwrap_or(&self.lines)
    }

    /// The end wall as it was given.
    pub fn wall(&self) -> &EndWall {
        &self.wall
    }

    /// The kind of wave that runs back from the wall.
    pub fn wave(&self) -> Wave {
        match &self.solved {
            Solved::Constant(_, Some(reflection)) => reflection.wave,
            Solved::Constant(_, None) | Solved::Thermal(_) => Wave::Shock,
        }
    }
}

//! Shocks into a thermally perfect gas, as enclosures.

use super::ThermalError;
use super::certify::{Problem, Root};
use super::flow::{Ranges, ThermalFlow, reflected_stage_at};
use super::inverse::inverse;
use super::plain::{PlainFill, PlainRoots};
use super::setting::Setting;
use super::stage::GivenSpeed;
use crate::gas::{HeatCapacity, HeatCapacityModel, InputError, Parameter, Rule, ThermallyPerfectGas, molar_gas_constant, positive};
use crate::number::{Ball, Enclosure, Known, Positive, Semifield};
use crate::shock::{Entry, Output, State, Wave};

/// A fill of thermally perfect gas: p1 (Pa, absolute), T1 (K, within the data of the gas), and the heat capacity that the shocks are to have. Both may be
/// tolerances.
#[derive(Clone, Copy, Debug)]
pub struct ThermalFill<'a> {
    gas: ThermallyPerfectGas<'a>,
    model: HeatCapacityModel,
    pressure: Known,
    temperature: Known,
    balls: PlainFill<Ball>,
    /// `c_p`/R at T1 across the incident shock.
    heat_capacity: Ball,
}

impl<'a> ThermalFill<'a> {
    /// A fill.
    ///
    /// # Errors
    /// [`InputError`] for a pressure that is not positive or beyond 2^±200, and for a temperature outside the data of the gas.
    pub fn new(
        gas: ThermallyPerfectGas<'a>,
        model: HeatCapacityModel,
        pressure: impl Into<Known>,
        temperature: impl Into<Known>,
    ) -> Result<Self, InputError> {
        let (pressure, temperature) = (pressure.into(), temperature.into());
        positive(Parameter::FillPressure, pressure)?;
        positive(Parameter::FillTemperature, temperature)?;
        gas.check_temperature(Parameter::FillTemperature, temperature.enclosure().low())?;
        gas.check_temperature(Parameter::FillTemperature, temperature.enclosure().high())?;
        // The polynomial of T1 is chosen by its side of every joint.
        let untold = |joint: f64| {
            let over = temperature.ball() - Ball::from(joint);
            !(over.is_certainly_positive() || over.is_certainly_negative() || over.magnitude() == 0.0)
        };
        if temperature.exact().is_some() && gas.heat_capacity().joints().any(untold) {
            return Err(InputError { parameter: Parameter::FillTemperature, value: temperature.nominal(), rule: Rule::Digits });
        }
        let balls = PlainFill {
            model,
            pressure: pressure.ball(),
            temperature: temperature.ball(),
            gas_constant: molar_gas_constant::<Ball>() / gas.molar_mass(),
            full: *gas.heat_capacity(),
            frozen: gas.frozen_heat_capacity(temperature.ball()),
        };
        let heat_capacity = balls.heat_capacity(balls.temperature.side());
        Ok(Self { gas, model, pressure, temperature, balls, heat_capacity })
    }

    /// The gas.
    pub fn gas(&self) -> &ThermallyPerfectGas<'a> {
        &self.gas
    }

    /// The heat capacity that the shocks have.
    pub fn model(&self) -> HeatCapacityModel {
        self.model
    }

    /// p1, Pa.
    pub fn pressure(&self) -> Known {
        self.pressure
    }

    /// T1, K.
    pub fn temperature(&self) -> Known {
        self.temperature
    }

    /// `c_p`/R across the reflected shock, where the model holds it constant.
    pub(crate) fn constant_heat_capacity_5(&self) -> Option<Ball> {
        let reflected = self.setting(Ball::whole(0)).reflected;
        match self.model {
            HeatCapacityModel::Constant | HeatCapacityModel::Frozen => Some(reflected.value(0, self.balls.temperature)),
            HeatCapacityModel::Equilibrium | HeatCapacityModel::FrozenThenEquilibrium => None,
        }
    }

    /// The same gas at an exact pressure and temperature.
    pub(super) fn at(&self, pressure: Known, temperature: Known) -> Result<Self, InputError> {
        Self::new(self.gas, self.model, pressure, temperature)
    }

    /// The fill in balls.
    pub(super) fn balls(&self) -> &PlainFill<Ball> {
        &self.balls
    }

    /// The fill in balls, with the heat capacities of the model.
    pub(super) fn setting(&self, wall_speed: Ball) -> Setting<Ball> {
        self.balls.setting_with(self.balls.temperature.side(), self.heat_capacity, wall_speed)
    }
}

/// For what is computed at a point only.
fn exact(parameter: Parameter, value: Known) -> Result<(), InputError> {
    match value {
        Known::Exactly(_) => Ok(()),
        Known::Within(_) => Err(InputError { parameter, value: value.nominal(), rule: Rule::Exact }),
    }
}

/// Bisections of the speed of a yielding wall.
const SEARCH: u32 = 60;
/// Solutions that cannot be told apart: either polynomial at a joint near T2, for each either one at a joint near T5.
const FLOWS: usize = 4;

/// A shock into a fill of thermally perfect gas, and its reflection from a rigid wall.
///
/// Each output is an enclosure of the model's exact answer, of at most two units in the last place for exact inputs. For tolerances of a shock speed or
/// Mach number, p1 and T1 it is an enclosure of the range over the box, by slopes and subdivision (over-width at most 1 %, measured for tolerances up to
/// ±5 %). Model: ideal gas with the heat capacity of the data, conservation of mass, momentum and energy. Existence and uniqueness of both shocks over
/// all temperatures of the data are proven (see [`how_it_is_proven`](crate::how_it_is_proven)).
///
/// ```
/// use endwall::gas::species::table;
/// use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
/// use endwall::shock::{Entry, Output, ThermalFill, ThermalShock};
/// let nitrogen = [Portion { species: &table::N2, fraction: "1".parse()? }];
/// let gas = ThermallyPerfectGas::new(&nitrogen)?;
/// let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 295.0)?;
/// let shock = ThermalShock::new(&fill, Entry::ShockSpeed, 1050.0)?;
/// let end_wall = shock.state_5();
/// assert!(end_wall.temperature.width_in_ulp() <= 2);
/// // Constant heat capacity, as textbooks have it, comes out 7 % hotter at Mach 3.
/// let constant = ThermalFill::new(gas, HeatCapacityModel::Constant, 10e3, 295.0)?;
/// let textbook = ThermalShock::new(&constant, Entry::ShockSpeed, 1050.0)?.state_5();
/// let ratio = textbook.temperature.middle() / end_wall.temperature.middle();
/// assert!((ratio - 1.074).abs() < 0.002);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Clone, Copy, Debug)]
pub struct ThermalShock<'a> {
    fill: ThermalFill<'a>,
    entry: Entry,
    value: Known,
    wall_speed: Ball,
    /// Some input is a tolerance; the flows are those of a corner.
    is_box: bool,
    flows: [Option<ThermalFlow<Ball>>; FLOWS],
    steps: [u32; 2],
}

impl<'a> ThermalShock<'a> {
    /// The shock into `fill` for which the quantity `entry` has this value.
    ///
    /// # Errors
    /// [`ThermalError`] for a shock that is not faster than sound, for a temperature that leaves the data, and where a part of the proof fails.
    pub fn new(fill: &ThermalFill<'a>, entry: Entry, value: impl Into<Known>) -> Result<Self, ThermalError> {
        let value = value.into();
        positive(entry.parameter(), value)?;
        if [value, fill.pressure, fill.temperature].iter().all(|input| input.exact().is_some()) {
            return Self::solved(fill, entry, value);
        }
        // Inverse problems are solved at points.
        if !matches!(entry, Entry::ShockSpeed | Entry::Mach | Entry::MachExcess) {
            exact(entry.parameter(), value)?;
            exact(Parameter::FillPressure, fill.pressure)?;
            exact(Parameter::FillTemperature, fill.temperature)?;
        }
        let corner = |upper: bool| {
            let point = fill.at(fill.pressure.end(upper), fill.temperature.end(!upper))?;
            Self::solved(&point, entry, value.end(upper))
        };
        // The weakest and the strongest shock of the box must exist and stay inside the data.
        corner(false)?;
        let strongest = corner(true)?;
        Ok(Self { fill: *fill, value, is_box: true, ..strongest })
    }

    fn solved(fill: &ThermalFill<'a>, entry: Entry, value: Known) -> Result<Self, ThermalError> {
        let wall_speed = Ball::whole(0);
        let setting = fill.setting(wall_speed);
        let mut shock = Self { fill: *fill, entry, value, wall_speed, is_box: false, flows: [None; FLOWS], steps: [0; 2] };
        shock.steps = match setting.given(entry, value.ball()) {
            Some(incident) => solve(&setting, &incident, entry.parameter(), value.nominal(), &mut shock.flows)?,
            None => inverse(&setting, entry, value.ball(), &mut shock.flows)?,
        };
        Ok(shock)
    }

    /// The same shock reflected from an end wall that moves with a constant velocity V along the incident direction (positive: it recedes; m/s). State 5
    /// is then the gas at the wall.
    ///
    /// For V < u2 a shock runs back, for V > u2 an expansion ([`ThermalShock::wave`]), a simple wave with the heat capacity of state 2:
    ///
    /// > V − u2 = ∫ from T5 to T2 of dh/a, ln(p5/p2) = −∫ from T5 to T2 of `c_p`/R dT/T.
    ///
    /// # Errors
    /// [`ThermalError`] for a velocity that is not finite, beyond 2^±200 or equal to the gas speed u2 to all digits, for an expansion that takes the gas
    /// below the data, and as for [`ThermalShock::new`].
    ///
    /// ```
    /// use endwall::gas::species::table;
    /// use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
    /// use endwall::shock::{Entry, Output, ThermalFill, ThermalShock, Wave};
    /// let nitrogen = [Portion { species: &table::N2, fraction: "1".parse()? }];
    /// let fill = ThermalFill::new(ThermallyPerfectGas::new(&nitrogen)?, HeatCapacityModel::Equilibrium, 10e3, 295.0)?;
    /// let rigid = ThermalShock::new(&fill, Entry::ShockSpeed, 1050.0)?;
    /// let yielding = rigid.reflected_from_wall(100.0)?;
    /// assert!(yielding.output(Output::Pressure5).certainly_less(rigid.output(Output::Pressure5)));
    /// let receding = rigid.reflected_from_wall(900.0)?; // the gas has 831 m/s
    /// assert_eq!(receding.wave(), Wave::Expansion);
    /// assert!(receding.output(Output::Pressure5).certainly_less(rigid.output(Output::Pressure2)));
    /// assert!(rigid.reflected_from_wall(3000.0).is_err()); // below 200 K there are no data
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn reflected_from_wall(&self, wall_speed: impl Into<Known>) -> Result<Self, ThermalError> {
        let wall_speed = wall_speed.into();
        let bounds = wall_speed.enclosure();
        let refuse = |rule| InputError { parameter: Parameter::WallSpeed, value: wall_speed.nominal(), rule }.into();
        if !bounds.is_proven() || bounds.magnitude() > Ball::LARGEST_ENTRY {
            return Err(refuse(Rule::Between(-Ball::LARGEST_ENTRY, Ball::LARGEST_ENTRY)));
        }
        self.exact_for_wall()?;
        exact(Parameter::WallSpeed, wall_speed)?;
        let velocity = wall_speed.ball();
        let mut closing_speeds = self.flows.iter().flatten().map(|flow| flow.closing_speed_to(velocity));
        if closing_speeds.clone().all(Ball::is_certainly_positive) {
            return self.at_wall(velocity);
        }
        if !closing_speeds.all(Ball::is_certainly_negative) {
            return Err(refuse(Rule::Below(self.output(Output::GasSpeed2).low())));
        }
        let setting = self.fill.setting(velocity);
        let mut flows = [None; FLOWS];
        let mut places = flows.iter_mut();
        let mut last = None;
        for flow in self.flows.iter().flatten() {
            // Flows that differ in their reflection only have the same state 2.
            if last == Some(flow.ranges().second) {
                continue;
            }
            last = Some(flow.ranges().second);
            let expanded = flow.expanded(&setting.incident, velocity);
            if expanded.iter().all(Option::is_none) {
                let (low, high) = setting.incident.range();
                return Err(refuse(Rule::HeatsBeyondData(low, high)));
            }
            for expanded in expanded.into_iter().flatten() {
                if let Some(place) = places.next() {
                    *place = Some(expanded);
                }
            }
        }
        Ok(Self { wall_speed: velocity, flows, ..*self })
    }

    /// The same incident shock, reflected as a shock from a wall of this velocity.
    fn at_wall(&self, wall_speed: Ball) -> Result<Self, ThermalError> {
        let missing = ThermalError::Existence { temperature: self.nearest(Output::Temperature2) };
        let incident = self.flows.iter().flatten().next().ok_or(missing)?.incident();
        let setting = self.fill.setting(wall_speed);
        let mut reflected = Self { wall_speed, ..*self };
        reflected.steps = solve(&setting, &incident, self.entry.parameter(), self.value.nominal(), &mut reflected.flows)?;
        Ok(reflected)
    }

    /// Whether it is one solution for exact inputs, whose balls say all that is known.
    pub(crate) fn is_single(&self) -> bool {
        !self.is_box && self.flows.iter().flatten().count() == 1
    }

    /// What runs back from the wall.
    pub fn wave(&self) -> Wave {
        if self.flows.iter().flatten().any(ThermalFlow::expands) { Wave::Expansion } else { Wave::Shock }
    }

    /// The same shock reflected from a massive elastic wall of acoustic impedance Z (Pa·s/m), whose face moves with V = (p5 − p1)/Z until the wave in the
    /// wall returns from its back face.
    ///
    /// V is enclosed between two doubles at which the sign of Z·V − (p5(V) − p1) is proven; p5 falls with V.
    ///
    /// # Errors
    /// As for [`ThermalShock::reflected_from_wall`], and for an impedance that is not positive.
    pub fn reflected_from_yielding_wall(&self, impedance: impl Into<Known>) -> Result<Self, ThermalError> {
        let impedance = impedance.into();
        positive(Parameter::WallImpedance, impedance)?;
        self.exact_for_wall()?;
        exact(Parameter::WallImpedance, impedance)?;
        let at = |speed: Ball| self.at_wall(speed);
        let wanted = |shock: &Self| shock.ball(Output::Step) / impedance.ball();
        let still = at(Ball::whole(0))?;
        let (mut low, mut high) = (0.0, wanted(&still).nearest().min(self.nearest(Output::GasSpeed2)));
        for _ in 0..SEARCH {
            let middle = low + (high - low) / 2.0;
            if !(middle > low && middle < high) {
                break;
            }
            // A wall so fast that hardly anything runs back is too fast.
            let too_fast = at(Ball::from(middle)).map_or(true, |shock| wanted(&shock).nearest() < middle);
            if too_fast { high = middle } else { low = middle }
        }
        for reach in [4u32, 12, 20] {
            let width = low * f64::from_bits((1023 - 50 + u64::from(reach)) << 52);
            let (below, above) = (Ball::from(low - width), Ball::from(high + width));
            let moves_on = (wanted(&at(below)?) - below).is_certainly_positive();
            let stops = (above - wanted(&at(above)?)).is_certainly_positive();
            if moves_on && stops {
                return at(Ball::around(below.enclosure().hull(above.enclosure())));
            }
        }
        Err(ThermalError::Existence { temperature: self.nearest(Output::Temperature5) })
    }

    /// A wall that moves is computed at a point.
    fn exact_for_wall(&self) -> Result<(), InputError> {
        exact(self.entry.parameter(), self.value)?;
        exact(Parameter::FillPressure, self.fill.pressure)?;
        exact(Parameter::FillTemperature, self.fill.temperature)
    }

    /// The fill pressure for which this shock reaches a pressure p5 at the wall, Pa: p5/(p5/p1), which does not depend on p1. With a shock that was found from
    /// T5 it answers which p1 gives both.
    ///
    /// ```
    /// use endwall::gas::species::table;
    /// use endwall::gas::{HeatCapacityModel, Portion, ThermallyPerfectGas};
    /// use endwall::shock::{Entry, Output, ThermalFill, ThermalShock};
    /// let nitrogen = [Portion { species: &table::N2, fraction: "1".parse()? }];
    /// let gas = ThermallyPerfectGas::new(&nitrogen)?;
    /// let any = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 1e3, 295.0)?;
    /// let shock = ThermalShock::new(&any, Entry::ReflectedTemperature, 1200.0)?;
    /// let fill_pressure = shock.fill_pressure_for(500e3);
    /// let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, fill_pressure.middle(), 295.0)?;
    /// let both = ThermalShock::new(&fill, Entry::ReflectedTemperature, 1200.0)?;
    /// assert!((both.nearest(Output::Pressure5) / 500e3 - 1.0).abs() < 1e-15);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn fill_pressure_for(&self, pressure_5: impl Into<Known>) -> Enclosure {
        if self.is_box {
            return pressure_5.into().enclosure() / self.output(Output::ReflectedPressureRatio);
        }
        let wanted = pressure_5.into().ball();
        hull(&self.flows, |flow| wanted / flow.evaluate(Output::ReflectedPressureRatio))
    }

    /// One output as a ball, of the solution that the f64 iteration found.
    pub(crate) fn ball(&self, output: Output) -> Ball {
        self.flows.iter().flatten().next().map_or(Ball::UNKNOWN, |flow| flow.evaluate(output))
    }

    /// The heat capacity with which state 5 was computed.
    pub fn heat_capacity_5(&self) -> HeatCapacity<Ball> {
        let setting = self.fill.setting(Ball::whole(0));
        if self.wave() == Wave::Expansion { setting.incident } else { setting.reflected }
    }

    /// An enclosure of the velocity of the end wall, m/s.
    pub fn wall_speed(&self) -> Enclosure {
        self.wall_speed.enclosure()
    }

    /// Whether the entry says what this output is. A quantity of state 5 is given for the rigid wall.
    fn is_given(&self, output: Output) -> bool {
        output == self.entry.output() && (self.wall_speed.magnitude() == 0.0 || !self.entry.is_reflected())
    }

    /// An enclosure of one output.
    pub fn output(&self, output: Output) -> Enclosure {
        if self.is_given(output) {
            return self.value.enclosure();
        }
        if self.is_box {
            return self.fill.range(self.entry, self.value, output);
        }
        hull(&self.flows, |flow| flow.evaluate(output))
    }

    /// The double nearest to the exact answer at the nominal inputs.
    pub fn nearest(&self, output: Output) -> f64 {
        if self.is_given(output) {
            return self.value.nominal();
        }
        let bounds = self.output(output);
        if self.is_box {
            return bounds.middle();
        }
        let nearest = self.ball(output).nearest();
        if bounds.contains(nearest) { nearest } else { bounds.middle() }
    }

    /// The fill.
    pub fn fill(&self) -> &ThermalFill<'a> {
        &self.fill
    }

    /// Plain Newton steps before the proof, for the incident and the reflected shock.
    pub fn steps(&self) -> [u32; 2] {
        self.steps
    }

    /// State 1, the fill.
    pub fn state_1(&self) -> State {
        State {
            pressure: self.fill.pressure.enclosure(),
            temperature: self.fill.temperature.enclosure(),
            density: self.output(Output::Density1),
            sound_speed: self.output(Output::SoundSpeed1),
            gas_speed: Enclosure::whole(0),
        }
    }

    /// State 2, behind the incident shock.
    pub fn state_2(&self) -> State {
        State::behind_incident_shock(|output| self.output(output))
    }

    /// State 5, behind the reflected shock; the gas moves with the wall.
    pub fn state_5(&self) -> State {
        State::behind_reflected_shock(|output| self.output(output), self.wall_speed())
    }
}

pub(super) type Flows = [Option<ThermalFlow<Ball>>; FLOWS];

/// What all the flows make of a quantity: the model's answer is that of one of them.
pub(super) fn hull(flows: &Flows, quantity: impl Fn(&ThermalFlow<Ball>) -> Ball) -> Enclosure {
    flows.iter().flatten().map(|flow| quantity(flow).enclosure()).reduce(Enclosure::hull).unwrap_or(Enclosure::UNKNOWN)
}

/// Both shocks: approximately in f64, then with proof. Gives the plain steps.
pub(super) fn solve(
    setting: &Setting<Ball>,
    incident: &GivenSpeed<Ball>,
    parameter: Parameter,
    value: f64,
    flows: &mut Flows,
) -> Result<[u32; 2], ThermalError> {
    let first = setting.first();
    let c = setting.heat_capacity;
    // Supersonic: the residual at no compression, 2(c(m − 1) − m), is positive.
    let one = Ball::whole(1);
    if !(incident.m_excess * (c - one) - one).is_certainly_positive() {
        let sound_speed = (c / (c - one) * setting.scale).sqrt().nearest();
        let rule = if parameter == Parameter::ShockSpeed { Rule::AboveSoundSpeed(sound_speed) } else { Rule::Above(1.0) };
        return Err(InputError { parameter, value, rule }.into());
    }
    let plain_setting = setting.map(Ball::nearest);
    let plain_incident = incident.map(Ball::nearest);
    let plain = PlainRoots::new(&plain_setting, &plain_incident);
    let (low, high) = setting.reflected.range();
    let plain = plain.ok_or(InputError { parameter, value, rule: Rule::HeatsBeyondData(low, high) })?;
    *flows = [None; FLOWS];
    let mut used = flows.iter_mut();
    let problem = Problem { stage: *incident, heat_capacity: &setting.incident, from: first, temperature: setting.temperature };
    let [compression, reflected_compression] = plain.compressions();
    for first_root in problem.roots(compression, plain.ranges.second)?.into_iter().flatten() {
        let Root { compression, excess, behind, to, .. } = first_root;
        // With one heat capacity for both shocks the range behind one is the range ahead of the other.
        let ahead = if setting.lagging.is_some() { setting.reflected.index_at(behind.nearest()) } else { to };
        let ranges = Ranges { first, second: to, ahead, fifth: plain.ranges.fifth };
        let (stage, closing_speed) = reflected_stage_at(setting, incident, ranges, compression, excess);
        let reflection = Problem { stage, heat_capacity: &setting.reflected, from: ahead, temperature: behind };
        for last in reflection.roots(reflected_compression, plain.ranges.fifth)?.into_iter().flatten() {
            if let Some(place) = used.next() {
                let ranges = Ranges { fifth: last.to, ..ranges };
                let both = [(compression, excess), (last.compression, last.excess)];
                *place = Some(ThermalFlow::from_parts(setting, incident, &stage, ranges, both, (behind, closing_speed, last.mean)));
            }
        }
    }
    Ok(plain.steps())
}

#[cfg(test)]
#[path = "wall_tests.rs"]
mod wall_tests;

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use crate::gas::Portion;
    use crate::gas::species::{Species, table};
    use crate::number::Rational;

    fn pure<'a>(species: &'a Species<'a>) -> [Portion<'a>; 1] {
        [Portion { species, fraction: Rational::ONE }]
    }

    /// The gases for which the tests of inverse problems run.
    fn gases() -> [(Species<'static>, f64); 4] {
        [(table::N2, 295.0), (table::CO2, 300.0), (table::AR, 450.0), (table::CH4, 290.0)]
    }

    #[test]
    fn an_inverse_finds_the_shock_again() {
        let entries = [
            Entry::PressureRatio,
            Entry::PressureRise,
            Entry::TemperatureRatio,
            Entry::GasSpeed,
            Entry::ReflectedPressureRatio,
            Entry::ReflectedPressure,
            Entry::Step,
            Entry::ReflectedTemperatureRatio,
            Entry::ReflectedTemperature,
        ];
        for (species, temperature) in gases() {
            let portions = pure(&species);
            let gas = ThermallyPerfectGas::new(&portions).unwrap();
            for model in HeatCapacityModel::ALL {
                let fill = ThermalFill::new(gas, model, 10e3, temperature).unwrap();
                for excess in [1e-6, 1e-3, 0.2, 1.0, 2.5] {
                    let shock = ThermalShock::new(&fill, Entry::MachExcess, excess).unwrap();
                    for entry in entries {
                        let value = shock.nearest(entry.output());
                        let again = ThermalShock::new(&fill, entry, value)
                            .unwrap_or_else(|error| panic!("{} {model:?} {excess} {entry:?} {error}", species.name));
                        let found = again.output(Output::MachExcess);
                        // A double that stands for the quantity moves M − 1 by about its own rounding.
                        let rounding = 4e-16 * (1.0 + 1.0 / excess);
                        assert!(
                            (found.middle() / excess - 1.0).abs() < rounding.max(1e-14),
                            "{} {model:?} {excess} {entry:?} {found:?}",
                            species.name
                        );
                        for output in Output::ALL {
                            let bounds = again.output(output);
                            assert!(bounds.width_in_ulp() <= 2, "{} {model:?} {excess} {entry:?} {output:?} {bounds:?}", species.name);
                        }
                    }
                }
            }
        }
    }

    /// The box holds what its points give, and is hardly wider.
    #[test]
    fn a_box_is_the_hull_of_its_points() {
        let within = |middle: f64, part: f64| Known::Within(Enclosure::new(middle * (1.0 - part), middle * (1.0 + part)).unwrap());
        let ends = |known: Known| [known.end(false), known.middle(), known.end(true)];
        // N2 at 950 m/s has T5 near 1120 K, at 880 m/s across the joint at 1000 K.
        for (species, speed, part) in
            [(table::N2, 950.0, 0.002), (table::N2, 880.0, 0.01), (table::CO2, 700.0, 0.05), (table::H2, 3000.0, 0.02)]
        {
            let portions = pure(&species);
            let gas = ThermallyPerfectGas::new(&portions).unwrap();
            for model in HeatCapacityModel::ALL {
                let (value, pressure, temperature) = (within(speed, part), within(10e3, part), within(300.0, part));
                let fill = ThermalFill::new(gas, model, pressure, temperature).unwrap();
                let shock = ThermalShock::new(&fill, Entry::ShockSpeed, value).unwrap();
                for output in
                    [Output::Temperature5, Output::Pressure5, Output::GasSpeed2, Output::ReflectedSpeed, Output::Mach, Output::Step]
                {
                    let range = shock.output(output);
                    let mut hull: Option<Enclosure> = None;
                    for value in ends(value) {
                        for pressure in ends(pressure) {
                            for temperature in ends(temperature) {
                                let point = ThermalFill::new(gas, model, pressure, temperature).unwrap();
                                let inside = ThermalShock::new(&point, Entry::ShockSpeed, value).unwrap().output(output);
                                assert!(range.encloses(inside), "{} {model:?} {output:?} {range:?} {inside:?}", species.name);
                                hull = Some(hull.map_or(inside, |hull| hull.hull(inside)));
                            }
                        }
                    }
                    let over = range.width() / hull.unwrap().width() - 1.0;
                    assert!(over < 0.01, "{} {model:?} {part} {output:?} {over}", species.name);
                }
            }
        }
    }

    /// Two constant heat capacities that meet at 1000 K in the same enthalpy, in units of 1e-5 R.
    fn kinked(below: i64, above: i64) -> [crate::gas::species::SpeciesRange; 2] {
        use crate::gas::species::{Coefficient, SpeciesRange};
        let range = |low, high, c: i64, b1: i64| {
            let mut heat_capacity = [Coefficient::new(0, 0); 7];
            heat_capacity[2] = Coefficient::new(c, -5);
            SpeciesRange { low, high, heat_capacity, enthalpy: Coefficient::new(b1, -2) }
        };
        [range(200.0, 1000.0, below, 0), range(1000.0, 6000.0, above, below - above)]
    }

    #[test]
    fn a_decimal_just_above_a_joint_takes_the_upper_polynomial() {
        let portions = pure(&table::CO2);
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let temperature: Rational = "1000.0000000000000001".parse().unwrap();
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, temperature).unwrap();
        let shock = ThermalShock::new(&fill, Entry::ShockSpeed, 2000.0).unwrap();
        // Solved apart with 50 digits.
        assert!(shock.output(Output::Temperature2).contains(2_469.087_856_991_615_3), "{:?}", shock.output(Output::Temperature2));
        // So near that no ball tells the side.
        let nearer: Rational = "1000.00000000000000000000000000000001".parse().unwrap();
        assert!(ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, nearer).is_err());
    }

    #[test]
    fn a_box_holds_its_points_where_the_heat_capacity_jumps() {
        let ranges = kinked(250_000, 250_025);
        let species = Species { ranges: &ranges, ..table::AR };
        assert_eq!(species.check(), Ok(()));
        let portions = pure(&species);
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let within = |low: f64, high: f64| Known::Within(Enclosure::new(low, high).unwrap());
        let (mach, temperature) = (within(3.0, 3.000_001), within(299.0, 301.0));
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, temperature).unwrap();
        let shock = ThermalShock::new(&fill, Entry::Mach, mach).unwrap();
        for output in [Output::TemperatureRatio, Output::ReflectedPressureRatio, Output::MachBehind] {
            for (value, at) in [(3.0, 299.0), (3.0, 301.0), (3.000_001, 299.0), (3.000_001, 301.0)] {
                let point = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, at).unwrap();
                let inside = ThermalShock::new(&point, Entry::Mach, value).unwrap().output(output);
                assert!(shock.output(output).encloses(inside), "{output:?} {:?} {inside:?}", shock.output(output));
            }
        }
    }

    #[test]
    fn several_shocks_behind_a_joint_are_not_taken_for_one() {
        // c jumps so that a weak shock has three answers: T2 999.99983, 1000.0000222 and 1000.01126 K.
        let ranges = kinked(350_000, 350_034);
        let species = Species { ranges: &ranges, ..table::N2 };
        assert_eq!(species.check(), Ok(()));
        let portions = pure(&species);
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 999.9985).unwrap();
        let error = ThermalShock::new(&fill, Entry::MachExcess, 2e-6).unwrap_err();
        assert!(matches!(error, ThermalError::Uniqueness { .. } | ThermalError::Existence { .. }), "{error}");
    }

    #[test]
    fn what_no_shock_has_is_refused() {
        let portions = pure(&table::CO2);
        let gas = ThermallyPerfectGas::new(&portions).unwrap();
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 295.0).unwrap();
        let refused = |entry, value: f64| ThermalShock::new(&fill, entry, value).unwrap_err();
        let rule = |error| match error {
            ThermalError::Input(InputError { rule, .. }) => rule,
            other => panic!("{other}"),
        };
        assert!(matches!(rule(refused(Entry::ShockSpeed, 250.0)), Rule::AboveSoundSpeed(sound) if (sound - 268.0).abs() < 1.0));
        assert_eq!(rule(refused(Entry::Mach, 1.0)), Rule::Above(1.0));
        assert_eq!(rule(refused(Entry::ReflectedTemperature, 295.0)), Rule::Above(295.0));
        assert_eq!(rule(refused(Entry::ReflectedPressure, 9e3)), Rule::Above(10e3));
        assert_eq!(rule(refused(Entry::ReflectedTemperature, 21_000.0)), Rule::HeatsBeyondData(200.0, 20_000.0));
        assert_eq!(refused(Entry::DensityRatio, 3.0), ThermalError::NotUnique(Parameter::DensityRatio));
        assert!(ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 10e3, 150.0).is_err());
    }

    #[test]
    fn every_output_is_narrow() {
        for species in table::ALL {
            let portions = pure(species);
            let gas = ThermallyPerfectGas::new(&portions).unwrap();
            for model in HeatCapacityModel::ALL {
                let temperature = if species.name == "HD" { 300.0 } else { 295.0 };
                let fill = ThermalFill::new(gas, model, 10e3, temperature).unwrap();
                for mach in [1.000_001, 1.01, 1.3, 2.0, 3.0, 4.0] {
                    // Propane and its like leave their data at no Mach number of these.
                    let shock = ThermalShock::new(&fill, Entry::Mach, mach).unwrap();
                    for output in Output::ALL {
                        let bounds = shock.output(output);
                        assert!(bounds.width_in_ulp() <= 2, "{} {model:?} {mach} {output:?} {bounds:?}", species.name);
                    }
                }
            }
        }
    }
}

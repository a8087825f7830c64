//! Boxes: the range of an output where entry, pressure and temperature of the fill are known within tolerances.

use super::certify::Problem;
use super::flow::{Ranges, ThermalFlow, reflected_stage};
use super::plain::{PlainFill, PlainRoots};
use super::shock::{ThermalFill, ThermalShock};
use super::stage::{GivenSpeed, GivenSpeedChange, ProvenStage, Stage, residual};
use crate::gas::HeatCapacity;
use crate::gas::species::EXTENSION;
use crate::number::{Ball, Dual, Enclosure, Known, Semifield, bounds};
use crate::shock::{Entry, Output};

/// Entry, p1 and T1.
const INPUTS: usize = 3;
type Variable = Dual<Enclosure, INPUTS>;

/// Widenings of an interval, at most, until it holds the compressions of a whole box.
const STEPS: u32 = 12;

impl ThermalFill<'_> {
    /// The range of an output over the box of the entry, p1 and T1.
    ///
    /// On a part of the box on which T1, T2 and T5 stay inside one polynomial each, compressions are enclosed by interval Newton over all of the part and
    /// slopes follow by the implicit function rule. A part that reaches across a joint gets the hull of what each polynomial gives: every one of them
    /// is a heat capacity for which the shock is unique, up to 2 % beyond its range (the check of a species asks for that), so that its root
    /// is the answer wherever the answer lies in its range.
    pub(super) fn range(&self, entry: Entry, value: Known, output: Output) -> Enclosure {
        let over = |variables: [Variable; INPUTS]| self.over_box(entry, &variables, output).unwrap_or(unknown(Enclosure::UNKNOWN));
        let point = |[value, pressure, temperature]: [Known; INPUTS]| {
            let shock = self.at(pressure, temperature).ok().and_then(|fill| ThermalShock::new(&fill, entry, value).ok());
            shock.map_or(Enclosure::UNKNOWN, |shock| shock.output(output))
        };
        let pressure = self.pressure().middle();
        let range = bounds([value, pressure, self.temperature()], over, point);
        // p1 is a factor of some outputs and none of the others know it.
        if is_proportional(output) { range * (self.pressure().enclosure() / pressure.enclosure()) } else { range }
    }

    /// One part of the box.
    fn over_box(&self, entry: Entry, inputs: &[Variable; INPUTS], output: Output) -> Option<Variable> {
        let [value, pressure, temperature] = *inputs;
        let fill = self.over_fill(pressure, temperature)?;
        let centre_fill = self.at(Known::from(pressure.value().middle()), Known::from(temperature.value().middle())).ok()?;
        let kelvin = temperature.value().middle();
        let setting = fill.setting(kelvin, Variable::whole(0));
        let centre_setting = centre_fill.setting(Ball::whole(0));
        let first = setting.incident.index_at(kelvin);
        let incident = setting.given(entry, value)?;
        let centre = centre_setting.given(entry, Ball::from(value.value().middle()))?;
        let part = Part { spread: inputs.map(|input| input.value() - Enclosure::from(input.value().middle())) };
        let incident = GivenSpeed { m: part.tight(incident.m, centre.m), m_excess: part.tight(incident.m_excess, centre.m_excess) };
        let plain = PlainRoots::new(&centre_setting.map(Ball::nearest), &centre.map(Ball::nearest))?;
        let [compression, reflected] = plain.compressions();
        let mut found: Option<Variable> = None;
        let ahead =
            Problem { stage: centre, heat_capacity: &centre_setting.incident, from: first, temperature: centre_setting.temperature };
        for side in
            part.solutions(&incident, &setting.incident, temperature, &ahead, compression, plain.ranges.second)?.into_iter().flatten()
        {
            let ranges = Ranges { second: side.to, ..plain.ranges };
            let ranges = if setting.lagging.is_some() { ranges } else { Ranges { ahead: side.to, ..ranges } };
            let (stage, _, closing_speed) = reflected_stage(&setting, &incident, ranges, side.compression);
            let (centre_stage, centre_behind, _) = reflected_stage(&centre_setting, &centre, ranges, side.centre);
            let stage = GivenSpeedChange { k: part.tight(stage.k, centre_stage.k), lag: part.tight(stage.lag, centre_stage.lag) };
            let behind = part.tight(temperature + temperature * side.excess, centre_behind);
            if setting.lagging.is_some() && setting.reflected.within_ends(ranges.ahead, behind.value()) != [true, true] {
                return None;
            }
            let wall =
                Problem { stage: centre_stage, heat_capacity: &centre_setting.reflected, from: ranges.ahead, temperature: centre_behind };
            for last in part.solutions(&stage, &setting.reflected, behind, &wall, reflected, plain.ranges.fifth)?.into_iter().flatten() {
                let both = [(side.compression, side.excess), (last.compression, last.excess)];
                let flow = ThermalFlow::from_parts(
                    &setting,
                    &incident,
                    &stage,
                    Ranges { fifth: last.to, ..ranges },
                    both,
                    (behind, closing_speed, last.mean),
                );
                let own = flow.evaluate(output);
                found = Some(found.map_or(own, |other| unknown(other.value().hull(own.value()))));
            }
        }
        found
    }

    /// The fill over a box; `None` where T1 reaches across a joint.
    fn over_fill(&self, pressure: Variable, temperature: Variable) -> Option<PlainFill<Variable>> {
        let balls = self.balls();
        let full = balls.full.map(Ball::enclosure);
        let bounds = temperature.value();
        let index = full.index_at(bounds.middle());
        let constant = |x: Ball| Variable::constant(x.enclosure());
        let frozen = self.gas().frozen_over(bounds);
        let slope = |own: Enclosure| frozen.1 * own;
        (full.within_ends(index, bounds) == [true, true]).then(|| PlainFill {
            model: balls.model,
            pressure,
            temperature,
            gas_constant: constant(balls.gas_constant),
            full: balls.full.map(constant),
            frozen: Variable::with_slopes(frozen.0, temperature.slopes().map(slope)),
        })
    }
}

/// True for the outputs that are proportional to p1.
const fn is_proportional(output: Output) -> bool {
    matches!(
        output,
        Output::Density1
            | Output::Pressure2
            | Output::PressureRise
            | Output::Density2
            | Output::Pressure5
            | Output::Step
            | Output::Density5
    )
}

/// A value of which no slope is known.
fn unknown(value: Enclosure) -> Variable {
    Variable::with_slopes(value, [Enclosure::UNKNOWN; INPUTS])
}

/// How far each input of a part reaches from its centre.
struct Part {
    spread: [Enclosure; INPUTS],
}

/// A shock over a part.
struct Side {
    compression: Variable,
    excess: Variable,
    mean: Variable,
    /// The compression at the centre.
    centre: Ball,
    to: usize,
}

impl Part {
    /// The sum of slopes times distances from the centre.
    fn spread_by(&self, slopes: [Enclosure; INPUTS]) -> Enclosure {
        slopes.into_iter().zip(self.spread).fold(Enclosure::whole(0), |sum, (slope, spread)| sum + slope * spread)
    }

    /// The same value with the mean-value form, value at the centre and slopes: a formula in which an input stands twice is wide.
    fn tight(&self, variable: Variable, centre: Ball) -> Variable {
        let form = centre.enclosure() + self.spread_by(variable.slopes());
        let value = variable.value().intersection(form).filter(|both| both.is_proven()).unwrap_or(variable.value());
        Variable::with_slopes(value, variable.slopes())
    }

    /// The shocks of all points of the part: with the polynomial of the centre, and with that of a neighbour where the temperature behind reaches across
    /// a joint. `None` where a proof fails.
    fn solutions<T: ProvenStage>(
        &self,
        stage: &(impl Stage<Variable> + Held),
        heat_capacity: &HeatCapacity<Variable>,
        temperature: Variable,
        centre: &Problem<'_, T>,
        approximate: f64,
        to: usize,
    ) -> Option<[Option<Side>; 2]> {
        let first = self.side(stage, heat_capacity, temperature, centre, approximate, to)?;
        let reached = |side: &Side| temperature.value() + temperature.value() * side.excess.value();
        let other = match heat_capacity.within_ends(to, reached(&first)) {
            [true, true] => return Some([Some(first), None]),
            [false, true] => to.checked_sub(1)?,
            [true, false] => Some(to + 1).filter(|next| *next < heat_capacity.len())?,
            // Across a whole range.
            [false, false] => return None,
        };
        let second = self.side(stage, heat_capacity, temperature, centre, approximate, other)?;
        let within = |side: &Side| {
            let [low, high] = heat_capacity.ends(side.to);
            let reached = reached(side);
            reached.low() >= low * (1.0 - EXTENSION) && reached.high() <= high * (1.0 + EXTENSION)
        };
        (within(&first) && within(&second)).then_some([Some(first), Some(second)])
    }

    /// One of them. If ε − F/F′(E), with all of the part in F and F′, lies inside E, it holds the one root in E for every point of the part.
    fn side<T: ProvenStage>(
        &self,
        stage: &(impl Stage<Variable> + Held),
        heat_capacity: &HeatCapacity<Variable>,
        temperature: Variable,
        centre: &Problem<'_, T>,
        approximate: f64,
        to: usize,
    ) -> Option<Side> {
        let from = centre.from;
        let root = centre.newton(approximate, to)?;
        let at = root.compression.enclosure();
        let ranges = [from, to];
        let known = Mean { temperature: centre.temperature.enclosure(), excess: root.excess.enclosure(), value: root.mean.enclosure() };
        let along = |e: Enclosure| {
            let fixed = Variable::constant(e);
            residual(stage, fixed, known.over(heat_capacity, ranges, temperature, stage.temperature_excess(fixed))).slopes()
        };
        let held = heat_capacity.map(|coefficient| Dual::<Enclosure, 1>::constant(coefficient.value()));
        let slope = |over: Enclosure| {
            let e = Dual::variable(over, 0);
            let held_stage = stage.held();
            let mean = known.over(&held, ranges, Dual::constant(temperature.value()), held_stage.temperature_excess(e));
            let [slope] = residual(&held_stage, e, mean).slopes();
            slope
        };
        // The residual at the compression of the centre is zero there, and elsewhere what its slopes make of the distance.
        let value = self.spread_by(along(at));
        let mut reach = 1.25 * (value / slope(at)).magnitude() + at.high() * 1e-15;
        for _ in 0..STEPS {
            // A reach that is not a number fails here.
            if reach >= 0.5 * at.low() || at.high() + reach >= 1.0 || reach.is_nan() {
                return None;
            }
            let around = Enclosure::new(at.low() - reach, at.high() + reach)?;
            let found = at - value / slope(around);
            if around.encloses_strictly(found) {
                let over = (at - value / slope(found)).intersection(found).filter(|both| both.is_proven())?;
                let [over_slope, slopes] = [[slope(over); INPUTS], along(over)];
                let mut own = slopes;
                for (slope, by_compression) in own.iter_mut().zip(over_slope) {
                    *slope = -(*slope / by_compression);
                }
                let compression = Variable::with_slopes(over, own);
                let excess = self.tight(stage.temperature_excess(compression), centre.stage.temperature_excess(root.compression));
                let mean = self.tight(known.over(heat_capacity, ranges, temperature, excess), root.mean);
                return Some(Side { compression, excess, mean, centre: root.compression, to });
            }
            reach = (1.25 * (found - at).magnitude()).max(1.5 * reach);
        }
        None
    }
}

/// A mean heat capacity that is known at one point of a box.
struct Mean {
    temperature: Enclosure,
    excess: Enclosure,
    value: Enclosure,
}

/// Pieces into which the temperatures between both ends are cut, for the range of T dc/dT.
const PIECES: u32 = 8;

impl Mean {
    /// The mean heat capacity over the box, with slopes. The polynomials evaluated over a wide interval are far too wide; what their slope T dc/dT takes
    /// on the way bounds both slopes of the mean,
    ///
    /// > T ∂c̄/∂T = mean of T dc/dT, ∂c̄/∂x = mean of s/(1 + sx)·T dc/dT over s from 0 to 1,
    ///
    /// to which the jumps of h at joints Tj add −ΣJ/(T x)·(1, 1/x), those of c, Δc, add Σ`Δc·Tj`/(T x) and Σ`Δc·(Tj/T − 1)`/x², and with the value at
    /// one point they bound the value. Narrow boxes get the polynomials' own bounds, where these are better.
    fn over<const N: usize>(
        &self,
        heat_capacity: &HeatCapacity<Dual<Enclosure, N>>,
        [from, to]: [usize; 2],
        temperature: Dual<Enclosure, N>,
        excess: Dual<Enclosure, N>,
    ) -> Dual<Enclosure, N> {
        let own = heat_capacity.mean(from, temperature, excess, to);
        let (t, x) = (temperature.value(), excess.value());
        let one = Enclosure::whole(1);
        let steepness = steepness(heat_capacity, [from, to], t.hull(t + t * x));
        let jumps = heat_capacity.jumps_between(from, to) / (t * x);
        let end = t + t * x;
        let [_, top] = heat_capacity.ends(from.min(to));
        let [bottom, _] = heat_capacity.ends(from.max(to));
        let (least, greatest) = if from <= to { (t, end) } else { (end, t) };
        if from != to && !(least.high() <= top && greatest.low() >= bottom) {
            // Over an extended polynomial the way runs back, and the bounds below do not hold.
            return own;
        }
        let kinks = heat_capacity.kinks_between(from, to);
        let (by_temperature, by_excess) = if from == to {
            (steepness / t, steepness * (one / (one + x)).hull(one) / Enclosure::whole(2))
        } else {
            (
                (steepness - jumps + kinks + kinks / x) / t,
                steepness * (one / (one + x)).hull(one) / Enclosure::whole(2) - jumps / x + kinks / x,
            )
        };
        let value = self.value + by_temperature * (t - self.temperature) + by_excess * (x - self.excess);
        let meet = |a: Enclosure, b: Enclosure| a.intersection(b).filter(|both| both.is_proven()).unwrap_or(a);
        let mut slopes = own.slopes();
        for ((slope, t), x) in slopes.iter_mut().zip(temperature.slopes()).zip(excess.slopes()) {
            *slope = meet(*slope, by_temperature * t + by_excess * x);
        }
        Dual::with_slopes(meet(own.value(), value), slopes)
    }
}

/// What T dc/dT takes between two temperatures, in the polynomials of the ranges from one to the other, each as far as the temperatures go.
fn steepness<const N: usize>(heat_capacity: &HeatCapacity<Dual<Enclosure, N>>, [from, to]: [usize; 2], between: Enclosure) -> Enclosure {
    let mut hull: Option<Enclosure> = None;
    let (first, last) = (from.min(to), from.max(to));
    for index in first..=last {
        let [low, high] = heat_capacity.ends(index);
        let bottom = if index == first { between.low() } else { between.low().max(low) };
        let top = if index == last { between.high() } else { between.high().min(high) };
        let Some(whole) = Enclosure::new(bottom, top) else { continue };
        let step = whole.width() / f64::from(PIECES);
        for piece in 0..PIECES {
            let start = bottom + step * f64::from(piece);
            let end = if piece + 1 == PIECES { top } else { (bottom + step * f64::from(piece + 1)).min(top) };
            let Some(part) = Enclosure::new(start.min(end), end) else { continue };
            let own = heat_capacity.scaled_slope(index, Dual::constant(part)).value();
            hull = Some(hull.map_or(own, |hull| hull.hull(own)));
        }
    }
    hull.unwrap_or(Enclosure::UNKNOWN)
}

/// A stage whose inputs are held at their values.
trait Held {
    /// The stage.
    fn held(&self) -> impl Stage<Dual<Enclosure, 1>>;
}

impl Held for GivenSpeed<Variable> {
    fn held(&self) -> impl Stage<Dual<Enclosure, 1>> {
        self.map(|x| Dual::constant(x.value()))
    }
}

impl Held for GivenSpeedChange<Variable> {
    fn held(&self) -> impl Stage<Dual<Enclosure, 1>> {
        self.map(|x| Dual::constant(x.value()))
    }
}

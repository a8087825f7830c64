//! Boxes: the range of an output where inputs are known within tolerances.

use super::direction::{Direction, FillInput, with_entry, with_fill, with_gamma};
use super::entry::{Entry, Problem};
use super::incident::Incident;
use super::output::{Flow, Output};
use super::relations::Jump;
use crate::gas::{Fill, Gamma};
use crate::number::{Dual, Enclosure, Known, Positive, Semifield, bounds};

impl Incident {
    /// The range of an output over the box of all inputs.
    pub(super) fn range(&self, output: Output) -> Enclosure {
        let [value, excess, pressure, temperature, molar_mass] = self.inputs().map(Known::enclosure);
        let problem = Problem { gamma: Gamma::from_excess(excess), pressure, temperature, molar_mass, entry: value };
        if let Some(direct) = problem.direct(self.entry().0, output) {
            return direct;
        }
        let slopes = |variables: [Dual<Enclosure, 5>; 5]| {
            let (problem, z) = self.over_box(variables);
            let jump = Jump::new(problem.gamma, z);
            let flow = Flow::new(jump, problem.gamma, problem.pressure, problem.temperature, problem.molar_mass);
            match (self.entry().0, output) {
                (_, Output::ShockFrameSpeed2) => flow.evaluate(Output::SoundSpeed1) * jump.narrow_shock_frame_speed(),
                (_, Output::ReflectedSpeed) => flow.evaluate(Output::SoundSpeed1) * jump.narrow_reflected_speed(),
                (_, Output::ReflectedSpeedRatio) => jump.narrow_reflected_speed(),
                (_, Output::Density5) => flow.evaluate(Output::Density1) * jump.narrow_reflected_density(),
                (_, Output::ReflectionCoefficient) => jump.narrow_reflection_coefficient(),
                (Entry::PressureRise, Output::Step) => problem.entry * jump.narrow_reflection_coefficient(),
                (Entry::PressureRise, Output::Pressure5) => problem.pressure + problem.entry * jump.narrow_reflection_coefficient(),
                (Entry::ReflectedPressure, Output::PressureRise) => {
                    (problem.entry - problem.pressure) / jump.narrow_reflection_coefficient()
                }
                (_, output) => flow.evaluate(output),
            }
        };
        self.range_of(output, slopes, |shock| shock.output(output))
    }

    /// The range of a function of the inputs that has the directions of `output`: at the ends of every input whose direction is proven by hand, by
    /// slopes and subdivision in the others, among them always γ.
    pub(super) fn range_of(
        &self,
        output: Output,
        slopes: impl Fn([Dual<Enclosure, 5>; 5]) -> Dual<Enclosure, 5>,
        point: impl Fn(&Self) -> Enclosure,
    ) -> Enclosure {
        let [value, gamma, pressure, temperature, molar_mass] = self.gathered(output);
        let gamma_high = self.fill().gas().heat_capacity_ratio().enclosure().high();
        let fill = |input| with_fill(self.entry().0, output, input, gamma_high);
        let ends = |upper: bool| {
            let at = |input: Known, direction: Option<Direction>| direction.map_or(input, |up| input.end((up == Direction::Up) == upper));
            let inputs = [
                at(value, with_entry(output)),
                at(gamma, with_gamma(self.entry().0, output)),
                at(pressure, fill(FillInput::Pressure)),
                at(temperature, fill(FillInput::Temperature)),
                at(molar_mass, fill(FillInput::MolarMass)),
            ];
            bounds(inputs, &slopes, |inputs| self.at(inputs).as_ref().map_or(Enclosure::UNKNOWN, &point))
        };
        let (lower, upper) = (ends(false), ends(true));
        Enclosure::ordered(lower.low(), upper.high()).marked(lower.quality().max(upper.quality()))
    }

    /// The inputs; where an output with a minimum knows a given speed and the fill only by v²·W/T1, all three tolerances as one, of the speed.
    fn gathered(&self, output: Output) -> [Known; 5] {
        let [value, gamma, pressure, temperature, molar_mass] = self.inputs();
        if output != Output::ReflectedSpeedRatio || !matches!(self.entry().0, Entry::ShockSpeed | Entry::GasSpeed) {
            return [value, gamma, pressure, temperature, molar_mass];
        }
        let (middle_t, middle_w) = (temperature.middle(), molar_mass.middle());
        let mass = molar_mass.enclosure() / middle_w.enclosure();
        let heat = middle_t.enclosure() / temperature.enclosure();
        [Known::Within(value.enclosure() * (mass * heat).sqrt()), gamma, pressure, middle_t, middle_w]
    }

    /// The problem and z over a box of inputs.
    pub(super) fn over_box<const N: usize>(&self, inputs: [Dual<Enclosure, N>; 5]) -> (Problem<Dual<Enclosure, N>>, Dual<Enclosure, N>) {
        let [entry, excess, pressure, temperature, molar_mass] = inputs;
        let problem = Problem { gamma: Gamma::from_excess(excess), pressure, temperature, molar_mass, entry };
        let entry = self.entry().0;
        let z = match entry {
            // Each input once; at a point the difference of the squares keeps more digits.
            Entry::ShockSpeed => problem.entry.squared() / problem.sound_speed_squared() - Dual::whole(1),
            _ => self.narrow_root(&problem, inputs).unwrap_or_else(|| problem.mach_squared_excess(entry, self.branch())),
        };
        (problem, z)
    }

    /// z as the root of f(γ, z) = x, where that is a quadratic: its formula is far too wide over a box.
    ///
    /// f increases with z, so two values of z at which f − x has proven opposite signs all over the box bracket every root. The slopes of z are those
    /// of x less ∂f/∂γ, over ∂f/∂z; the mean-value form with them narrows the bracket.
    fn narrow_root<const N: usize>(
        &self,
        problem: &Problem<Dual<Enclosure, N>>,
        inputs: [Dual<Enclosure, N>; 5],
    ) -> Option<Dual<Enclosure, N>> {
        let entry = self.entry().0;
        let excess = problem.relative_excess(entry);
        let gamma = problem.gamma.d;
        let forward = |z: Enclosure| Problem::forward_excess(entry, &Jump::new(Gamma::from_excess(gamma.value()), z));
        forward(Enclosure::from(1.0))?;
        let centre = self.at(inputs.map(|input| Known::from(input.value().middle())))?.z().enclosure();
        let bracket = |factor: f64| {
            let (low, high) = (centre.low() / factor, centre.high() * factor);
            let below = forward(Enclosure::from(low))?.certainly_less(excess.value());
            let above = excess.value().certainly_less(forward(Enclosure::from(high))?);
            (below && above).then_some(Enclosure::ordered(low, high))
        };
        let mut value = (1..=24).find_map(|n| bracket(1.0 + libm::scalbn(1.0, n - 16)))?;
        let mut slopes = excess.slopes();
        for _ in 0..3 {
            let jump = Jump::new(Gamma::from_excess(Dual::<Enclosure, 2>::variable(gamma.value(), 0)), Dual::variable(value, 1));
            let [by_gamma, by_z] = Problem::forward_excess(entry, &jump)?.slopes();
            slopes = excess.slopes();
            for (slope, gamma) in slopes.iter_mut().zip(gamma.slopes()) {
                *slope = (*slope - by_gamma * gamma) / by_z;
            }
            // Input number `at` is the one whose own slope is 1.
            let mut bound = centre;
            for (at, slope) in slopes.iter().enumerate() {
                let own = inputs.iter().find(|input| input.slopes().get(at).is_some_and(|own| own.low() == 1.0));
                bound = own.map_or(bound, |input| bound + *slope * (input.value() - Enclosure::from(input.value().middle())));
            }
            value = value.intersection(bound).filter(|value| value.is_proven()).unwrap_or(value);
        }
        Some(Dual::with_slopes(value, slopes))
    }

    /// The same shock at one point of the box.
    pub(super) fn at(&self, [value, excess, pressure, temperature, molar_mass]: [Known; 5]) -> Option<Self> {
        Some(self.with_inputs(Fill::at(excess, molar_mass, pressure, temperature)?, value))
    }
}

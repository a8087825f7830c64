//! Boxes: the range of an output where inputs are known within tolerances.

use super::direction::{Direction, FillInput, with_entry, with_fill};
use super::entry::Problem;
use super::incident::Incident;
use super::output::{Flow, Output};
use super::relations::Jump;
use crate::gas::{Fill, Gamma};
use crate::number::{Dual, Enclosure, Known, Signed, bounds};

impl Incident {
    /// The range of an output over the box of all inputs.
    pub(super) fn range(&self, output: Output) -> Enclosure {
        let slopes = |variables: [Dual<Enclosure, 5>; 5]| {
            let (problem, z) = self.over_box(variables);
            let jump = Jump::new(problem.gamma, z);
            Flow::new(jump, problem.gamma, problem.pressure, problem.temperature, problem.molar_mass).evaluate(output)
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
        let [value, gamma, pressure, temperature, molar_mass] = self.inputs();
        let gamma_high = self.fill().gas().heat_capacity_ratio().enclosure().high();
        let fill = |input| with_fill(self.entry().0, output, input, gamma_high);
        let ends = |upper: bool| {
            let at = |input: Known, direction: Option<Direction>| direction.map_or(input, |up| input.end((up == Direction::Up) == upper));
            let inputs = [
                at(value, with_entry(output)),
                gamma,
                at(pressure, fill(FillInput::Pressure)),
                at(temperature, fill(FillInput::Temperature)),
                at(molar_mass, fill(FillInput::MolarMass)),
            ];
            bounds(inputs, &slopes, |inputs| self.at(inputs).as_ref().map_or(Enclosure::UNKNOWN, &point))
        };
        let (lower, upper) = (ends(false), ends(true));
        Enclosure::ordered(lower.low(), upper.high()).marked(lower.quality().max(upper.quality()))
    }

    /// The problem and z over a box of inputs.
    pub(super) fn over_box<S: Signed>(&self, [entry, excess, pressure, temperature, molar_mass]: [S; 5]) -> (Problem<S>, S) {
        let problem = Problem { gamma: Gamma::from_excess(excess), pressure, temperature, molar_mass, entry };
        (problem, problem.mach_squared_excess(self.entry().0, self.branch()))
    }

    /// The same shock at one point of the box.
    pub(super) fn at(&self, [value, excess, pressure, temperature, molar_mass]: [Known; 5]) -> Option<Self> {
        Some(self.with_inputs(Fill::at(excess, molar_mass, pressure, temperature)?, value))
    }
}

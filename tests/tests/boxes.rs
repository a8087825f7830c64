//! Tolerances on every input at once: the range of each output holds every point of the box, and is hardly wider than the values that are
//! really reached, which are searched for at corners, on a grid, and from there along each input.

mod common;

use std::collections::BTreeMap;

use common::cases;
use endwall::gas::{Fill, Gamma, Gas, HeatCapacityRatio};
use endwall::number::{Enclosure, Known};
use endwall::shock::{Entry, Flow, Incident, Jump, Output, Problem, Wave};
use endwall_tests::random::Random;
use endwall_tests::tolerances::{BOX_OVER_WIDTH, BOX_PLAIN_ERROR};

/// Entry, γ, p1, T1, W.
type Point = [f64; 5];

/// An output at a point in plain arithmetic.
fn plain(entry: Entry, [value, gamma, pressure, temperature, molar_mass]: Point, output: Output) -> f64 {
    let problem = Problem { gamma: Gamma::from_excess(gamma - 1.0), pressure, temperature, molar_mass, entry: value };
    let z = problem.mach_squared_excess(entry, problem.branch(entry));
    Flow::new(Jump::new(problem.gamma, z), problem.gamma, pressure, temperature, molar_mass).evaluate(output)
}

/// A box: its ends in each input.
#[derive(Clone, Debug)]
struct Tolerance {
    entry: Entry,
    ends: [(f64, f64); 5],
}

impl Tolerance {
    /// Relative half-widths around a point.
    fn around(entry: Entry, middle: Point, relative: Point) -> Self {
        let ends = core::array::from_fn(|k| (middle[k] * (1.0 - relative[k]), middle[k] * (1.0 + relative[k])));
        Self { entry, ends }
    }

    fn shock(&self) -> Option<Incident> {
        let [value, gamma, pressure, temperature, molar_mass] =
            self.ends.map(|(low, high)| Known::from(Enclosure::new(low, high).expect("in order")));
        let gas = Gas::new(HeatCapacityRatio::new(gamma).ok()?, molar_mass).ok()?;
        Incident::new(&Fill::new(gas, pressure, temperature).ok()?, self.entry, value).ok()
    }

    /// The shock at an exact point.
    fn at(&self, [value, gamma, pressure, temperature, molar_mass]: Point) -> Option<Incident> {
        let gas = Gas::new(HeatCapacityRatio::new(gamma).ok()?, molar_mass).ok()?;
        Incident::new(&Fill::new(gas, pressure, temperature).ok()?, self.entry, value).ok()
    }

    fn inside(&self, share: [f64; 5]) -> Point {
        core::array::from_fn(|k| {
            let (low, high) = self.ends[k];
            (low + (high - low) * share[k]).clamp(low, high)
        })
    }

    /// Least and greatest value found of an output.
    fn search(&self, output: Output) -> (f64, f64) {
        let grid = (0..3u32.pow(5)).map(|mut place| {
            core::array::from_fn(|_| {
                let third = place % 3;
                place /= 3;
                0.5 * f64::from(third)
            })
        });
        let value = |share: [f64; 5]| plain(self.entry, self.inside(share), output);
        let mut best = [(f64::INFINITY, [0.5; 5]), (f64::INFINITY, [0.5; 5])];
        for share in grid {
            let found = value(share);
            for (best, found) in best.iter_mut().zip([found, -found]) {
                if found < best.0 {
                    *best = (found, share);
                }
            }
        }
        // From the best corners along each input in turn.
        for (best, sign) in best.iter_mut().zip([1.0, -1.0]) {
            for _ in 0..3 {
                for along in 0..5 {
                    for step in 0..=64 {
                        let mut share = best.1;
                        share[along] = f64::from(step) / 64.0;
                        let found = sign * value(share);
                        if found < best.0 {
                            *best = (found, share);
                        }
                    }
                }
            }
        }
        (best[0].0, -best[1].0)
    }
}

/// Largest over-width seen of each output, with the number of boxes, and what exceeds the promise.
#[derive(Default)]
struct Table {
    worst: BTreeMap<String, (f64, u32)>,
    broken: Vec<String>,
}

impl Table {
    /// Compares one output of one box with what the search finds.
    fn check(&mut self, column: &str, tolerance: &Tolerance, output: Output, found: Enclosure) {
        let (low, high) = tolerance.search(output);
        let slack = BOX_PLAIN_ERROR * low.abs().max(high.abs());
        if !(found.is_proven() && found.low() <= low + slack && high - slack <= found.high()) {
            self.broken.push(format!("{output:?} of {tolerance:?}: {found:?} misses what is reached, {low:e} to {high:e}"));
            return;
        }
        let reached = high - low;
        if reached <= 1e3 * slack {
            // Does not depend on the inputs, but for their last digits.
            let width = found.width();
            if width > 1e3 * slack {
                self.broken.push(format!("{output:?} of {tolerance:?}: {found:?} for the constant {low:e}"));
            }
            return;
        }
        let over = (found.width() - reached) / reached;
        let entry = self.worst.entry(format!("{:<30}{column}", format!("{output:?}"))).or_insert((0.0, 0));
        *entry = (entry.0.max(over), entry.1 + 1);
        if over > BOX_OVER_WIDTH {
            self.broken.push(format!("{output:?} of {tolerance:?}: {:.2} % too wide: {found:?} for {low:e} to {high:e}", 100.0 * over));
        }
    }

    fn finish(self) {
        for (name, (over, boxes)) in &self.worst {
            println!("{name}  {:8.4} % over {boxes} boxes", 100.0 * over);
        }
        let count = self.broken.len();
        self.broken.iter().take(40).for_each(|line| println!("BROKEN {line}"));
        assert!(count == 0, "{count} outputs break the promise, first: {}", self.broken[0]);
    }
}

/// A random box of an entry: γ of the trade, M from 1.3 to 8, the same relative tolerance on all but γ.
fn random_box(random: &mut Random, entry: Entry, tolerance: f64) -> Tolerance {
    let gamma = *random.pick(&[1.4, 5.0 / 3.0, 9.0 / 7.0, 1.1, 1.3]);
    let mach = random.between(1.3, 8.0);
    let middle = [mach, gamma, random.between(500.0, 1e5), random.between(250.0, 400.0), random.between(0.004, 0.1)];
    let value = if entry == Entry::Mach { mach } else { plain(Entry::Mach, middle, entry.output()) };
    // The ratio of heat capacities is known better than a pressure.
    let relative = [tolerance, 0.2 * tolerance, tolerance, tolerance, 0.3 * tolerance];
    Tolerance::around(entry, [value, middle[1], middle[2], middle[3], middle[4]], relative)
}

fn over_width(seed: u64, tolerances: &[f64], boxes: usize) {
    let mut random = Random::new(seed);
    let mut table = Table::default();
    let mut refused = 0;
    for _ in 0..cases(boxes, 50 * boxes) {
        for entry in Entry::ALL {
            let size = *random.pick(tolerances);
            let tolerance = random_box(&mut random, entry, size);
            // A tolerance that reaches down to no shock is refused, and rightly.
            let Some(shock) = tolerance.shock() else {
                refused += 1;
                continue;
            };
            for output in Output::ALL {
                table.check(&format!("± {} %", 100.0 * size), &tolerance, output, shock.output(output));
            }
        }
    }
    println!("{refused} boxes reach down to no shock");
    table.finish();
}

#[test]
fn realistic_tolerances_are_hardly_widened() {
    over_width(0xb0_0001, &[0.001, 0.005, 0.02, 0.05], 12);
}

#[test]
fn wide_tolerances_are_hardly_widened() {
    over_width(0xb0_0002, &[0.1, 0.2], 5);
}

#[test]
fn points_lie_in_their_box() {
    let mut random = Random::new(0xb0_0003);
    let mut points = 0;
    for _ in 0..cases(8, 800) {
        for entry in Entry::ALL {
            let size = *random.pick(&[0.001, 0.02, 0.1]);
            let tolerance = random_box(&mut random, entry, size);
            let Some(shock) = tolerance.shock() else { continue };
            let ranges = Output::ALL.map(|output| (output, shock.output(output)));
            for _ in 0..10 {
                let share = core::array::from_fn(|_| *random.pick(&[0.0, 0.5, 1.0, 0.123, 0.77]));
                let at = tolerance.at(tolerance.inside(share)).expect("a box of shocks");
                points += 1;
                for (output, range) in ranges {
                    let point = at.output(output);
                    // The truth lies in both: the whole point but for its last bit.
                    assert!(range.overlaps(point), "{output:?} of {tolerance:?} at {share:?}: {range:?} {point:?}");
                    assert!(range.contains(point.low()) || range.contains(point.high()));
                }
            }
        }
    }
    println!("{points} points");
}

/// p5/p1 falls and rises again with γ: its least value lies inside the range of γ.
#[test]
fn pressure_is_not_monotone_in_the_heat_capacity_ratio() {
    let mut table = Table::default();
    let mut inside = 0;
    for place in 0..40 {
        let mach = 1.1 + 0.2 * f64::from(place);
        for (low, high) in [(1.05, 1.67), (1.2, 1.5), (1.3, 1.4), (1.1, 2.5), (1.4, 3.0)] {
            let tolerance = Tolerance { entry: Entry::Mach, ends: [(mach, mach), (low, high), (1e4, 1e4), (300.0, 300.0), (0.028, 0.028)] };
            let shock = tolerance.shock().expect("a box of shocks");
            for output in [Output::ReflectedPressureRatio, Output::Pressure5, Output::Step, Output::ReflectionCoefficient] {
                table.check(&format!("γ {low} to {high}"), &tolerance, output, shock.output(output));
                let ends = [low, high].map(|gamma| plain(Entry::Mach, [mach, gamma, 1e4, 300.0, 0.028], output));
                let (least, greatest) = tolerance.search(output);
                let reach = 1e-6 * (greatest - least);
                inside += u32::from(least < ends[0].min(ends[1]) - reach || greatest > ends[0].max(ends[1]) + reach);
            }
        }
    }
    println!("{inside} ranges with an extreme value inside");
    assert!(inside > 0, "the test shows nothing");
    table.finish();
}

/// T5 at a fixed shock speed rises with T1 except near M 1 for γ about 5/3.
#[test]
fn end_wall_temperature_is_not_monotone_in_the_fill_temperature() {
    let mut table = Table::default();
    let mut inside = 0;
    for gamma in [1.6, 5.0 / 3.0, 1.7, 1.8, 2.0, 2.5] {
        let sound = (gamma * 8.314_462_618 / 0.039_948 * 300.0f64).sqrt();
        for place in 1..30 {
            let speed = sound * (1.02 + 0.03 * f64::from(place));
            for half_width in [0.5, 3.0, 10.0, 30.0] {
                let ends = [(speed, speed), (gamma, gamma), (1e4, 1e4), (300.0 - half_width, 300.0 + half_width), (0.039_948, 0.039_948)];
                let tolerance = Tolerance { entry: Entry::ShockSpeed, ends };
                let Some(shock) = tolerance.shock() else { continue };
                for output in [Output::Temperature5, Output::SoundSpeed5, Output::Temperature2] {
                    table.check(&format!("T1 ± {half_width} K"), &tolerance, output, shock.output(output));
                }
                let (least, greatest) = tolerance.search(Output::Temperature5);
                let ends = [-half_width, half_width]
                    .map(|by| plain(Entry::ShockSpeed, [speed, gamma, 1e4, 300.0 + by, 0.039_948], Output::Temperature5));
                let reach = 1e-6 * (greatest - least);
                inside += u32::from(least < ends[0].min(ends[1]) - reach || greatest > ends[0].max(ends[1]) + reach);
            }
        }
    }
    println!("{inside} ranges with an extreme value inside");
    assert!(inside > 0, "the test shows nothing");
    table.finish();
}

/// Moving wall and total pressure take tolerances too.
#[test]
fn walls_and_total_pressure_hold_their_points() {
    let mut random = Random::new(0xb0_0004);
    for _ in 0..cases(40, 4_000) {
        let tolerance = random_box(&mut random, Entry::ShockSpeed, 0.01);
        let Some(shock) = tolerance.shock() else { continue };
        let gas_speed = shock.output(Output::GasSpeed2).middle();
        let (low, high) = *random.pick(&[(0.0, 0.05), (0.3, 0.32), (1.5, 1.6), (-0.5, -0.4)]);
        let wall = Enclosure::new(low * gas_speed, high * gas_speed).expect("in order");
        let range = shock.reflected_from_wall(wall).expect("a finite speed");
        let (ratio, loss) = (shock.total_pressure_ratio(), shock.total_pressure_loss());
        assert!(ratio.is_proven() && loss.is_proven());
        for _ in 0..4 {
            let point = tolerance.at(tolerance.inside(core::array::from_fn(|_| random.unit()))).expect("a box of shocks");
            let at = point.reflected_from_wall(wall.low() + random.unit() * wall.width() * 0.999).expect("a finite speed");
            assert!(at.wave == range.wave || range.wave == Wave::Weak);
            for (range, at) in [
                (range.state.pressure, at.state.pressure),
                (range.state.temperature, at.state.temperature),
                (range.state.density, at.state.density),
                (range.state.sound_speed, at.state.sound_speed),
                (range.front_speed, at.front_speed),
                (range.mach, at.mach),
                (ratio, point.total_pressure_ratio()),
                (loss, point.total_pressure_loss()),
            ] {
                assert!(range.encloses(at), "{tolerance:?}: {range:?} {at:?}");
            }
        }
    }
}

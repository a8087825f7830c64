//! Every enclosure of a shock into a thermally perfect gas against the oracle: the truth lies inside, the width is what is promised, and what is refused
//! has no answer, or none that is unique.
//!
//! Cases: listed, edges of the data and of its joints, weakest shocks, random with a printed seed. `ENDWALL_LONG=1` runs a hundred times as many.

mod common;

use std::collections::BTreeMap;

use common::thermal::{
    Place, ThermalCase, air, is_beyond_data, is_subsonic, names, place, portions as portions_of, pure, random_case, thermal_truth,
};
use common::{cases, decimal, truth};
use dashu_base::Abs;
use endwall::gas::{HeatCapacityModel, Rule, ThermallyPerfectGas};
use endwall::shock::{Entry, Output, ThermalError, ThermalFill};
use endwall_tests::oracle::thermal::{ThermalAnswer, ThermalRefusal, ThermalShot};
use endwall_tests::oracle::{Float, Histogram, RBig, Real, float, parse, ratio};
use endwall_tests::random::{Input, Random};
use endwall_tests::tolerances::{ALGEBRAIC_AT_ONE_ULP, ALGEBRAIC_WIDTH, JOINT_SIDE, NEAR_A_DOUBLE, ORACLE_SELF};

/// The exact answer; of what is given, the input.
fn truth_of(case: &ThermalCase, output: Output, shot: &ThermalShot) -> Real {
    if output == case.entry.output() { Real::Rational(case.value.exact()) } else { thermal_truth(output, shot) }
}

/// What was seen.
#[derive(Default)]
struct Checked {
    widths: Histogram,
    broken: BTreeMap<String, (u64, String)>,
    /// How often something happened that is not an answer of one or two ulp.
    counts: BTreeMap<&'static str, u64>,
}

impl Checked {
    fn fail(&mut self, name: &str, example: impl FnOnce() -> String) {
        let entry = self.broken.entry(name.to_owned()).or_insert_with(|| (0, example()));
        entry.0 += 1;
    }

    fn count(&mut self, what: &'static str) {
        *self.counts.entry(what).or_default() += 1;
    }

    /// One case.
    fn case(&mut self, case: &ThermalCase, closely: bool) {
        let truth = case.truth(closely);
        case.solve(|found| match (found, truth) {
            (Ok(found), Ok(truth)) if !truth.shots.is_empty() => {
                self.count("answered");
                if truth.shots.len() > 1 {
                    self.count("answered where the data jump");
                }
                for output in Output::ALL {
                    self.output(case, output, found.output(output), found.nearest(output), &truth);
                }
            }
            (Err(error), Err(ThermalRefusal::BeyondData2 | ThermalRefusal::BeyondData5)) if is_beyond_data(error) => {
                self.count("beyond the data, both agree");
            }
            (Err(error), Err(ThermalRefusal::Subsonic)) if is_subsonic(error) => self.count("not faster than sound, both agree"),
            // The jump of the enthalpy outweighs a shock this weak, and plain digits do not find it: a refusal is safe.
            (Err(ThermalError::Existence { .. }), _) if fill_at_joint(case) => self.count("weakest shocks beside a joint, refused"),
            (Err(ThermalError::Uniqueness { .. } | ThermalError::Existence { .. }), truth) => {
                // Refused with good reason: several solutions, or none.
                let again = if closely { truth } else { case.truth(true) };
                if again.as_ref().is_ok_and(|truth| truth.shots.len() == 1 && !truth.supersonic) {
                    self.fail("refused as not unique", || format!("{case:?}"));
                }
                self.count("not unique, both agree");
            }
            (found, truth) => {
                let (found, truth) = (found.map(|_| "an answer"), truth.map(|truth| truth.shots.len()));
                self.fail("refusals differ", || format!("{found:?}, oracle {truth:?}, {case:?}"));
            }
        });
    }

    fn output(&mut self, case: &ThermalCase, output: Output, found: endwall::number::Enclosure, nearest: f64, truth: &ThermalAnswer) {
        let name = format!("{output:?}");
        for shot in &truth.shots {
            let truth = truth_of(case, output, shot);
            match place(found, &truth) {
                Place::Inside => {}
                Place::AtAnEnd => self.count("outputs that are a double"),
                Place::Outside => {
                    self.fail(&name, || format!("{found:?} for {:e} in {case:?}", truth.to_f64()));
                }
            }
        }
        if !(found.is_proven() && found.contains(nearest)) {
            self.fail(&format!("{name} nearest"), || format!("{nearest:e} {found:?} in {case:?}"));
        }
        // Where the data jump the hull of several answers is as wide as they are apart.
        if let [shot] = &truth.shots[..] {
            if found.width_in_ulp() > ALGEBRAIC_WIDTH && (truth.supersonic || at_joint(case, shot)) {
                self.count("wide outputs of fills or states at a joint");
                return;
            }
            let width = found.width_in_ulp();
            // An answer nearer to a double than a ball can tell leaves both neighbours of that double.
            let near = width == ALGEBRAIC_WIDTH && {
                let truth = truth_of(case, output, shot);
                truth.relative_difference(&Real::from_f64(found.low().next_up())) < NEAR_A_DOUBLE
            };
            let name = if near { "answers that are a double" } else { name.as_str() };
            self.widths.record(name, width);
            if width > ALGEBRAIC_WIDTH {
                self.fail(&format!("{name} width"), || format!("{width} ulp in {case:?}"));
            }
        }
    }

    /// Prints what was seen. `share` of each output has to be at one ulp or less.
    fn finish(mut self, share: f64) {
        println!("{:?}\n{}", self.counts, self.widths);
        for output in Output::ALL {
            let name = format!("{output:?}");
            let seen = self.widths.share_within(&name, 1);
            if seen < share {
                self.fail(&name, || format!("only {seen} at one ulp"));
            }
        }
        let report: Vec<_> = self.broken.iter().map(|(name, (count, example))| format!("{name}: {count}, first {example}")).collect();
        assert!(report.is_empty(), "{} kinds of failure:\n{}", report.len(), report.join("\n"));
        assert!(self.counts.get("answered").is_some_and(|count| *count > 0), "nothing was checked");
    }
}

/// Whether T1 is within 1e-4 K of a joint of the data.
fn fill_at_joint(case: &ThermalCase) -> bool {
    let problem = case.problem(false);
    let near = |joint: &RBig| (problem.temperature.to_f64().value() - joint.to_f64().value()).abs() < 1e-4;
    problem.gas.ranges().iter().skip(1).any(|range| near(&range.low))
}

/// Whether T2 or T5 is so near a joint of the data that a ball cannot tell the side.
fn at_joint(case: &ThermalCase, shot: &ThermalShot) -> bool {
    let gas = case.problem(false).gas;
    let near = |t: &Real, joint: &RBig| t.relative_difference(&Real::Rational(joint.clone())) < JOINT_SIDE;
    gas.ranges().iter().skip(1).any(|range| shot.states[1..].iter().any(|state| near(&state.temperature, &range.low)))
}

fn random_cases(seed: u64) {
    let mut random = Random::new(seed);
    let mut checked = Checked::default();
    for _ in 0..cases(2_500, 250_000) {
        checked.case(&random_case(&mut random), false);
    }
    checked.finish(ALGEBRAIC_AT_ONE_ULP);
}

// 10 000 (a long run: 10⁶) in four parts, which run side by side. The oracle takes 5 ms for one.

#[test]
fn random_shocks_lie_inside() {
    random_cases(0xe4d_2001);
}

#[test]
fn more_random_shocks_lie_inside() {
    random_cases(0xe4d_2002);
}

#[test]
fn still_more_random_shocks_lie_inside() {
    random_cases(0xe4d_2003);
}

#[test]
fn the_last_random_shocks_lie_inside() {
    random_cases(0xe4d_2004);
}

/// A decimal of so many digits.
fn typed(value: &Float) -> Input {
    Input::Decimal(decimal(&Real::Approximate { value: value.clone(), bits: 260 }, 32))
}

fn case(portions: &[(&'static str, String)], model: HeatCapacityModel, temperature: &str, entry: Entry, value: Input) -> ThermalCase {
    let [pressure, temperature] = ["10000", temperature].map(|text| Input::Decimal(text.to_owned()));
    ThermalCase { portions: portions.to_vec(), model, pressure, temperature, entry, value }
}

/// ± 10⁻³ K to 10⁻¹² K beside a joint, and the joint.
fn beside(joint: &str) -> Vec<RBig> {
    let joint = parse(joint);
    let mut all = vec![joint.clone()];
    for power in 3..=12 {
        let distance = parse(&format!("1e-{power}"));
        all.extend([&joint - &distance, &joint + distance]);
    }
    all
}

/// The first ones, or all in a long run.
fn some<T>(mut all: Vec<T>, usual: usize) -> Vec<T> {
    all.truncate(cases(usual, all.len()));
    all
}

/// Gases with data beyond 6000 K and with joints, whose jumps of the enthalpy have either sign.
fn jumping() -> Vec<Vec<(&'static str, String)>> {
    let mut all = vec![air()];
    all.extend(["CO2", "Ar", "N2", "Kr", "O2", "H2", "NO"].map(pure));
    some(all, 4)
}

#[test]
fn temperatures_2_beside_joints_of_the_data() {
    let mut checked = Checked::default();
    for portions in jumping() {
        for (joint, fill) in some(vec![("1000", "295"), ("6000", "900"), ("1000", "990")], 2) {
            for wanted in beside(joint) {
                let mut case = case(&portions, HeatCapacityModel::Equilibrium, fill, Entry::Mach, Input::Double(2.0));
                case.value = typed(&case.problem(true).mach_for_temperature_2(&wanted));
                checked.case(&case, true);
            }
        }
    }
    checked.finish(0.0);
}

/// M behind whose reflected shock the gas has a temperature: the secant method on the oracle.
fn mach_for_temperature_5(case: &ThermalCase, wanted: &RBig) -> Input {
    let problem = case.problem(false);
    let wanted = float(wanted, 400);
    let miss = |mach: &RBig| {
        let answer = problem.at_mach(mach).expect("data beyond the joint");
        answer.shots[0].states[2].temperature.to_float(400).0 - &wanted
    };
    // Start where constant heat capacity would.
    let (mut old, mut new) = (parse("1.9"), parse("2"));
    let mut old_miss = miss(&old);
    for _ in 0..12 {
        let value = miss(&new);
        let step = &value * float(&(&new - &old), 400) / (&value - &old_miss);
        let Input::Decimal(text) = typed(&(float(&new, 400) - &step)) else { unreachable!("a decimal") };
        let next = parse(&text);
        if next == new || step.clone().abs() < float(&parse("1e-28"), 100) {
            return Input::Decimal(text);
        }
        (old, old_miss, new) = (new, value, next);
    }
    // Across the jump of a joint there may be none: as near as the steps came, but not so near that the sides of the joint cannot be told apart.
    typed(&(float(&new, 400) * float(&parse("1.00000000000000000001"), 400)))
}

#[test]
fn temperatures_5_beside_joints_of_the_data() {
    let mut checked = Checked::default();
    for portions in jumping() {
        for model in [HeatCapacityModel::Equilibrium, HeatCapacityModel::FrozenThenEquilibrium] {
            for wanted in beside("1000").into_iter().step_by(2) {
                let mut case = case(&portions, model, "295", Entry::Mach, Input::Double(2.0));
                case.value = mach_for_temperature_5(&case, &wanted);
                checked.case(&case, true);
            }
        }
    }
    checked.finish(0.0);
}

#[test]
fn fills_beside_joints_of_the_data() {
    let mut checked = Checked::default();
    let temperatures = ["1000", "999.9999999999", "1000.0000000001", "999.99999", "1000.00001", "999.999", "1000.001", "999.5", "1000.5"];
    for portions in jumping() {
        for model in HeatCapacityModel::ALL {
            for temperature in temperatures {
                for excess in some(vec![1e-6, 1e-4, 1.0, 0.01, 2.0], 3) {
                    checked.case(&case(&portions, model, temperature, Entry::MachExcess, Input::Double(excess)), true);
                }
            }
        }
    }
    checked.finish(0.0);
}

#[test]
fn weakest_shocks_and_all_species() {
    let mut checked = Checked::default();
    for name in names() {
        let portions = pure(name);
        for model in HeatCapacityModel::ALL {
            for temperature in some(vec!["298.15", "300", "650.5"], 1) {
                for excess in some(vec![1e-9, 1e-7, 1e-5, 0.5, 2.5, 9.0, 1e-8, 1e-6, 1e-3, 1.0], 6) {
                    checked.case(&case(&portions, model, temperature, Entry::MachExcess, Input::Double(excess)), false);
                }
            }
        }
    }
    checked.finish(ALGEBRAIC_AT_ONE_ULP);
}

#[test]
fn fills_at_the_ends_of_the_data() {
    let refused = |portions: &[(&'static str, String)], temperature: f64| {
        let portions = portions_of(portions);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        let fill = ThermalFill::new(gas, HeatCapacityModel::Equilibrium, 1e4, temperature);
        fill.is_err_and(|error| matches!(error.rule, Rule::DataRange(..)))
    };
    let mixed = [("HD", "0.01"), ("He", "0.99")].map(|(name, x)| (name, x.to_owned()));
    let mut checked = Checked::default();
    for portions in [pure("HD"), mixed.to_vec()] {
        assert!(refused(&portions, 298.15f64.next_down()) && !refused(&portions, 298.15));
        for model in HeatCapacityModel::ALL {
            for excess in [1e-5, 0.1, 1.0, 3.0] {
                checked.case(&case(&portions, model, "298.15", Entry::MachExcess, Input::Double(excess)), false);
            }
        }
    }
    for portions in [pure("N2"), pure("SF6"), air()] {
        assert!(refused(&portions, 200f64.next_down()) && !refused(&portions, 200.0));
        for model in HeatCapacityModel::ALL {
            for excess in [1e-5, 0.1, 1.0, 3.0] {
                checked.case(&case(&portions, model, "200", Entry::MachExcess, Input::Double(excess)), false);
            }
        }
    }
    checked.finish(0.0);
}

/// The oracle agrees with itself in more digits than it claims, and with the closed forms where heat capacity is constant.
#[test]
fn the_oracle_agrees_with_the_closed_forms() {
    for (name, gamma) in [("He", ratio(5, 3)), ("N2", ratio(7, 5))] {
        let case = case(&pure(name), HeatCapacityModel::Frozen, "295", Entry::MachExcess, Input::Double(0.0));
        for excess in ["1e-9", "1e-4", "0.5", "2", "9"] {
            let mach = parse(excess) + RBig::ONE;
            let problem = case.problem(true);
            let answer = problem.at_mach(&mach).expect("a shock");
            let [shot] = &answer.shots[..] else { panic!("{} shots", answer.shots.len()) };
            let fill = endwall_tests::oracle::Fill {
                heat_capacity_ratio: gamma.clone(),
                molar_mass: problem.gas.molar_mass(),
                pressure: problem.pressure.clone(),
                temperature: problem.temperature.clone(),
            };
            let closed = fill.shot(&Real::Rational(mach));
            for output in Output::ALL {
                let difference = thermal_truth(output, shot).relative_difference(&truth(output, &closed));
                assert!(difference < ORACLE_SELF, "{name} {excess} {output:?}: {difference:e}");
            }
        }
    }
}

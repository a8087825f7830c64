//! Every enclosure of the library against the oracle: the truth lies inside, and the width is what is promised.
//!
//! Cases: listed, edges, evenly spaced, random with a printed seed. `ENDWALL_LONG=1` runs a hundred times as many.

mod common;

use core::cmp::Ordering;
use core::fmt::Debug;
use std::collections::BTreeMap;

use common::{Filled, cases, decimal, fill, heat_capacity_ratio, holds, is_optimal, random_fill, rational, repeated, truth};
use endwall::gas::{Gas, Rule};
use endwall::number::{Ball, Elementary, Enclosure, Rational};
use endwall::shock::{Entry, Incident, MovingShock, Output, Ratios, Wave};
use endwall_tests::oracle::{
    self, Histogram, Known, RBig, Real, compare_mach, compare_mach_excess, elementary, exact, incident, mach_from, power_of_two, ratio,
    reflected,
};
use endwall_tests::random::{Case, Input, Random, edges, evenly_spaced, extreme_strengths, listed, random};
use endwall_tests::tolerances::{ALGEBRAIC_AT_ONE_ULP, ALGEBRAIC_WIDTH, NEAR_A_DOUBLE};

/// The usual number of cases here is 10^5, the long one 10^7; each check has its share.
const LONG: usize = 100;

/// Listed, edges, evenly spaced, then random ones up to `usual` (or a hundred times as many).
fn all_cases(seed: u64, usual: usize) -> Box<dyn Iterator<Item = Case>> {
    let count = cases(usual, LONG * usual);
    let given: Vec<_> = listed().into_iter().chain(edges()).chain(evenly_spaced(12)).collect();
    Box::new(given.into_iter().chain(random(seed)).take(count))
}

/// A shuffled part of the same, for checks with fewer cases.
fn some_cases(seed: u64, usual: usize) -> Vec<Case> {
    let count = cases(usual, LONG * usual);
    let mut given: Vec<_> = listed().into_iter().chain(edges()).chain(evenly_spaced(12)).collect();
    let mut shuffle = Random::new(seed);
    for last in (1..given.len()).rev() {
        given.swap(last, usize::try_from(shuffle.below(last as u64 + 1)).expect("small"));
    }
    given.truncate(count / 4);
    let rest = count - given.len();
    given.into_iter().chain(random(seed).take(rest)).collect()
}

fn strength(case: &Case) -> RBig {
    case.mach_excess.exact()
}

fn in_domain(excess: &RBig) -> bool {
    *excess >= power_of_two(-200) && *excess <= power_of_two(64)
}

/// Widths of all enclosures by name, and what broke its promise: all of it is shown, not the first.
#[derive(Default)]
struct Checked {
    widths: Histogram,
    /// Number of failures and one example, by name.
    broken: BTreeMap<String, (u64, String)>,
    count: u64,
}

impl Checked {
    fn fail(&mut self, name: &str, example: impl FnOnce() -> String) {
        let entry = self.broken.entry(name.to_owned()).or_insert_with(|| (0, example()));
        entry.0 += 1;
    }

    /// The best enclosure: the truth, or its two neighbours.
    fn optimal(&mut self, name: &str, found: Enclosure, truth: &Real, case: &dyn Debug) {
        if !(found.is_proven() && is_optimal(found, truth)) {
            self.fail(name, || format!("{found:?} for {:e} in {case:?}", truth.to_f64()));
        }
        self.widths.record(name, found.width_in_ulp());
    }

    /// The truth inside, one ulp; two only where the truth is so near to the double between that no ball can tell.
    fn contained(&mut self, name: &str, found: Enclosure, truth: &Real, case: &dyn Debug) {
        let width = found.width_in_ulp();
        let near = || truth.relative_difference(&Real::from_f64(found.low().next_up())) < NEAR_A_DOUBLE;
        if !(found.is_proven() && holds(found, truth) && (width < ALGEBRAIC_WIDTH || width == ALGEBRAIC_WIDTH && near())) {
            self.fail(name, || format!("{width} ulp, {found:?} for {:e} in {case:?}", truth.to_f64()));
        }
        self.widths.record(name, width);
    }

    /// An answer below 2⁻⁹³⁶, which is documented to come as an enclosure from 0 to a little above that.
    fn vanishing(&mut self, name: &str, found: Enclosure, truth: &Real, case: &dyn Debug) {
        let limit = f64::from_bits((1023 - 936) << 52);
        let documented = found.low() == 0.0 && found.high() >= limit && found.high() < limit * (1.0 + 1e-12);
        if !(found.is_proven() && documented && holds(found, truth)) {
            self.fail(name, || format!("{found:?} for {:e} in {case:?}", truth.to_f64()));
        }
        self.widths.record(name, found.width_in_ulp());
    }

    /// Prints the widths; at least the promised share of these names is at one ulp or less.
    fn finish(mut self, names: &[String]) {
        println!("{} cases\n{}", self.count, self.widths);
        for name in names {
            let share = self.widths.share_within(name, 1);
            if share < ALGEBRAIC_AT_ONE_ULP {
                self.fail(name, || format!("only {share} at one ulp"));
            }
        }
        let report: Vec<_> =
            self.broken.iter().map(|(name, (count, example))| format!("{name}: {count} of the cases, first {example}")).collect();
        assert!(report.is_empty(), "{} kinds of failure:\n{}", report.len(), report.join("\n"));
    }
}

fn names<const N: usize>(names: [&str; N]) -> [String; N] {
    names.map(str::to_owned)
}

#[test]
fn nine_ratios_are_optimal() {
    let mut checked = Checked::default();
    for case in all_cases(0xe4d_1001, 40_000) {
        let Some(gamma) = heat_capacity_ratio(&case.heat_capacity_ratio) else { continue };
        // The fast path takes M − 1 as a double.
        let excess = case.mach_excess.to_f64();
        let Some(small) = gamma.small() else {
            continue;
        };
        let Some(found) = Ratios::from_mach_excess(small, excess) else {
            assert!(!in_domain(&exact(excess)), "{case:?} refused");
            continue;
        };
        let gamma = case.heat_capacity_ratio.exact();
        let ahead = incident(&gamma, &Real::Rational(exact(excess) + RBig::ONE));
        let back = reflected(&gamma, &ahead);
        for (name, found, truth) in [
            ("p2/p1", found.pressure, &ahead.pressure),
            ("T2/T1", found.temperature, &ahead.temperature),
            ("ρ2/ρ1", found.density, &ahead.density),
            ("u2/a1", found.gas_speed, &ahead.gas_speed),
            ("M_R", found.reflected_mach, back.mach.as_ref().expect("a shock")),
            ("p5/p1", found.reflected_pressure, &back.pressure),
            ("T5/T1", found.reflected_temperature, &back.temperature),
            ("ρ5/ρ1", found.reflected_density, &back.density),
            ("U_R/a1", found.reflected_speed, &back.speed),
        ] {
            checked.optimal(name, found, truth, &case);
        }
        if excess > 2f64.powi(-52) && excess < 1e15 && 1.0 + excess - 1.0 == excess {
            let again = Ratios::from_mach(heat_capacity_ratio(&case.heat_capacity_ratio).expect("seen"), 1.0 + excess);
            assert_eq!(again, Ok(found), "{case:?}");
        }
        checked.count += 1;
    }
    checked.finish(&[]);
}

const RATIONAL: [Entry; 6] =
    [Entry::Mach, Entry::MachExcess, Entry::ShockSpeed, Entry::PressureRatio, Entry::PressureRise, Entry::DensityRatio];

/// The true M for an exact value of a rational entry, by the textbook relations solved for M²; `None` where no shock has it.
fn mach_of(entry: Entry, filled: &Filled, value: &RBig) -> Option<Real> {
    let gamma = &filled.oracle.heat_capacity_ratio;
    let one = RBig::ONE;
    let from_pressure = |p: RBig| ((p * (gamma + &one)) + gamma - &one) / (RBig::from(2) * gamma);
    let squared = match entry {
        Entry::Mach => return (*value > one).then(|| Real::Rational(value.clone())),
        Entry::MachExcess => return Some(Real::Rational(value + &one)),
        Entry::ShockSpeed => value * value / filled.oracle.sound_speed_squared(),
        Entry::PressureRatio => from_pressure(value.clone()),
        Entry::PressureRise => from_pressure(value / &filled.oracle.pressure + &one),
        Entry::DensityRatio => {
            let below = gamma + &one - (gamma - &one) * value;
            if below <= RBig::ZERO {
                return None;
            }
            RBig::from(2) * value / below
        }
        _ => unreachable!("not a rational entry"),
    };
    (squared > one).then(|| Real::Rational(squared).sqrt())
}

/// The value of an entry at this strength, cut to a typed decimal or rounded to a double.
fn typed(random: &mut Random, value: &Real) -> Input {
    let text = match random.below(4) {
        0 => return Input::Double(value.to_f64()),
        1 => decimal(value, 4 + i32::try_from(random.below(5)).expect("small")),
        2 => decimal(value, 17),
        _ => decimal(value, 24),
    };
    // Beyond 38 digits a decimal is refused as text.
    if text.parse::<Rational>().is_ok() { Input::Decimal(text) } else { Input::Double(value.to_f64()) }
}

/// `M − 1` is in the domain and M is above one, by the oracle.
fn is_shock(mach: Option<&Real>) -> bool {
    mach.is_some_and(|mach| {
        let excess = mach - Real::int(1);
        excess.cmp_rational(&power_of_two(-200)) != Ordering::Less && excess.cmp_rational(&power_of_two(64)) != Ordering::Greater
    })
}

/// All outputs of one rational case.
fn check_rational(checked: &mut Checked, filled: &Filled, entry: Entry, value: &Input, case: &dyn Debug) -> bool {
    let mach = mach_of(entry, filled, &value.exact());
    let built = Incident::new(&filled.fill, entry, rational(value));
    assert_eq!(built.is_ok(), is_shock(mach.as_ref()), "{entry:?} {value:?} {filled:?}: {built:?}");
    let (Ok(shock), Some(mach)) = (built, mach) else { return false };
    let shot = filled.oracle.shot(&mach);
    for output in Output::ALL {
        checked.optimal(&format!("{output:?}"), shock.output(output), &truth(output, &shot), &(entry, value, filled, case));
    }
    for (state, truth) in [(shock.state_1(), &shot.state_1), (shock.state_2(), &shot.state_2), (shock.state_5(), &shot.state_5)] {
        for (found, truth) in [
            (state.pressure, &truth.pressure),
            (state.temperature, &truth.temperature),
            (state.density, &truth.density),
            (state.sound_speed, &truth.sound_speed),
            (state.gas_speed, &truth.gas_speed),
        ] {
            assert!(is_optimal(found, truth), "{entry:?} {value:?} {filled:?}: {found:?}");
        }
    }
    true
}

fn rational_entries(seed: u64, usual: usize) {
    let mut checked = Checked::default();
    let mut random = Random::new(seed);
    for case in some_cases(seed, usual) {
        let Some(filled) = random_fill(&mut random, &case.heat_capacity_ratio) else { continue };
        if !in_domain(&strength(&case)) {
            continue;
        }
        let entry = *random.pick(&RATIONAL);
        let value = match entry {
            // As it is: these cases hold the powers of two and the ratios.
            Entry::MachExcess => case.mach_excess.clone(),
            _ => typed(&mut random, &repeated(entry, &filled.oracle.shot(&Real::Rational(case.mach())))),
        };
        checked.count += u64::from(check_rational(&mut checked, &filled, entry, &value, &case));
    }
    checked.finish(&[]);
}

#[test]
fn outputs_of_rational_entries_are_optimal() {
    rational_entries(0xe4d_1002, 20_000);
}

#[test]
fn outputs_of_more_rational_entries_are_optimal() {
    rational_entries(0xe4d_1012, 20_000);
}

#[test]
fn weakest_and_strongest_shocks_are_optimal() {
    let mut checked = Checked::default();
    for gamma in [Input::Ratio(7, 5), Input::Ratio(5, 3), Input::Decimal("1.3997".to_owned()), Input::Double(1.4)] {
        let [w, p, t] = ["0.0280134", "12345.6", "296.15"].map(|text| Input::Decimal(text.to_owned()));
        let filled = fill(&gamma, &w, &p, &t).expect("in the domain");
        for strength in extreme_strengths() {
            let double = strength.to_f64().value();
            let value = Input::Double(double);
            let accepted = check_rational(&mut checked, &filled, Entry::MachExcess, &value, &"extreme");
            assert_eq!(accepted, in_domain(&exact(double)), "{double:e}");
            checked.count += u64::from(accepted);
        }
    }
    checked.finish(&[]);
}

/// What is known to the oracle for each entry whose strength is the root of a quadratic, and its value there.
fn algebraic(entry: Entry, filled: &Filled, value: &RBig) -> (Known, Real) {
    let oracle = &filled.oracle;
    let as_ratio = |value: RBig| Real::Rational(value);
    match entry {
        Entry::TemperatureRatio => (Known::TemperatureRatio2, as_ratio(value.clone())),
        Entry::GasSpeed => (Known::GasSpeed2, as_ratio(value.clone()) / oracle.sound_speed()),
        Entry::ReflectedPressureRatio => (Known::PressureRatio5, as_ratio(value.clone())),
        Entry::ReflectedPressure => (Known::PressureRatio5, as_ratio(value / &oracle.pressure)),
        Entry::Step => (Known::PressureExcess5, as_ratio(value / &oracle.pressure)),
        Entry::ReflectedTemperatureRatio => (Known::TemperatureRatio5, as_ratio(value.clone())),
        Entry::ReflectedTemperature => (Known::TemperatureRatio5, as_ratio(value / &oracle.temperature)),
        _ => unreachable!("a rational entry"),
    }
}

const ALGEBRAIC: [Entry; 7] = [
    Entry::TemperatureRatio,
    Entry::GasSpeed,
    Entry::ReflectedPressureRatio,
    Entry::ReflectedPressure,
    Entry::Step,
    Entry::ReflectedTemperatureRatio,
    Entry::ReflectedTemperature,
];

/// Whether an enclosure is the best one, by the order of the truth and its ends.
fn ordered(found: Enclosure, order: impl Fn(&RBig) -> Ordering) -> bool {
    match found.width_in_ulp() {
        0 => order(&exact(found.low())) == Ordering::Equal,
        1 => order(&exact(found.low())) == Ordering::Greater && order(&exact(found.high())) == Ordering::Less,
        _ => false,
    }
}

/// One random algebraic entry near the strength of the case: fill, entry, value and the shock, where the library accepts it.
fn algebraic_case(random: &mut Random, case: &Case) -> Option<(Filled, Entry, Input, Incident)> {
    let filled = random_fill(random, &case.heat_capacity_ratio)?;
    // Beyond, T5/T1 leaves the domain of entries only where M does.
    if !in_domain(&strength(case)) {
        return None;
    }
    let entry = *random.pick(&ALGEBRAIC);
    let value = typed(random, &repeated(entry, &filled.oracle.shot(&Real::Rational(case.mach()))));
    let (known, target) = algebraic(entry, &filled, &value.exact());
    let gamma = &filled.oracle.heat_capacity_ratio;
    let least = compare_mach_excess(known, gamma, &target, &power_of_two(-200)) != Ordering::Less;
    let greatest = compare_mach_excess(known, gamma, &target, &power_of_two(64)) != Ordering::Greater;
    let built = Incident::new(&filled.fill, entry, rational(&value));
    assert_eq!(built.is_ok(), least && greatest, "{entry:?} {value:?} {filled:?}: {built:?}");
    built.ok().map(|shock| (filled, entry, value, shock))
}

#[test]
fn mach_of_algebraic_entries_is_optimal() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_1003);
    for case in some_cases(0xe4d_1003, 24_000) {
        let Some((filled, entry, value, shock)) = algebraic_case(&mut random, &case) else { continue };
        let (known, target) = algebraic(entry, &filled, &value.exact());
        let gamma = &filled.oracle.heat_capacity_ratio;
        let (mach, excess) = (shock.output(Output::Mach), shock.output(Output::MachExcess));
        for (name, found, best) in [
            (format!("{entry:?} M"), mach, ordered(mach, |trial| compare_mach(known, gamma, &target, trial))),
            (format!("{entry:?} M - 1"), excess, ordered(excess, |trial| compare_mach_excess(known, gamma, &target, trial))),
        ] {
            if !best {
                checked.fail(&name, || format!("{found:?} in {value:?} {filled:?}"));
            }
            checked.widths.record(&name, found.width_in_ulp());
        }
        checked.count += 1;
    }
    checked.finish(&[]);
}

/// M where its square is a simple ratio that solves the forward relation exactly; the digits of an approximated M cannot say so.
fn simple_mach(known: Known, gamma: &RBig, target: &Real, near: Enclosure) -> Option<Real> {
    let square = |end: f64| exact(end) * exact(end);
    let squared = RBig::simplest_in(square(near.low().next_down()), square(near.high().next_up()));
    let mach = Real::Rational(squared).sqrt();
    let miss = target - known.at(gamma, &mach);
    (miss.as_rational() == Some(&RBig::ZERO)).then_some(mach)
}

/// Outputs that follow from one another without the strength of the shock.
const GIVEN: [&[Output]; 4] = [
    &[Output::TemperatureRatio, Output::TemperatureExcess, Output::Temperature2],
    &[Output::GasSpeed2, Output::GasSpeedRatio],
    &[Output::ReflectedPressureRatio, Output::ReflectedPressureExcess, Output::Pressure5, Output::Step],
    &[Output::ReflectedTemperatureRatio, Output::ReflectedTemperatureExcess, Output::Temperature5],
];

#[test]
fn outputs_of_algebraic_entries_are_contained() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_1004);
    for case in some_cases(0xe4d_1004, 2_000) {
        let Some((filled, entry, value, shock)) = algebraic_case(&mut random, &case) else { continue };
        let (known, target) = algebraic(entry, &filled, &value.exact());
        let gamma = &filled.oracle.heat_capacity_ratio;
        let mach = simple_mach(known, gamma, &target, shock.output(Output::Mach)).unwrap_or_else(|| mach_from(known, gamma, &target).mach);
        let shot = filled.oracle.shot(&mach);
        for output in Output::ALL {
            // What was given is known exactly, but the digits of an approximated strength cannot say so; see
            // `what_was_given_comes_back`.
            let repeats = |output: Output| GIVEN.iter().any(|group| group.contains(&output) && group.contains(&entry.output()));
            let truth = truth(output, &shot);
            if repeats(output) {
                continue;
            }
            checked.contained(&format!("{output:?}"), shock.output(output), &truth, &(entry, &value, &filled));
        }
        checked.count += 1;
    }
    checked.finish(&Output::ALL.map(|output| format!("{output:?}")));
}

#[test]
fn what_was_given_comes_back() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_1005);
    for case in some_cases(0xe4d_1005, 1_000) {
        let Some((filled, entry, value, shock)) = algebraic_case(&mut random, &case) else { continue };
        let given = value.exact();
        let oracle = &filled.oracle;
        let over = |unit: &RBig| &given / unit;
        let mut same = |output: Output, truth: RBig| {
            checked.contained(&format!("{output:?} of {entry:?}"), shock.output(output), &Real::Rational(truth), &(&value, &filled));
        };
        let one = RBig::ONE;
        // The ratio to state 1, the ratio less one, the value with its unit and its rise.
        let mut group = |outputs: [Output; 3], ratio: RBig, unit: &RBig| {
            same(outputs[0], ratio.clone());
            same(outputs[1], &ratio - &one);
            same(outputs[2], &ratio * unit);
        };
        let pressure = [Output::ReflectedPressureRatio, Output::ReflectedPressureExcess, Output::Pressure5];
        let temperature = [Output::ReflectedTemperatureRatio, Output::ReflectedTemperatureExcess, Output::Temperature5];
        match entry {
            Entry::TemperatureRatio => {
                group([Output::TemperatureRatio, Output::TemperatureExcess, Output::Temperature2], given.clone(), &oracle.temperature);
            }
            Entry::ReflectedPressureRatio => group(pressure, given.clone(), &oracle.pressure),
            Entry::ReflectedPressure => {
                group(pressure, over(&oracle.pressure), &oracle.pressure);
                same(Output::Step, &given - &oracle.pressure);
            }
            Entry::Step => group(pressure, over(&oracle.pressure) + &one, &oracle.pressure),
            Entry::ReflectedTemperatureRatio => group(temperature, given.clone(), &oracle.temperature),
            Entry::ReflectedTemperature => group(temperature, over(&oracle.temperature), &oracle.temperature),
            _ => same(Output::GasSpeed2, given.clone()),
        }
        checked.count += 1;
    }
    checked.finish(&[]);
}

/// Cases for which the oracle's power (γ/(γ−1)) is no huge whole number, which it would form exactly.
fn is_practical(gamma: &RBig) -> bool {
    *gamma > ratio(102, 100)
}

#[test]
fn total_pressure_is_contained() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_1006);
    let [w, p, t] = ["0.0280134", "1e5", "300"].map(|text| Input::Decimal(text.to_owned()));
    for case in some_cases(0xe4d_1006, 1_500) {
        let gamma = case.heat_capacity_ratio.exact();
        let excess = strength(&case);
        // Beyond M 10^6 the loss is one to the last digit of any double.
        if !is_practical(&gamma) || excess < power_of_two(-200) || excess > RBig::from(1_000_000) {
            continue;
        }
        let filled = fill(&case.heat_capacity_ratio, &w, &p, &t).expect("in the domain");
        let shock = Incident::new(&filled.fill, Entry::MachExcess, rational(&case.mach_excess)).expect("a shock");
        let squared = Real::Rational(case.mach()).square();
        checked.count += 1;
        let mut check = |name: &str, found: Enclosure, truth: &Real| checked.contained(name, found, truth, &case);
        if random.below(2) == 0 {
            let (found, truth) = (shock.total_pressure_ratio(), oracle::total_pressure_ratio(&gamma, &squared));
            if found.low() == 0.0 {
                checked.vanishing("hardly any total pressure left", found, &truth, &case);
            } else {
                check("total pressure ratio", found, &truth);
            }
        } else {
            let truth = oracle::total_pressure_loss(&gamma, &squared);
            // Of the strongest shocks nothing is left: the loss is nearer to 1 than any ball can tell.
            let all = truth.relative_difference(&Real::int(1)) < NEAR_A_DOUBLE;
            check(if all { "all total pressure lost" } else { "total pressure loss" }, shock.total_pressure_loss(), &truth);
        }
    }
    checked.finish(&names(["total pressure ratio", "total pressure loss"]));
}

#[test]
fn moving_walls_are_contained() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_1007);
    let mut seen = [0u32; 3];
    for case in some_cases(0xe4d_1007, 1_500) {
        let gamma = case.heat_capacity_ratio.exact();
        let excess = strength(&case);
        if !is_practical(&gamma) || excess < power_of_two(-60) || excess > RBig::from(1_000_000) {
            continue;
        }
        let filled = random_fill(&mut random, &case.heat_capacity_ratio).expect("in the domain");
        let shock = Incident::new(&filled.fill, Entry::MachExcess, rational(&case.mach_excess)).expect("a shock");
        let mach = Real::Rational(case.mach());
        let state_2 = filled.oracle.shot(&mach).state_2;
        let (gas, sound) = (state_2.gas_speed.to_f64(), state_2.sound_speed.to_f64());
        let escape = gas + 2.0 * sound / (gamma.to_f64().value() - 1.0);
        let speed = match random.below(5) {
            0 => gas * random.between(-1.0, 0.999),
            1 => gas * random.between(1.001, 1.5),
            2 => gas + (escape - gas) * random.between(0.001, 0.9),
            3 => gas * (1.0 - random.over_binades(-30, -2)),
            _ => escape * random.between(1.001, 3.0),
        };
        let speed = Input::Decimal(decimal(&Real::from_f64(speed.abs()), 12));
        let found = shock.reflected_from_wall(rational(&speed)).expect("a finite speed");
        checked.count += 1;
        if state_2.gas_speed.cmp_rational(&speed.exact()) == Ordering::Less {
            let closing = Real::Rational(speed.exact()) - &state_2.gas_speed;
            let limit = &state_2.sound_speed * Real::Rational(RBig::from(2) / (&gamma - RBig::ONE));
            if (closing - limit).signum() >= 0 {
                assert_eq!(found.wave, Wave::Vacuum, "{case:?} {speed:?} {filled:?}");
                assert_eq!(found.state.pressure, Enclosure::from(0.0));
                seen[2] += 1;
                continue;
            }
        }
        let shot = filled.oracle.shot_at_moving_wall(&mach, &speed.exact());
        let wave = if shot.reflected.mach.is_some() { Wave::Shock } else { Wave::Expansion };
        assert_eq!(found.wave, wave, "{case:?} {speed:?} {filled:?}");
        seen[usize::from(wave == Wave::Expansion)] += 1;
        let state = &shot.state_5;
        let mut check = |name: &str, found: Enclosure, truth: &Real| {
            checked.contained(&format!("{wave:?} {name}"), found, truth, &(&case, &speed, &filled));
        };
        check("pressure", found.state.pressure, &state.pressure);
        check("temperature", found.state.temperature, &state.temperature);
        check("density", found.state.density, &state.density);
        check("sound speed", found.state.sound_speed, &state.sound_speed);
        check("front speed", found.front_speed, &shot.reflected_speed);
        match &shot.reflected.mach {
            Some(mach) => check("mach", found.mach, mach),
            None => assert_eq!(found.mach, Enclosure::from(1.0)),
        }
        assert!(holds(found.state.gas_speed, &state.gas_speed));
    }
    println!("{seen:?} shocks, expansions, vacua");
    assert!(seen.iter().all(|count| *count > 50), "{seen:?}");
    let names = ["pressure", "temperature", "density", "sound speed", "front speed"];
    let names: Vec<_> = ["Shock", "Expansion"].iter().flat_map(|wave| names.map(|name| format!("{wave} {name}"))).collect();
    checked.finish(&names);
}

#[test]
fn shocks_into_moving_gas_are_contained() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_1008);
    for case in some_cases(0xe4d_1008, 3_000) {
        let excess = strength(&case);
        if excess < power_of_two(-40) || excess > RBig::from(1_000_000) {
            continue;
        }
        let Some(filled) = random_fill(&mut random, &case.heat_capacity_ratio) else { continue };
        let relative = filled.oracle.shot(&Real::Rational(case.mach())).shock_speed.to_f64();
        // Whole multiples of 2^-20 m/s, so that speeds differ by exact doubles.
        let upstream = (random.between(-2.0, 2.0) * relative * 1_048_576.0).round() / 1_048_576.0;
        let speed = upstream + (relative * 1_048_576.0).round() / 1_048_576.0;
        let exact_speed = exact(speed) - exact(upstream);
        let mach = mach_of(Entry::ShockSpeed, &filled, &exact_speed);
        let built = MovingShock::new(&filled.fill, upstream, speed);
        assert_eq!(built.is_ok(), is_shock(mach.as_ref()), "{case:?} {upstream} {speed} {filled:?}");
        let (Ok(shock), Some(mach)) = (built, mach) else { continue };
        let shot = filled.oracle.shot(&mach);
        checked.count += 1;
        let mut check = |name: &str, found: Enclosure, truth: &Real| {
            checked.contained(name, found, truth, &(upstream, speed, &filled));
        };
        let state = shock.state_behind();
        check("pressure", state.pressure, &shot.state_2.pressure);
        check("temperature", state.temperature, &shot.state_2.temperature);
        check("density", state.density, &shot.state_2.density);
        check("sound speed", state.sound_speed, &shot.state_2.sound_speed);
        check("gas speed", state.gas_speed, &(&shot.state_2.gas_speed + Real::from_f64(upstream)));
        let [ahead, behind] = shock.speeds_in_shock_frame();
        check("ahead", ahead, &shot.shock_speed);
        check("behind", behind, &(&shot.shock_speed - &shot.state_2.gas_speed));
    }
    checked.finish(&names(["pressure", "temperature", "density", "sound speed", "gas speed", "ahead", "behind"]));
}

/// Arguments for the elementary functions: listed, edges, evenly spaced, random.
fn arguments(random: &mut Random, kind: u64, low: i32, high: i32, listed: &[f64]) -> f64 {
    match kind {
        0 => *random.pick(listed),
        1 => 2f64.powi(low + i32::try_from(random.below(u64::from(high.abs_diff(low)))).expect("small")),
        2 => 0.01 * (1 + random.below(1_000)) as f64,
        _ => random.over_binades(low, high),
    }
}

type OfBall = fn(Ball) -> Ball;
type OfEnclosure = fn(Enclosure) -> Enclosure;
type OfExact = fn(&RBig) -> Real;

#[test]
fn elementary_functions_are_contained() {
    let functions: [(&str, OfBall, OfEnclosure, OfExact); 4] = [
        ("ln", Ball::ln, Enclosure::ln, elementary::ln),
        ("exp", Ball::exp, Enclosure::exp, elementary::exp),
        ("log1p_ratio", Ball::log1p_ratio, Enclosure::log1p_ratio, elementary::log1p_over),
        ("expm1_ratio", Ball::expm1_ratio, Enclosure::expm1_ratio, elementary::expm1_over),
    ];
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_1009);
    let near = [1.0, 1.0f64.next_up(), 1.0f64.next_down(), 2.0, 0.5, 0.25, 0.249, 0.251, 0.51, 0.509, 0.52, core::f64::consts::SQRT_2];
    for _ in 0..cases(10_000, 1_000_000) {
        let place = usize::try_from(random.below(4)).expect("small");
        let (name, of_ball, of_enclosure, of_exact) = functions[place];
        let kind = random.below(6);
        // Listed cases reach arguments so small that the value is nearer to a double than any ball can tell.
        let low = if kind < 3 { -200 } else { -80 };
        let high = if place == 0 { 200 } else { 9 };
        let mut x = arguments(&mut random, kind, low, high, &near);
        let negative = random.below(2) == 0;
        match place {
            0 if kind == 5 => x = 1.0 + random.over_binades(-52, -1) * if negative { -1.0 } else { 1.0 },
            1 | 3 if negative => x = -x,
            2 if negative => x = -(x / (1.0 + x)),
            _ => {}
        }
        if x <= -1.0 && place == 2 || x.abs() > 600.0 && place != 0 && place != 2 {
            continue;
        }
        let truth = of_exact(&exact(x));
        let drawn = if kind < 3 || kind == 5 { "listed" } else { "random" };
        checked.contained(&format!("{name} of a ball, {drawn}"), of_ball(Ball::from(x)).enclosure(), &truth, &x);
        let point = of_enclosure(Enclosure::from(x));
        checked.contained(&format!("{name} of an enclosure, {drawn}"), point, &truth, &x);
        checked.count += 1;
        // A wide argument covers the values at both ends and no more than their enclosures.
        let y = if x > 0.0 { x * (1.0 + random.unit()) } else { x * (0.5 + 0.5 * random.unit()) };
        let wide = of_enclosure(Enclosure::new(x, y).expect("in order"));
        let other = of_enclosure(Enclosure::from(y));
        assert_eq!(wide, point.hull(other), "{name} of [{x:e}, {y:e}]");
    }
    let names: Vec<_> =
        functions.iter().flat_map(|(name, ..)| ["a ball", "an enclosure"].map(|kind| format!("{name} of {kind}, random"))).collect();
    checked.finish(&names);
}

#[test]
fn powers_are_contained() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_100a);
    for _ in 0..cases(3_000, 300_000) {
        let x = match random.below(3) {
            0 => random.over_binades(-60, 60),
            1 => 1.0 + random.over_binades(-52, -1),
            _ => 0.001 * (1 + random.below(5_000)) as f64,
        };
        let y = match random.below(3) {
            0 => random.over_binades(-40, 3),
            1 => -random.over_binades(-3, 3),
            _ => 0.5 * (1 + random.below(14)) as f64,
        };
        let truth = elementary::pow(&exact(x), &exact(y));
        let drawn = if (2.0 * y).fract() == 0.0 || x > 1.0 && x < 1.0 + 1e-6 { "pow listed" } else { "pow at random" };
        checked.contained(drawn, Ball::from(x).pow(Ball::from(y)).enclosure(), &truth, &(x, y));
        checked.count += 1;
        // Intervals know nothing of the midpoint: only containment is promised.
        let interval = Enclosure::from(x).pow(Enclosure::from(y));
        assert!(holds(interval, &truth), "{x:e}^{y:e}: {interval:?}");
    }
    checked.finish(&names(["pow at random"]));
}

#[test]
fn sound_speeds_and_typed_numbers_are_optimal() {
    let mut checked = Checked::default();
    let mut random = Random::new(0xe4d_100b);
    let gammas = endwall_tests::random::heat_capacity_ratios();
    for _ in 0..cases(5_000, 500_000) {
        let gamma = random.pick(&gammas).clone();
        let Some(filled) = random_fill(&mut random, &gamma) else { continue };
        let sound = filled.fill.gas().sound_speed(filled.fill.temperature()).expect("in the domain");
        checked.count += 1;
        checked.optimal("sound speed", sound, &filled.oracle.sound_speed(), &filled);
        let text = {
            let digits = usize::try_from(1 + random.below(30)).expect("small");
            let mut mantissa = (1 + random.below(9)).to_string();
            (1..digits).for_each(|_| mantissa.push_str(&random.below(10).to_string()));
            let power = i32::try_from(random.below(30)).expect("small") - 25;
            format!("{}{mantissa}e{power}", if random.below(3) == 0 { "-" } else { "" })
        };
        // Powers of ten beyond what the integers hold are refused, never rounded.
        if let Ok(read) = text.parse::<Rational>() {
            let truth = Real::Rational(oracle::parse(&text));
            checked.optimal("typed", Enclosure::from(read), &truth, &text);
        }
        let (n, d) = (random.bits() >> random.below(60), 1 + (random.bits() >> random.below(63)));
        let ratio = Rational::ratio(u128::from(n), u128::from(d)).expect("not zero");
        checked.optimal("ratio", Enclosure::from(ratio), &Real::Rational(RBig::from(n) / RBig::from(d)), &(n, d));
    }
    checked.finish(&[]);
}

#[test]
fn perfect_squares_have_no_width() {
    // γ R T/W is a square: 7/5 · 8.31446261815324 · T / W with T/W chosen so.
    let gamma = heat_capacity_ratio(&Input::Ratio(7, 5)).expect("in the domain");
    let gas = Gas::new(gamma, "0.831446261815324".parse::<Rational>().expect("a decimal")).expect("in the domain");
    // a² = 14 T.
    let sound = gas.sound_speed(Rational::ratio(56, 16).expect("not zero")).expect("in the domain");
    assert_eq!(sound, Enclosure::from(7.0));
}

#[test]
fn values_outside_the_domain_say_so() {
    let [w, p, t] = ["0.028", "1e5", "300"].map(|text| Input::Decimal(text.to_owned()));
    let filled = fill(&Input::Ratio(7, 5), &w, &p, &t).expect("in the domain");
    let error = Incident::new(&filled.fill, Entry::MachExcess, 2f64.powi(-200).next_down()).expect_err("too weak");
    assert!(matches!(error.rule, Rule::Between(..)), "{error}");
    assert!(Incident::new(&filled.fill, Entry::MachExcess, 2f64.powi(-200)).is_ok());
    assert!(Incident::new(&filled.fill, Entry::MachExcess, 2f64.powi(64)).is_ok());
    assert!(Incident::new(&filled.fill, Entry::MachExcess, 2f64.powi(64).next_up()).is_err());
}

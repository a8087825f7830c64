//! The Mach number from T5/T1, in every way that is compared; logarithm and exponential.

use super::cases;
use core::cell::Cell;
use endwall::gas::{Fill, Gamma, Gas, HeatCapacityRatio};
use endwall::number::{Elementary, Enclosure, Function, root};
use endwall::shock::{Entry, Incident, Jump, Output, Quadratic, mach_excess, nine_ratios};

/// A problem: T5/T1 − 1 of a gas with γ = 7/5.
#[derive(Clone, Debug)]
pub struct Inverse {
    fill: Fill,
    excess: f64,
}

/// T5/T1 of M less the given one.
struct Difference<'a> {
    excess: f64,
    evaluations: Option<&'a Cell<[u32; 3]>>,
}

/// A kind of number that enters a certified root: 0 plain, 1 proven signs, 2 slopes.
fn kind<S>() -> usize {
    let name = core::any::type_name::<S>();
    if name == "f64" { 0 } else { 1 + usize::from(name.contains("Dual")) }
}

impl Function for Difference<'_> {
    fn evaluate<S: Elementary>(&self, mach: S) -> S {
        if let Some(evaluations) = self.evaluations {
            let mut counts = evaluations.get();
            counts[kind::<S>()] += 1;
            evaluations.set(counts);
        }
        let one = S::whole(1);
        let square = mach.squared();
        let jump = Jump::new(Gamma { d: S::whole(2), q: S::whole(5) }, square - one);
        // The excess is a whole number of units of 2⁻²⁰, so that every kind of number holds it.
        let units = S::whole(1 << 20);
        jump.reflected_temperature_excess() - S::whole((self.excess * 1_048_576.0) as u32) / units
    }
}

impl Inverse {
    /// 64 problems.
    pub fn cases() -> Vec<Self> {
        let gas = Gas::new(HeatCapacityRatio::ratio(7, 5).expect("a gas"), 0.028).expect("a gas");
        let fill = Fill::new(gas, 1e4, 296.0).expect("a fill");
        let strengths = cases().iter().step_by(16).map(|case| case.mach_excess.clamp(0.05, 10.0));
        strengths
            .map(|strength| {
                let ratio = nine_ratios(Gamma { d: 2.0, q: 5.0 }, strength)[6];
                Self { fill, excess: ((ratio - 1.0) * 1_048_576.0).round() / 1_048_576.0 }
            })
            .collect()
    }

    /// The quadratic in plain doubles.
    pub fn plain(&self) -> f64 {
        let quadratic = Quadratic::from_reflected_temperature_excess(Gamma { d: 0.4, q: 1.0 }, self.excess);
        let z = if quadratic.linear() > 0.0 { quadratic.root_for_positive_linear() } else { quadratic.root_for_negative_linear() };
        1.0 + mach_excess(z)
    }

    /// The secant rule in plain doubles.
    pub fn secant(&self) -> f64 {
        let f = Difference { excess: self.excess, evaluations: None };
        let (mut before, mut now) = (1.5, 3.0);
        let (mut f_before, mut f_now) = (f.evaluate(before), f.evaluate(now));
        for _ in 0..100 {
            let next: f64 = now - f_now * ((now - before) / (f_now - f_before));
            if next.is_nan() || (next - now).abs() <= 1e-12 * now {
                break;
            }
            (before, f_before) = (now, f_now);
            (now, f_now) = (next, f.evaluate(next));
        }
        now
    }

    /// The closed form, proven: the optimal enclosure.
    pub fn closed(&self) -> f64 {
        let shock = Incident::new(&self.fill, Entry::ReflectedTemperatureRatio, 1.0 + self.excess).expect("a shock");
        shock.output(Output::Mach).low()
    }

    /// A certified root between 1.0001 and 20.
    pub fn root(&self) -> f64 {
        self.certified(None)
    }

    fn certified(&self, evaluations: Option<&Cell<[u32; 3]>>) -> f64 {
        root(&Difference { excess: self.excess, evaluations }, 1.000_1, 20.0).expect("a root").low()
    }
}

/// The largest numbers of evaluations that a certified root took, by kind of number.
pub fn most_evaluations(inverses: &[Inverse]) -> String {
    let mut most = [0; 3];
    for inverse in inverses {
        let counts = Cell::new([0; 3]);
        inverse.certified(Some(&counts));
        for (most, count) in most.iter_mut().zip(counts.get()) {
            *most = u32::max(*most, count);
        }
    }
    format!("{} plain, {} for proven signs, {} for slopes", most[0], most[1], most[2])
}

/// By `libm`.
pub fn plain_ln(x: f64) -> f64 {
    Elementary::ln(x)
}

/// By `libm`.
pub fn plain_exp(x: f64) -> f64 {
    Elementary::exp(x)
}

/// Proven.
pub fn proven_ln(x: f64) -> Enclosure {
    Enclosure::from(x).ln()
}

/// Proven.
pub fn proven_exp(x: f64) -> Enclosure {
    Enclosure::from(x).exp()
}

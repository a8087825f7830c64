//! Mass, momentum and energy, solved by the certified root finder without any closed form of a shock, and the library's enclosures.
//!
//! A shock that brings gas of density ρ and pressure p to rest in some frame is described by its volume ratio η (density ahead over density
//! behind). With w the gas speed ahead relative to the shock, mass gives wη behind, momentum p + ρw²(1 − η), and energy
//! γ/(γ−1)·p/ρ + w²/2 the same on both sides: the one equation that is left for η. It is zero at η = 1 too (no shock), which the bracket leaves out.

use endwall::gas::{Fill, Gas, HeatCapacityRatio, molar_gas_constant};
use endwall::number::{Ball, Elementary, Enclosure, Function, Rational, Semifield, root};
use endwall::shock::{Entry, Incident, Output};
use endwall_tests::tolerances::FIRST_PRINCIPLES_BRACKET;

/// A double as any kind of number, exactly: its mantissa in two halves and its power of two.
fn number<S: Semifield>(x: f64) -> S {
    let bits = x.to_bits();
    let (mantissa, mut power) = ((bits & ((1 << 52) - 1)) | (1 << 52), ((bits >> 52) & 0x7ff) as i32 - 1075);
    assert!(x > 0.0 && x.is_normal());
    let mut value = S::whole((mantissa >> 27) as u32) * S::whole(1 << 27) + S::whole((mantissa & ((1 << 27) - 1)) as u32);
    while power != 0 {
        let step = power.unsigned_abs().min(30);
        let factor = S::whole(1 << step);
        (value, power) = if power > 0 { (value * factor, power - step as i32) } else { (value / factor, power + step as i32) };
    }
    value
}

/// A ratio of whole numbers in any kind of number.
#[derive(Clone, Copy, Debug)]
struct Whole(u32, u32);

impl Whole {
    fn value<S: Semifield>(self) -> S {
        S::whole(self.0) / S::whole(self.1)
    }

    fn exact(self) -> Rational {
        Rational::ratio(u128::from(self.0), u128::from(self.1)).expect("not zero")
    }
}

/// The fill, in exact ratios.
#[derive(Clone, Copy, Debug)]
struct Filling {
    gamma: Whole,
    molar_mass: Whole,
    pressure: Whole,
    temperature: Whole,
}

impl Filling {
    fn fill(self) -> Fill {
        let gas = Gas::new(HeatCapacityRatio::new(self.gamma.exact()).expect("in the domain"), self.molar_mass.exact()).expect("a gas");
        Fill::new(gas, self.pressure.exact(), self.temperature.exact()).expect("a fill")
    }

    /// p1/ρ1 = R·T1/W.
    fn pressure_over_density<S: Semifield>(self) -> S {
        molar_gas_constant::<S>() * self.temperature.value::<S>() / self.molar_mass.value::<S>()
    }
}

/// Energy ahead less energy behind, in units of the specific enthalpy, at a volume ratio; `square` is w², `unit` is p/ρ ahead.
fn energy<S: Elementary>(gamma: Whole, unit: S, square: S, eta: S) -> S {
    let one = S::whole(1);
    let pressure = unit + square * (one - eta);
    let enthalpy = gamma.value::<S>() / (gamma.value::<S>() - one);
    enthalpy * (unit - pressure * eta) + square * (one - eta * eta) / S::whole(2)
}

/// The incident shock at a shock speed; unknown η.
struct AtSpeed(Filling, Whole);

impl Function for AtSpeed {
    fn evaluate<S: Elementary>(&self, eta: S) -> S {
        energy(self.0.gamma, self.0.pressure_over_density(), self.1.value::<S>().squared(), eta)
    }
}

/// The incident shock with an exact volume ratio; unknown shock speed.
struct AtVolume(Filling, Whole);

impl Function for AtVolume {
    fn evaluate<S: Elementary>(&self, speed: S) -> S {
        energy(self.0.gamma, self.0.pressure_over_density(), speed.squared(), self.1.value())
    }
}

/// The reflected shock behind an incident one of known speed and volume ratio; unknown volume ratio x of the reflected shock.
///
/// The gas comes to rest: u2 + `U_R` = w with `U_R` = w·x, so w = u2/(1 − x).
struct Reflection {
    filling: Filling,
    speed: f64,
    eta: f64,
}

impl Reflection {
    /// p2/ρ2 and u2 of the incident shock: momentum, and the change of frame.
    fn ahead<S: Elementary>(&self) -> (S, S) {
        let (speed, eta, one) = (number::<S>(self.speed), number::<S>(self.eta), S::whole(1));
        let unit = self.filling.pressure_over_density::<S>();
        ((unit + speed.squared() * (one - eta)) * eta, speed * (one - eta))
    }
}

impl Function for Reflection {
    fn evaluate<S: Elementary>(&self, x: S) -> S {
        let (unit, gas_speed) = self.ahead::<S>();
        let relative = gas_speed / (S::whole(1) - x);
        // Divided by w²/w² so that the pole at 1 does not enter the bracket: it is outside.
        energy(self.filling.gamma, unit, relative.squared(), x)
    }
}

/// A bracket around a volume ratio that leaves 1 and the point of level slope half-way to it outside.
fn bracket(near: f64) -> (f64, f64) {
    (near * (1.0 - FIRST_PRINCIPLES_BRACKET), near + FIRST_PRINCIPLES_BRACKET * (1.0 - near))
}

const FILLINGS: [Filling; 4] = [
    Filling { gamma: Whole(7, 5), molar_mass: Whole(280_134, 10_000_000), pressure: Whole(10_000, 1), temperature: Whole(2962, 10) },
    Filling { gamma: Whole(5, 3), molar_mass: Whole(39_948, 1_000_000), pressure: Whole(8_000, 1), temperature: Whole(29_515, 100) },
    Filling { gamma: Whole(9, 7), molar_mass: Whole(44, 1_000), pressure: Whole(101_325, 1), temperature: Whole(300, 1) },
    Filling { gamma: Whole(109, 100), molar_mass: Whole(146, 1_000), pressure: Whole(1, 3), temperature: Whole(350, 1) },
];

fn close(name: &str, found: Enclosure, solved: Enclosure) {
    assert!(found.is_proven() && solved.is_proven() && found.overlaps(solved), "{name}: library {found:?}, conservation laws {solved:?}");
    // Not by being so wide that anything would overlap.
    assert!(solved.width_in_ulp() <= 64 && found.width_in_ulp() <= 2, "{name}: {found:?} {solved:?}");
}

/// Outputs of the incident shock from its volume ratio, by mass and momentum.
fn incident_states(filling: Filling, speed: Ball, eta: Ball) -> [(Output, Ball); 7] {
    let one = Ball::whole(1);
    let unit = filling.pressure_over_density::<Ball>();
    let pressure_ratio = one + speed.squared() * (one - eta) / unit;
    let pressure = filling.pressure.value::<Ball>();
    [
        (Output::DensityRatio, one / eta),
        (Output::PressureRatio, pressure_ratio),
        (Output::Pressure2, pressure * pressure_ratio),
        (Output::Density2, pressure / unit / eta),
        (Output::TemperatureRatio, pressure_ratio * eta),
        (Output::Temperature2, filling.temperature.value::<Ball>() * pressure_ratio * eta),
        (Output::GasSpeed2, speed * (one - eta)),
    ]
}

#[test]
fn incident_shock_of_a_given_speed() {
    for (filling, speeds) in FILLINGS.into_iter().zip([[400, 700, 3000], [350, 1000, 5001], [280, 500, 2500], [160, 333, 1500]]) {
        for speed in speeds {
            let speed = Whole(speed, 1);
            let shock = Incident::new(&filling.fill(), Entry::ShockSpeed, speed.exact()).expect("a shock");
            let (low, high) = bracket(1.0 / shock.output(Output::DensityRatio).middle());
            let eta = root(&AtSpeed(filling, speed), low, high).unwrap_or_else(|error| panic!("{filling:?} {speed:?}: {error}"));
            assert!(eta.width_in_ulp() <= 2);
            for (output, solved) in incident_states(filling, speed.value(), Ball::around(eta)) {
                close(&format!("{output:?} of {filling:?} {speed:?}"), shock.output(output), solved.enclosure());
            }
        }
    }
}

#[test]
fn incident_shock_of_a_given_density() {
    for filling in FILLINGS {
        for density in [Whole(4, 3), Whole(2, 1), Whole(7, 2)] {
            let shock = Incident::new(&filling.fill(), Entry::DensityRatio, density.exact()).expect("a shock");
            let near = shock.output(Output::ShockSpeed).middle();
            let speed = root(&AtVolume(filling, Whole(density.1, density.0)), 0.5 * near, 2.0 * near)
                .unwrap_or_else(|error| panic!("{filling:?} {density:?}: {error}"));
            close("shock speed", shock.output(Output::ShockSpeed), speed);
            for (output, solved) in incident_states(filling, Ball::around(speed), Whole(density.1, density.0).value()) {
                close(&format!("{output:?} of {filling:?} {density:?}"), shock.output(output), solved.enclosure());
            }
        }
    }
}

/// Reflected shock: both ends of the incident volume ratio, between which the reflected one changes one way.
#[test]
fn reflected_shock_of_a_given_speed() {
    for (filling, speeds) in FILLINGS.into_iter().zip([[400, 700, 3000], [350, 1000, 5001], [280, 500, 2500], [160, 333, 1500]]) {
        for whole in speeds {
            let speed = Whole(whole, 1);
            let shock = Incident::new(&filling.fill(), Entry::ShockSpeed, speed.exact()).expect("a shock");
            let (low, high) = bracket(1.0 / shock.output(Output::DensityRatio).middle());
            let eta = root(&AtSpeed(filling, speed), low, high).unwrap_or_else(|error| panic!("{filling:?} {speed:?}: {error}"));
            let near = shock.output(Output::DensityRatio).middle() / shock.output(Output::ReflectedDensityRatio).middle();
            let (low, high) = bracket(near);
            let mut ends: Vec<[Ball; 4]> = Vec::new();
            for eta in [eta.low(), eta.high()] {
                let reflection = Reflection { filling, speed: f64::from(whole), eta };
                let x = root(&reflection, low, high).unwrap_or_else(|error| panic!("{filling:?} {speed:?}: {error}"));
                let (unit, gas_speed) = reflection.ahead::<Ball>();
                let (x, one) = (Ball::around(x), Ball::whole(1));
                let relative = gas_speed / (one - x);
                let density = filling.pressure.value::<Ball>() / filling.pressure_over_density::<Ball>() / number::<Ball>(eta);
                let pressure = density * (unit + relative.squared() * (one - x));
                let specific_gas_constant = molar_gas_constant::<Ball>() / filling.molar_mass.value::<Ball>();
                ends.push([pressure, density / x, pressure * x / density / specific_gas_constant, relative * x]);
            }
            for (place, output) in
                [Output::Pressure5, Output::Density5, Output::Temperature5, Output::ReflectedSpeed].into_iter().enumerate()
            {
                let solved = ends[0][place].enclosure().hull(ends[1][place].enclosure());
                close(&format!("{output:?} of {filling:?} {speed:?}"), shock.output(output), solved);
            }
        }
    }
}

/// A wrong law is noticed: with the energy of another gas nothing fits.
#[test]
fn another_gas_does_not_fit() {
    let filling = FILLINGS[0];
    let speed = Whole(700, 1);
    let shock = Incident::new(&filling.fill(), Entry::ShockSpeed, speed.exact()).expect("a shock");
    let other = Filling { gamma: Whole(1_400_000_001, 1_000_000_000), ..filling };
    let (low, high) = bracket(1.0 / shock.output(Output::DensityRatio).middle());
    let eta = root(&AtSpeed(other, speed), low, high).expect("a root");
    let [(output, solved), ..] = incident_states(other, speed.value(), Ball::around(eta));
    assert!(!shock.output(output).overlaps(solved.enclosure()));
}

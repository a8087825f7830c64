//! Kinds of number, elementary functions and certified roots.

use super::{Fingerprint, over_binades};
use endwall::number::{Ball, Dual, Elementary, ElementarySlopes, Enclosure, Function, Positive, Semifield, root};
use endwall::shot::Generator;

/// x·ln x = c, x > 1.
struct Product(f64);

impl Function for Product {
    fn evaluate<S: Elementary>(&self, x: S) -> S {
        // c is a whole number.
        x * x.ln() - S::whole(self.0 as u32)
    }
}

/// ln, exp, pow, the two ratios and their slopes: proven, plain and as slopes; arithmetic of enclosures and balls; a root.
pub fn functions(generator: &mut Generator, fingerprint: &mut Fingerprint) {
    let x = over_binades(generator, -40, 40);
    let y = over_binades(generator, -30, 4);
    let power = if generator.next_u64() % 2 == 0 { y } else { -y };
    let (point, exponent) = (Enclosure::from(x), Enclosure::from(power));
    let proven = [point.ln(), exponent.exp(), point.pow(exponent), point.log1p_ratio(), exponent.expm1_ratio()];
    let slopes = [point.log1p_ratio_slope(), exponent.expm1_ratio_slope()];
    for value in proven.into_iter().chain(slopes) {
        fingerprint.add_enclosure(value);
    }
    // Named by their trait: `std` has its own for doubles.
    let plain = [Elementary::ln(x), Elementary::exp(power), Elementary::log1p_ratio(x), Elementary::expm1_ratio(power)];
    for value in plain {
        fingerprint.add(value);
    }
    for value in [point + exponent, point - exponent, point * exponent, point / exponent, point.sqrt(), exponent.squared()] {
        fingerprint.add_enclosure(value);
    }
    let (a, b) = (Ball::from(x), Ball::from(power));
    for value in [(a + b) - a, a * b / (a + Ball::from(y)), (a * a + b * b).sqrt()] {
        fingerprint.add(value.nearest());
        fingerprint.add(value.radius());
    }
    let variable = Dual::<f64, 1>::variable(x, 0);
    let [slope] = (variable.ln() * variable.sqrt() / (variable + Dual::constant(y))).slopes();
    fingerprint.add(slope);
    if generator.next_u64() % 64 == 0 {
        let target = (generator.next_u64() % 1000 + 1) as f64;
        if let Ok(root) = root(&Product(target), 1.0, 1001.0) {
            fingerprint.add_enclosure(root);
        }
    }
}

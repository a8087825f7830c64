//! The range of a function of several inputs, each known within a tolerance.

use super::dual::Dual;
use super::enclosure::Enclosure;
use super::known::Known;

/// Halvings of all inputs together, at most; each gets the same share, so that no corner of the box uses up the work.
const HALVINGS: u32 = 16;
/// What a part may add to either end beyond values that are taken, relative to their range.
const SURPLUS: f64 = 1.0 / 512.0;
/// Boxes that are looked at, at most: the smallest parts and all that they were halved from.
const BOXES: u32 = 1 << (HALVINGS + 1);
/// Boxes that wait: one for each halving on the way to the smallest.
const WAITING: usize = 80;

/// A part of the box of all inputs.
#[derive(Clone, Copy)]
struct Part<const N: usize> {
    inputs: [Known; N],
    halvings: [u32; N],
}

/// An enclosure of all values of a function over the box of its inputs.
///
/// `slopes` gives value and slopes over a box, `point` the enclosure at one corner. On a part of the box where every slope keeps its sign
/// (proven by interval arithmetic) the function is monotone in each input, so two corners bound it as tightly as `point` does. Elsewhere the
/// mean-value form value(middle) + slope·(box − middle) bounds it; if that exceeds the values known to be taken by more than 1/512 of their
/// range, the part is halved along the input that matters most (at most 2¹⁶ parts in all).
pub(crate) fn bounds<const N: usize>(
    inputs: [Known; N],
    slopes: impl Fn([Dual<Enclosure, N>; N]) -> Dual<Enclosure, N>,
    point: impl Fn([Known; N]) -> Enclosure,
) -> Enclosure {
    let whole = Part { inputs, halvings: [0; N] };
    let free = inputs.iter().filter(|input| input.exact().is_none()).count().max(1);
    let deepest = (HALVINGS / free as u32).max(2);
    let mut waiting = [whole; WAITING];
    let mut count = 1usize;
    let over = |part: &Part<N>| {
        let mut index = 0;
        slopes(part.inputs.map(|input| {
            index += 1;
            Dual::variable(input.enclosure(), index - 1)
        }))
    };
    let corner = |part: &Part<N>, result: &Dual<Enclosure, N>, upper: bool| {
        let mut inputs = part.inputs;
        for (input, slope) in inputs.iter_mut().zip(result.slopes()) {
            // A slope that is at most zero but for its rounded middle decreases.
            *input = input.end((slope.high() > 0.0 && slope.middle() >= 0.0) == upper);
        }
        point(inputs)
    };
    let both_corners = |part: &Part<N>, result: &Dual<Enclosure, N>| corner(part, result, false).hull(corner(part, result, true));
    // Values that are taken, and with them what cannot be excluded.
    let mut taken = point(inputs.map(Known::middle)).hull(both_corners(&whole, &over(&whole)));
    let mut range = taken;
    let mut looked_at = 0;
    while count > 0 {
        count -= 1;
        let part = waiting.get(count).copied().unwrap_or(whole);
        looked_at += 1;
        let result = over(&part);
        if result.value().is_bounded() && taken.encloses(result.value()) {
            continue;
        }
        if is_monotone(&part, &result) {
            taken = taken.hull(both_corners(&part, &result));
            continue;
        }
        let centre = point(part.inputs.map(Known::middle));
        taken = taken.hull(centre);
        let bound = mean_value(&part, &result, centre);
        let surplus = Enclosure::from(taken.width() * SURPLUS);
        let accepted = taken.is_bounded() && (taken + surplus.hull(-surplus)).encloses(bound);
        let widest = if accepted || count + 2 > WAITING || looked_at >= BOXES { None } else { widest_input(&part, &result, deepest) };
        if let Some(at) = widest {
            for (half, slot) in halves(&part, at).into_iter().zip(waiting.iter_mut().skip(count)) {
                *slot = half;
            }
            count += 2;
        } else {
            range = range.hull(bound);
        }
    }
    range.hull(taken)
}

/// True if the slope in every input that is not exact keeps its sign.
fn is_monotone<const N: usize>(part: &Part<N>, result: &Dual<Enclosure, N>) -> bool {
    let signed = |slope: Enclosure| slope.is_bounded() && (slope.low() >= 0.0 || slope.high() <= 0.0);
    part.inputs.iter().zip(result.slopes()).all(|(input, slope)| input.exact().is_some() || signed(slope))
}

/// The input that contributes most to the width, of those that may still be halved. It need not be one whose slope has no sign: the slopes are wide
/// because the part is.
fn widest_input<const N: usize>(part: &Part<N>, result: &Dual<Enclosure, N>, deepest: u32) -> Option<usize> {
    let mut widest = None;
    let mut most = -1.0;
    let inputs = part.inputs.iter().zip(part.halvings).zip(result.slopes()).enumerate();
    for (at, ((input, halvings), slope)) in inputs.filter(|(_, ((input, halvings), _))| input.exact().is_none() && *halvings < deepest) {
        let own = slope.magnitude() * input.enclosure().width();
        // A slope that is not bounded says nothing: then the input that was halved least.
        let contribution = if own.is_finite() { own } else { f64::MAX / f64::from(1 + halvings) };
        if contribution > most {
            (widest, most) = (Some(at), contribution);
        }
    }
    widest
}

/// Both halves of a part along one input.
fn halves<const N: usize>(part: &Part<N>, at: usize) -> [Part<N>; 2] {
    let half = |upper: bool| {
        let mut half = *part;
        if let (Some(input), Some(done)) = (half.inputs.get_mut(at), half.halvings.get_mut(at)) {
            let whole = input.enclosure();
            let middle = whole.middle();
            *input = Known::Within(if upper { Enclosure::ordered(middle, whole.high()) } else { Enclosure::ordered(whole.low(), middle) });
            *done += 1;
        }
        half
    };
    [half(false), half(true)]
}

/// value(middle) + Σ slope·(box − middle), and no more than the plain value over the box.
fn mean_value<const N: usize>(part: &Part<N>, result: &Dual<Enclosure, N>, centre: Enclosure) -> Enclosure {
    let mut value = centre;
    for (input, slope) in part.inputs.iter().zip(result.slopes()) {
        if input.exact().is_none() {
            let whole = input.enclosure();
            value = value + slope * (whole - Enclosure::from(whole.middle()));
        }
    }
    let plain = result.value();
    if value.is_bounded() { value.intersection(plain).filter(|both| both.is_proven()).unwrap_or(value) } else { plain }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::number::Signed;

    /// x² − xy, whose least value inside a box lies at no corner.
    fn saddle<S: Signed>([x, y]: [S; 2]) -> S {
        x.squared() - x * y
    }

    #[test]
    fn a_minimum_inside_is_found() {
        let within = |low, high| Known::Within(Enclosure::new(low, high).unwrap());
        let point = |inputs: [Known; 2]| saddle(inputs.map(Known::enclosure));
        // On x in [0, 1], y = 1: least −1/4 at 1/2, greatest 0.
        let range = bounds([within(0.0, 1.0), Known::from(1.0)], saddle, point);
        assert!(range.contains(-0.25) && range.contains(0.0));
        assert!(range.width() < 0.25 * 1.01, "{range:?}");
        // Monotone in both: the two corners, exactly.
        let range = bounds([within(2.0, 3.0), within(1.0, 1.5)], saddle, point);
        assert_eq!((range.low(), range.high()), (1.0, 6.0));
    }
}

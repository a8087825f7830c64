//! Fixed-width unsigned integers for the exact test. An operation that does not fit returns `None`.

use core::cmp::Ordering;

/// 64-bit limbs in a wide integer. 1536 bits: the largest test of the dimensioned problem with typed decimals needs about 1000.
const LIMBS: usize = 24;

/// An unsigned integer of up to 1536 bits, little end first.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Wide([u64; LIMBS]);

impl From<u128> for Wide {
    fn from(n: u128) -> Self {
        let mut limbs = [0; LIMBS];
        let [low, high, ..] = &mut limbs;
        *low = n as u64;
        *high = (n >> 64) as u64;
        Self(limbs)
    }
}

impl Wide {
    /// Number of bits without leading zeros.
    pub(crate) fn length(&self) -> u32 {
        self.0.iter().enumerate().rev().find(|(_, limb)| **limb != 0).map_or(0, |(at, limb)| at as u32 * 64 + 64 - limb.leading_zeros())
    }

    /// Limbs without leading zero limbs.
    fn used(&self) -> usize {
        self.length().div_ceil(64) as usize
    }

    pub(crate) fn is_zero(&self) -> bool {
        self.length() == 0
    }

    pub(crate) fn trailing_zeros(&self) -> u32 {
        self.0.iter().enumerate().find(|(_, limb)| **limb != 0).map_or(0, |(at, limb)| at as u32 * 64 + limb.trailing_zeros())
    }

    pub(crate) fn checked_add(&self, other: &Self) -> Option<Self> {
        let mut sum = [0; LIMBS];
        let mut carry = false;
        for ((out, a), b) in sum.iter_mut().zip(&self.0).zip(&other.0) {
            let (partial, first) = a.overflowing_add(*b);
            let (limb, second) = partial.overflowing_add(u64::from(carry));
            *out = limb;
            carry = first || second;
        }
        (!carry).then_some(Self(sum))
    }

    /// self − other where self ≥ other, else `None`.
    pub(crate) fn checked_sub(&self, other: &Self) -> Option<Self> {
        let mut difference = [0; LIMBS];
        let mut borrow = false;
        for ((out, a), b) in difference.iter_mut().zip(&self.0).zip(&other.0) {
            let (partial, first) = a.overflowing_sub(*b);
            let (limb, second) = partial.overflowing_sub(u64::from(borrow));
            *out = limb;
            borrow = first || second;
        }
        (!borrow).then_some(Self(difference))
    }

    pub(crate) fn checked_mul(&self, other: &Self) -> Option<Self> {
        let mut product = [0u64; LIMBS];
        let (used, other_used) = (self.used(), other.used());
        if used + other_used > LIMBS + 1 {
            return None;
        }
        for (shift, a) in self.0.iter().take(used).enumerate() {
            let mut carry = 0u128;
            let mut columns = product.iter_mut().skip(shift);
            // The shorter iterator comes first: a zip takes one item too many from the other.
            for (b, column) in other.0.iter().take(other_used).zip(columns.by_ref()) {
                let total = u128::from(*a) * u128::from(*b) + u128::from(*column) + carry;
                *column = total as u64;
                carry = total >> 64;
            }
            // Columns above are still zero when the carry of this row arrives. A row that ran out of columns lost limbs.
            if shift + other_used > LIMBS {
                return None;
            }
            match columns.next() {
                Some(column) => *column = carry as u64,
                None if carry != 0 => return None,
                None => {}
            }
        }
        Some(Self(product))
    }

    pub(crate) fn checked_shl(&self, bits: u32) -> Option<Self> {
        if bits == 0 || self.is_zero() {
            return Some(*self);
        }
        if self.length().checked_add(bits)? > LIMBS as u32 * 64 {
            return None;
        }
        let (limbs, bits) = ((bits / 64) as usize, bits % 64);
        let mut shifted = [0; LIMBS];
        let mut carry = 0;
        for (out, limb) in shifted.iter_mut().skip(limbs).zip(&self.0) {
            let total = (u128::from(*limb) << bits) | carry;
            *out = total as u64;
            carry = total >> 64;
        }
        Some(Self(shifted))
    }

    /// self/2ⁿ, rounded down.
    pub(crate) fn shr(&self, bits: u32) -> Self {
        if bits == 0 {
            return *self;
        }
        let (limbs, bits) = ((bits / 64) as usize, bits % 64);
        let mut shifted = [0; LIMBS];
        let above = self.0.iter().skip(limbs + 1).chain(core::iter::once(&0));
        for ((out, limb), next) in shifted.iter_mut().zip(self.0.iter().skip(limbs)).zip(above) {
            *out = (((u128::from(*next) << 64) | u128::from(*limb)) >> bits) as u64;
        }
        Self(shifted)
    }

    /// The low 128 bits.
    pub(crate) fn low_bits(&self) -> u128 {
        let [low, high, ..] = self.0;
        u128::from(low) | (u128::from(high) << 64)
    }
}

impl PartialOrd for Wide {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Wide {
    fn cmp(&self, other: &Self) -> Ordering {
        self.0.iter().rev().cmp(other.0.iter().rev())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn products_and_shifts_agree_with_128_bits() {
        let mut state = 0x9e37_79b9_7f4a_7c15_u64;
        for _ in 0..1000 {
            state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1);
            let (a, b) = (u128::from(state >> 7), u128::from(state << 5 >> 9));
            let product = Wide::from(a).checked_mul(&Wide::from(b)).unwrap();
            assert_eq!(product, Wide::from(a * b));
            let shifted = product.checked_shl(333).unwrap();
            assert_eq!(shifted.shr(333), product);
            assert_eq!(shifted.length(), product.length() + 333);
            assert_eq!(shifted.trailing_zeros(), product.trailing_zeros() + 333);
            assert_eq!(product.checked_add(&shifted).unwrap().checked_sub(&shifted).unwrap(), product);
        }
    }

    #[test]
    fn what_does_not_fit_is_refused() {
        let one = Wide::from(1);
        let top = one.checked_shl(1535).unwrap();
        assert!(top.checked_shl(1).is_none());
        assert!(top.checked_add(&top).is_none());
        assert!(top.checked_mul(&Wide::from(2)).is_none());
        assert!(one.checked_sub(&Wide::from(2)).is_none());
        let half = one.checked_shl(768).unwrap();
        assert!(half.checked_mul(&half).is_none());
        assert_eq!(half.checked_mul(&one.checked_shl(767).unwrap()), Some(top));
        let full = top.checked_sub(&one).unwrap().checked_add(&top).unwrap();
        assert!(full.checked_mul(&full).is_none());
        assert_eq!(full.checked_mul(&one), Some(full));
    }
}

//! The field operations and integer powers.

use super::dyadic::{Dyadic, Toward};
use super::enclosure::Interval;
use crate::algebra::budget;
use std::cmp::Ordering;

impl Interval {
    /// `x + y`.
    pub fn add(&self, other: &Interval) -> Interval {
        let bits = self.bits().max(other.bits());
        let lo = self.lo().add(other.lo(), bits, Toward::Down);
        Interval::between(lo, self.hi().add(other.hi(), bits, Toward::Up), bits)
    }

    /// `x − y`.
    pub fn sub(&self, other: &Interval) -> Interval {
        self.add(&other.neg())
    }

    /// `−x`.
    pub fn neg(&self) -> Interval {
        Interval::between(self.hi().neg(), self.lo().neg(), self.bits())
    }

    /// `x·2^k`, without rounding.
    pub fn scaled(&self, k: i64) -> Interval {
        Interval::between(self.lo().scaled(k), self.hi().scaled(k), self.bits())
    }

    /// `x·y`: the signs of the ends tell which two products are extreme, except when both factors straddle 0.
    pub fn mul(&self, other: &Interval) -> Interval {
        let bits = self.bits().max(other.bits());
        let (a, b, c, d) = (self.lo(), self.hi(), other.lo(), other.hi());
        let [low_x, high_x] = [a, b].map(|end| end.sign() != Ordering::Less);
        let [low_y, high_y] = [c, d].map(|end| end.sign() != Ordering::Less);
        let (lo, hi) = match ((low_x, high_x), (low_y, high_y)) {
            ((true, _), (true, _)) => (a.mul(c), b.mul(d)),
            ((true, _), (_, false)) => (b.mul(c), a.mul(d)),
            ((true, _), _) => (b.mul(c), b.mul(d)),
            ((_, false), (true, _)) => (a.mul(d), b.mul(c)),
            ((_, false), (_, false)) => (b.mul(d), a.mul(c)),
            ((_, false), _) => (a.mul(d), a.mul(c)),
            (_, (true, _)) => (a.mul(d), b.mul(d)),
            (_, (_, false)) => (b.mul(c), a.mul(c)),
            _ => (a.mul(d).min(b.mul(c)), a.mul(c).max(b.mul(d))),
        };
        Interval::between(lo, hi, bits)
    }

    /// `x / y`; `None` when the divisor contains 0. The extreme quotients are `x` over the end of `y` that has the
    /// smaller or larger magnitude, as the sign of `x` tells.
    pub fn div(&self, other: &Interval) -> Option<Interval> {
        if other.contains_zero() {
            return None;
        }
        if other.hi().sign() == Ordering::Less {
            return self.neg().div(&other.neg());
        }
        let bits = self.bits().max(other.bits());
        let (c, d) = (other.lo(), other.hi());
        let under_lo = if self.lo().sign() == Ordering::Less { c } else { d };
        let under_hi = if self.hi().sign() == Ordering::Less { d } else { c };
        let lo = self.lo().div(under_lo, bits, Toward::Down);
        Some(Interval::between(lo, self.hi().div(under_hi, bits, Toward::Up), bits))
    }

    /// `1 / x`; `None` when the interval contains 0.
    pub fn recip(&self) -> Option<Interval> {
        Interval::one(self.bits()).div(self)
    }

    /// `x^n`, with `x^0 = 1`; even powers are never negative. `None` for a negative power of an interval that contains 0.
    /// Powers of a magnitude are taken by squaring, rounded in one direction, with guard bits for the `2·log2 n` steps.
    pub fn pow_int(&self, n: i64) -> Option<Interval> {
        if n < 0 {
            if self.contains_zero() {
                return None;
            }
            let wide = self.with_bits(self.bits().saturating_add(4));
            return wide.recip()?.pow_natural(n.unsigned_abs()).map(|power| power.with_bits(self.bits()));
        }
        self.pow_natural(n.unsigned_abs())
    }

    fn pow_natural(&self, n: u64) -> Option<Interval> {
        let bits = self.bits();
        if n == 0 {
            return Some(Interval::one(bits));
        }
        if n.is_multiple_of(2) {
            let (near, far) = magnitudes(self);
            let lo = power_of_magnitude(&near, n, bits, Toward::Down);
            return Some(Interval::between(lo, power_of_magnitude(&far, n, bits, Toward::Up), bits));
        }
        let lo = odd_power(self.lo(), n, bits, Toward::Down);
        Some(Interval::between(lo, odd_power(self.hi(), n, bits, Toward::Up), bits))
    }
}

/// The least and the greatest magnitude of a member.
fn magnitudes(x: &Interval) -> (Dyadic, Dyadic) {
    let (a, b) = (x.lo().abs(), x.hi().abs());
    let far = (&a).max(&b).clone();
    let near = if x.contains_zero() { Dyadic::zero() } else { a.min(b) };
    (near, far)
}

fn odd_power(x: &Dyadic, n: u64, bits: u32, toward: Toward) -> Dyadic {
    if x.sign() == Ordering::Less {
        return power_of_magnitude(&x.abs(), n, bits, toward.opposite()).neg();
    }
    power_of_magnitude(x, n, bits, toward)
}

/// A bound on `x^n`, on the given side, for `x ≥ 0` and `n ≥ 1`. Rounding every product toward one side keeps the side,
/// since products of non-negative numbers are monotone in the factors. The relative error at least doubles with every
/// squaring, so one guard bit each, and a few for the sum, keep it below one unit in the last place.
fn power_of_magnitude(x: &Dyadic, n: u64, bits: u32, toward: Toward) -> Dyadic {
    let length = u64::BITS - n.leading_zeros();
    let working = bits.saturating_add(length + 3);
    budget::spend(u64::from(length));
    let mut power = x.clone().rounded(working, toward);
    let base = power.clone();
    for place in (0..length.saturating_sub(1)).rev() {
        power = power.mul(&power).rounded(working, toward);
        if (n >> place) & 1 == 1 {
            power = power.mul(&base).rounded(working, toward);
        }
    }
    power
}

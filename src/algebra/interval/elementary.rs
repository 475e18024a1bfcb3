//! Roots, exponential, logarithm, and real powers.

use super::constants::{self, Constant};
use super::dyadic::{Dyadic, Toward};
use super::enclosure::Interval;
use crate::algebra::budget;
use num_bigint::BigInt;
use num_traits::{One, Signed, Zero};
use std::cmp::Ordering;

/// Arguments of `exp` stay below 2^20 in magnitude.
const EXP_TOP: i64 = 20;

/// ⌊2^40·ln 2⌋, to estimate how often ln 2 goes into a number below 2^20.
const LN2_AT_40: i64 = 762_123_384_785;

/// Roots of this order and above are taken through the logarithm.
const ROOT_BY_LOGARITHM: u32 = 32;

impl Interval {
    /// The non-negative `n`-th root, by exact integer roots of scaled mantissas; `None` unless all members are proved to
    /// be non-negative, or when `n = 0`.
    pub fn root(&self, n: u32) -> Option<Interval> {
        if n == 0 || self.lo().sign() == Ordering::Less {
            return None;
        }
        self.increasing(|x, bits| root_at(x, n, bits))
    }

    /// The `n`-th root of a number that the caller knows to be non-negative although its enclosure may reach below 0:
    /// that part is cut off first. `None` when all members are negative.
    pub fn root_of_nonnegative(&self, n: u32) -> Option<Interval> {
        if self.hi().sign() == Ordering::Less {
            return None;
        }
        Interval::between(self.lo().max(&Dyadic::zero()).clone(), self.hi().clone(), self.bits()).root(n)
    }

    /// The non-negative square root; see [`Interval::root`].
    pub fn sqrt(&self) -> Option<Interval> {
        self.root(2)
    }

    /// The exponential; `None` when a member reaches 2^20 in magnitude.
    ///
    /// `x = k·ln 2 + r` with `0 ≤ r < ln 2` about; `e^(r/2^s)` by the Taylor series, squared `s` times. The series has
    /// positive terms, rounded down; its remainder and all roundings are carried as one integer error bound.
    pub fn exp(&self) -> Option<Interval> {
        self.increasing(exp_at)
    }

    /// The natural logarithm; `None` unless all members are positive.
    ///
    /// `x = 2^k·y` with `y` within a factor √2 of 1, and `ln y = 2·artanh z`, `z = (y − 1)/(y + 1)`, `|z| < 0.172`: the
    /// series in odd powers of `z`, rounded down, with remainder below its first term left out over `1 − z²`. Close to
    /// 1 more places are carried, so that the result has full relative precision.
    pub fn ln(&self) -> Option<Interval> {
        self.increasing(ln_at)
    }

    /// `x^y` for positive `x`: an integer power where `y` is a single integer, otherwise `exp(y·ln x)` with guard bits
    /// for the magnitude of `y·ln x`. `None` unless all members of `x` are positive and the result is in range of `exp`.
    pub fn pow(&self, exponent: &Interval) -> Option<Interval> {
        if self.lo().sign() != Ordering::Greater {
            return None;
        }
        let bits = self.bits().max(exponent.bits());
        if let Some(n) = small_integer(exponent) {
            return self.with_bits(bits).pow_int(n).map(|power| power.with_bits(bits));
        }
        let size = self.with_bits(16).ln()?.mul(&exponent.with_bits(16));
        let magnitude = size.lo().top().max(size.hi().top()).clamp(0, EXP_TOP + 1);
        let working = bits.saturating_add(8).saturating_add(u32::try_from(magnitude).unwrap_or(0));
        let power = self.with_bits(working).ln()?.mul(exponent).exp()?;
        Some(power.with_bits(bits))
    }
}

/// The integer that the interval consists of, if it is one below 2^20 in magnitude.
fn small_integer(x: &Interval) -> Option<i64> {
    let end = x.lo();
    if !x.is_point() || end.top() > EXP_TOP {
        return None;
    }
    let whole = end.to_fixed(0, Toward::Down);
    (Dyadic::from(whole.clone()) == *end).then(|| i64::try_from(whole).ok()).flatten()
}

fn root_at(x: &Dyadic, n: u32, bits: u32) -> Option<Interval> {
    if n < ROOT_BY_LOGARITHM || x.is_zero() {
        return Some(Interval::between(x.root(n, bits, Toward::Down), x.root(n, bits, Toward::Up), bits));
    }
    // An argument of exp below 2^20 needs 20 more bits for the same relative precision of the result.
    let logarithm = ln_at(x, bits.saturating_add(28))?;
    let order = Interval::from_integer(&n.into(), bits);
    Some(logarithm.div(&order)?.exp()?.with_bits(bits))
}

/// Encloses `e^x`.
pub(super) fn exp_at(x: &Dyadic, bits: u32) -> Option<Interval> {
    if x.top() > EXP_TOP {
        return None;
    }
    if x.is_zero() {
        return Some(Interval::one(bits));
    }
    let [lo, hi] = exp_bounds(x, bits);
    Some(Interval::between(lo, hi, bits))
}

/// Bounds on `e^x` for `|x| < 2^20`, a few bits closer than `bits`.
fn exp_bounds(x: &Dyadic, bits: u32) -> [Dyadic; 2] {
    let halvings = 3 + bits.isqrt() / 2;
    let places = bits + halvings + 8 + (u32::BITS - bits.leading_zeros());
    let (k, r) = reduce_by_ln2(x, places);
    let (mut value, terms) = taylor_exp(&(r >> halvings), places);
    for _ in 0..halvings {
        value = (&value * &value) >> places;
    }
    budget::spend(u64::from(halvings) + terms);
    // Before squaring: 3 units for each term, 4 for the remainder, and 4 for the argument, which is cut by less than 2
    // units and has slope below 2. A squaring sends the error e of a value v to at most 2ve + 1, and the product of the
    // factors 2v over all squarings is 2^s·e^(r − r/2^s) < 2^(s+2).
    let error = BigInt::from(3 * terms + 8 + u64::from(halvings)) << (halvings + 2);
    let exponent = k - i64::from(places);
    let high = Dyadic::new(&value + error, exponent);
    [Dyadic::new(value, exponent), high]
}

/// `k` and an integer `r ≥ 0` with `x = k·ln 2 + ρ`, `r ≤ ρ·2^places ≤ r + 4`, and ρ exceeding ln 2 by 2^−16 at most.
///
/// With ln 2 known to 2 units at 24 more places and `|k| < 2^21`, the product `k·ln 2` is within `[v − 1, v + 2]` of its
/// cut value `v`; the argument is cut by less than one unit.
fn reduce_by_ln2(x: &Dyadic, places: u32) -> (i64, BigInt) {
    let whole = x.to_fixed(i64::from(places), Toward::Down);
    let coarse = i64::try_from(x.to_fixed(40, Toward::Down)).unwrap_or(0);
    let ln2 = constants::fixed(Constant::Ln2, places + 24);
    let rest = |k: i64| -> BigInt { &whole - ((&ln2 * k) >> 24u32) - 2 };
    let k = coarse.div_euclid(LN2_AT_40);
    let r = rest(k);
    if r.is_negative() { (k - 1, rest(k - 1)) } else { (k, r) }
}

/// `e^r` from below for `0 ≤ r < 1/4` in units of `2^−places`, and the number of terms added.
///
/// A term is the one before it times `r/k`, cut twice: if that one is low by less than 3 units, so is this. Adding stops
/// when a term is cut to zero, its true value below 3 units and all that follow below 4 units together.
fn taylor_exp(r: &BigInt, places: u32) -> (BigInt, u64) {
    let mut term = r.clone();
    let mut sum = (BigInt::one() << places) + &term;
    let mut k = 1u64;
    while !term.is_zero() {
        k += 1;
        term = ((&term * r) >> places) / k;
        sum += &term;
    }
    (sum, k)
}

/// Encloses `ln x`; `None` unless `x > 0`.
pub(super) fn ln_at(x: &Dyadic, bits: u32) -> Option<Interval> {
    if x.sign() != Ordering::Greater {
        return None;
    }
    // y = mantissa/2^length is in [1/2, 1); below 181/256 < 1/√2 it is doubled.
    let length = x.mantissa().bits();
    let leading = if length >= 8 { x.mantissa() >> (length - 8) } else { x.mantissa() << (8 - length) };
    let place = if leading < BigInt::from(181) { length - 1 } else { length };
    let k = x.exponent().saturating_add_unsigned(place);
    let unit = BigInt::one() << place;
    let difference = x.mantissa() - &unit;
    let near = twice_artanh(&difference, &(x.mantissa() + unit), bits + 4);
    if k == 0 {
        return Some(near.with_bits(bits));
    }
    let far = constants::enclosed(Constant::Ln2, bits + 4).mul(&Interval::from_integer(&k.into(), bits + 4));
    Some(near.add(&far).with_bits(bits))
}

/// Encloses `2·artanh(n/d)` for `|n/d| < 0.18`, `d > 0`.
fn twice_artanh(n: &BigInt, d: &BigInt, bits: u32) -> Interval {
    if n.is_zero() {
        return Interval::zero(bits);
    }
    let [lo, hi] = artanh_bounds(&n.abs(), d, bits).map(|bound| bound.scaled(1));
    let positive = Interval::between(lo, hi, bits);
    if n.is_negative() { positive.neg() } else { positive }
}

/// Bounds on `artanh(n/d)` for `0 < n/d < 0.18`, a few bits closer than `bits`.
///
/// With `z` in units, cut by less than 1, and `z²` cut by less than 2, each power `z^(2j+1)` is low by less than 2 units
/// and each term by less than 3. The power that is cut to zero is below 2 units, and so is the remainder.
fn artanh_bounds(n: &BigInt, d: &BigInt, bits: u32) -> [Dyadic; 2] {
    let small = d.bits().saturating_sub(n.bits());
    let places = u64::from(bits) + small + 6 + u64::from(u32::BITS - bits.leading_zeros());
    let z = (n << places) / d;
    let square = (&z * &z) >> places;
    let mut power = z;
    let mut sum = power.clone();
    let mut j = 0u64;
    while !power.is_zero() {
        j += 1;
        power = (&power * &square) >> places;
        sum += &power / (2 * j + 1);
    }
    budget::spend(j);
    let exponent = -i64::try_from(places).unwrap_or(i64::MAX);
    [Dyadic::new(sum.clone(), exponent), Dyadic::new(sum + (3 * j + 5), exponent)]
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The bounds before their last rounding, which would hide a missing unit of error.
    fn assert_nested(coarse: &[Dyadic; 2], fine: &[Dyadic; 2], what: &str) {
        assert!(coarse[0] <= fine[0] && fine[1] <= coarse[1], "{what}: {coarse:?} misses {fine:?}");
    }

    #[test]
    fn counted_errors_cover_the_true_value() {
        for i in 1i64..400 {
            for bits in [8, 9, 13, 30, 64] {
                let x = Dyadic::new((i * 7919 - 1_600_000).into(), -14 - i % 9);
                assert_nested(&exp_bounds(&x, bits), &exp_bounds(&x, bits + 100), "exp");
                let (n, d) = (BigInt::from(i), BigInt::from(i * 6 + i % 37));
                assert_nested(&artanh_bounds(&n, &d, bits), &artanh_bounds(&n, &d, bits + 100), "artanh");
            }
        }
    }
}

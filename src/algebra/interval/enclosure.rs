//! The interval type: construction, the questions asked of it, and set operations.

use super::dyadic::{Dyadic, Toward};
use crate::algebra::number::Rational;
use num_bigint::BigInt;
use num_traits::One;
use std::cmp::Ordering;

/// The least working precision; smaller requests are raised to it.
const LEAST_BITS: u32 = 8;

/// A closed interval `[lo, hi]` with dyadic ends and the precision, in bits, at which operations on it are rounded.
///
/// Whatever real numbers the operands enclose, the result of an operation encloses the exact result.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Interval {
    lo: Dyadic,
    hi: Dyadic,
    bits: u32,
}

impl Interval {
    /// The smallest interval of the given precision that contains both numbers, in either order.
    pub fn between(a: Dyadic, b: Dyadic, bits: u32) -> Interval {
        let bits = bits.max(LEAST_BITS);
        let (lo, hi) = if a <= b { (a, b) } else { (b, a) };
        Interval { lo: lo.rounded(bits, Toward::Down), hi: hi.rounded(bits, Toward::Up), bits }
    }

    /// The tightest interval of the given precision around one number.
    pub fn point(x: &Dyadic, bits: u32) -> Interval {
        let bits = bits.max(LEAST_BITS);
        Interval { lo: x.clone().rounded(bits, Toward::Down), hi: x.clone().rounded(bits, Toward::Up), bits }
    }

    /// `[0, 0]`.
    pub fn zero(bits: u32) -> Interval {
        Interval::point(&Dyadic::zero(), bits)
    }

    /// `[1, 1]`.
    pub fn one(bits: u32) -> Interval {
        Interval::point(&Dyadic::one(), bits)
    }

    /// The tightest interval of the given precision around an integer.
    pub fn from_integer(n: &BigInt, bits: u32) -> Interval {
        Interval::point(&Dyadic::from(n.clone()), bits)
    }

    /// The tightest interval of the given precision around a fraction; a single point when the fraction is dyadic and
    /// short enough.
    pub fn from_rational(r: &Rational, bits: u32) -> Interval {
        let bits = bits.max(LEAST_BITS);
        let numerator = Dyadic::from(r.numer().clone());
        if r.denom().is_one() {
            return Interval::point(&numerator, bits);
        }
        let denominator = Dyadic::from(r.denom().clone());
        Interval {
            lo: numerator.div(&denominator, bits, Toward::Down),
            hi: numerator.div(&denominator, bits, Toward::Up),
            bits,
        }
    }

    /// The lower end.
    pub fn lo(&self) -> &Dyadic {
        &self.lo
    }

    /// The upper end.
    pub fn hi(&self) -> &Dyadic {
        &self.hi
    }

    /// The working precision.
    pub fn bits(&self) -> u32 {
        self.bits
    }

    /// The lower end as a fraction.
    pub fn lo_rational(&self) -> Rational {
        self.lo.to_rational()
    }

    /// The upper end as a fraction.
    pub fn hi_rational(&self) -> Rational {
        self.hi.to_rational()
    }

    /// The same set at another working precision, widened where the ends do not fit.
    pub fn with_bits(&self, bits: u32) -> Interval {
        Interval::between(self.lo.clone(), self.hi.clone(), bits)
    }

    /// Whether the two ends agree.
    pub fn is_point(&self) -> bool {
        self.lo == self.hi
    }

    /// The sign shared by all members: `Less` or `Greater` proves that an enclosed number is negative or positive,
    /// `Equal` is given for `[0, 0]` only, `None` when members differ in sign.
    pub fn sign(&self) -> Option<Ordering> {
        let (lo, hi) = (self.lo.sign(), self.hi.sign());
        (lo == hi).then_some(lo)
    }

    /// Whether 0 is a member.
    pub fn contains_zero(&self) -> bool {
        self.lo.sign() != Ordering::Greater && self.hi.sign() != Ordering::Less
    }

    /// Whether the fraction is a member.
    pub fn contains(&self, r: &Rational) -> bool {
        self.lo.compare_rational(r) != Ordering::Greater && self.hi.compare_rational(r) != Ordering::Less
    }

    /// Whether every member of `other` is a member.
    pub fn encloses(&self, other: &Interval) -> bool {
        self.lo <= other.lo && other.hi <= self.hi
    }

    /// An upper bound on `hi − lo`.
    pub fn width(&self) -> Dyadic {
        self.hi.add(&self.lo.neg(), self.bits, Toward::Up)
    }

    /// A member close to the middle.
    pub fn midpoint(&self) -> Dyadic {
        let middle = self.lo.add(&self.hi, self.bits.saturating_add(2), Toward::Down).scaled(-1);
        middle.max(self.lo.clone()).min(self.hi.clone())
    }

    /// The common members; `None` when there are none.
    pub fn intersection(&self, other: &Interval) -> Option<Interval> {
        let lo = (&self.lo).max(&other.lo);
        let hi = (&self.hi).min(&other.hi);
        (lo <= hi).then(|| Interval { lo: lo.clone(), hi: hi.clone(), bits: self.bits.max(other.bits) })
    }

    /// The smallest interval that encloses both.
    pub fn hull(&self, other: &Interval) -> Interval {
        let lo = (&self.lo).min(&other.lo).clone();
        let hi = (&self.hi).max(&other.hi).clone();
        Interval { lo, hi, bits: self.bits.max(other.bits) }
    }

    /// The image under an increasing function, given its enclosure at a number for a precision; `None` where the
    /// function has no enclosure at an end.
    pub(super) fn increasing(&self, f: impl Fn(&Dyadic, u32) -> Option<Interval>) -> Option<Interval> {
        let low = f(&self.lo, self.bits)?;
        if self.is_point() {
            return Some(low);
        }
        let high = f(&self.hi, self.bits)?;
        Some(Interval { lo: low.lo, hi: high.hi, bits: self.bits })
    }
}

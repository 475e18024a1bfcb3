//! Exact integers with a machine-word fast path, and the rationals built on them.

mod operators;

use num_bigint::{BigInt, Sign};
use num_integer::Integer;
use num_traits::{Signed, ToPrimitive};

pub(crate) use operators::binary_operator;

/// Rational numbers of unbounded size.
pub type Rational = num_rational::Ratio<BigInt>;

/// The rational n / d; `d` must not be zero.
pub fn rational(n: i64, d: i64) -> Rational {
    Rational::new(BigInt::from(n), BigInt::from(d))
}

/// The rational n / d; `d` must not be zero.
pub fn rational_from(n: Int, d: Int) -> Rational {
    if d.is_one() { Rational::from_integer(n.into_bigint()) } else { Rational::new(n.into_bigint(), d.into_bigint()) }
}

/// The numerator of a rational (it carries the sign).
pub fn numer(r: &Rational) -> Int {
    Int::from_ref(r.numer())
}

/// The positive denominator of a rational.
pub fn denom(r: &Rational) -> Int {
    Int::from_ref(r.denom())
}

/// An integer: a machine word when it fits, boxed otherwise. Always normalised, so equality is structural.
#[derive(Clone, PartialEq, Eq, Hash)]
pub enum Int {
    /// A value of `i64`.
    Small(i64),
    /// A value outside `i64`.
    Big(Box<BigInt>),
}

impl Int {
    /// 0.
    pub const ZERO: Int = Int::Small(0);
    /// 1.
    pub const ONE: Int = Int::Small(1);

    fn from_ref(n: &BigInt) -> Int {
        match n.to_i64() {
            Some(small) => Int::Small(small),
            None => Int::Big(Box::new(n.clone())),
        }
    }

    /// A copy as big integer.
    pub fn to_bigint(&self) -> BigInt {
        match self {
            Int::Small(a) => BigInt::from(*a),
            Int::Big(a) => (**a).clone(),
        }
    }

    /// The value as big integer.
    pub fn into_bigint(self) -> BigInt {
        match self {
            Int::Small(a) => BigInt::from(a),
            Int::Big(a) => *a,
        }
    }

    /// The value as rational number.
    pub fn to_rational(&self) -> Rational {
        Rational::from_integer(self.to_bigint())
    }

    /// The value when it is a machine word.
    pub fn to_i64(&self) -> Option<i64> {
        match self {
            Int::Small(a) => Some(*a),
            Int::Big(_) => None,
        }
    }

    fn with_big<T>(&self, other: &Int, f: impl FnOnce(&BigInt, &BigInt) -> T) -> T {
        match (self, other) {
            (Int::Big(a), Int::Big(b)) => f(a, b),
            (Int::Big(a), Int::Small(b)) => f(a, &BigInt::from(*b)),
            (Int::Small(a), Int::Big(b)) => f(&BigInt::from(*a), b),
            (Int::Small(a), Int::Small(b)) => f(&BigInt::from(*a), &BigInt::from(*b)),
        }
    }

    /// self + other.
    #[inline]
    pub fn add(&self, other: &Int) -> Int {
        if let (Int::Small(a), Int::Small(b)) = (self, other)
            && let Some(c) = a.checked_add(*b)
        {
            return Int::Small(c);
        }
        self.with_big(other, |a, b| Int::from(a + b))
    }

    /// self − other.
    #[inline]
    pub fn sub(&self, other: &Int) -> Int {
        if let (Int::Small(a), Int::Small(b)) = (self, other)
            && let Some(c) = a.checked_sub(*b)
        {
            return Int::Small(c);
        }
        self.with_big(other, |a, b| Int::from(a - b))
    }

    /// self · other.
    #[inline]
    pub fn mul(&self, other: &Int) -> Int {
        if let (Int::Small(a), Int::Small(b)) = (self, other)
            && let Some(c) = a.checked_mul(*b)
        {
            return Int::Small(c);
        }
        self.with_big(other, |a, b| Int::from(a * b))
    }

    /// −self.
    #[inline]
    pub fn neg(&self) -> Int {
        match self {
            Int::Small(a) => a.checked_neg().map_or_else(|| Int::from(-BigInt::from(*a)), Int::Small),
            Int::Big(a) => Int::from(-&**a),
        }
    }

    /// Whether the value is 0.
    #[inline]
    pub fn is_zero(&self) -> bool {
        matches!(self, Int::Small(0))
    }

    /// Whether the value is 1.
    #[inline]
    pub fn is_one(&self) -> bool {
        matches!(self, Int::Small(1))
    }

    /// Whether the value is below 0.
    #[inline]
    pub fn is_negative(&self) -> bool {
        self.signum() < 0
    }

    /// −1, 0 or 1.
    #[inline]
    pub fn signum(&self) -> i32 {
        match self {
            Int::Small(a) => a.signum() as i32,
            Int::Big(a) => match a.sign() {
                Sign::Minus => -1,
                Sign::NoSign => 0,
                Sign::Plus => 1,
            },
        }
    }

    /// |self|.
    pub fn abs(&self) -> Int {
        if self.is_negative() { self.neg() } else { self.clone() }
    }

    /// The non-negative greatest common divisor; gcd(0, n) = |n|.
    pub fn gcd(&self, other: &Int) -> Int {
        match (self, other) {
            (Int::Small(a), Int::Small(b)) => Int::from(word_gcd(a.unsigned_abs(), b.unsigned_abs())),
            (Int::Small(0), n) | (n, Int::Small(0)) => n.abs(),
            (Int::Small(1 | -1), _) | (_, Int::Small(1 | -1)) => Int::ONE,
            (Int::Big(a), Int::Small(b)) | (Int::Small(b), Int::Big(a)) => {
                let b = b.unsigned_abs();
                let rest = (&**a % b).abs().to_u64().unwrap_or(0);
                Int::from(word_gcd(rest, b))
            }
            (Int::Big(a), Int::Big(b)) => Int::from(a.gcd(b)),
        }
    }

    /// The non-negative least common multiple; 0 when either is 0.
    pub fn lcm(&self, other: &Int) -> Int {
        if self.is_zero() || other.is_zero() {
            return Int::ZERO;
        }
        self.div_exact(&self.gcd(other)).mul(other).abs()
    }

    /// self / other, where `other` ≠ 0 divides self (otherwise the quotient truncated towards 0).
    #[inline]
    pub fn div_exact(&self, other: &Int) -> Int {
        if let (Int::Small(a), Int::Small(b)) = (self, other)
            && let Some(c) = a.checked_div(*b)
        {
            return Int::Small(c);
        }
        if other.is_one() {
            return self.clone();
        }
        self.with_big(other, |a, b| Int::from(a / b))
    }

    /// Quotient truncated towards 0 and remainder with the sign of self; `other` ≠ 0.
    pub fn div_rem(&self, other: &Int) -> (Int, Int) {
        if let (Int::Small(a), Int::Small(b)) = (self, other)
            && let (Some(q), Some(r)) = (a.checked_div(*b), a.checked_rem(*b))
        {
            return (Int::Small(q), Int::Small(r));
        }
        self.with_big(other, |a, b| {
            let (q, r) = num_integer::Integer::div_rem(a, b);
            (Int::from(q), Int::from(r))
        })
    }

    /// The quotient when `other` ≠ 0 divides self.
    #[inline]
    pub fn checked_div(&self, other: &Int) -> Option<Int> {
        if other.is_one() {
            return Some(self.clone());
        }
        let (q, r) = self.div_rem(other);
        r.is_zero().then_some(q)
    }

    /// self^exponent.
    pub fn pow(&self, exponent: u32) -> Int {
        if let Int::Small(a) = self
            && let Some(c) = a.checked_pow(exponent)
        {
            return Int::Small(c);
        }
        crate::algebra::budget::spend(self.bits().saturating_mul(u64::from(exponent)) / 64);
        Int::from(num_traits::pow::Pow::pow(&self.to_bigint(), exponent))
    }

    /// The length of |self| in binary digits; 0 for 0.
    #[inline]
    pub fn bits(&self) -> u64 {
        match self {
            Int::Small(a) => u64::from(u64::BITS - a.unsigned_abs().leading_zeros()),
            Int::Big(a) => a.bits(),
        }
    }

    /// The residue in 0..modulus; `modulus` ≠ 0.
    pub fn rem_u64(&self, modulus: u64) -> u64 {
        match self {
            Int::Small(a) => i128::from(*a).rem_euclid(i128::from(modulus)) as u64,
            Int::Big(a) => a.mod_floor(&BigInt::from(modulus)).to_u64().unwrap_or(0),
        }
    }
}

/// Binary gcd of machine words.
fn word_gcd(mut a: u64, mut b: u64) -> u64 {
    if a == 0 || b == 0 {
        return a | b;
    }
    let shift = (a | b).trailing_zeros();
    a >>= a.trailing_zeros();
    while b != 0 {
        b >>= b.trailing_zeros();
        (a, b) = (a.min(b), a.abs_diff(b));
    }
    a << shift
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_word_is_enough_space() {
        assert_eq!(size_of::<Int>(), 16);
    }

    #[test]
    fn the_edges_of_a_word_stay_normalised() {
        let low = Int::from(i64::MIN);
        assert_eq!(low.neg(), Int::from(1u64 << 63));
        assert_eq!(low.neg().neg(), low);
        assert!(matches!(low.neg().neg(), Int::Small(_)));
        assert_eq!(low.div_exact(&Int::from(-1)), low.neg());
        assert_eq!(low.gcd(&low), low.neg());
        assert!(low.sub(&Int::ONE) < low && low.neg() > Int::from(i64::MAX));
        assert_eq!(Int::from(i64::MAX).pow(3).bits(), 189);
        assert_eq!(Int::from(12).lcm(&Int::from(-18)), Int::from(36));
        assert_eq!(low.sub(&Int::ONE).rem_u64(7), (7 - ((1u128 << 63) + 1) % 7) as u64 % 7);
    }
}

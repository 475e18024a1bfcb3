//! Dyadic rationals `m·2^e` with directed rounding.

use crate::algebra::budget::{self, Stopped};
use crate::algebra::number::Rational;
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};
use std::cmp::Ordering;

/// Exponents beyond this magnitude end the computation with [`Stopped::Size`].
const EXPONENT_BOUND: i64 = 1 << 48;

/// Shifts beyond this many bits are refused: the exact number would not fit in memory.
const SHIFT_BOUND: i64 = 1 << 28;

/// The direction in which a number that does not fit is rounded.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Toward {
    /// Toward −∞.
    Down,
    /// Toward +∞.
    Up,
}

impl Toward {
    /// The other direction.
    pub fn opposite(self) -> Toward {
        match self {
            Toward::Down => Toward::Up,
            Toward::Up => Toward::Down,
        }
    }
}

/// The exact number `mantissa · 2^exponent`. The mantissa need not be odd; equality and order are those of the values.
#[derive(Clone, Debug)]
pub struct Dyadic {
    mantissa: BigInt,
    exponent: i64,
}

/// An exponent within bounds; anything else ends the computation with [`Stopped::Size`].
fn bounded(exponent: i128) -> i64 {
    match i64::try_from(exponent) {
        Ok(e) if e.abs() <= EXPONENT_BOUND => e,
        _ => budget::stop(Stopped::Size),
    }
}

/// A non-negative shift that memory can hold.
fn shift_width(bits: i64) -> u64 {
    if bits > SHIFT_BOUND {
        budget::stop(Stopped::Size)
    }
    bits.max(0).unsigned_abs()
}

/// `⌊m / 2^s⌋` or `⌈m / 2^s⌉`.
pub(super) fn shift_right(m: BigInt, s: u64, toward: Toward) -> BigInt {
    match toward {
        Toward::Down => m >> s,
        Toward::Up => -(-m >> s),
    }
}

impl Dyadic {
    /// The number `mantissa · 2^exponent`.
    pub fn new(mantissa: BigInt, exponent: i64) -> Dyadic {
        if mantissa.is_zero() {
            return Dyadic::zero();
        }
        Dyadic { mantissa, exponent: bounded(i128::from(exponent)) }
    }

    /// 0.
    pub fn zero() -> Dyadic {
        Dyadic { mantissa: BigInt::ZERO, exponent: 0 }
    }

    /// 1.
    pub fn one() -> Dyadic {
        Dyadic { mantissa: BigInt::one(), exponent: 0 }
    }

    /// `2^exponent`.
    pub fn power_of_two(exponent: i64) -> Dyadic {
        Dyadic::new(BigInt::one(), exponent)
    }

    /// The integer `m` of `m·2^e`.
    pub fn mantissa(&self) -> &BigInt {
        &self.mantissa
    }

    /// The integer `e` of `m·2^e`.
    pub fn exponent(&self) -> i64 {
        self.exponent
    }

    /// Whether the number is 0.
    pub fn is_zero(&self) -> bool {
        self.mantissa.is_zero()
    }

    /// The order of the number against 0.
    pub fn sign(&self) -> Ordering {
        self.mantissa.sign().cmp(&num_bigint::Sign::NoSign)
    }

    /// The `t` with `2^(t−1) ≤ |x| < 2^t`; for 0 a value below that of every other number.
    pub fn top(&self) -> i64 {
        if self.is_zero() {
            return -2 * EXPONENT_BOUND;
        }
        self.exponent.saturating_add_unsigned(self.mantissa.bits())
    }

    /// −x.
    pub fn neg(&self) -> Dyadic {
        Dyadic { mantissa: -&self.mantissa, exponent: self.exponent }
    }

    /// |x|.
    pub fn abs(&self) -> Dyadic {
        Dyadic { mantissa: self.mantissa.abs(), exponent: self.exponent }
    }

    /// `x·2^k`, exactly.
    pub fn scaled(&self, k: i64) -> Dyadic {
        Dyadic::new(self.mantissa.clone(), bounded(i128::from(self.exponent) + i128::from(k)))
    }

    /// The product, exactly.
    pub fn mul(&self, other: &Dyadic) -> Dyadic {
        let exponent = bounded(i128::from(self.exponent) + i128::from(other.exponent));
        Dyadic::new(&self.mantissa * &other.mantissa, exponent)
    }

    /// The nearest number with at most `bits` significant bits in the given direction.
    pub fn rounded(self, bits: u32, toward: Toward) -> Dyadic {
        let excess = self.mantissa.bits().saturating_sub(u64::from(bits));
        if excess == 0 {
            return self;
        }
        let exponent = bounded(i128::from(self.exponent) + i128::from(excess));
        Dyadic::new(shift_right(self.mantissa, excess, toward), exponent)
    }

    /// A bound on the sum with at most `bits` significant bits, on the given side. When one term is far below the
    /// last place it only decides the direction, so that the cost does not depend on the exponents.
    pub fn add(&self, other: &Dyadic, bits: u32, toward: Toward) -> Dyadic {
        if self.is_zero() || other.is_zero() {
            let kept = if self.is_zero() { other } else { self };
            return kept.clone().rounded(bits, toward);
        }
        let (large, small) = if self.top() >= other.top() { (self, other) } else { (other, self) };
        let floor = large.exponent.min(large.top() - i64::from(bits) - 2);
        if small.top() < floor {
            return large.nudged(floor, small.sign(), toward).rounded(bits, toward);
        }
        let low = large.exponent.min(small.exponent);
        let mantissa = large.integer_at(low) + small.integer_at(low);
        Dyadic::new(mantissa, low).rounded(bits, toward)
    }

    /// A bound on `self + ε` for some ε of the given sign with `|ε| < 2^place`, where `place ≤ exponent`.
    fn nudged(&self, place: i64, sign: Ordering, toward: Toward) -> Dyadic {
        let mantissa = self.integer_at(place);
        let moved = match (sign, toward) {
            (Ordering::Less, Toward::Down) => mantissa - 1,
            (Ordering::Greater, Toward::Up) => mantissa + 1,
            _ => mantissa,
        };
        Dyadic::new(moved, place)
    }

    /// The mantissa over `2^place`, for `place ≤ exponent`.
    fn integer_at(&self, place: i64) -> BigInt {
        &self.mantissa << shift_width(self.exponent - place)
    }

    /// `⌊x·2^places⌋` or `⌈x·2^places⌉`.
    pub fn to_fixed(&self, places: i64, toward: Toward) -> BigInt {
        let shift = self.exponent + places;
        if shift >= 0 {
            return &self.mantissa << shift_width(shift);
        }
        let drop = (-shift).min(i64::try_from(self.mantissa.bits()).unwrap_or(i64::MAX).saturating_add(1));
        shift_right(self.mantissa.clone(), drop.unsigned_abs(), toward)
    }

    /// A bound on the quotient with at most `bits` significant bits, on the given side. The divisor is not 0.
    pub fn div(&self, divisor: &Dyadic, bits: u32, toward: Toward) -> Dyadic {
        let wanted = u64::from(bits) + 1 + divisor.mantissa.bits();
        let shift = wanted.saturating_sub(self.mantissa.bits());
        let numerator = &self.mantissa << shift;
        let quotient = match toward {
            Toward::Down => numerator.div_floor(&divisor.mantissa),
            Toward::Up => -((-numerator).div_floor(&divisor.mantissa)),
        };
        let exponent = i128::from(self.exponent) - i128::from(divisor.exponent) - i128::from(shift);
        Dyadic::new(quotient, bounded(exponent)).rounded(bits, toward)
    }

    /// A bound on the `n`-th root of a non-negative number, `n ≥ 1`, with at most `bits` significant bits, on the given
    /// side: the integer root of the mantissa scaled to `n·(bits + 1)` bits, and the next integer where it is not exact.
    pub fn root(&self, n: u32, bits: u32, toward: Toward) -> Dyadic {
        let wanted = u64::from(n) * (u64::from(bits) + 1);
        let fill = wanted.saturating_sub(self.mantissa.bits());
        let wide = i128::from(self.exponent) - i128::from(fill);
        let adjust = wide.rem_euclid(i128::from(n));
        let shift = fill + u64::try_from(adjust).unwrap_or(0);
        budget::spend(shift / 64 + 1);
        let radicand = &self.mantissa << shift;
        let mut root = radicand.nth_root(n);
        if toward == Toward::Up && root.pow(n) != radicand {
            root += 1;
        }
        Dyadic::new(root, bounded((wide - adjust) / i128::from(n))).rounded(bits, toward)
    }

    /// The same number as a fraction.
    pub fn to_rational(&self) -> Rational {
        if self.exponent >= 0 {
            Rational::from_integer(self.integer_at(0))
        } else {
            Rational::new(self.mantissa.clone(), BigInt::one() << shift_width(-self.exponent))
        }
    }

    /// The order against a fraction, decided by the binary lengths where they differ and by cross products otherwise.
    pub fn compare_rational(&self, r: &Rational) -> Ordering {
        let against = r.numer().sign().cmp(&num_bigint::Sign::NoSign);
        if self.sign() != against || against == Ordering::Equal {
            return self.sign().cmp(&against);
        }
        let scaled = Dyadic { mantissa: &self.mantissa * r.denom(), exponent: self.exponent };
        scaled.cmp(&Dyadic { mantissa: r.numer().clone(), exponent: 0 })
    }
}

impl From<BigInt> for Dyadic {
    fn from(value: BigInt) -> Dyadic {
        Dyadic::new(value, 0)
    }
}

impl From<i64> for Dyadic {
    fn from(value: i64) -> Dyadic {
        Dyadic::new(value.into(), 0)
    }
}

impl Ord for Dyadic {
    fn cmp(&self, other: &Dyadic) -> Ordering {
        let sign = self.sign();
        if sign != other.sign() || sign == Ordering::Equal {
            return sign.cmp(&other.sign());
        }
        let by_length = self.top().cmp(&other.top());
        if by_length != Ordering::Equal {
            return if sign == Ordering::Greater { by_length } else { by_length.reverse() };
        }
        let low = self.exponent.min(other.exponent);
        match self.exponent.cmp(&other.exponent) {
            Ordering::Equal => self.mantissa.cmp(&other.mantissa),
            Ordering::Less => self.mantissa.cmp(&other.integer_at(low)),
            Ordering::Greater => self.integer_at(low).cmp(&other.mantissa),
        }
    }
}

impl PartialOrd for Dyadic {
    fn partial_cmp(&self, other: &Dyadic) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl PartialEq for Dyadic {
    fn eq(&self, other: &Dyadic) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Dyadic {}

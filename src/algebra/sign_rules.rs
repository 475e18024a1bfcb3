//! The rules of signs: what is known of a product, a power and a sum from what is known of the parts.

use num_bigint::Sign as NumberSign;

use super::number::Rational;

/// What is known of the sign of an element on the whole domain.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Sign {
    /// Identically zero.
    Zero,
    /// Positive everywhere.
    Positive,
    /// Negative everywhere.
    Negative,
    /// Nowhere negative.
    NonNegative,
    /// Nowhere positive.
    NonPositive,
    /// Nowhere zero.
    NonZero,
    /// Nothing is known.
    Unknown,
}

impl Sign {
    /// The sign of −e.
    pub fn negated(self) -> Sign {
        match self {
            Sign::Positive => Sign::Negative,
            Sign::Negative => Sign::Positive,
            Sign::NonNegative => Sign::NonPositive,
            Sign::NonPositive => Sign::NonNegative,
            other => other,
        }
    }

    /// The sign of a product.
    pub fn times(self, other: Sign) -> Sign {
        use Sign::*;
        match (self, other) {
            (Zero, _) | (_, Zero) => Zero,
            (Positive, s) | (s, Positive) => s,
            (Negative, s) | (s, Negative) => s.negated(),
            (NonZero, NonZero) => NonZero,
            (NonNegative, NonNegative) | (NonPositive, NonPositive) => NonNegative,
            (NonNegative, NonPositive) | (NonPositive, NonNegative) => NonPositive,
            _ => Unknown,
        }
    }

    /// The sign of eᵏ.
    pub fn to_power(self, k: i32) -> Sign {
        if k % 2 != 0 {
            return self;
        }
        match self {
            Sign::Positive | Sign::Negative | Sign::NonZero => Sign::Positive,
            Sign::Zero => Sign::Zero,
            _ => Sign::NonNegative,
        }
    }

    /// The sign of a sum.
    pub fn plus(self, other: Sign) -> Sign {
        use Sign::*;
        match (self, other) {
            (Zero, s) | (s, Zero) => s,
            (Positive, Positive | NonNegative) | (NonNegative, Positive) => Positive,
            (NonNegative, NonNegative) => NonNegative,
            (Negative, Negative | NonPositive) | (NonPositive, Negative) => Negative,
            (NonPositive, NonPositive) => NonPositive,
            _ => Unknown,
        }
    }

    /// Whether zero is excluded.
    pub fn excludes_zero(self) -> bool {
        matches!(self, Sign::Positive | Sign::Negative | Sign::NonZero)
    }

    /// Whether no negative value is possible.
    pub fn is_nonnegative(self) -> bool {
        matches!(self, Sign::Zero | Sign::Positive | Sign::NonNegative)
    }

    /// The sign of a number.
    pub fn of(q: &Rational) -> Sign {
        match q.numer().sign() {
            NumberSign::Plus => Sign::Positive,
            NumberSign::Minus => Sign::Negative,
            NumberSign::NoSign => Sign::Zero,
        }
    }
}

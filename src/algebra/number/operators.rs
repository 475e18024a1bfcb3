//! Conversions, order, printing and operators of integers.

use std::cmp::Ordering;
use std::fmt;

use num_bigint::{BigInt, Sign};
use num_traits::{ToPrimitive, Zero};

use super::Int;

impl Default for Int {
    fn default() -> Int {
        Int::ZERO
    }
}

impl From<i64> for Int {
    fn from(n: i64) -> Int {
        Int::Small(n)
    }
}

impl From<i32> for Int {
    fn from(n: i32) -> Int {
        Int::Small(i64::from(n))
    }
}

impl From<u64> for Int {
    fn from(n: u64) -> Int {
        i64::try_from(n).map_or_else(|_| Int::Big(Box::new(BigInt::from(n))), Int::Small)
    }
}

impl From<i128> for Int {
    fn from(n: i128) -> Int {
        i64::try_from(n).map_or_else(|_| Int::Big(Box::new(BigInt::from(n))), Int::Small)
    }
}

impl From<BigInt> for Int {
    fn from(n: BigInt) -> Int {
        match n.to_i64() {
            Some(small) => Int::Small(small),
            None => Int::Big(Box::new(n)),
        }
    }
}

impl From<&BigInt> for Int {
    fn from(n: &BigInt) -> Int {
        Int::from_ref(n)
    }
}

impl PartialOrd for Int {
    fn partial_cmp(&self, other: &Int) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Int {
    fn cmp(&self, other: &Int) -> Ordering {
        match (self, other) {
            (Int::Small(a), Int::Small(b)) => a.cmp(b),
            (Int::Big(a), Int::Big(b)) => a.cmp(b),
            (Int::Big(a), Int::Small(_)) => a.sign().cmp(&Sign::NoSign),
            (Int::Small(_), Int::Big(b)) => Sign::NoSign.cmp(&b.sign()),
        }
    }
}

impl fmt::Display for Int {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Int::Small(a) => fmt::Display::fmt(a, f),
            Int::Big(a) => fmt::Display::fmt(a, f),
        }
    }
}

impl fmt::Debug for Int {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        fmt::Display::fmt(self, f)
    }
}

impl Zero for Int {
    fn zero() -> Int {
        Int::ZERO
    }

    fn is_zero(&self) -> bool {
        Int::is_zero(self)
    }
}

macro_rules! binary_operator {
    ($type:ident, $trait:ident, $method:ident) => {
        impl std::ops::$trait<&$type> for &$type {
            type Output = $type;
            #[inline]
            fn $method(self, other: &$type) -> $type {
                $type::$method(self, other)
            }
        }
        impl std::ops::$trait<$type> for $type {
            type Output = $type;
            #[inline]
            fn $method(self, other: $type) -> $type {
                $type::$method(&self, &other)
            }
        }
        impl std::ops::$trait<&$type> for $type {
            type Output = $type;
            #[inline]
            fn $method(self, other: &$type) -> $type {
                $type::$method(&self, other)
            }
        }
        impl std::ops::$trait<$type> for &$type {
            type Output = $type;
            #[inline]
            fn $method(self, other: $type) -> $type {
                $type::$method(self, &other)
            }
        }
    };
}
pub(crate) use binary_operator;

binary_operator!(Int, Add, add);
binary_operator!(Int, Sub, sub);
binary_operator!(Int, Mul, mul);

impl std::ops::Neg for &Int {
    type Output = Int;
    fn neg(self) -> Int {
        Int::neg(self)
    }
}

impl std::ops::Neg for Int {
    type Output = Int;
    fn neg(self) -> Int {
        Int::neg(&self)
    }
}

impl std::ops::AddAssign<&Int> for Int {
    #[inline]
    fn add_assign(&mut self, other: &Int) {
        if let (Int::Small(a), Int::Small(b)) = (&mut *self, other)
            && let Some(c) = a.checked_add(*b)
        {
            *a = c;
            return;
        }
        *self = Int::add(self, other);
    }
}

//! Decimal bounds for printing.

use super::dyadic::{Dyadic, Toward};
use super::enclosure::Interval;
use crate::algebra::budget::{self, Stopped};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Zero};
use std::cmp::Ordering;

/// Decimal exponents written without a power of ten.
const PLAIN: std::ops::RangeInclusive<i64> = -8..=20;

/// Binary exponents beyond this magnitude are not written in decimal.
const WRITTEN_BOUND: i64 = 1 << 24;

impl Interval {
    /// Decimal strings with `digits` significant digits each, the first at most `lo`, the second at least `hi`; for
    /// ln 2 and 10 digits, `0.6931471805` and `0.6931471806`. A number that the digits hold exactly is written without
    /// trailing zeros; very large and very small ones take the form `1.25e-40`. The sign of a bound is never lost.
    pub fn to_decimal_bounds(&self, digits: u32) -> (String, String) {
        (written(self.lo(), digits, Toward::Down), written(self.hi(), digits, Toward::Up))
    }
}

/// The number rounded to `digits` significant decimal digits in the given direction.
fn written(x: &Dyadic, digits: u32, toward: Toward) -> String {
    match x.sign() {
        Ordering::Equal => "0".to_string(),
        Ordering::Greater => written_positive(x, digits.max(1), toward),
        Ordering::Less => format!("-{}", written_positive(&x.abs(), digits.max(1), toward.opposite())),
    }
}

fn written_positive(x: &Dyadic, digits: u32, toward: Toward) -> String {
    if x.top().abs() > WRITTEN_BOUND {
        budget::stop(Stopped::Size)
    }
    budget::spend(x.top().unsigned_abs() / 16 + 1);
    let limit = BigInt::from(10).pow(digits);
    // 30103/100000 is close to log10 2; the loop below corrects the estimate.
    let mut leading = (x.top() - 1) * 30103 / 100_000;
    let (mut significant, exact) = loop {
        let (quotient, exact) = scaled_floor(x, i64::from(digits) - 1 - leading);
        if quotient >= limit {
            leading += 1;
        } else if &quotient * 10 < limit {
            leading -= 1;
        } else {
            break (quotient, exact);
        }
    };
    if toward == Toward::Up && !exact {
        significant += 1;
        if significant == limit {
            significant /= 10;
            leading += 1;
        }
    }
    let figures = significant.to_string();
    place_point(if exact { figures.trim_end_matches('0') } else { &figures }, leading)
}

/// `⌊x·10^k⌋` and whether it is exact, for `x > 0`.
fn scaled_floor(x: &Dyadic, k: i64) -> (BigInt, bool) {
    let ten = BigInt::from(10).pow(u32::try_from(k.unsigned_abs()).unwrap_or(u32::MAX));
    if k >= 0 {
        let product = x.mul(&Dyadic::from(ten));
        let floor = product.to_fixed(0, Toward::Down);
        let exact = Dyadic::from(floor.clone()) == product;
        return (floor, exact);
    }
    let drop = (-x.exponent()).max(0);
    let numerator = x.to_fixed(drop, Toward::Down);
    let (quotient, rest) = numerator.div_rem(&(ten * (BigInt::one() << drop.unsigned_abs())));
    (quotient, rest.is_zero())
}

/// Writes the figures with the first of them at `10^leading`.
fn place_point(figures: &str, leading: i64) -> String {
    let count = i64::try_from(figures.len()).unwrap_or(i64::MAX);
    if !PLAIN.contains(&leading) {
        let (first, rest) = figures.split_at(1);
        let point = if rest.is_empty() { "" } else { "." };
        return format!("{first}{point}{rest}e{leading}");
    }
    let zeros = |n: i64| "0".repeat(usize::try_from(n).unwrap_or(0));
    if leading < 0 {
        return format!("0.{}{figures}", zeros(-leading - 1));
    }
    if count <= leading + 1 {
        return format!("{figures}{}", zeros(leading + 1 - count));
    }
    let (whole, part) = figures.split_at(usize::try_from(leading + 1).unwrap_or(0));
    format!("{whole}.{part}")
}

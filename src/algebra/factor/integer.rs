//! Factors of integers, as far as they are needed for display and for bases of logarithms.

use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive, Zero};

use crate::algebra::budget;
use crate::algebra::modular::{Stream, is_prime};

/// Primes below this bound are always split off.
const TRIAL: u32 = 1 << 12;

/// |n| as a product of pairwise coprime factors, ascending; none for 0 and ±1. Prime factors below 4096 are split
/// off, what remains is split completely when it is below 2^64; beyond that it may stay composite.
pub fn integer_factors(n: &BigInt) -> Vec<(BigInt, u32)> {
    let mut rest = n.abs();
    let mut factors = Vec::new();
    if rest.is_zero() {
        return factors;
    }
    let mut q = 2u32;
    while q < TRIAL && !rest.is_one() {
        let mut exponent = 0;
        while (&rest % q).is_zero() {
            rest /= q;
            exponent += 1;
        }
        if exponent > 0 {
            factors.push((BigInt::from(q), exponent));
        }
        if rest.to_u32().is_some_and(|r| r < q * q) {
            break;
        }
        q += if q == 2 { 1 } else { 2 };
    }
    match rest.to_u64() {
        Some(1) => {}
        Some(word) => {
            let mut primes = Vec::new();
            split_word(word, &mut primes);
            primes.sort_unstable();
            for group in primes.chunk_by(|a, b| a == b) {
                factors.push((BigInt::from(group[0]), group.len() as u32));
            }
        }
        None => factors.push(as_power(&rest)),
    }
    factors
}

/// A large number as a power with the greatest exponent.
fn as_power(n: &BigInt) -> (BigInt, u32) {
    let top = (n.bits() / 12 + 1).min(u64::from(u32::MAX)) as u32;
    let found = (2..=top).rev().find_map(|k| {
        budget::spend(n.bits() / 8);
        let root = n.nth_root(k);
        (num_traits::pow::Pow::pow(&root, k) == *n).then_some((root, k))
    });
    found.unwrap_or_else(|| (n.clone(), 1))
}

/// The prime factors of a word without small factors (Pollard's rho).
fn split_word(n: u64, primes: &mut Vec<u64>) {
    if n == 1 {
        return;
    }
    if is_prime(n) {
        primes.push(n);
        return;
    }
    let mut stream = Stream::new(n);
    loop {
        if let Some(d) = rho(n, 1 + stream.below(n - 1), stream.below(n)) {
            split_word(d, primes);
            split_word(n / d, primes);
            return;
        }
    }
}

/// One run of x → x² + c from `start`; a proper divisor when the cycle shows one.
fn rho(n: u64, c: u64, start: u64) -> Option<u64> {
    let step = |x: u64| ((u128::from(x) * u128::from(x) + u128::from(c)) % u128::from(n)) as u64;
    let (mut slow, mut fast) = (start, start);
    loop {
        budget::spend(8);
        let mut product = 1u64;
        let before = (slow, fast);
        for _ in 0..64 {
            slow = step(slow);
            fast = step(step(fast));
            product = (u128::from(product) * u128::from(slow.abs_diff(fast)) % u128::from(n)) as u64;
        }
        let d = product.gcd(&n);
        if d == 1 {
            continue;
        }
        if d < n {
            return Some(d);
        }
        // Several factors, or the end of the cycle, within one batch: repeat it step by step.
        (slow, fast) = before;
        for _ in 0..64 {
            slow = step(slow);
            fast = step(step(fast));
            let d = slow.abs_diff(fast).gcd(&n);
            if d != 1 {
                return (d < n).then_some(d);
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn small_large_and_composite_numbers() {
        let list =
            |n: &BigInt| integer_factors(n).iter().map(|(p, e)| (p.to_u64().unwrap_or(0), *e)).collect::<Vec<_>>();
        assert_eq!(list(&BigInt::from(-360)), [(2, 3), (3, 2), (5, 1)]);
        assert_eq!(list(&BigInt::from(0)), []);
        assert_eq!(list(&BigInt::from(4_294_967_291u64)), [(4_294_967_291, 1)]);
        assert_eq!(
            list(&(BigInt::from(1_000_003u64) * 1_000_033u64 * 12u64)),
            [(2, 2), (3, 1), (1_000_003, 1), (1_000_033, 1)]
        );
        assert_eq!(list(&BigInt::from(1_000_003u64).pow(3)), [(1_000_003, 3)]);
        assert_eq!(list(&BigInt::from(1_000_003u64).pow(9)), [(1_000_003, 9)]);
    }
}

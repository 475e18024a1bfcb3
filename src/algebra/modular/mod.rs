//! Arithmetic modulo word-size primes: residues, dense univariate polynomials, prime search.

pub(crate) mod dense;

use crate::algebra::number::Int;

/// The greatest prime below 2^62.
const FIRST_PRIME: u64 = (1 << 62) - 57;

/// Residues modulo an odd prime below 2^62, kept in Montgomery form (r·2^64 mod p) throughout.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Modulus {
    p: u64,
    /// −p⁻¹ mod 2^64.
    negative_inverse: u64,
    /// 2^128 mod p.
    square: u64,
    /// The residue 1.
    one: u64,
}

impl Modulus {
    /// For an odd prime p < 2^62.
    pub(crate) fn new(p: u64) -> Modulus {
        // Newton: each round doubles the number of correct low bits of p⁻¹.
        let mut inverse = p;
        for _ in 0..6 {
            inverse = inverse.wrapping_mul(2u64.wrapping_sub(p.wrapping_mul(inverse)));
        }
        let one = (u128::from(u64::MAX) % u128::from(p)) as u64 + 1;
        let one = if one == p { 0 } else { one };
        let square = (u128::from(one) * u128::from(one) % u128::from(p)) as u64;
        Modulus { p, negative_inverse: inverse.wrapping_neg(), square, one }
    }

    /// The prime.
    #[inline]
    pub(crate) fn prime(&self) -> u64 {
        self.p
    }

    /// The residue 1.
    #[inline]
    pub(crate) fn one(&self) -> u64 {
        self.one
    }

    #[inline]
    fn reduce(&self, t: u128) -> u64 {
        let k = (t as u64).wrapping_mul(self.negative_inverse);
        let r = ((t + u128::from(k) * u128::from(self.p)) >> 64) as u64;
        if r >= self.p { r - self.p } else { r }
    }

    /// The residue of a number in 0..p.
    #[inline]
    pub(crate) fn enter(&self, a: u64) -> u64 {
        self.reduce(u128::from(a) * u128::from(self.square))
    }

    /// The number in 0..p of a residue.
    #[inline]
    pub(crate) fn leave(&self, a: u64) -> u64 {
        self.reduce(u128::from(a))
    }

    /// The residue of an integer.
    #[inline]
    pub(crate) fn residue(&self, n: &Int) -> u64 {
        self.enter(n.rem_u64(self.p))
    }

    /// The number of least absolute value with this residue.
    #[inline]
    pub(crate) fn symmetric(&self, a: u64) -> i64 {
        let n = self.leave(a);
        if n > self.p / 2 { n as i64 - self.p as i64 } else { n as i64 }
    }

    #[inline]
    pub(crate) fn add(&self, a: u64, b: u64) -> u64 {
        let s = a + b;
        if s >= self.p { s - self.p } else { s }
    }

    #[inline]
    pub(crate) fn sub(&self, a: u64, b: u64) -> u64 {
        if a >= b { a - b } else { a + self.p - b }
    }

    #[inline]
    pub(crate) fn neg(&self, a: u64) -> u64 {
        if a == 0 { 0 } else { self.p - a }
    }

    #[inline]
    pub(crate) fn mul(&self, a: u64, b: u64) -> u64 {
        self.reduce(u128::from(a) * u128::from(b))
    }

    /// a^k.
    pub(crate) fn pow(&self, a: u64, mut k: u64) -> u64 {
        let (mut square, mut value) = (a, self.one);
        while k > 0 {
            if k & 1 == 1 {
                value = self.mul(value, square);
            }
            square = self.mul(square, square);
            k >>= 1;
        }
        value
    }

    /// 1/a for a ≠ 0.
    pub(crate) fn inverse(&self, a: u64) -> u64 {
        self.pow(a, self.p - 2)
    }

    /// 1, a, a², …, a^top.
    pub(crate) fn powers(&self, a: u64, top: usize) -> Vec<u64> {
        let mut list = Vec::with_capacity(top + 1);
        let mut power = self.one;
        for _ in 0..=top {
            list.push(power);
            power = self.mul(power, a);
        }
        list
    }
}

/// The primes below 2^62, descending.
pub(crate) struct Primes(u64);

impl Primes {
    pub(crate) fn new() -> Primes {
        Primes(FIRST_PRIME + 2)
    }
}

impl Iterator for Primes {
    type Item = u64;
    fn next(&mut self) -> Option<u64> {
        loop {
            self.0 -= 2;
            if self.0 == FIRST_PRIME || is_prime(self.0) {
                return Some(self.0);
            }
        }
    }
}

/// Whether n is prime (Miller–Rabin with the bases that decide all words).
pub(crate) fn is_prime(n: u64) -> bool {
    const BASES: [u64; 12] = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37];
    if let Some(&b) = BASES.iter().find(|&&b| n.is_multiple_of(b)) {
        return n == b;
    }
    if n < 37 * 37 {
        return n > 1;
    }
    let mul = |a: u64, b: u64| (u128::from(a) * u128::from(b) % u128::from(n)) as u64;
    let twos = (n - 1).trailing_zeros();
    let odd = (n - 1) >> twos;
    BASES.iter().all(|&base| {
        let (mut value, mut square, mut k) = (1u64, base % n, odd);
        while k > 0 {
            if k & 1 == 1 {
                value = mul(value, square);
            }
            square = mul(square, square);
            k >>= 1;
        }
        if value == 1 || value == n - 1 {
            return true;
        }
        (1..twos).any(|_| {
            value = mul(value, value);
            value == n - 1
        })
    })
}

/// A fixed stream of pseudo-random words (SplitMix64): the same run every time.
#[derive(Clone, Debug)]
pub(crate) struct Stream(u64);

impl Stream {
    pub(crate) fn new(seed: u64) -> Stream {
        Stream(seed)
    }

    pub(crate) fn word(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// A number in 0..n, n ≥ 1.
    pub(crate) fn below(&mut self, n: u64) -> u64 {
        self.word() % n
    }

    /// A residue that is neither 0 nor 1.
    pub(crate) fn residue(&mut self, m: &Modulus) -> u64 {
        m.enter(2 + self.below(m.prime() - 2))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_first_prime_is_the_greatest_below_two_to_the_62() {
        assert!(is_prime(FIRST_PRIME));
        assert!((FIRST_PRIME + 1..1 << 62).all(|n| !is_prime(n)));
        assert_eq!((0..60).filter(|&n| is_prime(n)).count(), 17);
        assert!(!is_prime(3_215_031_751) && !is_prime(41 * 41) && is_prime(41 * 41 + 12));
    }

    #[test]
    fn residues_form_a_field() {
        let mut stream = Stream::new(7);
        for p in Primes::new().take(3).chain([3, 101]) {
            let m = Modulus::new(p);
            assert_eq!(m.enter(1), m.one());
            for _ in 0..50 {
                let (a, b) = (stream.below(p), stream.below(p));
                assert_eq!(m.leave(m.mul(m.enter(a), m.enter(b))), (a as u128 * b as u128 % p as u128) as u64);
                assert_eq!(m.symmetric(m.enter(a)).rem_euclid(p as i64) as u64, a);
                if a != 0 {
                    assert_eq!(m.mul(m.inverse(m.enter(a)), m.enter(a)), m.one());
                }
            }
        }
    }
}

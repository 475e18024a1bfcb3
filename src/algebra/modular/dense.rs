//! Dense univariate polynomials over a prime field: ascending residues without trailing zeros.

use super::Modulus;
use crate::algebra::budget;

/// Coefficients by ascending exponent; the last one is not 0.
pub(crate) type Dense = Vec<u64>;

/// Drops leading zeros.
pub(crate) fn trim(a: &mut Dense) {
    while a.last() == Some(&0) {
        a.pop();
    }
}

/// The degree; 0 for constants and for 0.
pub(crate) fn degree(a: &Dense) -> usize {
    a.len().saturating_sub(1)
}

impl Modulus {
    /// a − b.
    pub(crate) fn difference(&self, a: &Dense, b: &Dense) -> Dense {
        let mut out = a.clone();
        out.resize(a.len().max(b.len()), 0);
        for (x, y) in out.iter_mut().zip(b) {
            *x = self.sub(*x, *y);
        }
        trim(&mut out);
        out
    }

    /// a·b.
    pub(crate) fn product(&self, a: &Dense, b: &Dense) -> Dense {
        if a.is_empty() || b.is_empty() {
            return Vec::new();
        }
        budget::spend((a.len() * b.len() / 16) as u64);
        let mut out = vec![0; a.len() + b.len() - 1];
        for (i, &x) in a.iter().enumerate() {
            for (place, &y) in out[i..].iter_mut().zip(b) {
                *place = self.add(*place, self.mul(x, y));
            }
        }
        out
    }

    /// k·a.
    pub(crate) fn multiple(&self, a: &Dense, k: u64) -> Dense {
        if k == 0 { Vec::new() } else { a.iter().map(|&x| self.mul(x, k)).collect() }
    }

    /// Quotient and remainder by b ≠ 0.
    pub(crate) fn div_rem(&self, a: &Dense, b: &Dense) -> (Dense, Dense) {
        let Some(&lead) = b.last() else { return (Vec::new(), a.clone()) };
        if a.len() < b.len() {
            return (Vec::new(), a.clone());
        }
        budget::spend((b.len() * (a.len() - b.len() + 1) / 16) as u64);
        let scale = if lead == self.one() { lead } else { self.inverse(lead) };
        let mut rest = a.clone();
        let mut quotient = vec![0; a.len() - b.len() + 1];
        for i in (0..quotient.len()).rev() {
            let q = self.mul(rest[i + b.len() - 1], scale);
            quotient[i] = q;
            if q != 0 {
                for (place, &y) in rest[i..].iter_mut().zip(b) {
                    *place = self.sub(*place, self.mul(q, y));
                }
            }
        }
        rest.truncate(b.len() - 1);
        trim(&mut rest);
        (quotient, rest)
    }

    /// The remainder by b ≠ 0.
    pub(crate) fn remainder(&self, a: &Dense, b: &Dense) -> Dense {
        self.div_rem(a, b).1
    }

    /// a with leading coefficient 1.
    pub(crate) fn monic(&self, a: &Dense) -> Dense {
        match a.last() {
            Some(&lead) if lead != self.one() => self.multiple(a, self.inverse(lead)),
            _ => a.clone(),
        }
    }

    /// The monic greatest common divisor.
    pub(crate) fn common(&self, a: &Dense, b: &Dense) -> Dense {
        let (mut a, mut b) = (a.clone(), b.clone());
        while !b.is_empty() {
            let r = self.remainder(&a, &b);
            a = std::mem::replace(&mut b, r);
        }
        self.monic(&a)
    }

    /// (s, t) with s·a + t·b = 1 for coprime a and b, deg s < deg b, deg t < deg a; None when they are not coprime.
    pub(crate) fn bezout(&self, a: &Dense, b: &Dense) -> Option<(Dense, Dense)> {
        let (mut r0, mut r1) = (a.clone(), b.clone());
        let (mut s0, mut s1) = (vec![self.one()], Vec::new());
        let (mut t0, mut t1) = (Vec::new(), vec![self.one()]);
        while !r1.is_empty() {
            let (q, r) = self.div_rem(&r0, &r1);
            r0 = std::mem::replace(&mut r1, r);
            let s = self.difference(&s0, &self.product(&q, &s1));
            s0 = std::mem::replace(&mut s1, s);
            let t = self.difference(&t0, &self.product(&q, &t1));
            t0 = std::mem::replace(&mut t1, t);
        }
        let [unit] = r0[..] else { return None };
        let k = self.inverse(unit);
        Some((self.multiple(&s0, k), self.multiple(&t0, k)))
    }

    /// The derivative.
    pub(crate) fn slope(&self, a: &Dense) -> Dense {
        let mut k = 0;
        let mut out: Dense = Vec::with_capacity(a.len());
        for &x in a.iter().skip(1) {
            k = self.add(k, self.one());
            out.push(self.mul(x, k));
        }
        trim(&mut out);
        out
    }

    /// base^k modulo `by`.
    pub(crate) fn power_modulo(&self, base: &Dense, mut k: u64, by: &Dense) -> Dense {
        let mut square = self.remainder(base, by);
        let mut value = self.remainder(&vec![self.one()], by);
        while k > 0 {
            if k & 1 == 1 {
                value = self.remainder(&self.product(&value, &square), by);
            }
            k >>= 1;
            if k > 0 {
                square = self.remainder(&self.product(&square, &square), by);
            }
        }
        value
    }
}

/// Interpolation through fixed distinct abscissas (Newton's divided differences), used for many sets of values.
pub(crate) struct Interpolation {
    at: Vec<u64>,
    /// `1 / (at[k] − at[k − order])` by order (from 1), then k (from order).
    gaps: Vec<Vec<u64>>,
}

impl Interpolation {
    pub(crate) fn new(m: &Modulus, at: Vec<u64>) -> Interpolation {
        let n = at.len();
        budget::spend((n * n) as u64);
        let gaps = (1..n).map(|order| (order..n).map(|k| m.inverse(m.sub(at[k], at[k - order]))).collect());
        Interpolation { gaps: gaps.collect(), at }
    }

    /// The polynomial of degree < n with the given n values.
    pub(crate) fn through(&self, m: &Modulus, mut table: Vec<u64>) -> Dense {
        let n = self.at.len();
        for (order, gaps) in (1..n).zip(&self.gaps) {
            for k in (order..n).rev() {
                table[k] = m.mul(m.sub(table[k], table[k - 1]), gaps[k - order]);
            }
        }
        let mut out: Dense = Vec::with_capacity(n);
        for k in (0..n).rev() {
            // out := out·(z − at[k]) + table[k]
            out.insert(0, 0);
            for i in 1..out.len() {
                let below = m.mul(out[i], self.at[k]);
                out[i - 1] = m.sub(out[i - 1], below);
            }
            out[0] = m.add(out[0], table[k]);
        }
        trim(&mut out);
        out
    }
}

#[cfg(test)]
mod tests {
    use super::super::{Primes, Stream};
    use super::*;

    #[test]
    fn division_bezout_and_interpolation() {
        let m = Modulus::new(Primes::new().next().unwrap_or(3));
        let mut stream = Stream::new(1);
        let mut random = |n: usize| -> Dense { (0..n).map(|_| stream.residue(&m)).collect() };
        let (a, b, c) = (random(7), random(4), random(3));
        let (q, r) = m.div_rem(&a, &b);
        assert_eq!(m.difference(&a, &m.product(&q, &b)), r);
        assert_eq!(m.common(&m.product(&a, &c), &m.product(&b, &c)), m.monic(&c));
        let (s, t) = m.bezout(&a, &b).unwrap_or_default();
        assert_eq!(m.difference(&vec![m.one()], &m.product(&s, &a)), m.product(&t, &b));
        let at = random(7);
        let values: Vec<u64> = at.iter().map(|&x| a.iter().rev().fold(0, |sum, &c| m.add(m.mul(sum, x), c))).collect();
        assert_eq!(Interpolation::new(&m, at).through(&m, values), a);
    }
}

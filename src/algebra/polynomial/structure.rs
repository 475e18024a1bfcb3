//! Degrees, coefficients, substitution, derivative, evaluation modulo a prime.

use std::collections::BTreeSet;

use num_traits::{One, Zero};
use rustc_hash::FxHashMap;

use super::{Poly, Term};
use crate::algebra::budget::{self, Stopped};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::{Int, Rational};

impl Poly {
    /// The variables present, increasing.
    pub fn vars(&self) -> Vec<Var> {
        let mut seen = BTreeSet::new();
        let mut last: Option<Var> = None;
        for (v, _) in self.terms.iter().flat_map(|(m, _)| m.iter()) {
            if last != Some(v) {
                seen.insert(v);
            }
            last = Some(v);
        }
        seen.into_iter().collect()
    }

    /// Whether `v` is present.
    pub fn contains(&self, v: Var) -> bool {
        self.terms.iter().any(|(m, _)| m.exponent(v) != 0)
    }

    /// The greatest exponent of `v` among the terms; 0 for the polynomial 0.
    pub fn degree(&self, v: Var) -> i32 {
        self.terms.iter().map(|(m, _)| m.exponent(v)).max().unwrap_or(0)
    }

    /// The least exponent of `v` among the terms; 0 for the polynomial 0.
    pub fn low_degree(&self, v: Var) -> i32 {
        self.terms.iter().map(|(m, _)| m.exponent(v)).min().unwrap_or(0)
    }

    /// self = Σ cₑ·v^e with cₑ ≠ 0 free of `v`, by descending exponent.
    pub fn coefficients(&self, v: Var) -> Vec<(i32, Poly)> {
        let grouped = self.collect(|w| w == v);
        grouped.into_iter().map(|(m, c)| (m.exponent(v), c)).collect()
    }

    /// self = Σ c·m with monomials m of picked variables only and c ≠ 0 free of them, by descending m.
    pub fn collect(&self, mut pick: impl FnMut(Var) -> bool) -> Vec<(Monomial, Poly)> {
        budget::spend(self.len() as u64);
        let mut split: Vec<(Monomial, Term)> = Vec::with_capacity(self.len());
        for (m, c) in &self.terms {
            let (picked, rest) = m.split(&mut pick);
            split.push((picked, (rest, c.clone())));
        }
        // Stable: within one group the rests keep their descending order.
        split.sort_by(|a, b| b.0.cmp(&a.0));
        let mut groups: Vec<(Monomial, Vec<Term>)> = Vec::new();
        for (picked, term) in split {
            match groups.last_mut() {
                Some((m, terms)) if *m == picked => terms.push(term),
                _ => groups.push((picked, vec![term])),
            }
        }
        groups.into_iter().map(|(m, terms)| (m, Poly::reduced(terms, self.den.clone()))).collect()
    }

    /// self with `v` replaced. The exponents of `v` must not be negative unless the replacement is a single term;
    /// otherwise the computation ends with [`Stopped::Size`] (see [`Poly::try_substitute`]).
    pub fn substitute(&self, v: Var, by: &Poly) -> Poly {
        self.try_substitute(v, by).unwrap_or_else(|| budget::stop(Stopped::Size))
    }

    /// self with `v` replaced; None when the result is no Laurent polynomial term by term (a negative power of a sum
    /// or of 0).
    pub fn try_substitute(&self, v: Var, by: &Poly) -> Option<Poly> {
        if !self.contains(v) {
            return Some(self.clone());
        }
        let coefficients = self.coefficients(v);
        if let Some((c, m)) = by.as_monomial() {
            let parts = coefficients.iter().map(|(e, p)| p.mul_term(&num_traits::pow::Pow::pow(&c, *e), &m.pow(*e)));
            return Some(Poly::sum(parts.collect()));
        }
        let low = coefficients.last().map_or(0, |&(e, _)| e);
        if low < 0 {
            return None;
        }
        let mut parts = Vec::with_capacity(coefficients.len());
        let (mut power, mut reached) = (Poly::one(), 0);
        for (e, p) in coefficients.iter().rev() {
            while reached < *e {
                power = power.mul(by);
                reached += 1;
            }
            parts.push(p.mul(&power));
        }
        Some(Poly::sum(parts))
    }

    /// self with `v` set to a rational number; None when a negative power of 0 arises.
    pub fn evaluate(&self, v: Var, at: &Rational) -> Option<Poly> {
        self.try_substitute(v, &Poly::constant(at))
    }

    /// ∂self/∂v with every other variable a constant.
    pub fn formal_derivative(&self, v: Var) -> Poly {
        budget::spend(self.len() as u64);
        let down = Monomial::power(v, -1);
        let terms = self.terms.iter().filter_map(|(m, c)| {
            let e = m.exponent(v);
            (e != 0).then(|| (m.mul(&down), c.mul(&Int::from(i64::from(e)))))
        });
        Poly::reduced(terms.collect(), self.den.clone())
    }

    /// The value modulo a prime at a point; None when the denominator or a variable with negative exponent is ≡ 0.
    pub fn eval_mod(&self, prime: u64, at: &mut dyn FnMut(Var) -> u64) -> Option<u64> {
        budget::spend(self.len() as u64);
        let mut powers: FxHashMap<u32, u64> = FxHashMap::default();
        let mut sum = 0u64;
        for (m, c) in &self.terms {
            let mut value = c.rem_u64(prime);
            for (&key, (v, e)) in m.packed().iter().zip(m.iter()) {
                let factor = match powers.get(&key) {
                    Some(&known) => known,
                    None => {
                        let new = signed_power(at(v) % prime, e, prime)?;
                        powers.insert(key, new);
                        new
                    }
                };
                value = mul_mod(value, factor, prime);
            }
            sum = ((u128::from(sum) + u128::from(value)) % u128::from(prime)) as u64;
        }
        let den = self.den.rem_u64(prime);
        if den == 1 {
            return Some(sum);
        }
        Some(mul_mod(sum, signed_power(den, -1, prime)?, prime))
    }

    /// self with every variable renamed (variables may fall together).
    pub fn map_vars(&self, mut rename: impl FnMut(Var) -> Var) -> Poly {
        budget::spend(self.len() as u64);
        let terms = self.terms.iter().map(|(m, c)| (m.map_vars(&mut rename), c.clone()));
        Poly::collected(terms.collect(), self.den.clone())
    }

    /// The value at a rational point; None when a negative power of 0 arises.
    pub fn eval(&self, at: &mut dyn FnMut(Var) -> Rational) -> Option<Rational> {
        budget::spend(4 * self.len() as u64);
        let mut sum = Rational::zero();
        for (m, c) in &self.terms {
            let mut value = c.to_rational();
            for (v, e) in m.iter() {
                let x = at(v);
                if x.is_zero() && e < 0 {
                    return None;
                }
                value *= num_traits::pow::Pow::pow(&x, e);
            }
            sum += value;
        }
        Some(if self.den.is_one() { sum } else { sum / self.den.to_rational() })
    }

    /// Each variable with its smallest and largest exponent over the terms that hold it, in one pass.
    pub fn ranges(&self) -> FxHashMap<Var, (i32, i32)> {
        let mut ranges: FxHashMap<Var, (i32, i32)> = FxHashMap::default();
        for (m, _) in &self.terms {
            for (v, e) in m.iter() {
                let slot = ranges.entry(v).or_insert((e, e));
                *slot = (slot.0.min(e), slot.1.max(e));
            }
        }
        ranges
    }

    /// Whether every coefficient is positive (true for 0).
    pub fn has_positive_coefficients(&self) -> bool {
        self.terms.iter().all(|(_, c)| c.signum() > 0)
    }
}

fn mul_mod(a: u64, b: u64, p: u64) -> u64 {
    (u128::from(a) * u128::from(b) % u128::from(p)) as u64
}

/// base^e modulo a prime; None for a negative power of 0.
fn signed_power(base: u64, e: i32, p: u64) -> Option<u64> {
    if e < 0 && base == 0 {
        return None;
    }
    let mut k = if e >= 0 { e as u64 } else { (p - 1) - u64::from(e.unsigned_abs()) % (p - 1) };
    let (mut square, mut value) = (base, 1 % p);
    while k > 0 {
        if k & 1 == 1 {
            value = mul_mod(value, square, p);
        }
        square = mul_mod(square, square, p);
        k >>= 1;
    }
    Some(value)
}

impl Zero for Poly {
    fn zero() -> Poly {
        Poly::zero()
    }
    fn is_zero(&self) -> bool {
        Poly::is_zero(self)
    }
}

impl One for Poly {
    fn one() -> Poly {
        Poly::one()
    }
}

//! Factorisation of univariate polynomials over the rationals (Zassenhaus 1969): modulo a prime, lifted, recombined.

use num_bigint::BigInt;
use num_traits::{One, Signed, Zero};

use super::integral::{self, Integral};
use super::splitting::Splitting;
use crate::algebra::budget;
use crate::algebra::modular::dense::degree;
use crate::algebra::modular::{Modulus, Primes};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Int;
use crate::algebra::polynomial::Poly;

/// Small primes used for the degrees that factors may have.
const SMALL_PRIMES: [u64; 4] = [1009, 2003, 4001, 8009];
/// Large primes compared before one is chosen.
const TRIED: usize = 2;

/// The irreducible factors of a primitive squarefree polynomial in the single variable `v`.
pub(super) fn factor_univariate(p: &Poly, v: Var) -> Vec<Poly> {
    factor_integral(&to_integral(p, v)).iter().map(|f| from_integral(f, v)).collect()
}

/// The coefficients of a polynomial with integer coefficients in `v` alone.
pub(super) fn to_integral(p: &Poly, v: Var) -> Integral {
    let mut list = vec![BigInt::zero(); p.degree(v).max(0) as usize + 1];
    for (m, c) in p.raw_terms() {
        if let Some(place) = usize::try_from(m.exponent(v)).ok().and_then(|e| list.get_mut(e)) {
            *place = c.to_bigint();
        }
    }
    integral::trim(&mut list);
    list
}

pub(super) fn from_integral(f: &Integral, v: Var) -> Poly {
    let terms = f.iter().enumerate().map(|(e, c)| (Monomial::power(v, e as i32), Int::from(c)));
    Poly::from_int_terms(terms.collect())
}

/// The irreducible factors of a primitive squarefree polynomial.
pub(super) fn factor_integral(f: &Integral) -> Vec<Integral> {
    if f.len() <= 2 {
        return if f.len() == 2 { vec![f.clone()] } else { Vec::new() };
    }
    if f[0].is_zero() {
        let mut factors = factor_integral(&f[1..].to_vec());
        factors.push(vec![BigInt::zero(), BigInt::one()]);
        return factors;
    }
    let Some((splitting, possible)) = choose_prime(f) else { return vec![f.clone()] };
    let m = splitting.modulus();
    let bound = coefficient_bound(f);
    let mut modulus = BigInt::from(m.prime());
    while modulus <= bound {
        modulus = &modulus * &modulus;
    }
    match integral::hensel_lift(&m, f, &splitting.factors(), &modulus) {
        Some(lifted) => Recombination { rest: f.clone(), lifted, modulus, possible }.run(),
        None => vec![f.clone()],
    }
}

/// Twice a bound for the coefficients of lc(f)·g/lc(g) for every factor g of f (Mignotte): 2·|lc|·2^n·‖f‖.
fn coefficient_bound(f: &Integral) -> BigInt {
    let square: BigInt = f.iter().map(|c| c * c).sum();
    let lead = f.last().map_or_else(BigInt::one, Signed::abs);
    (lead * (square.sqrt() + 1u32)) << (f.len() + 1)
}

/// The factorisation by degrees modulo a large prime, and the degrees a rational factor may have; None when the
/// degrees prove f irreducible.
fn choose_prime(f: &Integral) -> Option<(Splitting, Vec<bool>)> {
    let n = f.len() - 1;
    let mut possible = vec![true; n + 1];
    let mut narrow = |splitting: &Splitting| {
        let sums = subset_sums(&splitting.degrees(), n);
        possible.iter_mut().zip(&sums).for_each(|(all, &here)| *all &= here);
        possible.iter().filter(|&&d| d).count() > 2
    };
    let small = SMALL_PRIMES.into_iter().filter_map(|p| split_modulo(p, f));
    for splitting in small {
        if !narrow(&splitting) {
            return None;
        }
    }
    let mut best: Option<Splitting> = None;
    for splitting in Primes::new().filter_map(|p| split_modulo(p, f)).take(TRIED) {
        if !narrow(&splitting) {
            return None;
        }
        if best.as_ref().is_none_or(|old| splitting.degrees().len() < old.degrees().len()) {
            best = Some(splitting);
        }
        if best.as_ref().is_some_and(|best| best.degrees().len() <= 4) {
            break;
        }
    }
    best.map(|splitting| (splitting, possible))
}

/// None when the degree drops modulo p or the polynomial is not squarefree there.
fn split_modulo(p: u64, f: &Integral) -> Option<Splitting> {
    let m = Modulus::new(p);
    let image = integral::to_dense(&m, f);
    let usable = degree(&image) + 1 == f.len() && degree(&m.common(&image, &m.slope(&image))) == 0;
    usable.then(|| Splitting::new(m, m.monic(&image)))
}

/// Which sums of the given degrees occur.
pub(super) fn subset_sums(degrees: &[usize], n: usize) -> Vec<bool> {
    let mut sums = vec![false; n + 1];
    sums[0] = true;
    for &d in degrees {
        for s in (d..=n).rev() {
            sums[s] |= sums[s - d];
        }
    }
    sums
}

/// The search for products of lifted factors that divide over the integers.
struct Recombination {
    rest: Integral,
    lifted: Vec<Integral>,
    modulus: BigInt,
    possible: Vec<bool>,
}

impl Recombination {
    fn run(mut self) -> Vec<Integral> {
        let mut found = Vec::new();
        let mut size = 1;
        while 2 * size <= self.lifted.len() {
            match self.divisor_of_size(size) {
                Some((subset, divisor, quotient)) => {
                    found.push(divisor);
                    self.rest = quotient;
                    let mut k = 0;
                    self.lifted.retain(|_| {
                        k += 1;
                        !subset.contains(&(k - 1))
                    });
                }
                None => size += 1,
            }
        }
        if self.rest.len() > 1 {
            found.push(self.rest);
        }
        found
    }

    /// The first subset of the given size whose product divides.
    fn divisor_of_size(&self, size: usize) -> Option<(Vec<usize>, Integral, Integral)> {
        let n = self.lifted.len();
        let mut subset: Vec<usize> = (0..size).collect();
        loop {
            budget::spend(4 * size as u64);
            // Of a pair of complementary halves one is enough.
            if 2 * size == n && subset[0] != 0 {
                return None;
            }
            if let Some((divisor, quotient)) = self.try_subset(&subset) {
                return Some((subset, divisor, quotient));
            }
            let k = (0..size).rev().find(|&k| subset[k] < n - size + k)?;
            subset[k] += 1;
            for j in k + 1..size {
                subset[j] = subset[j - 1] + 1;
            }
        }
    }

    fn try_subset(&self, subset: &[usize]) -> Option<(Integral, Integral)> {
        let total: usize = subset.iter().map(|&k| self.lifted[k].len() - 1).sum();
        if !self.possible.get(total).copied().unwrap_or(false) {
            return None;
        }
        let lead = self.rest.last()?;
        // The constant term of lc·(product) has to divide lc·f(0).
        let constant = subset.iter().fold(lead.clone(), |c, &k| c * &self.lifted[k][0] % &self.modulus);
        let constant = integral::symmetric(&vec![constant], &self.modulus);
        let last = constant.first()?;
        if !(lead * &self.rest[0] % last).is_zero() {
            return None;
        }
        let mut whole = vec![lead.clone()];
        for &k in subset {
            whole = integral::symmetric(&integral::product(&whole, &self.lifted[k]), &self.modulus);
        }
        let divisor = integral::primitive(&whole);
        let quotient = integral::exact_quotient(&self.rest, &divisor)?;
        Some((divisor, quotient))
    }
}

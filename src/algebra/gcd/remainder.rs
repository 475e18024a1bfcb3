//! The primitive remainder sequence: always succeeds, used when images keep failing.

use crate::algebra::budget;
use crate::algebra::gcd::content_in;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;

/// The gcd of two polynomials that are primitive in `main`.
pub(super) fn gcd_by_remainders(a: &Poly, b: &Poly, main: Var) -> Poly {
    let (mut a, mut b) = if a.degree(main) >= b.degree(main) { (a.clone(), b.clone()) } else { (b.clone(), a.clone()) };
    while b.degree(main) > 0 {
        let rest = pseudo_remainder(&a, &b, main);
        if rest.is_zero() {
            return b.primitive().part;
        }
        a = std::mem::replace(&mut b, primitive_in(&rest, main));
    }
    Poly::one()
}

/// `p` without its content as polynomial in `v`.
fn primitive_in(p: &Poly, v: Var) -> Poly {
    let content = content_in(p, v);
    let monomial_free = p.primitive().part;
    monomial_free.div_exact(&content).map_or(monomial_free, |q| q.primitive().part)
}

/// A multiple of `a` modulo `b` by polynomials free of `v`; deg b ≥ 1.
fn pseudo_remainder(a: &Poly, b: &Poly, v: Var) -> Poly {
    let mut rest = a.clone();
    let Some((d, lead)) = b.coefficients(v).into_iter().next() else { return rest };
    loop {
        budget::spend(1 + rest.len() as u64);
        let Some((e, c)) = rest.coefficients(v).into_iter().next() else { return rest };
        if e < d {
            return rest;
        }
        let shifted = b.mul_monomial(&Monomial::power(v, e - d));
        rest = &(&lead * &rest) - &(&c * &shifted);
    }
}

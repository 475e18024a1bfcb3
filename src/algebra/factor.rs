//! Placeholder until the factorisation lands: delete this file then (factor/ replaces it).
use super::{monomial::Monomial, number::Rational, polynomial::Poly};
use num_bigint::BigInt;
pub struct Factored {
    pub content: Rational,
    pub monomial: Monomial,
    pub factors: Vec<(Poly, u32)>,
    pub complete: bool,
}
pub fn factor(p: &Poly) -> Factored {
    let s = p.primitive();
    let f = if s.part.is_one() { vec![] } else { vec![(s.part, 1)] };
    Factored { content: s.content, monomial: s.monomial, factors: f, complete: false }
}
pub fn integer_factors(n: &BigInt) -> Vec<(BigInt, u32)> {
    let mut v = vec![];
    let mut n = n.clone();
    for q in [2u32, 3, 5, 7, 11, 13, 17, 19, 23] {
        let mut k = 0;
        while (&n % q) == BigInt::from(0u32) {
            n /= q;
            k += 1;
        }
        if k > 0 {
            v.push((BigInt::from(q), k));
        }
    }
    if n > BigInt::from(1u32) {
        v.push((n, 1));
    }
    v
}

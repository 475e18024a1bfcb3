//! Polynomials of degree 2 in a variable: reducible exactly when the discriminant is a square.

use super::Pieces;
use crate::algebra::budget;
use crate::algebra::gcd::gcd;
use crate::algebra::modular::{Modulus, Primes, Stream};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Int;
use crate::algebra::polynomial::Poly;

/// Random residues of the discriminant looked at before it is expanded.
const SAMPLES: usize = 12;

/// The factors of a polynomial that is primitive and of degree 2 in `v`; None when it has another degree.
pub(super) fn factor_quadratic(p: &Poly, v: Var) -> Option<Pieces> {
    let part = |k: i32| p.coefficients(v).into_iter().find(|(e, _)| *e == k).map_or_else(Poly::zero, |(_, c)| c);
    if p.degree(v) != 2 {
        return None;
    }
    let (a, b, c) = (part(2), part(1), part(0));
    if has_nonresidue(&a, &b, &c) {
        return Some(Pieces::irreducible(p.clone()));
    }
    let discriminant = &b.pow(2) - &(&(&a * &c) * &Poly::int(4));
    let Some(root) = square_root(&discriminant) else {
        return Some(Pieces::irreducible(p.clone()));
    };
    let line = Poly::sum(vec![&(&a * &Poly::var(v)) * &Poly::int(2), b, root.neg()]);
    let first = gcd(p, &line);
    let second = p.div_exact(&first)?.primitive().part;
    Some(Pieces::of(vec![first, second]))
}

/// Whether b² − 4ac is a non-residue at some point modulo a prime, hence no square.
fn has_nonresidue(a: &Poly, b: &Poly, c: &Poly) -> bool {
    let mut stream = Stream::new(0x0101_4f2d);
    Primes::new().take(SAMPLES).any(|p| {
        let m = Modulus::new(p);
        let seed = stream.word();
        let mut at = |v: Var| Stream::new(seed ^ ((v.index() as u64) << 32)).below(p);
        let mut value = |q: &Poly| q.eval_mod(p, &mut at).map(|x| m.enter(x));
        let (Some(a), Some(b), Some(c)) = (value(a), value(b), value(c)) else { return false };
        let d = m.sub(m.mul(b, b), m.mul(m.enter(4), m.mul(a, c)));
        d != 0 && m.pow(d, (p - 1) / 2) != m.one()
    })
}

/// The polynomial s with positive leading coefficient and s² = p, when there is one. Coefficients must be integers.
pub(super) fn square_root(p: &Poly) -> Option<Poly> {
    let Some(((lead, c), (last, _))) = p.raw_terms().first().zip(p.raw_terms().last()) else {
        return Some(Poly::zero());
    };
    let head = (half(lead)?, integer_root(c)?);
    let end = half(last)?;
    let double = head.1.mul(&Int::from(2));
    let mut root = Poly::from_int_terms(vec![head.clone()]);
    let mut rest = p - &root.pow(2);
    while let Some((m, c)) = rest.raw_terms().first() {
        let next = m.div(&head.0);
        if next < end || !next.is_polynomial() {
            return None;
        }
        budget::spend(1 + root.len() as u64);
        let term = Poly::from_int_terms(vec![(next, c.checked_div(&double)?)]);
        rest = &rest - &(&term * &(&(&root * &Poly::int(2)) + &term));
        root = &root + &term;
    }
    Some(root)
}

/// The square root of a monomial.
fn half(m: &Monomial) -> Option<Monomial> {
    let even = m.iter().all(|(_, e)| e % 2 == 0);
    even.then(|| Monomial::from_pairs(m.iter().map(|(v, e)| (v, e / 2))))
}

fn integer_root(c: &Int) -> Option<Int> {
    if c.is_negative() {
        return None;
    }
    let root = Int::from(c.to_bigint().sqrt());
    (root.mul(&root) == *c).then_some(root)
}

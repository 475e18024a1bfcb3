//! Sparse multivariate polynomials over a prime field, as far as Hensel lifting needs them.

use num_bigint::BigInt;

use crate::algebra::budget;
use crate::algebra::modular::Modulus;
use crate::algebra::modular::dense::Dense;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Int;
use crate::algebra::polynomial::Poly;

/// Terms by descending monomial, no zero coefficient.
pub(super) type Residual = Vec<(Monomial, u64)>;

/// The residues of a polynomial with integer coefficients.
pub(super) fn reduce(m: &Modulus, p: &Poly) -> Residual {
    let terms = p.raw_terms().iter().map(|(k, c)| (k.clone(), m.residue(c)));
    terms.filter(|&(_, c)| c != 0).collect()
}

/// The terms with the integers of least absolute value.
pub(super) fn lifted(m: &Modulus, p: &Residual) -> Vec<(Monomial, BigInt)> {
    p.iter().map(|(k, c)| (k.clone(), BigInt::from(m.symmetric(*c)))).collect()
}

/// The polynomial with the integers of least absolute value.
pub(super) fn to_poly(terms: impl Iterator<Item = (Monomial, BigInt)>) -> Poly {
    Poly::from_int_terms(terms.map(|(k, c)| (k, Int::from(c))).collect())
}

pub(super) fn from_dense(x: Var, a: &Dense) -> Residual {
    let terms = a.iter().enumerate().rev().filter(|&(_, &c)| c != 0);
    terms.map(|(e, &c)| (Monomial::power(x, e as i32), c)).collect()
}

/// The coefficients in the only variable.
pub(super) fn to_dense(x: Var, a: &Residual) -> Dense {
    let top = a.first().map_or(0, |(k, _)| k.exponent(x) as usize + 1);
    let mut out = vec![0; top];
    for (k, c) in a {
        out[k.exponent(x) as usize] = *c;
    }
    out
}

/// a + k·b.
pub(super) fn add_multiple(m: &Modulus, a: &Residual, b: &Residual, k: u64) -> Residual {
    if b.is_empty() || k == 0 {
        return a.clone();
    }
    budget::spend((a.len() + b.len()) as u64);
    let mut out = Vec::with_capacity(a.len() + b.len());
    let (mut left, mut right) = (a.iter().peekable(), b.iter().peekable());
    loop {
        let order = match (left.peek(), right.peek()) {
            (None, None) => return out,
            (Some(_), None) => std::cmp::Ordering::Greater,
            (None, Some(_)) => std::cmp::Ordering::Less,
            (Some((x, _)), Some((y, _))) => x.cmp(y),
        };
        let first = if order.is_ge() { left.next() } else { None };
        let second = if order.is_le() { right.next() } else { None };
        let Some((monomial, _)) = first.or(second) else { return out };
        let c = m.add(first.map_or(0, |t| t.1), second.map_or(0, |t| m.mul(k, t.1)));
        if c != 0 {
            out.push((monomial.clone(), c));
        }
    }
}

pub(super) fn sum(m: &Modulus, a: &Residual, b: &Residual) -> Residual {
    add_multiple(m, a, b, m.one())
}

pub(super) fn difference(m: &Modulus, a: &Residual, b: &Residual) -> Residual {
    add_multiple(m, a, b, m.neg(m.one()))
}

/// Σ aᵢ·bᵢ, collected and sorted once.
pub(super) fn sum_of_products<'a>(m: &Modulus, pairs: impl Iterator<Item = (&'a Residual, &'a Residual)>) -> Residual {
    let mut all: Residual = Vec::new();
    for (a, b) in pairs {
        budget::spend((a.len() * b.len()) as u64);
        for (j, c) in a {
            all.extend(b.iter().map(|(k, d)| (j.mul(k), m.mul(*c, *d))));
        }
    }
    sorted(m, all)
}

fn sorted(m: &Modulus, mut all: Residual) -> Residual {
    all.sort_unstable_by(|a, b| b.0.cmp(&a.0));
    all.dedup_by(|next, kept| {
        let same = next.0 == kept.0;
        if same {
            kept.1 = m.add(kept.1, next.1);
        }
        same
    });
    all.retain(|&(_, c)| c != 0);
    all
}

pub(super) fn product(m: &Modulus, a: &Residual, b: &Residual) -> Residual {
    sum_of_products(m, std::iter::once((a, b)))
}

/// p·v^e.
pub(super) fn shifted_up(p: &Residual, v: Var, e: i32) -> Residual {
    let power = Monomial::power(v, e);
    p.iter().map(|(k, c)| (k.mul(&power), *c)).collect()
}

/// The coefficients of p by powers of (v − at), none of them beyond the degree.
pub(super) fn expand(m: &Modulus, p: &Residual, v: Var, at: u64) -> Vec<Residual> {
    let top = p.iter().map(|(k, _)| k.exponent(v)).max().unwrap_or(0) as usize;
    let mut list: Vec<Residual> = vec![Vec::new(); top + 1];
    for (k, c) in p {
        list[k.exponent(v) as usize].push((k.without(v), *c));
    }
    shift(m, &mut list, at);
    list
}

/// Σ listₑ·(v − at)^e.
pub(super) fn collapse(m: &Modulus, mut list: Vec<Residual>, v: Var, at: u64) -> Residual {
    shift(m, &mut list, m.neg(at));
    let terms = list.iter().enumerate().flat_map(|(e, p)| shifted_up(p, v, e as i32));
    sorted(m, terms.collect())
}

/// The coefficients of q(z + at) from those of q(z).
fn shift(m: &Modulus, list: &mut [Residual], at: u64) {
    if at == 0 {
        return;
    }
    for i in 0..list.len().saturating_sub(1) {
        for j in (i..list.len() - 1).rev() {
            list[j] = add_multiple(m, &list[j], &list[j + 1], at);
        }
    }
}

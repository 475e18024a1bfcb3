//! Greatest common divisors of polynomials over the rationals.
//!
//! Avoided first: univariate images modulo a prime bound the degree of the gcd in every variable and usually prove it
//! to be 1. What remains is computed from images (sparse interpolation) and accepted only after exact division.

mod base;
mod image;
mod interpolate;
mod remainder;
mod skeleton;

use crate::algebra::budget;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

pub use base::coprime_base;

/// The greatest common divisor up to rational factors and monomials, in the convention of [`Poly::primitive`]:
/// integer coefficients with gcd 1, positive leading coefficient, no monomial factor. gcd(0, p) is the primitive part
/// of p.
pub fn gcd(a: &Poly, b: &Poly) -> Poly {
    if a.is_zero() {
        return b.primitive().part;
    }
    if b.is_zero() || a.len() == 1 || b.len() == 1 {
        return if b.is_zero() { a.primitive().part } else { Poly::one() };
    }
    primitive_gcd(&a.primitive().part, &b.primitive().part)
}

/// Whether the gcd is 1 (monomials and constants are units).
pub fn coprime(a: &Poly, b: &Poly) -> bool {
    gcd(a, b).is_one()
}

/// The gcd of many polynomials, short ones first; 0 for none.
pub fn gcd_of(mut list: Vec<Poly>) -> Poly {
    list.sort_by_key(Poly::len);
    let mut common = Poly::zero();
    for p in &list {
        if common.is_one() {
            break;
        }
        common = gcd(&common, p);
    }
    common
}

/// The gcd of the coefficients of `p` as polynomial in `v`; monomials in the other variables are ignored.
pub fn content_in(p: &Poly, v: Var) -> Poly {
    gcd_of(p.coefficients(v).into_iter().map(|(_, c)| c).collect())
}

/// The gcd of primitive polynomials other than 0.
fn primitive_gcd(a: &Poly, b: &Poly) -> Poly {
    if a.is_constant() || b.is_constant() {
        return Poly::one();
    }
    if a == b {
        return a.clone();
    }
    budget::spend((a.len() + b.len()) as u64);
    let (vars_a, vars_b) = (a.vars(), b.vars());
    let foreign = |own: &[Var], other: &[Var]| own.iter().any(|v| other.binary_search(v).is_err());
    // A variable of one side only cannot occur in the gcd, which therefore divides every coefficient.
    if foreign(&vars_a, &vars_b) {
        return gcd_with_coefficients(b, a, |v| vars_b.binary_search(&v).is_err());
    }
    if foreign(&vars_b, &vars_a) {
        return gcd_with_coefficients(a, b, |v| vars_a.binary_search(&v).is_err());
    }
    let bounds = image::degree_bounds(a, b, &vars_a);
    if bounds.iter().all(|bound| bound.gcd == 0) {
        return Poly::one();
    }
    if bounds.iter().any(|bound| bound.gcd == 0) {
        let absent = |v: Var| vars_a.binary_search(&v).is_ok_and(|k| bounds[k].gcd == 0);
        let mut parts: Vec<Poly> = a.collect(absent).into_iter().map(|(_, c)| c).collect();
        parts.extend(b.collect(absent).into_iter().map(|(_, c)| c));
        return gcd_of(parts);
    }
    if bounds.iter().all(|bound| bound.gcd == bound.left) && b.is_divisible_by(a) {
        return a.clone();
    }
    if bounds.iter().all(|bound| bound.gcd == bound.right) && a.is_divisible_by(b) {
        return b.clone();
    }
    if let Some(k) = bounds.iter().position(|bound| bound.left == 1) {
        return gcd_with_linear(a, b, vars_a[k]);
    }
    if let Some(k) = bounds.iter().position(|bound| bound.right == 1) {
        return gcd_with_linear(b, a, vars_a[k]);
    }
    gcd_by_main_variable(a, b, &vars_a, &bounds)
}

/// gcd(p, all coefficients of q as polynomial in the picked variables).
fn gcd_with_coefficients(p: &Poly, q: &Poly, pick: impl Fn(Var) -> bool) -> Poly {
    let mut parts: Vec<Poly> = q.collect(pick).into_iter().map(|(_, c)| c).collect();
    parts.push(p.clone());
    gcd_of(parts)
}

/// The gcd when `a` is linear in `v`: without its content it is irreducible, so it divides `b` or shares nothing.
fn gcd_with_linear(a: &Poly, b: &Poly, v: Var) -> Poly {
    let content = content_in(a, v);
    let line = a.div_exact(&content).map(|q| q.primitive().part);
    match line.and_then(|line| b.div_exact(&line).map(|rest| (line, rest))) {
        Some((line, rest)) => (&line * &gcd(&content, &rest)).primitive().part,
        None => gcd(&content, b),
    }
}

/// The general case: contents in a main variable of least degree, then the primitive parts.
fn gcd_by_main_variable(a: &Poly, b: &Poly, vars: &[Var], bounds: &[image::Bound]) -> Poly {
    let Some((k, _)) = bounds.iter().enumerate().min_by_key(|(_, bound)| (bound.gcd, bound.left + bound.right)) else {
        return Poly::one();
    };
    let main = vars[k];
    let (content_a, content_b) = (content_in(a, main), content_in(b, main));
    let strip = |p: &Poly, c: &Poly| p.div_exact(c).map_or_else(|| p.clone(), |q| q.primitive().part);
    let (part_a, part_b) = (strip(a, &content_a), strip(b, &content_b));
    let content = gcd(&content_a, &content_b);
    let limits: Vec<(Var, u32)> = vars.iter().zip(bounds).map(|(&v, bound)| (v, bound.gcd)).collect();
    let part = interpolate::gcd_by_images(&part_a, &part_b, main, &limits)
        .unwrap_or_else(|| remainder::gcd_by_remainders(&part_a, &part_b, main));
    (&content * &part).primitive().part
}

#[cfg(test)]
mod tests;

//! Univariate images modulo a prime: bounds for the degree of a gcd in every variable at once.

use crate::algebra::budget;
use crate::algebra::modular::dense::{Dense, degree, trim};
use crate::algebra::modular::{Modulus, Primes, Stream};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

/// Degrees in one variable: of both polynomials, and a proven upper bound for their gcd.
#[derive(Clone, Copy, Debug)]
pub(super) struct Bound {
    pub(super) left: u32,
    pub(super) right: u32,
    pub(super) gcd: u32,
}

/// The degrees of `p` in the given variables (which include all of its own).
pub(super) fn degrees(p: &Poly, vars: &[Var]) -> Vec<u32> {
    let mut top = vec![0; vars.len()];
    for (m, _) in p.raw_terms() {
        for (v, e) in m.iter() {
            if let Ok(k) = vars.binary_search(&v) {
                top[k] = top[k].max(e.unsigned_abs());
            }
        }
    }
    top
}

/// Degree bounds for the gcd of two primitive polynomials in the same variables.
///
/// At a random point modulo a prime every variable in turn is left free. When the leading coefficient of one side
/// does not vanish there, the gcd keeps its degree and divides the gcd of the images: the bound holds with certainty.
pub(super) fn degree_bounds(a: &Poly, b: &Poly, vars: &[Var]) -> Vec<Bound> {
    let (top_a, top_b) = (degrees(a, vars), degrees(b, vars));
    let mut bounds: Vec<Bound> =
        (top_a.iter().zip(&top_b)).map(|(&left, &right)| Bound { left, right, gcd: left.min(right) }).collect();
    let Some(p) = Primes::new().next() else { return bounds };
    let m = Modulus::new(p);
    let mut stream = Stream::new(0x6c62_272e_07bb_0142);
    let point: Vec<u64> = vars.iter().map(|_| stream.residue(&m)).collect();
    let images_a = univariate_images(&m, a, vars, &top_a, &point);
    let images_b = univariate_images(&m, b, vars, &top_b, &point);
    for ((bound, image_a), image_b) in bounds.iter_mut().zip(images_a).zip(images_b) {
        let kept = degree(&image_a) == bound.left as usize || degree(&image_b) == bound.right as usize;
        if kept && !image_a.is_empty() && !image_b.is_empty() {
            bound.gcd = bound.gcd.min(degree(&m.common(&image_a, &image_b)) as u32);
        }
    }
    bounds
}

/// For every variable the image of `p` with all other variables at the point.
fn univariate_images(m: &Modulus, p: &Poly, vars: &[Var], top: &[u32], point: &[u64]) -> Vec<Dense> {
    budget::spend(p.len() as u64);
    let powers: Vec<Vec<u64>> = point.iter().zip(top).map(|(&x, &d)| m.powers(x, d as usize)).collect();
    // First every term at its full value, sorted by exponent of each variable that is present.
    let mut images: Vec<Dense> = top.iter().map(|&d| vec![0; d as usize + 1]).collect();
    let mut total = 0;
    let mut places: Vec<(usize, usize)> = Vec::new();
    for (monomial, c) in p.raw_terms() {
        let mut value = m.residue(c);
        places.clear();
        for (v, e) in monomial.iter() {
            if let Ok(k) = vars.binary_search(&v) {
                value = m.mul(value, powers[k][e as usize]);
                places.push((k, e as usize));
            }
        }
        total = m.add(total, value);
        for &(k, e) in &places {
            images[k][e] = m.add(images[k][e], value);
        }
    }
    // Then the powers of the free variable are divided out again; what lacks the variable is the rest of the total.
    for ((image, &x), &d) in images.iter_mut().zip(point).zip(top) {
        let with: u64 = image.iter().fold(0, |sum, &c| m.add(sum, c));
        image[0] = m.sub(total, with);
        let down = m.powers(m.inverse(x), d as usize);
        image.iter_mut().zip(&down).for_each(|(c, &k)| *c = m.mul(*c, k));
        trim(image);
    }
    images
}

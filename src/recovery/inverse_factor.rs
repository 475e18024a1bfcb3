//! Polynomial inverse integrating factors: M with Ω/M closed, from θₐM ω_b − θ_bM ωₐ = M(θₐω_b − θ_bωₐ).
//!
//! The equation is linear in the coefficients of M; for v = N/Q the products N², NQ and Q² all solve it, up to a common
//! factor, and the quotient of two solutions is a first integral by itself.

use std::collections::{BTreeMap, BTreeSet};

use crate::algebra::budget;
use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;

use super::fractions::Moving;
use super::frame::{Class, Frame};
use super::integrating_factor::{Form, integral};
use super::linear_solve::{self, Equation};

/// The most unknown coefficients of M.
const MOST_UNKNOWNS: usize = 700;

/// First integrals from polynomial inverse factors, with the integrating factor where one was used.
pub fn integrals(form: &Form) -> Vec<(Element, Option<Element>)> {
    let field = form.moving.field;
    for support in supports(form) {
        let kernel = kernel(form, &support).unwrap_or_default();
        let mut found = Vec::new();
        for (index, first) in kernel.iter().enumerate() {
            for second in &kernel[..index] {
                found.extend(field.quotient(first, second).ok().map(|v| (field.reduce(&v), None)));
            }
        }
        if found.is_empty() {
            for m in &kernel {
                let Ok(multiplier) = field.inverse(m) else { continue };
                found.extend(integral(form, &multiplier).map(|v| (v, Some(multiplier))));
            }
        }
        if !found.is_empty() {
            return found;
        }
    }
    Vec::new()
}

/// The monomials of M, in growing sets: those of the form; then also those of sums in sight and geometric means; then
/// those in which prices stand for income, as under a logarithm ln(m + X) that the form shows by its slopes alone; then
/// what is like them between the least and the greatest powers.
fn supports(form: &Form) -> Vec<Vec<Monomial>> {
    let moving = form.moving;
    let own: BTreeSet<Monomial> = form.components.iter().flat_map(|c| support(moving, c)).collect();
    let mut means = own.clone();
    for first in &own {
        for second in &own {
            means.extend(mean(first, second));
        }
    }
    let traded = traded(moving, &means);
    let between = between(&own);
    let exchanged = exchanged(moving, &exchanged(moving, &own));
    let mut all: Vec<Vec<Monomial>> = Vec::new();
    for set in [own, means, traded, between, exchanged] {
        let set: Vec<Monomial> = set.into_iter().collect();
        if set.len() <= MOST_UNKNOWNS && all.iter().all(|known| *known != set) {
            all.push(set);
        }
    }
    all
}

/// The monomials, and those with a price in place of income.
fn traded(moving: &Moving, own: &BTreeSet<Monomial>) -> BTreeSet<Monomial> {
    let symbols = symbols(moving);
    let Some((income, prices)) = symbols.split_last() else { return own.clone() };
    own.iter().flat_map(|m| prices.iter().chain([income]).map(|price| m.mul(&price.div(income)))).collect()
}

/// The monomials, and those with one price or income in place of another.
fn exchanged(moving: &Moving, own: &BTreeSet<Monomial>) -> BTreeSet<Monomial> {
    let symbols = symbols(moving);
    let mut all = own.clone();
    for (k, above) in symbols.iter().enumerate() {
        for below in symbols.iter().enumerate().filter(|(j, _)| *j != k).map(|(_, below)| below) {
            if all.len() > MOST_UNKNOWNS {
                return all;
            }
            all.extend(own.iter().map(|m| m.mul(&above.div(below))));
        }
    }
    all
}

/// Prices and income, in variables that are still in use.
fn symbols(moving: &Moving) -> Vec<Monomial> {
    let powers = |symbol: &Var| {
        let e = moving.field.current(&Poly::var(*symbol));
        e.as_monomial().map(|(_, m)| m.clone())
    };
    moving.symbols.iter().filter_map(powers).collect()
}

/// Products of two monomials over a third within the least and the greatest powers of all.
fn between(own: &BTreeSet<Monomial>) -> BTreeSet<Monomial> {
    let Some(first) = own.first() else { return BTreeSet::new() };
    let (low, high) = own.iter().fold((first.clone(), first.clone()), |(low, high), m| (low.meet(m), high.join(m)));
    let mut all = own.clone();
    let ratios: BTreeSet<Monomial> = own.iter().flat_map(|a| own.iter().map(|b| a.div(b))).collect();
    for monomial in own {
        for ratio in &ratios {
            if all.len() > MOST_UNKNOWNS {
                return all;
            }
            let candidate = monomial.mul(ratio);
            if candidate.meet(&low) == low && candidate.join(&high) == high {
                all.insert(candidate);
            }
        }
        budget::spend(ratios.len() as u64);
    }
    all
}

fn support(moving: &Moving, p: &Poly) -> Vec<Monomial> {
    p.raw_terms().iter().map(|(m, _)| m.split(|v| moving.moves(v)).0).collect()
}

/// √(ab), if its exponents are whole.
fn mean(a: &Monomial, b: &Monomial) -> Option<Monomial> {
    let product = a.mul(b);
    product.iter().all(|(_, k)| k % 2 == 0).then(|| Monomial::from_pairs(product.iter().map(|(v, k)| (v, k / 2))))
}

/// A basis of the polynomials M on the support.
fn kernel(form: &Form, support: &[Monomial]) -> Option<Vec<Element>> {
    let moving = form.moving;
    let field = moving.field;
    moving.forget();
    let class = Class { numerators: form.components.clone(), denominator: BTreeMap::new() };
    let frame = Frame::new(moving, &class)?;
    let n = form.components.len() - 1;
    let gradient = |m: &Monomial, index: usize| -> Poly {
        let parts = m.iter().filter_map(|(v, k)| Some(frame.rates.get(&v)?.get(index)?.scale(&rational(k.into(), 1))));
        Poly::sum(parts.collect())
    };
    let mut equations = Vec::new();
    for index in 0..n {
        let mut rows: BTreeMap<Monomial, Equation> = BTreeMap::new();
        let rotation = rotation(&frame, form, index);
        for (unknown, monomial) in support.iter().enumerate() {
            let forth = &gradient(monomial, n) * &form.components[index];
            let back = &gradient(monomial, index) * form.last();
            let whole = (&(&forth - &back) - &rotation).mul_monomial(monomial);
            budget::spend(whole.len() as u64);
            for (key, coefficient) in moving.collect(&field.expand(&whole)) {
                rows.entry(key).or_default().left.insert(unknown, coefficient);
            }
        }
        equations.extend(rows.into_values());
    }
    let vectors = linear_solve::kernel(field, equations, support.len());
    let combine = |vector: &Vec<Element>| {
        let parts = support.iter().zip(vector).map(|(m, c)| c.mul_monomial(m));
        field.reduce(&Poly::sum(parts.collect()))
    };
    Some(vectors.iter().map(combine).collect())
}

/// P·(θ_m ωᵢ − θᵢ ω_m).
fn rotation(frame: &Frame, form: &Form, index: usize) -> Poly {
    let n = form.components.len() - 1;
    let along = |p: &Poly, direction: usize| -> Poly {
        let parts = p.terms().flat_map(|(m, c)| {
            let rates = m.iter().filter_map(|(v, k)| {
                let rate = frame.rates.get(&v)?.get(direction)?;
                Some(rate.mul_term(&(rational(k.into(), 1) * &c), m))
            });
            rates.collect::<Vec<_>>()
        });
        Poly::sum(parts.collect())
    };
    &along(&form.components[index], n) - &along(form.last(), index)
}

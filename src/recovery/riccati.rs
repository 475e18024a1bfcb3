//! Systems that are quadratic after z = φ(y): dz = Σ (aᵢ + bᵢ z + cᵢ z²) dpᵢ.
//!
//! With a particular solution z₀ the form b + 2c z₀ is closed, say dB, and e^B c is closed, say dΛ; then
//! V = −e^B/(z − z₀) − Λ is a first integral that rises in z, and z = z₀ − e^B/(u + Λ).

use std::collections::BTreeMap;

use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::{Rational, rational};
use crate::algebra::polynomial::Poly;

use super::fractions::Moving;
use super::invert;
use super::potential::potential;
use super::proposal::{Proposal, Working};
use super::span::Reduced;
use super::system::System;

/// The preferences of a quadratic system, in the coordinate of the system; `None` where no particular solution or no
/// potential is found.
pub fn solve(system: &System, reduced: &Reduced, utility: Var) -> Option<Proposal> {
    let prices = Moving::new(system.field, &system.prices);
    let particular = particular_solution(system, &prices, reduced)?;
    from_particular(system, &prices, reduced, &particular, utility)
}

fn particular_solution(system: &System, prices: &Moving, reduced: &Reduced) -> Option<Element> {
    let midpoints = midpoints(prices, reduced);
    let sources: [&dyn Fn() -> Vec<Element>; 4] = [
        &|| vec![Poly::zero()],
        &|| in_sight(system, reduced),
        &|| midpoints.iter().map(|midpoint| with_logarithms(prices, midpoint)).collect(),
        &|| from_midpoints(prices, &midpoints),
    ];
    let field = prices.field;
    sources
        .iter()
        .find_map(|source| source().into_iter().map(|z| field.reduce(&z)).find(|z| is_solution(prices, reduced, z)))
}

/// Whether dz₀ = a + b z₀ + c z₀².
pub fn is_solution(prices: &Moving, reduced: &Reduced, z: &Element) -> bool {
    let field = prices.field;
    let [a, b, c] = &reduced.coefficients;
    let square = field.product(z, z);
    prices.symbols.iter().enumerate().all(|(i, p)| {
        let parts = [
            field.derivative(z, *p),
            field.current(&a[i]).neg(),
            field.product(&b[i], z).neg(),
            field.product(&c[i], &square).neg(),
        ];
        field.is_zero(&Poly::sum(parts.iter().map(|e| field.current(e)).collect()))
    })
}

/// Where the demands hold a sum that is linear in z, its zero: price indices that z is measured against.
fn in_sight(system: &System, reduced: &Reduced) -> Vec<Element> {
    let field = system.field;
    let z = field.current(&reduced.z);
    let Some((content, own)) = z.as_monomial().map(|(c, m)| (c, m.clone())) else { return Vec::new() };
    let income = Moving::new(field, &[system.income]);
    let mut found = Vec::new();
    for var in system.demands.iter().flat_map(|d| field.current(d).vars()) {
        let Kind::Sum { value, .. } = &*field.kind(var) else { continue };
        if !income.moves(var) {
            continue;
        }
        let terms = income.collect(&field.expand(value));
        let Some(slope) = terms.get(&own) else { continue };
        let rest = terms.get(&Monomial::one()).cloned().unwrap_or_default();
        if terms.len() <= 2
            && let Ok(zero) = field.quotient(&rest.neg().scale(&content), slope)
        {
            found.push(field.reduce(&zero));
        }
    }
    found
}

/// −bᵢ/(2cᵢ) = z₀ − (∂B/∂pᵢ)/(2cᵢ).
fn midpoints(prices: &Moving, reduced: &Reduced) -> Vec<Element> {
    let field = prices.field;
    let [_, b, c] = &reduced.coefficients;
    let ratios = b.iter().zip(c).filter(|(_, c)| !c.is_zero()).filter_map(|(b, c)| field.quotient(b, c).ok());
    ratios.map(|ratio| field.reduce(&ratio.scale(&rational(-1, 2)))).collect()
}

/// The terms of a midpoint with logarithms: where B is algebraic, these are those of z₀.
fn with_logarithms(prices: &Moving, midpoint: &Element) -> Element {
    let cleared = prices.clear(midpoint);
    let part = Poly::from_terms(
        cleared.numerator.terms().filter(|(m, _)| is_logarithmic(prices, m)).map(|(m, c)| (m.clone(), c)).collect(),
    );
    &part * &prices.below(&cleared.denominator)
}

fn is_logarithmic(prices: &Moving, monomial: &Monomial) -> bool {
    monomial.iter().any(|(v, k)| k > 0 && matches!(*prices.field.kind(v), Kind::Ln(_)))
}

/// What the midpoints have in common, alone and with their logarithms; and their parts with unlike powers.
fn from_midpoints(prices: &Moving, midpoints: &[Element]) -> Vec<Element> {
    let field = prices.field;
    let (numerators, denominator) = prices.over_one_denominator(midpoints);
    let below = prices.below(&denominator);
    let [first, rest @ ..] = &numerators[..] else { return Vec::new() };
    let shared = |m: &Monomial, c: &Rational| rest.iter().all(|n| n.coefficient(m) == *c);
    let picked = |wanted: &dyn Fn(&Monomial, &Rational) -> bool| {
        let terms = first.terms().filter(|(m, c)| wanted(m, c)).map(|(m, c)| (m.clone(), c));
        field.reduce(&(&Poly::from_terms(terms.collect()) * &below))
    };
    let mut found = vec![picked(&|m, c| shared(m, c)), picked(&|m, c| is_logarithmic(prices, m) || shared(m, c))];
    let whole = field.reduce(&(first * &below));
    let mut classes: BTreeMap<Monomial, Poly> = BTreeMap::new();
    let eigen = |v: Var| prices.moves(v) && matches!(*field.kind(v), Kind::Exp(_) | Kind::Sum { .. });
    for (key, part) in whole.collect(eigen) {
        classes.insert(key.clone(), part.mul_monomial(&key));
    }
    for part in classes.into_values() {
        found.push(&whole - &part);
        found.push(part);
    }
    found
}

/// V = −e^B/(z − z₀) − Λ from a particular solution z₀.
pub fn from_particular(
    system: &System,
    prices: &Moving,
    reduced: &Reduced,
    particular: &Element,
    utility: Var,
) -> Option<Proposal> {
    let field = system.field;
    let [_, b, c] = &reduced.coefficients;
    let rates: Vec<Element> = b
        .iter()
        .zip(c)
        .map(|(b, c)| {
            let twice = field.product(c, particular).scale(&rational(2, 1));
            field.reduce(&(&field.current(b) + &field.current(&twice)))
        })
        .collect();
    let factor = potential(prices, &rates)?.exponential(field).ok()?;
    let scaled: Vec<Element> = c.iter().map(|c| field.product(&factor, c)).collect();
    let shift = potential(prices, &scaled)?.value(field).ok()?;
    let distance = &field.current(&reduced.z) - &field.current(particular);
    // with a named price index the distance is one thing, so that nothing is put back where it cancels
    let is_sum = |v: Var| matches!(*field.kind(v), Kind::Sum { root: 1, .. });
    let named = particular.as_var().is_some_and(is_sum);
    let distance = if named { field.named(&distance, None) } else { distance };
    let v = &field.quotient(&field.current(&factor), &distance).ok()?.neg() - &field.current(&shift);
    let level = &Poly::var(utility) + &field.current(&shift);
    let gap = field.quotient(&factor, &level).ok()?;
    let target = [field.current(particular), field.current(&gap).neg()];
    let solved = invert::solve(field, &reduced.z, system.income, &target);
    let level = Some(Poly::sum(target.to_vec()));
    let (expenditure, positive) = match solved {
        Some(inverse) => (Some(inverse.value), inverse.positive),
        None => (None, Vec::new()),
    };
    let rising = field.sign(&reduced.slope).times(field.sign(&factor));
    let working = Working {
        z: reduced.z.clone(),
        forms: reduced.coefficients.to_vec(),
        particular: Some(particular.clone()),
        factor: Some(factor),
        base: Some(shift),
        ..Working::default()
    };
    Some(Proposal { indirect_utility: Some(v), expenditure, positive, level, rising, working })
}

//! Systems that are quadratic after z = φ(y): dz = Σ (aᵢ + bᵢ z + cᵢ z²) dpᵢ.
//!
//! With a particular solution z₀ the form b + 2c z₀ is closed, say dB, and e^B c is closed, say dΛ; then
//! V = −e^B/(z − z₀) − Λ is a first integral that rises in z, and z = z₀ − e^B/(u + Λ).

use std::collections::BTreeMap;

use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
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
    let mut candidates = vec![Poly::zero()];
    candidates.extend(in_sight(system, reduced));
    candidates.extend(from_midpoints(prices, reduced));
    candidates.into_iter().map(|z| prices.field.reduce(&z)).find(|z| is_solution(prices, reduced, z))
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

/// −bᵢ/(2cᵢ) = z₀ − (∂B/∂pᵢ)/(2cᵢ): what these midpoints have in common, and their parts with unlike powers.
fn from_midpoints(prices: &Moving, reduced: &Reduced) -> Vec<Element> {
    let field = prices.field;
    let [_, b, c] = &reduced.coefficients;
    let midpoints: Vec<Element> = b
        .iter()
        .zip(c)
        .filter(|(_, c)| !c.is_zero())
        .filter_map(|(b, c)| Some(field.reduce(&field.quotient(b, c).ok()?.scale(&rational(-1, 2)))))
        .collect();
    let (numerators, denominator) = prices.over_one_denominator(&midpoints);
    let below = prices.below(&denominator);
    let mut found = Vec::new();
    if let [first, rest @ ..] = &numerators[..]
        && !rest.is_empty()
    {
        let common = first.terms().filter(|(m, c)| rest.iter().all(|n| n.coefficient(m) == *c));
        let common = Poly::from_terms(common.map(|(m, c)| (m.clone(), c)).collect());
        found.push(field.reduce(&(&common * &below)));
    }
    if let Some(first) = numerators.first() {
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
    }
    found
}

fn from_particular(
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
    let v = &field.quotient(&field.current(&factor), &distance).ok()?.neg() - &field.current(&shift);
    let level = &Poly::var(utility) + &field.current(&shift);
    let gap = field.quotient(&factor, &level).ok()?;
    let target = [field.current(particular), field.current(&gap).neg()];
    let solved = invert::solve(field, &reduced.z, system.income, &target);
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
    Some(Proposal { indirect_utility: Some(v), expenditure, positive, rising, working })
}

//! Systems that are linear or quadratic in z = φ(m) with a particular solution among the sums that the demands name: a
//! price index under a logarithm, committed outlay. Sums of prices stay as they are named, so that the work does not grow
//! with their length.

use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;

use super::fractions::Moving;
use super::linear;
use super::proposal::Proposal;
use super::riccati;
use super::search::Method;
use super::span::{self, Reduced, Span};
use super::system::System;

/// How many sums of income and prices are put back in one demand.
const MOST_SUMS: usize = 40;
/// How many particular solutions are tried.
const MOST_CANDIDATES: usize = 24;
/// Prices in a sum from which on it is named.
const LONG: usize = 2;

/// The proposals from particular solutions in sight.
pub fn propose(system: &System, utility: Var) -> Vec<(Method, Proposal)> {
    let Some((span, mut candidates)) = with_names(system) else { return Vec::new() };
    let prices = Moving::new(system.field, &system.prices);
    candidates.extend(named(&prices, &span));
    candidates.truncate(MOST_CANDIDATES);
    if candidates.is_empty() {
        return Vec::new();
    }
    let solved = span::reductions(system, &span, 2).into_iter().find_map(|reduced| {
        let particular = candidates.iter().find(|z| riccati::is_solution(&prices, &reduced, z))?;
        let (method, mut proposal) = from_particular(system, &prices, &reduced, particular, utility)?;
        proposal.working.functions = span.functions.clone();
        Some((method, proposal))
    });
    solved.into_iter().collect()
}

fn from_particular(
    system: &System,
    prices: &Moving,
    reduced: &Reduced,
    particular: &Element,
    utility: Var,
) -> Option<(Method, Proposal)> {
    if reduced.lacks(2) {
        Some((Method::Linear, linear::from_particular(system, reduced, particular, utility)?))
    } else {
        Some((Method::Riccati, riccati::from_particular(system, prices, reduced, particular, utility)?))
    }
}

/// The demands as combinations of functions of income, and the zeros of sums of income and prices that were put back.
fn with_names(system: &System) -> Option<(Span, Vec<Element>)> {
    let field = system.field;
    let income = Moving::new(field, &[system.income]);
    let prices = Moving::new(field, &system.prices);
    let mut zeros = Vec::new();
    let mut columns: std::collections::BTreeMap<Monomial, Vec<Element>> = std::collections::BTreeMap::new();
    for (good, demand) in system.demands.iter().enumerate() {
        let plain = apart(&income, &prices, demand, &mut zeros)?;
        for (monomial, coefficient) in plain.collect(|v| income.moves(v)) {
            let column = columns.entry(monomial).or_insert_with(|| vec![Poly::zero(); system.demands.len()]);
            if let Some(slot) = column.get_mut(good) {
                *slot = coefficient;
            }
        }
    }
    let functions: Vec<Element> = columns.keys().cloned().map(Poly::monomial).collect();
    let span = Span { functions, coefficients: columns.into_values().collect(), named: true };
    (span.functions.len() > 1).then_some((span, zeros))
}

/// The demand with sums of income and prices put back, their sums of prices named; `None` where one stands below a
/// fraction bar, in a power or in a function.
fn apart(income: &Moving, prices: &Moving, demand: &Element, zeros: &mut Vec<Element>) -> Option<Element> {
    let field = income.field;
    let mut e = field.current(demand);
    for _ in 0..MOST_SUMS {
        let mut moved = e.vars();
        moved.retain(|v| income.moves(*v));
        let Some(sum) = moved.iter().copied().find(|v| prices.moves(*v)) else {
            let simple = |v: &Var| matches!(*field.kind(*v), Kind::Symbol(_) | Kind::Ln(_) | Kind::Exp(_));
            return moved.iter().all(simple).then_some(e);
        };
        let Kind::Sum { value, root: 1 } = &*field.kind(sum) else { return None };
        if e.low_degree(sum) < 0 {
            return None;
        }
        e = field.current(&e.substitute(sum, &short(income, value, zeros)));
    }
    None
}

/// The value of a sum by powers of income, with its sums of prices named.
fn short(income: &Moving, value: &Element, zeros: &mut Vec<Element>) -> Element {
    let field = income.field;
    let groups = field.current(value).collect(|v| income.moves(v));
    let named = |c: &Element| if c.len() > LONG { field.named(c, None) } else { c.clone() };
    let parts: Vec<(Monomial, Element)> = groups.into_iter().map(|(m, c)| (m, named(&c))).collect();
    if let [(first, a), (second, b)] = &parts[..] {
        let (rest, slope) = if first.is_one() { (a, b) } else { (b, a) };
        let zero = field.quotient(&rest.neg(), slope).ok().filter(|_| first.is_one() || second.is_one());
        zeros.extend(zero.filter(|zero| !zeros.contains(zero)));
    }
    Poly::sum(parts.iter().map(|(m, c)| c.mul_monomial(m)).collect())
}

/// The sums and powers of prices in the coefficients.
fn named(prices: &Moving, span: &Span) -> Vec<Element> {
    let mut found: Vec<Element> = Vec::new();
    let long = |field: &Field, v: Var| matches!(*field.kind(v), Kind::Sum { .. } | Kind::Exp(_));
    for (monomial, _) in span.coefficients.iter().flatten().flat_map(|e| e.raw_terms()) {
        for (var, power) in monomial.iter().filter(|(v, _)| prices.moves(*v) && long(prices.field, *v)) {
            let candidate = Poly::monomial(Monomial::power(var, power));
            if found.len() < MOST_CANDIDATES && !found.contains(&candidate) {
                found.push(candidate);
            }
        }
    }
    found
}

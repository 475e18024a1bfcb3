//! Systems that are linear after z = φ(y): dz = Σ (aᵢ + bᵢ z) dpᵢ.
//!
//! b is closed with potential B, e^(−B) a is closed with potential A, and V = z e^(−B) − A is a first integral:
//! z = e^B (u + A). With b = 0 and a logarithm for z, u is relabelled to ln u.

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::constant;
use super::fractions::Moving;
use super::invert::{self, Inverse};
use super::potential::{Potential, potential};
use super::proposal::{Proposal, Working};
use super::span::Reduced;
use super::system::System;

/// The preferences of a linear system, in the coordinate of the system; `None` where a potential is not found.
pub fn solve(system: &System, reduced: &Reduced, utility: Var) -> Option<Proposal> {
    let field = system.field;
    let prices = Moving::new(field, &system.prices);
    let [a, b, _] = &reduced.coefficients;
    if reduced.lacks(1) {
        let shift = potential(&prices, a)?;
        if let Some(found) = multiplicative(system, reduced, &shift, utility) {
            return Some(found);
        }
    }
    let rate = if reduced.lacks(1) { Potential::default() } else { potential(&prices, b)? };
    let factor = rate.exponential(field).ok()?;
    let inverse = field.inverse(&factor).ok()?;
    let scaled: Vec<Element> = a.iter().map(|e| field.product(&inverse, e)).collect();
    let shift = if reduced.lacks(0) { Potential::default() } else { potential(&prices, &scaled)? };
    let mut base = field.reduce(&field.product(&factor, &shift.value(field).ok()?));
    while let Some(constant) = constant::simplifying(&prices, &base, &factor) {
        let simpler = field.reduce(&(&base - &field.product(&constant, &factor)));
        if simpler.len() >= base.len() && size(&simpler) >= size(&base) {
            break;
        }
        base = simpler;
    }
    Some(affine(system, reduced, &factor, &base, utility))
}

/// The same from a solution z₀ of the system, which takes the place of e^B·A.
pub fn from_particular(system: &System, reduced: &Reduced, particular: &Element, utility: Var) -> Option<Proposal> {
    let prices = Moving::new(system.field, &system.prices);
    let rate = potential(&prices, &reduced.coefficients[1])?;
    let factor = rate.exponential(system.field).ok()?;
    Some(affine(system, reduced, &factor, particular, utility))
}

/// How much there is to read.
fn size(e: &Element) -> usize {
    e.raw_terms().iter().map(|(m, _)| 1 + m.len()).sum()
}

/// v = (z − base)/factor and z = base + u·factor.
pub fn affine(system: &System, reduced: &Reduced, factor: &Element, base: &Element, utility: Var) -> Proposal {
    let field = system.field;
    let z = field.current(&reduced.z);
    let over = &z - &field.current(base);
    let v = field.quotient(&over, factor).ok();
    let target = [field.current(base), field.product(&Poly::var(utility), factor)];
    let solved = invert::solve(field, &reduced.z, system.income, &target);
    let rising = field.sign(&reduced.slope).times(field.sign(factor));
    let working = Working {
        z: reduced.z.clone(),
        forms: reduced.coefficients.to_vec(),
        factor: Some(factor.clone()),
        base: Some(base.clone()),
        ..Working::default()
    };
    let mut found = proposal(v, solved, rising, working);
    found.level = Some(Poly::sum(target.iter().map(|e| field.current(e)).collect()));
    if base.is_zero() {
        positive_product(field, &reduced.z, utility, &mut found);
    }
    found
}

/// v = exp(z/κ)/exp(A/κ) for z a logarithm (κ times a combination with integer coefficients).
fn multiplicative(system: &System, reduced: &Reduced, shift: &Potential, utility: Var) -> Option<Proposal> {
    let field = system.field;
    let income = Moving::new(field, &[system.income]);
    let (product, scale, constant) = invert::log_product(&income, &reduced.z)?;
    if !constant.is_zero() {
        return None;
    }
    let index = shift.scaled(field, &field.inverse(&scale).ok()?).exponential(field).ok()?;
    let v = field.quotient(&product, &index).ok();
    let target = field.product(&Poly::var(utility), &index);
    let solved = invert::solve(field, &product, system.income, &[target]);
    let slope = field.reduce(&field.derivative(&product, system.income));
    let rising = field.sign(&slope).times(field.sign(&index));
    let working = Working {
        z: reduced.z.clone(),
        forms: reduced.coefficients.to_vec(),
        factor: Some(index),
        ..Working::default()
    };
    let mut found = proposal(v, solved, rising, working);
    positive_product(field, &product, utility, &mut found);
    Some(found)
}

/// u = product/index is positive where both are.
fn positive_product(field: &Field, product: &Element, utility: Var, found: &mut Proposal) {
    let index = found.working.factor.clone().unwrap_or_else(Poly::one);
    if field.sign(product).times(field.sign(&index)) == Sign::Positive {
        found.positive.push(Poly::var(utility));
    }
}

fn proposal(v: Option<Element>, solved: Option<Inverse>, rising: Sign, working: Working) -> Proposal {
    let (expenditure, positive) = match solved {
        Some(inverse) => (Some(inverse.value), inverse.positive),
        None => (None, Vec::new()),
    };
    Proposal { indirect_utility: v, expenditure, positive, level: None, rising, working }
}

//! Solving κ g + α e^(kg) = Z and κ g e^(kg) = Z for g, by the principal branch of Lambert's function.
//!
//! With w = (αk/κ) e^(kg) the first reads w + ln w = kZ/κ + ln(αk/κ), so that w = W((αk/κ) e^(kZ/κ)); with w = kg the
//! second reads w e^w = kZ/κ. The principal branch is meant where w > −1.

use std::collections::BTreeMap;

use crate::algebra::generator::{Element, Special};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::Moving;
use super::invert::Inverse;

/// One layer: where φ = Z has one of the two forms, w as a function of y, with W(…) for its target.
pub fn step(income: &Moving, phi: &Element, inverse: &mut Inverse) -> Option<Element> {
    let phi = income.field.reduce(phi);
    let mut terms: BTreeMap<Monomial, Element> = income.collect(&phi);
    let constant = terms.remove(&Monomial::one()).unwrap_or_default();
    let target = &income.field.current(&inverse.value) - &constant;
    let (inside, argument) = match terms.iter().collect::<Vec<_>>()[..] {
        [(product, coefficient)] => of_product(income, product, coefficient, &target)?,
        _ => terms.iter().find_map(|(own, coefficient)| of_sum(income, &terms, own, coefficient, &target))?,
    };
    let field = income.field;
    let value = field.special(Special::LambertW, &argument).ok()?;
    if field.sign(&value) != Sign::Positive {
        if field.sign(&(&Poly::one() + &field.current(&inside))) != Sign::Positive {
            return None;
        }
        inverse.positive.push(&Poly::one() + &value);
    }
    if field.sign(&argument) == Sign::Unknown && field.sign(&inside) == Sign::Positive {
        inverse.positive.push(argument);
    }
    inverse.value = value;
    Some(inside)
}

/// w = (αk/κ) e^(kg) and (αk/κ) e^(kZ/κ), for g the given monomial with the coefficient κ.
fn of_sum(
    income: &Moving,
    terms: &BTreeMap<Monomial, Element>,
    own: &Monomial,
    coefficient: &Element,
    target: &Element,
) -> Option<(Element, Element)> {
    let field = income.field;
    let g = Poly::monomial(own.clone());
    let others = terms.iter().filter(|(m, _)| *m != own).map(|(m, c)| field.product(c, &Poly::monomial(m.clone())));
    let rest = Poly::sum(others.map(|e| field.current(&e)).collect());
    let rate = per(income, &rest, &g)?;
    let k = relative_rate(income, &rate, &g)?;
    let exponential = field.quotient(&rate, &k).ok()?;
    let lost = field.reduce(&(&field.current(&rest) - &exponential));
    if !income.is_constant(&lost) {
        return None;
    }
    let inside = field.reduce(&field.quotient(&rate, coefficient).ok()?);
    let growth = field.exp(&field.product(&k, &g)).ok()?;
    let scale = field.reduce(&field.quotient(&inside, &growth).ok()?);
    if !income.is_constant(&scale) {
        return None;
    }
    let exponent = field.quotient(&field.product(&k, &(&field.current(target) - &lost)), coefficient).ok()?;
    Some((inside, field.product(&scale, &field.exp(&exponent).ok()?)))
}

/// w = ±kg and its w e^w, for a product κ g e^(kg) or κ g⁻¹ e^(kg).
fn of_product(
    income: &Moving,
    product: &Monomial,
    coefficient: &Element,
    target: &Element,
) -> Option<(Element, Element)> {
    let field = income.field;
    product.iter().filter(|(_, power)| power.abs() == 1).find_map(|(var, power): (Var, i32)| {
        let g = Poly::var(var);
        let exponential = Poly::monomial(product.mul(&Monomial::power(var, -power)));
        let k = relative_rate(income, &exponential, &g)?;
        let growth = field.exp(&field.product(&k, &g)).ok()?;
        let scale = field.product(coefficient, &field.quotient(&exponential, &growth).ok()?);
        let scale = field.reduce(&scale);
        if !income.is_constant(&scale) {
            return None;
        }
        let ratio = field.quotient(target, &scale).ok()?;
        let (k, ratio) = if power > 0 { (k, ratio) } else { (k.neg(), field.inverse(&ratio).ok()?) };
        Some((field.reduce(&field.product(&k, &g)), field.product(&k, &ratio)))
    })
}

/// f′/g′.
fn per(income: &Moving, f: &Element, g: &Element) -> Option<Element> {
    let field = income.field;
    let y = *income.symbols.first()?;
    let (above, below) = (field.derivative(f, y), field.reduce(&field.derivative(g, y)));
    Some(field.reduce(&field.quotient(&above, &below).ok()?))
}

/// k with f′ = k f g′, if it is a constant other than zero.
fn relative_rate(income: &Moving, f: &Element, g: &Element) -> Option<Element> {
    let field = income.field;
    let k = field.reduce(&field.quotient(&per(income, f, g)?, f).ok()?);
    (!k.is_zero() && income.is_constant(&k)).then_some(k)
}

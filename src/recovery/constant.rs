//! The constant of integration that makes a solution simple: base + κ·factor where that cancels a denominator.

use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

use super::fractions::Moving;

/// κ, for which base − κ·factor loses a moving denominator of both; `None` where no κ does.
pub fn simplifying(prices: &Moving, base: &Element, factor: &Element) -> Option<Element> {
    let (numerators, denominator) = prices.over_one_denominator(&[base.clone(), factor.clone()]);
    let [base, factor] = &numerators[..] else { return None };
    denominator.keys().filter(|sum| matches!(*prices.field.kind(**sum), Kind::Sum { root: 1, .. })).find_map(|sum| {
        let value = prices.value(*sum);
        let (var, slope, rest) = linear_in(&value)?;
        let (base, factor) = (at_zero(base, var, &slope, &rest)?, at_zero(factor, var, &slope, &rest)?);
        let field = prices.field;
        let (base, factor) = align(field.expand(&base.0), base.1, field.expand(&factor.0), factor.1, &slope);
        if factor.is_zero() || base.is_zero() {
            return None;
        }
        let found = prices.constant_combination(&[base], &[vec![factor]])?;
        found.values.into_iter().next().filter(|constant| !constant.is_zero())
    })
}

/// A variable in which the polynomial is linear, its coefficient and the rest.
fn linear_in(value: &Poly) -> Option<(Var, Poly, Poly)> {
    value.vars().into_iter().find_map(|var| match &value.coefficients(var)[..] {
        [(1, slope), (0, rest)] => Some((var, slope.clone(), rest.clone())),
        _ => None,
    })
}

/// p at var = −rest/slope, times slopeᵈ; and d.
fn at_zero(p: &Poly, var: Var, slope: &Poly, rest: &Poly) -> Option<(Poly, u32)> {
    let degree = u32::try_from(p.degree(var)).ok()?;
    let minus = rest.neg();
    let mut parts = Vec::new();
    for (k, coefficient) in p.coefficients(var) {
        let k = u32::try_from(k).ok()?;
        parts.push(&(&coefficient * &minus.pow(k)) * &slope.pow(degree - k));
    }
    Some((Poly::sum(parts), degree))
}

/// Both over the same power of the slope.
fn align(a: Poly, of_a: u32, b: Poly, of_b: u32, slope: &Poly) -> (Poly, Poly) {
    (&a * &slope.pow(of_b.saturating_sub(of_a)), &b * &slope.pow(of_a.saturating_sub(of_b)))
}

//! Writing an element shorter, for print only: eliminated parameters and the author's abbreviations are put back where
//! they stand for a whole group of terms (1 − a − b as c, the terms of a price index as ln P).

use super::field::{Field, Shorthand};
use super::generator::Element;
use super::monomial::{Monomial, Var};
use super::number::Rational;
use super::polynomial::Poly;

impl Field {
    /// The element with shorthands in place of what they stand for, wherever that leaves fewer terms.
    pub(super) fn folded(&self, e: &Element) -> Element {
        let shorthands = self.tables.borrow().shorthands.clone();
        let mut e = e.clone();
        for shorthand in shorthands.iter().rev() {
            let value = shorthand.expanded.get_or_init(|| self.expand(&shorthand.value));
            let too_long = value.len() > 1 && value.len() > e.len();
            if !too_long && e.as_var() != Some(shorthand.symbol) {
                e = fold(&e, shorthand, &self.current(value));
            }
        }
        e
    }
}

fn fold(e: &Element, shorthand: &Shorthand, value: &Poly) -> Element {
    match value.as_monomial() {
        Some((coefficient, monomial)) if num_traits::One::is_one(&coefficient) => {
            fold_monomial(e, shorthand.symbol, monomial)
        }
        Some(_) => e.clone(),
        None => fold_sum(e, shorthand.symbol, value),
    }
}

/// Replaces groups of terms: e = Σ μ·c with c in the variables of the value; c = q·value + rest becomes q·symbol + rest
/// where that is shorter.
fn fold_sum(e: &Element, symbol: Var, value: &Poly) -> Element {
    let own = value.vars();
    let groups = e.collect(|v| own.binary_search(&v).is_err());
    let parts = groups.into_iter().map(|(outside, inside)| {
        fold_group(&inside, symbol, value).mul_term(&Rational::from_integer(1.into()), &outside)
    });
    Poly::sum(parts.collect())
}

fn fold_group(c: &Poly, symbol: Var, value: &Poly) -> Poly {
    if c.len() < value.len() {
        return c.clone();
    }
    if let Some(q) = c.div_exact(value).filter(|q| q.len() < c.len()) {
        return &q * &Poly::var(symbol);
    }
    let mut best = c.clone();
    for (monomial, coefficient) in value.terms() {
        let q = c.coefficient(monomial) / coefficient;
        if num_traits::Zero::is_zero(&q) {
            continue;
        }
        let shorter = &(c - &value.scale(&q)) + &Poly::var(symbol).scale(&q);
        if shorter.len() < best.len() {
            best = shorter;
        }
    }
    best
}

/// Replaces monomials whose powers of the value's variables are one multiple of those in the value.
fn fold_monomial(e: &Element, symbol: Var, value: &Monomial) -> Element {
    let terms = e.terms().map(|(m, c)| {
        let mut ratios = value.iter().map(|(v, k)| (m.exponent(v), k));
        let multiple = ratios.next().filter(|(own, k)| *own != 0 && own % k == 0).map(|(own, k)| own / k);
        match multiple.filter(|r| ratios.all(|(own, k)| own == r * k)) {
            Some(r) => (m.div(&value.pow(r)).mul(&Monomial::power(symbol, r)), c),
            None => (m.clone(), c),
        }
    });
    Poly::from_terms(terms.collect())
}

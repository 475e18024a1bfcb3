//! Long demands written short: sums that come again in derivatives are named, so that most of what cancels in a condition
//! cancels before anything is multiplied out.

use rustc_hash::FxHashMap;

use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;

use super::coefficients::moves;

/// Sums and products up to this length stay as they are.
const SHORT: usize = 8;

/// What matters of a variable.
#[derive(Clone, Copy)]
struct Nature {
    /// A power or exponential.
    power: bool,
    /// A named sum of more than one term.
    sum: bool,
    /// A named sum that changes with prices or income.
    index: bool,
    /// Changes with prices or income.
    moving: bool,
    /// Changes with income.
    with_income: bool,
}

/// Writes the demands of one system short.
pub(super) struct Collector<'f> {
    field: &'f Field,
    income: Var,
    known: FxHashMap<Var, Nature>,
}

impl<'f> Collector<'f> {
    /// For demands that depend on this income.
    pub(super) fn new(field: &'f Field, income: Var) -> Collector<'f> {
        Collector { field, income, known: FxHashMap::default() }
    }

    /// The element written short, where that is proven to be the same function; else the element as it is.
    pub(super) fn short(&mut self, e: &Element) -> Element {
        let (e, short) = (self.field.current(e), self.collected(e));
        let difference = &self.restored(&short, &e.vars()) - &e;
        if self.field.is_zero(&difference) { short } else { e }
    }

    /// The element with every named sum put back that is not among the `old` variables, and no other.
    fn restored(&self, e: &Element, old: &[Var]) -> Element {
        let mut e = self.field.current(e);
        while let Some(v) = e.vars().into_iter().rev().find(|v| old.binary_search(v).is_err()) {
            let Kind::Sum { value, root: 1 } = &*self.field.kind(v) else { return e };
            let Some(next) = e.try_substitute(v, &self.field.current(value)) else { return e };
            e = next;
        }
        e
    }

    /// The same element with a long numerator named as a whole; or, where there is no denominator, with the sum that goes
    /// with the marginal outlay (supernumerary income) and what does not depend on income named.
    fn collected(&mut self, e: &Element) -> Element {
        let e = self.with_long_powers_named(&self.field.current(e));
        if e.len() <= SHORT {
            return e;
        }
        for v in e.vars() {
            if self.nature(v).sum && e.low_degree(v) < 0 {
                return self.field.named(&e, None);
            }
        }
        let e = self.with_marginal_factor(&e).unwrap_or(e);
        let (constant, moving) = parted(&e, |m| {
            m.iter().all(|(v, _)| {
                let nature = self.nature(v);
                !nature.index && !nature.with_income
            })
        });
        if constant.len() <= SHORT { e } else { &self.field.named(&constant, None) + &moving }
    }

    fn nature(&mut self, v: Var) -> Nature {
        if let Some(known) = self.known.get(&v) {
            return *known;
        }
        let kind = self.field.kind(v);
        let (sum, moving) = (matches!(&*kind, Kind::Sum { .. }), moves(self.field, v));
        let nature = Nature {
            power: matches!(&*kind, Kind::Exp(_)),
            sum: matches!(&*kind, Kind::Sum { value, .. } if value.len() > 1),
            index: sum && moving,
            moving,
            with_income: moving && self.field.depends_on(&Poly::var(v), self.income),
        };
        self.known.insert(v, nature);
        nature
    }

    /// Products of many powers, as price indices are, named.
    fn with_long_powers_named(&mut self, e: &Element) -> Element {
        if e.raw_terms().iter().all(|(m, _)| m.len() <= SHORT) {
            return e.clone();
        }
        let mut parts = Vec::with_capacity(e.len());
        for (monomial, coefficient) in e.terms() {
            let (powers, rest) = monomial.split(|v| self.nature(v).power);
            let turned = powers.iter().next().is_some_and(|(_, k)| k < 0);
            let base = Poly::monomial(if turned { powers.inverse() } else { powers.clone() });
            let named = if powers.len() > SHORT { self.field.sum_of_one_term(&base) } else { base };
            let factor = named.as_monomial().map_or(powers, |(_, m)| m.pow(if turned { -1 } else { 1 }));
            parts.push(Poly::term(&coefficient, rest.mul(&factor)));
        }
        Poly::sum(parts)
    }

    /// e = μ·Z + rest with the parameters μ of the marginal outlay and a long sum Z, which is named.
    fn with_marginal_factor(&mut self, e: &Element) -> Option<Element> {
        let slope = self.field.log_derivative(e, self.income);
        let (_, monomial) = slope.as_monomial()?;
        let (_, factor) = monomial.split(|v| self.nature(v).moving);
        if factor.is_one() || factor.iter().any(|(_, k)| k < 0) {
            return None;
        }
        let (multiple, rest) = parted(e, |m| factor.iter().all(|(v, k)| m.exponent(v) >= k));
        if multiple.len() <= SHORT {
            return None;
        }
        let sum = self.field.named(&multiple.mul_term(&rational(1, 1), &factor.inverse()), None);
        Some(&sum.mul_term(&rational(1, 1), &factor) + &rest)
    }
}

/// The terms that are picked, and the others.
fn parted(e: &Element, mut pick: impl FnMut(&Monomial) -> bool) -> (Element, Element) {
    let (picked, others) = e.raw_terms().iter().cloned().partition(|(m, _)| pick(m));
    let over = e.denominator().to_rational().recip();
    (Poly::from_int_terms(picked).scale(&over), Poly::from_int_terms(others).scale(&over))
}

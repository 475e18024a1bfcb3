//! Which parameter values a closed form excludes: constants that stand below a fraction bar in it.

use std::collections::BTreeSet;

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

use super::fractions::Moving;

/// The constant divisors of the elements and of everything that they are built from, as polynomials without common
/// factors, where the facts do not exclude that they vanish.
pub fn doubtful_divisors(field: &Field, elements: &[&Element], moving: &[Var]) -> Vec<Element> {
    let mut search = Search { moving: Moving::new(field, moving), seen: BTreeSet::new(), found: Vec::new() };
    elements.iter().for_each(|e| search.element(e));
    search.found.retain(|e| !field.sign(e).excludes_zero());
    search.found
}

struct Search<'f> {
    moving: Moving<'f>,
    seen: BTreeSet<(Var, bool)>,
    found: Vec<Element>,
}

impl Search<'_> {
    fn element(&mut self, e: &Element) {
        let e = self.moving.field.current(e);
        for (monomial, _) in e.raw_terms() {
            for (var, exponent) in monomial.iter() {
                if self.seen.insert((var, exponent < 0)) {
                    self.variable(var, exponent < 0);
                }
            }
        }
    }

    fn variable(&mut self, var: Var, below: bool) {
        let field = self.moving.field;
        let kind = field.kind(var);
        if below && !self.moving.moves(var) {
            let value = match &*kind {
                Kind::Sum { value, .. } => field.expand(value),
                _ => Poly::var(var),
            };
            if !self.found.contains(&value) {
                self.found.push(value);
            }
        }
        match &*kind {
            Kind::Exp(argument) | Kind::Special(_, argument) => self.element(argument),
            Kind::Sum { value, .. } | Kind::Ln(Base::Sum(value)) => self.element(value),
            Kind::Ln(Base::Var(base)) => self.element(&Poly::var(*base)),
            Kind::Symbol(_) | Kind::Ln(Base::Number(_)) => {}
        }
    }
}

//! Equations between parameters, as coefficients of functions of prices and income, and what moves with these.

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Element, Kind, Role};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;

/// The same equation without content, divisors and repeated single factors.
pub fn normalised(e: &Poly) -> Poly {
    let split = e.primitive();
    let simple = Monomial::from_pairs(split.monomial.iter().filter(|(_, k)| *k > 0).map(|(v, _)| (v, 1)));
    split.part.mul_term(&rational(1, 1), &simple)
}

/// Whether a variable changes with prices, income, quantities or the utility level.
pub fn moves(field: &Field, v: Var) -> bool {
    let moves = |role: Role| role.is_positive() || role == Role::Utility;
    field.symbols_of(&Poly::var(v)).into_iter().any(|s| field.role(s).is_some_and(moves))
}

/// Whether a special function stands in a variable.
pub fn contains_special(field: &Field, v: Var) -> bool {
    match &*field.kind(v) {
        Kind::Symbol(_) | Kind::Ln(Base::Number(_)) => false,
        Kind::Ln(Base::Var(base)) => contains_special(field, *base),
        Kind::Ln(Base::Sum(e)) | Kind::Exp(e) => any_special(field, e),
        Kind::Sum { value, .. } => any_special(field, value),
        Kind::Special(..) => true,
    }
}

fn any_special(field: &Field, e: &Element) -> bool {
    e.vars().into_iter().any(|v| contains_special(field, v))
}

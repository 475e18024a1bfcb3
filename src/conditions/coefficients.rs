//! What a difference that should vanish asks of the parameters: the coefficients of independent functions of prices and
//! income.

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Element, Kind, Role};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::proof::Residual;

/// Equations between the parameters.
pub(super) struct Coefficients {
    /// Elements of the parameters that must all be zero.
    pub equations: Vec<Element>,
    /// Whether the functions that they are coefficients of are independent for every admissible value of the parameters;
    /// then the equations are necessary, and not only sufficient.
    pub independent: bool,
}

/// The coefficients of all differences, each once, the shortest first.
pub(super) fn of(field: &Field, residuals: &[Residual]) -> Coefficients {
    let mut equations = Vec::new();
    let mut independent = true;
    for residual in residuals {
        let (numerator, _) = field.fraction(&residual.element);
        let parts = numerator.collect(|v| moves(field, v));
        independent &= are_independent(field, &parts);
        equations.extend(parts.iter().map(|(_, coefficient)| normalised(coefficient)));
    }
    equations.sort_by(|a, b| a.len().cmp(&b.len()).then_with(|| a.cmp(b)));
    equations.dedup();
    Coefficients { equations, independent }
}

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

/// Whether the monomials are independent functions whatever the parameters are. One positive function by itself is;
/// several are if none of their generators holds a parameter and no special function is among them.
fn are_independent(field: &Field, parts: &[(Monomial, Poly)]) -> bool {
    if let [(monomial, _)] = parts {
        return monomial.iter().all(|(v, _)| is_positive_function(field, v));
    }
    let plain = |v: Var| {
        let free = !field.symbols_of(&Poly::var(v)).into_iter().any(|s| field.role(s) == Some(Role::Parameter));
        free && !contains_special(field, v)
    };
    parts.iter().all(|(monomial, _)| monomial.iter().all(|(v, _)| plain(v)))
}

fn is_positive_function(field: &Field, v: Var) -> bool {
    match &*field.kind(v) {
        Kind::Symbol(role) => role.is_positive(),
        Kind::Exp(_) => true,
        Kind::Sum { root, .. } => *root > 1,
        Kind::Ln(_) | Kind::Special(..) => false,
    }
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

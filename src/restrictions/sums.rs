//! Powers of sums of prices among the functions of a difference.
//!
//! A power of a sum whose exponent becomes a natural number is a polynomial, and may then cancel against other terms,
//! although its growth differs from theirs. Terms are therefore told apart by their exponents on sums first: where these
//! differ by a number that is not whole, or not at all, no such coincidence is possible.

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Kind, Role};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;

use super::terms::{Growth, Term};

/// Whether the only coincidences among the terms are those of equal growth, whatever the parameters are.
pub fn are_independent(field: &Field, terms: &[Term]) -> bool {
    let sums = sums_of(field, terms);
    let with_parameters = sums.iter().filter(|v| holds_parameters(field, **v)).count();
    let in_factors = terms.iter().any(|t| t.factor.iter().any(|(v, _)| is_sum(field, v) && holds_parameters(field, v)));
    if with_parameters > 1 || (with_parameters > 0 && sums.len() > 1) || (in_factors && sums.len() > 1) {
        return false;
    }
    let apart = |a: &Term, b: &Term| sums.iter().all(|v| never_whole(field, &a.growth, &b.growth, *v));
    terms.iter().enumerate().all(|(at, a)| terms[..at].iter().all(|b| apart(a, b)))
}

/// Whether the exponents on a sum are the same, or differ by a number that is not whole.
fn never_whole(field: &Field, a: &Growth, b: &Growth, v: Var) -> bool {
    let key = Monomial::power(v, 1);
    let at = |growth: &Growth| growth.get(&key).cloned().unwrap_or_else(Poly::zero);
    let gap = field.expand(&(&at(a) - &at(b)));
    gap.is_zero() || gap.as_constant().is_some_and(|c| !c.is_integer())
}

/// The logarithms of sums that stand in a growth or a factor.
fn sums_of(field: &Field, terms: &[Term]) -> Vec<Var> {
    let mut all: Vec<Var> = Vec::new();
    for term in terms {
        let keys = term.growth.keys().flat_map(|key| key.iter().map(|(v, _)| v).collect::<Vec<_>>());
        let factors = term.factor.iter().map(|(v, _)| v);
        for v in keys.chain(factors) {
            if is_sum(field, v) && !all.contains(&v) {
                all.push(v);
            }
        }
    }
    all
}

fn is_sum(field: &Field, v: Var) -> bool {
    matches!(&*field.kind(v), Kind::Ln(Base::Sum(_)))
}

fn holds_parameters(field: &Field, v: Var) -> bool {
    field.symbols_of(&Poly::var(v)).into_iter().any(|s| field.role(s) == Some(Role::Parameter))
}

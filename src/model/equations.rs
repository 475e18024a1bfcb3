//! Assumed equations: each that is linear eliminates the parameter declared last.
//!
//! Every row expresses its pivot by parameters declared earlier, so a new equation is brought down from the last
//! parameter on, and the rows are put into each other once, at the end. Sparse and exact.

use std::collections::BTreeMap;

use crate::algebra::budget;
use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Kind, Role};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;

/// What a linear equation did.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Inserted {
    /// It eliminates a parameter, or says nothing new.
    Consistent,
    /// It contradicts the ones before it.
    Contradiction,
    /// It is not linear in the parameters with constant coefficients.
    NotLinear,
}

/// The linear equations so far, each solved for its last parameter.
#[derive(Default)]
pub(super) struct Elimination {
    rows: BTreeMap<Var, Element>,
}

impl Elimination {
    /// Takes the equation e = 0. Linear in its length and in the lengths of the rows that bring it down.
    pub fn insert(&mut self, field: &Field, e: &Element) -> Inserted {
        if !is_linear(field, e) {
            return Inserted::NotLinear;
        }
        let mut e = e.clone();
        while let Some((var, coefficient)) = last_parameter(&e) {
            budget::spend(1 + e.len() as u64);
            let rest = &e - &Poly::term(&coefficient, Monomial::power(var, 1));
            match self.rows.get(&var) {
                Some(row) => e = &rest + &row.scale(&coefficient),
                None => {
                    self.rows.insert(var, rest.scale(&-coefficient.recip()));
                    return Inserted::Consistent;
                }
            }
        }
        if e.is_zero() { Inserted::Consistent } else { Inserted::Contradiction }
    }

    /// Every eliminated parameter with what stands for it, free of eliminated parameters.
    pub fn solved(self) -> Vec<(Var, Element)> {
        let mut done: Vec<(Var, Element)> = Vec::with_capacity(self.rows.len());
        for (var, row) in self.rows {
            let parts = row.terms().map(|(monomial, coefficient)| {
                let inner = monomial.iter().next().map(|(inner, _)| inner);
                let known = inner.and_then(|inner| done.binary_search_by(|(known, _)| known.cmp(&inner)).ok());
                match known {
                    Some(found) => done[found].1.scale(&coefficient),
                    None => Poly::term(&coefficient, monomial.clone()),
                }
            });
            let value = Poly::sum(parts.collect());
            done.push((var, value));
        }
        done
    }
}

/// Whether the element is a linear form in parameters with rational coefficients.
fn is_linear(field: &Field, e: &Element) -> bool {
    e.raw_terms().iter().all(|(monomial, _)| {
        let mut powers = monomial.iter();
        match (powers.next(), powers.next()) {
            (None, _) => true,
            (Some((var, 1)), None) => field.role(var) == Some(Role::Parameter),
            _ => false,
        }
    })
}

/// The parameter declared last in a linear form, with its coefficient.
fn last_parameter(e: &Element) -> Option<(Var, Rational)> {
    let parameters = e.terms().filter_map(|(monomial, coefficient)| Some((monomial.iter().next()?.0, coefficient)));
    parameters.max_by_key(|(var, _)| *var)
}

/// Why an equation that is not linear could not be used.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Unusable {
    /// It holds something other than parameters.
    NotParameters,
    /// It holds logarithms, exponentials, symbolic powers or special functions.
    NotAlgebraic,
    /// It is a product that is zero.
    Product,
    /// It is linear in no parameter with a coefficient that is known not to be zero.
    NoPivot,
}

/// What an equation that need not be linear does.
pub(super) enum Solved {
    /// It says nothing new.
    Nothing,
    /// It cannot hold.
    Contradiction,
    /// The parameter is eliminated.
    For(Var, Element),
    /// It cannot be used.
    Unusable(Unusable),
}

/// Solves e = 0 for the last parameter that occurs linearly, a constant coefficient before one that is only known not
/// to be zero.
pub(super) fn solve(field: &Field, e: &Element) -> Solved {
    let (numerator, _) = field.fraction(e);
    if numerator.is_zero() {
        return Solved::Nothing;
    }
    if numerator.is_constant() || field.sign(&numerator).excludes_zero() {
        return Solved::Contradiction;
    }
    if let Some(reason) = foreign(field, &numerator) {
        return Solved::Unusable(reason);
    }
    let split = numerator.primitive();
    let numerator = positive_factors_dropped(field, &split.monomial, split.part);
    let mut pivots: Vec<(Var, Poly)> = Vec::new();
    for var in numerator.vars().into_iter().rev() {
        let own = field.role(var) == Some(Role::Parameter);
        let hidden = numerator.vars().into_iter().any(|v| v != var && field.depends_on(&Poly::var(v), var));
        if own && !hidden && numerator.degree(var) == 1 && numerator.low_degree(var) >= 0 {
            let slope = numerator.coefficients(var).into_iter().next().map(|(_, slope)| slope);
            pivots.extend(slope.map(|slope| (var, slope)));
        }
    }
    let constant = pivots.iter().find(|(_, slope)| slope.is_constant());
    let safe = || pivots.iter().find(|(_, slope)| field.sign(slope).excludes_zero());
    if let Some((var, slope)) = constant.or_else(safe) {
        let rest = &numerator - &slope.mul_monomial(&Monomial::power(*var, 1));
        if let Ok(value) = field.quotient(&rest.neg(), slope) {
            return Solved::For(*var, field.reduce(&value));
        }
    }
    let factors = crate::algebra::factor::factor(&numerator);
    let count = factors.factors.len() + factors.monomial.len();
    Solved::Unusable(if count > 1 { Unusable::Product } else { Unusable::NoPivot })
}

/// The numerator without factors that are never zero.
fn positive_factors_dropped(field: &Field, monomial: &Monomial, part: Poly) -> Poly {
    let open = monomial.iter().filter(|(var, _)| !field.variable_sign(*var).excludes_zero());
    part.mul_monomial(&Monomial::from_pairs(open.filter(|(_, k)| *k > 0)))
}

fn foreign(field: &Field, numerator: &Poly) -> Option<Unusable> {
    let symbols = field.symbols_of(numerator);
    if symbols.iter().any(|var| field.role(*var) != Some(Role::Parameter)) {
        return Some(Unusable::NotParameters);
    }
    let algebraic = |var: &Var| match &*field.kind(*var) {
        Kind::Symbol(_) | Kind::Sum { .. } => true,
        Kind::Exp(argument) => is_root(field, argument),
        _ => false,
    };
    (!numerator.vars().iter().all(algebraic)).then_some(Unusable::NotAlgebraic)
}

/// Whether exp of the argument is a root: a rational multiple of one logarithm.
fn is_root(field: &Field, argument: &Element) -> bool {
    let only = argument.as_monomial().and_then(|(_, monomial)| match monomial.len() {
        1 => monomial.iter().next(),
        _ => None,
    });
    only.is_some_and(|(var, exponent)| exponent == 1 && matches!(&*field.kind(var), Kind::Ln(_)))
}

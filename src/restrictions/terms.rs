//! A difference that should vanish, as a sum of functions of prices and income with coefficients of the parameters.
//!
//! Each function is exp(Σ eₖ gₖ) · Π lᵏ: the *growth* says how it grows (gₖ = ln p, m, p, ln p ln m, …; eₖ depends on
//! the parameters), the *factor* holds the powers of logarithms. Two such functions with the same factor are linearly
//! independent exactly when their growths differ in some eₖ, so for given parameter values a sum vanishes exactly where
//! the coefficients of the functions that coincide there add up to zero.

use std::collections::BTreeMap;

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Element, Kind, Role};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::conditions::coefficients::{contains_special, moves};

/// The coefficients eₖ of a growth, by the function gₖ; none is zero.
pub type Growth = BTreeMap<Monomial, Element>;

/// coefficient · exp(growth) · factor.
#[derive(Clone, Debug)]
pub struct Term {
    /// How the function grows.
    pub growth: Growth,
    /// Powers of logarithms, and of functions that are not understood.
    pub factor: Monomial,
    /// What it is multiplied by: an element of the parameters.
    pub coefficient: Element,
}

/// A difference as a sum of terms.
#[derive(Clone, Debug)]
pub struct Terms {
    /// The terms.
    pub terms: Vec<Term>,
    /// Whether every function is understood, so that no other coincidences are possible.
    pub understood: bool,
}

/// The numerator of an element, term by term; denominators vanish nowhere on the domain.
pub fn terms_of(field: &Field, e: &Element) -> Terms {
    let (numerator, _) = field.fraction(e);
    let mut all = Terms { terms: Vec::new(), understood: true };
    for (monomial, coefficient) in numerator.collect(|v| moves(field, v)) {
        match term(field, &monomial, &coefficient) {
            Some((term, understood)) => {
                all.understood &= understood;
                all.terms.push(term);
            }
            None => {
                all.understood = false;
                all.terms.push(Term { growth: Growth::new(), factor: monomial, coefficient });
            }
        }
    }
    if let [only] = &all.terms[..] {
        all.understood |= only.factor.is_one();
    }
    all
}

fn term(field: &Field, monomial: &Monomial, coefficient: &Element) -> Option<(Term, bool)> {
    let mut understood = true;
    let mut grows: Vec<Element> = Vec::new();
    let mut factor = Vec::new();
    for (v, k) in monomial.iter() {
        let times = rational(i64::from(k), 1);
        match &*field.kind(v) {
            // the utility level may have either sign; its powers are polynomial, like those of logarithms
            Kind::Symbol(Role::Utility) => factor.push((v, k)),
            Kind::Symbol(_) => grows.push(field.ln(&Poly::var(v)).ok()?.scale(&times)),
            Kind::Exp(argument) => grows.push(argument.scale(&times)),
            Kind::Sum { root, .. } if *root > 1 => grows.push(field.ln(&Poly::var(v)).ok()?.scale(&times)),
            Kind::Ln(_) => {
                understood &= is_rigid(field, v);
                factor.push((v, k));
            }
            Kind::Sum { .. } | Kind::Special(..) => {
                understood = false;
                factor.push((v, k));
            }
        }
    }
    let whole = field.expand(&Poly::sum(grows));
    let mut growth = Growth::new();
    let mut coefficient = coefficient.clone();
    for (function, e) in whole.collect(|v| moves(field, v)) {
        if function.is_one() {
            coefficient = field.product(&coefficient, &field.exp(&e).ok()?);
        } else {
            understood &= function.iter().all(|(v, _)| is_rigid(field, v));
            growth.insert(function, e);
        }
    }
    Some((Term { growth, factor: Monomial::from_pairs(factor), coefficient }, understood))
}

/// Whether a moving variable is the same function, independent of the others, whatever the parameters are: no parameter
/// and no special function stands in it, or it is the logarithm of a sum of prices with coefficients that cannot vanish.
fn is_rigid(field: &Field, v: Var) -> bool {
    let holds_parameters = field.symbols_of(&Poly::var(v)).into_iter().any(|s| field.role(s) == Some(Role::Parameter));
    match &*field.kind(v) {
        _ if !holds_parameters => !contains_special(field, v),
        Kind::Ln(Base::Sum(value)) => is_linear_in_prices(field, value),
        _ => false,
    }
}

/// Σ cₖ pₖ over all prices with cₖ ≠ 0: irreducible, and the only base of that kind that a system has.
fn is_linear_in_prices(field: &Field, value: &Element) -> bool {
    let value = field.expand(value);
    let prices = field.moving_symbols().into_iter().filter(|s| field.role(*s) == Some(Role::Price)).count();
    let parts = value.collect(|v| moves(field, v));
    let single =
        |m: &Monomial| matches!(m.iter().collect::<Vec<_>>()[..], [(v, 1)] if field.role(v) == Some(Role::Price));
    prices > 1 && parts.len() == prices && parts.iter().all(|(m, c)| single(m) && field.sign(c).excludes_zero())
}

/// The differences of two growths, each of which must vanish where the two functions coincide. Not reduced.
pub fn gaps(a: &Growth, b: &Growth) -> Vec<Element> {
    let here = a.iter().map(|(function, e)| match b.get(function) {
        Some(other) => e - other,
        None => e.clone(),
    });
    let there = b.iter().filter(|(function, _)| !a.contains_key(*function)).map(|(_, e)| e.clone());
    here.chain(there).collect()
}

impl Term {
    /// The same term with parameters replaced; `None` where the coefficient vanishes, an error where a value is not
    /// defined.
    pub fn substituted(&self, field: &Field, with: &[(Var, Element)]) -> Result<Option<Term>, Undefined> {
        let coefficient = put_in(field, &self.coefficient, with)?;
        if coefficient.is_zero() {
            return Ok(None);
        }
        let mut growth = Growth::new();
        for (function, e) in &self.growth {
            let e = put_in(field, e, with)?;
            if !e.is_zero() {
                growth.insert(function.clone(), e);
            }
        }
        Ok(Some(Term { growth, factor: self.factor.clone(), coefficient }))
    }
}

/// A value is not defined where another stands.
#[derive(Clone, Copy, Debug)]
pub struct Undefined;

/// The element with parameters replaced, reduced.
pub fn put_in(field: &Field, e: &Element, with: &[(Var, Element)]) -> Result<Element, Undefined> {
    if with.iter().all(|(v, _)| !field.depends_on(e, *v)) {
        return Ok(e.clone());
    }
    field.substitute(e, with).map(|value| field.reduce(&value)).map_err(|_| Undefined)
}

/// Adds the coefficients of functions that are the same.
pub fn merged(field: &Field, terms: Vec<Term>) -> Vec<Term> {
    let mut out: Vec<Term> = Vec::new();
    for term in terms {
        let same = |other: &&mut Term| {
            other.factor == term.factor && gaps(&other.growth, &term.growth).iter().all(|gap| field.is_zero(gap))
        };
        match out.iter_mut().find(same) {
            Some(other) => other.coefficient = &other.coefficient + &term.coefficient,
            None => out.push(term),
        }
    }
    for term in &mut out {
        term.coefficient = field.reduce(&term.coefficient);
    }
    out.retain(|term| !term.coefficient.is_zero());
    out
}

//! Where a wrong formula differs from the right one: a sign, a factor, a term.

use num_traits::{One, Signed};

use crate::algebra::budget;
use crate::algebra::field::Field;
use crate::algebra::formula::Formula;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Monomial;
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;

/// What turns the claimed formula into the right one.
#[derive(Clone, Debug, PartialEq)]
pub enum Difference {
    /// All of it has the wrong sign.
    Sign,
    /// It lacks a factor.
    LacksFactor(Element),
    /// It has a factor too much.
    ExtraFactor(Element),
    /// One of its factors is another one.
    OtherFactor {
        /// The factor as it is claimed.
        claimed: Element,
        /// The factor as it is.
        right: Element,
    },
    /// It lacks a term.
    LacksTerm(Element),
    /// It has a term too much.
    ExtraTerm(Element),
    /// One of its terms has the wrong sign.
    TermSign(Element),
    /// One of its terms lacks a factor.
    TermFactor {
        /// The term as it is claimed.
        term: Element,
        /// What it lacks.
        factor: Element,
    },
    /// One of its terms is another one.
    OtherTerm {
        /// The term as it is claimed.
        claimed: Element,
        /// The term as it is.
        right: Element,
    },
}

/// The work that the search for a difference may take.
const WORK: u64 = 40_000_000;
/// Longer formulas are not compared term by term.
const MOST_TERMS: usize = 200;
/// A factor or a term that is longer than this points at nothing.
const LARGEST: usize = 30;
/// A factor that is longer than this is no slip of the pen.
const SHORT: usize = 5;

/// The one thing in which `claimed` differs from `right`, where there is one and it is small; `None` else. Both are
/// known to differ.
pub fn difference(field: &Field, claimed: &Element, right: &Element) -> Option<Difference> {
    let found = budget::attempt(WORK, || {
        let claimed = field.current(claimed);
        let candidates = [
            by_factor(field, &claimed, right),
            by_own_terms(field, &claimed, right),
            by_terms(field, &field.reduce(&claimed), &field.reduce(right)),
        ];
        let least = candidates.into_iter().flatten().min_by_key(|(_, size)| *size);
        least.map(|(difference, _)| difference)
    });
    found.ok().flatten()
}

/// A difference and how long it is.
type Sized = Option<(Difference, usize)>;

fn by_factor(field: &Field, claimed: &Element, right: &Element) -> Sized {
    if claimed.is_zero() || right.is_zero() {
        return None;
    }
    let ratio = field.reduce(&field.quotient(right, claimed).ok()?);
    if is_minus_one(&ratio) {
        return Some((Difference::Sign, 0));
    }
    let split = ratio.primitive();
    let below: Vec<_> = split.monomial.iter().filter(|(_, power)| *power < 0).collect();
    let below = below.into_iter().fold(Monomial::one(), |all, (var, power)| all.mul(&Monomial::power(var, -power)));
    let claimed_factor = Poly::term(&Rational::from_integer(split.content.denom().clone()), below);
    let right_factor = field.reduce(&field.product(&ratio, &claimed_factor));
    let sizes = (size(field, &claimed_factor), size(field, &right_factor));
    let is_sum = right_factor.len() > 1;
    let difference = match (is_one(&claimed_factor), is_one(&right_factor)) {
        (true, _) => Difference::LacksFactor(right_factor),
        (_, true) => Difference::ExtraFactor(claimed_factor),
        _ => Difference::OtherFactor { claimed: claimed_factor, right: right_factor },
    };
    let total = match &difference {
        Difference::LacksFactor(_) => sizes.1,
        Difference::ExtraFactor(_) => sizes.0,
        // sums that are exchanged are better told by their terms
        _ => sizes.0 + sizes.1 + if sizes.0 > 1 && is_sum { 4 } else { 0 },
    };
    let whole = size(field, right);
    (total <= LARGEST && (2 * total <= whole || total <= SHORT)).then_some((difference, total))
}

fn is_one(e: &Element) -> bool {
    e.as_constant().is_some_and(|value| value.is_one())
}

fn is_minus_one(e: &Element) -> bool {
    e.as_constant().is_some_and(|value| value == -Rational::one())
}

/// right - claimed, held against the terms of the claim as they stand.
fn by_own_terms(field: &Field, claimed: &Element, right: &Element) -> Sized {
    if claimed.len() < 2 || claimed.len() > MOST_TERMS {
        return None;
    }
    let missing = field.reduce(&(right - claimed));
    let coefficient = |monomial: &Monomial| claimed.terms().find(|(m, _)| *m == monomial).map(|(_, c)| c);
    let ratios: Option<Vec<Rational>> = missing.terms().map(|(m, c)| Some(c / coefficient(m)?)).collect();
    if let Some(ratios) = ratios
        && let Some(first) = ratios.first().filter(|first| ratios.iter().all(|ratio| ratio == *first))
        && missing.len() < claimed.len()
    {
        // the claim has first⁻¹ times what is missing among its terms
        let term = missing.scale(&first.recip());
        let two = Rational::from_integer(2.into());
        let difference = match () {
            () if *first == -Rational::one() => Difference::ExtraTerm(term),
            () if *first == -two => Difference::TermSign(term),
            () => Difference::TermFactor { term, factor: Element::constant(&(first + Rational::one())) },
        };
        return measured(field, difference);
    }
    let factors = claimed.terms().map(|(monomial, c)| Poly::term(&c, monomial.clone())).filter_map(|term| {
        let factor = field.reduce(&field.quotient(&(&term + &missing), &term).ok()?);
        let size = size(field, &factor);
        (size <= SHORT).then_some((size, Difference::TermFactor { term, factor }))
    });
    let factor = factors.min_by_key(|(size, _)| *size).and_then(|(_, difference)| measured(field, difference));
    factor.or_else(|| measured(field, Difference::LacksTerm(missing)).filter(|(_, size)| *size <= SHORT))
}

/// The terms of both, expanded; those that agree are left out.
fn by_terms(field: &Field, claimed: &Element, right: &Element) -> Sized {
    let (claimed, right) = (field.expand(claimed), field.expand(right));
    if claimed.len() > MOST_TERMS || right.len() > MOST_TERMS || claimed.len().max(right.len()) < 2 {
        return None;
    }
    let terms = |e: &Element| -> Vec<Element> { e.terms().map(|(m, c)| Poly::term(&c, m.clone())).collect() };
    let (own, true_terms) = (terms(&claimed), terms(&right));
    let extra: Vec<&Element> = own.iter().filter(|term| !true_terms.contains(term)).collect();
    let lacking: Vec<&Element> = true_terms.iter().filter(|term| !own.contains(term)).collect();
    if own.len() == extra.len() && true_terms.len() == lacking.len() {
        // nothing is common to both
        return None;
    }
    let sum = |terms: &[&Element]| terms.iter().fold(Element::zero(), |sum, term| &sum + *term);
    let (extra, lacking) = (sum(&extra), sum(&lacking));
    let difference = match (extra.is_zero(), lacking.is_zero()) {
        (true, _) => Difference::LacksTerm(lacking),
        (_, true) => Difference::ExtraTerm(extra),
        _ => one_term(field, &extra, &lacking)?,
    };
    measured(field, difference)
}

fn one_term(field: &Field, claimed: &Element, right: &Element) -> Option<Difference> {
    let factor = field.reduce(&field.quotient(right, claimed).ok()?);
    if is_minus_one(&factor) {
        return Some(Difference::TermSign(claimed.clone()));
    }
    Some(match size(field, &factor) <= SHORT {
        true => Difference::TermFactor { term: claimed.clone(), factor },
        false => Difference::OtherTerm { claimed: claimed.clone(), right: right.clone() },
    })
}

fn measured(field: &Field, difference: Difference) -> Sized {
    let of = |e: &Element| size(field, e);
    let total = match &difference {
        Difference::Sign => 0,
        Difference::LacksFactor(e) | Difference::ExtraFactor(e) => of(e),
        Difference::LacksTerm(e) | Difference::ExtraTerm(e) | Difference::TermSign(e) => of(e),
        Difference::TermFactor { term, factor } => of(term) + of(factor),
        Difference::OtherTerm { claimed, right } | Difference::OtherFactor { claimed, right } => {
            of(claimed) + of(right)
        }
    };
    let largest = if matches!(difference, Difference::OtherTerm { .. }) { LARGEST / 2 } else { LARGEST };
    (total <= largest).then_some((difference, total))
}

/// How long an element is in print.
fn size(field: &Field, e: &Element) -> usize {
    length(&field.formula(e)).min(length(&field.reduced_formula(e)))
}

/// How many names, numbers and signs a formula has.
fn length(formula: &Formula) -> usize {
    match formula {
        Formula::Number(value) => 1 + usize::from(!value.is_integer()) + usize::from(value.is_negative()),
        Formula::Symbol(_) => 1,
        Formula::Sum(parts) | Formula::Product(parts) => parts.iter().map(length).sum::<usize>(),
        Formula::Negative(inner) => 1 + length(inner),
        Formula::Quotient(above, below) => length(above) + length(below),
        Formula::Power(base, exponent) => length(base) + length(exponent),
        Formula::Call(_, argument) => 1 + length(argument),
    }
}

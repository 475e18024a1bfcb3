//! The matrix taken apart: the spread of the shares aside, or by powers of what income exceeds.

use std::rc::Rc;

use crate::algebra::budget;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::number::{Rational, rational};
use crate::algebra::polynomial::Poly;
use crate::model::Model;
use crate::proof::{Decomposition, Expression, Matrix, Proved, Prover, Semidefinite};

use super::super::slutsky::{Compensation, Coordinates};
use super::squares::{Squares, Symmetric, squares};
use super::{Question, RUNG_WORK, SUBJECT, search};

/// The precision of the values that say what to try, in bits.
const BITS: u32 = 160;
/// How many bounds on income are tried.
const MOST_BOUNDS: usize = 3;

/// The matrix with these entries as a symmetric one, with its values at an admissible point.
pub(super) fn symmetric(model: &Model, entries: &[Element], quantities: &[Element]) -> Symmetric {
    let field = &model.field;
    let n = entries.len().isqrt();
    let half = rational(1, 2);
    let mean = |k: usize| {
        let (a, b) = (&entries[k], &entries[k % n * n + k / n]);
        if a == b { a.clone() } else { field.reduce(&(&field.current(a) + &field.current(b)).scale(&half)) }
    };
    let entries: Vec<Element> = (0..n * n).map(mean).collect();
    let seen = search::points(model, quantities).take(3).find_map(|point| {
        let about = |e: &Element| Some(field.enclose(e, &point, BITS)?.midpoint().to_rational());
        let values: Vec<Rational> = entries.iter().map(about).collect::<Option<_>>()?;
        let weights: Option<Vec<Rational>> = quantities.iter().take(n).map(about).collect();
        Some((values, weights?))
    });
    let (values, weights) = seen.unwrap_or_default();
    Symmetric { n, entries, values, weights }
}

/// By squares of the matrix itself.
pub(super) fn by_squares(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Proved<Semidefinite>> {
    let squares = squares(&question.model.field, &question.symmetric, &question.shares)?;
    let whole = Decomposition { multipliers: Vec::new(), squares };
    prover.decomposed(SUBJECT, &question.matrix, &[], whole)
}

/// −K = (diag w − w wᵀ) − T: the spread of the shares is positive semidefinite, so that T decides where it is negative
/// semidefinite.
pub(super) fn by_spread(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Proved<Semidefinite>> {
    let field = &question.model.field;
    let t = beyond_spread(question)?;
    let whole = whole(question)?;
    let times = |mut all: Squares| {
        all.iter_mut().for_each(|(weight, _)| *weight = &*weight * &whole);
        all
    };
    let spread = spread(field, &question.shares);
    if let Some(own) = of_terms(field, &t) {
        let squares = times([own, spread].concat());
        return prover.decomposed(SUBJECT, &question.matrix, &[], Decomposition { multipliers: Vec::new(), squares });
    }
    let rest = part(question, prover, t.entries)?;
    let parts = Decomposition { multipliers: vec![whole.clone()], squares: times(spread) };
    prover.decomposed(SUBJECT, &question.matrix, &[rest], parts)
}

/// T = K + diag w − w wᵀ, symmetric. `None` where the functions are no shares.
pub(super) fn beyond_spread(question: &Question<'_>) -> Option<Symmetric> {
    let field = &question.model.field;
    let w = &question.shares;
    let n = question.system.size();
    if w.len() != n {
        return None;
    }
    let per = field.inverse(&whole(question)?).ok()?;
    let mut m = question.symmetric.clone();
    for (k, entry) in m.entries.iter_mut().enumerate() {
        let (i, j) = (k / n, k % n);
        let own = if i == j { w[i].clone() } else { Poly::zero() };
        let rest = &(&(&field.current(entry) * &per) + &own) - &(&w[i] * &w[j]);
        *entry = field.reduce(&rest);
    }
    m.values.clear();
    Some(m)
}

/// What the entries are per unit of: 1 in shares, income in outlays. `None` where neither is so.
fn whole(question: &Question<'_>) -> Option<Element> {
    match (question.system.coordinates, &question.system.compensation) {
        (Coordinates::Shares, _) => Some(Poly::one()),
        (Coordinates::Outlays, Compensation::Income(income)) => Some(Poly::var(*income)),
        _ => None,
    }
}

/// diag w − w wᵀ as squares.
fn spread(field: &Field, w: &[Element]) -> Squares {
    let n = w.len();
    let unit = |i: usize, j: Option<usize>| -> Vec<Element> {
        (0..n).map(|k| Poly::int(i64::from(k == i) - i64::from(Some(k) == j))).collect()
    };
    let mut squares = Squares::new();
    for i in 0..n {
        squares.extend((0..i).map(|j| (&w[i] * &w[j], unit(i, Some(j)))));
    }
    let left = field.reduce(&(&Poly::one() - &Poly::sum(w.to_vec())));
    if !left.is_zero() {
        let left = field.named(&left, None);
        squares.extend((0..n).map(|i| (&w[i] * &left, unit(i, None))));
    }
    squares
}

/// Squares of Σ μ Mμ, the matrices of the coefficients of the monomials that move; of −Mμ where μ is negative.
fn of_terms(field: &Field, t: &Symmetric) -> Option<Squares> {
    if t.entries.iter().all(Poly::is_zero) {
        return Some(Squares::new());
    }
    if let Some(found) = squares(field, t, &[]) {
        return Some(found);
    }
    let moves = |v| super::super::coefficients::moves(field, v);
    let mut monomials = Vec::new();
    let collected: Vec<Vec<_>> = t.entries.iter().map(|e| e.collect(moves)).collect();
    for (monomial, _) in collected.iter().flatten() {
        if !monomials.contains(monomial) {
            monomials.push(monomial.clone());
        }
    }
    let mut all = Squares::new();
    for monomial in monomials.iter().take(2 * t.n) {
        let weight = Poly::monomial(monomial.clone());
        let sign = field.sign(&weight);
        let turned = sign.negated().is_nonnegative();
        if !sign.is_nonnegative() && !turned {
            return None;
        }
        let part = |own: &Vec<(_, Poly)>| {
            let found = own.iter().find(|(m, _)| m == monomial).map(|(_, c)| c.clone()).unwrap_or_default();
            if turned { found.neg() } else { found }
        };
        let part = Symmetric { entries: collected.iter().map(part).collect(), ..t.clone() };
        let weight = if turned { weight.neg() } else { weight };
        all.extend(squares(field, &part, &[])?.into_iter().map(|(scale, u)| (&weight * &scale, u)));
    }
    (monomials.len() <= 2 * t.n).then_some(all)
}

/// K = Σ Kₖ tᵏ where a fact says that income exceeds something by t: the matrices one by one.
pub(super) fn by_excess(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Proved<Semidefinite>> {
    let income = question.model.income?;
    let field = &question.model.field;
    let m = &question.symmetric;
    let facts = field.facts();
    let exceeds = |e: &Element| e.len() > 1 && e.degree(income) == 1 && e.low_degree(income) == 0;
    let bounds = facts.iter().filter(|f| f.relation != Relation::NonZero && exceeds(&f.element));
    bounds.take(MOST_BOUNDS).find_map(|fact| {
        let parts = budget::attempt(RUNG_WORK, || field.around(&m.entries, income, &fact.element)).ok().flatten()?;
        if parts.len() < 2 {
            return None;
        }
        let (mut proofs, mut multipliers) = (Vec::new(), Vec::new());
        for (k, entries) in parts.into_iter().enumerate().filter(|(_, e)| e.iter().any(|e| !e.is_zero())) {
            proofs.push(part(question, prover, entries)?);
            multipliers.push(fact.element.pow(k as u32));
        }
        prover.decomposed(SUBJECT, &question.matrix, &proofs, Decomposition { multipliers, squares: Vec::new() })
    })
}

fn part(question: &Question<'_>, prover: &mut Prover<'_>, entries: Vec<Element>) -> Option<Proved<Semidefinite>> {
    let n = question.system.size();
    let field = &question.model.field;
    let matrix = Rc::new(Matrix::new(n, |i, j| Expression::element(entries[i * n + j].clone())));
    let m = Symmetric { n, entries, values: Vec::new(), weights: Vec::new() };
    if let Some(squares) = squares(field, &m, &[]) {
        return prover.decomposed(SUBJECT, &matrix, &[], Decomposition { multipliers: Vec::new(), squares });
    }
    let balance = prover.balanced(SUBJECT, &matrix, &[]);
    match &balance {
        None => prover.characteristic(SUBJECT, &matrix, None),
        Some(balance) => {
            (0..n).rev().find_map(|without| prover.characteristic(SUBJECT, &matrix, Some((balance, without))))
        }
    }
}

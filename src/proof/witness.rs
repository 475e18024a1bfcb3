//! The rule of witnesses: a point that satisfies every fact of the domain, evaluated exactly.

use std::cmp::Ordering;
use std::rc::Rc;

use num_traits::{Signed, Zero};

use crate::algebra::budget;
use crate::algebra::evaluation::{Constant, Point};
use crate::algebra::field::{Field, Relation};
use crate::algebra::formula::Formula;
use crate::algebra::generator::Element;
use crate::algebra::interval::Interval;
use crate::algebra::number::{Rational, rational};

use super::claim::{Balanced, Bounded, Equation, Identities, Label, Matrix, Semidefinite, SemidefiniteAt};
use super::derivation::{Proved, Refuted, Rule, Statement};
use super::prover::Prover;
use super::semidefinite::quadratic_form;

/// The precisions that are tried, in bits.
const PRECISIONS: [u32; 3] = [64, 160, 512];
/// The work that an exact evaluation may take.
const EXACT_WORK: u64 = 2_000_000;

/// A number: exactly, or as an element without symbols and bounds for it.
#[derive(Clone, Debug, PartialEq)]
pub enum Value {
    /// A rational number.
    Exact(Rational),
    /// A number with logarithms, powers or roots.
    Enclosed {
        /// The number as a formula, where the field could write it so.
        formula: Option<Formula>,
        /// A lower bound.
        from: Rational,
        /// An upper bound.
        to: Rational,
    },
}

impl Value {
    /// The sign; `None` where the bounds do not show it.
    pub fn sign(&self) -> Option<Ordering> {
        match self {
            Value::Exact(q) => Some(q.cmp(&Rational::zero())),
            Value::Enclosed { from, .. } if from.is_positive() => Some(Ordering::Greater),
            Value::Enclosed { to, .. } if to.is_negative() => Some(Ordering::Less),
            Value::Enclosed { .. } => None,
        }
    }
}

/// A point at which a claim fails.
#[derive(Clone, Debug, PartialEq)]
pub struct Failure {
    /// The point: a value for every declared symbol.
    pub point: Point,
    /// What was claimed.
    pub of: Failed,
    /// left − right, the bounded expression, or vᵀMv at the point.
    pub value: Value,
}

/// The claim that fails at a point.
#[derive(Clone, Debug, PartialEq)]
pub enum Failed {
    /// An equation.
    Equation(Equation),
    /// A sign.
    Bound(Bounded),
    /// Negative semidefiniteness, in the direction of a vector.
    Semidefinite {
        /// The matrix.
        matrix: Rc<Matrix>,
        /// The vector.
        vector: Vec<Rational>,
    },
}

impl Failure {
    /// Which member of a family fails.
    pub fn place(&self) -> Label {
        match &self.of {
            Failed::Equation(equation) => equation.label,
            _ => Label::Whole,
        }
    }
}

impl Prover<'_> {
    /// Refutes an equation at a point; `None` unless the point satisfies every fact and the difference is shown not to
    /// be zero there.
    pub fn refute(&mut self, subject: &str, equation: Equation, point: &Point) -> Option<Refuted<Identities>> {
        let difference = &self.value(&equation.left) - &self.value(&equation.right);
        let value = exact_value(self.field, &difference, point)?;
        if !satisfies_facts(self.field, point) || matches!(value.sign(), None | Some(Ordering::Equal)) {
            return None;
        }
        let claim = Rc::new(Identities { equations: vec![equation.clone()] });
        let (failure, step) = self.failed(subject, point, Failed::Equation(equation), value);
        Some(Refuted { claim, failure, step })
    }

    /// Refutes a bound at a point.
    pub fn refute_bound(&mut self, subject: &str, claim: Bounded, point: &Point) -> Option<Refuted<Bounded>> {
        let element = self.value(&claim.expression);
        let value = exact_value(self.field, &element, point)?;
        let fails = match (claim.relation, value.sign()?) {
            (Relation::Positive, sign) => sign != Ordering::Greater,
            (Relation::NonNegative, sign) => sign == Ordering::Less,
            (Relation::NonZero, sign) => sign == Ordering::Equal,
        };
        if !fails || !satisfies_facts(self.field, point) {
            return None;
        }
        let (failure, step) = self.failed(subject, point, Failed::Bound(claim.clone()), value);
        Some(Refuted { claim: Rc::new(claim), failure, step })
    }

    /// Refutes negative semidefiniteness by a vector with vᵀMv > 0 at a point.
    pub fn refute_semidefinite(
        &mut self,
        subject: &str,
        matrix: &Rc<Matrix>,
        vector: &[Rational],
        point: &Point,
    ) -> Option<Refuted<Semidefinite>> {
        let form = self.value(&quadratic_form(matrix, vector));
        let value = exact_value(self.field, &form, point)?;
        if vector.len() != matrix.size || value.sign() != Some(Ordering::Greater) || !satisfies_facts(self.field, point)
        {
            return None;
        }
        let of = Failed::Semidefinite { matrix: matrix.clone(), vector: vector.to_vec() };
        let (failure, step) = self.failed(subject, point, of, value);
        Some(Refuted { claim: Rc::new(Semidefinite { matrix: matrix.clone() }), failure, step })
    }

    /// Establishes that the symmetric part of the matrix is negative semidefinite at a point, by the characteristic
    /// coefficients there. A balanced matrix loses its last row and column first.
    pub fn semidefinite_at(
        &mut self,
        subject: &str,
        matrix: &Rc<Matrix>,
        balance: Option<&Proved<Balanced>>,
        point: &Point,
    ) -> Option<Proved<SemidefiniteAt>> {
        let fits = balance.is_none_or(|b| b.claim.matrix == *matrix && self.in_force(b.step));
        if !fits || !satisfies_facts(self.field, point) {
            return None;
        }
        let size = if balance.is_some() { matrix.size - 1 } else { matrix.size };
        let entries = self.entries(matrix);
        let mut minus = Vec::with_capacity(size * size);
        for i in 0..size {
            for j in 0..size {
                let (a, b) = (&entries[i * matrix.size + j], &entries[j * matrix.size + i]);
                let both = &self.field.current(a) + &self.field.current(b);
                minus.push(both.scale(&rational(-1, 2)));
            }
        }
        if !coefficients_are_nonnegative(self.field, &minus, size, point) {
            return None;
        }
        let premises: Vec<_> = balance.iter().map(|b| b.step).collect();
        let claim = Rc::new(SemidefiniteAt { matrix: matrix.clone(), point: point.clone() });
        let statement = Statement::SemidefiniteAt(claim.clone());
        let step = self.record(subject, statement, Rule::Evaluation, &premises, Vec::new());
        Some(Proved { claim, step })
    }

    fn failed(
        &mut self,
        subject: &str,
        point: &Point,
        of: Failed,
        value: Value,
    ) -> (Rc<Failure>, super::derivation::StepId) {
        let failure = Rc::new(Failure { point: point.clone(), of, value });
        let step = self.record(subject, Statement::Failure(failure.clone()), Rule::Evaluation, &[], Vec::new());
        (failure, step)
    }
}

/// Whether every fact of the field, and the positivity of prices and the like, holds at the point.
fn satisfies_facts(field: &Field, point: &Point) -> bool {
    let positive = point.iter().all(|(v, q)| q.is_positive() || !field.role(*v).is_some_and(|r| r.is_positive()));
    positive
        && field.facts().iter().all(|fact| {
            let Some(sign) = exact_value(field, &fact.element, point).and_then(|v| v.sign()) else { return false };
            match fact.relation {
                Relation::Positive => sign == Ordering::Greater,
                Relation::NonNegative => sign != Ordering::Less,
                Relation::NonZero => sign != Ordering::Equal,
            }
        })
}

/// The value of an element at a point: exactly where it is rational, else in bounds that show its sign (or, where
/// they cannot, the narrowest that were found). `None` where it is not defined or not known to be.
pub fn exact_value(field: &Field, e: &Element, point: &Point) -> Option<Value> {
    let mut bounds: Option<Interval> = None;
    for bits in PRECISIONS {
        bounds = field.enclose(e, point, bits);
        match &bounds {
            Some(interval) if matches!(interval.sign(), Some(Ordering::Less | Ordering::Greater)) => break,
            _ => {}
        }
    }
    let bounds = bounds?;
    let exact = budget::attempt(EXACT_WORK, || field.value_at(e, point).ok()).ok().flatten();
    if let Some(q) = exact.as_ref().and_then(Constant::as_rational) {
        return Some(Value::Exact(q));
    }
    let formula = exact.map(|number| number.formula());
    Some(Value::Enclosed { formula, from: bounds.lo_rational(), to: bounds.hi_rational() })
}

/// Whether all characteristic coefficients of a symmetric matrix are nonnegative at a point: exactly where the entries
/// are rational, else shown positive in intervals.
fn coefficients_are_nonnegative(field: &Field, entries: &[Element], size: usize, point: &Point) -> bool {
    let values: Option<Vec<Value>> = entries.iter().map(|e| exact_value(field, e, point)).collect();
    let Some(values) = values else { return false };
    let exact: Option<Vec<Rational>> = values
        .iter()
        .map(|v| match v {
            Value::Exact(q) => Some(q.clone()),
            Value::Enclosed { .. } => None,
        })
        .collect();
    if let Some(exact) = exact {
        return characteristic(&exact, size, &Rationals).iter().all(|c| !c.is_negative());
    }
    PRECISIONS.iter().any(|bits| {
        let enclosed: Option<Vec<Interval>> = entries.iter().map(|e| field.enclose(e, point, *bits)).collect();
        enclosed.is_some_and(|a| {
            characteristic(&a, size, &Intervals(*bits)).iter().all(|c| c.sign() == Some(Ordering::Greater))
        })
    })
}

/// The operations that the characteristic coefficients need.
trait Ring<T> {
    fn constant(&self, q: Rational) -> T;
    fn add(&self, a: &T, b: &T) -> T;
    fn mul(&self, a: &T, b: &T) -> T;
}

struct Rationals;

impl Ring<Rational> for Rationals {
    fn constant(&self, q: Rational) -> Rational {
        q
    }
    fn add(&self, a: &Rational, b: &Rational) -> Rational {
        a + b
    }
    fn mul(&self, a: &Rational, b: &Rational) -> Rational {
        a * b
    }
}

struct Intervals(u32);

impl Ring<Interval> for Intervals {
    fn constant(&self, q: Rational) -> Interval {
        Interval::from_rational(&q, self.0)
    }
    fn add(&self, a: &Interval, b: &Interval) -> Interval {
        a.add(b)
    }
    fn mul(&self, a: &Interval, b: &Interval) -> Interval {
        a.mul(b)
    }
}

/// The sums of the principal minors of sizes 1, …, n, by Faddeev and LeVerrier: Mₖ = A Mₖ₋₁ + (−1)ᵏ⁻¹… with
/// eₖ = tr(A Bₖ)/k and Bₖ₊₁ = eₖ − A Bₖ, B₁ = 1.
fn characteristic<T: Clone, R: Ring<T>>(a: &[T], n: usize, ring: &R) -> Vec<T> {
    let zero = ring.constant(rational(0, 1));
    let identity =
        |c: &T| -> Vec<T> { (0..n * n).map(|k| if k / n == k % n { c.clone() } else { zero.clone() }).collect() };
    let minus = ring.constant(rational(-1, 1));
    let mut b = identity(&ring.constant(rational(1, 1)));
    let mut coefficients = Vec::with_capacity(n);
    for k in 1..=n {
        let product: Vec<T> = (0..n * n)
            .map(|at| (0..n).fold(zero.clone(), |s, l| ring.add(&s, &ring.mul(&a[at / n * n + l], &b[l * n + at % n]))))
            .collect();
        let trace = (0..n).fold(zero.clone(), |s, i| ring.add(&s, &product[i * n + i]));
        let e = ring.mul(&trace, &ring.constant(rational(1, k as i64)));
        b = identity(&e).iter().zip(&product).map(|(d, p)| ring.add(d, &ring.mul(&minus, p))).collect();
        coefficients.push(e);
    }
    coefficients
}

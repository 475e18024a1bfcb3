//! The sign of a response wherever all quantities are positive.

use std::cmp::Ordering;

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::sign::Sign;
use crate::conditions::Witness;
use crate::proof::{Bounded, Equation, Expression, Label, Prover, StepId};

use super::question::Question;

/// The work that one sign may take.
const WORK: u64 = 2_000_000;
/// The work that one evaluation may take.
const EVALUATION: u64 = 2_000_000;
/// How many points are looked at for signs.
const MOST_POINTS: usize = 12;

/// What is known of a sign.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Tendency {
    /// Positive.
    Positive,
    /// Not negative.
    NonNegative,
    /// Zero.
    Zero,
    /// Not positive.
    NonPositive,
    /// Negative.
    Negative,
    /// Positive at one point, negative at another.
    Varies,
}

/// A response, and what is known of its sign.
#[derive(Clone, Debug, Default)]
pub struct Response {
    /// Its sign, where it is known.
    pub tendency: Option<Tendency>,
    /// A point at which it is positive, where that is not so everywhere.
    pub positive: Option<Witness>,
    /// A point at which it is negative, where that is not so everywhere.
    pub negative: Option<Witness>,
    /// The steps that show it.
    pub steps: Vec<StepId>,
}

/// Finds the sign of an expression.
pub(super) fn of(question: &Question<'_>, prover: &mut Prover<'_>, subject: &str, e: &Expression) -> Response {
    let settled = budget::attempt(WORK, || everywhere(question, prover, subject, e));
    match settled {
        Ok(Some((tendency, step))) => {
            Response { tendency: Some(tendency), steps: vec![step], positive: None, negative: None }
        }
        _ => at_points(question, prover, subject, e),
    }
}

fn everywhere(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    subject: &str,
    e: &Expression,
) -> Option<(Tendency, StepId)> {
    let field = question.field();
    let value = field.reduce(&prover.value(e));
    if value.is_zero() {
        let proof = prover.identity(subject, e.clone(), Expression::zero(), &question.links).ok()?;
        return Some((Tendency::Zero, proof.step()));
    }
    let equation = Equation { label: Label::Whole, left: e.clone(), right: Expression::element(value.clone()) };
    prover.supposing(&question.domain(), |prover| {
        let (tendency, relation) = match field.sign(&value) {
            Sign::Positive => (Tendency::Positive, Relation::Positive),
            Sign::NonNegative => (Tendency::NonNegative, Relation::NonNegative),
            Sign::Negative => (Tendency::Negative, Relation::Positive),
            Sign::NonPositive => (Tendency::NonPositive, Relation::NonNegative),
            Sign::Zero | Sign::NonZero | Sign::Unknown => return None,
        };
        let known = match tendency {
            Tendency::Negative | Tendency::NonPositive => value.neg(),
            _ => value.clone(),
        };
        let same = prover.identities(subject, vec![equation], &question.links).ok()?.step();
        let proof = prover.bound(subject, Expression::element(known), relation, &[same])?;
        Some((tendency, proof.step()))
    })
}

/// Points of both signs, where the sign is not the same everywhere; one that refutes it where none follows.
fn at_points(question: &Question<'_>, prover: &mut Prover<'_>, subject: &str, e: &Expression) -> Response {
    let mut response = Response::default();
    if !question.points_are_positive() {
        return response;
    }
    let value = prover.value(e);
    for point in question.points().take(MOST_POINTS) {
        let field = question.field();
        let sign = budget::attempt(EVALUATION, || field.enclose(&value, &point, 64).and_then(|i| i.sign()));
        let (slot, claim) = match sign {
            Ok(Some(Ordering::Greater)) if response.positive.is_none() => (&mut response.positive, value.neg()),
            Ok(Some(Ordering::Less)) if response.negative.is_none() => (&mut response.negative, value.clone()),
            _ => continue,
        };
        let claim = Bounded { expression: Expression::element(claim), relation: Relation::NonNegative };
        let refuted = budget::attempt(EVALUATION * 4, || prover.refute_bound(subject, claim, &point)).ok().flatten();
        let Some(refuted) = refuted else { continue };
        *slot = Some(question.stripped(Witness::of(refuted.failure(), None)));
        response.steps.push(refuted.step());
        if response.positive.is_some() && response.negative.is_some() {
            response.tendency = Some(Tendency::Varies);
            break;
        }
    }
    response
}

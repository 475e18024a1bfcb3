//! Claims that are identities or inequalities on the domain.

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::language::Comparison;
use crate::model::Model;
use crate::proof::{Bounded, Equation, Expression, Label, Prover};

use super::super::fact;
use super::super::finding::{ClaimFinding, Verdict, Witness};
use super::difference::difference;

/// How many points are looked at against an inequality.
const MOST_POINTS: usize = 400;
/// The work that one evaluation may take.
const WORK: u64 = 20_000_000;

/// Examines left ~ right.
pub(super) fn examine(
    model: &Model,
    prover: &mut Prover<'_>,
    text: &str,
    left: &Element,
    relation: Comparison,
    right: &Element,
) -> ClaimFinding {
    match relation {
        Comparison::Equal => identity(model, prover, text, left.clone(), right.clone()),
        Comparison::NotEqual => bound(model, prover, text, left - right, Relation::NonZero),
        Comparison::Greater => bound(model, prover, text, left - right, Relation::Positive),
        Comparison::GreaterEqual => bound(model, prover, text, left - right, Relation::NonNegative),
        Comparison::Less => bound(model, prover, text, right - left, Relation::Positive),
        Comparison::LessEqual => bound(model, prover, text, right - left, Relation::NonNegative),
    }
}

fn identity(model: &Model, prover: &mut Prover<'_>, text: &str, left: Element, right: Element) -> ClaimFinding {
    let sides = (left.clone(), right.clone());
    let equation = Equation { label: Label::Whole, left: Expression::element(left), right: Expression::element(right) };
    let finding = fact::identities(model, prover, text, &[equation], &[], &mut model.points());
    if finding.verdict != Verdict::Refuted {
        return finding;
    }
    let difference = difference(&model.field, &sides.1, &sides.0);
    let left = || budget::attempt(WORK, || model.field.reduce(&sides.0)).ok();
    ClaimFinding { correct: difference.as_ref().and_then(|_| left()), difference, ..finding }
}

fn bound(model: &Model, prover: &mut Prover<'_>, text: &str, e: Element, relation: Relation) -> ClaimFinding {
    let expression = Expression::element(e.clone());
    if let Some(proof) = prover.bound(text, expression.clone(), relation, &[]) {
        return ClaimFinding::settled(Verdict::Proven, None, proof.step());
    }
    let claim = Bounded { expression, relation };
    for point in model.points().take(MOST_POINTS) {
        if !may_fail(model, &e, relation, &point) {
            continue;
        }
        if let Some(refuted) = prover.refute_bound(text, claim.clone(), &point) {
            return ClaimFinding::settled(Verdict::Refuted, Some(Witness::of(refuted.failure(), None)), refuted.step());
        }
    }
    ClaimFinding::undecided("no sign follows from the assumptions, and no admissible point was found against it")
}

/// Whether a quick evaluation leaves room for the bound to fail at the point.
fn may_fail(model: &Model, e: &Element, relation: Relation, point: &Point) -> bool {
    use std::cmp::Ordering::{Equal, Greater, Less};
    let enclosed = budget::attempt(WORK, || model.field.enclose(e, point, 64));
    let Ok(Some(interval)) = enclosed else { return false };
    let holds = matches!(
        (relation, interval.sign()),
        (Relation::Positive | Relation::NonNegative, Some(Greater))
            | (Relation::NonZero, Some(Greater | Less))
            | (Relation::NonNegative, Some(Equal))
    );
    !holds
}

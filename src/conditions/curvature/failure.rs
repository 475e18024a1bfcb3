//! After a failure: does the matrix fail for all parameter values, for some of them, or in a part of the domain?

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::proof::{Combination, Expression, Factor, Proved, Prover, SemidefiniteAt, StepId};

use super::super::finding::{Branch, Condition, Finding, Verdict};
use super::super::slutsky::Coordinates;
use super::search::{self, Failing};
use super::{Question, RUNG_WORK, SUBJECT, certificates, region, split};

/// The finding for a matrix that fails at a point.
pub(super) fn tell_apart(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    failing: Failing,
    regular: Option<Proved<SemidefiniteAt>>,
) -> Finding {
    let mut finding = Finding::new(Condition::Curvature, Verdict::Refuted, "a direction v with v'Sv > 0 at a point");
    finding.steps.push(failing.refuted.step());
    finding.witness = Some(failing.witness);
    if let Some(proof) = &regular {
        finding.steps.push(proof.step());
    } else if let Some(step) = budget::attempt(RUNG_WORK, || fails_everywhere(question, prover)).ok().flatten() {
        finding.never = Some(true);
        finding.steps.push(step);
        return finding;
    }
    let described = region::describe(question, prover);
    if let Some(region) = described.iter().find(|region| region.of_parameters(question))
        && let Some(point) = with_conditions(question, &region.inequalities)
        && (region.complete || regular.is_none())
        && let Some(under) = proven_under(question, prover, &region.inequalities)
    {
        finding.steps.extend(under.steps);
        let inequalities = region.inequalities.clone();
        finding.verdict = Verdict::Conditional;
        finding.never = Some(false);
        finding.region = Some(inequalities.clone());
        finding.regular_point = Some(point);
        finding.restrictions = Some(vec![Branch { equations: Vec::new(), side_conditions: Vec::new(), inequalities }]);
        finding.restrictions_complete = region.complete;
        return finding;
    }
    if let Some(proof) = regular {
        finding.verdict = Verdict::Regional;
        finding.regular_point = Some(proof.claim().point.clone());
        let length = |region: &region::Region| region.inequalities.iter().map(Poly::len).sum::<usize>();
        let exact = described.into_iter().filter(|region| region.exact);
        finding.region = exact.min_by_key(length).map(|region| region.inequalities);
    }
    finding
}

/// A step that shows the matrix to fail at every point: a positive entry on the diagonal, or a negative characteristic
/// coefficient.
fn fails_everywhere(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<StepId> {
    let n = question.system.size();
    for i in 0..n {
        let entry = question.matrix.entry(i, i);
        let shown = prover.bound(SUBJECT, entry.clone(), Relation::Positive, &[]);
        if let Some(proof) = shown.or_else(|| by_square(question, prover, i, entry)) {
            return Some(proof.step());
        }
    }
    let negative = region::coefficients(question, prover).into_iter().flatten().find_map(|c| {
        let minus = Expression::element(c.neg());
        prover.bound(SUBJECT, minus, Relation::Positive, &[])
    });
    negative.map(|proof| proof.step())
}

/// In shares, Kᵢᵢ = (wᵢ − 1/2)² + Tᵢᵢ − 1/4.
fn by_square(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    i: usize,
    entry: Expression,
) -> Option<Proved<crate::proof::Bounded>> {
    if question.system.coordinates != Coordinates::Shares {
        return None;
    }
    let share = prover.value(&Expression::from(Factor::Function(question.system.collected[i])));
    let root = &share - &Poly::constant(&rational(1, 2));
    let certificate = Combination { facts: Vec::new(), squares: vec![(rational(1, 1), root)] };
    prover.bound_by(SUBJECT, entry, Relation::Positive, certificate, &[])
}

/// A proof that the matrix is negative semidefinite wherever the conditions hold.
fn proven_under(question: &Question<'_>, prover: &mut Prover<'_>, conditions: &[Element]) -> Option<Finding> {
    let supposed: Vec<(Expression, Relation)> =
        conditions.iter().map(|e| (Expression::element(e.clone()), Relation::NonNegative)).collect();
    let quantities: Vec<Element> = question.quantities.iter().chain(conditions).cloned().collect();
    prover.supposing(&supposed, |prover| {
        let symmetric = split::symmetric(question.model, &question.entries, &quantities);
        let there = Question {
            model: question.model,
            system: question.system,
            matrix: question.matrix.clone(),
            entries: question.entries.clone(),
            symmetric,
            balance: question.balance.clone(),
            quantities,
            shares: question.shares.clone(),
        };
        certificates::prove(&there, prover)
    })
}

/// An admissible point at which the conditions hold.
fn with_conditions(question: &Question<'_>, conditions: &[Element]) -> Option<crate::algebra::evaluation::Point> {
    let mut positive = question.quantities.clone();
    positive.extend_from_slice(conditions);
    search::points(question.model, &positive).next()
}

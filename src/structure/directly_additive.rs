//! Direct additivity, U = Σ fᵢ(xᵢ) up to a monotone transformation (Houthakker 1960; Goldman and Uzawa 1964):
//! Sᵢⱼ = φ(p, m) ∂xᵢ/∂m ∂xⱼ/∂m for all i ≠ j, with one φ that is not zero. For two goods the condition is empty and says
//! nothing.

use crate::conditions::separability::product;
use crate::conditions::{ClaimFinding, Verdict};
use crate::proof::{Equation, Expression, Factor, Label, Prover};

use super::question::Question;

const SUBJECT: &str = "direct additivity";

/// Settles direct additivity for three goods or more.
pub(super) fn settle(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<ClaimFinding> {
    let n = question.size();
    if n < 3 {
        return None;
    }
    let still: Vec<usize> = (0..n).filter(|good| question.vanishes(prover, question.marginal[*good])).collect();
    if still.len() + 1 == n {
        return settle_quasi_linear(question, prover, &still);
    }
    let base = question.pivot(prover, &question.marginal)?;
    let slope = |good: usize| marginal(question, good);
    let entry = |i: usize, j: usize| question.system.scaled_entry(i, j);
    let others: Vec<usize> = (0..n).filter(|good| *good != base).collect();
    let mut equations = Vec::new();
    for i in &others {
        for j in others.iter().filter(|j| *j != i) {
            let (left, right) = (product(&entry(*i, *j), &slope(base)), product(&entry(base, *j), &slope(*i)));
            equations.push(Equation { label: Label::Pair(*i, *j), left, right });
        }
    }
    // most systems fail at once
    if let Some(first) = equations.first() {
        let finding = question.settle(prover, SUBJECT, std::slice::from_ref(first));
        if finding.verdict != Verdict::Proven {
            return Some(finding);
        }
    }
    let mut finding = question.settle(prover, SUBJECT, &equations);
    if finding.verdict == Verdict::Proven {
        // φ is not zero, and no demand stands still: else the condition would be met by less
        let substitution = entry(base, others[0]);
        let all = std::iter::once(substitution).chain((0..n).map(slope));
        for expression in all {
            match question.not_zero(prover, SUBJECT, &expression) {
                Some(step) => finding.steps.push(step),
                None => return Some(ClaimFinding::undecided("the condition is met by slopes that vanish")),
            }
        }
    }
    Some(finding)
}

/// pᵢ ∂xᵢ/∂m.
fn marginal(question: &Question<'_>, good: usize) -> Expression {
    Factor::Function(question.marginal[good]).into()
}

/// Where all goods but one have no income effect: additive exactly when these are not compensated for each other.
fn settle_quasi_linear(question: &Question<'_>, prover: &mut Prover<'_>, still: &[usize]) -> Option<ClaimFinding> {
    let mut equations = Vec::new();
    for i in still {
        for j in still.iter().filter(|j| *j != i) {
            let left = question.system.scaled_entry(*i, *j);
            equations.push(Equation { label: Label::Pair(*i, *j), left, right: Expression::zero() });
        }
    }
    let mut finding = question.settle(prover, SUBJECT, &equations);
    if finding.verdict == Verdict::Proven {
        for good in still {
            match question.not_zero(prover, SUBJECT, &question.system.scaled_entry(*good, *good)) {
                Some(step) => finding.steps.push(step),
                None => return Some(ClaimFinding::undecided("the condition is met by slopes that vanish")),
            }
        }
    }
    Some(finding)
}

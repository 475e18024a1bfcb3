//! Quasi-linear preferences, U = x_q + f(the others) up to a monotone transformation: income changes the demand for one
//! good alone, ∂xᵢ/∂m = 0 for i ≠ q.

use crate::conditions::{ClaimFinding, Verdict};
use crate::proof::{Equation, Expression, Factor, Label, Prover};

use super::question::Question;

/// Settles whether preferences are quasi-linear, and in which good.
pub(super) fn settle(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<(ClaimFinding, Option<usize>)> {
    if question.size() < 2 {
        return None;
    }
    let subject = "quasi-linear preferences";
    // two that move settle it
    let moves = |good: &usize| !question.vanishes(prover, question.marginal[*good]);
    let moving: Vec<usize> = (0..question.size()).filter(moves).take(2).collect();
    let left = |good: usize| Expression::from(Factor::Function(question.marginal[good]));
    let equation = |good: usize| Equation { label: Label::Good(good), left: left(good), right: Expression::zero() };
    if let [numeraire] = moving[..] {
        let others = (0..question.size()).filter(|good| *good != numeraire);
        let finding = question.settle(prover, subject, &others.map(equation).collect::<Vec<_>>());
        let good = (finding.verdict == Verdict::Proven).then_some(numeraire);
        return Some((finding, good));
    }
    // at one point two demands move: neither good is the one, nor is any other
    let [first, second, ..] = moving[..] else { return None };
    let both = Expression::zero()
        .plus(1, vec![Factor::Function(question.marginal[first]), Factor::Function(question.marginal[second])]);
    let whole = Equation { label: Label::Pair(first, second), left: both, right: Expression::zero() };
    Some((question.settle(prover, subject, &[whole]), None))
}

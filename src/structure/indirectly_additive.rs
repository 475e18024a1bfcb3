//! Indirect additivity, v = Σ gᵢ(pᵢ/m) up to a monotone transformation (Houthakker 1960): xᵢ/xⱼ does not depend on any
//! other price, that is, pₖ ∂ln xᵢ/∂pₖ is the same for all goods i ≠ k. For two goods the condition is empty and says
//! nothing.

use crate::conditions::{ClaimFinding, Verdict};
use crate::proof::{Equation, Expression, Factor, Label, Prover};

use super::question::Question;

const SUBJECT: &str = "indirect additivity";

/// Settles indirect additivity for three goods or more.
pub(super) fn settle(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<ClaimFinding> {
    let n = question.size();
    if n < 3 {
        return None;
    }
    let f = &question.system.collected;
    let mut equations = Vec::new();
    for k in 0..n {
        let base = usize::from(k == 0);
        for i in (0..n).filter(|i| *i != k && *i != base) {
            let slope = |good: usize| Factor::LogSlope(f[good], question.system.prices[k]);
            let side = |a: usize, b: usize| Expression::zero().plus(1, vec![Factor::Function(f[a]), slope(b)]);
            equations.push(Equation { label: Label::Pair(i, k), left: side(base, i), right: side(i, base) });
        }
    }
    // most systems fail at once
    if let Some(first) = equations.first() {
        let finding = question.settle(prover, SUBJECT, std::slice::from_ref(first));
        if finding.verdict != Verdict::Proven {
            return Some(finding);
        }
    }
    Some(question.settle(prover, SUBJECT, &equations))
}

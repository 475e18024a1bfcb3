//! Gorman's polar form (1953, 1961): ∂²xᵢ/∂m² = 0, so that e(p, u) = a(p) + u b(p). Then, and only then, demands add up
//! over consumers with different incomes and the same slopes in them.

use crate::conditions::ClaimFinding;
use crate::proof::{Equation, Expression, Factor, FunctionId, Label, Prover};

use super::question::Question;

/// Settles whether demands are affine in income.
pub(super) fn settle(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<ClaimFinding> {
    let equation = |(good, g): (usize, &FunctionId)| Equation {
        label: Label::Good(good),
        left: Factor::LogSlope(*g, question.income).into(),
        right: Expression::zero(),
    };
    let equations: Vec<Equation> = question.marginal.iter().enumerate().map(equation).collect();
    Some(question.settle(prover, "Gorman polar form", &equations))
}

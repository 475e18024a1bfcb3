//! Homothetic preferences: m ∂wᵢ/∂m = 0, so that v(p, m) = f(m/P(p)).

use crate::conditions::ClaimFinding;
use crate::proof::{Equation, Expression, Factor, Label, Prover};

use super::question::Question;

/// Settles whether preferences are homothetic.
pub(super) fn settle(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<ClaimFinding> {
    let equation = |(good, w): (usize, &crate::proof::FunctionId)| Equation {
        label: Label::Good(good),
        left: Factor::LogSlope(*w, question.income).into(),
        right: Expression::zero(),
    };
    let equations: Vec<Equation> = question.shares.iter().enumerate().map(equation).collect();
    Some(question.settle(prover, "homothetic preferences", &equations))
}

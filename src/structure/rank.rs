//! The rank of a demand system (Lewbel 1991): the most functions of income, at fixed prices, that its Engel curves span.
//!
//! With θ = m ∂/∂m, and shares that sum to one, the rank is one more than that of the rows (θwᵢ, θ²wᵢ, …): at most two
//! where all 2×2 minors of them vanish, at most three where all 3×3 minors do, and at least as much where one does not
//! vanish at a point.

use crate::conditions::Verdict;
use crate::proof::{Equation, Expression, Factor, FunctionId, Label, Prover, StepId};

use super::pigl::wronskians;
use super::question::{Question, brief};

/// The rank.
#[derive(Clone, Debug)]
pub struct Rank {
    /// What it is, or the least that it is.
    pub value: usize,
    /// Whether it is known not to be more.
    pub exact: bool,
    /// The steps that show it.
    pub steps: Vec<StepId>,
}

/// Finds the rank.
pub(super) fn examine(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Rank> {
    let n = question.size();
    let Some(pivot) = question.pivot(prover, &question.engel) else {
        return Some(Rank { value: 1, exact: true, steps: question.links.clone() });
    };
    let steps = vec![question.not_zero(prover, "rank", &Factor::Function(question.engel[pivot]).into())?];
    if n == 2 {
        return Some(Rank { value: 2, exact: true, steps });
    }
    let (bends, equations) = wronskians(question, prover, pivot);
    let finding = question.settle(prover, "rank", &equations);
    let (other, steps) = match (finding.verdict, &finding.witness) {
        (Verdict::Proven, _) => return Some(Rank { value: 2, exact: true, steps: [steps, finding.steps].concat() }),
        (Verdict::Refuted, Some(witness)) => match witness.place {
            Label::Good(other) => (other, finding.steps),
            _ => return None,
        },
        _ => return None,
    };
    if n == 3 {
        return Some(Rank { value: 3, exact: true, steps });
    }
    let equations = third(question, prover, &bends, pivot, other);
    let finding = question.settle(prover, "rank", &equations);
    let steps = match finding.verdict {
        Verdict::Refuted => finding.steps,
        _ => [steps, finding.steps.clone()].concat(),
    };
    Some(match finding.verdict {
        Verdict::Proven => Rank { value: 3, exact: true, steps },
        Verdict::Refuted => Rank { value: 4, exact: n == 4, steps },
        _ => Rank { value: 3, exact: false, steps },
    })
}

/// The 3×3 minors with two pivots, each zero.
fn third(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    bends: &[FunctionId],
    pivot: usize,
    other: usize,
) -> Vec<Equation> {
    let mut thirds = Vec::new();
    for (bend, good) in bends.iter().zip(&question.model.goods) {
        let third = brief(prover, &Factor::LogSlope(*bend, question.income).into());
        thirds.push(prover.define(&format!("third Engel slope {}", good.name), &third));
    }
    let rows = [&question.engel, bends, &thirds];
    let minor = |good: usize| {
        let columns = [pivot, other, good];
        let term = |[a, b, c]: [usize; 3]| {
            let places = [(0, columns[a]), (1, columns[b]), (2, columns[c])];
            places.into_iter().map(|(row, column)| Factor::Function(rows[row][column])).collect::<Vec<_>>()
        };
        let even = [[0, 1, 2], [1, 2, 0], [2, 0, 1]].into_iter().fold(Expression::zero(), |s, p| s.plus(1, term(p)));
        let whole = [[0, 2, 1], [2, 1, 0], [1, 0, 2]].into_iter().fold(even, |s, p| s.plus(-1, term(p)));
        Equation { label: Label::Good(good), left: whole, right: Expression::zero() }
    };
    (0..question.size()).filter(|good| *good != pivot && *good != other).map(minor).collect()
}

//! Price-independent generalised linearity (Muellbauer 1975): wᵢ = Aᵢ(p) + Bᵢ(p) m^(−α) with one number α, so that with
//! θ = m ∂/∂m, θ²wᵢ = −α θwᵢ; the limit α = 0 is PIGLOG, wᵢ = Aᵢ(p) + Bᵢ(p) ln m.

use crate::algebra::generator::Element;
use crate::conditions::{ClaimFinding, Verdict};
use crate::proof::{Equation, Expression, Factor, FunctionId, Label, Prover};

use super::question::{Question, brief, cross};

/// Settles whether θ²wᵢ = 0.
pub(super) fn settle_logarithmic(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<ClaimFinding> {
    let equation = |(good, d): (usize, &FunctionId)| Equation {
        label: Label::Good(good),
        left: Factor::LogSlope(*d, question.income).into(),
        right: Expression::zero(),
    };
    let equations: Vec<Equation> = question.engel.iter().enumerate().map(equation).collect();
    Some(question.settle(prover, "PIGLOG", &equations))
}

/// Settles whether there is an α, and which; for homothetic preferences any would do, and none is named.
pub(super) fn settle(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<(ClaimFinding, Option<Element>)> {
    let field = question.field();
    let Some(pivot) = question.pivot(prover, &question.engel) else {
        return settle_logarithmic(question, prover).map(|finding| (finding, None));
    };
    let standard = question.engel[pivot];
    let bend = Expression::from(Factor::LogSlope(standard, question.income));
    let bend = brief(prover, &bend);
    let slope = prover.value(&Factor::Function(standard).into());
    let ratio = field.reduce(&field.quotient(&bend, &slope).ok()?);
    let movers: Vec<_> = field.moving_symbols();
    if movers.iter().all(|x| !field.depends_on(&ratio, *x)) {
        let equation = |(good, d): (usize, &FunctionId)| Equation {
            label: Label::Good(good),
            left: Factor::LogSlope(*d, question.income).into(),
            right: Expression::zero().plus(1, vec![Factor::Element(ratio.clone()), Factor::Function(*d)]),
        };
        let equations: Vec<Equation> = question.engel.iter().enumerate().map(equation).collect();
        let finding = question.settle(prover, "PIGL", &equations);
        // an α that fails refutes this α alone
        return match finding.verdict {
            Verdict::Proven => Some((finding, Some(ratio.neg()))),
            _ => Some((not_proportional(question, prover, pivot), None)),
        };
    }
    // θ²w/θw would have to be the same everywhere
    let bent = prover.define("Engel bend", &bend);
    let equations = movers.iter().enumerate().map(|(place, x)| Equation {
        label: Label::Pair(pivot, place),
        left: Expression::zero().plus(1, vec![Factor::LogSlope(bent, *x), Factor::Function(standard)]),
        right: Expression::zero().plus(1, vec![Factor::Function(bent), Factor::LogSlope(standard, *x)]),
    });
    let mut finding = question.settle(prover, "PIGL", &equations.collect::<Vec<_>>());
    if finding.verdict == Verdict::Proven {
        finding = ClaimFinding::undecided("the exponent was not brought to a form that shows it to be one number");
    }
    Some((finding, None))
}

/// Refutes that θ²wᵢ/θwᵢ is the same for all goods.
fn not_proportional(question: &Question<'_>, prover: &mut Prover<'_>, pivot: usize) -> ClaimFinding {
    let (_, equations) = wronskians(question, prover, pivot);
    let finding = question.settle(prover, "PIGL", &equations);
    match finding.verdict {
        Verdict::Proven => ClaimFinding::undecided("no exponent was found that is the same for all goods"),
        _ => finding,
    }
}

/// θ²wᵢ as functions, and θ²wᵢ θwₖ = θ²wₖ θwᵢ for the pivot k and every other good i.
pub(super) fn wronskians(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    pivot: usize,
) -> (Vec<FunctionId>, Vec<Equation>) {
    let mut bends = Vec::new();
    for (d, good) in question.engel.iter().zip(&question.model.goods) {
        let bend = brief(prover, &Factor::LogSlope(*d, question.income).into());
        bends.push(prover.define(&format!("Engel bend {}", good.name), &bend));
    }
    let others = (0..question.size()).filter(|good| *good != pivot);
    let equations = others
        .map(|good| cross(Label::Good(good), [bends[good], question.engel[pivot], bends[pivot], question.engel[good]]))
        .collect();
    (bends, equations)
}

//! How each good responds to income and to its own price: normal or inferior, luxury or necessity, Giffen or not.

use crate::proof::{Expression, Factor, Prover};

use super::question::Question;
use super::sign::{self, Response};

/// The most goods that are looked at.
const MOST_GOODS: usize = 24;

/// The responses of one good.
#[derive(Clone, Debug, Default)]
pub struct Responses {
    /// ∂x/∂m: positive for a normal good, negative for an inferior one.
    pub income: Response,
    /// m ∂w/∂m: positive for a luxury, negative for a necessity.
    pub share: Response,
    /// ∂x/∂p at its own price: positive for a Giffen good.
    pub own_price: Response,
}

/// Finds the responses of every good; empty for very many goods.
pub(super) fn examine(question: &Question<'_>, prover: &mut Prover<'_>) -> Vec<Responses> {
    if question.size() > MOST_GOODS {
        return Vec::new();
    }
    let each = |good: usize| Responses {
        income: sign::of(question, prover, "income response", &Factor::Function(question.marginal[good]).into()),
        share: sign::of(question, prover, "share response", &Factor::Function(question.engel[good]).into()),
        own_price: sign::of(question, prover, "own-price response", &price_response(question, good, good)),
    };
    (0..question.size()).map(each).collect()
}

/// pᵢ pⱼ ∂xᵢ/∂pⱼ (over m in shares).
pub(super) fn price_response(question: &Question<'_>, i: usize, j: usize) -> Expression {
    let (f, price) = (question.system.collected[i], question.system.prices[j]);
    let slope = Expression::from(Factor::LogSlope(f, price));
    if i == j { slope.plus(-1, vec![Factor::Function(f)]) } else { slope }
}

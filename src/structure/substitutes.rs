//! Gross and net substitutes and complements: the signs of ∂xᵢ/∂pⱼ and of Sᵢⱼ.

use crate::proof::Prover;

use super::question::Question;
use super::responses::price_response;
use super::sign::{self, Response};

/// The most goods whose pairs are looked at.
const MOST_GOODS: usize = 8;

/// The responses of goods to each other's prices.
#[derive(Clone, Debug, Default)]
pub struct Pairs {
    /// ∂xᵢ/∂pⱼ for i ≠ j, with i and j.
    pub gross: Vec<(usize, usize, Response)>,
    /// Sᵢⱼ for i < j.
    pub net: Vec<(usize, usize, Response)>,
}

/// Finds the responses of every pair; empty for many goods. Net responses are looked at where the matrix is symmetric.
pub(super) fn examine(question: &Question<'_>, prover: &mut Prover<'_>) -> Pairs {
    let n = question.size();
    let mut pairs = Pairs::default();
    if n > MOST_GOODS {
        return pairs;
    }
    for i in 0..n {
        for j in (0..n).filter(|j| *j != i) {
            let gross = sign::of(question, prover, "gross response", &price_response(question, i, j));
            pairs.gross.push((i, j, gross));
            if i < j && question.symmetric {
                let net = sign::of(question, prover, "net response", &question.system.scaled_entry(i, j));
                pairs.net.push((i, j, net));
            }
        }
    }
    pairs
}

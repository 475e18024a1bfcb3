//! The rule of decompositions: a matrix written as matrices known to be negative semidefinite, less squares.

use std::rc::Rc;

use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;

use super::claim::{Matrix, Semidefinite};
use super::derivation::{Proved, Rule, Statement, StepId};
use super::prover::{Prover, holds};

/// sym M = Σ μₖ sym Mₖ − Σ λₗ uₗ uₗᵀ with μₖ, λₗ ≥ 0 and every Mₖ negative semidefinite.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Decomposition {
    /// The μₖ; the Mₖ are those of the premises, in the same order.
    pub multipliers: Vec<Element>,
    /// λₗ, uₗ.
    pub squares: Vec<(Element, Vec<Element>)>,
}

impl Prover<'_> {
    /// Establishes negative semidefiniteness by a decomposition, which is checked: the identity by its normal form, the
    /// signs by the facts. `None` if it does not hold.
    pub fn decomposed(
        &mut self,
        subject: &str,
        matrix: &Rc<Matrix>,
        parts: &[Proved<Semidefinite>],
        decomposition: Decomposition,
    ) -> Option<Proved<Semidefinite>> {
        let n = matrix.size;
        let fits = decomposition.multipliers.len() == parts.len()
            && decomposition.squares.iter().all(|(_, u)| u.len() == n)
            && parts.iter().all(|part| part.claim.matrix.size == n && self.in_force(part.step));
        let weights = decomposition.multipliers.iter().chain(decomposition.squares.iter().map(|(scale, _)| scale));
        if !fits || !weights.into_iter().all(|w| holds(self.field, w, Relation::NonNegative) || self.field.is_zero(w)) {
            return None;
        }
        let whole = self.entries(matrix);
        let entries: Vec<Vec<Element>> = parts.iter().map(|part| self.entries(&part.claim.matrix)).collect();
        for i in 0..n {
            for j in 0..=i {
                let left = self.twice_symmetric(&whole, n, i, j);
                let mut terms = vec![left];
                for (multiplier, part) in decomposition.multipliers.iter().zip(&entries) {
                    terms.push(self.field.product(multiplier, &self.twice_symmetric(part, n, i, j)).neg());
                }
                for (scale, u) in decomposition.squares.iter().filter(|(_, u)| !u[i].is_zero() && !u[j].is_zero()) {
                    let product = self.field.product(scale, &self.field.product(&u[i], &u[j]));
                    terms.push(product.scale(&rational(2, 1)));
                }
                let terms = terms.iter().map(|term| self.field.current(term)).collect();
                if !self.field.is_zero(&Poly::sum(terms)) {
                    return None;
                }
            }
        }
        let premises: Vec<StepId> = parts.iter().map(|part| part.step).collect();
        Some(self.semidefinite(subject, matrix.clone(), Rule::Decomposition(decomposition), &premises))
    }

    fn twice_symmetric(&self, entries: &[Element], n: usize, i: usize, j: usize) -> Element {
        &self.field.current(&entries[i * n + j]) + &self.field.current(&entries[j * n + i])
    }
}

/// The negative semidefinite matrices that steps have established; the error says which premise is none.
pub(super) fn semidefinite_premises(
    prover: &Prover<'_>,
    premises: &[StepId],
) -> Result<Vec<Proved<Semidefinite>>, String> {
    let claim = |step: &StepId| match prover.derivation.step(*step).map(|s| &s.statement) {
        Some(Statement::Semidefinite(claim)) => Ok(Proved { claim: claim.clone(), step: *step }),
        _ => Err("a premise is not about a negative semidefinite matrix".to_string()),
    };
    premises.iter().map(claim).collect()
}

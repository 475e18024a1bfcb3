//! The author's claims: identities and inequalities, and formulas for the functions of the theory.
//!
//! A formula for a function of the theory is held against preferences in a *chart*: coordinates in which prices, income,
//! the utility level and quantities are all known as functions ([`chart`]). There the claim becomes an identity, to be
//! proven by its normal form or refuted at a point ([`judgement`]).

pub mod chart;
pub mod difference;
pub mod judgement;
mod relation;

use crate::model::{Claim, Model, Statement};
use crate::proof::Prover;

use super::finding::ClaimFinding;
use chart::Charts;

/// Examines a claim. The steps are added to the prover's derivation, with the claim's text for their subject.
pub fn examine_claim(model: &Model, claim: &Claim, charts: &Charts, prover: &mut Prover<'_>) -> ClaimFinding {
    match &claim.statement {
        Statement::Relation { left, relation, right } => {
            relation::examine(model, prover, &claim.text, left, *relation, right)
        }
        Statement::Function { function, value } => {
            judgement::judge(model, prover, &claim.text, *function, value, charts)
        }
        // the floor of restrictions judges these
        Statement::Under { .. } => ClaimFinding::undecided("the parameter restrictions were not looked for"),
        Statement::Separable(goods) => super::separability::examine(model, prover, &claim.text, goods),
    }
}

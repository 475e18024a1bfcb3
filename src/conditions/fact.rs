//! A statement that is a family of identities and nothing more: it holds, it fails at a point, or nothing was shown.

use crate::algebra::evaluation::Point;
use crate::model::Model;
use crate::proof::{Equation, Prover, Residual, StepId};

use super::finding::{ClaimFinding, Verdict, Witness};
use super::witness;

/// Whether all equations hold on the whole domain: proven by normal forms, or refuted at one of the points. No two
/// equations may have the same label.
pub fn identities(
    model: &Model,
    prover: &mut Prover<'_>,
    subject: &str,
    equations: &[Equation],
    premises: &[StepId],
    points: &mut dyn Iterator<Item = Point>,
) -> ClaimFinding {
    let residuals = match prover.identities(subject, equations.to_vec(), premises) {
        Ok(proof) => return ClaimFinding::settled(Verdict::Proven, None, proof.step()),
        Err(residuals) => residuals,
    };
    let shown = |residual: &Residual| equations.iter().find(|equation| equation.label == residual.label).cloned();
    match witness::among(points, model, prover, subject, &residuals, &shown) {
        Some(refuted) => {
            ClaimFinding::settled(Verdict::Refuted, Some(Witness::of(refuted.failure(), None)), refuted.step())
        }
        None => ClaimFinding::undecided(
            "the normal form of the difference is not zero, and no admissible point was found that shows it",
        ),
    }
}

//! The rungs that prove: a matrix of zeros, the Laplacian form, the characteristic coefficients.

use crate::algebra::budget;
use crate::proof::{Proved, Prover, Semidefinite};

use super::super::finding::{Condition, Finding, Verdict};
use super::{Question, RUNG_WORK, SUBJECT};

/// A rung: it establishes that the matrix is negative semidefinite, or gives up.
type Rung<'r> = &'r dyn Fn(&mut Prover<'_>) -> Option<Proved<Semidefinite>>;

/// Tries the rungs in turn.
pub(super) fn prove(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Finding> {
    let rungs: [(&str, Rung<'_>); 3] = [
        ("the matrix is zero", &|prover| prover.zero_matrix(SUBJECT, &question.matrix)),
        ("Laplacian form", &|prover| prover.laplacian(SUBJECT, question.balance.as_ref()?)),
        ("characteristic coefficients", &|prover| by_coefficients(question, prover)),
    ];
    rungs.iter().find_map(|(method, rung)| {
        let proof = budget::attempt(RUNG_WORK, || rung(prover)).ok().flatten()?;
        let mut finding = Finding::new(Condition::Curvature, Verdict::Proven, method);
        finding.steps = question.balance.iter().map(|b| b.step()).collect();
        finding.steps.push(proof.step());
        Some(finding)
    })
}

/// Leaves out each good in turn where one may be left out.
fn by_coefficients(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Proved<Semidefinite>> {
    match &question.balance {
        None => prover.characteristic(SUBJECT, &question.matrix, None),
        Some(balance) => (0..question.system.size())
            .rev()
            .find_map(|without| prover.characteristic(SUBJECT, &question.matrix, Some((balance, without)))),
    }
}

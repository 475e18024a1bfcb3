//! The rungs that prove: a matrix of zeros, the Laplacian form, the characteristic coefficients.

use num_traits::Signed;

use crate::algebra::budget;
use crate::proof::{Proved, Prover, Semidefinite};

use super::super::finding::{Condition, Finding, Verdict};
use super::{Question, RUNG_WORK, SUBJECT, split};

/// A rung: it establishes that the matrix is negative semidefinite, or gives up.
type Rung<'r> = &'r dyn Fn(&mut Prover<'_>) -> Option<Proved<Semidefinite>>;

/// Tries the rungs in turn.
pub(super) fn prove(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Finding> {
    let rungs: [(&str, Rung<'_>); 6] = [
        ("the matrix is zero", &|prover| prover.zero_matrix(SUBJECT, &question.matrix)),
        ("Laplacian form", &|prover| laplacian(question, prover)),
        ("spread of the shares", &|prover| split::by_spread(question, prover)),
        ("sum of squares", &|prover| split::by_squares(question, prover)),
        ("characteristic coefficients", &|prover| by_coefficients(question, prover)),
        ("by what income exceeds", &|prover| split::by_excess(question, prover)),
    ];
    rungs.iter().find_map(|(method, rung)| {
        let proof = budget::attempt(RUNG_WORK, || rung(prover)).ok().flatten()?;
        let mut finding = Finding::new(Condition::Curvature, Verdict::Proven, method);
        finding.steps = question.balance.iter().map(|b| b.step()).collect();
        finding.steps.push(proof.step());
        Some(finding)
    })
}

/// Not tried where an entry off the diagonal is negative at the point that was looked at.
fn laplacian(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<Proved<Semidefinite>> {
    let m = &question.symmetric;
    let falls = (0..m.n).any(|i| (0..i).any(|j| m.value(i, j).is_negative()));
    if falls { None } else { prover.laplacian(SUBJECT, question.balance.as_ref()?) }
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

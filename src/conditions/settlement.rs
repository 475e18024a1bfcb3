//! From a family of identities to a finding: proven by normal forms, or refuted at a point.

use crate::algebra::budget;
use crate::model::Model;
use crate::proof::{Equation, Identities, Prover, Refuted, Residual};

use super::finding::{Condition, Finding, Verdict, Witness};
use super::slutsky::System;
use super::witness;

/// The identities of a condition.
pub(super) struct Family {
    /// The condition.
    pub condition: Condition,
    /// The identities of a system.
    pub equations: fn(&System) -> Vec<Equation>,
    /// The same identity with the difference of its sides as a reader expects it.
    pub in_quantities: fn(&System, &Equation) -> Equation,
}

/// The work that one sign may take.
const SIGN_WORK: u64 = 4_000_000;

/// Settles a condition that is a family of identities.
pub(super) fn settle(model: &Model, system: &System, prover: &mut Prover<'_>, family: &Family) -> Finding {
    let subject = family.condition.name();
    let equations = (family.equations)(system);
    let residuals = match prover.identities(subject, equations.clone(), &[]) {
        Ok(proof) => {
            let mut finding = Finding::new(family.condition, Verdict::Proven, "normal form");
            finding.steps.push(proof.step());
            return finding;
        }
        Err(residuals) => residuals,
    };
    let mut finding = match against(model, system, prover, family, &equations, &residuals) {
        Some(refuted) => {
            let mut finding = Finding::new(family.condition, Verdict::Refuted, "evaluation at a point");
            finding.witness = Some(Witness::of(refuted.failure(), None));
            finding.steps.push(refuted.step());
            finding.never = hopeless(model, &residuals).then_some(true);
            finding
        }
        None => {
            let reason = format!(
                "the normal form is not zero for {}, and no admissible point was found that shows a difference",
                witness::places(model, &residuals)
            );
            Finding::undecided(family.condition, &reason)
        }
    };
    finding.residuals = residuals;
    finding
}

/// The differences of the sides whose normal form is not zero.
pub(super) fn differences(system: &System, prover: &mut Prover<'_>, family: &Family) -> Vec<Residual> {
    let equations = (family.equations)(system);
    prover.identities(family.condition.name(), equations, &[]).err().unwrap_or_default()
}

/// An admissible point at which one of the differences does not vanish.
pub(super) fn failure(
    model: &Model,
    system: &System,
    prover: &mut Prover<'_>,
    family: &Family,
    residuals: &[Residual],
) -> Option<Witness> {
    let equations = (family.equations)(system);
    let refuted = against(model, system, prover, family, &equations, residuals)?;
    Some(Witness::of(refuted.failure(), None))
}

fn against(
    model: &Model,
    system: &System,
    prover: &mut Prover<'_>,
    family: &Family,
    equations: &[Equation],
    residuals: &[Residual],
) -> Option<Refuted<Identities>> {
    let shown = |residual: &Residual| {
        let equation = equations.iter().find(|e| e.label == residual.label);
        equation.map(|e| (family.in_quantities)(system, e))
    };
    witness::against(model, prover, family.condition.name(), residuals, &shown)
}

/// Looks for a reason why no parameter values rescue the condition.
fn hopeless(model: &Model, residuals: &[Residual]) -> bool {
    let excludes =
        |r: &Residual| budget::attempt(SIGN_WORK, || model.field.sign(&r.element).excludes_zero()).unwrap_or(false);
    let free = model.parameters.iter().any(|p| p.eliminated.is_none());
    !free || residuals.iter().take(8).any(excludes)
}

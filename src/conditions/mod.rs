//! The conditions that demands must satisfy to come from preferences: each returns a [`Finding`].
//!
//! Homogeneity, adding-up and symmetry are zero tests of a family of identities ([`settlement`]); for which
//! parameters one holds that fails somewhere, the floor of restrictions finds out. Curvature climbs a ladder of methods
//! ([`curvature`]). A condition proposes; [`crate::proof`] establishes or refuses.

mod adding_up;
pub mod claims;
pub mod coefficients;
mod compact;
mod concavity;
mod curvature;
pub mod fact;
mod finding;
mod homogeneity;
pub mod separability;
mod settlement;
mod slutsky;
pub mod special;
mod symmetry;
mod witness;

use crate::algebra::generator::Element;
use crate::language::Preferences;
use crate::model::{Coverage, Model};
use crate::proof::{Prover, Residual};

pub use claims::chart::{Chart, Charts};
pub use claims::difference::Difference;
pub use claims::examine_claim;
pub use concavity::{by_concavity, maximised};
pub use curvature::slice;
pub use finding::{Branch, ClaimFinding, Condition, Finding, Verdict, Witness};
pub use slutsky::{Compensation, Coordinates, System};

/// Whether a condition is asked of a model: adding-up only of complete systems, homogeneity neither of deflated ones
/// nor of inverse demands, which are normalised.
pub fn applies(condition: Condition, model: &Model) -> bool {
    let inverse = model.demands.is_empty() && !model.inverse.is_empty();
    let hicksian = model.given.as_ref().is_some_and(|given| given.kind == Preferences::Expenditure);
    let marshallian = !model.demands.is_empty() && model.income.is_some();
    match condition {
        _ if !marshallian && !inverse && !hicksian => false,
        Condition::AddingUp => model.coverage == Coverage::Complete,
        Condition::Homogeneity => model.coverage != Coverage::Deflated && !inverse,
        Condition::Symmetry | Condition::Curvature => true,
    }
}

/// Examines one condition. The steps are added to the prover's derivation; `earlier` are the findings so far.
pub fn examine(condition: Condition, model: &Model, prover: &mut Prover<'_>, earlier: &[Finding]) -> Finding {
    let Some(system) = System::of(model, prover) else {
        return Finding::undecided(condition, "the model has no demands");
    };
    if matches!(condition, Condition::Symmetry | Condition::Curvature) {
        system.prepare(prover);
    }
    match condition {
        Condition::Homogeneity => settlement::settle(model, &system, prover, &homogeneity::FAMILY),
        Condition::AddingUp => adding_up::examine(model, &system, prover),
        Condition::Symmetry => settlement::settle(model, &system, prover, &symmetry::FAMILY),
        Condition::Curvature => {
            let utility = model.given.as_ref().filter(|given| given.kind == Preferences::Utility);
            let concave = utility
                .filter(|_| model.demands.is_empty())
                .and_then(|given| by_concavity(model, &given.value, prover));
            concave.unwrap_or_else(|| curvature::examine(model, &system, prover, earlier))
        }
    }
}

/// Examines whether a direct utility is quasi-concave where it rises: whether the Antonelli matrix of its inverse
/// demands is negative semidefinite. `None` where quantities have no names.
fn examine_utility(model: &Model, utility: &Element, prover: &mut Prover<'_>) -> Option<Finding> {
    if let Some(finding) = by_concavity(model, utility, prover) {
        return Some(finding);
    }
    let system = System::of_utility(model, utility, prover)?;
    system.prepare(prover);
    Some(curvature::examine(model, &system, prover, &[]))
}

/// The identities of a condition; `None` for curvature, which is none.
fn family(condition: Condition) -> Option<&'static settlement::Family> {
    match condition {
        Condition::Homogeneity => Some(&homogeneity::FAMILY),
        Condition::AddingUp => Some(&adding_up::FAMILY),
        Condition::Symmetry => Some(&symmetry::FAMILY),
        Condition::Curvature => None,
    }
}

/// What keeps a condition that is a family of identities from holding: the differences whose normal form is not zero.
/// Empty exactly where the condition is proven. `None` for curvature and for models without demands.
pub fn differences(condition: Condition, model: &Model, prover: &mut Prover<'_>) -> Option<Vec<Residual>> {
    let system = System::of(model, prover)?;
    differences_of(condition, &system, prover)
}

/// The same for a system.
pub fn differences_of(condition: Condition, system: &System, prover: &mut Prover<'_>) -> Option<Vec<Residual>> {
    let family = family(condition)?;
    if condition == Condition::Symmetry {
        system.prepare(prover);
    }
    Some(settlement::differences(system, prover, family))
}

/// An admissible point at which one of the differences of a condition does not vanish.
pub fn failure(
    condition: Condition,
    model: &Model,
    prover: &mut Prover<'_>,
    differences: &[Residual],
) -> Option<Witness> {
    let family = family(condition)?;
    let system = System::of(model, prover)?;
    settlement::failure(model, &system, prover, family, differences)
}

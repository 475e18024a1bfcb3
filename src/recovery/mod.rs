//! From demand to preferences: expenditure and indirect utility in closed form.
//!
//! Methods propose, one file each; nothing is believed before Roy's identity, Shephard's lemma and the inverse relation
//! are proven by the zero test ([`check`]).

pub mod ansatz;
pub mod candidates;
pub mod cases;
pub mod check;
pub mod constant;
pub mod direct_utility;
pub mod divisors;
pub mod fractions;
pub mod frame;
pub mod gather;
pub mod given;
pub mod in_sight;
pub mod integrating_factor;
pub mod inverse_factor;
pub mod invert;
pub mod lambert;
pub mod linear;
pub mod linear_solve;
pub mod potential;
pub mod power_log;
pub mod proposal;
pub mod riccati;
pub mod search;
pub mod span;
pub mod special_integrals;
pub mod system;
mod uniform;

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::model::Model;
use crate::proof::{Prover, StepId};

pub use cases::Case;
pub use check::Checks;
pub use proposal::Working;
pub use search::Method;
pub use system::{Coordinate, System};

/// Recovered preferences, proven.
pub struct Preferences {
    /// e(p, u), in prices and the utility symbol; absent where v cannot be solved for income in closed form.
    pub expenditure: Option<Element>,
    /// v(p, m).
    pub indirect_utility: Option<Element>,
    /// ∂e/∂pᵢ, one for each good; empty without e.
    pub hicksian: Vec<Element>,
    /// The Marshallian demands of given preferences, and where they end.
    pub demanded: Option<given::Demanded>,
    /// U(x), where prices could be eliminated.
    pub utility: Option<Element>,
    /// How they were found.
    pub method: Method,
    /// The stations of the working.
    pub working: Working,
    /// Whether v is known to rise in income on the whole domain.
    pub rising: bool,
    /// Which identities were proven.
    pub checked: Checks,
    /// What the closed form divides by, where the assumptions do not exclude that it vanishes.
    pub conditions: Vec<Element>,
    /// The system at the values excluded by the conditions.
    pub cases: Vec<Case>,
    /// The steps that prove the checks.
    pub steps: Vec<StepId>,
}

/// The outcome of a recovery.
pub enum Recovered {
    /// Preferences, proven.
    Found(Box<Preferences>),
    /// No closed form in the classes searched.
    NotFound {
        /// What was tried and where it ended.
        reason: String,
        /// Whether preferences exist all the same, locally: symmetry was taken as given by the caller.
        existence: bool,
    },
}

/// Recovers the preferences behind a model whose Slutsky matrix is symmetric. The steps are added to the prover's
/// derivation, whose field must be the model's.
pub fn recover(model: &Model, prover: &mut Prover<'_>) -> Recovered {
    let mut recovered = recover_plain(model, prover);
    if let Recovered::Found(found) = &mut recovered {
        if let Some((utility, steps)) = direct_utility::find(model, found, prover) {
            found.utility = Some(utility);
            found.steps.extend(steps);
        }
        found.cases = cases::cases(model, &found.conditions);
    }
    recovered
}

/// The same without the special cases.
fn recover_plain(model: &Model, prover: &mut Prover<'_>) -> Recovered {
    let Some(system) = system_of(model) else {
        return Recovered::NotFound { reason: "the model has no demands".to_string(), existence: false };
    };
    match search::search(&system, model.utility, prover) {
        Err(reason) => Recovered::NotFound { reason, existence: true },
        Ok(mut found) => {
            // what the assumptions exclude anyway needs no mention
            found.conditions.retain(|e| !model.field.sign(e).excludes_zero());
            Recovered::Found(found)
        }
    }
}

fn system_of(model: &Model) -> Option<System<'_>> {
    let field: &Field = &model.field;
    let income = model.income?;
    if model.demands.is_empty() {
        return None;
    }
    let demands = model.demands.iter().map(|d| d.quantity.clone()).collect();
    Some(System { field, prices: model.prices.clone(), income, demands })
}

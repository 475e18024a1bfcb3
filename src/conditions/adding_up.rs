//! Adding-up: outlays sum to income.

use crate::algebra::polynomial::Poly;
use crate::model::Model;
use crate::proof::{Equation, Expression, Factor, Label, Prover};

use super::finding::{Condition, Finding, Verdict};
use super::settlement::{Family, settle};
use super::slutsky::{Compensation, Coordinates, System, scaled};

/// Σ wᵢ = 1, or Σ yᵢ = m.
pub(super) const FAMILY: Family = Family { condition: Condition::AddingUp, equations, in_quantities };

fn equations(system: &System) -> Vec<Equation> {
    let left = system.functions.iter().fold(Expression::zero(), |sum, f| sum.plus(1, vec![Factor::Function(*f)]));
    vec![Equation { label: Label::Whole, left, right: system.whole() }]
}

/// The difference of the sides becomes Σ pᵢ xᵢ − m.
fn in_quantities(system: &System, equation: &Equation) -> Equation {
    match (system.coordinates, &system.compensation) {
        (Coordinates::Shares, Compensation::Income(income)) => {
            let income = Poly::var(*income);
            let (left, right) = (scaled(&equation.left, &income), scaled(&equation.right, &income));
            Equation { label: equation.label, left, right }
        }
        _ => equation.clone(),
    }
}

/// Where one good takes what is left of income, adding-up is assumed, not tested, and the finding says so.
pub(super) fn examine(model: &Model, system: &System, prover: &mut Prover<'_>) -> Finding {
    let Some(good) = model.rest.and_then(|rest| model.goods.get(rest)) else {
        return settle(model, system, prover, &FAMILY);
    };
    let subject = Condition::AddingUp.name();
    let words = format!("Walras' law is assumed, not tested: {} takes what is left of income", good.name);
    let assumption = prover.assumed(subject, &words);
    match prover.identities(subject, equations(system), &[assumption]) {
        Ok(proof) => {
            let mut finding = Finding::new(Condition::AddingUp, Verdict::Proven, &words);
            finding.steps = vec![assumption, proof.step()];
            finding
        }
        Err(_) => settle(model, system, prover, &FAMILY),
    }
}

//! Parameter values at which the closed form breaks down: the system is recovered anew for each.

use std::rc::Rc;

use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::model::Model;
use crate::proof::{Derivation, Prover};

use super::{Recovered, recover_nested};

/// The system at a special parameter value.
pub struct Case {
    /// The parameters that take special values, with the values (elements of the field of the general model).
    pub when: Vec<(Var, Element)>,
    /// The model with these values put in; what was recovered belongs to its field.
    pub model: Rc<Model>,
    /// The preferences at this value.
    pub recovered: Recovered,
    /// The steps that prove them.
    pub derivation: Derivation,
}

/// How deep cases of cases go.
const DEEPEST: u32 = 3;

/// A case for each condition that can be solved for a parameter and does not contradict the assumptions.
pub fn cases(model: &Model, conditions: &[Element], depth: u32) -> Vec<Case> {
    if depth >= DEEPEST {
        return Vec::new();
    }
    let mut cases = Vec::new();
    for condition in conditions {
        let Some((var, value)) = solved_for_parameter(model, condition) else { continue };
        let when = vec![(var, value)];
        let Ok(special) = model.respecialised(&when) else { continue };
        let special = Rc::new(special);
        let mut prover = Prover::new(&special.field);
        let recovered = recover_nested(&special, &mut prover, depth + 1);
        let derivation = prover.into_derivation();
        cases.push(Case { when, model: special.clone(), recovered, derivation });
    }
    cases
}

/// The last parameter in which the condition is linear with a coefficient that cannot vanish, and its value.
fn solved_for_parameter(model: &Model, condition: &Element) -> Option<(Var, Element)> {
    let field = &model.field;
    let free = model.parameters.iter().rev().filter(|p| p.eliminated.is_none()).map(|p| p.var);
    let mut candidates: Vec<(bool, Var, Element)> = Vec::new();
    for var in free {
        let parts = condition.coefficients(var);
        let (slope, rest) = match &parts[..] {
            [(1, slope)] => (slope, Poly::zero()),
            [(1, slope), (0, rest)] => (slope, rest.clone()),
            _ => continue,
        };
        if !field.sign(slope).excludes_zero() || field.depends_on(slope, var) || field.depends_on(&rest, var) {
            continue;
        }
        let value = field.reduce(&field.quotient(&rest.neg(), slope).ok()?);
        candidates.push((!value.is_constant(), var, value));
    }
    candidates.sort_by_key(|(symbolic, _, _)| *symbolic);
    candidates.into_iter().next().map(|(_, var, value)| (var, value))
}

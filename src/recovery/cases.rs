//! Parameter values at which the closed form breaks down: the system is recovered anew for each.

use std::rc::Rc;

use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::model::Model;
use crate::proof::{Derivation, Prover};

use super::{Recovered, recover_plain};

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

/// How many parameters may take special values at a time.
const DEEPEST: usize = 3;
/// How many cases are worked out.
const MOST_CASES: usize = 15;

/// The values that parameters take, in the order of their declaration.
type When = Vec<(Var, Element)>;

/// A case for each set of conditions that can fail together: those of the closed form, then those of its cases. What
/// contradicts the assumptions, and what cannot be solved for a parameter, gives no case.
pub fn cases(model: &Model, conditions: &[Element]) -> Vec<Case> {
    let mut cases: Vec<Case> = Vec::new();
    let mut seen: Vec<When> = Vec::new();
    extend(model, model, conditions, &Vec::new(), &mut seen, &mut cases);
    let mut next = 0;
    while let Some(case) = cases.get(next) {
        next += 1;
        let Recovered::Found(found) = &case.recovered else { continue };
        let (special, conditions, when) = (case.model.clone(), found.conditions.clone(), case.when.clone());
        if when.len() < DEEPEST {
            extend(model, &special, &conditions, &when, &mut seen, &mut cases);
        }
    }
    cases
}

/// Adds the cases in which one of the conditions of a special model fails.
fn extend(
    general: &Model,
    special: &Model,
    conditions: &[Element],
    when: &When,
    seen: &mut Vec<When>,
    cases: &mut Vec<Case>,
) {
    for condition in conditions {
        let Some((var, value)) = solved_for_parameter(special, condition) else { continue };
        let Some(all) = together(general, special, when, var, &value) else { continue };
        if seen.contains(&all) || cases.len() >= MOST_CASES {
            continue;
        }
        seen.push(all.clone());
        let Ok(model) = special.respecialised(&[(var, value)]) else { continue };
        let model = Rc::new(model);
        let mut prover = Prover::new(&model.field);
        let recovered = recover_plain(&model, &mut prover);
        let derivation = prover.into_derivation();
        cases.push(Case { when: all, model: model.clone(), recovered, derivation });
    }
}

/// The values so far under one more, as elements of the general model's field.
fn together(general: &Model, special: &Model, when: &When, var: Var, value: &Element) -> Option<When> {
    let field = &general.field;
    let find = |name: &str| general.parameters.iter().find(|p| p.name == name).map(|p| p.var);
    let own = find(&special.field.name(var)?)?;
    let value = field.import(&special.field, value, &|name| find(name).map(Poly::var)).ok()?;
    let mut all = vec![(own, value.clone())];
    for (var, old) in when {
        all.push((*var, field.reduce(&field.substitute(old, &[(own, value.clone())]).ok()?)));
    }
    all.sort_by_key(|(var, _)| *var);
    Some(all)
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

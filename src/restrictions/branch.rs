//! A branch: parameter values for which the conditions hold, and what the system becomes under them.

use std::rc::Rc;

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::conditions::special::{contradicts_a_fact, transfer};
use crate::conditions::{self, Condition, Finding, Verdict};
use crate::model::{DomainCondition, Model};
use crate::proof::{Derivation, Prover, Value, exact_value};
use crate::recovery::{self, Recovered};

use super::conditional::rescue;
use super::family;
use super::node::Node;
use super::search::Tested;
use super::terms::put_in;

/// How many points are looked at for one that satisfies the side conditions.
const MOST_POINTS: usize = 96;

/// Parameter values for which the conditions hold: where all equations hold and no side condition vanishes.
pub struct Branch {
    /// Parameters with their values, in declared order; elements of the general model's field.
    pub equations: Vec<(Var, Element)>,
    /// Elements of the general model's field that do not vanish.
    pub side_conditions: Vec<Element>,
    /// Elements of the field of `model` that are not negative; only where curvature is asked for.
    pub inequalities: Vec<Element>,
    /// The parameters that stay free, in declared order. Their number is the dimension of the branch.
    pub free: Vec<Var>,
    /// The model with the values put in.
    pub model: Rc<Model>,
    /// What is found of the conditions there.
    pub findings: Vec<Finding>,
    /// The preferences there; `None` where symmetry is not proven.
    pub recovered: Option<Recovered>,
    /// The name of the family of the demands, where it is one that the field has named.
    pub family: Option<&'static str>,
    /// The steps that prove all this, over the field of `model`.
    pub derivation: Derivation,
}

impl Branch {
    /// The number of parameters that stay free.
    pub fn dimension(&self) -> usize {
        self.free.len()
    }

    /// The finding on a condition.
    pub fn finding(&self, condition: Condition) -> Option<&Finding> {
        self.findings.iter().find(|finding| finding.condition == condition)
    }
}

/// Whether the conditions hold for all values of a leaf, and whether there are any.
pub fn test(model: &Model, only: &[Condition], leaf: &Node) -> Tested {
    if contradicts_a_fact(&model.field, &leaf.solved) {
        return Tested::Empty;
    }
    let Some((special, sides)) = special(model, leaf) else { return Tested::Open };
    let mut prover = Prover::new(&special.field);
    let holds = |condition: &Condition| match conditions::differences(*condition, &special, &mut prover) {
        Some(differences) => differences.is_empty(),
        None => *condition == Condition::Curvature,
    };
    if !only.iter().all(holds) {
        return Tested::Open;
    }
    let nonzero = |e: &Element, point: &_| {
        let sign = exact_value(&special.field, e, point).as_ref().and_then(Value::sign);
        sign.is_some_and(|sign| sign != std::cmp::Ordering::Equal)
    };
    let admissible = special.points().take(MOST_POINTS).any(|point| sides.iter().all(|e| nonzero(e, &point)));
    if admissible { Tested::Holds } else { Tested::Open }
}

/// The model with the values put in, its side conditions part of its domain, and these in its field.
pub(super) fn special(model: &Model, leaf: &Node) -> Option<(Model, Vec<Element>)> {
    let mut special = model.respecialised(&values(model, leaf)).ok()?;
    let sides: Option<Vec<Element>> = leaf.sides.iter().map(|e| transfer(model, &special, e)).collect();
    let sides = sides?;
    for side in &sides {
        special.field.assume(side, Relation::NonZero);
        special.domain.push(DomainCondition::NonZero(side.clone()));
    }
    Some((special, sides))
}

/// The values of a leaf, with those that the assumed equations then give to the parameters that they eliminate: solving
/// these equations anew might need a divisor that is not known.
fn values(model: &Model, leaf: &Node) -> Vec<(Var, Element)> {
    let mut values = leaf.solved.clone();
    for parameter in &model.parameters {
        let Some(eliminated) = &parameter.eliminated else { continue };
        if let Ok(value) = put_in(&model.field, eliminated, &leaf.solved) {
            values.push((parameter.var, value));
        }
    }
    values
}

/// The branch that a confirmed leaf is, without findings yet. `None` where the model cannot be built.
pub fn branch(model: &Model, leaf: &Node) -> Option<Branch> {
    let special = Rc::new(special(model, leaf)?.0);
    let mut equations = leaf.solved.clone();
    let place = |v: Var| model.parameters.iter().position(|p| p.var == v);
    equations.sort_by_key(|(v, _)| place(*v));
    let open = model.parameters.iter().filter(|p| p.eliminated.is_none()).map(|p| p.var);
    let free = open.filter(|v| equations.iter().all(|(w, _)| w != v)).collect();
    let derivation = Prover::new(&special.field).into_derivation();
    Some(Branch {
        equations,
        side_conditions: leaf.sides.clone(),
        inequalities: Vec::new(),
        free,
        model: special,
        findings: Vec::new(),
        recovered: None,
        family: None,
        derivation,
    })
}

/// Examines the system that the branch leaves: all conditions, and the preferences where symmetry is proven.
/// Each part of the work may take `work`.
pub fn examine(branch: &mut Branch, work: u64) {
    let model = branch.model.clone();
    let mut prover = Prover::new(&model.field);
    let mut findings = Vec::new();
    for condition in Condition::ALL.into_iter().filter(|c| conditions::applies(*c, &model)) {
        let found = budget::attempt(work, || conditions::examine(condition, &model, &mut prover, &findings));
        let mut found = found.unwrap_or_else(|stopped| Finding::undecided(condition, stopped.describe()));
        // without the restrictions the finding still stands
        let _ = budget::attempt(work, || rescue(&model, &mut found));
        findings.push(found);
    }
    branch.findings = findings;
    if branch.finding(Condition::Symmetry).is_some_and(|f| f.verdict == Verdict::Proven) {
        let found = budget::attempt(work, || recovery::recover(&model, &mut prover));
        branch.recovered =
            Some(found.unwrap_or_else(|stopped| Recovered::NotFound {
                reason: stopped.describe().to_string(),
                existence: true,
            }));
    }
    let proven = |c: Condition| {
        !conditions::applies(c, &model) || branch.finding(c).is_some_and(|f| f.verdict == Verdict::Proven)
    };
    if proven(Condition::Symmetry) {
        let integrable = proven(Condition::Homogeneity) && proven(Condition::AddingUp);
        branch.family = budget::attempt(work, || family::name(&model, integrable)).unwrap_or_default();
    }
    branch.derivation = prover.into_derivation();
}

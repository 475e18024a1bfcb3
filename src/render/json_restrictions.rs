//! Parameter restrictions as JSON.

use serde_json::{Map, Value as Json, json};

use crate::algebra::budget;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::conditions::{Condition, Finding};
use crate::model::Model;
use crate::restrictions::{Branch, Restrictions};

use super::json::{SCHEMA, finding, formula, recovered, witness};

/// The branches for one model.
pub fn restrictions(found: &Restrictions) -> Json {
    let model = &found.model;
    let failures: Map<String, Json> = found
        .failures
        .iter()
        .map(|(condition, failure)| (key(*condition).to_string(), witness(model, *condition, failure)))
        .collect();
    json!({
        "schema": SCHEMA,
        "title": model.title,
        "only": found.only.iter().map(|condition| key(*condition)).collect::<Vec<_>>(),
        "keep": found.kept.iter().map(|v| model.field.name(*v)).collect::<Vec<_>>(),
        "branches_complete": found.complete,
        "reason": found.reason,
        "failures": failures,
        "branches": found.branches.iter().map(|each| branch(found, each)).collect::<Vec<_>>(),
    })
}

fn key(condition: Condition) -> &'static str {
    match condition {
        Condition::Homogeneity => "homogeneity",
        Condition::AddingUp => "adding_up",
        Condition::Symmetry => "symmetry",
        Condition::Curvature => "curvature",
    }
}

/// The most terms that the inequalities of a region may have to be written out.
const LONGEST_REGION: usize = 60;

/// The finding, without a region that would fill pages.
fn shortened(model: &Model, found: &Finding) -> Json {
    let length = |region: &Vec<Element>| region.iter().map(|e| model.field.reduce(e).len()).sum::<usize>();
    let long = budget::attempt(LENGTH_WORK, || found.region.as_ref().is_some_and(|r| length(r) > LONGEST_REGION));
    if long == Ok(false) {
        return finding(model, found);
    }
    finding(model, &Finding { region: None, ..found.clone() })
}

/// The work that measuring a region may take.
const LENGTH_WORK: u64 = 2_000_000;

fn branch(found: &Restrictions, branch: &Branch) -> Json {
    let field = &found.model.field;
    let name = |v: &Var| field.name(*v).unwrap_or_default();
    let equation = |(v, value): &(Var, Element)| format!("{} = {}", name(v), formula(field, value));
    let condition =
        |condition: Condition| branch.finding(condition).map_or(Json::Null, |f| shortened(&branch.model, f));
    let nonzero = branch.side_conditions.iter().map(|e| format!("{} != 0", formula(field, e)));
    let nonnegative = branch.inequalities.iter().map(|e| format!("{} >= 0", formula(&branch.model.field, e)));
    json!({
        "equations": branch.equations.iter().map(equation).collect::<Vec<_>>(),
        "side_conditions": nonzero.chain(nonnegative).collect::<Vec<_>>(),
        "free": branch.free.iter().map(name).collect::<Vec<_>>(),
        "dimension": branch.dimension(),
        "conditions": {
            "homogeneity": condition(Condition::Homogeneity),
            "adding_up": condition(Condition::AddingUp),
            "symmetry": condition(Condition::Symmetry),
            "curvature": condition(Condition::Curvature),
        },
        "recovered": branch.recovered.as_ref().map_or(Json::Null, |r| recovered(&branch.model, r)),
        "family": branch.family,
    })
}
